package sheet

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Code names why something was refused; web/words says it in other languages.
type Code string

// The codes. Args of each stand beside its English text below, in order.
const (
	NotNumber      Code = "not_number"
	OtherCharacter Code = "other_character"
	Exponent       Code = "exponent"
	SignApart      Code = "sign_apart"
	TooFine        Code = "too_fine"
	Beyond         Code = "beyond"
	TooLarge       Code = "too_large"
	DecimalComma   Code = "decimal_comma"
	AmbiguousComma Code = "ambiguous_comma"
	Grouping       Code = "grouping"
	IsFormula      Code = "formula"
	Blank          Code = "blank"
	StateBeyond    Code = "state_beyond"
	JumpBeyond     Code = "jump_beyond"
	CellCount      Code = "cell_count"
	OpenQuote      Code = "open_quote"
	StrayQuote     Code = "stray_quote"
	BadText        Code = "bad_text"
	LongLine       Code = "long_line"
	Duplicate      Code = "duplicate"
	BadCategory    Code = "unknown_category"
	BadStep        Code = "bad_step"
	BadTime        Code = "bad_time"
	ValueAndCode   Code = "value_and_code"
	BadCode        Code = "unknown_code"
	EmptyFile      Code = "empty_file"
	MissingColumn  Code = "missing_column"
	UnknownColumn  Code = "unknown_column"
	RepeatedColumn Code = "repeated_column"
	StepAndDay     Code = "step_and_day"
	BadSerial      Code = "bad_serial"
	RepeatedCell   Code = "repeated_cell"
)

var texts = map[Code]string{
	NotNumber:      "%s is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank",
	OtherCharacter: "%s is not a number: %s is not allowed in one",
	Exponent:       "%s has an exponent; write the number out",
	SignApart:      "%s has its sign apart from its digits",
	TooFine:        "%s is finer than 0.001; nothing is rounded",
	TooLarge:       "%s has more than 15 digits before the point",
	Beyond:         "%s is beyond ±%s %s",
	DecimalComma:   "%s has a decimal comma, which only files separated by semicolon or tab may use",
	AmbiguousComma: "%s is ambiguous: its comma may be a decimal comma or a thousands separator",
	Grouping:       "%s has digits in groups; write the number without separators",
	IsFormula:      "%s is a formula; write the number itself",
	Blank:          "is blank",
	StateBeyond:    "a state of %s s is beyond ±%s s, half a dial period; give it from the nearer side",
	JumpBeyond:     "from %s s the day before to %s s is a rate beyond ±600 s/d",
	CellCount:      "the row has %s cells, the header %s",
	OpenQuote:      "a quotation mark is still open at the end of the line; a cell never spans lines",
	StrayQuote:     "a quotation mark stands inside the cell %s; put the cell in quotation marks and double it",
	BadText:        "bytes that are not valid text: %s",
	LongLine:       "the line is longer than %s bytes",
	Duplicate:      "serial %s stands on line %s already; line %s repeats it",
	BadCategory:    "%s is not a category of the programme (%s)",
	BadStep:        "%s is not a whole number from 0 to %s",
	BadTime:        "%s is not an instant like 2026-01-31T08:05:00Z (RFC 3339)",
	ValueAndCode:   "exactly one of value and code must be filled",
	BadCode:        "%s is not an observation code (%s)",
	EmptyFile:      "the file is empty; a header is required",
	MissingColumn:  "the column is missing",
	UnknownColumn:  "the column is not known here (%s)",
	RepeatedColumn: "the column appears twice",
	BadSerial:      "serial %s begins with %s; spreadsheets take such a text for a formula",
	RepeatedCell:   "serial %s has a value for this step on line %s already",
	StepAndDay:     "a file has either a column step or a column day",
}

// Refusal is one fault in a table: where, what, and what it is about. Line 1 is the header; Line 0
// is a value without a table. Text in Args is quoted, cut to 60 characters, and its invisible
// characters are made visible.
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
func (r *Refusal) Reason() string {
	args := make([]any, len(r.Args))
	for i, a := range r.Args {
		args[i] = a
	}
	text, ok := texts[r.Code]
	if !ok { // a code of another package: the code itself says what
		return strings.Join(append([]string{string(r.Code)}, r.Args...), " ")
	}
	return fmt.Sprintf(text, args...)
}

// Codes lists every code with the number of its arguments, for web/words to be complete.
func Codes() map[Code]int {
	counts := map[Code]int{}
	for code, text := range texts {
		counts[code] = strings.Count(text, "%s")
	}
	return counts
}

func refuse(code Code, args ...string) *Refusal { return &Refusal{Code: code, Args: args} }

// at places a refusal.
func (r *Refusal) at(line int, column string) *Refusal {
	r.Line, r.Column = line, column
	return r
}

// Visible quotes a text and makes what cannot be seen visible: control, format and blank
// characters other than a plain blank appear as escapes, bytes that are not text as \x...; at most
// 60 characters are kept.
func Visible(s string) string {
	const most = 60
	if utf8.RuneCountInString(s) > most {
		n := 0
		for i := range s {
			if n == most {
				return strconv.Quote(s[:i]) + "..."
			}
			n++
		}
	}
	return strconv.Quote(s)
}
