package lot

import "math"

// Sampled is one lot on a p chart: X of N have what is charted.
type Sampled struct{ X, N int }

// PChart charts the share of lots that differ in size.
type PChart struct {
	Mean float64 // of all together
	// Spread is how many times as far as binomial chance the lots lie apart, at least 1; it is 1 on a
	// plain chart.
	Spread  float64
	Limits  []Interval // by lot, within 0 and 1
	Signals []int      // indices of lots beyond their limits
}

// PlainPChart has limits p̄ ± 3 √(p̄(1-p̄)/n), as if nothing but chance told lots apart. Lots of
// movements do differ, so that it will alarm where nothing is wrong; PChartBetweenLots does not. Lots
// without members are skipped (no limits, no signal); ok is false without any member. Source:
// NIST/SEMATECH e-Handbook 6.3.3.2.
func PlainPChart(lots []Sampled) (c PChart, ok bool) { return pChart(lots, false) }

// PChartBetweenLots widens the limits by how far the lots really lie apart: z = (p - p̄)/√(p̄(1-p̄)/n)
// of each lot in the order of time, and their mean moving range over 1.128 as Spread (Laney's p′
// chart, 2002, from memory). Less than chance is taken as chance. ok is false for fewer than two lots
// with members, or if all or none have what is charted.
func PChartBetweenLots(lots []Sampled) (c PChart, ok bool) { return pChart(lots, true) }

func pChart(lots []Sampled, widen bool) (c PChart, ok bool) {
	x, n := 0, 0
	for _, l := range lots {
		x, n = x+l.X, n+l.N
	}
	if n == 0 {
		return c, false
	}
	c.Mean, c.Spread = float64(x)/float64(n), 1
	if widen {
		z := scores(lots, c.Mean)
		if len(z) < 2 || x == 0 || x == n {
			return c, false
		}
		c.Spread = math.Max(1, meanRange(z)/rangeToSD)
	}
	for i, l := range lots {
		limit, p := Interval{0, 1}, c.Mean
		if l.N > 0 {
			half := 3 * c.Spread * binomialSD(c.Mean, l.N)
			limit, p = Interval{math.Max(0, c.Mean-half), math.Min(1, c.Mean+half)}, float64(l.X)/float64(l.N)
		}
		c.Limits = append(c.Limits, limit)
		if p < limit.Lo || p > limit.Hi {
			c.Signals = append(c.Signals, i)
		}
	}
	return c, true
}

func binomialSD(p float64, n int) float64 { return math.Sqrt(p * (1 - p) / float64(n)) }

// scores are the deviations of lots with members in units of chance.
func scores(lots []Sampled, mean float64) (z []float64) {
	for _, l := range lots {
		if l.N > 0 {
			z = append(z, (float64(l.X)/float64(l.N)-mean)/binomialSD(mean, l.N))
		}
	}
	return z
}
