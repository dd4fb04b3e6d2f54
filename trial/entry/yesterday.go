package entry

import (
	"math"

	"ratehouse/trial"
)

// lateTail is the share of right states that are named a round later. Common practice, no source.
const lateTail = 0.0035

// Late is a state of the round before that looks wrong once the next one is there (practice.md E7):
// its error went into two rates with opposite sign, as no movement runs. It is a remark, never a
// correction: a picture or a late check decides.
type Late struct {
	Day  int   // the state that closed this day
	Off  int64 // thousandths of a second that it reads too high
	Band int64 // what right states stay within
}

// Yesterday tests the state between day and the day after by both their rates; seconds are the two
// intervals. nil: nothing to say, or one of the rates is not there. Where the hands were set at that
// reading its error is in one rate alone, and this is not to be asked.
//
// Both rates are forecast from the days before; the error is the least squares estimate along
// (+1, -1) under their joint covariance.
func (f *Forecast) Yesterday(rates []trial.Rate, day int, seconds [2]int64) *Late {
	off, scale, own, ok := f.secondDifference(rates, day, seconds)
	if !ok {
		return nil
	}
	band := own.late * scale
	if math.Abs(off) <= band {
		return nil
	}
	return &Late{Day: day, Off: int64(math.Round(off * thousand)), Band: int64(math.Round(band * thousand))}
}

// secondDifference estimates the error of the state after a day, s, with its scale.
func (f *Forecast) secondDifference(rates []trial.Rate, day int, seconds [2]int64) (off, scale float64, own *tail, ok bool) {
	if day < 1 || day >= min(len(rates), len(f.days)) || !rates[day-1].Known() || !rates[day].Known() || seconds[0] <= 0 || seconds[1] <= 0 {
		return 0, 0, nil, false
	}
	k := without(rates[:day-1])
	c := f.conditional(k.days)
	r := [2]float64{float64(rates[day-1].Milli())/thousand - c.Mean(day, k.x), float64(rates[day].Milli())/thousand - c.Mean(day+1, k.x)}
	g := [2]float64{perDay / float64(seconds[0]), -perDay / float64(seconds[1])}
	a, b, d := c.Cov(day, day), c.Cov(day, day+1), c.Cov(day+1, day+1)
	det := a*d - b*b
	// weight = g' C⁻¹, C the 2 by 2 covariance
	w := [2]float64{(d*g[0] - b*g[1]) / det, (a*g[1] - b*g[0]) / det}
	precision := w[0]*g[0] + w[1]*g[1]
	factor, own := f.widen(k, c, 1)
	return (w[0]*r[0] + w[1]*r[1]) / precision, math.Sqrt(factor / precision), own, true
}
