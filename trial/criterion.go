package trial

import (
	"fmt"
	"math/big"
	"math/bits"
)

// criterion is one formula compiled for whole-number work. Over rates in any unit u its value is
// N / q in that unit, where N is a whole-number function of the rates:
//
//	linear    Σ weight · rate
//	total     Σ |second - first| over pairs
//	greatest  greatest |second - first|
//	deviation greatest |n · rate - Σ rates| over n days
//	extent    greatest less least sum over periods
//	step      greatest |sum - sum of the period before|
//
// so that a verdict needs no division: N is compared with limit · q. Two more are no such function
// and are always computed by exact numbers: root (root.go) and mixed (sum.go).
type criterion struct {
	shape           shape
	days            []int32    // days that must be read, from 0, in order
	need            []uint64   // the same as bits
	weights         []int64    // linear, beside days
	pairs           [][2]int32 // total, greatest
	overlap         bool       // pairs share days, so that they are not free of each other
	periods         [][]int32  // extent, step
	under           int64      // root: what N is divided by below the root
	addends         []addend   // sum
	constant, shift Exact      // sum: its own constant; that and those of sums in it
	q               int64
	lip             int64 // N moves by at most lip when every rate moves by at most 1
	limited         bool
	whole           bounds // limits against N for rates in thousandths
	fixed           bounds // the same for rates in thousandths / 2^fixedBits
	lo, hi          *big.Rat
}

type shape uint8

const (
	linear shape = iota
	total
	greatest
	deviation
	extent
	step
	root
	mixed
)

// plain tells the shapes that judge.go's fast path and the closed forms of reach.go know.
func (s shape) plain() bool { return s <= deviation }

// composite tells the shapes whose values are always exact numbers.
func (s shape) composite() bool { return s >= root }

// bounds are the limits of N as whole numbers. Where a limit falls between two whole numbers the
// pair encloses it; without a limit both lie beyond anything N can be.
type bounds struct {
	lo, loUp int64 // floor and ceiling of the lower limit
	hi, hiUp int64 // floor and ceiling of the upper limit
}

// compileFormula turns a checked formula into a criterion without limits.
func compileFormula(p *Programme, path string, f Formula, earlier []criterion) (criterion, error) {
	switch f.Kind {
	case Mean:
		return p.linear(f.Days, nil, Ratio(1, 1)), nil
	case Difference:
		return p.linear(f.Of, f.From, Ratio(1, 1)), nil
	case PerDegree:
		return p.linear(f.Of, f.From, p.meanTemperature(f.Of).Sub(p.meanTemperature(f.From))), nil
	case MeanVariation:
		c := p.paired(total, f.Pairs)
		c.q, c.lip = int64(len(f.Pairs)), 2*int64(len(f.Pairs))
		return c, nil
	case GreatestVariation:
		c := p.paired(greatest, f.Pairs)
		c.q, c.lip = 1, 2
		return c, nil
	case GreatestDeviation:
		n := int64(len(f.Days))
		c := criterion{shape: deviation, q: n, lip: 2 * n}
		c.require(p, f.Days)
		return c, nil
	case RangeOf:
		return p.periodic(extent, singles(f.Days)), nil
	case PeriodRange:
		return p.periodic(extent, f.Periods), nil
	case GreatestStep:
		return p.periodic(step, f.Periods), nil
	case StandardDeviation:
		return p.rooted(f.Days, f.Divisor), nil
	case WeightedSum:
		return p.summed(f, earlier), nil
	}
	return criterion{}, fault(path+".kind", "unknown_kind", string(f.Kind))
}

// linear is (mean of of - mean of from) / by.
func (p *Programme) linear(of, from []int, by Exact) criterion {
	nOf, nFrom := int64(len(of)), max(int64(len(from)), 1)
	weight := make([]int64, len(p.Days))
	for _, d := range of {
		weight[d-1] += nFrom
	}
	for _, d := range from {
		weight[d-1] -= nOf
	}
	ratio := by.Rat() // Σ weight·rate / (nOf·nFrom) / by; by has at most a few digits
	num, den := ratio.Num().Int64(), ratio.Denom().Int64()
	if num < 0 {
		num, den = -num, -den
	}
	c := criterion{shape: linear, q: nOf * nFrom * num}
	g := c.q
	for d := range weight {
		weight[d] *= den
		g = gcd(g, weight[d])
	}
	c.q /= g
	c.require(p, append(append([]int(nil), of...), from...))
	for _, d := range c.days {
		w := weight[d] / g
		c.weights = append(c.weights, w)
		c.lip += int64(abs64(w))
	}
	return c
}

func (p *Programme) paired(s shape, pairs [][2]int) criterion {
	c := criterion{shape: s}
	var days []int
	for _, pair := range pairs {
		c.pairs = append(c.pairs, [2]int32{int32(pair[0] - 1), int32(pair[1] - 1)})
		days = append(days, pair[0], pair[1])
	}
	c.require(p, days)
	c.overlap = len(c.days) < len(days)
	return c
}

// require notes the days a criterion needs, each once, in order.
func (c *criterion) require(p *Programme, days []int) {
	c.need = make([]uint64, words(len(p.Days)))
	for _, d := range days {
		c.need[(d-1)/64] |= 1 << ((d - 1) % 64)
	}
	for d := range p.Days {
		if has(c.need, d) {
			c.days = append(c.days, int32(d))
		}
	}
}

// limit sets the limits of one category. most is beyond anything N can be.
func (c *criterion) limit(path string, l Limit, fixedBits uint, most int64) error {
	c.limited = l.Any()
	scale := func(e Exact, bits uint) *big.Rat {
		r := e.Rat()
		k := new(big.Int).Lsh(big.NewInt(1000*c.q), bits)
		return r.Mul(r, new(big.Rat).SetInt(k))
	}
	switch c.shape {
	case root:
		c.limitSquares(l)
		return nil
	case mixed:
		c.limitSum(l)
		return nil
	}
	if l.HasMin && l.Min.Sign() > 0 && c.shape == total && c.overlap && c.frontier() > mostFrontier {
		return fault(path+".min", "not_built", "a lower limit on so many pairs that share days")
	}
	c.whole = bounds{-most, -most, most, most}
	c.fixed = c.whole
	if l.HasMin {
		c.lo = scale(l.Min, 0)
		c.whole.lo, c.whole.loUp = floorCeil(c.lo, most)
		c.fixed.lo, c.fixed.loUp = floorCeil(scale(l.Min, fixedBits), most)
	}
	if l.HasMax {
		c.hi = scale(l.Max, 0)
		c.whole.hi, c.whole.hiUp = floorCeil(c.hi, most)
		c.fixed.hi, c.fixed.hiUp = floorCeil(scale(l.Max, fixedBits), most)
	}
	return nil
}

// floorCeil gives the whole numbers around r, clamped to ±most.
func floorCeil(r *big.Rat, most int64) (int64, int64) {
	q, m := new(big.Int).DivMod(r.Num(), r.Denom(), new(big.Int))
	up := new(big.Int).Set(q)
	if m.Sign() != 0 {
		up.Add(up, big.NewInt(1))
	}
	return clampBig(q, most), clampBig(up, most)
}

func clampBig(x *big.Int, most int64) int64 {
	if !x.IsInt64() {
		return int64(x.Sign()) * most
	}
	return min(max(x.Int64(), -most), most)
}

// eval is N over rates that are all there.
func (c *criterion) eval(r []int64) int64 {
	switch c.shape {
	case linear:
		var n int64
		for i, d := range c.days {
			n += c.weights[i] * r[d]
		}
		return n
	case total:
		var n int64
		for _, p := range c.pairs {
			n += magnitude(r[p[1]] - r[p[0]])
		}
		return n
	case greatest:
		var n int64
		for _, p := range c.pairs {
			n = max(n, magnitude(r[p[1]]-r[p[0]]))
		}
		return n
	case extent, step:
		return c.evalPeriods(r)
	}
	sum, least, most := spread(r, c.days)
	n := int64(len(c.days))
	return max(n*most-sum, sum-n*least)
}

// spread is the sum, the least and the greatest rate of some days.
func spread(r []int64, days []int32) (sum, least, most int64) {
	least, most = r[days[0]], r[days[0]]
	for _, d := range days {
		x := r[d]
		sum += x
		least, most = min(least, x), max(most, x)
	}
	return sum, least, most
}

// exact is the value in s/d from exact rates that are all there.
func (c *criterion) exact(rates []Rate) *big.Rat {
	n := c.exactN(exactRates(rates))
	return n.Quo(n, new(big.Rat).SetInt64(1000*c.q))
}

// exactN is N by big numbers, rates in thousandths.
func (c *criterion) exactN(rate func(d int32) *big.Rat) *big.Rat {
	n := new(big.Rat)
	switch c.shape {
	case linear:
		for i, d := range c.days {
			n.Add(n, new(big.Rat).Mul(rate(d), new(big.Rat).SetInt64(c.weights[i])))
		}
		return n
	case total, greatest:
		for _, p := range c.pairs {
			diff := new(big.Rat).Sub(rate(p[1]), rate(p[0]))
			diff.Abs(diff)
			if c.shape == total {
				n.Add(n, diff)
			} else if diff.Cmp(n) > 0 {
				n = diff
			}
		}
		return n
	case extent, step:
		return c.exactPeriods(rate)
	case root:
		return c.exactSquares(rate)
	}
	sum, count := new(big.Rat), new(big.Rat).SetInt64(int64(len(c.days)))
	for _, d := range c.days {
		sum.Add(sum, rate(d))
	}
	for _, d := range c.days {
		dev := new(big.Rat).Mul(rate(d), count)
		dev.Sub(dev, sum).Abs(dev)
		if dev.Cmp(n) > 0 {
			n = dev
		}
	}
	return n
}

// exactOutcome compares N, by big numbers, with the limits.
func (c *criterion) exactOutcome(n *big.Rat) Outcome {
	if c.lo != nil && n.Cmp(c.lo) < 0 || c.hi != nil && n.Cmp(c.hi) > 0 {
		return Outside
	}
	return Inside
}

func magnitude(x int64) int64 {
	if x < 0 {
		return -x
	}
	return x
}

func gcd(a, b int64) int64 {
	if a < 0 {
		a = -a
	}
	if b < 0 {
		b = -b
	}
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

func words(days int) int { return (days + 63) / 64 }

func has(set []uint64, d int) bool { return set[d/64]>>(d%64)&1 == 1 }

func subset(need, known []uint64) bool {
	for i, n := range need {
		if n&^known[i] != 0 {
			return false
		}
	}
	return true
}

// bitsOf is the number of bits of x > 0.
func bitsOf(x int64) uint { return uint(bits.Len64(uint64(x))) }

func criterionPath(i int) string { return fmt.Sprintf("criteria[%d]", i) }
