package trial

import (
	"math/big"
	"math/bits"
)

// dictionary is a system of rows solved for some of its variables (after Chvátal): each basic
// variable is (Σ cells · columns) / den, the columns being the other variables, which are zero at
// the dictionary's own point, and the atoms. Pivots keep all cells whole (Edmonds, Bareiss): the
// divisions by den come out even. Variables: the system's own first (free), then one slack a row
// (never below zero).
type dictionary struct {
	sys   *rows
	free  int       // variables below this index are free
	basic []int32   // row to variable
	outer []int32   // column to variable, or dropped, or loose
	cells [][]int64 // row by column; the last len(atoms) columns are atoms
	den   int64
}

// mostCell keeps 128-bit sums over cells · atoms from overflowing.
const mostCell = 1 << 44

// Columns that never enter. A dropped one is the slack of an equality, zero for good. A loose one
// is a free variable that no slack hangs on any more; basic free variables still may.
const (
	dropped = -1
	loose   = -2
)

// newDictionary builds a dictionary and solves it for the free variables; nil if its cells grow
// too large, which calls for the slow solver.
func newDictionary(s *rows) *dictionary {
	n := len(s.days)
	d := &dictionary{sys: s, free: n, den: 1, outer: make([]int32, n)}
	for v := range d.outer {
		d.outer[v] = int32(v)
	}
	for i, r := range s.list {
		cells := make([]int64, n+len(s.atoms))
		for v, k := range r.vars {
			cells[v] = k
		}
		for a, k := range r.atoms {
			cells[n+int(a)] = k
		}
		d.cells = append(d.cells, cells)
		d.basic = append(d.basic, int32(n+i))
	}
	if !d.settleEqualities() || !d.settleFree() {
		return nil
	}
	return d
}

// settleEqualities solves each equality for a free variable and drops its slack.
func (d *dictionary) settleEqualities() bool {
	for i, r := range d.sys.list {
		if !r.equal {
			continue
		}
		// Rows still hold their own slack here: pivots below never bring in a slack.
		col := d.freeColumn(i)
		if col < 0 {
			continue // an equality among atoms alone does not occur: m always has a coefficient
		}
		if !d.pivot(i, col) {
			return false
		}
		d.outer[col] = dropped
	}
	return true
}

// freeColumn picks the free column with the smallest cell in a row; -1 if there is none.
func (d *dictionary) freeColumn(row int) int {
	best := -1
	for col, v := range d.outer {
		if v < 0 || int(v) >= d.free || d.cells[row][col] == 0 {
			continue
		}
		if best < 0 || abs64(d.cells[row][col]) < abs64(d.cells[row][best]) {
			best = col
		}
	}
	return best
}

// settleFree brings every free variable into the basis, where it stays. One that appears in no
// row is left outside for good.
func (d *dictionary) settleFree() bool {
	for col := range d.outer {
		if v := d.outer[col]; v < 0 || int(v) >= d.free {
			continue
		}
		best := -1
		for row, b := range d.basic {
			if int(b) < d.free || d.cells[row][col] == 0 {
				continue
			}
			if best < 0 || abs64(d.cells[row][col]) < abs64(d.cells[best][col]) {
				best = row
			}
		}
		if best < 0 {
			d.outer[col] = loose
			continue
		}
		if !d.pivot(best, col) {
			return false
		}
	}
	return true
}

// pivot swaps the basic variable of a row with the variable of a column; false if a cell grows
// beyond mostCell, after which the dictionary is spoilt.
func (d *dictionary) pivot(row, col int) bool {
	p := d.cells[row][col]
	sign := int64(1)
	if p < 0 {
		sign = -1
	}
	pr := d.cells[row]
	for i, cells := range d.cells {
		if i == row {
			continue
		}
		q := cells[col]
		for k := range cells {
			if k == col {
				continue
			}
			x, ok := cross(cells[k], p, q, pr[k], d.den)
			if !ok {
				return false
			}
			cells[k] = sign * x
		}
		cells[col] = sign * q
	}
	for k := range pr {
		if k == col {
			pr[k] = sign * d.den
		} else {
			pr[k] = -sign * pr[k]
		}
	}
	d.den = sign * p
	d.basic[row], d.outer[col] = d.outer[col], d.basic[row]
	return true
}

// cross is (a·p - q·b) / den, which comes out even; ok is false beyond mostCell.
func cross(a, p, q, b, den int64) (int64, bool) {
	const small = 1 << 31
	if abs64(a)|abs64(p)|abs64(q)|abs64(b) < small {
		x := (a*p - q*b) / den
		return x, abs64(x) < mostCell
	}
	x := new(big.Int).Mul(big.NewInt(a), big.NewInt(p))
	x.Sub(x, new(big.Int).Mul(big.NewInt(q), big.NewInt(b))).Quo(x, big.NewInt(den))
	return x.Int64(), x.IsInt64() && abs64(x.Int64()) < mostCell
}

// point is one movement's atoms, as whole numbers with their errors and, when asked for, exact.
type point struct {
	judge *Judge
	sit   *situation
	value []int64
	err   []int64
	exact []*big.Rat
}

func (j *Judge) point(s *rows, sit *situation, p *point) {
	p.judge, p.sit, p.exact = j, sit, nil
	p.value, p.err = p.value[:0], p.err[:0]
	if sit.r == nil {
		return
	}
	for _, a := range s.atoms {
		v, e := j.fixedAtom(a, sit)
		p.value, p.err = append(p.value, v), append(p.err, e)
	}
}

// sign is the sign of a row's value at the dictionary's own point, exactly.
func (d *dictionary) sign(row int, p *point) int {
	cells := d.cells[row][len(d.outer):]
	if len(p.value) == len(cells) {
		hi, lo, off := int64(0), uint64(0), uint64(0)
		for k, c := range cells {
			if c == 0 {
				continue
			}
			hi, lo = addProduct(hi, lo, c, p.value[k])
			off += abs64(c) * uint64(p.err[k])
		}
		if s := signBeyond(hi, lo, off); s != 0 || off == 0 {
			return s
		}
	}
	return d.exactValue(row, p).Sign()
}

// addProduct adds a·b to a 128-bit sum.
func addProduct(hi int64, lo uint64, a, b int64) (int64, uint64) {
	h, l := bits.Mul64(uint64(a), uint64(b))
	h -= uint64(a>>63)&uint64(b) + uint64(b>>63)&uint64(a)
	lo, carry := bits.Add64(lo, l, 0)
	return int64(uint64(hi) + h + carry), lo
}

// signBeyond is the sign of a 128-bit sum if its magnitude is above off, else 0.
func signBeyond(hi int64, lo, off uint64) int {
	neg := hi < 0
	if neg {
		var borrow uint64
		lo, borrow = bits.Sub64(0, lo, 0)
		hi = int64(-uint64(hi) - borrow)
	}
	switch {
	case hi == 0 && lo <= off:
		return 0
	case neg:
		return -1
	}
	return 1
}

// exactValue is a row's value times den, in thousandths.
func (d *dictionary) exactValue(row int, p *point) *big.Rat {
	sum := new(big.Rat)
	for k, c := range d.cells[row][len(d.outer):] {
		if c != 0 {
			sum.Add(sum, new(big.Rat).Mul(new(big.Rat).SetInt64(c), p.atom(d.sys, k)))
		}
	}
	return sum
}

// atom is atom k as a big number.
func (p *point) atom(s *rows, k int) *big.Rat {
	if p.exact == nil {
		p.exact = make([]*big.Rat, len(s.atoms))
	}
	if p.exact[k] == nil {
		p.exact[k] = p.judge.exactAtom(s.atoms[k], p.sit)
	}
	return p.exact[k]
}

// feasible moves the dictionary until its own point satisfies every row, or one row proves that
// none does: the dual simplex method with nothing to optimise, by Bland's rule, which ends.
// ok is false if cells grew too large.
func (d *dictionary) feasible(p *point) (yes, ok bool) {
	for {
		row := d.violated(p)
		if row < 0 {
			return true, true
		}
		col := d.entering(row)
		if col < 0 {
			return false, true
		}
		if !d.pivot(row, col) {
			return false, false
		}
	}
}

// violated is the row of the least slack below zero; -1 if there is none.
func (d *dictionary) violated(p *point) int {
	best := -1
	for row, b := range d.basic {
		if int(b) >= d.free && (best < 0 || b < d.basic[best]) && d.sign(row, p) < 0 {
			best = row
		}
	}
	return best
}

// entering is the column of the least slack that can lift a row.
func (d *dictionary) entering(row int) int {
	best := -1
	for col, v := range d.outer {
		if v >= 0 && d.cells[row][col] > 0 && (best < 0 || v < d.outer[best]) {
			best = col
		}
	}
	return best
}

// extreme is the greatest (sign +1) or least (-1) value of a variable over the feasible points, in
// thousandths, from a dictionary that is feasible at p: the primal simplex method by Bland's rule.
// bounded is false if there is none; ok is false if cells grew too large.
func (d *dictionary) extreme(v int32, sign int64, p *point) (value *big.Rat, bounded, ok bool) {
	row := d.rowOf(v)
	if row < 0 {
		return nil, false, true
	}
	for {
		col := -1
		for c, w := range d.outer {
			if w == loose && d.cells[row][c] != 0 {
				return nil, false, true
			}
			if w >= 0 && sign*d.cells[row][c] > 0 && (col < 0 || w < d.outer[col]) {
				col = c
			}
		}
		if col < 0 {
			value = d.exactValue(row, p)
			return value.Quo(value, new(big.Rat).SetInt64(d.den)), true, true
		}
		leaving := d.leaving(col, p)
		if leaving < 0 {
			return nil, false, true
		}
		if !d.pivot(leaving, col) {
			return nil, false, false
		}
	}
}

func (d *dictionary) rowOf(v int32) int {
	for row, b := range d.basic {
		if b == v {
			return row
		}
	}
	return -1
}

// leaving is the row that first reaches zero as a column's variable grows.
func (d *dictionary) leaving(col int, p *point) int {
	best := -1
	var least *big.Rat
	for row, b := range d.basic {
		k := d.cells[row][col]
		if int(b) < d.free || k >= 0 {
			continue
		}
		ratio := d.exactValue(row, p)
		ratio.Quo(ratio, new(big.Rat).SetInt64(-k))
		if c := 0; best >= 0 {
			if c = ratio.Cmp(least); c > 0 || c == 0 && b > d.basic[best] {
				continue
			}
		}
		best, least = row, ratio
	}
	return best
}
