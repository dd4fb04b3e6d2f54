package conformity

import (
	"cmp"
	"slices"

	"ratehouse/trial"
)

// Hinge is the smallest change of one single reading that flips a verdict: look at this reading
// before the verdict leaves the house.
type Hinge struct {
	Reading   Reading
	Change    trial.State   // whole thousandths of a second by which the state would have to differ
	Criterion int           // the criterion that goes outside, or the last one that comes inside
	To        trial.Verdict // what the verdict would be
}

// mostChange bounds the changes looked at, thousandths of a second: what no dial can be misread by.
const mostChange = 600_000

// Hinges lists, for every reading that bounds a day and can flip the verdict alone, the smallest
// change that does, smallest first; equal ones by reading, then the positive one first. Rates are in
// s/d by programme day, exact; l says which readings they share. Everything is decided by the judge
// itself on states changed by whole thousandths, so no float is involved. An open movement can flip
// to fail, a failed one to pass or open; without limits, or where no change of up to 600 s of one
// reading is enough, the list is empty. Where a limit of the programme makes the conforming set of a
// criterion more than one interval (a lower limit on a magnitude, weighted sums of mixed signs),
// changes of up to 5 s are tried one by one and larger ones not looked at.
func Hinges(j *trial.Judge, rates []trial.Rate, l Layout) []Hinge {
	s := newSwing(j, rates, l)
	if s.verdict == trial.None {
		return nil
	}
	var list []Hinge
	for _, r := range l.readings() {
		if s.take(r) {
			for _, s.sign = range []int64{1, -1} {
				list = s.append(list)
			}
		}
	}
	slices.SortStableFunc(list, func(a, b Hinge) int { return cmp.Compare(max(a.Change, -a.Change), max(b.Change, -b.Change)) })
	return list
}

// readings lists the readings that bound days, each once, in order of the steps.
func (l Layout) readings() []Reading {
	var list []Reading
	for _, s := range l {
		if s.Seconds > 0 {
			list = append(list, s.From, s.To)
		}
	}
	slices.SortStableFunc(list, func(a, b Reading) int {
		return cmp.Or(cmp.Compare(a.Step, b.Step), cmp.Compare(btoi(a.Left), btoi(b.Left)))
	})
	return slices.CompactFunc(list, Reading.same)
}

func btoi(b bool) int {
	if b {
		return 1
	}
	return 0
}

// swing moves one reading of a movement.
type swing struct {
	judge    *trial.Judge
	layout   Layout
	rates    []trial.Rate
	moved    []trial.Rate
	result   trial.Result
	verdict  trial.Verdict
	outcomes []trial.Outcome
	above    []bool // outside, beyond the upper limit
	convex   bool
	reading  Reading
	days     []int // from 0, that the reading bounds
	sign     int64
}

func newSwing(j *trial.Judge, rates []trial.Rate, l Layout) *swing {
	s := &swing{judge: j, layout: l, rates: make([]trial.Rate, len(j.Programme().Days)), convex: convex(j)}
	copy(s.rates, rates)
	s.moved = slices.Clone(s.rates)
	j.Rates(s.rates, &s.result)
	s.verdict = s.result.Verdict
	for i, v := range s.result.Values {
		limit := j.Limit(i)
		s.outcomes = append(s.outcomes, v.Outcome)
		s.above = append(s.above, v.Outcome == trial.Outside && limit.HasMax && v.Cmp(limit.Max) > 0)
	}
	return s
}

// take chooses the reading to move; false if no rate hangs on it.
func (s *swing) take(r Reading) bool {
	s.reading, s.days = r, s.days[:0]
	copy(s.moved, s.rates)
	for d, stretch := range s.layout[:min(len(s.layout), len(s.rates))] {
		bounds := stretch.From.same(r) || stretch.To.same(r)
		if bounds && stretch.Seconds > 0 && s.rates[d].Known() {
			s.days = append(s.days, d)
		}
	}
	return len(s.days) > 0
}

// at judges the movement with the reading changed by so many thousandths in the direction of sign.
func (s *swing) at(change int64) *trial.Result {
	for _, d := range s.days {
		by := s.sign * change
		if s.layout[d].From.same(s.reading) {
			by = -by
		}
		s.moved[d] = s.rates[d].Shifted(by, s.layout[d].Seconds)
	}
	s.judge.Rates(s.moved, &s.result)
	return &s.result
}

// append appends the hinge of the reading in the direction of sign, if there is one.
func (s *swing) append(list []Hinge) []Hinge {
	var change int64
	last := -1
	switch {
	case !s.convex:
		change = s.scan()
	case s.verdict == trial.Fail:
		change, last = s.rescue()
	default:
		change = first(mostChange, func(c int64) bool { return s.at(c).Verdict == trial.Fail })
	}
	if change == 0 {
		return list
	}
	r := s.at(change)
	h := Hinge{Reading: s.reading, Change: trial.State(s.sign * change), To: r.Verdict, Criterion: last}
	if last < 0 {
		h.Criterion = s.flipped(r)
	}
	return append(list, h)
}

// flipped is the first criterion that goes outside, or came inside.
func (s *swing) flipped(r *trial.Result) int {
	for i, v := range r.Values {
		if v.Outcome != s.outcomes[i] && (v.Outcome == trial.Outside) != (s.verdict == trial.Fail) {
			return i
		}
	}
	return 0
}

// scan is the smallest change that flips, tried one by one; 0 if none does.
func (s *swing) scan() int64 {
	const most = 5_000
	for c := int64(1); c <= most; c++ {
		if s.at(c).Verdict != s.verdict {
			return c
		}
	}
	return 0
}

// rescue is the smallest change that brings every criterion outside inside while the others stay,
// with the last criterion to come; 0 if there is none. Along the change the conforming set of each
// criterion is one interval, so it is enough that the latest beginning is not after the first end.
func (s *swing) rescue() (change int64, last int) {
	for i, o := range s.outcomes {
		if o != trial.Outside {
			continue
		}
		near := s.enter(i)
		if near == 0 {
			return 0, -1
		}
		if near > change {
			change, last = near, i
		}
	}
	if s.at(change).Verdict == trial.Fail {
		return 0, -1
	}
	return change, last
}

// enter is the smallest change at which criterion i lies inside; 0 if none does. Towards its limit
// the criterion falls (or rises) up to where it turns.
func (s *swing) enter(i int) int64 {
	nearer := func(a, b trial.Exact) bool { // a is nearer to conforming than b
		if s.above[i] {
			return a.Cmp(b) < 0
		}
		return a.Cmp(b) > 0
	}
	value := func(c int64) trial.Exact { return s.at(c).Values[i].Exact }
	if !nearer(value(1), value(0)) {
		return 0
	}
	turn := first(mostChange, func(c int64) bool { return !nearer(value(c+1), value(c)) })
	if turn == 0 {
		turn = mostChange
	}
	limit := s.judge.Limit(i)
	near := first(turn, func(c int64) bool {
		if s.above[i] {
			return value(c).Cmp(limit.Max) <= 0
		}
		return value(c).Cmp(limit.Min) >= 0
	})
	if near == 0 || s.at(near).Values[i].Outcome != trial.Inside {
		return 0
	}
	return near
}

// first is the smallest number from 1 to most at which a condition holds that, once it holds, holds
// on; 0 if it never does.
func first(most int64, holds func(int64) bool) int64 {
	if !holds(most) {
		return 0
	}
	lo, hi := int64(0), most // not at lo, at hi
	for hi-lo > 1 {
		if mid := (lo + hi) / 2; holds(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi
}
