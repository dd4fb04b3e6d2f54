package simulate

import (
	"math"
	"math/rand/v2"

	"ratehouse/trial"
)

// Model says how the movements of an invented calibre behave. All spreads are standard deviations;
// rates in s/d, temperatures in °C. The figures of Default are invented; their orders of magnitude
// follow the project's practice notes (position spread of 2 s/d and more, thermal slopes of
// 0.2 s/d per °C and more; E15).
type Model struct {
	Mean, MeanSpread float64 // rate of the movement over all positions
	PoiseSpread      float64 // of each component of the vertical pattern: its size is Rayleigh
	FlatSpread       float64 // what the pivots do: dial up and dial down against the vertical mean
	ThermalMean      float64 // slope of the calibre, s/d per °C
	ThermalSpread    float64
	ThermalCurve     float64 // s/d per °C², about 23 °C
	DayNoise         float64 // of one day's rate, a movement's own, log-normal about this
	DayNoiseLog      float64 // spread of its logarithm
	Drift            float64 // s/d per day, ageing of a new movement
	Resume           float64 // what warm and cold leave behind on days after them
	FaultyShare      float64 // of movements with one fault
	ReadNoise        float64 // of one state, s
	Eccentricity     float64 // of the seconds hand, amplitude in s
	RoundNoise       float64 // common to all movements of a round, s
	Accessory        float64 // what an additional mechanism takes while it runs
}

// Default is an invented calibre of which roughly six in seven pass.
func Default() Model {
	return Model{Mean: 1.2, MeanSpread: 2.3, PoiseSpread: 1.6, FlatSpread: 1.3, ThermalMean: 0.05, ThermalSpread: 0.2, ThermalCurve: -0.002,
		DayNoise: 0.35, DayNoiseLog: 0.35, Drift: 0.02, Resume: 0.8, FaultyShare: 0.06, ReadNoise: 0.06, Eccentricity: 0.1, RoundNoise: 0.02, Accessory: -0.4}
}

// Fault is what is wrong with a movement.
type Fault string

// The faults a drawn movement can have.
const (
	Sound     Fault = ""
	Unsteady  Fault = "unsteady"  // the day noise of a dirty or magnetised movement
	OutOfPlan Fault = "poise"     // badly poised
	Thermal   Fault = "thermal"   // wrong spring for its balance
	FarOff    Fault = "regulated" // never regulated
)

// Movement is a drawn movement: its true behaviour, from which days and states follow.
type Movement struct {
	Fault         Fault
	mean, flat    float64
	dialUp        float64
	cos, sin      float64
	slope, curve  float64
	noise, drift  float64
	resume, phase float64
	accessory     float64
}

// Draw draws one movement of the model.
func (m Model) Draw(rng *rand.Rand) Movement {
	v := Movement{mean: m.Mean + m.MeanSpread*rng.NormFloat64(), flat: m.FlatSpread * rng.NormFloat64(), dialUp: 0.5 * m.FlatSpread * rng.NormFloat64(),
		cos: m.PoiseSpread * rng.NormFloat64(), sin: m.PoiseSpread * rng.NormFloat64(),
		slope: m.ThermalMean + m.ThermalSpread*rng.NormFloat64(), curve: m.ThermalCurve,
		noise: m.DayNoise * math.Exp(m.DayNoiseLog*rng.NormFloat64()), drift: m.Drift * rng.NormFloat64(), resume: m.Resume * rng.NormFloat64(),
		phase: 2 * math.Pi * rng.Float64(), accessory: m.Accessory * rng.ExpFloat64()}
	if rng.Float64() < m.FaultyShare {
		v.spoil(rng)
	}
	return v
}

func (v *Movement) spoil(rng *rand.Rand) {
	v.Fault = []Fault{Unsteady, OutOfPlan, Thermal, FarOff}[rng.IntN(4)]
	switch v.Fault {
	case Unsteady:
		v.noise *= 6
	case OutOfPlan:
		v.cos, v.sin = 4*v.cos, 4*v.sin
	case Thermal:
		v.slope += 0.8
	case FarOff:
		v.mean += 9
	}
}

// bottom is the clock angle of the lowest point of the dial in a vertical position, in radians
// (project's domain notes, section 2).
var bottom = map[trial.Position]float64{trial.H12: math.Pi, trial.H3: 1.5 * math.Pi, trial.H6: 0, trial.H9: 0.5 * math.Pi}

// at is the undisturbed rate in a position at a temperature. The vertical pattern is that of a
// heavy point: mean + A cos(angle of the heavy point - angle of the bottom) (domain notes 4.5).
func (v *Movement) at(p trial.Position, celsius float64) float64 {
	r, dt := v.mean, celsius-23
	switch p {
	case trial.CH:
		r += v.flat + v.dialUp
	case trial.FH:
		r += v.flat - v.dialUp
	default:
		r += v.cos*math.Cos(bottom[p]) + v.sin*math.Sin(bottom[p])
	}
	return r + v.slope*dt + v.curve*dt*dt
}

// Rates draws the true daily rates of a movement through a programme, one a day, in s/d.
func (v *Movement) Rates(p *trial.Programme, rng *rand.Rand) []float64 {
	out := make([]float64, len(p.Days))
	after := 0.0
	for i, d := range p.Days {
		celsius := d.TemperatureC.Exact().Float()
		out[i] = v.at(d.Position, celsius) + v.drift*float64(i) + v.noise*rng.NormFloat64() + after
		if d.Accessory {
			out[i] += v.accessory
		}
		if math.Abs(celsius-23) > 5 {
			after = v.resume
		}
	}
	return out
}

// Round is what is common to all movements of one round: errors of the reference and the reader.
type Round struct{ Offset float64 }

// Rounds draws the errors of a series of n rounds.
func (m Model) Rounds(n int, rng *rand.Rand) []Round {
	out := make([]Round, n)
	for i := range out {
		out[i].Offset = m.RoundNoise * rng.NormFloat64()
	}
	return out
}

// States turns true rates into states as read, one a round, in thousandths of a second, rounded to
// a tenth as the eye reads them: set at the start, running, disturbed by reading, by the seconds
// hand's eccentricity and by what is common to the round. hours are the intervals.
func (m Model) States(v *Movement, rates []float64, rounds []Round, hours []float64, rng *rand.Rand) []trial.State {
	out := make([]trial.State, len(rates)+1)
	runs := 2 * rng.NormFloat64()
	for k := range out {
		if k > 0 {
			runs += rates[k-1] * hours[k-1] / 24
		}
		seen := runs + m.ReadNoise*rng.NormFloat64() + m.Eccentricity*math.Sin(2*math.Pi*runs/60+v.phase)
		if k < len(rounds) {
			seen += rounds[k].Offset
		}
		out[k] = trial.State(math.RoundToEven(seen*10)) * 100
	}
	return out
}
