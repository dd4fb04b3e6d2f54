package conformity

import (
	"math"

	"ratehouse/trial"
)

// form is a linear figure of the rates.
type form struct {
	w     []float64 // weight of each day
	cov   []float64 // covariance of each day's rate with the figure
	sigma float64   // its standard uncertainty
}

// part is a criterion taken apart. Its region, floor to ceiling, is described by linear forms where
// one of these shapes fits:
//
//	bands  every form lies within [lo, hi]
//	folds  the sum of the magnitudes of the forms is at most hi
type part struct {
	measure        measure
	shape          shape
	forms          []form
	floor, ceiling float64 // the limits
	lo, hi         float64
	spread         float64 // folds: what bounds the standard uncertainty of the sum
}

// measure says what the criterion is of its forms.
type measure uint8

const (
	computed measure = iota // not of forms at all
	plain                   // the one form
	greatest                // the greatest magnitude
	total                   // the sum of magnitudes
)

type shape uint8

const (
	unlimited shape = iota
	bands
	folds
	other // nothing is known but how to compute it
)

// evaluate is the criterion itself.
func (p *part) evaluate(rates []float64) (v float64) {
	for k := range p.forms {
		y := dot(p.forms[k].w, rates)
		switch p.measure {
		case plain:
			return y
		case greatest:
			v = math.Max(v, math.Abs(y))
		case total:
			v += math.Abs(y)
		}
	}
	return v
}

// region is the set of rates that conform in one category, criterion by criterion.
type region struct {
	prog  *trial.Programme
	parts []part
}

// newRegion takes a judge's criteria apart.
func newRegion(j *trial.Judge) *region {
	r := &region{prog: j.Programme()}
	for i, c := range r.prog.Criteria {
		p := part{floor: math.Inf(-1), ceiling: math.Inf(1)}
		p.measure, p.forms = r.take(c.Formula)
		l := j.Limit(i)
		if l.HasMin {
			p.floor = l.Min.Float()
		}
		if l.HasMax {
			p.ceiling = l.Max.Float()
		}
		if l.Any() {
			p.bound()
		}
		r.parts = append(r.parts, p)
	}
	return r
}

// mostForms bounds the forms of one criterion; one that needs more is only computed.
const mostForms = 120

// bound finds the shape of the region. A magnitude is never below zero, so a lower limit above it
// leaves a region with a hole, which no band describes.
func (p *part) bound() {
	p.lo, p.hi = math.Inf(-1), p.ceiling
	switch {
	case p.measure == computed || len(p.forms) > mostForms || p.measure != plain && p.floor > 0:
		p.shape = other
	case p.measure == plain:
		p.shape, p.lo = bands, p.floor
	case p.measure == greatest:
		p.shape, p.lo = bands, -p.ceiling
	default:
		p.shape = folds
	}
}

// take writes a formula by linear forms.
func (r *region) take(f trial.Formula) (measure, []form) {
	if w := r.linear(f); w != nil {
		return plain, []form{{w: w}}
	}
	switch f.Kind {
	case trial.MeanVariation:
		scale := 1 / float64(len(f.Pairs))
		return total, r.pairs(f.Pairs, scale)
	case trial.GreatestVariation:
		return greatest, r.pairs(f.Pairs, 1)
	case trial.GreatestDeviation:
		var list []form
		for _, d := range f.Days {
			list = append(list, form{w: r.sub(r.mean([]int{d}), r.mean(f.Days))})
		}
		return greatest, list
	case trial.RangeOf:
		var days [][]int
		for _, d := range f.Days {
			days = append(days, []int{d})
		}
		return greatest, r.differences(days)
	case trial.PeriodRange:
		return greatest, r.differences(f.Periods)
	case trial.GreatestStep:
		var list []form
		for i := 1; i < len(f.Periods); i++ {
			list = append(list, form{w: r.sub(r.sum(f.Periods[i]), r.sum(f.Periods[i-1]))})
		}
		return greatest, list
	}
	return computed, nil
}

// linear gives the weights of a formula that is linear in the rates without a constant; nil if it
// is not.
func (r *region) linear(f trial.Formula) []float64 {
	switch f.Kind {
	case trial.Mean:
		return r.mean(f.Days)
	case trial.Difference:
		return r.sub(r.mean(f.Of), r.mean(f.From))
	case trial.PerDegree:
		w := r.sub(r.mean(f.Of), r.mean(f.From))
		by := r.celsius(f.Of) - r.celsius(f.From)
		for d := range w {
			w[d] /= by
		}
		return w
	case trial.WeightedSum:
		return r.weighted(f)
	}
	return nil
}

func (r *region) weighted(f trial.Formula) []float64 {
	if f.Constant.Sign() != 0 {
		return nil
	}
	sum := make([]float64, len(r.prog.Days))
	for _, t := range f.Terms {
		c, ok := r.prog.Criterion(t.Symbol)
		if !ok || t.Absolute {
			return nil
		}
		w := r.linear(c.Formula)
		if w == nil {
			return nil
		}
		for d := range sum {
			sum[d] += t.Weight.Float() * w[d]
		}
	}
	return sum
}

func (r *region) sum(days []int) []float64 {
	w := make([]float64, len(r.prog.Days))
	for _, d := range days {
		w[d-1]++
	}
	return w
}

func (r *region) mean(days []int) []float64 {
	w := r.sum(days)
	for d := range w {
		w[d] /= float64(len(days))
	}
	return w
}

func (r *region) sub(a, b []float64) []float64 {
	for d := range a {
		a[d] -= b[d]
	}
	return a
}

// celsius is the mean nominal temperature of days.
func (r *region) celsius(days []int) float64 {
	var sum float64
	for _, d := range days {
		sum += float64(r.prog.Days[d-1].TemperatureC) / 1000
	}
	return sum / float64(len(days))
}

func (r *region) pairs(pairs [][2]int, scale float64) []form {
	var list []form
	for _, p := range pairs {
		w := r.sub(r.sum(p[1:]), r.sum(p[:1]))
		for d := range w {
			w[d] *= scale
		}
		list = append(list, form{w: w})
	}
	return list
}

// differences are those of all pairs of sums.
func (r *region) differences(of [][]int) []form {
	var list []form
	for i := range of {
		for j := range i {
			list = append(list, form{w: r.sub(r.sum(of[i]), r.sum(of[j]))})
		}
	}
	return list
}
