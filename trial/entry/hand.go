package entry

import "ratehouse/trial"

// Unwrapped is a reading of the seconds hand with the whole turns chosen for it (practice.md E2): the
// hand as read stays, so that the choice can be taken back.
type Unwrapped struct {
	State trial.State // less the reference, 60 s turns included
	Turns int64       // State = (hand - pip) mod 60 s, from 0 on, + 60 s · Turns
}

// Unwrap chooses the turns nearest to the expected state (E1). hand is where the seconds hand stands
// at the pip, pip the second of the pip, both thousandths of a second.
func Unwrap(hand, pip int64, expected trial.State) Unwrapped {
	return unwrapped(nearest(hand-pip, int64(expected), Minute60))
}

func unwrapped(state int64) Unwrapped {
	turns := state / Minute60
	if state%Minute60 < 0 {
		turns--
	}
	return Unwrapped{trial.State(state), turns}
}

// Candidates lists the states a reading of the seconds hand can mean within reach of the expected one,
// the nearest first; all thousandths of a second.
func Candidates(hand, pip int64, expected trial.State, reach int64) (out []Unwrapped) {
	first := nearest(hand-pip, int64(expected), Minute60)
	add := func(state int64) {
		if magnitude(state-int64(expected)) <= reach {
			out = append(out, unwrapped(state))
		}
	}
	add(first)
	for n := int64(Minute60); n <= reach+Minute60; n += Minute60 {
		if first >= int64(expected) { // then the one below is nearer
			add(first - n)
			add(first + n)
		} else {
			add(first + n)
			add(first - n)
		}
	}
	return out
}

// CheckHand unwraps a reading of the seconds hand about its expectation and checks it. A state
// farther than 20 s/d from the expectation is asked again even inside a wide band, since the turns are
// not sure there (E1): OtherTurn. Where nothing is expected, as at the start, the state is the one
// nearest to zero.
func CheckHand(e *Expectation, hand, pip int64) (Unwrapped, *Suspect) {
	if !e.Known {
		return Unwrap(hand, pip, 0), nil
	}
	u := Unwrap(hand, pip, trial.State(e.Centre))
	off := magnitude(int64(u.State) - e.Centre)
	if off <= min(e.Band, e.Near) {
		return u, nil
	}
	s := e.suspect(int64(u.State), hand, pip)
	if off > e.Near && s.Slip == Odd {
		s.Slip = OtherTurn
	}
	return u, s
}

// Recount takes another choice of turns at step from to all later states of a movement at once (E2):
// up to the next step at which the hands were set, where a count of its own begins.
func Recount(cells []trial.Cell, from int, turns int64) {
	for k := from; k < len(cells); k++ {
		if cells[k].HasFound {
			cells[k].Found += trial.State(turns * Minute60)
		}
		if cells[k].HasLeft {
			return
		}
	}
}

// Anchor is what shows that no whole minute a day is hidden behind the seconds hand (practice.md E1,
// W8). Any one of the two will do; without one nothing may be released.
type Anchor struct {
	Quick       trial.Rate   // rate of the quick check, or an instantaneous one
	First, Last *trial.State // hours and minutes at the first and the last round, as states
}

// AnchorResult is a code.
type AnchorResult string

// What an anchor shows. Two seconds readings half an hour apart are good to some 10 s/d, well within
// the 20 s/d that decide between minutes; hours and minutes must agree to half a minute a day.
const (
	NoAnchor    AnchorResult = "no_anchor"
	AnchorHolds AnchorResult = "anchored"
	OffQuick    AnchorResult = "off_quick_check"
	OffMinutes  AnchorResult = "off_minute_hand"
)

// Anchored tests a series read by the seconds hand: its first rate, and its unwrapped states at the
// first and the last round, whole days apart. What is there must agree.
func (a Anchor) Anchored(first trial.Rate, begin, end trial.State, days int64) AnchorResult {
	result := NoAnchor
	if a.Quick.Known() && first.Known() {
		d := first.Exact().Sub(a.Quick.Exact())
		if bound := trial.Ratio(nearRate, 1); d.Cmp(bound) > 0 || d.Neg().Cmp(bound) > 0 {
			return OffQuick
		}
		result = AnchorHolds
	}
	if a.First != nil && a.Last != nil && days > 0 {
		if magnitude(int64(*a.Last-*a.First)-int64(end-begin)) >= days*Minute60/2 {
			return OffMinutes
		}
		result = AnchorHolds
	}
	return result
}

// QuickRate is the rate of the quick check: two readings of the seconds hand, each with the second of
// its pip, so many seconds apart by the reference (W8). The zero Rate below 1,800 s, where reading to
// 0.1 s would no longer tell minutes a day apart.
func QuickRate(hand1, pip1, hand2, pip2, seconds int64) trial.Rate {
	const least = 1800
	if seconds < least {
		return trial.Rate{}
	}
	gained := Fold((hand2-pip2)-(hand1-pip1), Minute60)
	return trial.RateBetween(0, trial.State(gained), seconds)
}
