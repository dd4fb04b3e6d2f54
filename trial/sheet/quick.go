package sheet

import (
	"math"
	"unicode/utf8"
)

// quick reads a row without any peculiarity in one pass: plain ASCII cells without blanks around
// them or quotation marks, plain numbers, nothing wrong. It gives up, having changed nothing that
// lasts, at the first byte that is not of that kind; the row is then read again cell by cell,
// which also finds the reason if it must be refused.
func (m *Movements) quick(line []byte) bool {
	t := m.table
	cells := t.cells[:len(t.names)] // there is room since the header
	clear(m.row.Known)
	if m.states {
		clear(m.have)
	}
	at := 0
	for i, k := range m.numbers {
		end := at
		if k < 0 {
			for end < len(line) && line[end] != t.sep {
				if c := line[end]; c < ' ' || c == '"' || c >= utf8.RuneSelf {
					return false
				}
				end++
			}
			if end > at && (line[at] == ' ' || line[end-1] == ' ') {
				return false
			}
			cells[i] = line[at:end]
		} else if at < len(line) && line[at] != t.sep {
			var v int64
			if v, end = plainMilli(line, at); uint64(v+mostRate) > 2*mostRate {
				return false
			}
			m.set(k, v)
		}
		switch last := i == len(m.numbers)-1; {
		case last && end == len(line):
		case !last && end < len(line) && line[end] == t.sep:
		default:
			return false
		}
		at = end + 1
	}
	return m.finish(cells)
}

// set notes a number within ±600.
func (m *Movements) set(k int, v int64) {
	if m.states {
		m.values[k], m.have[k] = v, true
		return
	}
	m.row.Rates[k-1] = v
	m.row.Known[(k-1)>>6] |= 1 << ((k - 1) & 63)
}

// plainMilli reads a number from line[at:]: an ASCII sign, up to nine digits, a point, up to three
// decimals. It stops at the first other byte; a number it cannot read is beyond every bound.
func plainMilli(line []byte, at int) (v int64, end int) {
	i := at
	c := line[i]
	neg := c == '-'
	if neg || c == '+' {
		i++
	}
	from := i
	for i < len(line) && line[i]-'0' <= 9 {
		v = v*10 + int64(line[i]-'0')
		i++
	}
	digits, decimals := i-from, 0
	if i < len(line) && line[i] == '.' {
		i++
		from = i
		for i < len(line) && line[i]-'0' <= 9 {
			v = v*10 + int64(line[i]-'0')
			i++
		}
		decimals = i - from
	}
	if digits+decimals == 0 || digits > 9 || decimals > 3 {
		return math.MaxInt64 / 2, i
	}
	v *= thousandths[decimals]
	if neg {
		v = -v
	}
	return v, i
}

var thousandths = [4]int64{1000, 100, 10, 1}

// finish checks what a quick row holds and remembers its serial, last of all.
func (m *Movements) finish(cells [][]byte) bool {
	serial, category := cells[m.serial], cells[m.category]
	if len(serial) == 0 {
		return false
	}
	known := false
	for i := range m.prog.Categories {
		if m.prog.Categories[i].Code == string(category) {
			m.row.Category, known = i, true
			break
		}
	}
	if !known || m.states && !m.quickDifferences() || m.seen.first(serial, m.table.line) != 0 {
		return false
	}
	m.row.Line, m.row.Serial = m.table.line, serial
	if m.HasCalibre {
		m.row.Calibre = cells[m.calibre]
	}
	return true
}

// quickDifferences is differences for a row in which nothing is wrong.
func (m *Movements) quickDifferences() bool {
	for k := 1; k < len(m.values); k++ {
		if !m.have[k-1] || !m.have[k] {
			continue
		}
		d := (m.values[k] - m.values[k-1]) * m.perDay
		if uint64(d+mostRate) > 2*mostRate {
			return false
		}
		m.row.Rates[k-1] = d
		m.row.Known[(k-1)>>6] |= 1 << ((k - 1) & 63)
	}
	return true
}
