package trial

import "math/big"

// A weighted sum of criteria listed before. Its value is shift + N / (1000 · q) with
// N = Σ weight · (N of the addend), all weights whole numbers, so that it can stand in the solver's
// rows beside the others; as a number it is summed up from the addends' exact values.

// addend is one term of a weighted sum.
type addend struct {
	at       int32 // criterion
	absolute bool
	factor   Exact // as the programme gives it
	weight   int64 // the same, whole, for the solver
}

// mostWeight bounds whole weights; a sum whose weights have no such common form is computed and
// judged all the same, but left out of every question about blank days.
const mostWeight = 1 << 31

// summed compiles a weighted sum; earlier are the criteria before it.
func (p *Programme) summed(f Formula, earlier []criterion) criterion {
	c := criterion{shape: mixed, q: 1, lip: 1, constant: f.Constant, shift: f.Constant}
	c.need = make([]uint64, words(len(p.Days)))
	for _, t := range f.Terms {
		at := p.indexOf(t.Symbol)
		c.addends = append(c.addends, addend{at: int32(at), absolute: t.Absolute, factor: t.Weight})
		if earlier[at].shape == mixed && !t.Absolute {
			c.shift = c.shift.Add(t.Weight.Times(earlier[at].shift))
		}
		for w, days := range earlier[at].need {
			c.need[w] |= days
		}
	}
	for d := range p.Days {
		if has(c.need, d) {
			c.days = append(c.days, int32(d))
		}
	}
	c.wholeWeights(earlier)
	return c
}

// wholeWeights finds the least q that makes every weight whole; without one q stays 0.
func (c *criterion) wholeWeights(earlier []criterion) {
	common := big.NewInt(1)
	ratios := make([]*big.Rat, len(c.addends))
	for i, a := range c.addends {
		e := &earlier[a.at]
		if e.q == 0 {
			c.q = 0
			return
		}
		ratios[i] = new(big.Rat).Quo(a.factor.Rat(), new(big.Rat).SetInt64(e.q))
		d := ratios[i].Denom()
		gcd := new(big.Int).GCD(nil, nil, common, d)
		common.Mul(common, new(big.Int).Quo(d, gcd))
	}
	c.q = common.Int64()
	for i, r := range ratios {
		w := new(big.Int).Mul(r.Num(), new(big.Int).Quo(common, r.Denom()))
		if !common.IsInt64() || common.Int64() >= mostWeight || w.CmpAbs(big.NewInt(mostWeight)) >= 0 {
			c.q = 0
			return
		}
		c.addends[i].weight = w.Int64()
	}
}

// add sums a weighted sum up from the values of the criteria before it.
func (c *criterion) add(value func(at int32) Exact) Exact {
	total := c.constant
	for _, a := range c.addends {
		v := value(a.at)
		if a.absolute && v.Sign() < 0 {
			v = v.Neg()
		}
		total = total.Add(a.factor.Times(v))
	}
	return total
}

// limitSum sets the limits of N.
func (c *criterion) limitSum(l Limit) {
	scale := func(e Exact) *big.Rat {
		r := e.Sub(c.shift).Rat()
		return r.Mul(r, new(big.Rat).SetInt64(1000*c.q))
	}
	if l.HasMin {
		c.lo = scale(l.Min)
	}
	if l.HasMax {
		c.hi = scale(l.Max)
	}
}

// indexOf is the place of a criterion; -1 if there is none of that symbol.
func (p *Programme) indexOf(symbol string) int {
	for i := range p.Criteria {
		if p.Criteria[i].Symbol == symbol {
			return i
		}
	}
	return -1
}

// valueOf is criterion i from exact rates that are all there.
func (j *Judge) valueOf(i int32, rate func(d int32) *big.Rat) Exact {
	c := &j.crits[i]
	switch c.shape {
	case mixed:
		return c.add(func(at int32) Exact { return j.valueOf(at, rate) })
	case root:
		return c.rootOf(c.exactSquares(rate))
	}
	n := c.exactN(rate)
	return FromRat(n.Quo(n, new(big.Rat).SetInt64(1000*c.q)))
}
