package balance

import "ratehouse/trial"

// Card is what the calibre card says of regulating: the organ (an index, timing screws) and what one
// unit of it, a division or a turn, does to the rate.
type Card struct {
	Organ string      // a code: index, screws; empty: not known
	Step  trial.Milli // s/d a unit, above zero; 0: not known
}

// Units is a shift in units of the organ, thousandths of a division or turn, rounded towards the
// middle of the interval, so that turning by either end is enough. ok is false without a step or if
// no thousandth lies inside.
func (c Card) Units(s Shift) (lo, hi trial.Milli, ok bool) {
	if c.Step <= 0 {
		return 0, 0, false
	}
	step := int64(c.Step)
	lo = trial.Milli(-floorDiv(-int64(s.Lo)*1000, step))
	hi = trial.Milli(floorDiv(int64(s.Hi)*1000, step))
	return lo, hi, lo <= hi
}

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b != 0 && a < 0 {
		q--
	}
	return q
}
