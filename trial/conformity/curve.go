package conformity

import "ratehouse/trial"

// curve says how a criterion bends as a function of the rates.
type curve uint8

const (
	straight curve = iota
	cup            // convex
	vault          // concave
	mixed
)

// convex tells whether the rates that satisfy each limited criterion form a convex set.
func convex(j *trial.Judge) bool {
	p := j.Programme()
	for i, c := range p.Criteria {
		l, bend := j.Limit(i), curveOf(p, c.Formula)
		low := l.HasMin && !(l.Min.Sign() <= 0 && magnitude(c.Formula.Kind)) // a magnitude is never below zero
		if bend == mixed && l.Any() || l.HasMax && bend == vault || low && bend == cup {
			return false
		}
	}
	return true
}

// magnitude tells the kinds that are never negative.
func magnitude(k trial.Kind) bool {
	switch k {
	case trial.Mean, trial.Difference, trial.PerDegree, trial.WeightedSum:
		return false
	}
	return true
}

func curveOf(p *trial.Programme, f trial.Formula) curve {
	switch {
	case magnitude(f.Kind):
		return cup
	case f.Kind != trial.WeightedSum:
		return straight
	}
	sum := straight
	for _, t := range f.Terms {
		sum = sum.plus(termCurve(p, t))
	}
	return sum
}

func termCurve(p *trial.Programme, t trial.Term) curve {
	c, _ := p.Criterion(t.Symbol)
	bend := curveOf(p, c.Formula)
	if t.Absolute && !magnitude(c.Formula.Kind) {
		if bend != straight {
			return mixed
		}
		bend = cup
	}
	switch {
	case t.Weight.Sign() == 0:
		return straight
	case t.Weight.Sign() < 0 && bend == cup:
		return vault
	case t.Weight.Sign() < 0 && bend == vault:
		return cup
	}
	return bend
}

func (c curve) plus(d curve) curve {
	switch {
	case c == straight || c == d:
		return d
	case d == straight:
		return c
	}
	return mixed
}
