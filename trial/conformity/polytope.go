package conformity

import "math"

// row is one condition on a form of the rates, in units of the form's standard uncertainty and as
// seen from the measured value: lo <= z <= hi. A row of a fold is also one of the forms whose
// magnitudes, or with signed the form itself, sum to at most the fold's cap.
type row struct {
	form   *form
	lo, hi float64
	fold   int // 1 + index of its fold; 0: none
	signed bool
	y      float64 // of a fold's form: its measured value
}

// fold bounds a sum of magnitudes.
type fold struct {
	cap   float64
	waits int // the last variable of its signed form, -1 without one: before it the sum is not bounded
	known float64
}

// polytope computes the probability that correlated normal figures all lie within their bounds, by
// separation of variables (Genz 1992; order of variables after Gibson, Glasbey and Elston 1994;
// more conditions than dimensions after Genz and Kwong 2000; all from memory): with z the
// standard normal variables behind the figures, each row bounds the last variable it depends on, so
// that every point of the rule contributes a product of one-dimensional probabilities. A fold bounds
// every variable that closes one of its forms by what the forms before it leave of its cap. One row
// alone is exact. It is working memory, for one goroutine.
type polytope struct {
	rows  []row
	folds []fold
	c     []float64 // rows by variables: the figures in terms of the variables
	rest  []float64 // variance of each row that the variables so far leave
	mean  []float64 // expected part of each row from the variables so far
	slope []float64 // of each row's figure, in its own unit, against its last variable
	part  []float64 // of each row at this point: what the variables before its last one make of it
	last  []int     // the last variable a row depends on, -1 while it is open
	order []int     // rows by their last variable
	from  []int     // where the rows of variable q begin in order, and where the last ones end
	z     []float64
	dim   int
}

// settled is the share of its variance below which a row counts as settled by earlier variables.
const settled = 1e-9

// probability integrates; rows are used up. It is NaN with more variables than the rules serve.
func (t *polytope) probability() float64 {
	if len(t.rows) == 0 {
		return 1
	}
	if len(t.rows) == 1 && t.rows[0].fold == 0 {
		return between(t.rows[0].lo, t.rows[0].hi)
	}
	t.factor()
	for i := range t.folds {
		t.folds[i].known = 0
	}
	if t.dim == 1 {
		a, b := t.bounds(0)
		return between(a, b)
	}
	if t.dim > mostDim {
		return math.NaN()
	}
	p := t.integrate(&tiny)
	switch {
	case p < sure || p > 1-sure:
		return p
	case t.dim <= few:
		return t.integrate(&short)
	}
	return t.integrate(&long)
}

// factor expresses the rows by independent variables, the row that is least likely to hold first.
func (t *polytope) factor() {
	m := len(t.rows)
	t.c, t.rest, t.mean = grow(t.c, m*m), grow(t.rest, m), grow(t.mean, m)
	t.slope, t.part, t.z = grow(t.slope, m), grow(t.part, m), grow(t.z, m)
	t.last, t.order, t.from = growInt(t.last, m), t.order[:0], t.from[:0]
	for i := range m {
		t.rest[i], t.mean[i], t.last[i] = 1, 0, -1
	}
	t.dim = 0
	for i := t.tightest(); i >= 0; i = t.tightest() {
		t.settle(i)
		t.dim++
	}
	for q := range t.dim {
		t.from = append(t.from, len(t.order))
		for j, last := range t.last {
			if last == q {
				t.order = append(t.order, j)
			}
		}
	}
	t.from = append(t.from, len(t.order))
	for j, r := range t.rows {
		if r.signed {
			t.folds[r.fold-1].waits = t.last[j]
		}
	}
}

// tightest is the open row that is least likely to hold given what earlier variables are expected
// to be; -1 if none is open.
func (t *polytope) tightest() int {
	best, least := -1, 2.0
	for i, r := range t.rows {
		if t.last[i] >= 0 {
			continue
		}
		s := math.Sqrt(t.rest[i])
		if p := between((r.lo-t.mean[i])/s, (r.hi-t.mean[i])/s); p < least {
			best, least = i, p
		}
	}
	return best
}

// settle makes row i the one that defines variable t.dim.
func (t *polytope) settle(i int) {
	m, q := len(t.rows), t.dim
	pivot := math.Sqrt(t.rest[i])
	a, b := (t.rows[i].lo-t.mean[i])/pivot, (t.rows[i].hi-t.mean[i])/pivot
	z := centre(a, b)
	for j := range m {
		if t.last[j] >= 0 {
			continue
		}
		c := pivot
		if j != i {
			c = t.correlation(i, j)
			for p := range q {
				c -= t.c[i*m+p] * t.c[j*m+p]
			}
			c /= pivot
		}
		t.c[j*m+q] = c
		t.rest[j] -= c * c
		t.mean[j] += c * z
		if j != i && t.rest[j] < settled {
			t.close(j)
		}
	}
	t.close(i) // last: closing scales the row that the others were compared with
}

func (t *polytope) correlation(i, j int) float64 {
	a, b := t.rows[i].form, t.rows[j].form
	return dot(a.w, b.cov) / (a.sigma * b.sigma)
}

// close scales row j so that its bounds are those of its last variable plus what stands before it.
func (t *polytope) close(j int) {
	m, q := len(t.rows), t.dim
	for q > 0 && math.Abs(t.c[j*m+q]) < math.Sqrt(settled) {
		q--
	}
	scale := t.c[j*m+q]
	t.last[j], t.slope[j] = q, scale*t.rows[j].form.sigma
	for p := range q {
		t.c[j*m+p] /= scale
	}
	lo, hi := t.rows[j].lo/scale, t.rows[j].hi/scale
	if scale < 0 {
		lo, hi = hi, lo
	}
	t.rows[j].lo, t.rows[j].hi = lo, hi
}

// centre is the mean of a standard normal variable known to lie in [a, b].
func centre(a, b float64) float64 {
	p := between(a, b)
	if p < 1e-12 {
		return math.Max(math.Min(0, b), a)
	}
	return (density(a) - density(b)) / p
}

// bounds is the interval all rows of variable q leave it.
func (t *polytope) bounds(q int) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	m, folded := len(t.rows), false
	for _, j := range t.order[t.from[q]:t.from[q+1]] {
		var s float64
		for p, c := range t.c[j*m : j*m+q] {
			s += c * t.z[p]
		}
		r := &t.rows[j]
		t.part[j] = s
		lo, hi = math.Max(lo, r.lo-s), math.Min(hi, r.hi-s)
		folded = folded || r.fold > 0
	}
	if folded {
		for f := range t.folds {
			if t.folds[f].waits <= q {
				lo, hi = t.foldBounds(f, q, lo, hi)
			}
		}
	}
	return lo, hi
}

// foldBounds narrows [lo, hi] to where the forms of a fold that close with variable q stay within
// what is left of its cap, for every choice of their signs.
func (t *polytope) foldBounds(f, q int, lo, hi float64) (float64, float64) {
	var at, slope [mostFree + 1]float64
	n, left := 0, t.folds[f].cap-t.folds[f].known
	free := 0 // forms before this one may have either sign
	for pass := range 2 {
		for _, j := range t.order[t.from[q]:t.from[q+1]] {
			r := &t.rows[j]
			if r.fold != f+1 || r.signed != (pass == 1) {
				continue
			}
			at[n], slope[n] = r.y+t.slope[j]*t.part[j], t.slope[j]
			if n++; pass == 0 {
				free = n
			}
		}
	}
	if n == 0 {
		return lo, hi
	}
	for choice := range 1 << free {
		a, b := left, 0.0 // b·z <= a
		for k := range n {
			if k < free && choice>>k&1 == 1 {
				a, b = a+at[k], b-slope[k]
			} else {
				a, b = a-at[k], b+slope[k]
			}
		}
		switch {
		case b > 0:
			hi = math.Min(hi, a/b)
		case b < 0:
			lo = math.Max(lo, a/b)
		case a < 0:
			return 0, 0
		}
	}
	return lo, hi
}

// mostFree bounds the forms of a fold with either sign; with more of them the criterion is sampled.
const mostFree = 8

// pass notes what the forms that close with variable q leave of their folds.
func (t *polytope) pass(q int) {
	for _, j := range t.order[t.from[q]:t.from[q+1]] {
		r := &t.rows[j]
		if r.fold == 0 {
			continue
		}
		v := r.y + t.slope[j]*(t.z[q]+t.part[j])
		if !r.signed {
			v = math.Abs(v)
		}
		t.folds[r.fold-1].known += v
	}
}

// integrate is the mean over the points of a lattice.
func (t *polytope) integrate(l *lattice) float64 {
	var sum float64
	for k := range l.n {
		f := 1.0
		for i := range t.folds {
			t.folds[i].known = 0
		}
		for q := 0; q < t.dim && f > 0; q++ {
			a, b := t.bounds(q)
			if q == t.dim-1 {
				f *= share(a, b)
				break
			}
			p, z := within(a, b, l.coordinate(k, q))
			f *= p
			t.z[q] = z
			t.pass(q)
		}
		sum += f
	}
	return sum / float64(l.n)
}

// share is between for the points of an integration rule.
func share(a, b float64) float64 {
	switch {
	case !(a < b):
		return 0
	case a > 0:
		return quickPhi(-a) - quickPhi(-b)
	}
	return quickPhi(b) - quickPhi(a)
}

// within gives the probability of [a, b] and the point of it below which the share u of it lies.
func within(a, b, u float64) (p, z float64) {
	if !(a < b) {
		return 0, 0
	}
	if a > 0 { // the lower tail is the accurate one
		p, z = within(-b, -a, 1-u)
		return p, -z
	}
	pa := quickPhi(a)
	p = quickPhi(b) - pa
	return p, math.Min(math.Max(quickQuantile(pa+u*p), a), b)
}

func grow(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}

func growInt(s []int, n int) []int {
	if cap(s) < n {
		return make([]int, n)
	}
	return s[:n]
}
