package conformity

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/integrate/quad"
)

// WorstRisk is the greatest probability that an accepted item does not conform, with a guard band of
// w expanded uncertainties (U = 2u) and a normal error: that of a value measured exactly at its
// acceptance limit, Φ(-2w). Source: ILAC-G8:09/2019 Table 1 (its rows from memory).
func WorstRisk(w float64) float64 { return phi(-2 * w) }

// AcceptanceLimitFor is the distance from a limit, in standard uncertainties, at which a one-sided
// probability of conformity is p (JCGM 106:2012 8.3, from memory).
func AcceptanceLimitFor(p float64) float64 { return quantile(p) }

// Production is what is known of a figure before measuring: normal about Mean with standard
// deviation SD over the items of a production, by calibre for instance.
type Production struct{ Mean, SD float64 }

// Probability is that of one item's true value within [lo, hi] after measuring y with standard
// uncertainty u, knowing the production it comes from: normal about the mean of both, weighted by
// the inverse of their variances. With a production much wider than u it is Probability. Needs u and
// SD above 0. Source: JCGM 106:2012 6.3 and 7.2 (from memory).
func (p Production) Probability(y, u, lo, hi float64) float64 {
	known, seen := 1/(p.SD*p.SD), 1/(u*u)
	return Probability((known*p.Mean+seen*y)/(known+seen), 1/math.Sqrt(known+seen), lo, hi)
}

// Risks are those of a whole production under a rule of acceptance.
type Risks struct {
	Consumer      float64 // an item does not conform and is accepted
	Producer      float64 // an item conforms and is rejected
	Nonconforming float64 // an item does not conform
}

// GlobalRisks integrates both over the production: R_C = ∫ outside T of g(η) P(accept|η) dη and R_P
// = ∫ inside T of g(η) (1 - P(accept|η)) dη, with u the standard uncertainty of measuring, limits lo
// and hi (±Inf where there is none) and a guard band w. Source: JCGM 106:2012 9.5 (from memory).
// Needs SD > 0; u may be 0.
func GlobalRisks(p Production, u, lo, hi, w float64) Risks {
	var r Risks
	accept := func(eta float64) float64 { return Probability(eta, u, lo+w, hi-w) }
	weight := func(eta float64) float64 { return density((eta-p.Mean)/p.SD) / p.SD }
	const reach = 10 // standard deviations: beyond lies 10^-23
	ends := cuts(p, u, reach, lo, hi, lo+w, hi-w)
	for i := 1; i < len(ends); i++ {
		from, to := ends[i-1], ends[i]
		if mid := (from + to) / 2; mid < lo || mid > hi {
			r.Consumer += integral(from, to, func(x float64) float64 { return weight(x) * accept(x) })
		} else {
			r.Producer += integral(from, to, func(x float64) float64 { return weight(x) * (1 - accept(x)) })
		}
	}
	r.Nonconforming = 1 - Probability(p.Mean, p.SD, lo, hi)
	return r
}

// integral is by Gauss and Legendre; the ends are chosen so that the integrand is smooth between.
func integral(from, to float64, f func(float64) float64) float64 {
	return quad.Fixed(f, from, to, 40, quad.Legendre{}, 0)
}

// cuts are the ends of the stretches to integrate over: the production's reach, the limits, and about
// each acceptance limit the few u in which acceptance turns.
func cuts(p Production, u, reach float64, marks ...float64) []float64 {
	ends := []float64{p.Mean - reach*p.SD, p.Mean - 3*p.SD, p.Mean, p.Mean + 3*p.SD, p.Mean + reach*p.SD}
	from, to := ends[0], ends[4]
	for _, m := range marks {
		for _, k := range []float64{-9, -3, 0, 3, 9} {
			if x := m + k*u; x > from && x < to { // no infinite limit passes
				ends = append(ends, x)
			}
		}
	}
	slices.Sort(ends)
	return ends
}
