package entry

import (
	"math"
	"slices"

	"ratehouse/trial"
)

// Kind is what is typed: a state, a rate, or where the seconds hand stands.
type Kind uint8

// The kinds.
const (
	OfState Kind = iota
	OfRate
	OfHand
)

// Round says what a reading round is about to read.
type Round struct {
	Day  int // programme day it closes; 0: none, then nothing is expected
	Kind Kind
}

// Place is a place of a holder before and during a round, in reading order.
type Place struct {
	Empty    bool         // a hole, or a movement that has left the trial
	Rates    []trial.Rate // by programme day, day d at [d-1]; later days do not count
	State    *trial.State // of the reading before, unwrapped, as left; nil: not read
	Seconds  int64        // since that reading
	Previous *int64       // what was typed at that reading, thousandths; nil: nothing
	Value    *int64       // what was typed at this one and stands, thousandths, unwrapped; nil: not yet
	Quick    trial.Rate   // of the quick check (W8), for want of rates; the zero Rate: none
}

// Expectation is what a value should be, for one place: whole numbers, small enough for a page.
// Values, Centre and Band are thousandths of s, of s/d for OfRate.
type Expectation struct {
	Known      bool // false: nothing can be said, and Check finds nothing
	Kind       Kind
	Centre     int64
	Band       int64      // a value farther from the centre than this is asked again
	Near       int64      // OfHand: turns are sure as far from the centre as this (E1)
	Shape      []int64    // how likely a right value is at 0, 1/4, 2/4, ... Band from the centre, the centre itself a million; shared
	One        int64      // on that scale: to be at one given tenth for sure
	Slips      []SlipRate // shared
	Neighbours []Neighbouring
	Previous   int64 // what was typed at the reading before
	Has        bool  // Previous is there
}

// Neighbouring is what the value of a place beside this one should be.
type Neighbouring struct{ By, Centre, Band int64 }

const (
	shapeTop    = 1_000_000
	shapeParts  = 4  // of a band, an entry of Shape each
	shapeBands  = 4  // beyond so many bands a value is as likely as there
	nearRate    = 20 // s/d: E1
	quickSpread = 8  // s/d: two readings to a tenth, half an hour apart, in another position than the day's
	thousand    = 1000.0
	perDay      = trial.SecondsPerDay
	tenth       = 100    // thousandths
	roundedBy   = 0.0289 // s: standard deviation of rounding to a tenth
	fewest      = 5      // values of a round from which what they have in common is learnt
	medianWaste = math.Pi / 2
)

// Expect says what the values of a round should be, one Expectation a place, from each movement's own
// past, from the history, and from what the values read so far have in common (their median, drawn
// towards nothing while they are few): a lot may differ from the calibre's others.
func (f *Forecast) Expect(r Round, places []Place) []Expectation {
	out := f.plain(r, places)
	shift := f.common(r, places, out)
	for i := range out {
		if out[i].Known {
			out[i].Centre += int64(math.Round(shift * places[i].interval(r.Kind)))
		}
	}
	for i := range out {
		out[i].Neighbours = neighbours(places, out, i)
	}
	return out
}

// plain expects each place by its own past and the history alone.
func (f *Forecast) plain(r Round, places []Place) []Expectation {
	out := make([]Expectation, len(places))
	if r.Day < 1 || r.Day > len(f.days) {
		return out
	}
	slips := slipRates(r.Kind, f.days[r.Day-1])
	for i := range places {
		out[i] = f.expectOne(r, &places[i], slips)
	}
	return out
}

// interval is by what a rate in s/d becomes thousandths of what is typed.
func (p *Place) interval(k Kind) float64 {
	if k == OfRate {
		return thousand
	}
	return thousand * float64(p.Seconds) / perDay
}

func (f *Forecast) expectOne(r Round, p *Place, slips []SlipRate) (e Expectation) {
	e.Kind = r.Kind
	if p.Empty || r.Kind != OfRate && (p.State == nil || p.Seconds <= 0) {
		return e
	}
	k := without(p.Rates[:min(len(p.Rates), r.Day-1)])
	centre, scale, own := f.rate(r.Day, k)
	// A movement far from all others shows itself in the quick check, good to some 8 s/d (E1).
	if quick := float64(p.Quick.Milli()) / thousand; len(k.x) == 0 && p.Quick.Known() && math.Abs(quick-centre) > nearRate {
		centre, scale = quick, max(scale, quickSpread)
	}
	// At least what a tenth is rounded by; at most what is a rate at all.
	scale = max(roundedBy, min(scale, RefuseBeyond.Exact().Float()/own.look))
	unit := p.interval(r.Kind)
	e.Centre = int64(math.Round(centre * unit))
	if r.Kind != OfRate {
		e.Centre += int64(*p.State)
	}
	e.Known, e.Slips, e.Shape = true, slips, own.shape
	e.Band, e.Near = max(tenth, int64(math.Round(own.look*scale*unit))), int64(math.Round(nearRate*unit))
	e.One = int64(math.Round(shapeTop * scale * unit / tenth / own.t.Prob(0)))
	if p.Previous != nil {
		e.Previous, e.Has = *p.Previous, true
	}
	return e
}

// common is what the values of a round read so far have in common beyond what was expected, s/d.
func (f *Forecast) common(r Round, places []Place, list []Expectation) float64 {
	off := f.residuals(r, places, list)
	if len(off) < fewest {
		return 0
	}
	middle, spread := medianAndSpread(off)
	lot := f.lotSpread(r.Day)
	return middle * lot * lot / (lot*lot + medianWaste*spread*spread/float64(len(off)))
}

// residuals are the values read less their expectation, s/d.
func (f *Forecast) residuals(r Round, places []Place, list []Expectation) (off []float64) {
	for i := range places {
		if v := places[i].Value; v != nil && list[i].Known {
			off = append(off, float64(*v-list[i].Centre)/places[i].interval(r.Kind))
		}
	}
	return off
}

// medianAndSpread sorts its argument; spread is the standard deviation of a normal distribution with
// this median distance from the median.
func medianAndSpread(x []float64) (middle, spread float64) {
	middle = median(x)
	away := make([]float64, len(x))
	for i := range x {
		away[i] = math.Abs(x[i] - middle)
	}
	return middle, 1.4826 * median(away)
}

func median(x []float64) float64 {
	slices.Sort(x)
	n := len(x)
	return (x[(n-1)/2] + x[n/2]) / 2
}

// Spread of lots of one calibre about its mean, s/d: on the first day; in a position not met yet; for
// each degree to a temperature not met yet, half of what single movements spread by (practice.md E15);
// under conditions met before. Common practice, no source.
const (
	lotFirst  = 2.0
	lotPlace  = 0.6
	lotDegree = 0.1
	lotSame   = 0.05
)

// lotSpread is by how much a whole lot may differ on a day from what its movements' past lets expect.
func (f *Forecast) lotSpread(day int) float64 {
	if day == 1 {
		return lotFirst
	}
	b, place, degrees := f.days[day-1], true, math.Inf(1)
	for _, a := range f.days[:day-1] {
		place = place && a.Position != b.Position
		degrees = min(degrees, math.Abs(b.TemperatureC.Exact().Float()-a.TemperatureC.Exact().Float()))
	}
	s := math.Hypot(lotSame, lotDegree*degrees)
	if place {
		s = math.Hypot(s, lotPlace)
	}
	return s
}

// neighbours finds the next places before and after that hold a movement.
func neighbours(places []Place, list []Expectation, i int) (out []Neighbouring) {
	for _, by := range []int{-1, 1} {
		j := i + by
		for j >= 0 && j < len(places) && places[j].Empty {
			j += by
		}
		if j >= 0 && j < len(list) && list[j].Known {
			out = append(out, Neighbouring{int64(by), list[j].Centre, list[j].Band})
		}
	}
	return out
}
