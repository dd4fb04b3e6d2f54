package store

import (
	"slices"
	"time"

	"github.com/google/uuid"

	"ratehouse/store/rows"
	"ratehouse/trial"
)

// ReadingKind says what was read.
type ReadingKind string

// The kinds of reading. Only rate, state (as found) and left make the series; replicates and late
// checks are evidence beside it.
const (
	KindRate      ReadingKind = "rate"
	KindState     ReadingKind = "state"
	KindLeft      ReadingKind = "left"
	KindReplicate ReadingKind = "replicate"
	KindLateCheck ReadingKind = "late_check"
)

var kindCodes = []ReadingKind{KindRate, KindState, KindLeft, KindReplicate, KindLateCheck}

func (k ReadingKind) number() int16 { return int16(slices.Index(kindCodes, k) + 1) }

// Method says how it was read.
type Method string

// The methods of reading.
const (
	Typed    Method = "typed"
	Hand     Method = "hand"
	Tap      Method = "tap"
	Camera   Method = "camera"
	FullTime Method = "full_time"
	Station  Method = "station"
)

var methodCodes = []Method{Typed, Hand, Tap, Camera, FullTime, Station}

func (m Method) number() int16 { return int16(slices.Index(methodCodes, m) + 1) }

// Observation is what stands in the place of a value that could not be read.
type Observation string

// The observations, one key each at the bench.
const (
	Stopped    Observation = "stopped"
	HandLoose  Observation = "hand"
	Unreadable Observation = "unreadable"
	NotThere   Observation = "not_there"
	Dropped    Observation = "dropped"
)

// Observations lists them in the order of their numbers.
var Observations = []Observation{Stopped, HandLoose, Unreadable, NotThere, Dropped}

func observation(n int16) Observation {
	if n < 1 || int(n) > len(Observations) {
		return ""
	}
	return Observations[n-1]
}

// Entry is one reading as it is sent in: typed in a round, posted by a station.
type Entry struct {
	ID       uuid.UUID // made by the sender; the same id with the same cell and value is a duplicate
	Batch    string
	Serial   string
	Step     int // round k, or -1
	Day      int // programme day closed, or -1; exactly one of the two
	Kind     ReadingKind
	Method   Method
	Value    string // decimal, or an observation
	ReadAt   time.Time
	ReadBy   string // log-in name; empty: the sender
	Station  string
	Base     int    // how many entries of this cell the sender had seen
	Reason   string // of a correction
	Evidence []byte // SHA-256 of an image
	Image    string // where it lies
	Confirm  []string
	Comma    bool // the field's language writes decimals with a comma
	Raw      string
	Wrong    *Error // what is wrong with its form: found by who read it, it is refused for it and kept
}

// Status is what became of an entry.
type Status string

// The answers to an entry.
const (
	Accepted  Status = "accepted"
	Duplicate Status = "duplicate"
	Conflict  Status = "conflict"
	LookAgain Status = "second_look"
	Refused   Status = "refused"
)

// Current is what stands in a cell: shown when somebody else was first.
type Current struct {
	Nth    int
	Value  string // decimal or observation
	ReadBy string
	ReadAt time.Time
}

// Answer is what became of one entry of a call.
type Answer struct {
	ID      uuid.UUID
	Status  Status
	Nth     int      // accepted, duplicate
	Current *Current // conflict
	Finding string   // second_look
	Code    string   // refused: closed list RefusalCodes
	Args    map[string]string
}

// RefusalCodes is the closed list of reasons why an entry is refused.
var RefusalCodes = []string{
	"unknown_batch", "unknown_movement", "step_or_day", "unknown_step", "day_repeated", "ended", "kind", "method", "method_not_built",
	"no_rate_at_start", "read_at_missing", "read_at_order", "future", "too_early", "unknown_reader", "reason_needed", "base_ahead",
	"id_reused", "id_missing", "has_states", "has_rate", "beyond_600", "beyond_half_dial",
	"confirm_number", "evidence_form", "released",
	"number_form",
}

// cellKey names one cell of the evidence.
type cellKey struct {
	batch uuid.UUID
	no    int16
	step  int16
	kind  int16
}

// milliText prints a stored value as a decimal.
func milliText(v *int32, code *int16) string {
	if v == nil {
		return string(observation(value(code)))
	}
	return trial.Milli(*v).String()
}

func currentOf(r rows.SeenReading) *Current {
	return &Current{Nth: int(r.Nth), Value: milliText(r.Value, r.Code), ReadBy: r.Reader, ReadAt: r.ReadAt.UTC()}
}
