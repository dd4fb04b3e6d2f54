package store

import (
	"errors"
	"strconv"
	"time"

	"github.com/google/uuid"

	"ratehouse/store/rows"
	"ratehouse/trial"
	"ratehouse/trial/entry"
	"ratehouse/trial/sheet"
)

// How far an instant may lie ahead of the server's clock, or before the batch begins, before it is
// taken for a mistake; and the clock difference below which it is only the way of the message.
const (
	aheadAtMost  = time.Minute
	beforeAtMost = 48 * time.Hour
	clockNoise   = 2 * time.Second
)

// flagSecondLook marks a reading that was asked for again.
const flagSecondLook = 1

// item is one entry while it is decided upon.
type item struct {
	*Entry
	batch  *Batch
	series *rows.Series
	step   int
	kind   int16
	value  int32
	code   *int16 // observation
	typed  string
	at     time.Time // corrected for the sender's clock
	reader uuid.UUID
	flags  int16
}

// no is a refusal with its arguments.
type no struct {
	code string
	args []string
}

// decide says what becomes of one entry and changes the series in memory, so that the next entry
// of the call sees it.
func (s *saving) decide(e *Entry) Answer {
	it := &item{Entry: e}
	for _, check := range []func(*item) *no{s.checkForm, s.find, s.findStep, s.checkKind} {
		if why := check(it); why != nil {
			return s.refuse(e, why.code, why.args...)
		}
	}
	if answer, done := s.seen(it); done {
		return answer
	}
	for _, check := range []func(*item) *no{s.mayWrite, s.checkInstant, s.parse, s.checkReader} {
		if why := check(it); why != nil {
			return s.refuse(e, why.code, why.args...)
		}
	}
	if answer, done := s.compareBase(it); done {
		return answer
	}
	if why := s.checkSource(it); why != nil {
		return s.refuse(e, why.code, why.args...)
	}
	if it.kind > 3 {
		return s.accept(it)
	}
	return s.judgePlausible(it)
}

// checkForm refuses what the reader of the call could not make sense of.
func (s *saving) checkForm(it *item) *no {
	if it.Wrong == nil {
		return nil
	}
	why := &no{code: it.Wrong.Code}
	for k, v := range it.Wrong.Args {
		why.args = append(why.args, k, v)
	}
	return why
}

func (s *saving) find(it *item) *no {
	if it.ID == uuid.Nil {
		return &no{code: "id_missing"}
	}
	if it.batch = s.batches[it.Batch]; it.batch == nil {
		return &no{"unknown_batch", []string{"batch", it.Batch}}
	}
	if it.series = s.series[[2]string{it.Batch, it.Serial}]; it.series == nil {
		return &no{"unknown_movement", []string{"serial", it.Serial, "batch", it.Batch}}
	}
	return nil
}

// findStep turns a day into the latest step that closes it; several such steps need naming.
func (s *saving) findStep(it *item) *no {
	if (it.Step < 0) == (it.Day < 0) {
		return &no{code: "step_or_day"}
	}
	it.step = it.Step
	if it.Step < 0 {
		found := 0
		for k, st := range it.batch.Steps {
			if st.Day == it.Day && (it.Day > 0 || k == 0) {
				it.step, found = k, found+1
			}
		}
		if found == 0 {
			return &no{"unknown_step", []string{"day", strconv.Itoa(it.Day)}}
		}
		if found > 1 {
			return &no{"day_repeated", []string{"day", strconv.Itoa(it.Day)}}
		}
	}
	if it.step >= len(it.batch.Steps) {
		return &no{"unknown_step", []string{"step", strconv.Itoa(it.step), "last", strconv.Itoa(it.batch.LastStep())}}
	}
	return nil
}

func (s *saving) checkKind(it *item) *no {
	if it.kind = it.Kind.number(); it.kind == 0 {
		return &no{"kind", []string{"kind", string(it.Kind)}}
	}
	if it.Method == "" {
		it.Method = Typed
	}
	switch {
	case it.Method.number() == 0:
		return &no{"method", []string{"method", string(it.Method)}}
	case it.Method == Hand || it.Method == Tap:
		return &no{"method_not_built", []string{"method", string(it.Method)}}
	case it.Kind == KindRate && it.step == 0:
		return &no{code: "no_rate_at_start"}
	case len(it.Evidence) != 0 && len(it.Evidence) != 32:
		return &no{code: "evidence_form"}
	}
	return nil
}

// seen answers an id that is used up: the same cell and value is a duplicate, anything else is not
// what that id stands for.
func (s *saving) seen(it *item) (Answer, bool) {
	r, ok := s.used[it.ID]
	if !ok {
		return Answer{}, false
	}
	if r.Batch == it.batch.ID && r.No == it.series.No && int(r.Step) == it.step && r.Kind == it.kind && s.sameValue(it, r) {
		return Answer{ID: it.ID, Status: Duplicate, Nth: int(r.Nth)}, true
	}
	return s.refuse(it.Entry, "id_reused"), true
}

// sameValue compares with what was stored, or with what was typed first when a second look chose
// another value.
func (s *saving) sameValue(it *item, r rows.SeenReading) bool {
	if why := s.parse(it); why != nil {
		return false
	}
	if it.code != nil || r.Code != nil {
		return it.code != nil && r.Code != nil && *it.code == *r.Code
	}
	if looks := s.looks[it.ID]; len(looks) > 0 && looks[0].Value == it.value {
		return true
	}
	return *r.Value == it.value
}

func (s *saving) mayWrite(it *item) *no {
	switch {
	case it.series.Ended != 0:
		return &no{"ended", []string{"serial", it.Serial}}
	case it.series.Released && it.kind <= 3:
		return &no{"released", []string{"serial", it.Serial}}
	}
	return nil
}

// checkInstant corrects the sender's clock by what it was off when it sent.
func (s *saving) checkInstant(it *item) *no {
	if it.ReadAt.IsZero() {
		if it.Kind != KindRate {
			return &no{code: "read_at_missing"}
		}
		it.ReadAt = s.now.Add(-s.offset)
	}
	it.at = it.ReadAt
	if s.offset.Abs() > clockNoise {
		it.at = it.at.Add(s.offset)
	}
	if it.at.After(s.now.Add(aheadAtMost)) {
		return &no{"future", []string{"read_at", it.ReadAt.UTC().Format(time.RFC3339), "now", s.now.Format(time.RFC3339)}}
	}
	if it.at.Before(it.batch.StartsAt.Add(-beforeAtMost)) {
		return &no{"too_early", []string{"read_at", it.ReadAt.UTC().Format(time.RFC3339), "starts_at", it.batch.StartsAt.Format(time.RFC3339)}}
	}
	if it.Kind == KindState {
		return s.checkOrder(it)
	}
	return nil
}

// checkOrder wants the instants of a movement's states to rise with the rounds.
func (s *saving) checkOrder(it *item) *no {
	at := seconds(it)
	for k, other := range it.series.AtS {
		if other == nil || k == it.step || (k < it.step) == (*other < at) {
			continue
		}
		return &no{"read_at_order", []string{"step", strconv.Itoa(k)}}
	}
	return nil
}

// seconds is the instant as whole seconds after the batch began.
func seconds(it *item) int32 {
	d := it.at.Sub(it.batch.StartsAt)
	s := d / time.Second
	if d < 0 && d%time.Second != 0 {
		s--
	}
	return int32(s)
}

func (s *saving) parse(it *item) *no {
	it.typed, it.code = it.Value, nil
	if it.Kind != KindLeft {
		for i, o := range Observations {
			if it.Value == string(o) {
				n := int16(i + 1)
				it.code = &n
				return nil
			}
		}
	}
	v, err := sheet.ParseMilli(it.Value, it.Comma)
	if err != nil {
		code := "number_form"
		if r, ok := errors.AsType[*sheet.Refusal](err); ok {
			code = string(r.Code)
		}
		return &no{code, []string{"value", strconv.QuoteToGraphic(it.Value)}}
	}
	return s.fit(it, v)
}

// fit keeps a value within what its kind can be. Signed states typed or posted lie within half a
// dial period; those taken from the whole dial are folded to it.
func (s *saving) fit(it *item, v int64) *no {
	const beyond = int64(entry.RefuseBeyond)
	if it.Kind == KindRate || it.Entry.Kind == KindReplicate && it.batch.Entry == EntryRate {
		if v > beyond || v < -beyond {
			return &no{"beyond_600", []string{"value", it.Value}}
		}
		it.value = int32(v)
		return nil
	}
	half := int64(it.dialHours()) * 3_600_000 / 2
	if it.Method == Camera || it.Method == FullTime {
		v = entry.Fold(v, 2*half)
	}
	if v > half || v < -half {
		return &no{"beyond_half_dial", []string{"value", it.Value, "hours", strconv.Itoa(it.dialHours())}}
	}
	it.value = int32(v)
	return nil
}

func (it *item) dialHours() int { return max(12, it.batch.Calibre.DialHours) }

func (s *saving) checkReader(it *item) *no {
	it.reader = s.actor.Account
	if it.ReadBy == "" || it.ReadBy == s.actor.Name {
		return nil
	}
	p, ok := s.people[it.ReadBy]
	if !ok {
		return &no{"unknown_reader", []string{"name", it.ReadBy}}
	}
	it.reader = p.ID
	return nil
}

// nth is how many entries the cell holds.
func (s *saving) nth(it *item) int {
	switch it.Kind {
	case KindRate:
		return int(it.series.RateNth[it.step])
	case KindState:
		return int(it.series.FoundNth[it.step])
	case KindLeft:
		return int(it.series.LeftNth[it.step])
	}
	return int(s.newest[it.cell()].Nth)
}

func (it *item) cell() cellKey { return cellKey{it.batch.ID, it.series.No, int16(it.step), it.kind} }

// compareBase is the compare-and-swap: who saw entry k may write k+1. A correction names its
// reason, except in the reader's own open round.
func (s *saving) compareBase(it *item) (Answer, bool) {
	if it.kind > 3 {
		return Answer{}, false
	}
	nth := s.nth(it)
	switch {
	case it.Base > nth:
		return s.refuse(it.Entry, "base_ahead", "base", strconv.Itoa(it.Base), "nth", strconv.Itoa(nth)), true
	case it.Base < nth:
		return Answer{ID: it.ID, Status: Conflict, Current: currentOf(s.newest[it.cell()])}, true
	case nth > 0 && it.Reason == "":
		if !s.ownOpenRound(it) {
			return s.refuse(it.Entry, "reason_needed"), true
		}
		it.Reason = "at entry"
	case nth == 0:
		it.Reason = ""
	}
	return Answer{}, false
}

func (s *saving) ownOpenRound(it *item) bool {
	e, ok := s.rounds[cellKey{batch: it.batch.ID, step: int16(it.step)}]
	last := s.newest[it.cell()]
	return ok && e.Kind != "closed" && (last.ReadBy == s.actor.Account || last.EnteredBy == s.actor.Account)
}

// checkSource keeps one source for a day: its two states, or a typed rate.
func (s *saving) checkSource(it *item) *no {
	m, k := it.series, it.step
	switch it.Kind {
	case KindRate:
		if m.Found[k] != nil && (m.Found[k-1] != nil || m.AsLeft[k-1] != nil) {
			return &no{code: "has_states"}
		}
	case KindState:
		if m.Rate[k] != nil || k+1 < len(m.Rate) && m.Rate[k+1] != nil && m.Found[k+1] != nil {
			return &no{code: "has_rate"}
		}
	}
	return nil
}

// judgePlausible asks for a second look where the rate that follows is unlikely, and refuses what
// no movement does. It knows nothing of limits (practice notes X1).
func (s *saving) judgePlausible(it *item) Answer {
	switch s.smell(it, it.value) {
	case entry.Refuse:
		return s.refuse(it.Entry, "beyond_600", "value", it.Value)
	case entry.None:
		return s.accept(it)
	}
	confirms, why := s.confirms(it)
	if why != nil {
		return s.refuse(it.Entry, why.code, why.args...)
	}
	s.keepLooks(it, confirms)
	counts, ok := entry.Settle(it.batch.Programme.Reading.SecondLook, trial.Milli(it.value), confirms)
	if !ok {
		return Answer{ID: it.ID, Status: LookAgain, Finding: "beyond_60"}
	}
	for i, c := range confirms {
		if c == counts && int32(counts) != it.value {
			it.typed = it.Confirm[i]
		}
	}
	it.value, it.flags = int32(counts), flagSecondLook
	if s.smell(it, it.value) == entry.Refuse {
		return s.refuse(it.Entry, "beyond_600", "value", it.typed)
	}
	return s.accept(it)
}

// smell is the worst finding among the rates that the value would make.
func (s *saving) smell(it *item, v int32) entry.Finding {
	if it.code != nil {
		return entry.None
	}
	if it.Kind == KindRate {
		return entry.Look(trial.RateOf(int64(v)))
	}
	m, k := it.series, it.step
	trialRow := *m
	trialRow.Found, trialRow.AsLeft, trialRow.AtS = clone(m.Found), clone(m.AsLeft), clone(m.AtS)
	put(it, &trialRow, v)
	return max(entry.Look(rateAt(it.batch, &trialRow, k)), entry.Look(rateAt(it.batch, &trialRow, k+1)))
}

func clone(list []*int32) []*int32 { return append([]*int32(nil), list...) }

func (s *saving) confirms(it *item) ([]trial.Milli, *no) {
	var list []trial.Milli
	for _, text := range it.Confirm[:min(2, len(it.Confirm))] {
		v, err := sheet.ParseMilli(text, it.Comma)
		if err != nil {
			return nil, &no{"confirm_number", []string{"value", strconv.QuoteToGraphic(text)}}
		}
		list = append(list, trial.Milli(v))
	}
	return list, nil
}

// keepLooks records every value typed for this entry that is not recorded yet.
func (s *saving) keepLooks(it *item, confirms []trial.Milli) {
	known := s.looks[it.ID]
	values, texts := append([]trial.Milli{trial.Milli(it.value)}, confirms...), append([]string{it.Value}, it.Confirm...)
	skip := 0
	for skip < len(known) && skip < len(values) && known[skip].Value == int32(values[skip]) {
		skip++
	}
	if skip < len(known) && skip < len(values) {
		skip = 0 // another value under the same id: nothing typed is lost
	}
	for i := skip; i < len(values); i++ {
		look := rows.Look{ID: it.ID, Nth: int16(len(s.looks[it.ID]) + 1), Batch: it.batch.ID, No: it.series.No, Step: int16(it.step), Kind: it.kind,
			Value: int32(values[i]), Typed: texts[i], Finding: "beyond_60", At: s.now, By: s.actor.Account}
		s.looks[it.ID] = append(s.looks[it.ID], look)
		s.newLooks = append(s.newLooks, look)
	}
}

// put writes the value into the series in memory.
func put(it *item, m *rows.Series, v int32) {
	k := it.step
	switch it.Kind {
	case KindRate:
		m.Rate[k] = &v
	case KindState:
		at := seconds(it)
		m.Found[k], m.AtS[k] = &v, &at
	case KindLeft:
		m.AsLeft[k] = &v
	}
}

func (s *saving) accept(it *item) Answer {
	nth := s.nth(it) + 1
	r := rows.Reading{Batch: it.batch.ID, No: it.series.No, Step: int16(it.step), Kind: it.kind, Nth: int16(nth), ID: it.ID, Typed: it.typed,
		Method: it.Method.number(), ReadAt: it.ReadAt.UTC(), EnteredAt: s.now, ReadBy: it.reader, EnteredBy: s.actor.Account,
		Station: optional(either2(it.Station, s.actor.Station)), Evidence: it.Evidence, EvidenceAt: optional(it.Image), Flags: it.flags, Reason: optional(it.Reason)}
	if s.offset != 0 {
		ms := int32(max(-1<<31, min(1<<31-1, s.offset.Milliseconds())))
		r.OffsetMS = &ms
	}
	if it.code != nil {
		r.Code = it.code
	} else {
		v := it.value
		r.Value = &v
	}
	s.readings = append(s.readings, r)
	s.remember(it, r)
	return Answer{ID: it.ID, Status: Accepted, Nth: nth}
}

// remember changes the series in memory, so that later entries of the call and the write see it.
func (s *saving) remember(it *item, r rows.Reading) {
	seen := rows.SeenReading{Reading: r, Reader: either2(it.ReadBy, s.actor.Title), Recorder: s.actor.Title}
	s.used[it.ID], s.newest[it.cell()] = seen, seen
	if it.kind > 3 {
		return
	}
	m, k := it.series, it.step
	s.dirty[stepKey{it.batch.ID, m.No, int16(k)}] = m
	switch it.Kind {
	case KindRate:
		m.RateNth[k], m.Rate[k] = r.Nth, r.Value
	case KindState:
		at := seconds(it)
		m.FoundNth[k], m.Found[k], m.AtS[k] = r.Nth, r.Value, &at
	case KindLeft:
		m.LeftNth[k], m.AsLeft[k] = r.Nth, r.Value
	}
	if it.Kind != KindLeft {
		m.Code[k] = r.Code
	}
}

func either2(s, absent string) string {
	if s == "" {
		return absent
	}
	return s
}
