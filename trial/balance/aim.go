package balance

import (
	"cmp"
	"math/rand/v2"
	"slices"

	"ratehouse/trial"
)

// Aim says where the workshop that regulates a lot should set it: the shift of all rates that would
// let most movements pass.
type Aim struct {
	Movements int // judged in full
	Passed    int // as they are
	// MRejects fail on a mean rate; of them RegulationOnly needed nothing but regulating.
	MRejects       int
	RegulationOnly int
	Best           Shift // with the most passes; of several stretches the one nearest to zero
	AtBest         int   // passes there
	// Near is the stretch around Best in which at most one movement in a hundred fewer passes.
	Near Shift
	// Low and High enclose the middle of Best in 95 of 100 lots drawn from this one with
	// replacement (bootstrap percentiles; common practice, no source).
	Low, High trial.Milli
	curve     []edge
}

// edge is a shift at which the number of passes changes.
type edge struct {
	at    trial.Milli
	count int // passes from here on
}

// AimPoint computes the aim of a lot in one pass over its movements: each gives the interval of
// shifts with which it passes (Regulation), and the intervals are counted. Movements not judged in
// full are left out. seed drives the bootstrap alone. Shifting a lot presumes that all its movements
// can be set like that, which is what a workshop's aim is; the lot itself is not changed. ok is false
// if no movement can be brought to pass by any shift.
func AimPoint(j *trial.Judge, lot [][]trial.Rate, seed uint64) (a Aim, ok bool) {
	var spans []Shift
	for _, rates := range lot {
		a.count(j, rates, &spans)
	}
	if len(spans) == 0 {
		return a, false
	}
	a.curve = count(spans)
	a.Best, a.AtBest = best(a.curve)
	a.Near = a.around(a.Best, a.AtBest-a.Movements/100)
	a.Low, a.High = bootstrap(spans, a.Movements, seed)
	return a, true
}

// count judges one movement and notes its interval.
func (a *Aim) count(j *trial.Judge, rates []trial.Rate, spans *[]Shift) {
	var r trial.Result
	j.Rates(rates, &r)
	onMean := false
	for i, v := range r.Values {
		if j.Limit(i).Any() && !v.Known {
			return
		}
		onMean = onMean || v.Outcome == trial.Outside && j.Programme().Criteria[i].Formula.Kind == trial.Mean
	}
	a.Movements++
	if r.Verdict == trial.Pass {
		a.Passed++
	}
	if onMean {
		a.MRejects++
	}
	if s, ok := Regulation(j, rates); ok {
		*spans = append(*spans, s)
		if onMean {
			a.RegulationOnly++
		}
	}
}

// PassesAt is how many movements would pass with all rates shifted by so much.
func (a *Aim) PassesAt(shift trial.Milli) int {
	i, found := slices.BinarySearchFunc(a.curve, shift, func(e edge, s trial.Milli) int { return cmp.Compare(e.at, s) })
	if !found {
		i--
	}
	if i < 0 {
		return 0
	}
	return a.curve[i].count
}

// count turns intervals into the steps of how many of them hold a shift.
func count(spans []Shift) []edge {
	var steps []edge
	for _, s := range spans {
		steps = append(steps, edge{s.Lo, 1}, edge{s.Hi + 1, -1})
	}
	slices.SortFunc(steps, func(a, b edge) int { return cmp.Compare(a.at, b.at) })
	out := steps[:0]
	n := 0
	for i, s := range steps {
		n += s.count
		if i+1 == len(steps) || steps[i+1].at != s.at {
			out = append(out, edge{s.at, n})
		}
	}
	return out
}

// best is the stretch with the most passes that is nearest to zero.
func best(curve []edge) (s Shift, most int) {
	distance := trial.Milli(0)
	for i := range len(curve) - 1 {
		e, stretch := curve[i], Shift{curve[i].at, curve[i+1].at - 1}
		d := max(stretch.Lo, -stretch.Hi, 0)
		if e.count > most || e.count == most && d < distance {
			s, most, distance = stretch, e.count, d
		}
	}
	return s, most
}

// around widens a stretch as long as at least so many pass.
func (a *Aim) around(s Shift, least int) Shift {
	for i, e := range a.curve {
		if e.at == s.Lo {
			lo, hi := i, i
			for lo > 0 && a.curve[lo-1].count >= least {
				lo--
			}
			for hi+2 < len(a.curve) && a.curve[hi+1].count >= least {
				hi++
			}
			return Shift{a.curve[lo].at, a.curve[hi+1].at - 1}
		}
	}
	return s
}

// bootstrap draws lots of the same size and gives the middle 95 of 100 of where their best lies.
func bootstrap(spans []Shift, movements int, seed uint64) (lo, hi trial.Milli) {
	const lots = 200
	rng := rand.New(rand.NewPCG(seed, lots))
	middles := make([]trial.Milli, 0, lots)
	drawn := make([]Shift, 0, movements)
	for range lots {
		drawn = drawn[:0]
		for range movements { // those without an interval are drawn too, and count for nothing
			if i := rng.IntN(movements); i < len(spans) {
				drawn = append(drawn, spans[i])
			}
		}
		if len(drawn) > 0 {
			s, _ := best(count(drawn))
			middles = append(middles, (s.Lo+s.Hi)/2)
		}
	}
	if len(middles) == 0 {
		return 0, 0
	}
	slices.Sort(middles)
	tail := len(middles) / 40
	return middles[tail], middles[len(middles)-1-tail]
}
