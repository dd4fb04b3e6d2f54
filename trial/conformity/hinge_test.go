package conformity_test

import (
	"math/rand/v2"
	"testing"

	"ratehouse/trial"
	"ratehouse/trial/conformity"
)

// verdictOf judges fifteen rates in thousandths by the formulas of the domain notes in whole numbers,
// sharing nothing with the engine: 1 pass, 0 fail. Category 1.
func verdictOf(r [16]int64) bool {
	abs := func(x int64) int64 { return max(x, -x) }
	var sum, total, most int64
	for d := 1; d <= 10; d++ {
		sum += r[d]
	}
	for k := 1; k <= 5; k++ {
		v := abs(r[2*k] - r[2*k-1])
		total, most = total+v, max(most, v)
	}
	var p int64
	for d := 1; d <= 10; d++ {
		p = max(p, abs(10*r[d]-sum))
	}
	diff := r[1] + r[2] - r[9] - r[10]
	c := r[13] - r[11]
	resume := 2*r[15] - r[1] - r[2]
	return sum >= -40_000 && sum <= 60_000 && total <= 10_000 && most <= 5_000 && diff >= -12_000 && diff <= 16_000 &&
		p <= 100_000 && abs(c) <= 18_000 && abs(resume) <= 10_000
}

// smallest tries every change of every state up to most: the change nearest to zero that flips the
// verdict, the earlier state first, then the positive one; ok is false if there is none.
func smallest(r [16]int64, most int64) (state int, change int64, ok bool) {
	was := verdictOf(r)
	for c := int64(1); c <= most; c++ {
		for k := 0; k <= 15; k++ {
			for _, sign := range []int64{1, -1} {
				moved := r
				if k > 0 {
					moved[k] += sign * c
				}
				if k < 15 {
					moved[k+1] -= sign * c
				}
				if verdictOf(moved) != was {
					return k, sign * c, true
				}
			}
		}
	}
	return 0, 0, false
}

func TestHingesAgainstEveryChange(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rng := rand.New(rand.NewPCG(9, 9))
	const most = 2_000
	found := map[bool]int{}
	for n := range 300 {
		var r [16]int64
		rates := make([]trial.Rate, 15)
		mean := rng.Int64N(9_000) - 2_000
		for d := 1; d <= 15; d += 2 {
			pos := mean + rng.Int64N(7_000) - 3_500
			r[d] = pos + rng.Int64N(3_000) - 1_500
			if d < 15 {
				r[d+1] = pos + rng.Int64N(3_000) - 1_500
			}
		}
		switch n % 3 { // bring some of them near a limit
		case 0:
			r[13] = r[11] + 18_000 + rng.Int64N(2_000) - 1_000
		case 1:
			r[15] = (r[1]+r[2])/2 - 5_000 + rng.Int64N(2_000) - 1_000
		}
		for d := range rates {
			rates[d] = trial.RateOf(r[d+1])
		}
		state, change, ok := smallest(r, most)
		list := conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159()))
		if ok != (len(list) > 0 && max(list[0].Change, -list[0].Change) <= most) {
			t.Fatalf("%v: every change finds %d at %d (%v), hinges %+v", r, change, state, ok, list)
		}
		if !ok {
			continue
		}
		pass := verdictOf(r)
		found[pass]++
		if h := list[0]; h.Reading.Step != state || int64(h.Change) != change || (h.To == trial.Pass) == pass {
			t.Errorf("%v: every change finds %d at state %d, hinge %+v", r, change, state, h)
		}
	}
	if found[true] < 30 || found[false] < 30 {
		t.Errorf("too few verdicts hang on a change of 2 s: %v", found)
	}
}

// The criterion named is the one at its limit.
func TestHingeNamesTheCriterion(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(0)
	}
	rates[12] = trial.RateOf(17_700) // C is 0.59: state 10 to 13 by 0.301 s turn it, 10 first
	h := conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159()))[0]
	if h.Reading.Step != 10 || h.Change != 301 || j.Programme().Criteria[h.Criterion].Symbol != "C" || h.To != trial.Fail {
		t.Errorf("%+v", h)
	}
	rates[12] = trial.RateOf(18_300)
	h = conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159()))[0]
	if h.Reading.Step != 10 || h.Change != -300 || j.Programme().Criteria[h.Criterion].Symbol != "C" || h.To != trial.Pass {
		t.Errorf("back inside: %+v", h)
	}
	// A blank day leaves the movement open: pass is out of reach, not failing is the flip.
	rates[14] = trial.Rate{}
	if h := conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159()))[0]; h.To != trial.Open || h.Change != -300 {
		t.Errorf("open: %+v", h)
	}
}

// Two criteria outside at opposite ends: no reading alone mends both.
func TestNoHinge(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(0)
	}
	rates[12], rates[14] = trial.RateOf(40_000), trial.RateOf(40_000)
	if list := conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159())); len(list) != 0 {
		t.Errorf("%+v", list[0])
	}
}

// With the hands set between two days a reading moves one of them only, and an interval that is not
// 24 h turns a change of state into another change of rate.
func TestHingeFoundAndLeft(t *testing.T) {
	t.Parallel()
	j := newJudge(t, "1")
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(0)
	}
	rates[12] = trial.RateOf(17_700)
	l := conformity.Chain(trial.ISO3159())
	l[12].From = conformity.Reading{Step: 12, Left: true}
	l[12].Seconds = 2 * trial.SecondsPerDay
	var asLeft, asFound *conformity.Hinge
	list := conformity.Hinges(j, rates, l)
	for i := range list {
		if h := &list[i]; h.Reading.Step == 12 && h.Reading.Left && asLeft == nil {
			asLeft = h
		} else if h.Reading.Step == 12 && !h.Reading.Left && asFound == nil {
			asFound = h
		}
	}
	if asLeft == nil || asLeft.Change != -601 { // half as much a day: 0.3005 s/d, just beyond 0.3
		t.Errorf("as left: %+v", asLeft)
	}
	if asFound != nil {
		t.Errorf("day 12 enters no criterion: %+v", asFound)
	}
}

// A programme whose conforming set has a hole is searched change by change.
func TestHingeMixed(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	p.Criteria = p.Criteria[:2]
	p.Criteria[1].Formula = trial.Formula{Kind: trial.WeightedSum, Terms: []trial.Term{
		{Weight: trial.Ratio(1, 1), Symbol: "M", Absolute: true}, {Weight: trial.Ratio(-1, 1), Symbol: "M", Absolute: true}}}
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Skip("weighted sums are not computed by this version: ", err)
	}
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(5_800)
	}
	h := conformity.Hinges(j, rates, conformity.Chain(trial.ISO3159()))
	if len(h) == 0 || h[0].Change != -2_001 || h[0].Reading.Step != 0 || h[0].To != trial.Fail {
		t.Errorf("%+v", h)
	}
}

func TestExcursion(t *testing.T) {
	t.Parallel()
	// 3.5 °C for 2.5 h at 0.6 (practice notes, B4).
	if e := conformity.ExcursionEffect(exact(t, "8.75"), exact(t, "0.6")); e != 219 {
		t.Errorf("effect %v", e)
	}
	if e := conformity.ExcursionEffect(exact(t, "-8.75"), exact(t, "0.6")); e != -219 {
		t.Errorf("cold: %v", e)
	}
	if e := conformity.ExcursionEffect(exact(t, "24"), exact(t, "0.5")); e != 500 {
		t.Errorf("even: %v", e)
	}
	j := newJudge(t, "1")
	rates := make([]trial.Rate, 15)
	for d := range rates {
		rates[d] = trial.RateOf(2_000)
	}
	rates[3] = trial.RateOf(7_100) // Vmax 5.1
	var lot conformity.LotImpact
	m := conformity.Excursion(j, rates, map[int]trial.Milli{4: 219})
	lot.Add(m)
	if m.Measured != trial.Fail || m.Without != trial.Pass || !m.Changed() || len(m.Criteria) != 4 {
		t.Fatalf("%+v", m)
	}
	vmax := m.Criteria[2]
	if vmax.Criterion != 2 || !vmax.Flips || vmax.Shift.Cmp(exact(t, "0.219")) != 0 || vmax.Margin.Cmp(exact(t, "0.119")) != 0 {
		t.Errorf("%+v, margin %s", vmax, vmax.Margin.Decimal(3))
	}
	rates[3] = trial.RateOf(6_500)
	lot.Add(conformity.Excursion(j, rates, map[int]trial.Milli{4: 219}))
	if lot.Movements != 2 || lot.Changed != 1 || lot.At != 0 || lot.Criterion != 2 || lot.Worst.Cmp(exact(t, "0.119")) != 0 {
		t.Errorf("%+v", lot)
	}
	untouched := conformity.Excursion(j, rates, map[int]trial.Milli{12: 5_000})
	if untouched.Changed() || len(untouched.Criteria) != 0 {
		t.Errorf("day 12 enters no criterion: %+v", untouched)
	}
	var r trial.Result
	j.Rates(rates, &r)
	if c, ok := conformity.Slope(j, &r); !ok || c.Sign() != 0 {
		t.Errorf("slope %v %v", c, ok)
	}
	rates[12] = trial.Rate{}
	j.Rates(rates, &r)
	if _, ok := conformity.Slope(j, &r); ok {
		t.Error("a slope before day 13")
	}
}
