package trial

import (
	"math/big"
	"slices"
)

// Whether an open movement can still pass is a question about real numbers: is there a point, one
// coordinate for each blank day, in the polyhedron that the limits cut out? The criteria are
// written as rows "slack = … >= 0" over the blank days (and helpers: the mean m of a greatest
// deviation, t >= |d| for each variation summed up), with whole-number coefficients. What is known
// of the movement enters only through atoms: rates read, limits, variations already fixed. They are
// carried as columns of their own, so that one pivoted dictionary serves every movement with the
// same blank days, and a batch finds its next movement nearly solved.

// atom is one known quantity, in thousandths (or fixed point).
type atom struct {
	kind atomKind
	at   int32 // day or criterion
}

type atomKind uint8

const (
	atomRate  atomKind = iota // the rate of day at
	atomLow                   // lower limit of N of criterion at
	atomHigh                  // upper limit of N
	atomBand                  // upper limit divided by n: greatest deviation
	atomFixed                 // Σ |d| over the pairs known in full
	atomPeak                  // greatest |d| over the pairs known in full
	atomMost                  // greatest known rate of the criterion's days
	atomLeast                 // least known rate
	atomBox                   // 60 s/d

	// Of criteria in weighted sums, and of standard deviations; only ever exact. See sumrows.go.
	atomValueUnder   // N, or not above it
	atomValueOver    // N, or not below it
	atomSizeUnder    // the magnitude of the value, or not above it
	atomSizeOver     // the magnitude of the value, or not below it
	atomLeastSquares // least N of a standard deviation
	atomLeastRoot    // least standard deviation, or not above it
	atomCeiling      // greatest N within the box, or not below it
)

// situation is one movement as the solver sees it: whole or fixed-point rates, the exact ones
// behind them, and which are known.
type situation struct {
	r         []int64 // nil: go by rates alone
	rates     []Rate  // nil: r is exact, in thousandths
	fixedBits uint    // r counts thousandths / 2^fixedBits
	known     []uint64
	box       bool // blank days stay within ±60 s/d
}

// situation copies a reading: the rare exact question must not make the buffers of the common
// path escape to the heap.
func (j *Judge) situation(known []uint64, m *reading) situation {
	s := situation{r: slices.Clone(m.r), rates: slices.Clone(m.rates), known: slices.Clone(known)}
	if m.rates != nil {
		s.fixedBits = j.fixedBits
	}
	return s
}

// exactRate is a known rate in thousandths.
func (s *situation) exactRate(d int32) *big.Rat {
	if s.rates != nil {
		return big.NewRat(s.rates[d].num, s.rates[d].den)
	}
	return new(big.Rat).SetInt64(s.r[d])
}

// rows builds the system of some criteria for a set of known days.
type rows struct {
	judge *Judge
	known []uint64
	box   bool
	vars  map[int32]int32 // blank day to variable
	days  []int32         // variable to blank day; -1 for a helper
	atoms []atom
	list  []row
	loose bool // something asked is left out: a system that can be satisfied proves nothing
}

// row is slack = Σ vars + Σ atoms >= 0, or = 0.
type row struct {
	equal bool
	vars  map[int32]int64
	atoms map[int32]int64
}

func (j *Judge) rowsOf(crits []int, box bool, known []uint64) *rows {
	s := &rows{judge: j, known: known, box: box, vars: map[int32]int32{}}
	for _, i := range crits {
		c := &j.crits[i]
		switch c.shape {
		case linear:
			s.linear(c, int32(i))
		case total:
			s.total(c, int32(i))
		case greatest:
			s.greatest(c, int32(i))
		case deviation:
			s.deviation(c, int32(i))
		case extent:
			if c.hi != nil {
				s.extent(c, s.row().atom(s, atomHigh, int32(i), 1))
			}
		case step:
			if c.hi != nil {
				s.steps(c, int32(i))
			}
		case root:
			if c.hi != nil {
				s.root(int32(i))
			}
		case mixed:
			s.sum(c, int32(i))
		}
		s.loose = s.loose || c.shape != linear && c.shape != mixed && c.lo != nil && c.lo.Sign() > 0
	}
	if box {
		for v, d := range s.days {
			if d >= 0 {
				s.list = append(s.list, s.row().add(int32(v), 1).atom(s, atomBox, 0, 1))
				s.list = append(s.list, s.row().add(int32(v), -1).atom(s, atomBox, 0, 1))
			}
		}
	}
	return s
}

func (s *rows) row() row { return row{vars: map[int32]int64{}, atoms: map[int32]int64{}} }

// add adds k · variable v.
func (r row) add(v int32, k int64) row {
	r.vars[v] += k
	return r
}

// atom adds k · atom.
func (r row) atom(s *rows, kind atomKind, at int32, k int64) row {
	a := atom{kind, at}
	i := int32(0)
	for ; int(i) < len(s.atoms) && s.atoms[i] != a; i++ {
	}
	if int(i) == len(s.atoms) {
		s.atoms = append(s.atoms, a)
	}
	r.atoms[i] += k
	return r
}

// rate adds k · rate of day d, known or blank.
func (r row) rate(s *rows, d int32, k int64) row {
	if has(s.known, int(d)) {
		return r.atom(s, atomRate, d, k)
	}
	v, ok := s.vars[d]
	if !ok {
		v = s.helper()
		s.vars[d], s.days[v] = v, d
	}
	return r.add(v, k)
}

// helper makes a variable that is no day.
func (s *rows) helper() int32 {
	s.days = append(s.days, -1)
	return int32(len(s.days) - 1)
}

func (s *rows) push(r row) { s.list = append(s.list, r) }

func (s *rows) linear(c *criterion, i int32) {
	side := func(kind atomKind, sign int64) {
		r := s.row().atom(s, kind, i, sign)
		for k, d := range c.days {
			r = r.rate(s, d, -sign*c.weights[k])
		}
		s.push(r)
	}
	if c.hi != nil {
		side(atomHigh, 1)
	}
	if c.lo != nil {
		side(atomLow, -1)
	}
}

// fixedPair tells whether both days of a pair are known.
func (s *rows) fixedPair(p [2]int32) bool { return has(s.known, int(p[0])) && has(s.known, int(p[1])) }

func (s *rows) total(c *criterion, i int32) {
	if c.hi == nil {
		return
	}
	sum := s.row().atom(s, atomHigh, i, 1)
	for _, p := range c.pairs {
		if s.fixedPair(p) {
			continue
		}
		t := s.helper()
		s.push(s.row().add(t, 1).rate(s, p[1], 1).rate(s, p[0], -1))
		s.push(s.row().add(t, 1).rate(s, p[1], -1).rate(s, p[0], 1))
		sum = sum.add(t, -1)
	}
	s.push(sum.atom(s, atomFixed, i, -1))
}

func (s *rows) greatest(c *criterion, i int32) {
	if c.hi == nil {
		return
	}
	for _, p := range c.pairs {
		if s.fixedPair(p) {
			continue
		}
		s.push(s.row().atom(s, atomHigh, i, 1).rate(s, p[1], -1).rate(s, p[0], 1))
		s.push(s.row().atom(s, atomHigh, i, 1).rate(s, p[1], 1).rate(s, p[0], -1))
	}
	s.push(s.row().atom(s, atomHigh, i, 1).atom(s, atomPeak, i, -1))
}

func (s *rows) deviation(c *criterion, i int32) {
	if c.hi == nil {
		return
	}
	m := s.helper()
	mean := s.row().add(m, -int64(len(c.days)))
	mean.equal = true
	seen := false
	for _, d := range c.days {
		mean = mean.rate(s, d, 1)
		if has(s.known, int(d)) {
			seen = true
			continue
		}
		s.push(s.row().atom(s, atomBand, i, 1).rate(s, d, -1).add(m, 1))
		s.push(s.row().atom(s, atomBand, i, 1).rate(s, d, 1).add(m, -1))
	}
	if seen {
		s.push(s.row().atom(s, atomBand, i, 1).atom(s, atomMost, i, -1).add(m, 1))
		s.push(s.row().atom(s, atomBand, i, 1).atom(s, atomLeast, i, 1).add(m, -1))
	}
	s.push(mean)
}

// fixedAtom is an atom as a whole number in the situation's unit, and by how much it may be off.
func (j *Judge) fixedAtom(a atom, s *situation) (value, err int64) {
	var c *criterion
	var b bounds
	if a.kind != atomRate && a.kind != atomBox {
		c = &j.crits[a.at]
		if b = c.whole; s.rates != nil {
			b = c.fixed
		}
	}
	unsure := int64(0)
	if s.rates != nil {
		unsure = 1
	}
	switch a.kind {
	case atomRate:
		return s.r[a.at], unsure
	case atomBox:
		return unreachableBox << s.fixedBits, 0
	case atomLow:
		return b.lo, b.loUp - b.lo
	case atomHigh:
		return b.hi, b.hiUp - b.hi
	case atomBand:
		band := b.hi / c.q
		return band, min(1, magnitude(b.hi%c.q)+b.hiUp-b.hi) * 2
	case atomFixed, atomPeak:
		return j.fixedPairs(c, a.kind, s, unsure)
	}
	value = 0
	first := true
	for _, d := range c.days {
		if x := s.r[d]; has(s.known, int(d)) {
			if first || a.kind == atomMost && x > value || a.kind == atomLeast && x < value {
				value, first = x, false
			}
		}
	}
	return value, unsure
}

func (j *Judge) fixedPairs(c *criterion, kind atomKind, s *situation, unsure int64) (value, err int64) {
	for _, p := range c.pairs {
		if !has(s.known, int(p[0])) || !has(s.known, int(p[1])) {
			continue
		}
		d := magnitude(s.r[p[1]] - s.r[p[0]])
		if kind == atomFixed {
			value, err = value+d, err+2*unsure
		} else {
			value, err = max(value, d), 2*unsure
		}
	}
	return value, err
}

// exactAtom is an atom as a big number of thousandths.
func (j *Judge) exactAtom(a atom, s *situation) *big.Rat {
	if a.kind == atomRate {
		return s.exactRate(a.at)
	}
	if a.kind == atomBox {
		return big.NewRat(unreachableBox, 1)
	}
	if a.kind > atomBox {
		return j.compositeAtom(a, s)
	}
	c := &j.crits[a.at]
	switch a.kind {
	case atomLow:
		return new(big.Rat).Set(c.lo)
	case atomHigh:
		return new(big.Rat).Set(c.hi)
	case atomBand:
		return new(big.Rat).Quo(c.hi, new(big.Rat).SetInt64(c.q))
	case atomFixed, atomPeak:
		part := criterion{shape: c.shape}
		for _, p := range c.pairs {
			if has(s.known, int(p[0])) && has(s.known, int(p[1])) {
				part.pairs = append(part.pairs, p)
			}
		}
		return part.exactN(s.exactRate)
	}
	var best *big.Rat
	for _, d := range c.days {
		if !has(s.known, int(d)) {
			continue
		}
		x := s.exactRate(d)
		if best == nil || a.kind == atomMost && x.Cmp(best) > 0 || a.kind == atomLeast && x.Cmp(best) < 0 {
			best = x
		}
	}
	return best
}
