package proof

import (
	"fmt"
	"math/big"
	"regexp"
	"slices"
	"strings"
	"time"
	"unicode"
)

// Fault is one thing wrong with a record: the path of the field and what is wrong.
type Fault struct{ Where, What string }

// Faults are all faults of a record; errors.Is with ErrInconsistent holds.
type Faults []Fault

// Error lists the faults.
func (f Faults) Error() string {
	words := make([]string, len(f))
	for i, fault := range f {
		words[i] = fault.Where + ": " + fault.What
	}
	return ErrInconsistent.Error() + ": " + strings.Join(words, "; ")
}

// Is reports that faults are ErrInconsistent.
func (f Faults) Is(target error) bool { return target == ErrInconsistent }

// Check tells whether the record is complete and agrees with itself, as Faults or nil: values
// against their printed text, limits, margins and verdicts; days against criteria and
// readings; the verdict against all of these; the cautions its state demands. It does not
// judge: it never computes a criterion from rates. The rules belong to SchemaVersion: a rule
// made stricter later needs a new version, or old papers would stop being valid.
func (r Record) Check() error {
	c := &checker{record: r}
	c.head()
	c.subject()
	c.method()
	c.days()
	c.criteria()
	c.enters()
	c.readings()
	c.evidence()
	c.verdict()
	c.statements()
	if len(c.faults) > 0 {
		return c.faults
	}
	return nil
}

type checker struct {
	record Record
	faults Faults
}

func (c *checker) fault(where, what string, args ...any) {
	c.faults = append(c.faults, Fault{where, fmt.Sprintf(what, args...)})
}

// need adds a fault unless ok holds.
func (c *checker) need(ok bool, where, what string, args ...any) {
	if !ok {
		c.fault(where, what, args...)
	}
}

// filled wants a text with something in it.
func (c *checker) filled(where, text string) {
	c.need(strings.TrimSpace(text) != "", where, "missing")
}

// oneOf wants one of the words.
func (c *checker) oneOf(where, text string, words ...string) {
	c.need(slices.Contains(words, text), where, "%q is none of %s", text, strings.Join(words, ", "))
}

// decimal wants a number, or none where that is allowed.
func (c *checker) decimal(where string, d Decimal, optional bool) {
	if d == "" {
		c.need(optional, where, "missing")
	} else if _, _, err := d.rat(); err != nil {
		c.fault(where, "%v", err)
	}
}

var (
	numberForm = regexp.MustCompile(`^[A-Z0-9][A-Z0-9._-]{0,63}$`)
	hashForm   = regexp.MustCompile(`^[0-9a-f]{64}$`)
)

func (c *checker) head() {
	r := c.record
	c.need(r.Schema == SchemaName, "schema", "%q is not %q", r.Schema, SchemaName)
	c.need(r.SchemaVersion == SchemaVersion, "schema_version", "%d is not %d", r.SchemaVersion, SchemaVersion)
	c.oneOf("kind", string(r.Kind), string(KindCertificate), string(KindRejection))
	c.need(numberForm.MatchString(r.Number), "number", "%q is not a number of a paper", r.Number)
	c.need((r.Replaces == "") == (r.ReplaceReason == ""), "replace_reason", "goes with replaces, both or none")
	c.need(r.Replaces == "" || numberForm.MatchString(r.Replaces), "replaces", "%q is not a number of a paper", r.Replaces)
	c.need(r.Replaces != r.Number, "replaces", "is the paper itself")
	c.oneOf("language", r.Language, "en", "fr", "de")
	c.filled("title", r.Title)
	c.filled("time_zone", r.TimeZone)
	c.filled("released_by", r.ReleasedBy)
	c.filled("journal_act", r.JournalAct)
	c.order()
}

// order wants the instants of a paper's life in order.
func (c *checker) order() {
	r := c.record
	last := Instant{}
	for _, i := range []struct {
		where string
		at    Instant
	}{{"trial.from", r.Trial.From}, {"trial.to", r.Trial.To}, {"released_at", r.ReleasedAt}, {"issued_at", r.IssuedAt}} {
		c.need(!i.at.IsZero(), i.where, "missing")
		c.need(!i.at.Time().Before(last.Time()), i.where, "%s is before %s", i.at, last)
		last = i.at
	}
}

func (c *checker) subject() {
	r := c.record
	c.filled("laboratory.name", r.Laboratory.Name)
	c.filled("batch", r.Batch)
	m := r.Movement
	c.filled("movement.serial", m.Serial)
	c.need(!strings.ContainsFunc(m.Serial, unicode.IsControl), "movement.serial", "holds a control character")
	c.filled("movement.category.code", m.Category.Code)
	c.filled("movement.depositor.code", m.Depositor.Code)
	c.need(m.Attempt >= 1, "movement.attempt", "%d is below 1", m.Attempt)
	c.decimal("movement.size.diameter_mm", m.Size.DiameterMM, true)
	c.decimal("movement.size.area_mm2", m.Size.AreaMM2, true)
	c.need(m.Size.DiameterMM == "" || m.Size.AreaMM2 == "", "movement.size", "has both a diameter and an area")
	if r.Received != nil {
		c.need(!r.Received.At.IsZero(), "received.at", "missing")
	}
}

func (c *checker) method() {
	p, d := c.record.Programme, c.record.Decision
	c.filled("programme.code", p.Code)
	c.filled("programme.version", p.Version)
	c.filled("programme.title", p.Title)
	c.filled("programme.source", p.Source)
	c.need(hashForm.MatchString(p.Hash), "programme.hash", "is not 64 lower-case hexadecimal digits")
	c.oneOf("programme.measurand", p.Measurand, "as_performed", "at_nominal")
	if t := p.TextChecked; t != nil {
		c.filled("programme.text_checked.by", t.By)
		c.filled("programme.text_checked.edition", t.Edition)
		_, err := time.Parse(time.DateOnly, t.Date)
		c.need(err == nil, "programme.text_checked.date", "%q is not a date", t.Date)
	}
	c.filled("engine", c.record.Engine)
	c.filled("decision.words", d.Words)
	c.oneOf("decision.rule", d.Rule, RuleSimple, RuleGuarded)
	c.decimal("decision.guard", d.Guard, true)
	c.need((d.Guard != "") == (d.Rule == RuleGuarded), "decision.guard", "goes with the guarded rule alone")
}

func (c *checker) days() {
	c.need(len(c.record.Days) > 0, "days", "missing")
	last := 0
	for i, d := range c.record.Days {
		where := fmt.Sprintf("days[%d]", i)
		c.need(d.Day > last, where+".day", "day %d does not follow day %d", d.Day, last)
		last = d.Day
		c.filled(where+".position", d.Position)
		c.decimal(where+".temperature_c", d.TemperatureC, false)
		c.decimal(where+".rate", d.Rate, true)
		for j, s := range d.Enters {
			c.need(c.criterion(s) != nil, where+".enters", "there is no criterion %q", s)
			c.need(!slices.Contains(d.Enters[:j], s), where+".enters", "names %q twice", s)
		}
	}
}

func (c *checker) criterion(symbol string) *Criterion {
	for i := range c.record.Criteria {
		if c.record.Criteria[i].Symbol == symbol {
			return &c.record.Criteria[i]
		}
	}
	return nil
}

func (c *checker) criteria() {
	c.need(len(c.record.Criteria) > 0, "criteria", "missing")
	for i, k := range c.record.Criteria {
		where := fmt.Sprintf("criteria[%d] (%s)", i, k.Symbol)
		c.filled(where+".symbol", k.Symbol)
		c.need(c.criterion(k.Symbol) == &c.record.Criteria[i], where+".symbol", "given twice")
		c.filled(where+".title", k.Title)
		c.filled(where+".unit", k.Unit)
		c.filled(where+".definition", k.Definition)
		c.need(k.Decimals >= 0 && k.Decimals <= 9, where+".decimals", "%d is not 0 to 9", k.Decimals)
		c.limits(where, k)
		low, high, err := k.deciding()
		if err != nil {
			c.fault(where+".limits", "%v", err)
			continue
		}
		c.judged(where, k, low, high)
	}
}

// limits wants low limits below high ones, and acceptance limits within the programme's, on
// each limited side, under the guarded rule alone.
func (c *checker) limits(where string, k Criterion) {
	var v [4]*big.Rat
	for i, d := range []Decimal{k.Min, k.AcceptMin, k.AcceptMax, k.Max} {
		var err error
		if v[i], err = d.limit(); err != nil {
			return // named by criteria
		}
	}
	guarded := c.record.Decision.Rule == RuleGuarded
	c.need((k.AcceptMin != "") == (guarded && k.Min != ""), where+".accept_min", "goes with a limit of the guarded rule")
	c.need((k.AcceptMax != "") == (guarded && k.Max != ""), where+".accept_max", "goes with a limit of the guarded rule")
	// Guard bands wider than the range leave nothing to accept: accept_min may pass accept_max.
	for _, pair := range [][2]int{{0, 3}, {0, 1}, {2, 3}} {
		low, high := v[pair[0]], v[pair[1]]
		c.need(low == nil || high == nil || low.Cmp(high) <= 0, where+".limits", "are not in order")
	}
}

// judged compares the value of a criterion with its text, margin and verdict.
func (c *checker) judged(where string, k Criterion, low, high *big.Rat) {
	limited := low != nil || high != nil
	if k.Value == "" {
		c.need(k.Printed == "" && k.Margin == "", where+".printed", "undecided, but printed or with a margin")
		c.need(k.Verdict == undecided(limited), where+".verdict", "%q for an undecided criterion", k.Verdict)
		return
	}
	v, err := k.Value.rat()
	if err != nil {
		c.fault(where+".value", "%v", err)
		return
	}
	c.need(k.Verdict == decided(v, low, high), where+".verdict", "%q contradicts value %s between limits", k.Verdict, k.Value)
	if shown := c.rounded(where+".printed", k.Printed, v, k.Decimals); shown != nil {
		c.need(within(shown, low, high) == within(v, low, high), where+".printed", "%s contradicts the verdict", k.Printed)
	}
	m := margin(v, low, high)
	if m == nil {
		c.need(k.Margin == "", where+".margin", "without limits")
	} else if shown := c.rounded(where+".margin", k.Margin, m, k.Decimals); shown != nil {
		c.need((shown.Sign() < 0) == (m.Sign() < 0), where+".margin", "%s contradicts the verdict", k.Margin)
	}
}

// rounded wants text to be v rounded half to even, with at least that many digits, or v itself
// as p/q, and gives the number shown.
func (c *checker) rounded(where string, text Decimal, v *big.Rat, decimals int) *big.Rat {
	if !v.IsInt() && string(text) == v.String() {
		return v
	}
	shown, digits, err := text.rat()
	if err != nil {
		c.fault(where, "%v", err)
		return nil
	}
	if digits < decimals || Rounded(v, digits) != text {
		c.fault(where, "%s is not %s rounded to at least %d decimals", text, v, decimals)
		return nil
	}
	return shown
}

func undecided(limited bool) Verdict {
	if limited {
		return VerdictOpen
	}
	return VerdictNone
}

func decided(v, low, high *big.Rat) Verdict {
	switch {
	case low == nil && high == nil:
		return VerdictNone
	case within(v, low, high):
		return VerdictPass
	}
	return VerdictFail
}

// enters wants a criterion to be decided exactly when every day that enters it has a rate.
func (c *checker) enters() {
	for i, k := range c.record.Criteria {
		days, read := 0, 0
		for _, d := range c.record.Days {
			if slices.Contains(d.Enters, k.Symbol) {
				days++
				if d.Rate != "" {
					read++
				}
			}
		}
		if days > 0 {
			c.need((k.Value != "") == (read == days), fmt.Sprintf("criteria[%d] (%s).value", i, k.Symbol),
				"%q, but %d of its %d days are read", k.Value, read, days)
		}
	}
}

func (c *checker) readings() {
	type cell struct {
		step int
		kind string
	}
	last := map[cell]Reading{}
	for i, d := range c.record.Readings {
		where := fmt.Sprintf("readings[%d]", i)
		c.reading(where, d)
		at := cell{d.Step, d.Kind}
		c.need(d.Nth == last[at].Nth+1, where+".nth", "%d does not follow %d", d.Nth, last[at].Nth)
		if decides(d.Kind) {
			c.need((d.Nth > 1) == (d.Reason != ""), where+".reason", "goes with a correction alone")
			c.need(d.Nth == 1 || last[at].Superseded, where, "corrects a reading that is not superseded")
		}
		last[at] = d
	}
}

// decides tells whether readings of a kind can make a rate.
func decides(kind string) bool {
	return kind == ReadingRate || kind == ReadingState || kind == ReadingLeft
}

func (c *checker) reading(where string, d Reading) {
	c.need(d.Step >= 0, where+".step", "%d is below 0", d.Step)
	known := slices.ContainsFunc(c.record.Days, func(day Day) bool { return day.Day == d.Day })
	c.need(d.Day == 0 || known, where+".day", "%d is no day of the programme", d.Day)
	c.oneOf(where+".kind", d.Kind, ReadingRate, ReadingState, ReadingLeft, ReadingReplicate, ReadingLateCheck)
	c.filled(where+".method", d.Method)
	c.filled(where+".read_by", d.ReadBy)
	c.filled(where+".entered_by", d.EnteredBy)
	c.need((d.Value == "") != (d.Code == ""), where, "has not exactly one of value and code")
	c.decimal(where+".value", d.Value, true)
	c.need(d.Kind == ReadingRate || !d.ReadAt.IsZero(), where+".read_at", "missing")
	latest := c.record.ReleasedAt.Time().Add(clockSlack)
	c.need(!d.ReadAt.Time().After(latest), where+".read_at", "is after the release")
}

// clockSlack is how far the clock of a tablet or a station may be ahead of the laboratory's
// before its instants contradict the release: a wrong clock is never a reason to refuse.
const clockSlack = 24 * time.Hour

// evidence wants every printed rate to rest on current readings: on a state or a left state
// that closes its day, or else on one typed rate of just that value; and no typed rate in
// force to be left out.
func (c *checker) evidence() {
	for i, day := range c.record.Days {
		where := fmt.Sprintf("days[%d].rate", i)
		var rates []Decimal
		states := 0
		for _, d := range c.record.Readings {
			switch {
			case d.Day != day.Day || d.Superseded || d.Value == "":
			case d.Kind == ReadingRate:
				rates = append(rates, d.Value)
			case d.Kind == ReadingState:
				states++
			}
		}
		switch {
		case day.Rate == "":
			c.need(len(rates) == 0, where, "missing, but a rate was read")
		case states == 0 && len(rates) == 0:
			c.fault(where, "%s rests on no reading", day.Rate)
		case states == 0:
			c.need(len(rates) == 1 && sameNumber(rates[0], day.Rate), where, "%s is not the rate read", day.Rate)
		}
	}
}

func sameNumber(a, b Decimal) bool {
	x, _, errX := a.rat()
	y, _, errY := b.rat()
	return errX == nil && errY == nil && x.Cmp(y) == 0
}

func (c *checker) verdict() {
	r := c.record
	var failed []string
	limited, open := 0, 0
	for _, k := range r.Criteria {
		switch k.Verdict {
		case VerdictFail:
			failed = append(failed, k.Symbol)
		case VerdictOpen:
			open++
		}
		if k.Verdict != VerdictNone {
			limited++
		}
	}
	c.need(slices.Equal(failed, r.Failed), "failed", "%q, but the criteria say %q", r.Failed, failed)
	c.need((r.End == "") == (r.EndCause == ""), "end_cause", "goes with an end, both or none")
	if r.End != "" {
		c.oneOf("end", r.End, EndRejected, EndRemoved)
	}
	switch r.Kind {
	case KindCertificate:
		c.need(r.Verdict == VerdictPass, "verdict", "%q on a certificate", r.Verdict)
		c.need(limited > 0 && open == 0 && len(failed) == 0, "verdict", "not all limited criteria pass")
		c.need(r.End == "", "end", "%q on a certificate", r.End)
	case KindRejection:
		c.need(r.Verdict == VerdictFail, "verdict", "%q on a rejection report", r.Verdict)
		c.need(len(failed) > 0 || r.End != "", "verdict", "fails without a failed criterion or an end")
	}
}

func (c *checker) statements() {
	r := c.record
	c.uncertainty(r.Uncertainty)
	c.need((r.Reference.Text == "") != (r.Reference.Code == ""), "reference", "has not exactly one of text and code")
	measured := r.Conditions.Code == ConditionsMeasured
	c.filled("conditions.code", r.Conditions.Code)
	c.need(measured == (len(r.Conditions.Chambers) > 0), "conditions", "chambers go with the code %q alone", ConditionsMeasured)
	for i, k := range r.Conditions.Chambers {
		where := fmt.Sprintf("conditions.chambers[%d]", i)
		c.filled(where+".code", k.Code)
		c.decimal(where+".nominal_c", k.NominalC, false)
		for _, d := range []Decimal{k.MeanC, k.LowC, k.HighC, k.HumidityLowPct, k.HumidityHighPct} {
			c.decimal(where, d, true)
		}
	}
	for i, k := range r.Remarks {
		c.filled(fmt.Sprintf("remarks[%d].code", i), k.Code)
		c.need(k.Step >= -1, fmt.Sprintf("remarks[%d].step", i), "%d is below -1", k.Step)
	}
	needed := []string{CautionTitle, CautionAccreditation, CautionThisPiece}
	if r.Programme.TextChecked == nil {
		needed = append(needed, CautionPublished)
	}
	for _, code := range needed {
		c.need(slices.Contains(r.Cautions, code), "cautions", "lacks %q", code)
	}
}

func (c *checker) uncertainty(u Uncertainty) {
	if u.Reason != "" {
		stated := u.K != "" || u.Rate != "" || len(u.Criteria) > 0
		c.need(!stated, "uncertainty", "is stated and has a reason why it is not")
		return
	}
	c.decimal("uncertainty.k", u.K, false)
	c.decimal("uncertainty.rate", u.Rate, false)
	for i, k := range u.Criteria {
		where := fmt.Sprintf("uncertainty.criteria[%d]", i)
		c.need(c.criterion(k.Symbol) != nil, where, "there is no criterion %q", k.Symbol)
		c.decimal(where+".u", k.U, false)
	}
	for _, s := range u.NotApplicable {
		c.need(c.criterion(s) != nil, "uncertainty.not_applicable", "there is no criterion %q", s)
	}
}
