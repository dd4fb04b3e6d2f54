package entry

// Suspect is what a value that is asked again most likely is.
type Suspect struct {
	Slip     Slip
	By       int64 // thousandths, or which neighbour
	Instead  int64 // what the value would have been, thousandths; meaningless for Odd, Neighbour, Repeated, OtherHand, Unknown
	Permille int64 // likelihood of this slip among all that may explain the value, Odd included
}

// Check tells whether a value smells: nil is nothing, else it is asked again, blind, and Suspect is
// shown only afterwards (practice.md E8). Asked again is what lies farther from the expectation than
// its band, to either side alike. Whole numbers only, divisions towards zero, nothing beyond 2^53: a page
// can carry the same function.
func Check(e *Expectation, value int64) *Suspect {
	if !e.Known || magnitude(value-e.Centre) <= e.Band {
		return nil
	}
	return e.suspect(value, value, 0)
}

// suspect names what a value most likely is that is asked again.
func (e *Expectation) suspect(value, typed, pip int64) *Suspect {
	t := &tally{e: e, typed: typed, pip: pip, best: Suspect{Slip: Odd}}
	t.count(Odd, 0, value, (perReadings-e.slipping())*e.weight(value))
	for _, s := range e.Slips {
		t.try(s, value)
	}
	t.best.Permille = 1000 * t.most / max(1, t.total)
	return &t.best
}

// slipping is how often any slip happens.
func (e *Expectation) slipping() (rate int64) {
	for _, s := range e.Slips {
		rate += s.Rate
	}
	return rate
}

// weight is how likely a right value is there, on the scale of Shape.
func (e *Expectation) weight(v int64) int64 { return weigh(e.Shape, v-e.Centre, e.Band) }

// weigh reads Shape between its entries.
func weigh(shape []int64, off, band int64) int64 {
	off = magnitude(off)
	step := max(1, band/shapeParts)
	i := off / step
	if i >= int64(len(shape)-1) {
		return shape[len(shape)-1]
	}
	return shape[i] + (shape[i+1]-shape[i])*(off%step)/step
}

// tally adds up what explains a value.
type tally struct {
	e           *Expectation
	typed, pip  int64 // as typed: OfHand the hand, whose turns are not in it
	best        Suspect
	most, total int64
}

func (t *tally) count(s Slip, by, instead, weight int64) {
	t.total += weight
	if weight > t.most {
		t.most, t.best = weight, Suspect{Slip: s, By: by, Instead: instead}
	}
}

// try counts one slip: how often it happens times how likely the value is if it did.
func (t *tally) try(s SlipRate, v int64) {
	e := t.e
	was := func(x, share int64) {
		if e.Kind == OfHand {
			x = nearest(x, e.Centre, Minute60)
		}
		t.count(s.Slip, s.By, x, s.Rate*e.weight(x)/share)
	}
	switch s.Slip {
	case Figure, Tail, Minute:
		was(v-s.By, 1)
	case Sign:
		was(-v, 1)
	case Mirror:
		was(-t.typed-t.pip, 1)
	case Point:
		was(v*10, 2)
		was(v/10, 2)
	case Transposed:
		list := swaps(t.typed)
		for _, x := range list {
			was(x-t.pip, int64(len(list)))
		}
	case Neighbour:
		for _, n := range e.Neighbours {
			x := v
			if e.Kind == OfHand {
				x = nearest(v, n.Centre, Minute60)
			}
			t.count(s.Slip, n.By, 0, s.Rate*(weigh(e.Shape, x-n.Centre, n.Band)*e.Band/n.Band))
		}
	case Repeated:
		if e.Has && t.typed == e.Previous {
			t.count(s.Slip, 0, 0, s.Rate*e.One)
		}
	case OtherHand: // anywhere on the dial
		t.count(s.Slip, 0, 0, s.Rate*e.One/600)
	case Unknown: // anywhere within a minute to either side
		t.count(s.Slip, 0, 0, s.Rate*e.One/1200)
	}
}

// swaps lists the values that differ by two neighbouring digits swapped; of a value in whole tenths no
// finer digit takes part.
func swaps(v int64) (out []int64) {
	unit := int64(1)
	if v%tenth == 0 {
		unit = tenth
	}
	sign := int64(1)
	if v < 0 {
		sign = -1
	}
	for at := unit; magnitude(v) >= at*10; at *= 10 {
		low, high := magnitude(v)/at%10, magnitude(v)/(at*10)%10
		if low != high {
			out = append(out, v+sign*(low-high)*9*at)
		}
	}
	return out
}

func magnitude(x int64) int64 {
	if x < 0 {
		return -x
	}
	return x
}
