package entry

import (
	"math"
	"sync"

	"gonum.org/v1/gonum/stat/distuv"

	"ratehouse/trial"
)

// Forecast says what the rates of one calibre's movements should be under one programme, from its
// history. It is safe for use by several goroutines.
//
// The model: rates are jointly Student-t about the history's mean with the history's covariance, so
// that a movement whose own past lies far from the lot's is expected less narrowly than one whose past
// lies close. It knows positions and temperatures of the programme, never a limit (practice.md X1).
type Forecast struct {
	days   []trial.Day
	normal trial.Normal
	doubt  float64 // factor of all variances: a short history has seen few lots
	tails  []tail  // by how many days speak for the movement's own scale
	mu     sync.Mutex
	given  map[string]*trial.Conditional // by which days are known
}

// Constants of the model. Common practice, no source; set on the first simulator (trial/simulate),
// judged on the second (trial/simulate/rival).
const (
	freedom    = 4     // degrees of freedom of a movement of which nothing is known
	askTail    = 0.005 // share of right values that the model itself would ask again
	baseWeight = 30    // movements of history that weigh as much as knowing nothing
	fewLots    = 100   // movements of history at which variances are still taken half as large again
)

// NewForecast prepares forecasts. A nil history is an empty one: then spreads that fit most
// movements take its place. A history of another number of days gives trial.ErrPriorDays.
func NewForecast(p *trial.Programme, history *trial.Prior) (*Forecast, error) {
	if history == nil {
		history = trial.NewPrior(len(p.Days))
	}
	if history.Days != len(p.Days) {
		return nil, trial.ErrPriorDays
	}
	f := &Forecast{days: p.Days, normal: history.Normal(trial.Unknown(p.Days), baseWeight), given: map[string]*trial.Conditional{}}
	f.doubt = 1 + fewLots/(fewLots+float64(history.N()))
	for m := range len(p.Days) + 1 {
		f.tails = append(f.tails, tailOf(freedom+m))
	}
	return f, nil
}

// tail is a Student-t distribution as checks need it.
type tail struct {
	t          distuv.StudentsT
	look, late float64 // in scales: what is asked again, what is named a round later
	shape      []int64 // see Expectation.Shape
}

func tailOf(dof int) tail {
	t := distuv.StudentsT{Sigma: 1, Nu: float64(dof)}
	out := tail{t: t, look: t.Quantile(1 - askTail/2), late: t.Quantile(1 - lateTail/2)}
	for i := range shapeParts*shapeBands + 1 {
		out.shape = append(out.shape, max(1, int64(math.Round(shapeTop*t.Prob(out.look*float64(i)/shapeParts)/t.Prob(0)))))
	}
	return out
}

// known is what was read of a movement: days in order, and their rates in s/d.
type known struct {
	days []int
	x    []float64
}

// without lists the days read, except those of skip.
func without(rates []trial.Rate, skip ...int) (k known) {
next:
	for i, r := range rates {
		for _, d := range skip {
			if d == i+1 {
				continue next
			}
		}
		if r.Known() {
			k.days, k.x = append(k.days, i+1), append(k.x, float64(r.Milli())/1000)
		}
	}
	return k
}

// mostKept bounds what is kept; a batch with gaps everywhere has some tens.
const mostKept = 256

// conditional is kept: the places of a round mostly know the same days.
func (f *Forecast) conditional(days []int) *trial.Conditional {
	key := make([]byte, 0, 2*len(days))
	for _, d := range days {
		key = append(key, byte(d), byte(d>>8))
	}
	f.mu.Lock()
	defer f.mu.Unlock()
	c, ok := f.given[string(key)]
	if !ok {
		if len(f.given) == mostKept {
			clear(f.given)
		}
		c = f.normal.Given(days)
		f.given[string(key)] = c
	}
	return c
}

// widen turns a variance of the normal model into the squared scale of the Student-t one: by how far
// the known days lie from their mean, and how many they are (conditional distribution of a
// multivariate t; from memory). share is by how much they speak for the day in question at all; 1: fully.
func (f *Forecast) widen(k known, c *trial.Conditional, share float64) (factor float64, own *tail) {
	m := share * float64(len(k.x))
	return f.doubt * (freedom - 2 + share*c.Distance(k.x)) / (freedom + m), &f.tails[int(math.Round(m))]
}

// rate forecasts one day: centre and scale, s/d, of a t distribution.
func (f *Forecast) rate(day int, k known) (centre, scale float64, own *tail) {
	c := f.conditional(k.days)
	v, share := c.Cov(day, day), 1.0
	if f.firstChill(day, k.days) {
		if between, ok := f.between(day); ok {
			share = min(1, between/v)
		}
	}
	factor, own := f.widen(k, c, share)
	return c.Mean(day, k.x), math.Sqrt(max(0, v*factor)), own
}

// firstChill tells the first day at another temperature than all before: how closely a movement keeps
// to the lot in its positions says little of its spring, so that only the day's own noise is scaled by
// it.
func (f *Forecast) firstChill(day int, known []int) bool {
	for _, d := range known {
		if f.days[d-1].TemperatureC != f.days[known[0]-1].TemperatureC {
			return false
		}
	}
	return len(known) > 0 && f.days[day-1].TemperatureC != f.days[known[0]-1].TemperatureC
}

// between is the variance between two days without a change: of the last pair of days before this one
// that were alike.
func (f *Forecast) between(day int) (variance float64, ok bool) {
	for d := day - 1; d >= 2; d-- {
		if x, y := f.days[d-2], f.days[d-1]; alike(x, y) && !x.Accessory && !y.Accessory {
			c := f.normal.Cov
			return c[d-2][d-2] + c[d-1][d-1] - 2*c[d-2][d-1], true
		}
	}
	return 0, false
}

func alike(a, b trial.Day) bool {
	return a.Position == b.Position && a.TemperatureC == b.TemperatureC
}
