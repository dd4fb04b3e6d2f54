// Package rival makes movements from the physics of the oscillator, for tests alone. It shares nothing
// with package simulate, on which checks and forecasts are set; here they are judged. Its constants
// are physical guesses made once (common practice, no source, where nothing else is said); none was
// chosen by looking at a result.
package rival

import (
	"math"
	"math/rand/v2"

	"ratehouse/trial"
)

// Maker delivers lots of one calibre, one after another.
type Maker struct{ rng *rand.Rand }

// New begins with a seed.
func New(seed uint64) *Maker { return &Maker{rand.New(rand.NewPCG(seed, 0x7269_7661_6c))} }

// lot is what movements of one delivery share.
type lot struct {
	regulated, spread float64 // s/d: where its workshop sets it, and how closely
	elastic           float64 // 1/°C: temperature coefficient of its spring's alloy
	oil               float64 // degrees of amplitude lost in the cold
	chronograph       bool
}

// movement is one oscillator with its escapement. Amplitudes in degrees, angles in radians, rates in s/d.
type movement struct {
	set            float64 // rate at the amplitude of reference
	heavy, towards float64 // heavy point: µg·mm, clock angle
	spring         [2]float64
	isochronism    float64 // s/d per 10° of amplitude
	wound, spent   float64 // amplitude dial up at full wind and a day later
	upright, down  float64 // what it loses in vertical positions; dial down against dial up
	ends           float64 // s/d dial down against dial up, from the ends of its pivots
	slope, curve   float64 // of spring and balance, s/d per °C, per °C²
	restless, calm float64 // scale of the day's own noise; of the wander that lasts
	ageing, stay   float64 // s/d a day; s/d left behind by heat and cold
	drag           float64 // degrees that an additional mechanism takes
	sick           bool    // magnetised: other every day
	runout, dial   float64 // seconds hand: eccentricity in s, and its angle
}

func (m *Maker) lot() lot {
	r := m.rng
	return lot{regulated: 1 + 1.1*r.NormFloat64(), spread: 1.2 + 0.8*r.Float64(), elastic: 2.5e-6 * r.NormFloat64(), oil: 8 + 8*r.Float64(), chronograph: r.IntN(3) == 0}
}

// student draws from a t distribution of n degrees of freedom, scaled to a variance of one.
func student(r *rand.Rand, n int) float64 {
	chi := 0.0
	for range n {
		x := r.NormFloat64()
		chi += x * x
	}
	return r.NormFloat64() / math.Sqrt(chi/float64(n)) * math.Sqrt(float64(n-2)/float64(n))
}

func (m *Maker) movement(l lot) movement {
	r := m.rng
	const (
		alloy   = 9.5e-6 // 1/°C: chosen so that spring and balance of the mean lot cancel
		springs = 8e-6   // thermal expansion
		balance = 16.75e-6
	)
	elastic := alloy + l.elastic + 4.5e-6*student(r, 6)
	v := movement{
		set: l.regulated + l.spread*student(r, 5), heavy: 30 * r.ExpFloat64(), towards: 2 * math.Pi * r.Float64(),
		spring: [2]float64{1.1 * r.NormFloat64(), 1.1 * r.NormFloat64()}, isochronism: 0.4 + 0.5*r.NormFloat64(),
		wound: 295 + 8*r.NormFloat64(), upright: 28 + 7*r.NormFloat64(), down: 6 * r.NormFloat64(), ends: 1.2 * r.NormFloat64(),
		slope: 43_200 * (elastic + 3*springs - 2*balance), curve: -0.0015, // domain notes 4.2
		restless: 0.12 * (r.ExpFloat64() + r.ExpFloat64() + r.ExpFloat64()), calm: 0.2, ageing: 0.02 + 0.03*r.NormFloat64(),
		stay: 0.4 * (r.ExpFloat64() - r.ExpFloat64()), drag: 12 + 5*r.NormFloat64(), sick: r.IntN(60) == 0,
		runout: 0.1 * math.Abs(r.NormFloat64()), dial: 2 * math.Pi * r.Float64()}
	v.spent = v.wound - 45 - 10*r.ExpFloat64()
	return v
}

// poise is the rate that a heavy point of one µg·mm pointing straight down makes at an amplitude:
// 86400 (mgr/k) J1(φ)/φ (domain notes 4.4), for k of a balance of 1.2e-9 kg m² at 4 Hz.
func poise(degrees float64) float64 {
	const prefactor = 1.117824058761898
	phi := degrees * math.Pi / 180
	return prefactor * math.J1(phi) / phi
}

// lowest is the clock angle of the bottom of the dial (domain notes 2).
func lowest(p trial.Position) float64 {
	return map[trial.Position]float64{trial.H6: 0, trial.H9: math.Pi / 2, trial.H12: math.Pi, trial.H3: 3 * math.Pi / 2}[p]
}

// day is the mean rate over a day in which the spring runs down.
func (v *movement) day(d trial.Day, l lot, kick float64) float64 {
	const steps = 8
	celsius, sum := d.TemperatureC.Exact().Float(), 0.0
	for i := range steps {
		a := v.wound + (v.spent-v.wound)*(float64(i)+0.5)/steps + kick
		switch {
		case d.Position.Vertical():
			a -= v.upright
		case d.Position == trial.FH:
			a -= v.down
		}
		if celsius < 23 {
			a -= l.oil * (23 - celsius) / 15
		}
		if d.Accessory && l.chronograph {
			a -= v.drag
		}
		sum += v.isochronism * (a - 270) / 10
		if d.Position.Vertical() {
			sum += v.heavy * poise(a) * math.Cos(v.towards-lowest(d.Position))
		}
	}
	rate := v.set + sum/steps + v.slope*(celsius-23) + v.curve*(celsius-23)*(celsius-23)
	if d.Position.Vertical() { // the spring's own weight, whatever the amplitude
		rate += v.spring[0]*math.Cos(lowest(d.Position)) + v.spring[1]*math.Sin(lowest(d.Position))
	}
	if d.Position == trial.FH {
		rate += v.ends
	}
	return rate
}

// rates takes a movement through the programme.
func (m *Maker) rates(v *movement, l lot, p *trial.Programme) []float64 {
	r, out := m.rng, make([]float64, len(p.Days))
	wander, knocked, left := v.calm*r.NormFloat64(), 0.0, 0.0
	for i, d := range p.Days {
		wander = 0.7*wander + math.Sqrt(1-0.7*0.7)*v.calm*r.NormFloat64()
		if i > 0 && d.Position != p.Days[i-1].Position && r.IntN(150) == 0 {
			knocked += 1.5 * r.NormFloat64() // turned with a jolt
		}
		out[i] = v.day(d, l, 3*r.NormFloat64()) + v.restless*student(r, 3) + wander + knocked + left + v.ageing*float64(i)
		if v.sick {
			out[i] += 4 * student(r, 3)
		}
		if d.TemperatureC != 23_000 {
			left = v.stay
		}
	}
	return out
}

// Lot delivers n movements and has them read: states by movement and round, thousandths of a second in
// whole tenths, 24 h apart. Each round has its reader, with an offset of his own, larger on one day in
// seven when somebody stands in; hands were set to within 15 s.
func (m *Maker) Lot(p *trial.Programme, n int) [][]trial.State {
	r, l := m.rng, m.lot()
	readers := make([]float64, len(p.Days)+1)
	for k := range readers {
		readers[k] = 0.05 * r.NormFloat64()
		if r.IntN(7) == 0 {
			readers[k] += 0.15 * r.NormFloat64()
		}
	}
	out := make([][]trial.State, n)
	for i := range out {
		v := m.movement(l)
		shown := 30*r.Float64() - 15
		rates := m.rates(&v, l, p)
		for k := range readers {
			if k > 0 {
				shown += rates[k-1]
			}
			seen := shown + v.runout*math.Sin(2*math.Pi*shown/60+v.dial) + readers[k] + 0.05*(r.ExpFloat64()-r.ExpFloat64())
			out[i] = append(out[i], trial.State(math.Round(10*seen))*100)
		}
	}
	return out
}
