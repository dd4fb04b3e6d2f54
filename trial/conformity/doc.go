// Package conformity holds the uncertainty budget, the probability of conformity, decision
// rules and hinge readings.
package conformity
