package sheet

import (
	"bytes"
	"encoding/json"
	"io"
	"unicode/utf8"

	"ratehouse/trial"
)

// Verdicts writes judged movements: serial, category, verdict, the criteria in the programme's
// order with 6 decimals half to even, failed, unreachable, then calibre and extra columns if there
// are any. CSV, or one JSON object a line with the same keys.
type Verdicts struct {
	w       io.Writer
	buf     []byte
	json    bool
	calibre bool
	symbols []string
	keys    [][]byte  // JSON: the text before each value
	chances []float64 // of the next movement; nil: no such columns
	err     error
}

// VerdictFormat is how verdicts are written.
type VerdictFormat string

// The formats.
const (
	CSV  VerdictFormat = "csv"
	JSON VerdictFormat = "json"
)

// NewVerdicts makes a writer and, for CSV, writes the header. extra names columns that come last.
func NewVerdicts(w io.Writer, p *trial.Programme, format VerdictFormat, calibre bool, extra ...string) *Verdicts {
	v := &Verdicts{}
	v.begin(w, p, format, calibre, extra)
	return v
}

func (v *Verdicts) begin(w io.Writer, p *trial.Programme, format VerdictFormat, calibre bool, extra []string) {
	v.w, v.json, v.calibre, v.buf = w, format == JSON, calibre, make([]byte, 0, 1<<16)
	names := []string{"serial", "category", "verdict"}
	for _, c := range p.Criteria {
		v.symbols = append(v.symbols, c.Symbol)
		names = append(names, c.Symbol)
	}
	names = append(names, "failed", "unreachable")
	if v.chances != nil {
		names = append(names, chanceNames(p)...)
	}
	if calibre {
		names = append(names, "calibre")
	}
	names = append(names, extra...)
	for i, name := range names {
		lead := byte(',')
		if i == 0 {
			lead = '{'
		}
		v.keys = append(v.keys, append(appendJSON([]byte{lead}, []byte(name)), ':'))
		if !v.json {
			v.cell(i, []byte(name))
		}
	}
	if !v.json {
		v.buf = append(v.buf, '\n')
	}
}

// Write writes one movement. extra must match the columns named at the start. The first error of
// the writer beneath is given by this and every later call.
func (v *Verdicts) Write(serial, category, calibre []byte, r *trial.Result, extra ...[]byte) error {
	v.text(0, serial)
	v.text(1, category)
	v.lead(2)
	if v.json {
		v.buf = appendJSON(v.buf, []byte(r.Verdict.String()))
	} else {
		v.buf = append(v.buf, r.Verdict.String()...)
	}
	for i := range r.Values {
		v.number(3+i, &r.Values[i])
	}
	at := 3 + len(r.Values)
	v.list(at, r, func(x *trial.Value) bool { return x.Outcome == trial.Outside })
	v.list(at+1, r, func(x *trial.Value) bool { return x.Unreachable })
	at = v.probabilities(at + 2)
	if v.calibre {
		v.text(at, calibre)
		at++
	}
	for i, cell := range extra {
		v.text(at+i, cell)
	}
	if v.json {
		v.buf = append(v.buf, '}')
	}
	v.buf = append(v.buf, '\n')
	if len(v.buf) >= 1<<16-1<<12 {
		v.flush()
	}
	return v.err
}

// Close writes what is left and gives the first error.
func (v *Verdicts) Close() error {
	v.flush()
	return v.err
}

func (v *Verdicts) flush() {
	if v.err == nil && len(v.buf) > 0 {
		_, v.err = v.w.Write(v.buf)
	}
	v.buf = v.buf[:0]
}

// lead writes what stands before a value.
func (v *Verdicts) lead(i int) {
	if v.json {
		v.buf = append(v.buf, v.keys[i]...)
	} else if i > 0 {
		v.buf = append(v.buf, ',')
	}
}

func (v *Verdicts) text(i int, cell []byte) {
	if !v.json {
		v.cell(i, cell)
		return
	}
	v.lead(i)
	if len(cell) == 0 {
		v.buf = append(v.buf, "null"...)
		return
	}
	v.buf = appendJSON(v.buf, cell)
}

func (v *Verdicts) cell(i int, cell []byte) {
	if i > 0 {
		v.buf = append(v.buf, ',')
	}
	v.buf = appendCell(v.buf, cell)
}

func (v *Verdicts) number(i int, x *trial.Value) {
	const decimals = 6
	v.lead(i)
	switch {
	case !x.Known && v.json:
		v.buf = append(v.buf, "null"...)
	case !x.Known:
	case v.json:
		v.buf = append(x.AppendDecimal(append(v.buf, '"'), decimals), '"')
	default:
		v.buf = x.AppendDecimal(v.buf, decimals)
	}
}

// list writes symbols: apart by blanks, or as a JSON list, null when empty.
func (v *Verdicts) list(i int, r *trial.Result, want func(*trial.Value) bool) {
	v.lead(i)
	n := 0
	for k := range r.Values {
		if !want(&r.Values[k]) {
			continue
		}
		switch {
		case v.json && n == 0:
			v.buf = append(v.buf, '[')
		case v.json:
			v.buf = append(v.buf, ',')
		case n > 0:
			v.buf = append(v.buf, ' ')
		}
		if v.json {
			v.buf = appendJSON(v.buf, []byte(v.symbols[k]))
		} else {
			v.buf = appendBare(v.buf, v.symbols[k])
		}
		n++
	}
	switch {
	case v.json && n == 0:
		v.buf = append(v.buf, "null"...)
	case v.json:
		v.buf = append(v.buf, ']')
	}
}

// appendBare appends a symbol to a list cell; symbols of checked programmes need no quoting.
func appendBare(dst []byte, symbol string) []byte { return append(dst, symbol...) }

// appendCell appends a CSV cell exactly as given, in quotation marks only where needed.
func appendCell(dst, cell []byte) []byte {
	if !bytes.ContainsAny(cell, ",\"\r\n") {
		return append(dst, cell...)
	}
	dst = append(dst, '"')
	for _, c := range cell {
		if c == '"' {
			dst = append(dst, '"')
		}
		dst = append(dst, c)
	}
	return append(dst, '"')
}

// appendJSON appends a JSON string.
func appendJSON(dst, s []byte) []byte {
	for _, c := range s {
		if c < ' ' || c == '"' || c == '\\' || c >= utf8.RuneSelf {
			text, err := json.Marshal(string(s))
			if err != nil { // a string always has a JSON form
				panic(err)
			}
			return append(dst, text...)
		}
	}
	return append(append(append(dst, '"'), s...), '"')
}
