// Package trial is the engine: programmes, rates, criteria and verdicts; pure values in, pure
// values out, no clock, no I/O.
package trial
