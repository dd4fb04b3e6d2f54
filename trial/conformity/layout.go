package conformity

import "ratehouse/trial"

// Layout says, for each programme day, which two readings bound it. Which readings days share
// decides how their rates hang together: a layout is what makes a covariance right.
type Layout []Stretch

// Stretch is one programme day between two readings.
type Stretch struct {
	From, To Reading
	Seconds  int64 // elapsed between them; 0: the day has no rate
	Typed    bool  // a rate without states: that it shares readings with its neighbours is assumed
}

// Reading is one state as read: at which step, as found or as left, by which method, and where the
// seconds hand stood if that is known.
type Reading struct {
	Step    int
	Left    bool
	Method  string
	Hand    trial.Milli // seconds on the dial, 0 to 59.999
	HasHand bool
}

// same tells one reading from another.
func (r Reading) same(o Reading) bool { return r.Step == o.Step && r.Left == o.Left }

// Chain is the layout of one shared reading a programme day, as far apart as the programme reads: day
// d from reading d-1 to reading d. It is what `ratehouse judge` assumes for rates and for states alike.
func Chain(p *trial.Programme) Layout {
	l := make(Layout, len(p.Days))
	for d := range l {
		l[d] = Stretch{From: Reading{Step: d}, To: Reading{Step: d + 1}, Seconds: p.Reading.IntervalS}
	}
	return l
}

// Recorded is the layout of readings as they were recorded, by the same rules as
// trial.Programme.Assemble: a stretch starts at the state as left, if the hands were set, else at
// the one as found; when several steps close one day the latest counts. A day with a typed rate
// only is marked Typed and taken as one of a Chain.
func Recorded(p *trial.Programme, steps []trial.Step, cells []trial.Cell) Layout {
	l := make(Layout, len(p.Days))
	for k := range min(len(steps), len(cells)) {
		d := steps[k].Day
		if d < 1 || d > len(l) || k == 0 {
			continue
		}
		l[d-1] = recorded(k, cells[k-1], cells[k], p.Reading.IntervalS)
	}
	return l
}

func recorded(k int, from, to trial.Cell, interval int64) Stretch {
	s := Stretch{From: reading(k-1, from.HasLeft, from), To: reading(k, false, to)}
	switch {
	case to.HasFound && (from.HasLeft || from.HasFound) && from.At != 0 && to.At > from.At:
		s.Seconds = to.At - from.At
	case to.HasRate:
		s.Seconds, s.Typed = interval, true
		s.From, s.To = Reading{Step: k - 1}, Reading{Step: k}
	default:
		return Stretch{}
	}
	return s
}

// reading notes where the hand stood: the second of the reference at the reading plus the state.
func reading(step int, left bool, c trial.Cell) Reading {
	r := Reading{Step: step, Left: left}
	state := c.Found
	if left {
		state = c.Left
	}
	if r.HasHand = c.At != 0 && (left || c.HasFound); r.HasHand {
		const dial = 60_000
		r.Hand = trial.Milli(((c.At%60*1000+int64(state))%dial + dial) % dial)
	}
	return r
}
