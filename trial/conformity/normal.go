package conformity

import "math"

// phi is the standard normal distribution function.
func phi(x float64) float64 { return 0.5 * math.Erfc(-x/math.Sqrt2) }

// quickPhi is the standard normal distribution function for the points of an integration rule: a table
// with cubic interpolation between points 1/64 apart, off by less than 1e-9 (TestQuickPhi).
func quickPhi(x float64) float64 {
	const most = 8.5
	switch {
	case x <= -most:
		return 0
	case x >= most:
		return 1
	}
	at := (x + most) * 64
	i := int(at)
	return hermite(&phiTable[i], &phiTable[i+1], at-float64(i))
}

// phiTable holds phi and its slope a step.
var phiTable = func() (table [17*64 + 2][2]float64) {
	for i := range table {
		x := float64(i)/64 - 8.5
		table[i] = [2]float64{phi(x), density(x) / 64}
	}
	return table
}()

// quantile is the inverse of phi.
func quantile(p float64) float64 { return -math.Sqrt2 * math.Erfcinv(2*p) }

// quickQuantile is quantile for the points of an integration rule: outside the tails a table with cubic
// interpolation between probabilities 1/2048 apart, off by less than 1e-7 (TestQuickQuantile).
func quickQuantile(p float64) float64 {
	at := p * 2048
	i := int(at)
	if i < 32 || i >= 2048-32 {
		return quantile(p)
	}
	return hermite(&quantileTable[i], &quantileTable[i+1], at-float64(i))
}

// quantileTable holds quantile and its slope a step.
var quantileTable = func() (table [2048][2]float64) {
	for i := 1; i < len(table); i++ {
		z := quantile(float64(i) / 2048)
		table[i] = [2]float64{z, 1 / density(z) / 2048}
	}
	return table
}()

// hermite is the cubic between two points with their slopes, t from 0 to 1.
func hermite(a, b *[2]float64, t float64) float64 {
	d := b[0] - a[0]
	return a[0] + t*(a[1]+t*(3*d-2*a[1]-b[1]+t*(a[1]+b[1]-2*d)))
}

// density is the standard normal density.
func density(x float64) float64 { return math.Exp(-x*x/2) / math.Sqrt(2*math.Pi) }

// between is the probability that a standard normal variable lies in [a, b], accurate in either
// tail; 0 if the interval is empty.
func between(a, b float64) float64 {
	switch {
	case !(a < b):
		return 0
	case a > 0:
		return phi(-a) - phi(-b)
	}
	return phi(b) - phi(a)
}

// Probability is that of a true value within [lo, hi] given a measured value y with standard
// uncertainty u, normal and with a flat prior: Φ((hi-y)/u) - Φ((lo-y)/u). A side without limit is
// ±Inf. With u = 0 it is 1 inside, limits included, and 0 outside. Source: JCGM 106:2012 clause 7
// (from memory).
func Probability(y, u, lo, hi float64) float64 {
	if u > 0 {
		return between((lo-y)/u, (hi-y)/u)
	}
	if y >= lo && y <= hi {
		return 1
	}
	return 0
}
