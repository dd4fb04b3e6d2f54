package trial_test

import (
	"fmt"
	"math/big"
	"math/rand/v2"

	"ratehouse/trial"
)

// The oracle of all kinds of formula: straight from the definitions beside trial.Formula, in binary
// numbers of 700 bits, which tell apart whatever differs by more than 2^-500. It shares nothing
// with the engine.

type wide = *big.Float

func wideOf(x float64) wide { return new(big.Float).SetPrec(700).SetFloat64(x) }

func wideRat(r *big.Rat) wide { return new(big.Float).SetPrec(700).SetRat(r) }

func minus(a, b wide) wide { return new(big.Float).SetPrec(700).Sub(a, b) }

func plus(a, b wide) wide { return new(big.Float).SetPrec(700).Add(a, b) }

func mul(a, b wide) wide { return new(big.Float).SetPrec(700).Mul(a, b) }

func div(a wide, n int) wide { return new(big.Float).SetPrec(700).Quo(a, wideOf(float64(n))) }

func absolute(a wide) wide { return new(big.Float).SetPrec(700).Abs(a) }

// same tells numbers that differ by less than 2^-500.
func same(a, b wide) bool {
	d := minus(a, b)
	return d.Sign() == 0 || d.MantExp(nil) < -500
}

func compare(a, b wide) int {
	if same(a, b) {
		return 0
	}
	return a.Cmp(b)
}

func biggest(list []wide) wide {
	best := list[0]
	for _, x := range list {
		if x.Cmp(best) > 0 {
			best = x
		}
	}
	return best
}

func smallest(list []wide) wide {
	best := list[0]
	for _, x := range list {
		if x.Cmp(best) < 0 {
			best = x
		}
	}
	return best
}

func total(list []wide) wide {
	sum := wideOf(0)
	for _, x := range list {
		sum = plus(sum, x)
	}
	return sum
}

// general is a movement's rates by day, from 1, beside a programme.
type general struct {
	prog  *trial.Programme
	rates map[int]wide
}

func (g general) of(days []int) []wide {
	list := make([]wide, len(days))
	for i, d := range days {
		list[i] = g.rates[d]
	}
	return list
}

func (g general) mean(days []int) wide { return div(total(g.of(days)), len(days)) }

func (g general) variations(pairs [][2]int) (list []wide) {
	for _, p := range pairs {
		list = append(list, absolute(minus(g.rates[p[1]], g.rates[p[0]])))
	}
	return list
}

func (g general) sums(periods [][]int) (list []wide) {
	for _, days := range periods {
		list = append(list, total(g.of(days)))
	}
	return list
}

// days a criterion needs, those of the criteria it rests on among them.
func (g general) days(c trial.Criterion) []int {
	days := c.Formula.AllDays()
	for _, t := range c.Formula.Terms {
		inner, _ := g.prog.Criterion(t.Symbol)
		days = append(days, g.days(inner)...)
	}
	return days
}

func (g general) known(c trial.Criterion) bool {
	for _, d := range g.days(c) {
		if g.rates[d] == nil {
			return false
		}
	}
	return true
}

func (g general) value(c trial.Criterion) wide {
	f := c.Formula
	switch f.Kind {
	case trial.Mean:
		return g.mean(f.Days)
	case trial.MeanVariation:
		return div(total(g.variations(f.Pairs)), len(f.Pairs))
	case trial.GreatestVariation:
		return biggest(g.variations(f.Pairs))
	case trial.Difference:
		return minus(g.mean(f.Of), g.mean(f.From))
	case trial.GreatestDeviation:
		var list []wide
		for _, x := range g.of(f.Days) {
			list = append(list, absolute(minus(x, g.mean(f.Days))))
		}
		return biggest(list)
	case trial.PerDegree:
		celsius := func(days []int) wide {
			sum := wideOf(0)
			for _, d := range days {
				sum = plus(sum, wideOf(float64(g.prog.Days[d-1].TemperatureC)))
			}
			return div(div(sum, len(days)), 1000)
		}
		return new(big.Float).SetPrec(700).Quo(minus(g.mean(f.Of), g.mean(f.From)), minus(celsius(f.Of), celsius(f.From)))
	case trial.RangeOf:
		return minus(biggest(g.of(f.Days)), smallest(g.of(f.Days)))
	case trial.StandardDeviation:
		sum := wideOf(0)
		for _, x := range g.of(f.Days) {
			d := minus(x, g.mean(f.Days))
			sum = plus(sum, mul(d, d))
		}
		n := len(f.Days)
		if f.Divisor == "n-1" {
			n--
		}
		return new(big.Float).SetPrec(700).Sqrt(div(sum, n))
	case trial.PeriodRange:
		return minus(biggest(g.sums(f.Periods)), smallest(g.sums(f.Periods)))
	case trial.GreatestStep:
		sums := g.sums(f.Periods)
		var list []wide
		for i := 1; i < len(sums); i++ {
			list = append(list, absolute(minus(sums[i], sums[i-1])))
		}
		return biggest(list)
	}
	sum := wideRat(f.Constant.Rat())
	for _, t := range f.Terms {
		inner, _ := g.prog.Criterion(t.Symbol)
		v := g.value(inner)
		if t.Absolute {
			v = absolute(v)
		}
		sum = plus(sum, mul(wideRat(t.Weight.Rat()), v))
	}
	return sum
}

// inside compares with the limits of category A.
func (g general) inside(c trial.Criterion) bool {
	l, v := c.Limits["A"], g.value(c)
	return !(l.HasMin && compare(v, wideRat(l.Min.Rat())) < 0) && !(l.HasMax && compare(v, wideRat(l.Max.Rat())) > 0)
}

// sixDecimals rounds half to even.
func sixDecimals(v wide) string {
	scaled := mul(v, wideOf(1_000_000))
	n, _ := scaled.Int(nil) // towards zero
	frac := minus(scaled, new(big.Float).SetPrec(700).SetInt(n))
	c := compare(absolute(frac), wideOf(0.5))
	if c > 0 || c == 0 && n.Bit(0) == 1 {
		n.Add(n, big.NewInt(int64(frac.Sign())))
	}
	sign := ""
	if n.Sign() < 0 {
		sign = "-"
	}
	s := fmt.Sprintf("%07d", n.Abs(n))
	return sign + s[:len(s)-6] + "." + s[len(s)-6:]
}

// randomProgramme invents a programme of some days and criteria of any kind.
func randomProgramme(rng *rand.Rand, days, criteria int) *trial.Programme {
	p := trial.ISO3159()
	p.Code, p.Recovery = "RANDOM", trial.Recovery{}
	p.Categories = []trial.Category{{Code: "A", Title: "all"}}
	p.Days, p.Criteria = nil, nil
	for d := 1; d <= days; d++ {
		p.Days = append(p.Days, trial.Day{N: d, Position: trial.Positions()[rng.IntN(6)], TemperatureC: trial.Milli(8000 + 1000*d)})
	}
	for i := range criteria {
		c := trial.Criterion{Symbol: fmt.Sprintf("K%d", i), Unit: "s/d", Decimals: 2, Formula: randomFormula(rng, days, i)}
		c.Limits = map[string]trial.Limit{"A": randomLimit(rng, c.Formula.Kind)}
		p.Criteria = append(p.Criteria, c)
	}
	return p
}

var simpleKinds = []trial.Kind{trial.Mean, trial.MeanVariation, trial.GreatestVariation, trial.Difference, trial.GreatestDeviation,
	trial.PerDegree, trial.RangeOf, trial.StandardDeviation, trial.PeriodRange, trial.GreatestStep}

func randomFormula(rng *rand.Rand, days, before int) trial.Formula {
	some := func(least, most int) []int {
		order := rng.Perm(days)
		list := make([]int, 0, most)
		for _, d := range order[:least+rng.IntN(most-least+1)] {
			list = append(list, d+1)
		}
		return list
	}
	f := trial.Formula{Kind: simpleKinds[rng.IntN(len(simpleKinds))]}
	if before > 1 && rng.IntN(3) == 0 {
		f.Kind = trial.WeightedSum
	}
	switch f.Kind {
	case trial.Mean, trial.GreatestDeviation, trial.RangeOf:
		f.Days = some(1, days)
	case trial.StandardDeviation:
		f.Days, f.Divisor = some(2, days), []string{"n", "n-1"}[rng.IntN(2)]
	case trial.Difference:
		f.Of, f.From = some(1, 3), some(1, 3)
	case trial.PerDegree:
		d := some(2, 2)
		f.Of, f.From = d[:1], d[1:]
	case trial.MeanVariation, trial.GreatestVariation:
		for range 1 + rng.IntN(4) {
			d := some(2, 2)
			f.Pairs = append(f.Pairs, [2]int{d[0], d[1]})
		}
	case trial.PeriodRange, trial.GreatestStep:
		for range 2 + rng.IntN(2) {
			f.Periods = append(f.Periods, some(1, 3))
		}
	case trial.WeightedSum:
		f.Constant = trial.Ratio(rng.Int64N(200), 3)
		for range 1 + rng.IntN(3) {
			w := trial.Ratio(rng.Int64N(21)-10, 1+rng.Int64N(3))
			f.Terms = append(f.Terms, trial.Term{Weight: w, Symbol: fmt.Sprintf("K%d", rng.IntN(before)), Absolute: rng.IntN(2) == 0})
		}
	}
	return f
}

// randomLimit makes limits near which small rates fall, lower ones of magnitudes now and then.
func randomLimit(rng *rand.Rand, k trial.Kind) (l trial.Limit) {
	signed := k == trial.Mean || k == trial.Difference || k == trial.PerDegree || k == trial.WeightedSum
	if l.HasMax = rng.IntN(6) > 0; l.HasMax {
		l.Max = trial.Ratio(rng.Int64N(9), 1+rng.Int64N(2))
	}
	if l.HasMin = rng.IntN(4) == 0 || signed && rng.IntN(2) == 0; l.HasMin {
		l.Min = trial.Ratio(rng.Int64N(3), 1)
		if signed {
			l.Min = trial.Ratio(-rng.Int64N(9), 1+rng.Int64N(2))
		}
	}
	if l.HasMin && l.HasMax && l.Min.Cmp(l.Max) > 0 {
		l.Min, l.Max = l.Max, l.Min
	}
	return l
}
