package sheet

import "fmt"

// Code names why something was refused; web/words says it in other languages.
type Code string

// Refusal is one fault in a table: where, what, and what it is about. Line 1 is the header; Line 0
// is a value without a table. Args are made visible: control and invisible characters are escaped.
type Refusal struct {
	Line   int
	Column string
	Code   Code
	Args   []string
}

// Error is the English text for the command line: "line N, column NAME: reason".
func (r *Refusal) Error() string {
	switch {
	case r.Line == 0 && r.Column == "":
		return r.Reason()
	case r.Line == 0:
		return "column " + r.Column + ": " + r.Reason()
	case r.Column == "":
		return fmt.Sprintf("line %d: %s", r.Line, r.Reason())
	}
	return fmt.Sprintf("line %d, column %s: %s", r.Line, r.Column, r.Reason())
}

// Reason is the English reason without the place.
func (r *Refusal) Reason() string { return string(r.Code) }
