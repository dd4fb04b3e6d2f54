// Package balance holds oscillator physics, the vertical pattern and bench notes.
package balance
