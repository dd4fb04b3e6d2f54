package store

import (
	"cmp"
	"context"
	"crypto/sha256"
	"encoding/json"
	"errors"
	"slices"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"

	"ratehouse/store/rows"
	"ratehouse/trial"
)

// Save takes in readings, one or a thousand by the same code: two round trips from begin to
// commit. The first one locks the series of the movements in key order and fetches all the
// decision needs; the second writes the act, the evidence and the series, and commits. Items are
// independent: what is refused is kept as a stray, and the others are saved. Calling again with
// the same entries changes nothing. sentAt is the sender's clock when it sent; zero if unknown.
func (l *Lab) Save(ctx context.Context, a Actor, sentAt time.Time, entries []Entry) ([]Answer, error) {
	answers, err := l.saveOnce(ctx, a, sentAt, entries)
	// The same id for two cells at the same instant slips between look-up and insert; the second
	// look-up sees it and answers id_reused.
	if pg, ok := errors.AsType[*pgconn.PgError](err); ok && pg.ConstraintName == "reading_id_once" {
		return l.saveOnce(ctx, a, sentAt, entries)
	}
	return answers, err
}

func (l *Lab) saveOnce(ctx context.Context, a Actor, sentAt time.Time, entries []Entry) (answers []Answer, err error) {
	err = l.do(ctx, a, verb{"save_readings", RightEnter}, func(w *work) error {
		s := &saving{work: w}
		if !sentAt.IsZero() {
			s.offset = w.now.Sub(sentAt)
		}
		if err := s.look(ctx, entries); err != nil {
			return err
		}
		answers = make([]Answer, len(entries))
		for i := range entries {
			answers[i] = s.decide(&entries[i])
		}
		return s.queue()
	})
	return answers, err
}

// saving is one call of Save under way.
type saving struct {
	*work
	offset  time.Duration // server's clock minus the sender's
	batches map[string]*Batch
	series  map[[2]string]*rows.Series
	used    map[uuid.UUID]rows.SeenReading
	looks   map[uuid.UUID][]rows.Look
	newest  map[cellKey]rows.SeenReading
	rounds  map[cellKey]rows.RoundEvent
	people  map[string]rows.AccountID

	readings []rows.Reading
	newLooks []rows.Look
	strays   []rows.Stray
	dirty    map[stepKey]*rows.Series
}

type stepKey struct {
	batch uuid.UUID
	no    int16
	step  int16
}

// look asks everything in one trip.
func (s *saving) look(ctx context.Context, entries []Entry) error {
	q := askFor(entries)
	var (
		series  []rows.Series
		batches []rows.Batch
		used    []rows.SeenReading
		looks   []rows.Look
		newest  []rows.SeenReading
		rounds  []rows.RoundEvent
		people  []rows.AccountID
		site    = s.lab.site
		b       = &pgx.Batch{}
	)
	rows.LockSeries(b, &series, site, q.codes, q.serials)
	rows.FindBatches(b, &batches, site, q.distinct)
	rows.ReadingsByID(b, &used, q.ids)
	rows.LooksByID(b, &looks, q.ids)
	rows.Newest(b, &newest, site, q.entryCodes, q.entrySerials, q.steps, q.days)
	rows.RoundsOf(b, &rounds, site, q.distinct)
	rows.AccountIDs(b, &people, site, q.people)
	if err := s.read(ctx, b); err != nil {
		return err
	}
	if err := s.keepBatches(ctx, batches, series); err != nil {
		return err
	}
	s.used, s.looks = map[uuid.UUID]rows.SeenReading{}, map[uuid.UUID][]rows.Look{}
	s.newest, s.rounds = map[cellKey]rows.SeenReading{}, map[cellKey]rows.RoundEvent{}
	s.people, s.dirty = map[string]rows.AccountID{}, map[stepKey]*rows.Series{}
	for _, r := range used {
		s.used[r.ID] = r
	}
	for _, k := range looks {
		s.looks[k.ID] = append(s.looks[k.ID], k)
	}
	for _, r := range newest {
		s.newest[cellKey{r.Batch, r.No, r.Step, r.Kind}] = r
	}
	for _, e := range rounds {
		s.rounds[cellKey{batch: e.Batch, step: e.Step}] = e
	}
	for _, p := range people {
		s.people[p.Name] = p
	}
	return nil
}

func (s *saving) keepBatches(ctx context.Context, batches []rows.Batch, series []rows.Series) error {
	s.batches, s.series = map[string]*Batch{}, map[[2]string]*rows.Series{}
	codes := map[uuid.UUID]string{}
	for _, r := range batches {
		b, err := s.lab.batchOf(ctx, s.conn, r)
		if err != nil {
			return err
		}
		s.batches[b.Code], codes[b.ID] = &b, b.Code
	}
	for i := range series {
		s.series[[2]string{codes[series[i].Batch], series[i].Serial}] = &series[i]
	}
	return nil
}

// question is what the entries of a call ask the database for.
type question struct {
	codes, serials           []string // distinct movements
	distinct                 []string // batches
	entryCodes, entrySerials []string // one each entry, with its step or day
	steps, days              []int16
	ids                      []uuid.UUID
	people                   []string
}

func askFor(entries []Entry) question {
	var q question
	seen, batches, people := map[[2]string]bool{}, map[string]bool{}, map[string]bool{}
	for _, e := range entries {
		if k := [2]string{e.Batch, e.Serial}; !seen[k] {
			seen[k] = true
			q.codes, q.serials = append(q.codes, e.Batch), append(q.serials, e.Serial)
		}
		if !batches[e.Batch] {
			batches[e.Batch] = true
			q.distinct = append(q.distinct, e.Batch)
		}
		if e.ReadBy != "" && !people[e.ReadBy] {
			people[e.ReadBy] = true
			q.people = append(q.people, e.ReadBy)
		}
		q.entryCodes, q.entrySerials = append(q.entryCodes, e.Batch), append(q.entrySerials, e.Serial)
		q.steps, q.days = append(q.steps, small(e.Step)), append(q.days, small(e.Day))
		q.ids = append(q.ids, e.ID)
	}
	return q
}

// small squeezes a number into the width of a step; what does not fit is no step.
func small(n int) int16 {
	if n < 0 || n > 1000 {
		return -1
	}
	return int16(n)
}

// queue writes what was decided, in key order.
func (s *saving) queue() error {
	s.skip = len(s.readings) == 0 && len(s.newLooks) == 0
	if !s.skip {
		s.act.Body = s.body()
		if len(s.batches) == 1 {
			for _, b := range s.batches {
				s.batch(b.ID)
			}
		}
	}
	if len(s.readings) > 0 {
		rows.QueueReadings(s.out, s.readings, s.act.ID)
		rows.QueueElements(s.out, s.elements())
	}
	rows.QueueLooks(s.out, s.newLooks, s.act.ID)
	rows.QueueStrays(s.out, s.strays)
	return nil
}

func (s *saving) elements() []rows.Element {
	list := make([]rows.Element, 0, len(s.dirty))
	for k, m := range s.dirty {
		i := k.step
		list = append(list, rows.Element{Batch: k.batch, No: k.no, Step: i, Rate: m.Rate[i], Found: m.Found[i], AsLeft: m.AsLeft[i],
			AtS: m.AtS[i], Code: m.Code[i], RateNth: m.RateNth[i], FoundNth: m.FoundNth[i], LeftNth: m.LeftNth[i]})
	}
	slices.SortFunc(list, func(a, b rows.Element) int {
		return cmp.Or(slices.Compare(a.Batch[:], b.Batch[:]), cmp.Compare(a.No, b.No), cmp.Compare(a.Step, b.Step))
	})
	return list
}

// body is what the journal keeps: every figure of the evidence, so that the sealed text proves it.
func (s *saving) body() map[string]any {
	list := make([]any, 0, len(s.readings))
	for _, r := range s.readings {
		item := []any{r.ID.String(), r.Batch.String(), int(r.No), int(r.Step), int(r.Kind), int(r.Nth), number(r.Value), number(r.Code), r.Typed,
			int(r.Method), r.ReadAt.UTC().Format(rfc3339ms), r.ReadBy.String(), value(r.Station), value(r.Reason)}
		list = append(list, item)
	}
	body := map[string]any{"readings": list}
	if len(s.newLooks) > 0 {
		looks := make([]any, 0, len(s.newLooks))
		for _, k := range s.newLooks {
			looks = append(looks, []any{k.ID.String(), k.Batch.String(), int(k.No), int(k.Step), int(k.Kind), int(k.Nth), int(k.Value), k.Typed})
		}
		body["looks"] = looks
	}
	return body
}

const rfc3339ms = "2006-01-02T15:04:05.000Z07:00"

func number[T int16 | int32](p *T) any {
	if p == nil {
		return nil
	}
	return int64(*p)
}

// refuse keeps the item as a stray and answers why.
func (s *saving) refuse(e *Entry, code string, args ...string) Answer {
	raw := e.Raw
	if raw == "" {
		text, err := json.Marshal(e)
		if err != nil {
			text = []byte(e.Value)
		}
		raw = string(text)
	}
	hash := sha256.Sum256([]byte(code + "\n" + raw))
	s.strays = append(s.strays, rows.Stray{ID: e.ID, Hash: hash[:], GotAt: s.now, Sender: s.actor.Account, Batch: optional(e.Batch), Raw: raw, Why: code})
	return Answer{ID: e.ID, Status: Refused, Code: code, Args: failure(KindInvalid, code, args...).Args}
}

// rateAt is the rate of the stretch that closes at step k, from states alone.
func rateAt(b *Batch, m *rows.Series, k int) trial.Rate {
	if k < 1 || k >= len(m.Found) || m.Found[k] == nil || m.AtS[k] == nil || m.AtS[k-1] == nil {
		return trial.Rate{}
	}
	from := m.AsLeft[k-1]
	if from == nil {
		from = m.Found[k-1]
	}
	if from == nil {
		return trial.Rate{}
	}
	return trial.RateBetween(trial.State(*from), trial.State(*m.Found[k]), int64(*m.AtS[k])-int64(*m.AtS[k-1]))
}
