package balance

import "ratehouse/trial"

// Shift is a closed interval of what could be added to every rate alike, thousandths of s/d. Above
// zero is a gain.
type Shift struct{ Lo, Hi trial.Milli }

// mostShift bounds the shifts looked at: 600 s/d.
const mostShift = 600_000

// Regulation is the interval of shifts, added to all rates alike, with which a movement passes: what
// regulating alone can do. A shift moves a mean rate and leaves variations, differences, deviations,
// thermal slope and resumption as they are, so the movement must pass all else already. ok is false
// if it does not, if some limited criterion is undecided, or if no whole thousandth is inside. A
// movement that passes as it is has an interval around zero. A side nothing limits ends at 600 s/d.
//
// The ends are exact: the bounds come from the criteria that move with the shift, and the judge
// confirms both. A programme with a criterion that neither moves evenly nor stays (a weighted sum)
// has ok false when the judge does not.
func Regulation(j *trial.Judge, rates []trial.Rate) (s Shift, ok bool) {
	var r trial.Result
	j.Rates(rates, &r)
	for i, v := range r.Values {
		if j.Limit(i).Any() && !v.Known {
			return Shift{}, false
		}
	}
	s = meanShift(j, &r)
	ok = s.Lo <= s.Hi && passes(j, rates, s.Lo) && passes(j, rates, s.Hi)
	if !ok {
		return Shift{}, false
	}
	return s, true
}

// meanShift is the interval of shifts that brings the decided means inside, whatever the rest.
func meanShift(j *trial.Judge, r *trial.Result) Shift {
	s := Shift{-mostShift, mostShift}
	for i, v := range r.Values {
		if !v.Known || j.Programme().Criteria[i].Formula.Kind != trial.Mean {
			continue
		}
		l := j.Limit(i)
		if l.HasMin {
			s.Lo = max(s.Lo, -floor(v.Sub(l.Min)))
		}
		if l.HasMax {
			s.Hi = min(s.Hi, floor(l.Max.Sub(v.Exact)))
		}
	}
	return s
}

// passes judges rates all shifted alike.
func passes(j *trial.Judge, rates []trial.Rate, by trial.Milli) bool {
	var r trial.Result
	moved := make([]trial.Rate, len(rates))
	for d, x := range rates {
		moved[d] = x.Shifted(int64(by), trial.SecondsPerDay)
	}
	j.Rates(moved, &r)
	return r.Verdict == trial.Pass
}

// floor is the greatest whole thousandth not above a number, bounded by mostShift either way.
func floor(e trial.Exact) trial.Milli {
	lo, hi := int64(-mostShift-1), int64(mostShift)
	for lo < hi { // the greatest n with n/1000 <= e
		mid := lo + (hi-lo+1)/2
		if trial.Ratio(mid, 1000).Cmp(e) <= 0 {
			lo = mid
		} else {
			hi = mid - 1
		}
	}
	return trial.Milli(lo)
}
