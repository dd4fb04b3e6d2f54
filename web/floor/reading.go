package floor

import (
	"bytes"
	"encoding/json"
	"errors"
	"net/http"
	"strconv"
	"time"

	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/words"
)

// mostItems is how many readings one call may bring, as at the API.
const mostItems = 1000

// callIn is what the queue of the page sends: the API's shape, for one round.
type callIn struct {
	SentAt   time.Time         `json:"sent_at"`
	Readings []json.RawMessage `json:"readings"`
}

// itemIn is one reading as the page typed it.
type itemIn struct {
	ID      uuid.UUID         `json:"id"`
	Batch   string            `json:"batch"`
	Serial  string            `json:"serial"`
	Step    int               `json:"step"`
	Kind    store.ReadingKind `json:"kind"`
	Method  store.Method      `json:"method"`
	Value   string            `json:"value"`
	ReadAt  time.Time         `json:"read_at"`
	Base    int               `json:"base"`
	Reason  string            `json:"reason"`
	Confirm []string          `json:"confirm"`
	Comma   bool              `json:"comma"` // typed on a page whose language writes decimals with a comma
}

// answersOut is the API's answer; Detail says what a person needs to know, also after a second look.
type answersOut struct {
	Items []answerOut `json:"items"`
}

type answerOut struct {
	ID      uuid.UUID    `json:"id"`
	Status  store.Status `json:"status"`
	Nth     int          `json:"nth,omitempty"`
	Current *currentOut  `json:"current,omitempty"`
	Finding string       `json:"finding,omitempty"`
	Code    string       `json:"code,omitempty"`
	Detail  string       `json:"detail,omitempty"`
}

type currentOut struct {
	Nth    int       `json:"nth"`
	Value  string    `json:"value"`
	ReadBy string    `json:"read_by"`
	ReadAt time.Time `json:"read_at"`
}

// SaveReadings saves what the queue of a round page sends.
func (f *Floor) SaveReadings(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	var call callIn
	if err := json.NewDecoder(r.Body).Decode(&call); err != nil {
		if _, ok := errors.AsType[*http.MaxBytesError](err); ok {
			return err
		}
		return &store.Error{Kind: store.KindInvalid, Code: "form_unreadable"}
	}
	if len(call.Readings) > mostItems {
		return &http.MaxBytesError{Limit: mostItems}
	}
	entries, err := entriesOf(call.Readings, code, k)
	if err != nil {
		return err
	}
	answers, err := f.lab.Save(r.Context(), c.Actor, call.SentAt, entries)
	if err != nil {
		return err
	}
	out := answersOut{Items: make([]answerOut, len(answers))}
	for i, a := range answers {
		out.Items[i] = answerOf(c, a)
	}
	return sendJSON(w, out)
}

// entriesOf reads the items of a call. An item of another round is not from this page.
func entriesOf(items []json.RawMessage, code string, k int) ([]store.Entry, error) {
	entries := make([]store.Entry, len(items))
	for i, raw := range items {
		var in itemIn
		if err := json.Unmarshal(raw, &in); err != nil || in.Batch != code || in.Step != k {
			return nil, &store.Error{Kind: store.KindInvalid, Code: "form_unreadable"}
		}
		entries[i] = store.Entry{ID: in.ID, Batch: code, Serial: in.Serial, Step: k, Day: -1, Kind: in.Kind, Method: in.Method, Value: in.Value,
			ReadAt: in.ReadAt, Base: in.Base, Reason: in.Reason, Confirm: in.Confirm, Comma: in.Comma, Raw: string(raw)}
	}
	return entries, nil
}

func answerOf(c *page.Context, a store.Answer) answerOut {
	out := answerOut{ID: a.ID, Status: a.Status, Nth: a.Nth, Finding: a.Finding, Code: a.Code}
	switch {
	case a.Current != nil:
		out.Current = &currentOut{a.Current.Nth, a.Current.Value, a.Current.ReadBy, a.Current.ReadAt}
	case a.Finding != "":
		out.Detail = c.Say(findingWords(a.Finding))
	case a.Code != "":
		out.Detail = c.Fault(a.Code, a.Args)
	}
	return out
}

// findingWords says why a second look was asked; it is shown after the last value was typed.
func findingWords(finding string) words.Text {
	if finding == "beyond_60" {
		return words.WhyBeyond60
	}
	return words.Raw(finding)
}

func sendJSON(w http.ResponseWriter, v any) error {
	var buf bytes.Buffer
	if err := json.NewEncoder(&buf).Encode(v); err != nil {
		return err
	}
	w.Header().Set("Content-Type", "application/json")
	w.Header().Set("Cache-Control", "no-store")
	w.Write(buf.Bytes()) //nolint:errcheck // who asked has gone; the queue asks again
	return nil
}

// ownOut is what stands at a place, for the one who read it.
type ownOut struct {
	Value string `json:"value"`
}

// OwnReading tells the reader what he typed for a movement, so that he can correct it: nobody else, and
// only while he may do so without a reason (practice notes E8, E11).
func (f *Floor) OwnReading(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return err
	}
	_, x := seatOfSerial(&s, r.URL.Query().Get("serial"))
	if x == nil {
		return page.NotFound()
	}
	var out ownOut
	if x.Read && mayCorrectFreely(&s, x) {
		out.Value = x.Value
		if x.Code != "" {
			out.Value = string(x.Code)
		}
	}
	return sendJSON(w, out)
}

func seatOfSerial(s *store.RoundSheet, serial string) (*store.HolderRound, *store.Seat) {
	for h := range s.Holders {
		for i := range s.Holders[h].Seats {
			if x := &s.Holders[h].Seats[i]; x.No > 0 && x.Serial == serial {
				return &s.Holders[h], x
			}
		}
	}
	return nil, nil
}

// PostReading saves one reading from the plain form: the page without its script.
func (f *Floor) PostReading(w http.ResponseWriter, r *http.Request) error {
	c := page.Of(r)
	code, k, err := roundOf(r)
	if err != nil {
		return err
	}
	form, err := page.ReadForm(r)
	if err != nil {
		return err
	}
	s, err := f.lab.RoundSheet(r.Context(), c.Actor, code, k)
	if err != nil {
		return err
	}
	e := plainEntry(c, form, &s)
	answers, err := f.lab.Save(r.Context(), c.Actor, time.Time{}, []store.Entry{e})
	if err != nil {
		return err
	}
	a := answers[0]
	if a.Status == store.Accepted || a.Status == store.Duplicate {
		return page.Redirect(w, r, page.RoundURL(code, k))
	}
	v := viewRound(c, &s, form.Raw("holder"), form.Raw("place"))
	v.field.keep(c, form, e, a)
	return page.Render(w, r, http.StatusUnprocessableEntity, roundPage(c, v))
}

// plainEntry is the reading that a form holds. After a second look was asked the value typed first
// stands in it hidden, and what is in the field now confirms it.
func plainEntry(c *page.Context, form *page.Form, s *store.RoundSheet) store.Entry {
	id, _ := uuid.Parse(form.Raw("id"))
	base, _ := strconv.Atoi(form.Raw("base"))
	e := store.Entry{ID: id, Batch: s.Batch.Code, Serial: form.Raw("serial"), Step: s.K, Day: -1, Kind: store.KindState, Method: store.Typed,
		Value: form.Get("value"), ReadAt: c.Now, Base: base, Reason: form.Get("reason"), Comma: c.Lang() != words.EN}
	if s.Batch.Entry == store.EntryRate {
		e.Kind = store.KindRate
	}
	if first := form.Raw("first"); first != "" {
		e.Confirm = append(append(e.Confirm, form.All("confirm")...), e.Value)
		e.Value = first
	}
	if seen := form.Raw("seen"); seen != "" {
		e.Value, e.Confirm = seen, nil
	}
	return e
}

// keep fills the field in again with what was typed, and says what became of it. What a second look asks
// for is typed blind: the values before it stay hidden.
func (v *fieldView) keep(c *page.Context, form *page.Form, e store.Entry, a store.Answer) {
	v.value, v.reason, v.id, v.base = form.Raw("value"), form.Raw("reason"), e.ID.String(), e.Base
	switch a.Status {
	case store.LookAgain:
		v.value, v.first, v.confirm, v.again = "", e.Value, e.Confirm, true
		says := words.FieldAgain
		if len(e.Confirm) > 0 {
			says = words.FieldOnceMore
		}
		v.label, v.note = c.Say(says.With(v.place)), c.Say(words.HintAgain)
	case store.Conflict:
		v.why = c.Say(words.ConflictTwo.With(a.Current.ReadBy, words.Raw(currentWords(c, a.Current)), c.Second(a.Current.ReadAt), words.Raw(e.Value))) +
			" " + c.Say(words.ConflictDecide)
		v.base, v.needsReason = a.Current.Nth, true
	case store.Refused:
		v.why = c.Fault(a.Code, a.Args)
		v.needsReason = v.needsReason || a.Code == "reason_needed"
	}
}

func currentWords(c *page.Context, r *store.Current) string {
	return ownValue(c, &store.Seat{Value: r.Value, Code: observationIn(r.Value)})
}

func observationIn(value string) store.Observation {
	for _, o := range store.Observations {
		if value == string(o) {
			return o
		}
	}
	return ""
}
