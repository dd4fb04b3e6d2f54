package outlook

import (
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
)

// everyKind is a programme with a criterion of every kind, limits near the middle of what random rates
// give.
func everyKind() *trial.Programme {
	p := *trial.ISO3159()
	pairs := [][2]int{{1, 2}, {3, 4}, {9, 10}}
	weeks := [][]int{{1, 2, 3}, {4, 5, 6}, {7, 8, 9}}
	most := func(text string) map[string]trial.Limit {
		e, err := trial.ParseExact(text)
		if err != nil {
			panic(err)
		}
		return map[string]trial.Limit{"1": {HasMax: true, Max: e}}
	}
	p.Criteria = []trial.Criterion{
		{Symbol: "A", Formula: trial.Formula{Kind: trial.Mean, Days: []int{1, 2, 5}}, Limits: most("1.5")},
		{Symbol: "B", Formula: trial.Formula{Kind: trial.MeanVariation, Pairs: pairs}, Limits: most("5")},
		{Symbol: "C", Formula: trial.Formula{Kind: trial.GreatestVariation, Pairs: pairs}, Limits: most("8")},
		{Symbol: "D", Formula: trial.Formula{Kind: trial.Difference, Of: []int{1, 2}, From: []int{9}}, Limits: most("3")},
		{Symbol: "E", Formula: trial.Formula{Kind: trial.GreatestDeviation, Days: []int{1, 3, 6, 8}}, Limits: most("7")},
		{Symbol: "F", Formula: trial.Formula{Kind: trial.PerDegree, Of: []int{13}, From: []int{11}}, Limits: most("0.1")},
		{Symbol: "G", Formula: trial.Formula{Kind: trial.RangeOf, Days: []int{2, 4, 6}}, Limits: most("9")},
		{Symbol: "H", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: []int{1, 2, 3, 4}, Divisor: "n-1"}, Limits: most("6")},
		{Symbol: "I", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: []int{1, 2, 3, 4}, Divisor: "n"}, Limits: most("5")},
		{Symbol: "J", Formula: trial.Formula{Kind: trial.PeriodRange, Periods: weeks}, Limits: most("15")},
		{Symbol: "K", Formula: trial.Formula{Kind: trial.GreatestStep, Periods: weeks}, Limits: most("12")},
		{Symbol: "L", Formula: trial.Formula{Kind: trial.WeightedSum, Constant: trial.Ratio(1, 3), Terms: []trial.Term{
			{Weight: trial.Ratio(2, 1), Symbol: "A", Absolute: true}, {Weight: trial.Ratio(-1, 2), Symbol: "B"}}}, Limits: most("1")},
	}
	for i := range p.Criteria {
		p.Criteria[i].Title, p.Criteria[i].Unit = p.Criteria[i].Symbol, "s/d"
	}
	return &p
}

// Criteria in floats say what the exact judge says, of every kind, one by one.
func TestFiguresAgainstJudge(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3, 14))
	for name, p := range map[string]*trial.Programme{"built-in": trial.ISO3159(), "every kind": everyKind()} {
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(name, err)
		}
		f, r := newFigures(j), trial.Result{}
		in, out := make([]int, len(p.Criteria)), make([]int, len(p.Criteria))
		for range 3000 {
			milli, rates := make([]int64, 15), make([]float64, 15)
			level := 6000 * rng.NormFloat64()
			for d := range milli {
				milli[d] = int64(level + 3500*rng.NormFloat64())
				if p.Days[d].TemperatureC != 23_000 {
					milli[d] *= 3
				}
				rates[d] = float64(milli[d]) / 1000
			}
			j.Milli(milli, 1<<15-1, &r)
			for i := range r.Values {
				list := []wanted{{of: i, open: true}}
				for _, x := range f.list[i].terms {
					list = append([]wanted{{of: x.of}}, list...)
				}
				if m, _ := r.Margin(i); m.Sign() == 0 { // drawn figures keep off limits
					continue
				}
				inside := r.Values[i].Outcome == trial.Inside
				if got := f.inside(rates, list); got != inside {
					t.Fatalf("%s, %s: %v, the judge says %v of %v", name, p.Criteria[i].Symbol, got, r.Values[i].Outcome, rates)
				}
				if inside {
					in[i]++
				} else {
					out[i]++
				}
			}
		}
		for i := range in {
			if in[i] < 20 || out[i] < 20 {
				t.Errorf("%s, %s: %d inside, %d outside tell nothing", name, p.Criteria[i].Symbol, in[i], out[i])
			}
		}
	}
}

// What is open is checked, and what an open sum rests on is computed and no more.
func TestFiguresNeeded(t *testing.T) {
	t.Parallel()
	j, err := trial.NewJudge(everyKind(), "1")
	if err != nil {
		t.Fatal(err)
	}
	rates := make([]trial.Rate, 15)
	for _, d := range []int{1, 2, 5} { // A is decided, B and its sum are not
		rates[d-1] = trial.RateOf(1000)
	}
	f, r := newFigures(j), trial.Result{}
	j.Rates(rates, &r)
	list := f.needs(&r)
	if list[0] != (wanted{of: 0}) || list[1] != (wanted{of: 1, open: true}) || len(list) != 12 {
		t.Errorf("%v", list)
	}
	for d := range rates {
		rates[d] = trial.RateOf(0)
	}
	j.Rates(rates[:14], &r) // of the built-in days only the last is missing: nothing here rests on it
	if list := f.needs(&r); len(list) != 0 {
		t.Errorf("%v", list)
	}
}
