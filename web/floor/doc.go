// Package floor holds the technicians' pages: what is due today, registering a batch, the reading
// round. They show no verdict, no limit, no expected or earlier value and no depositor to who is
// reading (practice notes X1, E8).
package floor
