package trial

import "math/big"

// A standard deviation is √(N / (n · divisor)) with N = n·Σ rate² - (Σ rate)², divisor n or n-1.
// Its limits are compared as squares, so that no root is ever taken for a verdict.

func (p *Programme) rooted(days []int, divisor string) criterion {
	n := int64(len(days))
	c := criterion{shape: root, q: 1, lip: 1, under: n * n}
	if divisor == "n-1" {
		c.under = n * (n - 1)
	}
	c.require(p, days)
	return c
}

// exactSquares is N of a standard deviation, in squares of thousandths.
func (c *criterion) exactSquares(rate func(d int32) *big.Rat) *big.Rat {
	sum, squares, _ := c.seen(c.need, rate)
	return c.squares(sum, squares)
}

// wholeSquares is exactSquares for rates within rateBits: at most 366² · 2^44, below 2^62.
func (c *criterion) wholeSquares(r []int64) int64 {
	var sum, squares int64
	for _, d := range c.days {
		sum += r[d]
		squares += r[d] * r[d]
	}
	return int64(len(c.days))*squares - sum*sum
}

// squares is n·Σ rate² - (Σ rate)².
func (c *criterion) squares(sum, squares *big.Rat) *big.Rat {
	n := new(big.Rat).SetInt64(int64(len(c.days)))
	return n.Sub(n.Mul(n, squares), new(big.Rat).Mul(sum, sum))
}

// rootOf is the standard deviation in s/d whose N is given.
func (c *criterion) rootOf(n *big.Rat) Exact {
	return Root(new(big.Rat).Quo(n, new(big.Rat).SetInt64(1_000_000*c.under)))
}

// limitSquares sets limits of N: a limit of the deviation becomes its square. One below zero never
// cuts anything as a lower limit, and everything as an upper one.
func (c *criterion) limitSquares(l Limit) {
	square := func(e Exact) *big.Rat {
		r := e.Rat()
		return r.Mul(r, r).Mul(r, new(big.Rat).SetInt64(1_000_000*c.under))
	}
	if l.HasMin && l.Min.Sign() > 0 {
		c.lo = square(l.Min)
	}
	if l.HasMax {
		if c.hi = square(l.Max); l.Max.Sign() < 0 {
			c.hi.SetInt64(-1)
		}
	}
}

// leastSquares is the least N that real values of the blank days give, within ±box unless it is nil.
// N is convex and does not change when blank days swap values, so that it is least where they all
// hold one value x; there it is a parabola in x with its vertex at the mean of the known rates.
func (c *criterion) leastSquares(known []uint64, rate func(d int32) *big.Rat, box *big.Rat) *big.Rat {
	sum, squares, seen := c.seen(known, rate)
	if seen == 0 {
		return new(big.Rat)
	}
	x := new(big.Rat).Quo(sum, new(big.Rat).SetInt64(seen))
	if box != nil {
		if low := new(big.Rat).Neg(box); x.Cmp(low) < 0 {
			x = low
		} else if x.Cmp(box) > 0 {
			x = box
		}
	}
	blank := new(big.Rat).SetInt64(int64(len(c.days)) - seen)
	sum.Add(sum, new(big.Rat).Mul(blank, x))
	squares.Add(squares, blank.Mul(blank, x).Mul(blank, x))
	return c.squares(sum, squares)
}

// mostSquares is the greatest N within ±box: at a corner, where so many blank days are at +box and
// the others at -box.
func (c *criterion) mostSquares(known []uint64, rate func(d int32) *big.Rat, box *big.Rat) *big.Rat {
	sum, squares, seen := c.seen(known, rate)
	b := int64(len(c.days)) - seen
	far := new(big.Rat).Mul(box, box)
	squares.Add(squares, far.Mul(far, new(big.Rat).SetInt64(b)))
	var best *big.Rat
	for k := -b; k <= b; k += 2 {
		s := new(big.Rat).Mul(box, new(big.Rat).SetInt64(k))
		if n := c.squares(s.Add(s, sum), squares); best == nil || n.Cmp(best) > 0 {
			best = n
		}
	}
	return best
}

// seen sums the known rates and their squares.
func (c *criterion) seen(known []uint64, rate func(d int32) *big.Rat) (sum, squares *big.Rat, n int64) {
	sum, squares = new(big.Rat), new(big.Rat)
	for _, d := range c.days {
		if has(known, int(d)) {
			x := rate(d)
			sum.Add(sum, x)
			squares.Add(squares, new(big.Rat).Mul(x, x))
			n++
		}
	}
	return sum, squares, n
}
