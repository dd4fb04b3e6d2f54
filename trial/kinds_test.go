package trial_test

import (
	"fmt"
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
)

// smallRates makes rates of whole and half seconds, so that limits are met exactly; some blank, some
// over intervals that are not 24 h.
func smallRates(rng *rand.Rand, days int, blanks bool) []trial.Rate {
	rates := make([]trial.Rate, days)
	odd := rng.IntN(3) == 0
	for d := range rates {
		switch {
		case blanks && rng.IntN(8) == 0:
		case odd && rng.IntN(2) == 0:
			rates[d] = trial.RateBetween(0, trial.State(500*(rng.Int64N(13)-6)), 86_400+rng.Int64N(1200)-600)
		default:
			rates[d] = trial.RateOf(500 * (rng.Int64N(13) - 6))
		}
	}
	return rates
}

func generalOf(p *trial.Programme, rates []trial.Rate) general {
	g := general{p, map[int]wide{}}
	for d, r := range rates {
		if r.Known() {
			g.rates[d+1] = wideRat(r.Exact().Rat())
		}
	}
	return g
}

// Every kind of formula, alone and in weighted sums, against its definition: values to 6 decimals,
// outcomes at limits met exactly, margins, verdicts.
func TestKindsAgainstTheirDefinitions(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 20))
	counts := map[string]int{}
	for n := range 1000 {
		days := 3 + rng.IntN(6)
		p := randomProgramme(rng, days, 2+rng.IntN(5))
		j, err := trial.NewJudge(p, "A")
		if err != nil {
			t.Fatal(err)
		}
		var got trial.Result
		for range 2 {
			rates := smallRates(rng, days, true)
			j.Rates(rates, &got)
			compareGeneral(t, fmt.Sprint(n), generalOf(p, rates), &got, counts)
		}
	}
	for _, k := range append(simpleKinds, trial.WeightedSum) {
		for _, o := range []trial.Outcome{trial.Inside, trial.Outside} {
			if counts[fmt.Sprint(k, o)] < 20 {
				t.Errorf("%s was %s only %d times", k, o, counts[fmt.Sprint(k, o)])
			}
		}
	}
	if counts["on a limit"] < 100 || counts["irrational"] < 100 || counts["open"] < 100 || counts["pass"] < 20 || counts["-"] < 1 {
		t.Errorf("too one-sided: %v", counts)
	}
}

func compareGeneral(t *testing.T, name string, g general, got *trial.Result, counts map[string]int) {
	t.Helper()
	want, limited := "pass", false
	for i, c := range g.prog.Criteria {
		v, l := got.Values[i], c.Limits["A"]
		limited = limited || l.Any()
		if v.Known != g.known(c) {
			t.Fatalf("%s: %s known %v", name, c.Symbol, v.Known)
		}
		if !v.Known {
			if l.Any() && want == "pass" {
				want = "open"
			}
			continue
		}
		value := g.value(c)
		if d := v.Decimal(6); d != sixDecimals(value) || d != string(v.AppendDecimal(nil, 6)) {
			t.Fatalf("%s: %s %v is %s, want %s", name, c.Symbol, c.Formula, d, sixDecimals(value))
		}
		if !same(wideRat(v.Rat()), value) {
			counts["irrational"]++
		}
		inside := g.inside(c)
		if l.Any() && (v.Outcome == trial.Inside) != inside {
			t.Fatalf("%s: %s %v of %s is %s of %v", name, c.Symbol, c.Formula, v.Exact, v.Outcome, l)
		}
		if l.Any() && !inside {
			want = "fail"
		}
		counts[fmt.Sprint(c.Formula.Kind, v.Outcome)]++
		checkMargin(t, value, l, got, i, counts)
	}
	if !limited {
		want = "-"
	}
	counts[want]++
	if got.Verdict.String() != want {
		t.Fatalf("%s: %s, want %s", name, got.Verdict, want)
	}
}

func checkMargin(t *testing.T, value wide, l trial.Limit, got *trial.Result, i int, counts map[string]int) {
	t.Helper()
	m, ok := got.Margin(i)
	if ok != l.Any() {
		t.Fatalf("margin %v", ok)
	}
	var want []wide
	if l.HasMin {
		want = append(want, minus(value, wideRat(l.Min.Rat())))
	}
	if l.HasMax {
		want = append(want, minus(wideRat(l.Max.Rat()), value))
	}
	if ok && m.Decimal(6) != sixDecimals(smallest(want)) {
		t.Fatalf("margin %s, want %s", m.Decimal(6), sixDecimals(smallest(want)))
	}
	if ok && same(smallest(want), wideOf(0)) {
		counts["on a limit"]++
		if m.Sign() != 0 {
			t.Fatalf("margin %s on a limit", m)
		}
	}
}

// Sums of periods exactly on a limit, and a seventh of a thousandth beyond, from rates in sevenths,
// whose binary forms never end: only the exact numbers can tell.
func TestPeriodsOnALimitBySevenths(t *testing.T) {
	t.Parallel()
	for _, kind := range []trial.Kind{trial.PeriodRange, trial.GreatestStep} {
		p := trial.ISO3159()
		p.Criteria = []trial.Criterion{{Symbol: "X", Formula: trial.Formula{Kind: kind, Periods: [][]int{{1, 2}, {3, 4}}},
			Limits: map[string]trial.Limit{"1": {HasMax: true, Max: trial.Ratio(3, 1)}}}}
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(err)
		}
		for a := int64(1); a < 1000; a += 13 {
			// Sums of 1000 and 3625 counts, 3 s/d apart; cutting errs upwards where signs are mixed.
			counts := []int64{a, 1000 - a, -3*a - 1, 3626 + 3*a}
			for _, bend := range []int64{0, 1, -1} {
				rates := make([]trial.Rate, 4)
				for d, c := range counts {
					if d == 3 {
						c += bend
					}
					rates[d] = sevenths(c)
				}
				var got trial.Result
				if j.Rates(rates, &got); (got.Values[0].Outcome == trial.Inside) != (bend <= 0) {
					t.Fatalf("%s of %v is %s, %s", kind, rates, got.Values[0].Exact, got.Values[0].Outcome)
				}
			}
		}
	}
}
