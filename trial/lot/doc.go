// Package lot holds the statistics of batches, rounds and readings: floats, for charts, questions and
// evidence; no verdict hangs on any of it. What is missing is left out and counted: every figure has
// its n.
package lot
