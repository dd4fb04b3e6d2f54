package entry

import (
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distmv"

	"ratehouse/trial"
)

// The forecast of a day is the conditional distribution of a multivariate t, as the reference library
// computes it.
func TestForecastAgainstReference(t *testing.T) {
	t.Parallel()
	p, rng := trial.ISO3159(), rand.New(rand.NewPCG(5, 5))
	f, err := NewForecast(p, nil)
	if err != nil {
		t.Fatal(err)
	}
	f.doubt = 1
	n := len(p.Days)
	sigma := mat.NewSymDense(n, nil)
	for i := range n {
		for j := range i + 1 {
			sigma.SetSym(i, j, f.normal.Cov[i][j]*(freedom-2)/freedom)
		}
	}
	joint, ok := distmv.NewStudentsT(f.normal.Mean, sigma, freedom, nil)
	if !ok {
		t.Fatal("not positive definite")
	}
	rates := make([]trial.Rate, n)
	for _, d := range []int{1, 2, 4, 5, 9, 11} { // with gaps, one of them in the cold
		rates[d-1] = trial.RateOf(int64(4000 * rng.NormFloat64()))
	}
	k := without(rates)
	var at []int
	for _, d := range k.days {
		at = append(at, d-1)
	}
	given, ok := joint.ConditionStudentsT(at, k.x, nil)
	if !ok {
		t.Fatal("no conditional distribution")
	}
	left := scaleOf(given)
	for i, d := range []int{3, 6, 7, 8, 10, 12, 13, 14, 15} { // what is left, in order
		centre, scale, own := f.rate(d, k)
		if math.Abs(centre-given.Mean(nil)[i]) > 1e-9 {
			t.Errorf("day %d: centre %.12f, want %.12f", d, centre, given.Mean(nil)[i])
		}
		if math.Abs(scale-math.Sqrt(left.At(i, i))) > 1e-9 || own.t.Nu != given.Nu() {
			t.Errorf("day %d: scale %.12f with %v degrees of freedom, want %.12f with %v", d, scale, own.t.Nu, math.Sqrt(left.At(i, i)), given.Nu())
		}
	}
}

// scaleOf is the scale matrix of a distribution that only tells its covariance.
func scaleOf(d *distmv.StudentsT) *mat.SymDense {
	var cov mat.SymDense
	d.CovarianceMatrix(&cov)
	cov.ScaleSym((d.Nu()-2)/d.Nu(), &cov)
	return &cov
}

// The little table that an expectation carries is the distribution: over all tenths it adds up to one,
// and outside the band there lies what is meant to.
func TestShapeAddsUp(t *testing.T) {
	t.Parallel()
	f, err := NewForecast(trial.ISO3159(), nil)
	if err != nil {
		t.Fatal(err)
	}
	rates := []trial.Rate{trial.RateOf(1000), trial.RateOf(1200), trial.RateOf(-900), trial.RateOf(-700), trial.RateOf(2000)}
	for day := 1; day <= 6; day++ {
		state := trial.State(-41_200)
		for _, seconds := range []int64{trial.SecondsPerDay, trial.SecondsPerDay / 2} {
			e := f.Expect(Round{Day: day}, []Place{{Rates: rates[:day-1], State: &state, Seconds: seconds}})[0]
			sum, outside := 0.0, 0.0
			for v := e.Centre - 4*e.Band; v <= e.Centre+4*e.Band; v += tenth {
				w := float64(e.weight(v)) / float64(e.One)
				sum += w
				if Check(&e, v) != nil {
					outside += w
				}
			}
			if math.Abs(sum-1) > 0.03 || math.Abs(outside-askTail) > 0.004 {
				t.Errorf("day %d, %d s: probabilities add up to %.4f, %.4f of them outside the band (want 1 and %v)", day, seconds, sum, outside, askTail)
			}
		}
	}
}

// A place without a past, a hole, a day that is none: nothing is expected, and nothing smells.
func TestNothingToExpect(t *testing.T) {
	t.Parallel()
	f, err := NewForecast(trial.ISO3159(), nil)
	if err != nil {
		t.Fatal(err)
	}
	state := trial.State(0)
	whole := Place{State: &state, Seconds: trial.SecondsPerDay}
	for name, c := range map[string]struct {
		r Round
		p Place
	}{
		"idle day":           {Round{Day: 0}, whole},
		"after the last":     {Round{Day: 16}, whole},
		"hole":               {Round{Day: 1}, Place{Empty: true, State: &state, Seconds: 5}},
		"no state before":    {Round{Day: 1}, Place{Seconds: trial.SecondsPerDay}},
		"no time in between": {Round{Day: 1}, Place{State: &state}},
	} {
		e := f.Expect(c.r, []Place{c.p})[0]
		if e.Known || Check(&e, 500_000) != nil {
			t.Errorf("%s: %+v", name, e)
		}
	}
	if _, err := NewForecast(trial.ISO3159(), trial.NewPrior(14)); err != trial.ErrPriorDays {
		t.Errorf("history of another programme: %v", err)
	}
}

// Check is carried over to a language whose whole numbers end at 2^53: whatever a movement has done,
// no product on its way comes near.
func TestCheckFitsSmallNumbers(t *testing.T) {
	t.Parallel()
	f, err := NewForecast(trial.ISO3159(), nil)
	if err != nil {
		t.Fatal(err)
	}
	wild := make([]trial.Rate, 15)
	for d := range wild {
		wild[d] = trial.RateOf(600_000 * int64(1-d%2*2))
	}
	state := trial.State(21_600_000)
	for day := 1; day <= 15; day++ {
		e := f.Expect(Round{Day: day}, []Place{{Rates: wild[:day-1], State: &state, Seconds: 3 * trial.SecondsPerDay}})[0]
		// right or any slip of the hand; typed again, the other hand, unknown; a neighbour's value whose
		// band is the least there is
		most := perReadings*shapeTop + 4*e.One + 2*10*(shapeTop*e.Band/tenth)
		if safe := int64(1) << 53; most > safe/1000 || shapeTop*e.Band > safe {
			t.Errorf("day %d: weights up to %d, band %d", day, most, e.Band)
		}
	}
}

// One forecast serves many pages at once, whichever days their movements know; more such sets than are
// kept change nothing.
func TestForecastIsShared(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	shared, err := NewForecast(p, nil)
	if err != nil {
		t.Fatal(err)
	}
	state, rate := trial.State(0), trial.RateOf(1500)
	placeOf := func(pattern int) []Place {
		rates := make([]trial.Rate, 14)
		for d := range rates {
			if pattern>>d&1 == 1 {
				rates[d] = rate
			}
		}
		return []Place{{Rates: rates, State: &state, Seconds: trial.SecondsPerDay}}
	}
	var group sync.WaitGroup
	for worker := range 4 {
		group.Go(func() {
			own, err := NewForecast(p, nil)
			if err != nil {
				t.Error(err)
				return
			}
			for i := range 2 * mostKept {
				own.given = map[string]*trial.Conditional{}
				pattern := (i*31 + worker*5) % (1 << 14)
				got, want := shared.Expect(Round{Day: 15}, placeOf(pattern))[0], own.Expect(Round{Day: 15}, placeOf(pattern))[0]
				if got.Centre != want.Centre || got.Band != want.Band {
					t.Errorf("days %b: %d ± %d, want %d ± %d", pattern, got.Centre, got.Band, want.Centre, want.Band)
					return
				}
			}
		})
	}
	group.Wait()
	if len(shared.given) > mostKept {
		t.Errorf("%d sets of days kept", len(shared.given))
	}
}
