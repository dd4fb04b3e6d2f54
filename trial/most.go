package trial

import (
	"math/big"
	"slices"
)

// The greatest N over a box of blank days, for lower limits on magnitudes. All these N are convex,
// so that they are greatest at a corner; and all but a total are the greatest of some linear forms,
// each of which is greatest at a corner of its own.

// mostFrontier bounds how many days mostTotal keeps apart: two to that power of sums.
const mostFrontier = 12

// most is the greatest N that blank days within ±box give. It is not for sums.
func (c *criterion) most(known []uint64, rate func(d int32) *big.Rat, box *big.Rat) *big.Rat {
	switch c.shape {
	case total:
		return c.mostTotal(known, rate, box)
	case root:
		return c.mostSquares(known, rate, box)
	}
	best := new(big.Rat)
	for form := range c.forms {
		if x := corner(form, known, rate, box); x.Cmp(best) > 0 {
			best = x
		}
	}
	return best
}

// corner is the greatest value of a linear form.
func corner(form map[int32]int64, known []uint64, rate func(d int32) *big.Rat, box *big.Rat) *big.Rat {
	x := new(big.Rat)
	for d, k := range form {
		if has(known, int(d)) {
			x.Add(x, new(big.Rat).Mul(rate(d), new(big.Rat).SetInt64(k)))
		} else {
			x.Add(x, new(big.Rat).Mul(box, new(big.Rat).SetInt64(magnitude(k))))
		}
	}
	return x
}

// forms yields linear forms whose greatest is N; of a linear criterion, whose magnitude it then is,
// itself and its negative.
func (c *criterion) forms(yield func(map[int32]int64) bool) {
	both := func(form map[int32]int64) bool {
		back := map[int32]int64{}
		for d, k := range form {
			back[d] = -k
		}
		return yield(form) && yield(back)
	}
	switch c.shape {
	case linear:
		form := map[int32]int64{}
		for i, d := range c.days {
			form[d] = c.weights[i]
		}
		both(form)
	case greatest:
		for _, p := range c.pairs {
			if !both(map[int32]int64{p[1]: 1, p[0]: -1}) {
				return
			}
		}
	case deviation:
		for _, d := range c.days {
			form := map[int32]int64{}
			for _, e := range c.days {
				form[e] = -1
			}
			form[d] += int64(len(c.days))
			if !both(form) {
				return
			}
		}
	case extent, step:
		c.periodForms(both)
	}
}

func (c *criterion) periodForms(both func(map[int32]int64) bool) {
	for k := range c.periods {
		first := 0
		if c.shape == step {
			first = max(k-1, 0)
		}
		for l := first; l < k; l++ {
			form := map[int32]int64{}
			for _, d := range c.periods[k] {
				form[d]++
			}
			for _, d := range c.periods[l] {
				form[d]--
			}
			if !both(form) {
				return
			}
		}
	}
}

// mostTotal is the greatest Σ |second - first|. Day after day, the best sum so far is kept for each
// choice of corner of the blank days that still have a pair to come.
func (c *criterion) mostTotal(known []uint64, rate func(d int32) *big.Rat, box *big.Rat) *big.Rat {
	var live []int32
	best := []*big.Rat{new(big.Rat)} // by choice: bit k is live day k at +box
	at := func(d int32, choice int) *big.Rat {
		k := slices.Index(live, d)
		switch {
		case k < 0:
			return rate(d)
		case choice>>k&1 == 1:
			return box
		}
		return new(big.Rat).Neg(box)
	}
	for _, d := range c.days {
		if !has(known, int(d)) {
			live = append(live, d)
			best = append(best, best...)
		}
		for choice := range best {
			sum := new(big.Rat).Set(best[choice])
			for _, p := range c.pairs {
				if max(p[0], p[1]) == d {
					diff := new(big.Rat).Sub(at(p[1], choice), at(p[0], choice))
					sum.Add(sum, diff.Abs(diff))
				}
			}
			best[choice] = sum
		}
		for k := len(live) - 1; k >= 0; k-- {
			if c.lastPartner(live[k]) <= d {
				best, live = forget(best, k), slices.Delete(live, k, k+1)
			}
		}
	}
	return best[0]
}

// forget keeps the better of both choices of live day k.
func forget(best []*big.Rat, k int) []*big.Rat {
	out := make([]*big.Rat, len(best)/2)
	for choice, x := range best {
		rest := choice&(1<<k-1) | choice>>(k+1)<<k
		if out[rest] == nil || x.Cmp(out[rest]) > 0 {
			out[rest] = x
		}
	}
	return out
}

// lastPartner is the latest day of the pairs of a day.
func (c *criterion) lastPartner(d int32) int32 {
	last := int32(-1)
	for _, p := range c.pairs {
		if p[0] == d || p[1] == d {
			last = max(last, p[0], p[1])
		}
	}
	return last
}

// frontier is the greatest number of days mostTotal keeps at once if all are blank.
func (c *criterion) frontier() int {
	most, live := 0, []int32{}
	for _, d := range c.days {
		live = append(live, d)
		most = max(most, len(live))
		live = slices.DeleteFunc(live, func(e int32) bool { return c.lastPartner(e) <= d })
	}
	return most
}
