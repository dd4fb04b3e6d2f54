package trial

import "math/big"

// tableau solves the same system as dictionary by big rational numbers alone: slow, without any
// bound on its cells. It answers where a dictionary's cells outgrow 44 bits.
type tableau struct {
	free  int
	basic []int32
	outer []int32
	cells [][]*big.Rat // row by column; the last column is the constant
}

func newTableau(j *Judge, s *rows, sit *situation) *tableau {
	n := len(s.days)
	t := &tableau{free: n, outer: make([]int32, n)}
	for v := range t.outer {
		t.outer[v] = int32(v)
	}
	atoms := make([]*big.Rat, len(s.atoms))
	for k, a := range s.atoms {
		atoms[k] = j.exactAtom(a, sit)
	}
	for i, r := range s.list {
		cells := make([]*big.Rat, n+1)
		for k := range cells {
			cells[k] = new(big.Rat)
		}
		for v, k := range r.vars {
			cells[v].SetInt64(k)
		}
		for a, k := range r.atoms {
			if atoms[a] == nil {
				continue
			}
			cells[n].Add(cells[n], new(big.Rat).Mul(new(big.Rat).SetInt64(k), atoms[a]))
		}
		t.cells = append(t.cells, cells)
		t.basic = append(t.basic, int32(n+i))
	}
	for i, r := range s.list {
		if r.equal {
			t.settleRow(i)
		}
	}
	for col := range t.outer {
		t.settleColumn(col)
	}
	return t
}

// settleRow solves an equality for its first free variable and drops the slack.
func (t *tableau) settleRow(row int) {
	for col, v := range t.outer {
		if v >= 0 && int(v) < t.free && t.cells[row][col].Sign() != 0 {
			t.pivot(row, col)
			t.outer[col] = dropped
			return
		}
	}
}

func (t *tableau) settleColumn(col int) {
	if v := t.outer[col]; v < 0 || int(v) >= t.free {
		return
	}
	for row, b := range t.basic {
		if int(b) >= t.free && t.cells[row][col].Sign() != 0 {
			t.pivot(row, col)
			return
		}
	}
	t.outer[col] = loose
}

func (t *tableau) pivot(row, col int) {
	pr := t.cells[row]
	inv := new(big.Rat).Inv(pr[col])
	for k := range pr {
		if k == col {
			pr[k] = inv
		} else {
			pr[k] = new(big.Rat).Neg(new(big.Rat).Mul(pr[k], inv))
		}
	}
	for i, cells := range t.cells {
		q := cells[col]
		if i == row || q.Sign() == 0 {
			continue
		}
		for k := range cells {
			if k == col {
				cells[k] = new(big.Rat).Mul(q, inv)
			} else {
				cells[k] = new(big.Rat).Add(cells[k], new(big.Rat).Mul(q, pr[k]))
			}
		}
	}
	t.basic[row], t.outer[col] = t.outer[col], t.basic[row]
}

// feasible is the dual simplex method by Bland's rule, as in dictionary.
func (t *tableau) feasible() bool {
	for {
		row := -1
		for i, b := range t.basic {
			if int(b) >= t.free && (row < 0 || b < t.basic[row]) && t.constant(i).Sign() < 0 {
				row = i
			}
		}
		if row < 0 {
			return true
		}
		col := t.improving(row, 1)
		if col < 0 {
			return false
		}
		t.pivot(row, col)
	}
}

func (t *tableau) constant(row int) *big.Rat { return t.cells[row][len(t.outer)] }

// improving is the column of the least variable that moves a row's variable in a direction.
func (t *tableau) improving(row, sign int) int {
	best := -1
	for col, v := range t.outer {
		if v >= 0 && sign*t.cells[row][col].Sign() > 0 && (best < 0 || v < t.outer[best]) {
			best = col
		}
	}
	return best
}

// extreme is the greatest (sign +1) or least (-1) value of a variable; nil if unbounded or if
// nothing is feasible.
func (t *tableau) extreme(v int32, sign int) *big.Rat {
	if !t.feasible() {
		return nil
	}
	row := -1
	for i, b := range t.basic {
		if b == v {
			row = i
		}
	}
	if row < 0 {
		return nil
	}
	for {
		for col, w := range t.outer {
			if w == loose && t.cells[row][col].Sign() != 0 {
				return nil
			}
		}
		col := t.improving(row, sign)
		if col < 0 {
			return new(big.Rat).Set(t.constant(row))
		}
		leaving := t.leaving(col)
		if leaving < 0 {
			return nil
		}
		t.pivot(leaving, col)
	}
}

func (t *tableau) leaving(col int) int {
	best := -1
	var least *big.Rat
	for row, b := range t.basic {
		if int(b) < t.free || t.cells[row][col].Sign() >= 0 {
			continue
		}
		ratio := new(big.Rat).Quo(t.constant(row), t.cells[row][col])
		ratio.Neg(ratio)
		if best >= 0 {
			if c := ratio.Cmp(least); c > 0 || c == 0 && b > t.basic[best] {
				continue
			}
		}
		best, least = row, ratio
	}
	return best
}
