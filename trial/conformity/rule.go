package conformity

import (
	"math"

	"ratehouse/trial"
)

// Acceptance is the interval a measured value must lie in to be accepted: the limits drawn in by a
// guard band w on every limited side, A = T - w (JCGM 106:2012 clause 8, from memory; ILAC-G8:09/2019
// 4.1 and 4.2, w = TL - AL). A band of zero is simple acceptance, one below zero accepts beyond the
// limits. possible is false if the drawn-in limits have crossed, so that nothing can be accepted.
func Acceptance(limit trial.Limit, w trial.Exact) (accept trial.Limit, possible bool) {
	accept = limit
	if limit.HasMin {
		accept.Min = limit.Min.Add(w)
	}
	if limit.HasMax {
		accept.Max = limit.Max.Sub(w)
	}
	return accept, !limit.HasMin || !limit.HasMax || accept.Min.Cmp(accept.Max) <= 0
}

// GuardBand is the band of a programme's decision rule for a criterion of standard uncertainty u:
// zero for simple acceptance, guard · U with U = 2u for the guarded rule, rounded up to 0.000001 so
// that it is an exact decimal a certificate can state. ok is false if u is no number of use.
func GuardBand(d trial.Decision, u float64) (w trial.Exact, ok bool) {
	if d.Rule == trial.Simple {
		return trial.Exact{}, true
	}
	const scale = 1e6
	expanded := math.Ceil(2*u*scale - 1e-6)
	if !(u >= 0) || expanded > 1e15 {
		return trial.Exact{}, false
	}
	return d.Guard.Times(trial.Ratio(int64(expanded), scale)), true
}

// Uncertainty is the standard uncertainty of criterion i at these rates. For a magnitude it is that
// of the linear figure which it is there: the deviation that is greatest, or the sum with the signs
// as measured. A linear figure says nothing of a magnitude near zero; Moments does. ok is false for
// criteria no linear figure describes.
func (a *Assessor) Uncertainty(rates []float64, i int) (u float64, ok bool) {
	p := &a.region.parts[i]
	switch p.measure {
	case plain:
		return p.forms[0].sigma, true
	case greatest:
		at, most := 0, -1.0
		for k := range p.forms {
			if y := math.Abs(dot(p.forms[k].w, rates)); y > most {
				at, most = k, y
			}
		}
		return p.forms[at].sigma, true
	case total:
		f := a.blank()
		for k := range p.forms {
			f.add(&p.forms[k], dot(p.forms[k].w, rates))
		}
		f.close()
		return f.sigma, true
	}
	return 0, false
}

// Decision is what a guarded rule says of one movement.
type Decision struct {
	Accepted bool // every limited criterion lies within its acceptance interval
	// Refused lists the criteria outside it, by index; those also outside the limits themselves are
	// in Failed. The others passed by less than their guard band: a conditional fail of ILAC-G8 4.2
	// (non-binary statement).
	Refused, Failed []int
}

// Decide applies the programme's decision rule to a movement whose limited criteria are all decided;
// ok is false if one is not, or has no uncertainty to guard it by. Comparisons are exact; the guard
// band of each criterion is GuardBand of its Uncertainty.
func (a *Assessor) Decide(rates []float64, r *trial.Result) (d Decision, ok bool) {
	for i := range r.Values {
		l := a.judge.Limit(i)
		if !l.Any() {
			continue
		}
		u, known := a.Uncertainty(rates, i)
		w, stated := GuardBand(a.judge.Programme().Decision, u)
		guarded := a.judge.Programme().Decision.Rule == trial.Guarded
		if !r.Values[i].Known || !stated || guarded && !known {
			return Decision{}, false
		}
		accept, possible := Acceptance(l, w)
		if !possible || !accept.Contains(r.Values[i].Exact) {
			d.Refused = append(d.Refused, i)
		}
		if r.Values[i].Outcome == trial.Outside {
			d.Failed = append(d.Failed, i)
		}
	}
	d.Accepted = len(d.Refused) == 0
	return d, true
}
