package conformity

import (
	"fmt"
	"math"
	"slices"

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
		a.close(f)
		return f.sigma, true
	}
	return 0, false
}

// greatestUncertainty is the most that Uncertainty of criterion i can be, whatever the rates: what a
// limit fixed beforehand is guarded by. ok is false for criteria no linear figure describes.
func (a *Assessor) greatestUncertainty(i int) (u float64, ok bool) {
	p := &a.region.parts[i]
	if p.measure == total {
		return spread(p.forms), true
	}
	for k := range p.forms {
		u = math.Max(u, p.forms[k].sigma)
	}
	return u, p.measure != computed
}

// Guarded is the assessor's programme with the limits of its category drawn in to acceptance limits
// by its guarded decision rule, and the simple rule to judge by: a judge of it accepts what the
// guarded rule accepts, exactly, open movements and unreachable criteria included. The guard band of
// a magnitude is taken from the most uncertain linear figure it can be, so that it is one number for
// all movements (common practice, no source: JCGM 106 treats normal figures). The error is a
// *trial.Fault: limits that have crossed accept nothing, and a criterion no linear figure describes
// has no uncertainty to be guarded by. A programme with the simple rule is returned as it is.
func (a *Assessor) Guarded() (*trial.Programme, error) {
	p := a.judge.Programme()
	if p.Decision.Rule == trial.Simple {
		return p, nil
	}
	out := *p
	out.Decision = trial.Decision{Rule: trial.Simple}
	out.Criteria = slices.Clone(p.Criteria)
	category := a.judge.Category()
	for i := range out.Criteria {
		limit := a.judge.Limit(i)
		if !limit.Any() {
			continue
		}
		path := fmt.Sprintf("criteria[%d].limits.%s", i, category)
		u, known := a.greatestUncertainty(i)
		w, stated := GuardBand(p.Decision, u)
		if !known || !stated {
			return nil, &trial.Fault{Path: path, Code: "not_built", Args: []string{"a guard band for " + string(p.Criteria[i].Formula.Kind)}}
		}
		accept, possible := Acceptance(limit, w)
		if !possible || magnitude(p.Criteria[i].Formula.Kind) && accept.HasMax && accept.Max.Sign() < 0 {
			return nil, &trial.Fault{Path: path, Code: "crossed", Args: []string{accept.Min.String(), accept.Max.String()}}
		}
		if magnitude(p.Criteria[i].Formula.Kind) && limit.HasMin && limit.Min.Sign() <= 0 {
			accept.Min = limit.Min // a magnitude is never below it, so nothing is to be guarded
		}
		out.Criteria[i].Limits = map[string]trial.Limit{category: accept}
	}
	return &out, nil
}
