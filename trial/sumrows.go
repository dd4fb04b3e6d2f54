package trial

import "math/big"

// The rows of weighted sums, and of the magnitudes within them. A row may hold a magnitude that
// pulls it down: a helper at or above the magnitude takes its place. One that pulls it up has no
// place in a system of flat sides: the row is then left out, or within a box the most the magnitude
// can be stands for it. Either way nothing possible is lost, and the system is marked loose.

// sum writes the rows of a weighted sum.
func (s *rows) sum(c *criterion, i int32) {
	if c.q == 0 {
		s.loose = true
		return
	}
	side := func(kind atomKind, sign int64) {
		r := s.row().atom(s, kind, i, sign)
		if s.addends(r, c, -sign) {
			s.push(r)
		}
	}
	if c.hi != nil {
		side(atomHigh, 1)
	}
	if c.lo != nil {
		side(atomLow, -1)
	}
}

// addends adds k · Σ weight · addend to a row; false if the row must be left out.
func (s *rows) addends(r row, c *criterion, k int64) bool {
	for _, a := range c.addends {
		kw, ok := mul64(k, a.weight)
		if !ok || magnitude(kw) >= mostCell {
			s.loose = true
			return false
		}
		if !s.addend(r, a, kw) {
			return false
		}
	}
	return true
}

// addend adds k · addend to a row.
func (s *rows) addend(r row, a addend, k int64) bool {
	c := &s.judge.crits[a.at]
	signed := c.shape == linear || c.shape == mixed
	switch {
	case k == 0:
	case subset(c.need, s.known):
		r.atom(s, constantAtom(a.absolute && signed, k), a.at, k)
	case c.shape == linear && !a.absolute:
		for n, d := range c.days {
			r.rate(s, d, k*c.weights[n])
		}
	case c.shape == mixed && !a.absolute:
		return s.addends(r, c, k)
	case c.shape == mixed:
		s.loose = true
		return false
	case k < 0 && c.shape == root:
		s.loose = true
		r.atom(s, atomLeastRoot, a.at, k)
	case k < 0:
		r.add(s.atLeast(c), k)
	case s.box:
		s.loose = true
		r.atom(s, atomCeiling, a.at, k)
	default:
		s.loose = true
		return false
	}
	return true
}

// constantAtom is the atom of an addend whose days are all known. An irrational one is cut to the
// side that leaves the row easier to keep.
func constantAtom(size bool, k int64) atomKind {
	switch {
	case size && k < 0:
		return atomSizeUnder
	case size:
		return atomSizeOver
	case k < 0:
		return atomValueUnder
	}
	return atomValueOver
}

// atLeast makes a helper that is at or above a magnitude, or above the magnitude of a linear N.
func (s *rows) atLeast(c *criterion) int32 {
	t := s.helper()
	above := func(form map[int32]int64) {
		r := s.row().add(t, 1)
		for d, k := range form {
			r.rate(s, d, -k)
		}
		s.push(r)
	}
	switch c.shape {
	case total:
		sum := s.row().add(t, 1)
		for _, p := range c.pairs {
			one := criterion{shape: greatest, pairs: [][2]int32{p}}
			sum.add(s.atLeast(&one), -1)
		}
		s.push(sum)
	case extent:
		s.extent(c, s.row().add(t, 1))
	default:
		for form := range c.forms {
			above(form)
		}
	}
	return t
}

// extent keeps the greatest sum less the least at or below what a row holds: two helpers enclose
// all sums.
func (s *rows) extent(c *criterion, r row) {
	high, low := s.helper(), s.helper()
	for _, days := range c.periods {
		up, down := s.row().add(high, 1), s.row().add(low, -1)
		for _, d := range days {
			up.rate(s, d, -1)
			down.rate(s, d, 1)
		}
		s.push(up)
		s.push(down)
	}
	s.push(r.add(high, -1).add(low, 1))
}

// steps keeps every step at or below the limit.
func (s *rows) steps(c *criterion, i int32) {
	for form := range c.forms {
		r := s.row().atom(s, atomHigh, i, 1)
		for d, k := range form {
			r.rate(s, d, -k)
		}
		s.push(r)
	}
}

// root asks of a standard deviation only whether its least value keeps the limit.
func (s *rows) root(i int32) {
	s.loose = true
	s.push(s.row().atom(s, atomHigh, i, 1).atom(s, atomLeastSquares, i, -1))
}

// compositeAtom is an atom of a criterion in a sum, or of a standard deviation, as a big number: in
// units of the criterion's N, for a standard deviation in thousandths.
func (j *Judge) compositeAtom(a atom, s *situation) *big.Rat {
	c := &j.crits[a.at]
	var width *big.Rat
	if s.box {
		width = big.NewRat(unreachableBox, 1)
	}
	switch a.kind {
	case atomLeastSquares:
		return c.leastSquares(s.known, s.exactRate, width)
	case atomLeastRoot:
		under, _ := c.rootOf(c.leastSquares(s.known, s.exactRate, width)).bounds()
		return under.Mul(under, big.NewRat(1000, 1))
	case atomCeiling:
		n := c.most(s.known, s.exactRate, width)
		if c.shape == root {
			_, n = c.rootOf(n).bounds()
			n.Mul(n, big.NewRat(1000, 1))
		}
		return n
	}
	v := j.valueOf(a.at, s.exactRate)
	switch {
	case a.kind == atomValueUnder || a.kind == atomValueOver:
		v = v.Sub(c.shift)
	case v.Sign() < 0:
		v = v.Neg()
	}
	under, over := v.bounds()
	if a.kind == atomValueOver || a.kind == atomSizeOver {
		under = over
	}
	return under.Mul(under, new(big.Rat).SetInt64(1000*c.q))
}
