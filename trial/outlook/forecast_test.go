package outlook_test

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"ratehouse/trial"
	"ratehouse/trial/outlook"
	"ratehouse/trial/simulate"
	"ratehouse/trial/simulate/rival"
)

// ratesOf makes rates of states a day apart.
func ratesOf(states []trial.State) []trial.Rate {
	rates := make([]trial.Rate, len(states)-1)
	for d := range rates {
		rates[d] = trial.RateBetween(states[d], states[d+1], trial.SecondsPerDay)
	}
	return rates
}

// first leaves all days after k blank.
func first(rates []trial.Rate, k int) []trial.Rate {
	return append(append([]trial.Rate(nil), rates[:k]...), make([]trial.Rate, len(rates)-k)...)
}

func judgeOf(t testing.TB, p *trial.Programme) *trial.Judge {
	t.Helper()
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	return j
}

func priorOf(t testing.TB, all [][]trial.Rate) *trial.Prior {
	t.Helper()
	p := trial.NewPrior(15)
	for _, r := range all {
		if err := p.Add(r); err != nil {
			t.Fatal(err)
		}
	}
	return p
}

func forecastOf(t testing.TB, all, own *trial.Prior) *outlook.Forecast {
	t.Helper()
	f, err := outlook.New(judgeOf(t, trial.ISO3159()), all, own)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// drawn are movements of the first generator, whose mean is shifted by so many thousandths.
func drawn(n int, seed uint64, shift int64) (out [][]trial.Rate) {
	run := simulate.Default().Run(trial.ISO3159(), seed)
	for range n {
		rates := ratesOf(run.Next())
		for d := range rates {
			rates[d] = trial.RateOf(int64(rates[d].Milli()) + shift)
		}
		out = append(out, rates)
	}
	return out
}

func chance(t testing.TB, f *outlook.Forecast, rates []trial.Rate) float64 {
	t.Helper()
	p, ok := f.Chance(rates)
	if !ok || math.IsNaN(p) || p < 0 || p > 1 {
		t.Fatalf("%v %v of %v", p, ok, rates)
	}
	return p
}

// 0 and 1 are where the judge is certain, and nowhere else; the same input gives the same output
// whatever was asked before.
func TestCertain(t *testing.T) {
	t.Parallel()
	history := priorOf(t, drawn(300, 21, 0))
	f, j := forecastOf(t, history, nil), judgeOf(t, trial.ISO3159())
	var r trial.Result
	lots, zeros, ones := rival.New(22).Lot(trial.ISO3159(), 150), 0, 0
	for i, s := range lots {
		rates := first(ratesOf(s), (7*i)%16)
		if i%5 == 0 { // a movement far off, and a gap
			rates[0], rates[3] = trial.RateOf(17_000), trial.Rate{}
		}
		if i%50 == 1 { // two days that no others can be brought near to
			rates = first([]trial.Rate{trial.RateOf(-12_000), trial.RateOf(-12_000), trial.RateOf(12_000), trial.RateOf(12_000), 14: {}}, 4)
		}
		p := chance(t, f, rates)
		j.Rates(rates, &r)
		no := r.Verdict == trial.Fail || r.Verdict == trial.Open && j.CannotPass(rates)
		if (p == 0) != no || (p == 1) != (r.Verdict == trial.Pass) {
			t.Errorf("%v: %v, the judge says %v, cannot pass %v", rates, p, r.Verdict, no)
		}
		if p == 0 {
			zeros++
		} else if p == 1 {
			ones++
		}
		if i%40 == 3 {
			if again := chance(t, forecastOf(t, history, nil), rates); again != p {
				t.Errorf("%v: %v, then %v", rates, p, again)
			}
		}
	}
	if zeros < 10 || ones < 3 {
		t.Errorf("%d zeros, %d ones tell nothing", zeros, ones)
	}
	// Only by luck beyond all draws: it can pass, and is not called impossible.
	wild := first(drawn(1, 5, 0)[0], 12)
	wild[10] = trial.RateOf(120_000)
	if p := chance(t, f, wild); p != 1e-6 {
		t.Errorf("C needs a rate of 100 s/d and more on day 13: %v", p)
	}
}

// With one day blank the only open criterion is |R15 - (R1+R2)/2| <= 5, and the forecast a Student-t by
// one formula.
func TestLastDayAgainstFormula(t *testing.T) {
	t.Parallel()
	all := drawn(400, 31, 0)
	history := priorOf(t, all)
	f := forecastOf(t, history, nil)
	n := normalOf(history)
	for _, rates := range drawn(40, 32, 0) {
		rates = first(rates, 14)
		rates[0] = trial.RateOf(int64(rates[1].Milli()) - 1500)
		var days []int
		var x []float64
		far, of := 2.0, 4.0 // repeated conditions: days 2, 4, 6, 8, 10, 12 and 14
		for d := 1; d <= 14; d++ {
			v := float64(rates[d-1].Milli()) / 1000
			if d%2 == 0 {
				before := n.Given(days)
				off := v - before.Mean(d, x)
				far, of = far+off*off/before.Cov(d, d), of+1
			}
			days, x = append(days, d), append(x, v)
		}
		given := n.Given(days)
		last := distuv.StudentsT{Mu: given.Mean(15, x), Sigma: math.Sqrt(given.Cov(15, 15) * far / of), Nu: of}
		middle := (x[0] + x[1]) / 2
		want := last.CDF(middle+5) - last.CDF(middle-5)
		if p, ok := f.Chance(rates); !ok || p > 0 && math.Abs(p-want) > 0.004 {
			t.Errorf("%v, want %v", p, want)
		}
	}
}

// normalOf repeats what the package learns from a history alone: its mean, then its covariance.
func normalOf(history *trial.Prior) trial.Normal {
	n := trial.Unknown(trial.ISO3159().Days)
	n.Mean = history.Normal(n, 30).Mean
	return history.Normal(n, 30)
}

// A calibre with much of its own is forecast by it, one with none by all, and one with a little in
// between; nothing at all gives a base rate.
func TestByCalibre(t *testing.T) {
	t.Parallel()
	good, fast := drawn(1500, 41, 0), drawn(1500, 42, 4500)
	all := priorOf(t, append(append([][]trial.Rate(nil), good...), fast...))
	blank := make([]trial.Rate, 15)
	var p []float64
	for _, own := range []*trial.Prior{priorOf(t, good), priorOf(t, fast[:15]), nil, priorOf(t, fast)} {
		p = append(p, chance(t, forecastOf(t, all, own), blank))
	}
	var r trial.Result
	j := judgeOf(t, trial.ISO3159())
	for i, want := range map[int][][]trial.Rate{0: good, 3: fast} {
		passed := 0.0
		for _, rates := range want {
			if j.Rates(rates, &r); r.Verdict == trial.Pass {
				passed++
			}
		}
		if math.Abs(p[i]-passed/1500) > 0.03 {
			t.Errorf("calibre %d: base rate %.3f, of its history %.3f passed", i, p[i], passed/1500)
		}
	}
	if fresh := chance(t, forecastOf(t, all, trial.NewPrior(15)), blank); fresh != p[2] {
		t.Errorf("a calibre without movements: %v, all: %v", fresh, p[2])
	}
	if p[0] < p[2]+0.1 || p[2] < p[3]+0.1 || p[1] > p[2] || p[1] < p[3] {
		t.Errorf("own, a little, none, the other: %v", p)
	}
	none, empty := chance(t, forecastOf(t, nil, nil), blank), chance(t, forecastOf(t, trial.NewPrior(15), nil), blank)
	if none != empty || none < 0.05 || none > 0.9 {
		t.Errorf("no history: %v, an empty one: %v", none, empty)
	}
}

// Movements taken out after day 2 because they were fast are in the history with two days. Leaving
// them out would make the calibre look better than it is.
func TestCensored(t *testing.T) {
	t.Parallel()
	whole, left, cut := drawn(3000, 51, 2500), [][]trial.Rate{}, [][]trial.Rate{}
	for _, r := range whole {
		if r[0].Milli()+r[1].Milli() > 12_000 {
			cut = append(cut, first(r, 2))
			continue
		}
		left, cut = append(left, r), append(cut, r)
	}
	blank := make([]trial.Rate, 15)
	want := chance(t, forecastOf(t, priorOf(t, whole), nil), blank)
	if p := chance(t, forecastOf(t, priorOf(t, cut), nil), blank); math.Abs(p-want) > 0.02 {
		t.Errorf("censored %.3f, all read %.3f", p, want)
	}
	if p := chance(t, forecastOf(t, priorOf(t, left), nil), blank); p < want+0.05 {
		t.Errorf("the test is too kind: left out %.3f, all read %.3f", p, want)
	}
}

func TestRefuses(t *testing.T) {
	t.Parallel()
	p := *trial.ISO3159()
	if _, err := outlook.New(judgeOf(t, &p), trial.NewPrior(14), nil); !errors.Is(err, trial.ErrPriorDays) {
		t.Errorf("%v", err)
	}
	p.Criteria = append([]trial.Criterion(nil), p.Criteria...)
	for i := range p.Criteria {
		p.Criteria[i].Limits = nil
	}
	f, err := outlook.New(judgeOf(t, &p), nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	if p, ok := f.Chance(make([]trial.Rate, 15)); ok || p != 0 {
		t.Errorf("no limits: %v %v", p, ok)
	}
}
