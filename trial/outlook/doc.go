// Package outlook forecasts open movements: the probability that a movement will pass, from the days
// read of it and the history of its calibre. An estimate, never a verdict; what is certain is decided
// by the judge.
//
// Rates of a calibre's movements have the mean and covariance of its history, so that the days read
// lead to a conditional mean and covariance of the blank ones. How far a movement departs from what is
// expected has three scales of its own, each a Student-t's: for what each day brings, for new
// positions, for new temperatures; the days read tell of each. The blank days are drawn on a fixed set
// of points, criteria are computed in floats, and the share inside is the probability.
package outlook
