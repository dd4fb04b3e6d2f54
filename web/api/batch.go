package api

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"net/http"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/danielgtaylor/huma/v2"

	"ratehouse/store"
	"ratehouse/web/page"
)

func (a *API) batchRoutes() {
	register := operation(http.MethodPost, "/batches", "register-batch", "Register a batch", store.RightRegister, http.StatusConflict)
	register.Description = "Takes in a batch and lays its movements into free holders. With an Idempotency-Key the same call may be sent again: it is done once, and answered alike."
	register.DefaultStatus = http.StatusCreated
	huma.Register(a.huma, register, answering(a, a.register))
	bodyOf[NewBatch](a, "/batches")

	list := operation(http.MethodGet, "/batches", "list-batches", "List batches, latest start first", store.RightBatches, http.StatusUnprocessableEntity)
	huma.Register(a.huma, list, answering(a, a.listBatches))

	one := operation(http.MethodGet, "/batches/{code}", "get-batch", "One batch with its rounds and how its movements stand", store.RightBatches, http.StatusNotFound)
	huma.Register(a.huma, one, answering(a, a.getBatch))

	sheets := operation(http.MethodGet, "/batches/{code}/sheets.csv", "get-sheets", "All movements of a batch with their criteria and verdicts, as CSV", store.RightVerdicts, http.StatusNotFound)
	sheets.Description = "The columns of ratehouse judge, then end and end_cause; verdict stays what the rates alone say."
	sheets.Responses = map[string]*huma.Response{"200": {Description: "OK", Content: map[string]*huma.MediaType{"text/csv": {Schema: &huma.Schema{Type: "string"}}}}}
	huma.Register(a.huma, sheets, answering(a, a.getSheets))
}

// NewBatch is the body of a registration.
type NewBatch struct {
	Code      string    `json:"code" pattern:"^[A-Z0-9][A-Z0-9._-]{0,39}$" example:"26-118"`
	Programme string    `json:"programme" doc:"code of a programme; its newest version is taken" example:"iso3159"`
	Calibre   string    `json:"calibre,omitempty" doc:"code; may be left out if the category is given" example:"K-41"`
	Category  string    `json:"category,omitempty" doc:"may be left out if the calibre's card tells it; both must agree" example:"1"`
	Depositor string    `json:"depositor" doc:"code; a new one is made on the spot" example:"KESTWICK"`
	StartsAt  time.Time `json:"starts_at" doc:"due instant of round 0"`
	Entry     string    `json:"entry" enum:"rate,state,hand,tap"`
	Serials   []string  `json:"serials" minItems:"1" nullable:"false" doc:"numbers of the movements, in the order of their places"`
}

func readNewBatch(body []byte) (store.NewBatch, error) {
	v, p := parse(body)
	if p != nil {
		return store.NewBatch{}, p
	}
	o, p := objectOf(v, "body")
	if p != nil {
		return store.NewBatch{}, p
	}
	n := store.NewBatch{Code: o.needed("code"), Programme: o.needed("programme"), Calibre: o.text("calibre"), Category: o.text("category"),
		Depositor: o.needed("depositor"), Entry: store.EntryKind(o.needed("entry"))}
	if o.needed("starts_at") != "" {
		n.StartsAt = o.instant("starts_at")
	}
	if _, ok := o.get("serials"); !ok {
		o.wrong("serials", "field_missing")
	}
	for _, s := range o.texts("serials") {
		n.Pieces = append(n.Pieces, store.Piece{Serial: trimmed(s)})
	}
	if p := refused(o.finish()); p != nil {
		return n, p
	}
	return n, nil
}

// trimmed takes blanks from the ends of a serial number, as every reader of files does.
func trimmed(s string) string { return strings.Trim(s, " \t\u00a0\u202f") }

// Batch is a batch without its readings.
type Batch struct {
	Code      string    `json:"code"`
	Programme Programme `json:"programme"`
	Category  string    `json:"category"`
	Calibre   string    `json:"calibre,omitempty"`
	Depositor string    `json:"depositor"`
	Entry     string    `json:"entry" enum:"rate,state,hand,tap"`
	StartsAt  time.Time `json:"starts_at"`
	Movements int       `json:"movements" doc:"how many were registered"`
	Rounds    []Round   `json:"rounds" nullable:"false"`
	Standing  *Standing `json:"standing,omitempty" doc:"only for who may see verdicts"`
}

// Programme names the version of a programme that a batch keeps.
type Programme struct {
	Code    string `json:"code"`
	Version string `json:"version"`
	Hash    string `json:"hash" doc:"SHA-256 of its canonical form, hexadecimal"`
}

// Round is round k of a batch.
type Round struct {
	Step  int       `json:"step" doc:"k, from 0"`
	Day   *int      `json:"day,omitempty" doc:"programme day it closes, 0 for the start; absent if it serves none"`
	DueAt time.Time `json:"due_at"`
	State string    `json:"state" enum:"waiting,open,closed"`
	Read  int       `json:"read" doc:"movements in trial that are read or have an observation"`
	Going int       `json:"going" doc:"movements in trial"`
}

// Standing counts the movements, each in one of these (cannot_pass counts some of the open ones again).
type Standing struct {
	Pass       int `json:"pass"`
	Fail       int `json:"fail"`
	Open       int `json:"open"`
	Unlimited  int `json:"unlimited" doc:"the programme sets no limits for the category"`
	Rejected   int `json:"rejected"`
	Withdrawn  int `json:"withdrawn"`
	Void       int `json:"void"`
	Removed    int `json:"removed"`
	CannotPass int `json:"cannot_pass"`
}

type registerIn struct {
	Key     string `header:"Idempotency-Key" doc:"up to 200 printable ASCII characters of the sender's choice, new for every new batch"`
	RawBody []byte `contentType:"application/json"`
}

type batchOut struct {
	Body Batch
}

type createdOut struct {
	Location string `header:"Location"`
	Body     Batch
}

const registerRoute = "POST " + Prefix + "/batches"

func (a *API) register(ctx context.Context, in *registerIn) (*createdOut, error) {
	n, err := readNewBatch(in.RawBody)
	if err != nil {
		return nil, err
	}
	if in.Key == "" {
		made, err := a.lab.Register(ctx, actorOf(ctx), n)
		if err != nil {
			return nil, err
		}
		return created(registered(&made)), nil
	}
	if !goodKey(in.Key) {
		return nil, problem(http.StatusUnprocessableEntity, "key_form")
	}
	hash := sha256.Sum256(in.RawBody)
	made, err := a.lab.Register(store.WithRequest(ctx, store.Request{Key: in.Key, Route: registerRoute, Hash: hash[:]}), actorOf(ctx), n)
	repeat, again := errors.AsType[*store.Repeat](err)
	switch {
	case again && repeat.Status != 0:
		var b Batch
		if err := json.Unmarshal([]byte(repeat.Answer), &b); err != nil {
			return nil, fmt.Errorf("stored answer: %w", err)
		}
		return created(b), nil
	case again: // done, but the program died before it could say so
		if made, err = a.lab.Batch(ctx, store.Program, n.Code); err != nil {
			return nil, err
		}
	case err != nil:
		return nil, err
	}
	b := registered(&made)
	var text bytes.Buffer
	if err := json.NewEncoder(&text).Encode(b); err != nil {
		return nil, err
	}
	return created(b), a.lab.Answered(ctx, actorOf(ctx), in.Key, http.StatusCreated, text.String())
}

func goodKey(k string) bool {
	return len(k) <= 200 && !strings.ContainsFunc(k, func(r rune) bool { return r < 0x21 || r > 0x7e })
}

func created(b Batch) *createdOut {
	return &createdOut{Location: page.Under(Prefix+"/batches", b.Code), Body: b}
}

// registered is a batch as it was when it came in: nothing read.
func registered(b *store.Batch) Batch {
	out := batchOf(b)
	for k, s := range b.Steps {
		r := Round{Step: k, DueAt: b.Due(k), State: string(store.RoundWaiting), Going: b.Size}
		if s.Day > 0 || k == 0 {
			r.Day = &s.Day
		}
		out.Rounds = append(out.Rounds, r)
	}
	return out
}

func batchOf(b *store.Batch) Batch {
	return Batch{Code: b.Code, Programme: Programme{b.Programme.Code, b.Programme.Version, hex.EncodeToString(b.Hash[:])}, Category: b.Category,
		Calibre: b.Calibre.Code, Depositor: b.Depositor.Code, Entry: string(b.Entry), StartsAt: b.StartsAt, Movements: b.Size, Rounds: []Round{}}
}

func (b *Batch) progress(rounds []store.Round) {
	for _, r := range rounds {
		one := Round{Step: r.K, DueAt: r.Due, State: string(r.State), Read: r.Read, Going: r.Going}
		if day := r.Batch.Steps[r.K].Day; day > 0 || r.K == 0 {
			one.Day = &day
		}
		b.Rounds = append(b.Rounds, one)
	}
}

func (b *Batch) stand(s *store.Summary) {
	c := s.All()
	b.Standing = &Standing{Pass: c.Pass, Fail: c.Fail, Open: c.Open, Unlimited: c.None, Rejected: c.Rejected, Withdrawn: c.Withdrawn,
		Void: c.VoidEnds, Removed: c.Removed, CannotPass: s.Cannot}
}

type listIn struct {
	Limit  int    `query:"limit" minimum:"1" maximum:"200" default:"50" doc:"items on a page"`
	Cursor string `query:"cursor" maxLength:"100" doc:"next of the page before"`
}

// BatchPage is one page of batches.
type BatchPage struct {
	Items []Batch `json:"items" nullable:"false"`
	Next  string  `json:"next,omitempty" doc:"cursor of the next page; absent on the last one"`
}

type listOut struct {
	Body BatchPage
}

func (a *API) listBatches(ctx context.Context, in *listIn) (*listOut, error) {
	if strings.ContainsRune(in.Cursor, 0) {
		return nil, &store.Error{Kind: store.KindInvalid, Code: "cursor_unknown", Field: "cursor"}
	}
	list, err := a.lab.Batches(ctx, actorOf(ctx), store.BatchFilter{Most: in.Limit}, in.Cursor)
	if err != nil {
		return nil, err
	}
	out := &listOut{Body: BatchPage{Items: []Batch{}, Next: list.Next}}
	for i := range list.Lines {
		line := &list.Lines[i]
		b := batchOf(&line.Batch)
		b.progress(line.Rounds)
		if line.Summary != nil {
			b.stand(line.Summary)
		}
		out.Body.Items = append(out.Body.Items, b)
	}
	return out, nil
}

type codeIn struct {
	Code string `path:"code" doc:"code of the batch" example:"26-118"`
}

func (a *API) getBatch(ctx context.Context, in *codeIn) (*batchOut, error) {
	if err := sane(in.Code, "no_batch", "code", printable(in.Code)); err != nil {
		return nil, err
	}
	actor := actorOf(ctx)
	sheet, err := a.lab.BatchSheet(ctx, actor, in.Code)
	if err != nil {
		return nil, err
	}
	out := &batchOut{Body: batchOf(&sheet.Batch)}
	out.Body.progress(sheet.Rounds)
	if actor.May(store.RightVerdicts) {
		sum, err := sheet.Summarise()
		if err != nil {
			return nil, err
		}
		out.Body.stand(&sum)
	}
	return out, nil
}

// sane answers like an unknown name where the database would not even take it.
func sane(s, code string, args ...string) error {
	if strings.ContainsRune(s, 0) || !utf8.ValidString(s) {
		return problem(http.StatusNotFound, code, args...)
	}
	return nil
}

type sheetsOut struct {
	Type        string `header:"Content-Type"`
	Disposition string `header:"Content-Disposition"`
	Body        []byte
}

func (a *API) getSheets(ctx context.Context, in *codeIn) (*sheetsOut, error) {
	if err := sane(in.Code, "no_batch", "code", printable(in.Code)); err != nil {
		return nil, err
	}
	var text bytes.Buffer
	if err := a.lab.SheetCSV(ctx, actorOf(ctx), in.Code, &text); err != nil {
		return nil, err
	}
	return &sheetsOut{"text/csv; charset=utf-8", fmt.Sprintf(`attachment; filename="%s.csv"`, in.Code), text.Bytes()}, nil
}
