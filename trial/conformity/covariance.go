package conformity

import (
	"math"

	"ratehouse/trial"
)

// Covariance is that of the daily rates of one movement, (s/d)², day by day.
type Covariance struct {
	days  int
	cells []float64
}

// Days is the number of programme days.
func (c *Covariance) Days() int { return c.days }

// At is the covariance of the rates of days i and j, both from 1.
func (c *Covariance) At(i, j int) float64 { return c.cells[(i-1)*c.days+j-1] }

// Of is the covariance of two linear figures a·R and b·R of the rates.
func (c *Covariance) Of(a, b []float64) float64 { return dot(a, c.times(b)) }

// times is the covariance of every rate with b·R.
func (c *Covariance) times(b []float64) []float64 {
	out := make([]float64, c.days)
	for i := range out {
		out[i] = dot(c.cells[i*c.days:(i+1)*c.days], b)
	}
	return out
}

func dot(a, b []float64) float64 {
	var s float64
	for i, x := range a {
		s += x * b[i]
	}
	return s
}

// Movement is what the covariance needs to know of the movement itself.
type Movement struct {
	Slope   float64 // rate against temperature, s/d per °C: its own C, before that its calibre's
	Pattern float64 // size of its vertical pattern, s/d; only the tilt of the rack asks for it
}

// Propagate is the covariance of the rates of a programme whose days lie between the readings of a
// layout:
//
//	Cov(R) = B (u_i² I + u_c² rounds + a²/2 cos(hand - hand')) Bᵀ / Δt²
//	       + c² u_Tsys² (1 within one chamber) + c² u_Trand² I        at nominal temperature only
//	       + u_f² 11ᵀ + u_h² I + (A tilt)² (1 within one vertical position)
//
// B takes the difference of the two readings of each day (JCGM 100:2008 5.2.2 and F.1.2.3 in the
// matrix form of JCGM 102, from memory). Readings as found and as left at one step are two for u_i
// and one for u_c. Days of one nominal temperature count as one chamber. The eccentricity has an
// unknown phase, so it ties readings by their hand angles; where an angle is not known the reading
// stands alone. A day without a rate has covariance 0.
func Propagate(p *trial.Programme, l Layout, b trial.Budget, m Movement) *Covariance {
	c := &Covariance{days: len(p.Days), cells: make([]float64, len(p.Days)*len(p.Days))}
	t := termsOf(b)
	for i := range min(len(l), len(p.Days)) {
		for j := range i + 1 {
			if l[i].Seconds <= 0 || l[j].Seconds <= 0 {
				continue
			}
			v := t.readings(l[i], l[j]) + t.days(p, p.Days[i], p.Days[j], m)
			c.cells[i*c.days+j], c.cells[j*c.days+i] = v, v
		}
	}
	return c
}

// terms are a budget's variances.
type terms struct {
	read, common, wobble, chamber, weather, frequency, handling, tilt float64
	methods                                                           map[string]float64
}

func termsOf(b trial.Budget) terms {
	square := func(e trial.Exact) float64 { f := e.Float(); return f * f }
	step := square(b.Resolution) / 12
	t := terms{read: square(b.Read) + step, common: square(b.Common), wobble: square(b.Eccentricity) / 2,
		chamber: square(b.ChamberSystematic), weather: square(b.ChamberRandom),
		frequency: square(b.Frequency), handling: square(b.Handling), methods: map[string]float64{}}
	t.tilt = square(b.Tilt) * math.Pi * math.Pi / (180 * 180)
	for name, u := range b.Methods {
		t.methods[name] = square(u) + step
	}
	return t
}

// readings is what two stretches have in common through their readings.
func (t *terms) readings(a, b Stretch) float64 {
	v := t.shared(a.To, b.To) + t.shared(a.From, b.From) - t.shared(a.To, b.From) - t.shared(a.From, b.To)
	const day = trial.SecondsPerDay
	return v * (day / float64(a.Seconds)) * (day / float64(b.Seconds))
}

// shared is the covariance of two readings.
func (t *terms) shared(a, b Reading) float64 {
	var v float64
	if a.Step == b.Step {
		v += t.common
	}
	if a.same(b) {
		if u, own := t.methods[a.Method]; own {
			return v + u + t.wobble
		}
		return v + t.read + t.wobble
	}
	if a.HasHand && b.HasHand {
		v += t.wobble * math.Cos(2*math.Pi*float64(a.Hand-b.Hand)/60_000)
	}
	return v
}

// days is what two days have in common by where and when they were spent.
func (t *terms) days(p *trial.Programme, a, b trial.Day, m Movement) float64 {
	v := t.frequency
	if a.N == b.N {
		v += t.handling
	}
	if p.Measurand == trial.AtNominal {
		if a.TemperatureC == b.TemperatureC {
			v += m.Slope * m.Slope * t.chamber
		}
		if a.N == b.N {
			v += m.Slope * m.Slope * t.weather
		}
	}
	if a.Position == b.Position && a.Position.Vertical() {
		v += m.Pattern * m.Pattern * t.tilt
	}
	return v
}
