package sheet

import "io"

// Intake is one line of an intake list.
type Intake struct {
	Line   int
	Serial string
	Place  string // empty if the list has none
}

// ReadIntake reads one serial a line without header, or a table with header serial[,place]. Good
// lines are returned beside the refusals; err is a *Refusal if the list as a whole cannot be read,
// or the reader's own error.
func ReadIntake(r io.Reader) (rows []Intake, refused []*Refusal, err error) { return nil, nil, nil }

// Reading is one line of a readings file. Exactly one of HasValue and Code is set.
type Reading struct {
	Line     int
	Serial   string
	Step     int // step k, or the programme day if ByDay
	ByDay    bool
	HasValue bool
	Value    int64 // thousandths
	Code     string
	ReadAt   string // RFC 3339, checked; empty if not given
	ReadBy   string
}

// ReadReadings reads a file serial,step|day,value[,code,read_at,read_by]. Good lines are returned
// beside the refusals; err is a *Refusal if the file as a whole cannot be read, or the reader's
// own error.
func ReadReadings(r io.Reader) (rows []Reading, refused []*Refusal, err error) { return nil, nil, nil }
