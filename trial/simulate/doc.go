// Package simulate makes physically plausible movements for demo, tests and benchmarks.
package simulate
