// Package balance holds oscillator physics, the vertical pattern of a movement, the note for the
// adjuster's bench and the aim point of a lot. Rates are in s/d, gaining above zero; angles in degrees
// where a name says so, else in radians. What it says of causes is an opinion, never a verdict.
package balance
