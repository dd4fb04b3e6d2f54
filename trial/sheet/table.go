package sheet

import (
	"bytes"
	"errors"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// table reads a separated text with a header, line by line. A cell never spans lines.
type table struct {
	lines *lines
	sep   byte
	names []string // columns in file order
	cells [][]byte // of the current row, trimmed; valid until the next
	plain []byte   // cells that had quotation marks, without them
	line  int      // of the current row
}

// column says what a file may or must have.
type column struct {
	name     string
	optional bool
}

// openTable reads the header: the first line that is not blank. The error is a *Refusal, or the
// reader's own.
func openTable(r io.Reader, columns []column) (*table, error) {
	l, err := newLines(r)
	if err != nil {
		return nil, err
	}
	t := &table{lines: l}
	line, err := t.nextLine()
	if errors.Is(err, io.EOF) {
		return nil, refuse(EmptyFile).at(1, columns[0].name)
	}
	if err != nil {
		return nil, err
	}
	if line == nil {
		return nil, refuse(LongLine, strconv.Itoa(mostLine)).at(t.line, columns[0].name)
	}
	return t, t.header(line, columns)
}

func (t *table) header(line []byte, columns []column) error {
	if !utf8.Valid(line) {
		return refuse(BadText, badBytes(line)).at(t.line, columns[0].name)
	}
	t.sep = separator(line)
	if fault := t.split(line); fault != nil {
		return fault.at(t.line, columns[0].name)
	}
	for i, cell := range t.cells {
		name := string(cell)
		shown := name
		if name == "" || strings.ContainsAny(name, ` ,:;"`) || Visible(name) != `"`+name+`"` {
			shown = Visible(name)
		}
		if !slices.ContainsFunc(columns, func(c column) bool { return c.name == name }) {
			return refuse(UnknownColumn, columnNames(columns)).at(t.line, shown)
		}
		if slices.Contains(t.names[:i], name) {
			return refuse(RepeatedColumn).at(t.line, name)
		}
		t.names = append(t.names, name)
	}
	for _, c := range columns {
		if !c.optional && !slices.Contains(t.names, c.name) {
			return refuse(MissingColumn).at(t.line, c.name)
		}
	}
	return nil
}

func columnNames(columns []column) string {
	var names []string
	for _, c := range columns {
		names = append(names, c.name)
	}
	return strings.Join(names, ", ")
}

// separator is the first comma, semicolon or tab outside quotation marks; comma if there is none.
func separator(line []byte) byte {
	quoted := false
	for _, c := range line {
		switch {
		case c == '"':
			quoted = !quoted
		case !quoted && (c == ',' || c == ';' || c == '\t'):
			return c
		}
	}
	return ','
}

// find is the place of a column in the file; -1 if it has none.
func (t *table) find(name string) int { return slices.Index(t.names, name) }

// decimalComma tells whether numbers may use a comma.
func (t *table) decimalComma() bool { return t.sep != ',' }

// nextLine gives the next line that is not blank, its number in t.line; nil for one too long.
func (t *table) nextLine() ([]byte, error) {
	for {
		line, long, err := t.lines.next()
		if err != nil {
			return nil, err
		}
		t.line = t.lines.n
		if long {
			return nil, nil
		}
		if len(line) > 0 && (line[0] > ' ' && line[0] < utf8.RuneSelf || len(trim(line)) > 0) {
			return line, nil
		}
	}
}

// next reads the next row into t.cells. A fault of the row as a whole comes back as a refusal;
// countable tells that the row has the right number of cells all the same, so that its other
// cells can be read.
func (t *table) next() (fault *Refusal, countable bool, err error) {
	line, err := t.nextLine()
	if err != nil {
		return nil, false, err
	}
	fault, countable = t.row(line)
	return fault, countable, nil
}

// row takes one line apart; nil stands for one too long.
func (t *table) row(line []byte) (fault *Refusal, countable bool) {
	if line == nil {
		return refuse(LongLine, strconv.Itoa(mostLine)).at(t.line, "serial"), false
	}
	valid := utf8.Valid(line)
	if fault = t.split(line); fault != nil {
		return fault.at(t.line, fault.Column), false
	}
	if len(t.cells) != len(t.names) {
		if !valid {
			return refuse(BadText, badBytes(line)).at(t.line, "serial"), false
		}
		return refuse(CellCount, strconv.Itoa(len(t.cells)), strconv.Itoa(len(t.names))).at(t.line, "serial"), false
	}
	if !valid {
		for i, cell := range t.cells {
			if !utf8.Valid(cell) {
				return refuse(BadText, badBytes(cell)).at(t.line, t.names[i]), true
			}
		}
	}
	return nil, true
}

// split cuts a line into trimmed cells.
func (t *table) split(line []byte) *Refusal {
	t.cells, t.plain = t.cells[:0], t.plain[:0]
	if bytes.IndexByte(line, '"') >= 0 {
		return t.splitQuoted(line)
	}
	for {
		i := bytes.IndexByte(line, t.sep)
		if i < 0 {
			t.cells = append(t.cells, trim(line))
			return nil
		}
		t.cells = append(t.cells, trim(line[:i]))
		line = line[i+1:]
	}
}

// splitQuoted cuts a line that has quotation marks. They count only around a whole cell, and are
// doubled inside.
func (t *table) splitQuoted(line []byte) *Refusal {
	for {
		rest := t.skipBlanks(line)
		if len(rest) == 0 || rest[0] != '"' {
			i := bytes.IndexByte(line, t.sep)
			cell := line
			if i >= 0 {
				cell = line[:i]
			}
			if bytes.IndexByte(cell, '"') >= 0 {
				return t.quoteFault(refuse(StrayQuote, Visible(string(trim(cell)))))
			}
			t.cells = append(t.cells, trim(cell))
			if i < 0 {
				return nil
			}
			line = line[i+1:]
			continue
		}
		cell, after, closed := t.unquote(rest[1:])
		if !closed {
			return t.quoteFault(refuse(OpenQuote))
		}
		after = t.skipBlanks(after)
		if len(after) > 0 && after[0] != t.sep {
			return t.quoteFault(refuse(StrayQuote, Visible(string(cell))))
		}
		t.cells = append(t.cells, trim(cell))
		if len(after) == 0 {
			return nil
		}
		line = after[1:]
	}
}

// skipBlanks drops blanks in front, but no separator.
func (t *table) skipBlanks(b []byte) []byte {
	for len(b) > 0 {
		r, n := utf8.DecodeRune(b)
		if b[0] == t.sep || !isBlank(r) {
			break
		}
		b = b[n:]
	}
	return b
}

// unquote reads up to the closing quotation mark.
func (t *table) unquote(b []byte) (cell, after []byte, closed bool) {
	start := len(t.plain)
	for {
		i := bytes.IndexByte(b, '"')
		if i < 0 {
			return nil, nil, false
		}
		t.plain = append(t.plain, b[:i]...)
		b = b[i+1:]
		if len(b) == 0 || b[0] != '"' {
			return t.plain[start:len(t.plain):len(t.plain)], b, true
		}
		t.plain = append(t.plain, '"')
		b = b[1:]
	}
}

// quoteFault names the column in which a quotation mark went wrong.
func (t *table) quoteFault(r *Refusal) *Refusal {
	r.Column = "serial"
	if i := len(t.cells); i < len(t.names) {
		r.Column = t.names[i]
	}
	return r
}

// badBytes shows the first bytes that are not text.
func badBytes(b []byte) string {
	for i := 0; i < len(b); {
		r, n := utf8.DecodeRune(b[i:])
		if r == utf8.RuneError && n == 1 {
			return Visible(string(b[i:min(i+4, len(b))]))
		}
		i += n
	}
	return Visible(string(b))
}
