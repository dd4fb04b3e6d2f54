package conformity

import (
	"math"

	"ratehouse/trial"
)

// Assessor computes how sure judgements of one category are under one covariance. It holds working
// memory: one goroutine uses it at a time.
type Assessor struct {
	judge  *trial.Judge
	region *region
	cov    *Covariance
	space  polytope
	joint  []row
	folds  []fold
	whole  whole
	sample sample
}

// NewAssessor prepares a judge's limits, taken as simple limits, under a covariance of its
// programme's rates.
func NewAssessor(j *trial.Judge, cov *Covariance) *Assessor {
	a := &Assessor{judge: j, region: newRegion(j), cov: cov}
	for i := range a.region.parts {
		p := &a.region.parts[i]
		for k := range p.forms {
			a.measure(&p.forms[k])
		}
		if p.shape == folds {
			p.spread = spread(p.forms)
		}
	}
	return a
}

// spread is no less than the standard uncertainty of the sum of forms with any choice of signs.
func spread(forms []form) float64 {
	var v float64
	for k := range forms {
		for l := range forms {
			v += math.Abs(dot(forms[k].w, forms[l].cov))
		}
	}
	return math.Sqrt(v)
}

// measure notes the covariance of a form with the rates.
func (a *Assessor) measure(f *form) {
	f.cov = a.cov.times(f.w)
	a.close(f)
}

// Chance is the probability that one criterion, or all, truly conforms.
type Chance struct {
	P     float64
	Known bool // false: undecided, or without limits
}

// Chances are those of one movement.
type Chances struct {
	Each []Chance // in the order of the programme's criteria
	All  Chance   // all limited criteria together; known when each of them is decided and there is one
}

// Doubt is the probability that a verdict is wrong: for a pass that some criterion truly lies
// outside, for a fail that all lie inside. ok is false for an open movement and where it is not
// known.
func (c *Chances) Doubt(v trial.Verdict) (p float64, ok bool) {
	switch {
	case !c.All.Known:
		return 0, false
	case v == trial.Pass:
		return 1 - c.All.P, true
	case v == trial.Fail:
		return c.All.P, true
	}
	return 0, false
}

// far is how many standard uncertainties from a limit count as certain: beyond it lies less than
// one part in 10^9.
const far = 6

// Assess computes the probability that the true rates behind the measured ones, normal about them
// with the assessor's covariance and a flat prior, satisfy each criterion and all together. rates
// are in s/d by programme day; r is what the same judge says of them, and only days of criteria
// known there are used. Linear criteria are exact to float64; magnitudes and the joint probability
// have an error of at most 0.002, the same input always gives the same output. A movement far from
// every limit costs little.
//
// It is the probability of what was measured: the movement's own instability is no part of it
// (domain notes 5.3), and near zero a magnitude comes out too large (5.2, folding).
func (a *Assessor) Assess(rates []float64, r *trial.Result, out *Chances) {
	out.Each = append(out.Each[:0], make([]Chance, len(r.Values))...)
	a.joint, a.folds, a.whole = a.joint[:0], a.folds[:0], whole{p: 1}
	decided, limited := true, false
	for i := range r.Values {
		switch {
		case a.region.parts[i].shape == unlimited:
			continue
		case !r.Values[i].Known:
			decided = false
			continue
		}
		limited = true
		out.Each[i] = Chance{a.one(i, rates, r), true}
	}
	out.All = Chance{}
	if decided && limited {
		out.All = Chance{a.together(rates), true}
	}
}

// whole is what single criteria say of all together.
type whole struct {
	impossible bool    // one is certainly outside
	sampled    bool    // one is not described by rows
	active     int     // criteria not certain to hold
	p          float64 // probability of the last of those
}

// one is the probability of criterion i; its conditions stay in joint.
func (a *Assessor) one(i int, rates []float64, r *trial.Result) float64 {
	rows, folds := len(a.joint), len(a.folds)
	stand := a.collect(i, rates, r)
	if stand != near {
		a.joint, a.folds = a.joint[:rows], a.folds[:folds]
	}
	switch {
	case stand == outside:
		a.whole.impossible = true
		return 0
	case stand == unclear:
		a.whole.sampled = true
		return a.sampled(rates, i)
	case len(a.joint) == rows:
		return 1
	}
	a.whole.active++
	a.whole.p = a.integrate(a.joint[rows:], rates, i)
	return a.whole.p
}

// together is the probability of all criteria.
func (a *Assessor) together(rates []float64) float64 {
	switch {
	case a.whole.impossible:
		return 0
	case a.whole.sampled:
		return a.sampled(rates, everything)
	case a.whole.active <= 1:
		return a.whole.p
	}
	return a.integrate(a.joint, rates, everything)
}

// everything stands for all criteria instead of one.
const everything = -1

// integrate works on a copy of the rows of criterion i, so that they can serve again.
func (a *Assessor) integrate(rows []row, rates []float64, i int) float64 {
	a.space.rows, a.space.folds = append(a.space.rows[:0], rows...), append(a.space.folds[:0], a.folds...)
	p := a.space.probability()
	if math.IsNaN(p) {
		return a.sampled(rates, i)
	}
	return math.Min(math.Max(p, 0), 1)
}

// standing says where a movement stands to a criterion's region.
type standing uint8

const (
	near    standing = iota // the rows collected describe it
	outside                 // certainly outside
	unclear                 // not described by rows
)

// collect appends the conditions of criterion i that are not certain to hold.
func (a *Assessor) collect(i int, rates []float64, r *trial.Result) standing {
	p := &a.region.parts[i]
	switch {
	case p.shape == other:
		return unclear
	case p.shape == folds:
		return a.collectFolds(p, rates)
	case p.measure == plain:
		lo, hi := a.margins(i, r)
		return a.condition(&p.forms[0], lo, hi)
	}
	for k := range p.forms {
		y := dot(p.forms[k].w, rates)
		if a.condition(&p.forms[k], p.lo-y, p.hi-y) == outside {
			return outside
		}
	}
	return near
}

// margins are the limits of criterion i as seen from its value, differences taken exactly.
func (a *Assessor) margins(i int, r *trial.Result) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	l, v := a.judge.Limit(i), r.Values[i].Exact
	if l.HasMin {
		lo = l.Min.Sub(v).Float()
	}
	if l.HasMax {
		hi = l.Max.Sub(v).Float()
	}
	return lo, hi
}

// condition appends lo <= form <= hi, as seen from the form's measured value, unless it is certain
// to hold.
func (a *Assessor) condition(f *form, lo, hi float64) standing {
	if f.sigma == 0 {
		const slip = 1e-9 // of the sums; a limit met exactly is met
		if lo > slip || hi < -slip {
			return outside
		}
		return near
	}
	lo, hi = lo/f.sigma, hi/f.sigma
	switch {
	case lo > far || hi < -far:
		return outside
	case lo >= -far || hi <= far:
		a.joint = append(a.joint, row{form: f, lo: lo, hi: hi})
	}
	return near
}

// collectFolds describes a sum of magnitudes. Forms far from zero have one sign and make one form
// together; if there are no others the sum is linear. Otherwise the others are a fold with it.
func (a *Assessor) collectFolds(p *part, rates []float64) standing {
	if p.evaluate(rates)+far*p.spread <= p.hi {
		return near
	}
	fixed, whole := a.blank(), a.blank()
	free := 0
	for k := range p.forms {
		f := &p.forms[k]
		y := dot(f.w, rates)
		whole.add(f, y)
		if math.Abs(y) >= far*f.sigma {
			fixed.add(f, y)
		} else {
			free++
		}
	}
	a.close(whole)
	margin := p.hi - dot(whole.w, rates)
	switch {
	case free == 0:
		return a.condition(whole, math.Inf(-1), margin)
	case margin < -far*whole.sigma:
		return outside
	case free > mostFree:
		return unclear
	}
	a.folds = append(a.folds, fold{cap: p.hi, waits: -1})
	a.foldRows(p, rates, fixed)
	return near
}

// foldRows appends the members of the last fold.
func (a *Assessor) foldRows(p *part, rates []float64, fixed *form) {
	n := len(a.folds)
	a.close(fixed)
	bound := p.hi
	if fixed.sigma > 0 {
		bound = math.Inf(1)
		a.joint = append(a.joint, row{form: fixed, lo: math.Inf(-1), hi: bound, fold: n, signed: true, y: dot(fixed.w, rates)})
	}
	for k := range p.forms {
		f := &p.forms[k]
		y := dot(f.w, rates)
		if math.Abs(y) >= far*f.sigma {
			continue
		}
		a.joint = append(a.joint, row{form: f, lo: (-bound - y) / f.sigma, hi: (bound - y) / f.sigma, fold: n, y: y})
	}
}

// blank is a form of no rates.
func (a *Assessor) blank() *form {
	return &form{w: make([]float64, a.cov.days), cov: make([]float64, a.cov.days)}
}

// add adds the magnitude of a form that is y.
func (f *form) add(g *form, y float64) {
	sign := 1.0
	if y < 0 {
		sign = -1
	}
	for d := range f.w {
		f.w[d] += sign * g.w[d]
		f.cov[d] += sign * g.cov[d]
	}
}

// close computes the standard uncertainty of a form. What is left where terms cancel is rounding, and
// counts as nothing.
func (a *Assessor) close(f *form) {
	var apart float64 // the variance without covariances
	for d, w := range f.w {
		apart += w * w * a.cov.At(d+1, d+1)
	}
	v := dot(f.w, f.cov)
	if v < 1e-13*apart {
		v = 0
	}
	f.sigma = math.Sqrt(v)
}
