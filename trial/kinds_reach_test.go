package trial_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"ratehouse/trial"
)

// flat computes a criterion in plain floats, for searching; x holds day d at d-1.
func flat(p *trial.Programme, c trial.Criterion, x []float64) float64 {
	f := c.Formula
	mean := func(days []int) (m float64) {
		for _, d := range days {
			m += x[d-1] / float64(len(days))
		}
		return m
	}
	least, most, sum := math.Inf(1), math.Inf(-1), 0.0
	see := func(v float64) { least, most, sum = min(least, v), max(most, v), sum+v }
	switch f.Kind {
	case trial.Mean:
		return mean(f.Days)
	case trial.Difference:
		return mean(f.Of) - mean(f.From)
	case trial.PerDegree:
		return (mean(f.Of) - mean(f.From)) / (p.Days[f.Of[0]-1].TemperatureC - p.Days[f.From[0]-1].TemperatureC).Exact().Float()
	case trial.MeanVariation, trial.GreatestVariation:
		for _, d := range f.Pairs {
			see(math.Abs(x[d[1]-1] - x[d[0]-1]))
		}
		if f.Kind == trial.MeanVariation {
			return sum / float64(len(f.Pairs))
		}
		return most
	case trial.GreatestDeviation, trial.StandardDeviation:
		m, squares := mean(f.Days), 0.0
		for _, d := range f.Days {
			see(math.Abs(x[d-1] - m))
			squares += (x[d-1] - m) * (x[d-1] - m)
		}
		if f.Kind == trial.GreatestDeviation {
			return most
		}
		n := float64(len(f.Days))
		if f.Divisor == "n-1" {
			n--
		}
		return math.Sqrt(squares / n)
	case trial.RangeOf:
		for _, d := range f.Days {
			see(x[d-1])
		}
		return most - least
	case trial.PeriodRange, trial.GreatestStep:
		step, before := 0.0, 0.0
		for i, days := range f.Periods {
			s := mean(days) * float64(len(days))
			if see(s); i > 0 {
				step = max(step, math.Abs(s-before))
			}
			before = s
		}
		if f.Kind == trial.GreatestStep {
			return step
		}
		return most - least
	}
	sum = f.Constant.Float()
	for _, t := range f.Terms {
		inner, _ := p.Criterion(t.Symbol)
		v := flat(p, inner, x)
		if t.Absolute {
			v = math.Abs(v)
		}
		sum += t.Weight.Float() * v
	}
	return sum
}

// valley is the least value of a convex function of one or two blank days within ±box, by nested
// ternary search.
func valley(x []float64, blanks []int, box float64, f func() float64) float64 {
	if len(blanks) == 0 {
		return f()
	}
	at := func(v float64) float64 {
		x[blanks[0]-1] = v
		return valley(x, blanks[1:], box, f)
	}
	lo, hi := -box, box
	for hi-lo > 1e-7 {
		a, b := lo+(hi-lo)/3, hi-(hi-lo)/3
		if at(a) < at(b) {
			hi = b
		} else {
			lo = a
		}
	}
	return min(at((lo+hi)/2), at(-box), at(box))
}

// peak is the greatest value of a convex function: at a corner.
func peak(x []float64, blanks []int, box float64, f func() float64) float64 {
	if len(blanks) == 0 {
		return f()
	}
	best := math.Inf(-1)
	for _, v := range []float64{-box, box} {
		x[blanks[0]-1] = v
		best = max(best, peak(x, blanks[1:], box, f))
	}
	return best
}

// blankSome makes rates near or far, with one or two blank days.
func blankSome(rng *rand.Rand, days int) (rates []trial.Rate, x []float64, blanks []int) {
	rates, x = make([]trial.Rate, days), make([]float64, days)
	spread := []int64{4000, 40_000, 300_000}[rng.IntN(3)]
	centre := rng.Int64N(2*spread) - spread
	for d := range rates {
		m := centre + rng.Int64N(spread)
		rates[d], x[d] = trial.RateOf(m), float64(m)/1000
		if rng.IntN(4) == 0 {
			rates[d] = trial.RateBetween(0, trial.State(m), 86_400+rng.Int64N(900))
			x[d] = rates[d].Exact().Float()
		}
	}
	for _, d := range rng.Perm(days)[:1+rng.IntN(2)] {
		rates[d], blanks = trial.Rate{}, append(blanks, d+1)
	}
	return rates, x, blanks
}

// Unreachable for every kind by itself against searching the box; weighted sums only where they are
// convex and limited above.
func TestKindsUnreachableAgainstSearch(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 21))
	counts := map[string]int{}
	for range 300 {
		days := 3 + rng.IntN(4)
		p := randomProgramme(rng, days, 5)
		makeConvex(rng, p)
		j, err := trial.NewJudge(p, "A")
		if err != nil {
			t.Fatal(err)
		}
		rates, x, blanks := blankSome(rng, days)
		var got trial.Result
		j.Rates(rates, &got)
		for i, c := range p.Criteria {
			v, l := got.Values[i], c.Limits["A"]
			if v.Known || !l.Any() {
				if v.Unreachable {
					t.Fatalf("%s unreachable though known %v", c.Symbol, v.Known)
				}
				continue
			}
			f := func() float64 { return flat(p, c, x) }
			gap := math.Inf(-1) // how far the nearest value is from the limits
			if l.HasMax {
				gap = max(gap, valley(x, blanks, 60, f)-l.Max.Float())
			}
			if l.HasMin {
				gap = max(gap, l.Min.Float()-peak(x, blanks, 60, f))
			}
			if math.Abs(gap) < 1e-6 {
				continue
			}
			counts[fmt.Sprint(c.Formula.Kind, gap > 0)]++
			if v.Unreachable != (gap > 0) {
				t.Fatalf("%v, blank %v: %s %v within %v is unreachable %v, missed by %g", rates, blanks, c.Symbol, c.Formula, l, v.Unreachable, gap)
			}
		}
	}
	for _, k := range append(simpleKinds, trial.WeightedSum) {
		for _, b := range []bool{true, false} {
			if counts[fmt.Sprint(k, b)] < 5 {
				t.Errorf("%s unreachable %v only %d times", k, b, counts[fmt.Sprint(k, b)])
			}
		}
	}
}

// makeConvex bends the weighted sums of a programme so that what they hold pulls one way and their
// limit stands against it.
func makeConvex(rng *rand.Rand, p *trial.Programme) {
	for i := range p.Criteria {
		c := &p.Criteria[i]
		if c.Formula.Kind != trial.WeightedSum {
			continue
		}
		for k := range c.Formula.Terms {
			term := &c.Formula.Terms[k]
			inner, _ := p.Criterion(term.Symbol)
			switch inner.Formula.Kind {
			case trial.StandardDeviation, trial.WeightedSum: // left to their bounds
				term.Symbol = "K0"
			case trial.Mean, trial.Difference, trial.PerDegree:
				continue
			}
			term.Weight = trial.Ratio(1+rng.Int64N(9), 2)
		}
		if f := p.Criteria[0].Formula.Kind; f == trial.StandardDeviation {
			p.Criteria[0].Formula = trial.Formula{Kind: trial.Mean, Days: []int{1, 2}}
		}
		for k := range c.Formula.Terms {
			if c.Formula.Terms[k].Weight.Sign() < 0 {
				c.Formula.Terms[k].Weight = c.Formula.Terms[k].Weight.Neg()
			}
		}
		c.Limits["A"] = trial.Limit{HasMax: true, Max: trial.Ratio(rng.Int64N(100), 1)}
	}
}

// A convex sum that must be large, and its negative that must be small, against the corners.
func TestSumsThatACornerDecides(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 23))
	counts := map[bool]int{}
	for range 300 {
		days := 3 + rng.IntN(4)
		p := randomProgramme(rng, days, 5)
		makeConvex(rng, p)
		for i := range p.Criteria { // standard deviations may stay in these sums
			if f := &p.Criteria[i].Formula; f.Kind == trial.WeightedSum && rng.IntN(3) == 0 {
				p.Criteria[0].Formula = trial.Formula{Kind: trial.StandardDeviation, Days: []int{1, 2, 3}, Divisor: "n"}
				f.Terms = append(f.Terms, trial.Term{Weight: trial.Ratio(3, 2), Symbol: "K0"})
			}
		}
		rates, x, blanks := blankSome(rng, days)
		for i := range p.Criteria {
			c := &p.Criteria[i]
			if c.Formula.Kind != trial.WeightedSum {
				continue
			}
			most := peak(x, blanks, 60, func() float64 { return flat(p, *c, x) })
			limit := int64(most) + rng.Int64N(41) - 20
			c.Limits["A"] = trial.Limit{HasMin: true, Min: trial.Ratio(limit, 1)}
			if rng.IntN(2) == 0 {
				f := &c.Formula
				f.Constant = f.Constant.Neg()
				for k := range f.Terms {
					f.Terms[k].Weight = f.Terms[k].Weight.Neg()
				}
				c.Limits["A"] = trial.Limit{HasMax: true, Max: trial.Ratio(-limit, 1)}
			}
			j, err := trial.NewJudge(p, "A")
			if err != nil {
				t.Fatal(err)
			}
			var got trial.Result
			j.Rates(rates, &got)
			v := got.Values[i]
			want := float64(limit) > most
			if v.Known || math.Abs(float64(limit)-most) < 1e-6 {
				break
			}
			counts[want]++
			if v.Unreachable != want {
				t.Fatalf("%v, blank %v: %+v is unreachable %v; the most it can be is %g, of %d", rates, blanks, c.Formula, v.Unreachable, most, limit)
			}
			break // a later sum may rest on this one
		}
	}
	if counts[true] < 20 || counts[false] < 20 {
		t.Errorf("too one-sided: %v", counts)
	}
}

// CannotPass for programmes of all kinds: never with a filling that passes, and always where the
// limits are flat and searching finds them missed together.
func TestKindsCannotPassAgainstSearch(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(3159, 22))
	counts := map[string]int{}
	for n := range 250 {
		days := 3 + rng.IntN(3)
		p := randomProgramme(rng, days, 4)
		decidable := n%3 > 0
		if decidable {
			flatten(rng, p)
		}
		j, err := trial.NewJudge(p, "A")
		if err != nil {
			t.Fatal(err)
		}
		rates, x, blanks := blankSome(rng, days)
		var got trial.Result
		if j.Rates(rates, &got); got.Verdict != trial.Open {
			if j.CannotPass(rates) {
				t.Fatal("decided and cannot pass")
			}
			continue
		}
		missed := func() float64 {
			worst := math.Inf(-1)
			for _, c := range p.Criteria {
				v, l := flat(p, c, x), c.Limits["A"]
				if l.HasMax {
					worst = max(worst, v-l.Max.Float())
				}
				if l.HasMin {
					worst = max(worst, l.Min.Float()-v)
				}
			}
			return worst
		}
		gap := nearest(rng, x, blanks, missed, decidable)
		cannot := j.CannotPass(rates)
		counts[fmt.Sprint(decidable, cannot)]++
		if cannot && gap < -1e-6 || decidable && !cannot && gap > 1e-6 {
			t.Fatalf("%v, blank %v of %+v: cannot pass %v, missed by %g", rates, blanks, p.Criteria, cannot, gap)
		}
		if lo, hi, ok := j.Needed(rates, blanks[0]); ok && decidable {
			counts["needed"]++
			ends := func(v float64) float64 {
				x[blanks[0]-1] = v
				return valley(x, blanks[1:], 2000, missed)
			}
			at, to := lo.Float(), hi.Float()
			if ends(at) > 1e-5 || ends(to) > 1e-5 || ends(at-0.01) < 1e-6 || ends(to+0.01) < 1e-6 {
				t.Fatalf("%v, blank %v of %+v: day %d needed within %s to %s", rates, blanks, p.Criteria, blanks[0], lo, hi)
			}
		}
	}
	for _, c := range []string{"true true", "true false", "false true", "false false", "needed"} {
		if counts[c] < 10 {
			t.Errorf("too one-sided: %v", counts)
		}
	}
}

// nearest is the least a filling misses all limits by: by search where that is convex, else by many
// tries.
func nearest(rng *rand.Rand, x []float64, blanks []int, missed func() float64, convex bool) float64 {
	if convex {
		return valley(x, blanks, 2000, missed)
	}
	best := math.Inf(1)
	for range 1500 {
		for _, d := range blanks {
			x[d-1] = rng.NormFloat64() * []float64{3, 30, 300}[rng.IntN(3)]
		}
		best = min(best, missed())
	}
	return best
}

// flatten takes out of a programme what CannotPass does not decide: lower limits of magnitudes,
// standard deviations, sums that are not convex.
func flatten(rng *rand.Rand, p *trial.Programme) {
	for i := range p.Criteria {
		c := &p.Criteria[i]
		if c.Formula.Kind == trial.StandardDeviation {
			c.Formula = trial.Formula{Kind: trial.RangeOf, Days: c.Formula.Days}
		}
		l := c.Limits["A"]
		switch c.Formula.Kind {
		case trial.Mean, trial.Difference, trial.PerDegree, trial.WeightedSum:
		default:
			c.Limits["A"] = trial.Limit{HasMax: true, Max: l.Max.Add(trial.Ratio(3, 1))}
		}
	}
	makeConvex(rng, p)
}

// Limits that can just be kept or just not, where searching is too coarse.
func TestKindsAtTheBrink(t *testing.T) {
	t.Parallel()
	exact := func(s string) trial.Exact {
		e, err := trial.ParseExact(s)
		if err != nil {
			t.Fatal(err)
		}
		return e
	}
	one := func(f trial.Formula, least, most string) *trial.Judge {
		p := trial.ISO3159()
		l := trial.Limit{HasMin: least != "", HasMax: most != ""}
		if l.HasMin {
			l.Min = exact(least)
		}
		if l.HasMax {
			l.Max = exact(most)
		}
		p.Criteria = []trial.Criterion{{Symbol: "X", Formula: f, Limits: map[string]trial.Limit{"1": l}}}
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(err)
		}
		return j
	}
	three := []int{1, 2, 3}
	chain := [][2]int{{1, 2}, {2, 3}}
	for name, c := range map[string]struct {
		f           trial.Formula
		least, most string
		rates       string // of days 1 to 3, "" blank
		want        bool   // unreachable
	}{
		// 0, 6 and their mean 3: the squares sum to 18, over 3 or 2 they are 6 or 9.
		"deviation by n just kept":       {trial.Formula{Kind: trial.StandardDeviation, Days: three, Divisor: "n-1"}, "", "3", "0 6 -", false},
		"deviation by n just missed":     {trial.Formula{Kind: trial.StandardDeviation, Days: three, Divisor: "n-1"}, "", "2.999999999999999999", "0 6 -", true},
		"√6 above":                       {trial.Formula{Kind: trial.StandardDeviation, Days: three, Divisor: "n"}, "", "2.449489742783178098197284074705", "0 6 -", true},
		"√6 below":                       {trial.Formula{Kind: trial.StandardDeviation, Days: three, Divisor: "n"}, "", "2.449489742783178098197284074706", "0 6 -", false},
		"deviation below zero":           {trial.Formula{Kind: trial.StandardDeviation, Days: three, Divisor: "n"}, "", "-1", "0 6 -", true},
		"mean beyond the box":            {trial.Formula{Kind: trial.StandardDeviation, Days: three[:2], Divisor: "n"}, "", "5", "70 -", false},
		"mean well beyond the box":       {trial.Formula{Kind: trial.StandardDeviation, Days: three[:2], Divisor: "n"}, "", "5", "70.001 -", true},
		"a deviation that must be large": {trial.Formula{Kind: trial.StandardDeviation, Days: three[:2], Divisor: "n"}, "65", "", "-70 -", false},
		"a deviation that is too large":  {trial.Formula{Kind: trial.StandardDeviation, Days: three[:2], Divisor: "n"}, "65.001", "", "-70 -", true},
		"range just kept":                {trial.Formula{Kind: trial.RangeOf, Days: three}, "", "6", "0 6 -", false},
		"range just missed":              {trial.Formula{Kind: trial.RangeOf, Days: three}, "", "5.999", "0 6 -", true},
		"range of at least":              {trial.Formula{Kind: trial.RangeOf, Days: three}, "66", "", "0 6 -", false},
		"range of too much":              {trial.Formula{Kind: trial.RangeOf, Days: three}, "66.001", "", "0 6 -", true},
		"chained variations":             {trial.Formula{Kind: trial.MeanVariation, Pairs: chain}, "60", "", "0 - 0", false},
		"chained variations, too much":   {trial.Formula{Kind: trial.MeanVariation, Pairs: chain}, "60.001", "", "0 - 0", true},
		"chained, both ends blank":       {trial.Formula{Kind: trial.MeanVariation, Pairs: chain}, "120", "", "- - -", false},
		"chained, too much of all":       {trial.Formula{Kind: trial.MeanVariation, Pairs: chain}, "120.001", "", "- - -", true},
		"step just kept":                 {trial.Formula{Kind: trial.GreatestStep, Periods: [][]int{{1}, {2}, {3}}}, "", "3", "0 - 6", false},
		"step just missed":               {trial.Formula{Kind: trial.GreatestStep, Periods: [][]int{{1}, {2}, {3}}}, "", "2.999", "0 - 6", true},
		"deviation of at least":          {trial.Formula{Kind: trial.GreatestDeviation, Days: three[:2]}, "30", "", "0 -", false},
		"deviation of too much":          {trial.Formula{Kind: trial.GreatestDeviation, Days: three[:2]}, "30.001", "", "0 -", true},
	} {
		var rates []trial.Rate
		for _, s := range strings.Fields(c.rates) {
			if s == "-" {
				rates = append(rates, trial.Rate{})
				continue
			}
			m, ok := exact(s).Times(trial.Ratio(1000, 1)).Rat().Float64()
			if !ok {
				t.Fatal(s)
			}
			rates = append(rates, trial.RateOf(int64(m)))
		}
		var got trial.Result
		if one(c.f, c.least, c.most).Rates(rates, &got); got.Values[0].Unreachable != c.want {
			t.Errorf("%s: unreachable %v", name, got.Values[0].Unreachable)
		}
	}
}

// What CannotPass leaves out makes no interval of what is needed: it would promise too much.
func TestNeededPromisesNothingLoose(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	days := []int{1, 2, 3}
	p.Criteria = []trial.Criterion{
		{Symbol: "M", Formula: trial.Formula{Kind: trial.Mean, Days: days}, Limits: map[string]trial.Limit{"1": {HasMin: true, HasMax: true, Max: trial.Ratio(5, 1)}}},
		{Symbol: "S", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: days, Divisor: "n"}},
	}
	rates := []trial.Rate{trial.RateOf(0), trial.RateOf(1000)}
	needed := func(limit trial.Limit) (string, bool) {
		p.Criteria[1].Limits = map[string]trial.Limit{"1": limit}
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(err)
		}
		lo, hi, ok := j.Needed(rates, 3)
		return lo.String() + " to " + hi.String(), ok
	}
	if got, ok := needed(trial.Limit{}); !ok || got != "-1 to 14" {
		t.Errorf("day 3 needed within %s, %v; the mean asks -1 to 14", got, ok)
	}
	if got, ok := needed(trial.Limit{HasMax: true, Max: trial.Ratio(1, 1)}); ok {
		t.Errorf("day 3 needed within %s, though the deviation asks for more", got)
	}
}

// A sum of a known √2 and a magnitude yet to come may just keep a lower limit between √2 and its 30
// decimals; one a hair above √2 it cannot.
func TestSumAtTheBrinkOfARoot(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	p.Criteria = []trial.Criterion{
		{Symbol: "S", Formula: trial.Formula{Kind: trial.StandardDeviation, Days: []int{1, 2}, Divisor: "n-1"}}, // of 0 and 2: √2
		{Symbol: "M", Formula: trial.Formula{Kind: trial.Mean, Days: []int{3}}},
		{Symbol: "Q", Formula: trial.Formula{Kind: trial.WeightedSum, Terms: []trial.Term{{Weight: trial.Ratio(1, 1), Symbol: "S"}, {Weight: trial.Ratio(-1, 1), Symbol: "M", Absolute: true}}}},
	}
	for text, want := range map[string]bool{"1.41421356237309504880168872420969": false, "1.414213562373095048801688724211": true} {
		least, err := trial.ParseExact(text)
		if err != nil {
			t.Fatal(err)
		}
		p.Criteria[2].Limits = map[string]trial.Limit{"1": {HasMin: true, Min: least}}
		j, err := trial.NewJudge(p, "1")
		if err != nil {
			t.Fatal(err)
		}
		rates := []trial.Rate{trial.RateOf(0), trial.RateOf(2000)}
		var got trial.Result
		if j.Rates(rates, &got); got.Values[2].Unreachable != want || j.CannotPass(rates) != want {
			t.Errorf("at least %s: unreachable %v, cannot pass %v", text, got.Values[2].Unreachable, j.CannotPass(rates))
		}
	}
}
