package outlook

import (
	"math"

	"ratehouse/trial"
)

// figures computes criteria in floats, for drawn rates only: verdicts are the judge's. It holds
// working memory.
type figures struct {
	list   []figure
	values []float64 // of the criteria, as far as wanted
}

// figure is one criterion with its limits in the judge's category, infinite where there is none.
type figure struct {
	trial.Formula
	lo, hi  float64
	degrees float64 // per_degree: the difference of nominal temperatures
	terms   []term  // weighted_sum
	start   float64 // its constant
}

type term struct {
	weight float64
	of     int // criterion
	size   bool
}

// slip keeps drawn figures off their limits by more than sums of floats can be wrong, so that a drawn
// movement that passes here truly would.
const slip = 1e-9

func newFigures(j *trial.Judge) *figures {
	p := j.Programme()
	f := &figures{values: make([]float64, len(p.Criteria))}
	at := map[string]int{}
	for i, c := range p.Criteria {
		x := figure{Formula: c.Formula, lo: math.Inf(-1), hi: math.Inf(1), start: c.Formula.Constant.Float()}
		if l := j.Limit(i); l.Any() {
			x.limit(l)
		}
		if x.Kind == trial.PerDegree {
			x.degrees = celsius(p, x.Of) - celsius(p, x.From)
		}
		for _, t := range x.Terms {
			x.terms = append(x.terms, term{t.Weight.Float(), at[t.Symbol], t.Absolute})
		}
		at[c.Symbol] = i
		f.list = append(f.list, x)
	}
	return f
}

func (x *figure) limit(l trial.Limit) {
	if l.HasMin {
		x.lo = l.Min.Float() + slip
	}
	if l.HasMax {
		x.hi = l.Max.Float() - slip
	}
}

func celsius(p *trial.Programme, days []int) (mean float64) {
	for _, d := range days {
		mean += p.Days[d-1].TemperatureC.Exact().Float() / float64(len(days))
	}
	return mean
}

// wanted is a criterion to compute: because it is open, or because one that is open rests on it.
type wanted struct {
	of   int
	open bool
}

// needs lists the criteria that decide an open movement, in order, with those they rest on.
func (f *figures) needs(r *trial.Result) (list []wanted) {
	need := make([]bool, len(f.list))
	for i := len(f.list) - 1; i >= 0; i-- {
		need[i] = need[i] || r.Values[i].Outcome == trial.Undecided
		for _, t := range f.list[i].terms {
			need[t.of] = need[t.of] || need[i]
		}
	}
	for i := range need {
		if need[i] {
			list = append(list, wanted{i, r.Values[i].Outcome == trial.Undecided})
		}
	}
	return list
}

// inside tells whether the open ones of these criteria all lie within their limits.
func (f *figures) inside(rates []float64, list []wanted) bool {
	for _, w := range list {
		x := &f.list[w.of]
		v := f.value(x, rates)
		if w.open && (v < x.lo || v > x.hi) {
			return false
		}
		f.values[w.of] = v
	}
	return true
}

func (f *figures) value(x *figure, r []float64) (v float64) {
	switch x.Kind {
	case trial.Mean:
		return mean(r, x.Days)
	case trial.MeanVariation:
		for _, p := range x.Pairs {
			v += math.Abs(r[p[1]-1]-r[p[0]-1]) / float64(len(x.Pairs))
		}
	case trial.GreatestVariation:
		for _, p := range x.Pairs {
			v = max(v, math.Abs(r[p[1]-1]-r[p[0]-1]))
		}
	case trial.Difference:
		return mean(r, x.Of) - mean(r, x.From)
	case trial.PerDegree:
		return (mean(r, x.Of) - mean(r, x.From)) / x.degrees
	case trial.GreatestDeviation:
		m := mean(r, x.Days)
		for _, d := range x.Days {
			v = max(v, math.Abs(r[d-1]-m))
		}
	case trial.RangeOf:
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, d := range x.Days {
			lo, hi = min(lo, r[d-1]), max(hi, r[d-1])
		}
		return hi - lo
	case trial.StandardDeviation:
		return deviation(r, x.Days, x.Divisor)
	case trial.PeriodRange:
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, days := range x.Periods {
			s := sum(r, days)
			lo, hi = min(lo, s), max(hi, s)
		}
		return hi - lo
	case trial.GreatestStep:
		for i := 1; i < len(x.Periods); i++ {
			v = max(v, math.Abs(sum(r, x.Periods[i])-sum(r, x.Periods[i-1])))
		}
	default: // weighted_sum
		v = x.start
		for _, t := range x.terms {
			y := f.values[t.of]
			if t.size {
				y = math.Abs(y)
			}
			v += t.weight * y
		}
	}
	return v
}

func sum(r []float64, days []int) (s float64) {
	for _, d := range days {
		s += r[d-1]
	}
	return s
}

func mean(r []float64, days []int) float64 { return sum(r, days) / float64(len(days)) }

func deviation(r []float64, days []int, divisor string) float64 {
	m, s, n := mean(r, days), 0.0, float64(len(days))
	for _, d := range days {
		s += (r[d-1] - m) * (r[d-1] - m)
	}
	if divisor == "n-1" {
		n--
	}
	return math.Sqrt(s / n)
}
