package store

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
	"ratehouse/trial"
)

// Round is round k of a batch as the floor sees it: how far it is, no verdict, no limit.
type Round struct {
	Batch    Batch
	Plan     trial.Round // what it closes, opens and asks to be done
	K        int
	Due      time.Time
	Read     int // movements in trial that are read or have an observation
	Going    int // movements in trial
	State    RoundState
	OpenedAt time.Time
	OpenedBy string
	ClosedAt time.Time
	LastRead time.Time
}

// RoundState says whether a round was opened and closed.
type RoundState string

// The states of a round.
const (
	RoundWaiting RoundState = "waiting"
	RoundOpen    RoundState = "open"
	RoundClosed  RoundState = "closed"
)

// Late is how long after its tolerance the round still misses readings; 0 when it is not late.
func (r *Round) Late(now time.Time) time.Duration {
	limit := r.Due.Add(time.Duration(r.Batch.Programme.Reading.ToleranceS) * time.Second)
	if r.Done() || !now.After(limit) {
		return 0
	}
	return now.Sub(r.Due)
}

// Done tells whether nothing is left to read.
func (r *Round) Done() bool { return r.State == RoundClosed || r.Going > 0 && r.Read >= r.Going }

// Today is what must be done now: of every running batch the round that is due next, and the
// rounds done since midnight.
type Today struct {
	Now  time.Time
	Due  []Round // not done, soonest due first
	Done []Round // done today, latest first
}

// sinceStart is how long a batch may run before Today stops looking at it.
const sinceStart = 45 * 24 * time.Hour

// Today costs one round trip, whatever is running.
func (l *Lab) Today(ctx context.Context, a Actor) (Today, error) {
	t := Today{Now: l.Now()}
	if !a.May(RightToday) {
		return t, failure(KindForbidden, "not_allowed", "right", string(RightToday))
	}
	var (
		batches []rows.Batch
		events  []rows.RoundEvent
		reads   []rows.Read
		b       = &pgx.Batch{}
		since   = t.Now.Add(-sinceStart)
	)
	rows.RunningBatches(b, &batches, l.site, since)
	rows.RunningRounds(b, &events, l.site, since)
	rows.RunningReads(b, &reads, l.site, since)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return t, fmt.Errorf("today: %w", err)
	}
	for _, row := range batches {
		batch, err := l.batchOf(ctx, l.pool, row)
		if err != nil {
			return t, err
		}
		t.add(l, roundsOf(batch, events, reads))
	}
	slices.SortStableFunc(t.Due, func(x, y Round) int { return x.Due.Compare(y.Due) })
	slices.SortStableFunc(t.Done, func(x, y Round) int { return y.LastRead.Compare(x.LastRead) })
	return t, nil
}

// add takes the first round that is not done, and those done today in the house's time zone.
func (t *Today) add(l *Lab, rounds []Round) {
	zone := l.House().Zone
	y, m, d := t.Now.In(zone).Date()
	midnight := time.Date(y, m, d, 0, 0, 0, 0, zone)
	due := false
	for _, r := range rounds {
		switch {
		case r.Going == 0:
		case !r.Done() && !due:
			t.Due, due = append(t.Due, r), true
		case r.Done() && later(r.LastRead, r.ClosedAt).After(midnight):
			t.Done = append(t.Done, r)
		}
	}
}

func later(x, y time.Time) time.Time {
	if x.After(y) {
		return x
	}
	return y
}

// roundsOf puts together what is known of every round of a batch.
func roundsOf(b Batch, events []rows.RoundEvent, reads []rows.Read) []Round {
	plans := b.Programme.Rounds()
	out := make([]Round, len(b.Steps))
	for k := range out {
		out[k] = Round{Batch: b, K: k, Due: b.Due(k), State: RoundWaiting}
		if k < len(plans) {
			out[k].Plan = plans[k]
		}
	}
	for _, e := range events {
		if e.Batch != b.ID || int(e.Step) >= len(out) {
			continue
		}
		r := &out[e.Step]
		if r.State = RoundOpen; e.Kind == "closed" {
			r.State, r.ClosedAt = RoundClosed, e.At.UTC()
		} else {
			r.OpenedAt, r.OpenedBy = e.At.UTC(), e.ByName
		}
	}
	for _, x := range reads {
		if x.Batch == b.ID && int(x.Step) < len(out) {
			out[x.Step].Read, out[x.Step].Going, out[x.Step].LastRead = int(x.Read), int(x.Going), value(x.LastAt).UTC()
		}
	}
	return out
}

// Seat is one place of a holder as the round page draws it.
type Seat struct {
	Place  int
	No     int // of the movement; 0: nothing lies here
	Serial string
	Read   bool        // a value stands in the cell of this round
	Value  string      // decimal, for who may still correct it; empty otherwise
	Nth    int         // entries in the cell: the base of the next one
	Code   Observation // in place of a value
	Ended  End         // the hole stays a hole
	Mine   bool        // read or entered by the actor: he may correct without a reason
	Look   bool        // a second look was asked and not answered
}

// HolderRound is one holder within a round, drawn with its empty and blocked places.
type HolderRound struct {
	ID    uuid.UUID
	Code  string
	Type  HolderType
	Seats []Seat // in reading order, empty places included
	Read  int
	Going int
	Last  time.Time // its own last reading: its next one is due one interval later
}

// RoundSheet is a round with its holders: what the round page needs, and nothing it must not show.
type RoundSheet struct {
	Round
	Holders []HolderRound
	Strays  int
}

// RoundSheet costs one round trip.
func (l *Lab) RoundSheet(ctx context.Context, a Actor, code string, k int) (RoundSheet, error) {
	var s RoundSheet
	if !a.May(RightEnter) {
		return s, failure(KindForbidden, "not_allowed", "right", string(RightEnter))
	}
	var (
		found     []rows.Batch
		events    []rows.RoundEvent
		movements []rows.Movement
		types     []rows.HolderType
		readers   []rows.CellReader
		looks     []rows.Looked
		b         = &pgx.Batch{}
	)
	rows.FindBatch(b, &found, l.site, code)
	rows.RoundsOf(b, &events, l.site, []string{code})
	rows.MovementsOf(b, &movements, code, l.site)
	rows.QueueHolderTypes(b, &types, l.site)
	rows.ReadersOf(b, &readers, l.site, code, int16(min(k, 1000)))
	rows.LooksAt(b, &looks, l.site, code, int16(min(k, 1000)))
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return s, fmt.Errorf("round %d of batch %s: %w", k, code, err)
	}
	if len(found) == 0 {
		return s, failure(KindNotFound, "no_batch", "code", code)
	}
	batch, err := l.batchOf(ctx, l.pool, found[0])
	if err != nil {
		return s, err
	}
	if k < 0 || k > batch.LastStep() {
		return s, failure(KindNotFound, "no_round", "code", code, "round", strconv.Itoa(k))
	}
	s.Round = roundsOf(batch, events, nil)[k]
	s.seat(a, movements, types, readers)
	s.markLooks(looks)
	return s, nil
}

// markLooks marks the seats whose second look is still to be taken.
func (s *RoundSheet) markLooks(looks []rows.Looked) {
	open := map[int]bool{}
	for _, k := range looks {
		open[int(k.No)] = true
	}
	for h := range s.Holders {
		for i := range s.Holders[h].Seats {
			seat := &s.Holders[h].Seats[i]
			seat.Look = open[seat.No] && !seat.Read && seat.Ended == InTrial
		}
	}
}

// seat lays the movements into their holders.
func (s *RoundSheet) seat(a Actor, movements []rows.Movement, types []rows.HolderType, readers []rows.CellReader) {
	looks := map[string]HolderType{}
	for _, t := range types {
		looks[t.Code] = holderTypeOf(t)
	}
	mine := map[int16]bool{}
	for _, r := range readers {
		mine[r.No] = r.ReadBy == a.Account || r.EnteredBy == a.Account
	}
	at := map[uuid.UUID]int{}
	for i := range movements {
		m := &movements[i]
		if m.Holder == nil {
			continue
		}
		h, ok := at[*m.Holder]
		if !ok {
			h = len(s.Holders)
			at[*m.Holder] = h
			t := looks[value(m.HolderType)]
			s.Holders = append(s.Holders, HolderRound{ID: *m.Holder, Code: value(m.HolderCode), Type: t, Seats: emptySeats(t)})
		}
		s.sit(&s.Holders[h], m, mine[m.No])
	}
}

func emptySeats(t HolderType) []Seat {
	places := t.Places()
	seats := make([]Seat, len(places))
	for i, p := range places {
		seats[i].Place = p
	}
	return seats
}

func (s *RoundSheet) sit(h *HolderRound, m *rows.Movement, mine bool) {
	i := slices.IndexFunc(h.Seats, func(x Seat) bool { return x.Place == int(value(m.Place)) })
	if i < 0 {
		return
	}
	seat := &h.Seats[i]
	seat.No, seat.Serial, seat.Ended, seat.Mine = int(m.No), m.Serial, endOf(m.Ended), mine
	v, nth := m.Found[s.K], m.FoundNth[s.K]
	if s.Batch.Entry == EntryRate {
		v, nth = m.Rate[s.K], m.RateNth[s.K]
	}
	seat.Nth, seat.Code = int(nth), observation(value(m.Code[s.K]))
	seat.Read = v != nil || seat.Code != ""
	if v != nil {
		seat.Value = trial.Milli(*v).String()
	}
	if at := m.AtS[s.K]; at != nil {
		h.Last = later(h.Last, s.Batch.StartsAt.Add(time.Duration(*at)*time.Second))
		s.LastRead = later(s.LastRead, h.Last)
	}
	if m.Ended == 0 {
		h.Going++
		s.Going++
		if seat.Read {
			h.Read++
			s.Read++
		}
	}
}

// OpenRound opens round k for reading; opening it again changes nothing, after closing it is
// reopened.
func (l *Lab) OpenRound(ctx context.Context, a Actor, code string, k int) error {
	return l.roundEvent(ctx, a, "open_round", code, k, func(last string) (string, error) {
		switch last {
		case "":
			return "opened", nil
		case "closed":
			return "reopened", nil
		}
		return "", nil
	})
}

// CloseRound closes round k: from then on a correction names its reason. What is missing may still
// be entered.
func (l *Lab) CloseRound(ctx context.Context, a Actor, code string, k int) error {
	return l.roundEvent(ctx, a, "close_round", code, k, func(last string) (string, error) {
		switch last {
		case "":
			return "", failure(KindConflict, "round_not_open", "code", code, "round", strconv.Itoa(k))
		case "closed":
			return "", nil
		}
		return "closed", nil
	})
}

func (l *Lab) roundEvent(ctx context.Context, a Actor, name, code string, k int, next func(last string) (string, error)) error {
	return l.do(ctx, a, verb{name, RightEnter}, func(w *work) error {
		var (
			found  []rows.Batch
			events []rows.RoundEvent
			b      = &pgx.Batch{}
		)
		rows.FindBatch(b, &found, l.site, code)
		rows.RoundsOf(b, &events, l.site, []string{code})
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(found) == 0 {
			return failure(KindNotFound, "no_batch", "code", code)
		}
		if k < 0 || k >= len(found[0].Days) {
			return failure(KindNotFound, "no_round", "code", code, "round", strconv.Itoa(k))
		}
		var last rows.RoundEvent
		for _, e := range events {
			if int(e.Step) == k {
				last = e
			}
		}
		kind, err := next(last.Kind)
		if err != nil || kind == "" {
			w.skip = true
			return err
		}
		w.batch(found[0].ID)
		w.act.Body = map[string]any{"batch": found[0].ID.String(), "step": k, "kind": kind}
		rows.QueueRoundEvent(w.out, rows.RoundEvent{Batch: found[0].ID, Step: int16(k), Nth: last.Nth + 1, Kind: kind, At: w.now, By: a.Account},
			optional(a.Station), w.act.ID)
		return nil
	})
}
