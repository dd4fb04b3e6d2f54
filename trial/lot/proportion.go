package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Interval is a two-sided confidence interval, in the unit of what it is about.
type Interval struct{ Lo, Hi float64 }

// Wilson is the score interval of a proportion, x of n, at a level of confidence such as 0.95:
// (p + z²/2n ± z √(p(1-p)/n + z²/4n²)) / (1 + z²/n). It is exactly 0 at x = 0 and exactly 1 at x = n;
// for n = 0 nothing is known, 0 to 1. Source: NIST/SEMATECH e-Handbook 7.2.4.1.
func Wilson(x, n int, confidence float64) Interval {
	if n == 0 {
		return Interval{0, 1}
	}
	z := distuv.UnitNormal.Quantile((1 + confidence) / 2)
	m, p := float64(n), float64(x)/float64(n)
	middle, half := p+z*z/(2*m), z*math.Sqrt(p*(1-p)/m+z*z/(4*m*m))
	out := Interval{(middle - half) / (1 + z*z/m), (middle + half) / (1 + z*z/m)}
	if x == 0 {
		out.Lo = 0
	}
	if x == n {
		out.Hi = 1
	}
	return out
}

// ClopperPearson is the exact interval of a proportion, x of n: with no p outside it would x or more,
// or x or fewer, be as rare as (1 - confidence)/2. Its ends are quantiles of Beta(x, n-x+1) and
// Beta(x+1, n-x), exactly 0 at x = 0 and exactly 1 at x = n; for n = 0 it is 0 to 1. It never covers
// less than promised, so it is the one for a share that has to be defended. Source: Clopper and
// Pearson 1934, from memory.
func ClopperPearson(x, n int, confidence float64) Interval {
	tail := (1 - confidence) / 2
	out := Interval{0, 1}
	if x > 0 {
		out.Lo = betaQuantile(tail, float64(x), float64(n-x+1))
	}
	if x < n {
		out.Hi = 1 - betaQuantile(tail, float64(n-x), float64(x+1))
	}
	return out
}

// betaQuantile inverts the incomplete beta function by halving: the library's own inverse stops at
// fewer digits.
func betaQuantile(p, a, b float64) float64 {
	d := distuv.Beta{Alpha: a, Beta: b}
	lo, hi := 0.0, 1.0
	for range 60 {
		if mid := (lo + hi) / 2; d.CDF(mid) < p {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}
