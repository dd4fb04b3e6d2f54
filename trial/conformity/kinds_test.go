package conformity_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

// kinds is a programme of every other kind of formula, with limits that rates of about zero and
// states read to 0.5 s keep about half of the time.
func kinds() *trial.Programme {
	p := trial.ISO3159()
	most := func(max string) map[string]trial.Limit {
		e, err := trial.ParseExact(max)
		if err != nil {
			panic(err)
		}
		return map[string]trial.Limit{"1": {HasMax: true, Max: e}}
	}
	days := []int{1, 2, 3, 4, 5, 6}
	weeks := [][]int{{1, 2, 3}, {4, 5, 6}, {7, 8, 9}}
	m, d := p.Criteria[0], p.Criteria[3]
	m.Limits, d.Limits = nil, nil
	crit := func(symbol, max string, f trial.Formula) trial.Criterion {
		return trial.Criterion{Symbol: symbol, Title: symbol, Unit: "s/d", Decimals: 1, Formula: f, Limits: most(max)}
	}
	one, minus := trial.Ratio(1, 1), trial.Ratio(-2, 1)
	p.Criteria = []trial.Criterion{m, d,
		crit("Range", "2", trial.Formula{Kind: trial.RangeOf, Days: days}),
		crit("S", "0.8", trial.Formula{Kind: trial.StandardDeviation, Days: days, Divisor: "n-1"}),
		crit("A", "1.2", trial.Formula{Kind: trial.PeriodRange, Periods: weeks}),
		crit("B", "1", trial.Formula{Kind: trial.GreatestStep, Periods: weeks}),
		crit("Line", "0.3", trial.Formula{Kind: trial.WeightedSum, Terms: []trial.Term{{Weight: one, Symbol: "M"}, {Weight: minus, Symbol: "D"}}}),
		crit("Score", "0.5", trial.Formula{Kind: trial.WeightedSum, Constant: one, Terms: []trial.Term{{Weight: minus, Symbol: "D", Absolute: true}, {Weight: one, Symbol: "A"}}}),
	}
	return p
}

// Every kind against trials judged one by one.
func TestOtherKinds(t *testing.T) {
	t.Parallel()
	p := kinds()
	j, err := trial.NewJudge(p, "1")
	if errors.Is(err, trial.ErrNotBuilt) {
		t.Skip(err)
	} else if err != nil {
		t.Fatal(err)
	}
	rates := []int64{100, -200, 300, 0, -100, 200, 100, 0, 0, 0, 0, 0, 0, 0, 0}
	m := measured{make([]float64, 15), ratesOf(rates)}
	for d, x := range rates {
		m.rates[d] = float64(x) / 1000
	}
	got := assess(j, chained(j, exact(t, "0.5")), m)
	const n = 40_000
	inside, all := make([]int, len(p.Criteria)), 0
	rng := rand.New(rand.NewPCG(12, 12))
	moved := make([]int64, 15)
	var r trial.Result
	for range n {
		last := 500 * rng.NormFloat64()
		for d := range moved {
			next := 500 * rng.NormFloat64()
			moved[d] = rates[d] + int64(math.Round(next-last))
			last = next
		}
		j.Milli(moved, 1<<15-1, &r)
		for i, v := range r.Values {
			if v.Outcome == trial.Inside {
				inside[i]++
			}
		}
		if r.Verdict == trial.Pass {
			all++
		}
	}
	for i, c := range p.Criteria {
		share := float64(inside[i]) / n
		if got.Each[i].Known != (i >= 2) || i >= 2 && (math.Abs(got.Each[i].P-share) > 0.012 || share < 0.05 || share > 0.95) {
			t.Errorf("p%s = %+v, by trials %.4f", c.Symbol, got.Each[i], share)
		}
	}
	if share := float64(all) / n; !got.All.Known || math.Abs(got.All.P-share) > 0.012 {
		t.Errorf("pAll = %+v, by trials %.4f", got.All, share)
	}
}

func ratesOf(milli []int64) []trial.Rate {
	out := make([]trial.Rate, len(milli))
	for d, x := range milli {
		out[d] = trial.RateOf(x)
	}
	return out
}

// Hinges of every convex kind against every change of every state up to 0.8 s.
func TestHingesOfOtherKinds(t *testing.T) {
	t.Parallel()
	p := kinds()
	p.Criteria = p.Criteria[:len(p.Criteria)-1] // the last is neither: TestHingeMixed
	j, err := trial.NewJudge(p, "1")
	if errors.Is(err, trial.ErrNotBuilt) {
		t.Skip(err)
	} else if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(13, 13))
	found := 0
	for n := range 12 {
		rates := make([]int64, 15)
		for d := range rates {
			rates[d] = rng.Int64N(900) - 450
		}
		if n%3 == 0 {
			rates[rng.IntN(9)] += 1_500
		}
		list := conformity.Hinges(j, ratesOf(rates), conformity.Chain(p))
		state, change, ok := tried(j, rates, 800)
		if ok != (len(list) > 0 && max(list[0].Change, -list[0].Change) <= 800) {
			t.Errorf("%v: every change finds %d at %d (%v), hinges %+v", rates, change, state, ok, list)
		} else if ok && (list[0].Reading.Step != state || int64(list[0].Change) != change) {
			t.Errorf("%v: every change finds %d at %d, hinge %+v", rates, change, state, list[0])
		} else if ok {
			found++
		}
	}
	if found < 6 {
		t.Errorf("only %d of 12 hang on a change of 0.8 s", found)
	}
}

func tried(j *trial.Judge, rates []int64, most int64) (state int, change int64, ok bool) {
	var r trial.Result
	j.Milli(rates, 1<<15-1, &r)
	was := r.Verdict
	moved := make([]int64, len(rates))
	for c := int64(1); c <= most; c++ {
		for k := 0; k <= len(rates); k++ {
			for _, sign := range []int64{1, -1} {
				copy(moved, rates)
				if k > 0 {
					moved[k-1] += sign * c
				}
				if k < len(rates) {
					moved[k] -= sign * c
				}
				if j.Milli(moved, 1<<15-1, &r); r.Verdict != was {
					return k, sign * c, true
				}
			}
		}
	}
	return 0, 0, false
}
