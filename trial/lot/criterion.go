package lot

import (
	"math"
	"slices"

	"ratehouse/trial"
)

// Criterion is what a lot says about one criterion, in its own unit.
type Criterion struct {
	Symbol    string
	Moments           // of the movements that have it: N of Of
	Of        int     // movements of the lot
	Quantiles Quintet // of those measured
	Limited   bool    // the category sets limits
	Outside   int     // decided outside, exactly
	Share     float64 // Outside / N; 0 for none measured
	Range     Interval
	// Cpk is there for means, differences and per_degree; the others have Upper where a lot is large
	// enough, and else Share alone.
	Cpk     *Capability
	Upper   *float64
	Columns []Column // the histogram, its columns ending on limits
}

// Quintet are the 5, 25, 50, 75 and 95 % quantiles.
type Quintet [5]float64

// CriteriaOf computes the statistics of each criterion over the results of one judge, with intervals
// at a level of confidence: of the share outside by Clopper and Pearson. Movements whose criterion is
// not decided are left out of it and of its N, so that after early removals the later criteria speak
// of the survivors only: say "measured on N of Of". Irrational values enter cut to float64.
func CriteriaOf(j *trial.Judge, results []trial.Result, confidence float64) []Criterion {
	out := make([]Criterion, len(j.Programme().Criteria))
	for i := range out {
		out[i] = criterionOf(j, i, results, confidence)
	}
	return out
}

func criterionOf(j *trial.Judge, i int, results []trial.Result, confidence float64) Criterion {
	crit, l := j.Programme().Criteria[i], j.Limit(i)
	c := Criterion{Symbol: crit.Symbol, Of: len(results), Limited: l.Any()}
	var x []float64
	var samples []Sample
	for k := range results {
		if v := &results[k].Values[i]; v.Known {
			s := Sample{v.Float(), v.Outcome == trial.Outside}
			x, samples = append(x, s.X), append(samples, s)
			if s.Outside {
				c.Outside++
			}
		}
	}
	c.Moments, c.Range = MomentsOf(x), ClopperPearson(c.Outside, len(x), confidence)
	if len(x) == 0 {
		return c
	}
	c.Share = float64(c.Outside) / float64(len(x))
	slices.Sort(x)
	for k, p := range []float64{0.05, 0.25, 0.5, 0.75, 0.95} {
		c.Quantiles[k] = Quantile(x, p)
	}
	c.Columns = Histogram(samples, boundsOf(crit.Formula.Kind, l))
	c.index(crit.Formula.Kind, x, l, confidence)
	return c
}

// index fills in the index that fits the kind of figure.
func (c *Criterion) index(kind trial.Kind, sorted []float64, l trial.Limit, confidence float64) {
	lo, hi := ends(l)
	switch kind {
	case trial.Mean, trial.Difference, trial.PerDegree:
		if cap, ok := CapabilityOf(c.Mean, c.SD, c.N, lo, hi, confidence); ok {
			c.Cpk = &cap
		}
	case trial.WeightedSum: // signed, and of folded terms: neither index says what it seems to
	default:
		if u, ok := UpperIndex(sorted, hi); ok && l.HasMax {
			c.Upper = &u
		}
	}
}

// boundsOf are the limits, and the zero of a magnitude.
func boundsOf(kind trial.Kind, l trial.Limit) Bounds {
	b := Bounds{HasMin: l.HasMin, HasMax: l.HasMax, Min: l.Min.Float(), Max: l.Max.Float()}
	switch kind {
	case trial.Mean, trial.Difference, trial.PerDegree, trial.WeightedSum:
	default:
		b.HasMin = true
	}
	return b
}

// ends are the limits as floats; a side without limit is ±Inf.
func ends(l trial.Limit) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	if l.HasMin {
		lo = l.Min.Float()
	}
	if l.HasMax {
		hi = l.Max.Float()
	}
	return lo, hi
}
