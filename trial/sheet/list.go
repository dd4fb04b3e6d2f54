package sheet

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"ratehouse/trial"
)

// Intake is one line of an intake list.
type Intake struct {
	Line   int
	Serial string
	Place  string // empty if the list has none
}

// ReadIntake reads one serial a line without header, or a table with header serial[,place]. Good
// lines are returned beside the refusals; err is a *Refusal if the list as a whole cannot be read,
// or the reader's own error. Serials that a spreadsheet would take for a formula are refused.
func ReadIntake(r io.Reader) (rows []Intake, refused []*Refusal, err error) {
	l, err := newLines(r)
	if err != nil {
		return nil, nil, err
	}
	t := &table{lines: l, names: []string{"serial"}, sep: ','}
	line, err := t.nextLine()
	if errors.Is(err, io.EOF) {
		return nil, nil, refuse(EmptyFile).at(1, "serial")
	}
	if err != nil {
		return nil, nil, err
	}
	in := &intake{table: t, seen: newSeen(), place: -1}
	if in.isHeader(line) {
		t.names = nil
		if err := t.header(line, []column{{"serial", false}, {"place", true}}); err != nil {
			return nil, nil, err
		}
		in.serial, in.place = t.find("serial"), t.find("place")
	} else {
		in.first = bytes.Clone(line)
		in.headless, in.long = true, line == nil
	}
	return in.read()
}

// intake is one list being read.
type intake struct {
	table         *table
	seen          *seen
	serial, place int
	headless      bool
	first         []byte // the first line of a list without header, still to be read
	long          bool
}

// isHeader tells a header from a serial: one of its cells is the word serial.
func (in *intake) isHeader(line []byte) bool {
	if line == nil || !utf8.Valid(line) {
		return false
	}
	in.table.sep = separator(line)
	if in.table.split(line) != nil {
		return false
	}
	return slices.ContainsFunc(in.table.cells, func(c []byte) bool { return string(c) == "serial" })
}

func (in *intake) read() (rows []Intake, refused []*Refusal, err error) {
	for {
		fault, _, err := in.next()
		if errors.Is(err, io.EOF) {
			return rows, refused, nil
		}
		if err != nil {
			return rows, refused, err
		}
		if fault == nil {
			fault = in.check()
		}
		if fault != nil {
			refused = append(refused, fault)
			continue
		}
		row := Intake{Line: in.table.line, Serial: string(in.table.cells[in.serial])}
		if in.place >= 0 {
			row.Place = string(in.table.cells[in.place])
		}
		rows = append(rows, row)
	}
}

// next reads a row; without a header each line shows its own separator.
func (in *intake) next() (*Refusal, bool, error) {
	if !in.headless {
		return in.table.next()
	}
	line, t := in.first, in.table
	if line == nil && !in.long {
		var err error
		if line, err = t.nextLine(); err != nil {
			return nil, false, err
		}
	}
	in.first, in.long = nil, false
	switch {
	case line == nil:
		return refuse(LongLine, strconv.Itoa(mostLine)).at(t.line, "serial"), false, nil
	case !utf8.Valid(line):
		return refuse(BadText, badBytes(line)).at(t.line, "serial"), false, nil
	}
	t.sep = separator(line)
	if fault := t.split(line); fault != nil {
		return fault.at(t.line, "serial"), false, nil
	}
	if len(t.cells) != 1 {
		return refuse(CellCount, strconv.Itoa(len(t.cells)), "1").at(t.line, "serial"), false, nil
	}
	return nil, true, nil
}

// check checks and remembers the serial of the current row.
func (in *intake) check() *Refusal {
	serial := in.table.cells[in.serial]
	fault := CheckSerial(string(serial))
	if len(serial) > 0 {
		if line := in.seen.first(serial, in.table.line); line != 0 && fault == nil {
			fault = refuse(Duplicate, Visible(string(serial)), strconv.Itoa(line), strconv.Itoa(in.table.line))
		}
	}
	if fault != nil {
		return fault.at(in.table.line, "serial")
	}
	return nil
}

// CheckSerial tells what is wrong with a serial to be registered: blank, or beginning with
// = + - @ or a control character, which a spreadsheet may run as a formula. nil if it is fine.
func CheckSerial(serial string) *Refusal {
	if serial == "" {
		return refuse(Blank)
	}
	if r, _ := utf8.DecodeRuneInString(serial); strings.ContainsRune("=+-@", r) || unicode.IsControl(r) {
		return refuse(BadSerial, Visible(serial), character(r))
	}
	return nil
}

// Reading is one line of a readings file. Exactly one of HasValue and Code is set.
type Reading struct {
	Line     int
	Serial   string
	Step     int // step k, or the programme day if ByDay
	ByDay    bool
	HasValue bool
	Value    int64  // thousandths
	Code     string // an observation code
	ReadAt   string // RFC 3339, checked; empty if not given
	ReadBy   string
}

// mostSteps bounds a step or day number.
const mostSteps = 9999

// ReadReadings reads a file serial,step|day,value[,code,read_at,read_by]. Good lines are returned
// beside the refusals; err is a *Refusal if the file as a whole cannot be read, or the reader's
// own error. Two lines for one serial and step are refused at the second. The size of a value is
// not judged here: only its batch knows whether it is a rate, a state or a hand.
func ReadReadings(r io.Reader) (rows []Reading, refused []*Refusal, err error) {
	t, err := openTable(r, []column{{"serial", false}, {"step", true}, {"day", true}, {"value", false},
		{"code", true}, {"read_at", true}, {"read_by", true}})
	if err != nil {
		return nil, nil, err
	}
	if (t.find("step") < 0) == (t.find("day") < 0) {
		return nil, nil, refuse(StepAndDay).at(t.line, "step")
	}
	seen := newSeen()
	for {
		fault, countable, err := t.next()
		if errors.Is(err, io.EOF) {
			return rows, refused, nil
		}
		if err != nil {
			return rows, refused, err
		}
		if fault == nil && countable {
			var row Reading
			if row, fault = t.reading(seen); fault == nil {
				rows = append(rows, row)
				continue
			}
		}
		refused = append(refused, fault)
	}
}

// reading reads the current row, cell by cell from the left.
func (t *table) reading(seen *seen) (row Reading, fault *Refusal) {
	row.Line, row.ByDay = t.line, t.find("day") >= 0
	fill := []int{}
	for at, cell := range t.cells {
		text := string(cell)
		var r *Refusal
		switch t.names[at] {
		case "serial":
			if row.Serial = text; text == "" {
				r = refuse(Blank)
			}
		case "step", "day":
			row.Step, r = stepOf(text)
		case "value":
			if text != "" {
				fill = append(fill, at)
				row.HasValue = true
				row.Value, r = parseNumber(cell, t.decimalComma())
			}
		case "code":
			if row.Code = text; text != "" {
				fill = append(fill, at)
				if !slices.Contains(trial.Observations(), text) {
					r = refuse(BadCode, Visible(text), strings.Join(trial.Observations(), ", "))
				}
			}
		case "read_at":
			row.ReadAt = text
			if _, err := time.Parse(time.RFC3339Nano, text); text != "" && err != nil {
				r = refuse(BadTime, Visible(text))
			}
		case "read_by":
			row.ReadBy = text
		}
		if r != nil {
			return row, r.at(t.line, t.names[at])
		}
	}
	if len(fill) != 1 {
		return row, refuse(ValueAndCode).at(t.line, "value")
	}
	if line := seen.first(fmt.Appendf(nil, "%d\x00%s", row.Step, row.Serial), t.line); line != 0 {
		return row, refuse(RepeatedCell, Visible(row.Serial), strconv.Itoa(line)).at(t.line, "serial")
	}
	return row, nil
}

func stepOf(text string) (int, *Refusal) {
	if text == "" {
		return 0, refuse(Blank)
	}
	k, err := strconv.Atoi(text)
	if err != nil || !allDigits([]byte(text)) || k > mostSteps {
		return 0, refuse(BadStep, Visible(text), strconv.Itoa(mostSteps))
	}
	return k, nil
}
