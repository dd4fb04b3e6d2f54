// Package conformity says how sure a judgement is: the covariance of rates from an uncertainty
// budget, the probability that true values lie within their limits, rules of acceptance and their
// risks, and on which single reading a verdict hangs. Floats here never decide a verdict.
package conformity
