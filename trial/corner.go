package trial

import (
	"math/big"
	"slices"
)

// A weighted sum whose magnitudes all push it up is convex, and greatest at a corner of the box of
// blank days; one whose magnitudes all pull it down is least at one. The solver's flat sides answer
// the other two questions.

// mostCorners bounds the blank days of which every corner is tried: two to that power.
const mostCorners = 10

// bent tells which way a sum bends over the blank days: convex, concave, both if it is linear there,
// neither if its magnitudes pull both ways.
func (j *Judge) bent(c *criterion, known []uint64) (convex, concave bool) {
	convex, concave = true, true
	for _, a := range c.addends {
		e := &j.crits[a.at]
		up, down := true, false // of a magnitude
		switch {
		case subset(e.need, known) || a.factor.Sign() == 0 || e.shape == linear && !a.absolute:
			continue
		case e.shape == mixed && !a.absolute:
			up, down = j.bent(e, known)
		case e.shape == mixed:
			return false, false
		}
		if a.factor.Sign() < 0 {
			up, down = down, up
		}
		convex, concave = convex && up, concave && down
	}
	return convex, concave
}

// cornered tells whether some corner keeps the limits of a sum that only a corner can keep; true
// where corners have no say, or are too many to try.
func (j *Judge) cornered(i int, known []uint64, sit situation) bool {
	c, l := &j.crits[i], j.Limit(i)
	convex, concave := j.bent(c, known)
	blank := slices.DeleteFunc(slices.Clone(c.days), func(d int32) bool { return has(known, int(d)) })
	low, high := l.HasMin && convex && !concave, l.HasMax && concave && !convex
	if !low && !high || len(blank) > mostCorners {
		return true
	}
	box := big.NewRat(unreachableBox, 1)
	for corner := range 1 << len(blank) {
		v := j.valueOf(int32(i), func(d int32) *big.Rat {
			k := slices.Index(blank, d)
			switch {
			case k < 0:
				return sit.exactRate(d)
			case corner>>k&1 == 1:
				return box
			}
			return new(big.Rat).Neg(box)
		})
		if (!low || v.Cmp(l.Min) >= 0) && (!high || v.Cmp(l.Max) <= 0) {
			return true
		}
	}
	return false
}
