package sheet

import (
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"ratehouse/trial"
)

const (
	// mostRate bounds a rate, in thousandths of s/d either way.
	mostRate = 600_000
	// HalfDial bounds a signed state in thousandths of a second: half of the 12 h of a dial, unless
	// the calibre says otherwise.
	HalfDial = 6 * 3600 * 1000
)

// Movement is one row of rates. Its slices are valid until the next row is read.
type Movement struct {
	Line     int
	Serial   []byte
	Calibre  []byte // nil if the file has no such column
	Category int    // index into the programme's categories
	Rates    []int64
	Known    []uint64 // bit (d-1)%64 of word (d-1)/64: day d is there
}

// Movements reads rows of rates, or of states with 24 h between them, for a programme.
type Movements struct {
	table      *table
	prog       *trial.Programme
	states     bool
	seen       *seen
	row        Movement
	serial     int
	category   int
	calibre    int
	numbers    []int // day (or state) k by column; -1 for another column
	values     []int64
	have       []bool
	perDay     int64 // readings a day: what a difference of states is multiplied by
	careful    bool  // read every row cell by cell: a test compares
	HasCalibre bool  // the file has a column calibre
}

// ErrInterval refuses states of a programme whose interval is no whole part of 24 h.
var ErrInterval = errors.New("states of a programme that is not read a whole number of times in 24 h make no whole thousandths of s/d; give rates")

// OpenMovements reads the header: serial, category, d1..dn, or with states s0..sn; calibre is
// optional. States are one a programme day, so far apart as the programme reads. The error is a
// *Refusal, ErrInterval, or the reader's own.
func OpenMovements(r io.Reader, p *trial.Programme, states bool) (*Movements, error) {
	if states && trial.SecondsPerDay%p.Reading.IntervalS != 0 {
		return nil, ErrInterval
	}
	first, letter := 1, "d"
	if states {
		first, letter = 0, "s"
	}
	columns := []column{{"serial", false}, {"category", false}}
	for k := first; k <= len(p.Days); k++ {
		columns = append(columns, column{letter + strconv.Itoa(k), false})
	}
	columns = append(columns, column{"calibre", true})
	t, err := openTable(r, columns)
	if err != nil {
		return nil, err
	}
	m := &Movements{table: t, prog: p, states: states, seen: newSeen(),
		serial: t.find("serial"), category: t.find("category"), calibre: t.find("calibre")}
	m.HasCalibre = m.calibre >= 0
	m.perDay = trial.SecondsPerDay / p.Reading.IntervalS
	for _, name := range t.names {
		k, err := strconv.Atoi(strings.TrimPrefix(name, letter))
		if err != nil {
			k = -1
		}
		m.numbers = append(m.numbers, k)
	}
	m.values, m.have = make([]int64, len(p.Days)+1), make([]bool, len(p.Days)+1)
	m.row.Rates = make([]int64, len(p.Days))
	m.row.Known = make([]uint64, (len(p.Days)+63)/64)
	return m, nil
}

// Next reads the next row: a movement or a refusal, never both; io.EOF after the last. The first
// fault from the left is the one named.
func (m *Movements) Next() (*Movement, *Refusal, error) {
	line, err := m.table.nextLine()
	if err != nil {
		return nil, nil, err
	}
	if !m.careful && m.quick(line) {
		return &m.row, nil, nil
	}
	fault, countable := m.table.row(line)
	if fault != nil && !countable {
		return nil, fault, nil
	}
	place := len(m.table.cells)
	if fault != nil {
		place = m.table.find(fault.Column)
	}
	m.note(&fault, &place)
	m.readCells(&fault, &place)
	if m.states {
		m.differences(&fault, &place)
	}
	if fault != nil {
		return nil, fault, nil
	}
	m.row.Line = m.table.line
	m.row.Serial = m.table.cells[m.serial]
	if m.HasCalibre {
		m.row.Calibre = m.table.cells[m.calibre]
	}
	return &m.row, nil, nil
}

// worse replaces a fault by one further left.
func (m *Movements) worse(fault **Refusal, place *int, at int, r *Refusal) {
	if *fault == nil || at < *place {
		*fault, *place = r.at(m.table.line, m.table.names[at]), at
	}
}

// note checks the serial and remembers it.
func (m *Movements) note(fault **Refusal, place *int) {
	serial := m.table.cells[m.serial]
	switch {
	case len(serial) == 0:
		m.worse(fault, place, m.serial, refuse(Blank))
		return
	case *fault != nil && *place == m.serial: // bytes that are not text
		return
	}
	if line := m.seen.first(serial, m.table.line); line != 0 {
		m.worse(fault, place, m.serial, refuse(Duplicate, Visible(string(serial)), strconv.Itoa(line), strconv.Itoa(m.table.line)))
	}
}

// readCells reads category and numbers.
func (m *Movements) readCells(fault **Refusal, place *int) {
	comma := m.table.decimalComma()
	clear(m.row.Known)
	clear(m.have)
	for at, cell := range m.table.cells {
		k := m.numbers[at]
		if k < 0 || len(cell) == 0 {
			continue
		}
		v, ok := quickMilli(cell)
		if !ok {
			var r *Refusal
			if v, r = parseNumber(cell, comma); r != nil && r.Code != TooLarge {
				m.worse(fault, place, at, r)
				continue
			} else if r != nil {
				v = math.MaxInt64 // beyond every bound; the message shows the cell
			}
		}
		if uint64(v+mostRate) > 2*mostRate {
			r := m.bound(v, cell)
			if r == nil {
				m.values[k], m.have[k] = v, true
				continue
			}
			m.worse(fault, place, at, r)
			continue
		}
		if m.states {
			m.values[k], m.have[k] = v, true
			continue
		}
		m.row.Rates[k-1] = v
		m.row.Known[(k-1)>>6] |= 1 << ((k - 1) & 63)
	}
	m.readCategory(fault, place)
}

func (m *Movements) readCategory(fault **Refusal, place *int) {
	cell := m.table.cells[m.category]
	for i := range m.prog.Categories {
		if m.prog.Categories[i].Code == string(cell) {
			m.row.Category = i
			return
		}
	}
	var codes []string
	for _, c := range m.prog.Categories {
		codes = append(codes, c.Code)
	}
	m.worse(fault, place, m.category, refuse(BadCategory, Visible(string(cell)), strings.Join(codes, ", ")))
}

// bound checks the size of a rate or state.
func (m *Movements) bound(v int64, cell []byte) *Refusal {
	shown := trial.Milli(v).String()
	if v == math.MaxInt64 {
		shown = strings.Trim(Visible(string(cell)), `"`)
	}
	switch {
	case m.states && (v > HalfDial || v < -HalfDial):
		return refuse(StateBeyond, shown, trial.Milli(HalfDial).String())
	case !m.states:
		return refuse(Beyond, shown, "600", "s/d")
	}
	return nil
}

// differences makes rates of neighbouring states one day apart.
func (m *Movements) differences(fault **Refusal, place *int) {
	for k := 1; k < len(m.values); k++ {
		if !m.have[k-1] || !m.have[k] {
			continue
		}
		d := (m.values[k] - m.values[k-1]) * m.perDay
		if d > mostRate || d < -mostRate {
			m.worse(fault, place, m.table.find(fmt.Sprint("s", k)),
				refuse(JumpBeyond, trial.Milli(m.values[k-1]).String(), trial.Milli(m.values[k]).String()))
			continue
		}
		m.row.Rates[k-1] = d
		m.row.Known[(k-1)>>6] |= 1 << ((k - 1) & 63)
	}
}
