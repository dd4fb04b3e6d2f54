package lot

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Repeatability is the standard deviation of readings of the same thing.
type Repeatability struct {
	Groups int // things read more than once
	Free   int // degrees of freedom: readings less groups
	SD     float64
	Range  Interval // of SD, by chi-square
}

// RepeatabilityOf pools replicates: each group holds the readings of one state of one movement, in s,
// such as a reading and the second one taken blind. s² = Σ(x - mean of its group)² / Σ(n-1). Between
// two readers it holds what tells their eyes apart as well. Groups of one are left out; ok is false
// without any other. Source: ISO 5725-2, from memory.
func RepeatabilityOf(groups [][]float64, confidence float64) (r Repeatability, ok bool) {
	var squares sum
	for _, g := range groups {
		if len(g) < 2 {
			continue
		}
		r.Groups++
		r.Free += len(g) - 1
		mean := meanOf(g)
		for _, x := range g {
			d := mean.less(x)
			squares.addProduct(d, d)
		}
	}
	if r.Free == 0 {
		return r, false
	}
	r.SD = math.Sqrt(squares.value() / float64(r.Free))
	free, tail := float64(r.Free), (1-confidence)/2
	chi := distuv.ChiSquared{K: free}
	r.Range = Interval{r.SD * math.Sqrt(free/chi.Quantile(1-tail)), r.SD * math.Sqrt(free/chi.Quantile(tail))}
	return r, true
}
