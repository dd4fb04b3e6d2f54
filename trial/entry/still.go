package entry

import "math"

// Still says that a holder's movements ran on as on the day before, though they should have been
// turned, cooled or heated (practice.md B3): the scatter that the others gain is missing.
type Still struct {
	Code StillCode
	Odds float64 // likelihood of these values if nothing was changed, against if it was
	N    int     // values it rests on
}

// StillCode names what was not done.
type StillCode string

// The codes.
const (
	NotTurned StillCode = "not_turned"
	NotCooled StillCode = "not_cooled"
	NotHeated StillCode = "not_heated"
	NotMoved  StillCode = "not_moved" // position and temperature
)

// falseOnce: of holders treated rightly, at most one in so many is named. The likelihood ratio of two
// hypotheses exceeds c with probability at most 1/c where the second is true (Markov's inequality), as
// far as the model is.
const falseOnce = 1000

// Still tests the places of one holder, read on the day after a change; list are their expectations.
// nil: nothing to say.
func (f *Forecast) Still(r Round, places []Place, list []Expectation) *Still {
	code := f.change(r.Day)
	between, ok := f.between(r.Day)
	if code == "" || !ok {
		return nil
	}
	log, n := 0.0, 0
	for i := range places {
		e, p := &list[i], &places[i]
		if !e.Known || p.Value == nil || len(p.Rates) < r.Day-1 || !p.Rates[r.Day-2].Known() {
			continue
		}
		k := without(p.Rates[:r.Day-1])
		factor, own := f.widen(k, f.conditional(k.days), 1)
		same := own.t
		same.Mu, same.Sigma = float64(p.Rates[r.Day-2].Milli())/thousand, math.Sqrt(between*factor)
		unit := p.interval(r.Kind)
		rate := float64(*p.Value) / unit
		if r.Kind != OfRate {
			rate = float64(*p.Value-int64(*p.State)) / unit
		}
		log += same.LogProb(rate) + math.Log(thousand/unit) - e.logTenth(*p.Value) + math.Log(float64(tenth)/thousand)
		n++
	}
	if log <= math.Log(falseOnce) {
		return nil
	}
	return &Still{Code: code, Odds: math.Exp(log), N: n}
}

// logTenth is the logarithm of the probability of the tenth that a right value lies in.
func (e *Expectation) logTenth(v int64) float64 {
	if e.Kind == OfHand {
		v = nearest(v, e.Centre, Minute60)
	}
	return math.Log(float64(e.weight(v)) / float64(e.One))
}

// change says what changes on a day against the one before; empty: nothing.
func (f *Forecast) change(day int) StillCode {
	if day < 2 || day > len(f.days) {
		return ""
	}
	a, b := f.days[day-2], f.days[day-1]
	switch {
	case a.Position != b.Position && a.TemperatureC != b.TemperatureC:
		return NotMoved
	case a.Position != b.Position:
		return NotTurned
	case b.TemperatureC > a.TemperatureC:
		return NotHeated
	case b.TemperatureC < a.TemperatureC:
		return NotCooled
	}
	return ""
}
