package proof

import (
	"crypto/sha256"
	"encoding/json"
	"fmt"
	"time"
)

// SchemaName and SchemaVersion name the form of the certificate record. A changed meaning of
// any field needs a new version; a program refuses a version it does not know.
const (
	SchemaName    = "ratehouse-certificate-record"
	SchemaVersion = 1
)

// Kind says which paper a record is.
type Kind string

// The two kinds: a certificate states that all limited criteria are met, a rejection report
// that they are not, or that the movement was rejected or removed.
const (
	KindCertificate Kind = "certificate"
	KindRejection   Kind = "rejection"
)

// Verdict is the judgement on one criterion or on the movement.
type Verdict string

// Verdicts. VerdictNone belongs to criteria without limits, which decide nothing.
const (
	VerdictPass Verdict = "pass"
	VerdictFail Verdict = "fail"
	VerdictOpen Verdict = "open"
	VerdictNone Verdict = "none"
)

// Ends a rejection report can name. Movements withdrawn by the depositor or void by the
// laboratory leave the yield and get no paper.
const (
	EndRejected = "rejected"
	EndRemoved  = "removed"
)

// Decision rules.
const (
	RuleSimple  = "simple"
	RuleGuarded = "guarded"
)

// Kinds of readings. Replicates and late checks are evidence and never decide.
const (
	ReadingRate      = "rate"
	ReadingState     = "state"
	ReadingLeft      = "left"
	ReadingReplicate = "replicate"
	ReadingLateCheck = "late_check"
)

// Cautions every paper carries, as codes that the message catalogue says in the reader's language.
const (
	// CautionTitle: the title of chronometer is protected in some countries.
	CautionTitle = "title_protected"
	// CautionAccreditation: accreditation and local rules decide who may issue such a paper.
	CautionAccreditation = "accreditation_decides"
	// CautionPublished: judged after published descriptions of the procedure, because nobody
	// compared the programme with the text of the standard. Required while TextChecked is nil.
	CautionPublished = "published_descriptions"
	// CautionThisPiece: the results apply to this piece as received.
	CautionThisPiece = "this_piece_as_received"
)

// NotStated is the reason code for an uncertainty or a reference nobody stated.
const NotStated = "not_stated"

// Decimal is an exact decimal number as text: an optional minus, digits without needless
// leading zeros, an optional point with digits. No plus sign, no exponent, never "-0". The
// empty Decimal means "there is none" and is null in JSON.
type Decimal string

// MarshalJSON writes a string, or null for the empty Decimal.
func (d Decimal) MarshalJSON() ([]byte, error) { return marshalOptional(string(d)) }

// UnmarshalJSON reads a string or null.
func (d *Decimal) UnmarshalJSON(raw []byte) error {
	s, err := unmarshalOptional(raw)
	*d = Decimal(s)
	return err
}

// Exact is an exact rational number as text, "p/q" in lowest terms with q > 0, as
// math/big.Rat.String writes it ("6/1", "-11/50"). Empty means undecided and is null in JSON.
type Exact string

// MarshalJSON writes a string, or null for the empty Exact.
func (e Exact) MarshalJSON() ([]byte, error) { return marshalOptional(string(e)) }

// UnmarshalJSON reads a string or null.
func (e *Exact) UnmarshalJSON(raw []byte) error {
	s, err := unmarshalOptional(raw)
	*e = Exact(s)
	return err
}

func marshalOptional(s string) ([]byte, error) {
	if s == "" {
		return []byte("null"), nil
	}
	return json.Marshal(s)
}

func unmarshalOptional(raw []byte) (string, error) {
	if string(raw) == "null" {
		return "", nil
	}
	var s string
	err := json.Unmarshal(raw, &s)
	return s, err
}

// Instant is a moment in UTC with whole milliseconds. The zero Instant means "none" and is
// null in JSON; every other one is RFC 3339 with Z, and with three decimals only if they are
// not zero, so that one moment has one text.
type Instant struct{ t time.Time }

// At makes an Instant of t: UTC, finer digits than a millisecond cut off.
func At(t time.Time) Instant {
	if t.IsZero() {
		return Instant{}
	}
	return Instant{t.UTC().Truncate(time.Millisecond)}
}

// Time gives the moment as a time.Time in UTC.
func (i Instant) Time() time.Time { return i.t }

// IsZero reports whether there is no instant.
func (i Instant) IsZero() bool { return i.t.IsZero() }

// String gives the text used in the record, or "" for none.
func (i Instant) String() string {
	switch {
	case i.t.IsZero():
		return ""
	case i.t.Nanosecond() == 0:
		return i.t.Format("2006-01-02T15:04:05Z")
	}
	return i.t.Format("2006-01-02T15:04:05.000Z")
}

// MarshalJSON writes the text, or null for none.
func (i Instant) MarshalJSON() ([]byte, error) { return marshalOptional(i.String()) }

// UnmarshalJSON reads the text or null, and refuses any other way to write the same moment.
func (i *Instant) UnmarshalJSON(raw []byte) error {
	s, err := unmarshalOptional(raw)
	if err != nil || s == "" {
		*i = Instant{}
		return err
	}
	t, err := time.Parse(time.RFC3339, s)
	if err != nil {
		return err
	}
	if *i = At(t); i.String() != s {
		return fmt.Errorf("instant %q is not in the form of a record: UTC with Z, whole milliseconds", s)
	}
	return nil
}

// Record is everything a certificate or a rejection report prints, frozen when it is released.
// The paper is rendered from it alone and computes nothing: numbers are here as decimal text,
// sentences as codes, texts as they were. All fields are always present in its JSON.
type Record struct {
	Schema        string `json:"schema"`         // SchemaName
	SchemaVersion int    `json:"schema_version"` // SchemaVersion
	Kind          Kind   `json:"kind"`
	Number        string `json:"number"`
	Title         string `json:"title"` // code of the paper's title, such as "rate_certificate"
	// Replaces and ReplaceReason name the paper this one replaces and why (ISO/IEC 17025 7.8.8,
	// from memory), both empty on a first issue.
	Replaces      string `json:"replaces"`
	ReplaceReason string `json:"replace_reason"`
	// Demo marks a paper of the demonstration: printed across it, and signed with a throw-away key.
	Demo     bool    `json:"demo"`
	Language string  `json:"language"`  // "en", "fr" or "de"
	TimeZone string  `json:"time_zone"` // IANA name in which the paper shows instants
	IssuedAt Instant `json:"issued_at"`

	Laboratory Laboratory `json:"laboratory"`
	Movement   Movement   `json:"movement"`
	Batch      string     `json:"batch"`
	Received   *Received  `json:"received"` // nil if the laboratory did not record it
	Trial      Span       `json:"trial"`
	Programme  Programme  `json:"programme"`
	Decision   Decision   `json:"decision"`
	Engine     string     `json:"engine"` // build that judged

	Days     []Day       `json:"days"`
	Readings []Reading   `json:"readings"`
	Criteria []Criterion `json:"criteria"`

	Verdict  Verdict  `json:"verdict"`
	Failed   []string `json:"failed"`    // symbols of failed criteria, in column order
	End      string   `json:"end"`       // "" or EndRejected, EndRemoved
	EndCause string   `json:"end_cause"` // in words or as a code; empty without End
	Remarks  []Remark `json:"remarks"`

	Uncertainty Uncertainty `json:"uncertainty"`
	Reference   Statement   `json:"reference"` // reference clock and its traceability
	Conditions  Conditions  `json:"conditions"`
	Cautions    []string    `json:"cautions"` // codes

	ReleasedBy string  `json:"released_by"`
	ReleasedAt Instant `json:"released_at"`
	JournalAct string  `json:"journal_act"` // id of the act of release
	VerifyURL  string  `json:"verify_url"`  // where the public can check this paper; may be empty
}

// Laboratory is who issues the paper.
type Laboratory struct {
	Name    string   `json:"name"`
	Address []string `json:"address"` // lines
	Contact string   `json:"contact"`
}

// Movement is what was tested.
type Movement struct {
	Serial    string   `json:"serial"`
	Calibre   string   `json:"calibre"` // "" if not given
	Size      Size     `json:"size"`
	Category  Named    `json:"category"`
	Depositor Named    `json:"depositor"`
	Attempt   int      `json:"attempt"` // 1 = first presentation
	State     []string `json:"state"`   // codes: "uncased", "automatic_device_removed", ...
}

// Size is the size by which the category was chosen: a diameter for a round movement, an area
// for a shaped one, neither if only the category was given.
type Size struct {
	DiameterMM Decimal `json:"diameter_mm"`
	AreaMM2    Decimal `json:"area_mm2"`
}

// Named is a code with the title it had at the release.
type Named struct {
	Code  string `json:"code"`
	Title string `json:"title"`
}

// Received says when and how the piece came in.
type Received struct {
	At           Instant `json:"at"`
	Condition    string  `json:"condition"`
	DeliveryNote string  `json:"delivery_note"`
	Order        string  `json:"order"`
}

// Span is the time of the trial, from round 0 to the last reading or the end.
type Span struct {
	From Instant `json:"from"`
	To   Instant `json:"to"`
}

// Programme is the method by which the movement was judged.
type Programme struct {
	Code      string `json:"code"`
	Version   string `json:"version"`
	Title     string `json:"title"`
	Hash      string `json:"hash"` // SHA-256 of the programme's canonical form, 64 lower-case hex digits
	Source    string `json:"source"`
	Measurand string `json:"measurand"` // code: "as_performed" or "at_nominal"
	// TextChecked says who compared the programme with the text of the standard; nil while
	// nobody has, and then the paper carries CautionPublished.
	TextChecked *TextChecked `json:"text_checked"`
}

// TextChecked says who checked the text of the standard, when, and which edition.
type TextChecked struct {
	By      string `json:"by"`
	Date    string `json:"date"` // YYYY-MM-DD
	Edition string `json:"edition"`
}

// Decision is the rule by which values became verdicts.
type Decision struct {
	Rule  string  `json:"rule"`  // RuleSimple or RuleGuarded
	Guard Decimal `json:"guard"` // multiple of U, only with RuleGuarded
	Words string  `json:"words"` // code of the sentence that says the rule
}

// Day is one programme day.
type Day struct {
	Day          int      `json:"day"`
	Position     string   `json:"position"` // symbol, such as "6H"
	TemperatureC Decimal  `json:"temperature_c"`
	Accessory    bool     `json:"accessory"` // additional mechanism engaged
	Rate         Decimal  `json:"rate"`      // s/d, positive = gaining; empty = not read
	Enters       []string `json:"enters"`    // symbols of the criteria this day enters
}

// Reading is one piece of evidence, current or superseded.
type Reading struct {
	Step       int     `json:"step"`
	Day        int     `json:"day"`  // programme day the step closes; 0 = none (start, idle, a phase that was repeated)
	Kind       string  `json:"kind"` // ReadingRate, ReadingState, ...
	Method     string  `json:"method"`
	Value      Decimal `json:"value"` // s, or s/d for a rate; empty if Code is set
	Code       string  `json:"code"`  // observation code instead of a value, such as "stopped"
	Typed      string  `json:"typed"` // exactly as it was typed
	ReadAt     Instant `json:"read_at"`
	ReadBy     string  `json:"read_by"`
	EnteredBy  string  `json:"entered_by"`
	Station    string  `json:"station"`
	Nth        int     `json:"nth"`    // 1 = first entry of this step and kind
	Reason     string  `json:"reason"` // of a correction
	Superseded bool    `json:"superseded"`
}

// Criterion is one judged quantity.
type Criterion struct {
	Symbol   string  `json:"symbol"`
	Title    string  `json:"title"`
	Unit     string  `json:"unit"`
	Decimals int     `json:"decimals"` // digits after the point that the programme prints
	Value    Exact   `json:"value"`    // exact; empty = undecided
	Printed  Decimal `json:"printed"`  // Value rounded half to even, as printed (see Printed)
	Min      Decimal `json:"min"`      // limits as the programme writes them, decimal or p/q; empty = none
	Max      Decimal `json:"max"`
	// AcceptMin and AcceptMax are the limits drawn in by the guard band, only with RuleGuarded.
	AcceptMin  Decimal `json:"accept_min"`
	AcceptMax  Decimal `json:"accept_max"`
	Margin     Decimal `json:"margin"` // distance to the nearer deciding limit, rounded likewise; negative = outside
	Verdict    Verdict `json:"verdict"`
	Definition string  `json:"definition"` // code of the sentence that defines it
}

// Remark is something that happened and that a reader of the paper must know.
type Remark struct {
	Code string `json:"code"`
	Step int    `json:"step"` // -1 if it belongs to no step
	Text string `json:"text"`
}

// Uncertainty is the statement of expanded uncertainties, or the reason there is none.
type Uncertainty struct {
	Reason        string       `json:"reason"` // NotStated, or "" when stated
	K             Decimal      `json:"k"`      // coverage factor
	Rate          Decimal      `json:"rate"`   // U of one daily rate, s/d
	Criteria      []CriterionU `json:"criteria"`
	NotApplicable []string     `json:"not_applicable"` // symbols judged by the rule, not by an interval
}

// CriterionU is the expanded uncertainty of one criterion, in its unit.
type CriterionU struct {
	Symbol string  `json:"symbol"`
	U      Decimal `json:"u"`
}

// Statement is a text of the laboratory, or the code of why there is none.
type Statement struct {
	Text string `json:"text"`
	Code string `json:"code"`
}

// Conditions say under what the trial ran. Code is "measured" with chambers, else a reason.
type Conditions struct {
	Code     string    `json:"code"`
	Chambers []Chamber `json:"chambers"`
}

// Chamber is what was measured in one chamber during the trial.
type Chamber struct {
	Code            string  `json:"code"`
	NominalC        Decimal `json:"nominal_c"`
	MeanC           Decimal `json:"mean_c"`
	LowC            Decimal `json:"low_c"`
	HighC           Decimal `json:"high_c"`
	HumidityLowPct  Decimal `json:"humidity_low_pct"`
	HumidityHighPct Decimal `json:"humidity_high_pct"`
}

// ConditionsMeasured is the code of Conditions that list chambers.
const ConditionsMeasured = "measured"

// Canonical gives the bytes of the record that are hashed and signed (RFC 8785). Missing lists
// are written as empty ones, so that one record has one form.
func (r Record) Canonical() ([]byte, error) { return Canonical(r.filled()) }

// Hash is the SHA-256 of Canonical; the code on the paper is made of it.
func (r Record) Hash() (Hash, error) {
	raw, err := r.Canonical()
	if err != nil {
		return Hash{}, err
	}
	return sha256.Sum256(raw), nil
}

// filled returns r with every nil list replaced by an empty one, in copies.
func (r Record) filled() Record {
	r.Laboratory.Address = list(r.Laboratory.Address)
	r.Movement.State = list(r.Movement.State)
	r.Days = list(r.Days)
	for i := range r.Days {
		r.Days[i].Enters = list(r.Days[i].Enters)
	}
	r.Readings = list(r.Readings)
	r.Criteria = list(r.Criteria)
	r.Failed = list(r.Failed)
	r.Remarks = list(r.Remarks)
	r.Uncertainty.Criteria = list(r.Uncertainty.Criteria)
	r.Uncertainty.NotApplicable = list(r.Uncertainty.NotApplicable)
	r.Conditions.Chambers = list(r.Conditions.Chambers)
	r.Cautions = list(r.Cautions)
	return r
}

// list copies s and never returns nil.
func list[T any](s []T) []T { return append(make([]T, 0, len(s)), s...) }
