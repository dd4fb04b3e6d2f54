package api

import (
	"context"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"net/http"
	"slices"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/uuid"

	"ratehouse/store"
	"ratehouse/trial/sheet"
	"ratehouse/web/page"
)

// mostReadings is how many items one call may bring.
const mostReadings = 1000

func (a *API) readingRoutes() {
	op := operation(http.MethodPost, "/readings", "post-readings", "Save readings, one or a thousand", store.RightEnter)
	op.Description = "Items are independent: what is refused is kept aside under its id and shown, the others are saved. " +
		"Sending the same call again changes nothing, because every item carries an id made by the sender (UUIDv7). " +
		"After second_look send the same id and value again with confirm: the one or two values read again, in order."
	huma.Register(a.huma, op, answering(a, a.postReadings))
	bodyOf[NewReadings](a, "/readings")
}

// NewReadings is the body of a call.
type NewReadings struct {
	SentAt   time.Time    `json:"sent_at" doc:"the sender's clock when it sends: by it the instants of the items are put right"`
	Readings []NewReading `json:"readings" maxItems:"1000" nullable:"false"`
}

// NewReading is one item. Exactly one of step and day is given.
type NewReading struct {
	ID       string     `json:"id" format:"uuid" doc:"UUIDv7 made by the sender"`
	Batch    string     `json:"batch"`
	Serial   string     `json:"serial"`
	Step     *int       `json:"step,omitempty" minimum:"0" doc:"round k"`
	Day      *int       `json:"day,omitempty" minimum:"0" doc:"the latest step that closes this day; 0 = start"`
	Kind     string     `json:"kind" enum:"rate,state,left,replicate,late_check"`
	Method   string     `json:"method" enum:"typed,hand,tap,camera,full_time,station"`
	Value    string     `json:"value" doc:"decimal, or stopped, hand, unreadable, not_there, dropped" example:"-2.4"`
	ReadAt   *time.Time `json:"read_at,omitempty" doc:"required except for rates"`
	ReadBy   string     `json:"read_by,omitempty" doc:"log-in name; absent: the token's account"`
	Station  string     `json:"station,omitempty" doc:"absent: the token's"`
	Base     int        `json:"base,omitempty" minimum:"0" doc:"how many entries of this cell the sender has seen; above 0 it is a correction"`
	Reason   string     `json:"reason,omitempty" doc:"of a correction; needed outside the reader's own open round"`
	Evidence *Evidence  `json:"evidence,omitempty"`
	Confirm  []string   `json:"confirm,omitempty" maxItems:"2" nullable:"false" doc:"the values read again after second_look"`
}

// Evidence is the image that a reading was taken from.
type Evidence struct {
	SHA256 string `json:"sha256" pattern:"^[0-9a-f]{64}$"`
	URI    string `json:"uri,omitempty"`
}

// Answers says what became of each item, in the order in which they came.
type Answers struct {
	Items []Answer `json:"items" nullable:"false"`
}

// Answer is what became of one item.
type Answer struct {
	ID      string            `json:"id,omitempty" doc:"as it was sent; absent if it was no text"`
	Status  string            `json:"status" enum:"accepted,duplicate,conflict,second_look,refused"`
	Nth     int               `json:"nth,omitempty" doc:"accepted, duplicate: the nth entry of its cell"`
	Current *Current          `json:"current,omitempty" doc:"conflict: what stands there"`
	Finding string            `json:"finding,omitempty" doc:"second_look: why it was asked; not to be shown before the last value is read"`
	Code    RefusalCode       `json:"code,omitempty"`
	Args    map[string]string `json:"args,omitempty" doc:"refused: what the sentence is about"`
	Detail  string            `json:"detail,omitempty" doc:"refused: what is wrong and what would be right"`
}

// Current is the entry that stands in a cell.
type Current struct {
	Nth    int       `json:"nth"`
	Value  string    `json:"value" doc:"decimal or observation"`
	ReadBy string    `json:"read_by"`
	ReadAt time.Time `json:"read_at"`
}

// RefusalCode says why an item was refused; the list is closed.
type RefusalCode string

// Schema is the closed list.
func (RefusalCode) Schema(r huma.Registry) *huma.Schema {
	return closed(r, "RefusalCode", "Why an item was refused. The list is closed: new codes come with a new version of the document.", RefusalCodes())
}

// itemCodes are what can be wrong with the form of an item.
var itemCodes = []string{"not_object", "unknown_field", "field_missing", "field_type", "field_list", "time_form", "text_nul", "id_form"}

// numberCodes are what can be wrong with a number.
var numberCodes = []string{string(sheet.NotNumber), string(sheet.OtherCharacter), string(sheet.Exponent), string(sheet.SignApart), string(sheet.TooFine), string(sheet.TooLarge),
	string(sheet.DecimalComma), string(sheet.AmbiguousComma), string(sheet.Grouping), string(sheet.IsFormula), string(sheet.Blank)}

// RefusalCodes is the closed list of codes of refused items.
func RefusalCodes() []string { return sorted(store.RefusalCodes, itemCodes, numberCodes) }

type readingsIn struct {
	RawBody []byte `contentType:"application/json"`
}

type readingsOut struct {
	Body Answers
}

func (a *API) postReadings(ctx context.Context, in *readingsIn) (*readingsOut, error) {
	sentAt, entries, ids, err := readReadings(in.RawBody)
	if err != nil {
		return nil, err
	}
	out := &readingsOut{Answers{Items: make([]Answer, len(entries))}}
	if len(entries) == 0 {
		return out, nil
	}
	answers, err := a.lab.Save(ctx, actorOf(ctx), sentAt, entries)
	if err != nil {
		return nil, err
	}
	c := page.From(ctx)
	for i, r := range answers {
		one := Answer{ID: ids[i], Status: string(r.Status), Nth: r.Nth, Finding: r.Finding, Code: RefusalCode(r.Code), Args: r.Args}
		if r.Current != nil {
			one.Current = &Current{r.Current.Nth, r.Current.Value, r.Current.ReadBy, r.Current.ReadAt}
		}
		if r.Code != "" {
			one.Detail = c.Fault(r.Code, r.Args)
		}
		out.Body.Items[i] = one
	}
	return out, nil
}

// readReadings reads a call. What is wrong with an item travels with its entry, so that it is refused
// by itself and kept with what was sent; ids are the items' own as they were sent.
func readReadings(body []byte) (sentAt time.Time, entries []store.Entry, ids []string, err error) {
	v, p := parse(body)
	if p != nil {
		return sentAt, nil, nil, p
	}
	o, p := objectOf(v, "body")
	if p != nil {
		return sentAt, nil, nil, p
	}
	if o.needed("sent_at") != "" {
		sentAt = o.instant("sent_at")
	}
	if _, ok := o.get("readings"); !ok {
		o.wrong("readings", "field_missing")
	}
	list := o.list("readings")
	if p := refused(o.finish()); p != nil {
		return sentAt, nil, nil, p
	}
	if len(list) > mostReadings {
		return sentAt, nil, nil, problem(http.StatusUnprocessableEntity, "too_many_items", "sent", fmt.Sprint(len(list)), "most", fmt.Sprint(mostReadings))
	}
	var text struct{ Readings []json.RawMessage }
	if err := json.Unmarshal(body, &text); err != nil {
		return sentAt, nil, nil, fmt.Errorf("texts of the items: %w", err)
	}
	entries, ids = make([]store.Entry, len(list)), make([]string, len(list))
	for i, item := range list {
		entries[i], ids[i] = readReading(item, fmt.Sprintf("body.readings[%d]", i))
		entries[i].Raw = string(text.Readings[i])
	}
	return sentAt, entries, ids, nil
}

// readReading reads one item; the first fault found is what it is refused for.
func readReading(v any, at string) (store.Entry, string) {
	o, p := objectOf(v, at)
	if p != nil {
		return store.Entry{Step: -1, Day: -1, Wrong: &store.Error{Kind: store.KindInvalid, Code: string(p.Code), Args: p.Args}}, ""
	}
	e := store.Entry{Batch: o.needed("batch"), Serial: trimmed(o.needed("serial")), Step: o.count("step", "unknown_step"), Day: o.count("day", "unknown_step"),
		Kind: store.ReadingKind(o.needed("kind")), Method: store.Method(o.needed("method")), Value: o.text("value"), ReadAt: o.instant("read_at"),
		ReadBy: o.text("read_by"), Station: o.text("station"), Reason: o.text("reason"), Confirm: o.texts("confirm")}
	if _, there := o.get("value"); !there {
		o.wrong("value", "field_missing")
	}
	if e.Base = o.count("base", "field_type"); e.Base < 0 {
		e.Base = 0
	}
	if len(e.Confirm) > 2 {
		o.wrong("confirm", "field_list", "most", "2")
	}
	o.evidence(&e)
	id := o.id(&e)
	if faults := o.finish(); len(faults) > 0 {
		e.Wrong = &store.Error{Kind: store.KindInvalid, Code: string(faults[0].Code), Args: faults[0].Args}
	}
	return e, id
}

// count is a whole number from 0; -1 if it is absent, code for one below.
func (o *object) count(name, code string) int {
	n := o.integer(name, -1)
	if v, there := o.members[name]; there && v != nil && n < 0 && !o.faulty(name) {
		o.wrong(name, code, "step", fmt.Sprint(n), "want", "integer from 0")
	}
	return n
}

func (o *object) faulty(name string) bool {
	return slices.ContainsFunc(o.faults, func(f Fault) bool { return f.Location == o.at+"."+name })
}

// id reads the identity of an item in the one form that has 36 signs.
func (o *object) id(e *store.Entry) string {
	text := o.text("id")
	if text == "" {
		if !o.faulty("id") {
			o.wrong("id", "id_missing")
		}
		return ""
	}
	id, err := uuid.Parse(text)
	if err != nil || len(text) != 36 || id == uuid.Nil {
		o.wrong("id", "id_form", "value", printable(text))
		return text[:min(len(text), 100)]
	}
	e.ID = id
	return text
}

func (o *object) evidence(e *store.Entry) {
	v, there := o.get("evidence")
	if !there {
		return
	}
	in, p := objectOf(v, o.at+".evidence")
	if p != nil {
		o.wrong("evidence", "field_type", "want", "object")
		return
	}
	sum, err := hex.DecodeString(in.needed("sha256"))
	e.Image = in.text("uri")
	if err != nil || len(sum) != 32 {
		o.wrong("evidence", "evidence_form")
		return
	}
	e.Evidence = sum
	o.faults = append(o.faults, in.finish()...)
}
