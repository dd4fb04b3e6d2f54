package trial

import (
	"math/big"
	"slices"
)

// unreachable tells whether no values of the blank days within ±60 s/d bring criterion i, by
// itself, inside its limits. Fixed-point rates are off by less than one unit each, which moves N
// by at most lip whatever the blank days hold: so limits widened by lip that cannot be reached
// prove it, limits drawn in by lip that can be reached disprove it, and only in between is the
// exact system asked.
func (j *Judge) unreachable(i int, known []uint64, m *reading) bool {
	c := &j.crits[i]
	b, err, box := c.whole, int64(0), int64(unreachableBox)
	if m.rates != nil {
		b, err, box = c.fixed, c.lip, box<<j.fixedBits
	}
	if c.shape.plain() && !c.overlap {
		if !c.reach(m.r, known, b.lo-err, b.hiUp+err, box) {
			return true
		}
		if err == 0 && b.lo == b.loUp && b.hi == b.hiUp {
			return false
		}
		if c.reach(m.r, known, b.loUp+err, b.hi-err, box) {
			return false
		}
	}
	return !j.reachable(i, slices.Clone(known), j.situation(known, m))
}

// reachable is the opposite by exact numbers. The values of N over the box are one interval, so
// that it is enough that the upper limit can be kept (the solver says) and the lower one reached (a
// corner says). Of a weighted sum whose magnitudes pull both ways, or with a standard deviation that
// pulls towards the limit, only what the addends can reach each by itself is known, and of one with
// more than ten blank days corners are not tried: there true may be too hopeful, false never wrong.
func (j *Judge) reachable(i int, known []uint64, sit situation) bool {
	c, box := &j.crits[i], big.NewRat(unreachableBox, 1)
	switch {
	case c.shape == root && c.hi != nil && c.leastSquares(known, sit.exactRate, box).Cmp(c.hi) > 0:
		return false
	case c.shape != root && !j.feasible([]int{i}, true, known, sit):
		return false
	case c.shape == mixed:
		return j.cornered(i, known, sit)
	}
	if c.lo == nil || c.lo.Sign() <= 0 || c.shape == linear {
		return true
	}
	return c.most(known, sit.exactRate, box).Cmp(c.lo) >= 0
}

// reach tells whether some real values of the blank days within ±box bring N into [lo, hi]. N is
// continuous over the box, so its values there are one interval: it is enough that its least
// value is not above hi and its greatest not below lo. Pairs must not share days.
func (c *criterion) reach(r []int64, known []uint64, lo, hi, box int64) bool {
	if lo > hi {
		return false
	}
	switch c.shape {
	case linear:
		var sum, span int64
		for i, d := range c.days {
			if has(known, int(d)) {
				sum += c.weights[i] * r[d]
			} else {
				span += int64(abs64(c.weights[i])) * box
			}
		}
		return sum-span <= hi && sum+span >= lo
	case total, greatest:
		least, most := c.pairRange(r, known, box)
		return least <= hi && most >= lo
	}
	return c.reachDeviation(r, known, lo, hi, box)
}

// pairRange is the least and the greatest N of pairs.
func (c *criterion) pairRange(r []int64, known []uint64, box int64) (least, most int64) {
	for _, p := range c.pairs {
		a, b := has(known, int(p[0])), has(known, int(p[1]))
		var lo, hi int64
		switch {
		case a && b:
			lo = magnitude(r[p[1]] - r[p[0]])
			hi = lo
		case a:
			lo, hi = max(0, magnitude(r[p[0]])-box), magnitude(r[p[0]])+box
		case b:
			lo, hi = max(0, magnitude(r[p[1]])-box), magnitude(r[p[1]])+box
		default:
			hi = 2 * box
		}
		if c.shape == total {
			least, most = least+lo, most+hi
		} else {
			least, most = max(least, lo), max(most, hi)
		}
	}
	return least, most
}

// reachDeviation is reach for n·(greatest deviation). N is convex and does not change when blank
// days swap values, so its least value lies where all b blank days hold one value x: there every
// condition is linear in x. Its greatest value lies at a corner of the box.
func (c *criterion) reachDeviation(r []int64, known []uint64, lo, hi, box int64) bool {
	var sum, least, most, seen int64
	for _, d := range c.days {
		if !has(known, int(d)) {
			continue
		}
		if x := r[d]; seen == 0 {
			least, most = x, x
		} else {
			least, most = min(least, x), max(most, x)
		}
		sum += r[d]
		seen++
	}
	n := int64(len(c.days))
	b := n - seen
	if hi < 0 || lo > 0 && !farCorner(sum, least, most, seen, b, lo, box) {
		return false
	}
	if seen == 0 {
		return true
	}
	// |n·k - sum - b·x| <= hi for the known extremes, |x| <= box: bounds of b·x.
	from := max(-b*box, n*most-sum-hi)
	to := min(b*box, n*least-sum+hi)
	// |n·x - sum - b·x| = |seen·x - sum| <= hi: bounds of seen·x. Compare both as bounds of seen·b·x.
	return max(seen*from, b*(sum-hi)) <= min(seen*to, b*(sum+hi))
}

// farCorner tells whether N reaches lo at some corner of the box: k of the b blank days at +box,
// the others at -box.
func farCorner(sum, least, most, seen, b, lo, box int64) bool {
	n := seen + b
	for k := int64(0); k <= b; k++ {
		s, low, high := sum+(2*k-b)*box, least, most
		if seen == 0 {
			low, high = box, -box
		}
		if k < b {
			low = min(low, -box)
			high = max(high, -box)
		}
		if k > 0 {
			low, high = min(low, box), max(high, box)
		}
		if max(n*high-s, s-n*low) >= lo {
			return true
		}
	}
	return false
}
