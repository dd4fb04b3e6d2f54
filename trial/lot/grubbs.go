package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Sides says where an outlier may lie.
type Sides int

// Either side, or one that was chosen before looking. Published tables mix the two.
const (
	EitherSide Sides = iota
	High
	Low
)

// Outlier is the answer of Grubbs' test: which value lies farthest out, and whether too far.
type Outlier struct {
	At          int     // index of the value
	G, Critical float64 // its distance from the mean in standard deviations, and the bound
	Found       bool    // G > Critical
}

// Grubbs tests whether one value of a roughly normal sample is an outlier, at significance alpha:
// G = (value - mean)/s against (n-1)/√n · √(t²/(n-2+t²)) with t the Student quantile with n-2 degrees
// of freedom, exceeded with probability alpha/n on one side or alpha/2n for either. An outlier found
// is a question, never a reason to drop a reading. ok is false below three values or if all are equal.
// Source: NIST/SEMATECH e-Handbook 1.3.5.17.
func Grubbs(x []float64, sides Sides, alpha float64) (o Outlier, ok bool) {
	m := MomentsOf(x)
	if m.N < 3 || m.SD == 0 {
		return o, false
	}
	for i, v := range x {
		g := (v - m.Mean) / m.SD
		if sides == Low || sides == EitherSide && g < 0 {
			g = -g
		}
		if i == 0 || g > o.G {
			o.At, o.G = i, g
		}
	}
	o.Critical = GrubbsCritical(m.N, sides, alpha)
	o.Found = o.G > o.Critical
	return o, true
}

// GrubbsCritical is the bound of Grubbs' test for n values, n at least 3.
func GrubbsCritical(n int, sides Sides, alpha float64) float64 {
	m := float64(n)
	tail := alpha / m
	if sides == EitherSide {
		tail /= 2
	}
	t := studentQuantile(tail, m-2)
	return (m - 1) / math.Sqrt(m) * math.Sqrt(t*t/(m-2+t*t))
}

// studentQuantile is the value that Student's t falls short of with probability tail: the library's
// own inverse, corrected by Newton's steps on its distribution function.
func studentQuantile(tail, free float64) float64 {
	d := distuv.StudentsT{Sigma: 1, Nu: free}
	t := d.Quantile(tail)
	for range 3 {
		t -= (d.CDF(t) - tail) / d.Prob(t)
	}
	return t
}
