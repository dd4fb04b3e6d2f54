package store

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
	"ratehouse/trial"
)

// End is how a movement left the trial. Rejected and removed count as fail; withdrawn and void
// leave the yield.
type End string

// The ends.
const (
	InTrial   End = ""
	Rejected  End = "rejected"  // for cause: stopped, hand loose, not readable
	Withdrawn End = "withdrawn" // by the depositor
	Void      End = "void"      // by the laboratory: damaged here, chamber, missed
	Removed   End = "removed"   // cannot pass
)

var ends = []End{InTrial, Rejected, Withdrawn, Void, Removed}

func endOf(n int16) End { return ends[n] }

// Movement is one movement of a batch with its readings by day.
type Movement struct {
	No         int
	Serial     string
	Attempt    int
	Holder     string
	HolderType string // its code
	Place      int
	Rates      []trial.Rate // by programme day, assembled from what was read
	Codes      []Observation
	Read       int // steps that have a value or an observation

	End     End
	Cause   string
	EndCode Observation
	EndStep int
	EndedAt time.Time

	Paper       string // number of the newest paper
	PaperKind   string
	Corrections int
	Remarks     int
	series      rows.Series
}

// BatchSheet is a batch with all its movements, ready to be judged: a constant number of queries.
type BatchSheet struct {
	Batch     Batch
	Movements []Movement
	Rounds    []Round
	Remarks   []Remark
	Strays    []Stray
}

// Stray is a refused item that named this batch.
type Stray struct {
	ID    uuid.UUID
	GotAt time.Time
	Why   string
	Raw   string
}

// BatchSheet reads a batch with its movements in one round trip.
func (l *Lab) BatchSheet(ctx context.Context, a Actor, code string) (BatchSheet, error) {
	var s BatchSheet
	if !a.May(RightBatches) {
		return s, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	var (
		found     []rows.Batch
		events    []rows.RoundEvent
		movements []rows.Movement
		remarks   []rows.Remark
		strays    []rows.Stray
		b         = &pgx.Batch{}
	)
	rows.FindBatch(b, &found, l.site, code)
	rows.RoundsOf(b, &events, l.site, []string{code})
	rows.MovementsOf(b, &movements, code, l.site)
	rows.RemarksOf(b, &remarks, l.site, code)
	rows.StraysOf(b, &strays, code, 100)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return s, fmt.Errorf("batch %s: %w", code, err)
	}
	if len(found) == 0 {
		return s, failure(KindNotFound, "no_batch", "code", code)
	}
	batch, err := l.batchOf(ctx, l.pool, found[0])
	if err != nil {
		return s, err
	}
	s.Batch = batch
	s.Movements = make([]Movement, len(movements))
	for i := range movements {
		s.Movements[i] = movementOf(&batch, &movements[i])
	}
	s.Rounds = roundsOf(batch, events, countReads(&batch, movements))
	s.Remarks, s.Strays = remarksOf(remarks), straysOf(strays)
	return s, nil
}

// countReads counts in memory what the floor counts in SQL.
func countReads(b *Batch, movements []rows.Movement) []rows.Read {
	out := make([]rows.Read, len(b.Steps))
	for k := range out {
		out[k] = rows.Read{Batch: b.ID, Step: int16(k)}
	}
	for i := range movements {
		m := &movements[i]
		for k := range out {
			if m.Ended != 0 {
				continue
			}
			out[k].Going++
			if m.Rate[k] != nil || m.Found[k] != nil || m.Code[k] != nil {
				out[k].Read++
			}
			if at := m.AtS[k]; at != nil {
				t := b.StartsAt.Add(time.Duration(*at) * time.Second)
				if out[k].LastAt == nil || t.After(*out[k].LastAt) {
					out[k].LastAt = &t
				}
			}
		}
	}
	return out
}

func movementOf(b *Batch, r *rows.Movement) Movement {
	m := Movement{No: int(r.No), Serial: r.Serial, Attempt: int(r.Attempt), Holder: value(r.HolderCode), HolderType: value(r.HolderType), Place: int(value(r.Place)),
		End: endOf(r.Ended), Cause: value(r.Cause), EndCode: observation(value(r.EndCode)), EndStep: int(value(r.EndStep)),
		EndedAt: value(r.EndedAt).UTC(), Paper: value(r.Certificate), PaperKind: value(r.PaperKind),
		Corrections: corrections(&r.Series), Remarks: int(r.Remarks), series: r.Series}
	m.Rates = b.Programme.Assemble(b.Steps, cellsOf(b, &r.Series))
	m.Codes = make([]Observation, len(b.Steps))
	for k := range b.Steps {
		m.Codes[k] = observation(value(r.Code[k]))
		if r.Rate[k] != nil || r.Found[k] != nil || r.Code[k] != nil {
			m.Read++
		}
	}
	return m
}

// Cells are the readings behind the rates, step by step, as the engine assembles them; b is the batch
// of the movement.
func (m *Movement) Cells(b *Batch) []trial.Cell { return cellsOf(b, &m.series) }

// corrections counts the entries that replaced another one: what the counters of the cells say.
func corrections(s *rows.Series) (n int) {
	for _, cells := range [][]int16{s.RateNth, s.FoundNth, s.LeftNth} {
		for _, nth := range cells {
			n += max(int(nth)-1, 0)
		}
	}
	return n
}

// cellsOf turns the working series into what the engine assembles.
func cellsOf(b *Batch, s *rows.Series) []trial.Cell {
	start := b.StartsAt.Unix()
	cells := make([]trial.Cell, len(b.Steps))
	for k := range cells {
		c := &cells[k]
		if v := s.Rate[k]; v != nil {
			c.HasRate, c.Rate = true, trial.Milli(*v)
		}
		if v := s.Found[k]; v != nil {
			c.HasFound, c.Found = true, trial.State(*v)
		}
		if v := s.AsLeft[k]; v != nil {
			c.HasLeft, c.Left = true, trial.State(*v)
		}
		if v := s.AtS[k]; v != nil {
			c.At = start + int64(*v)
		}
	}
	return cells
}

// ReadingLine is one entry of the evidence, as the rate sheet shows it.
type ReadingLine struct {
	ID        uuid.UUID
	Step      int
	Kind      ReadingKind
	Nth       int
	Value     string // decimal, or "" with an observation
	Code      Observation
	Typed     string
	Method    Method
	ReadAt    time.Time
	EnteredAt time.Time
	ReadBy    string
	EnteredBy string
	Station   string
	Reason    string
	Replaced  bool // a later entry of the same cell stands
	Second    bool // asked for again
}

// MovementSheet is everything about one movement.
type MovementSheet struct {
	Batch    Batch
	Movement Movement
	Readings []ReadingLine
	Looks    []Look
	Endings  []Ending
	Remarks  []Remark
	Before   string // serial of the movement before it in the batch
	Next     string
	// Touched says who corrected, confirmed a second look or decided a remark on this movement, and
	// Entered how many of its readings each account entered: four eyes at release.
	Entered map[uuid.UUID]int
	Touched map[uuid.UUID]bool
}

// Look is a value typed while a second look was asked.
type Look struct {
	Step  int
	Kind  ReadingKind
	Nth   int
	Typed string
	At    time.Time
}

// Ending is an end, or one taken back.
type Ending struct {
	End   End
	Cause string
	Code  Observation
	Step  int
	At    time.Time
}

// MovementSheet reads one movement in two round trips.
func (l *Lab) MovementSheet(ctx context.Context, a Actor, code, serial string) (MovementSheet, error) {
	if !a.May(RightBatches) {
		return MovementSheet{}, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	return l.movementSheet(ctx, l.pool, code, serial)
}

func (l *Lab) movementSheet(ctx context.Context, db rows.Reader, code, serial string) (MovementSheet, error) {
	var (
		s       MovementSheet
		batches []rows.Batch
		found   []rows.Movement
		remarks []rows.Remark
		beside  rows.Neighbours
		b       = &pgx.Batch{}
	)
	rows.FindBatch(b, &batches, l.site, code)
	rows.FindMovement(b, &found, l.site, code, serial)
	rows.RemarksOf(b, &remarks, l.site, code)
	rows.NeighboursOf(b, &beside, l.site, code, serial)
	if err := rows.Run(ctx, db, b); err != nil {
		return s, fmt.Errorf("movement %s of batch %s: %w", serial, code, err)
	}
	if len(batches) == 0 {
		return s, failure(KindNotFound, "no_batch", "code", code)
	}
	if len(found) == 0 {
		return s, failure(KindNotFound, "no_movement", "code", code, "serial", serial)
	}
	var err error
	if s.Batch, err = l.batchOf(ctx, db, batches[0]); err != nil {
		return s, err
	}
	s.Movement = movementOf(&s.Batch, &found[0])
	s.Before, s.Next = value(beside.Before), value(beside.Next)
	for _, r := range remarksOf(remarks) {
		if r.Serial == "" || r.Serial == serial {
			s.Remarks = append(s.Remarks, r)
		}
	}
	return s, l.readEvidence(ctx, db, &s)
}

func (l *Lab) readEvidence(ctx context.Context, db rows.Reader, s *MovementSheet) error {
	var (
		readings []rows.SeenReading
		looks    []rows.Look
		endings  []rows.Ending
		b        = &pgx.Batch{}
		id, no   = s.Batch.ID, int16(s.Movement.No)
	)
	rows.ReadingsOf(b, &readings, id, no)
	rows.LooksOf(b, &looks, id, no)
	rows.EndingsOf(b, &endings, id, no)
	if err := rows.Run(ctx, db, b); err != nil {
		return fmt.Errorf("readings of movement %s: %w", s.Movement.Serial, err)
	}
	s.Entered, s.Touched = map[uuid.UUID]int{}, map[uuid.UUID]bool{}
	for i, r := range readings {
		replaced := i+1 < len(readings) && readings[i+1].Step == r.Step && readings[i+1].Kind == r.Kind
		s.Readings = append(s.Readings, lineOf(r, replaced && r.Kind <= 3))
		s.Entered[r.EnteredBy]++
		if r.Nth > 1 && r.Kind <= 3 || r.Flags&flagSecondLook != 0 {
			s.Touched[r.EnteredBy] = true
		}
	}
	for _, k := range looks {
		s.Looks = append(s.Looks, Look{int(k.Step), kindCodes[k.Kind-1], int(k.Nth), k.Typed, k.At.UTC()})
	}
	for _, e := range endings {
		s.Endings = append(s.Endings, Ending{endOf(e.Kind), e.Cause, observation(value(e.Code)), int(value(e.Step)), e.At.UTC()})
	}
	return nil
}

func lineOf(r rows.SeenReading, replaced bool) ReadingLine {
	line := ReadingLine{ID: r.ID, Step: int(r.Step), Kind: kindCodes[r.Kind-1], Nth: int(r.Nth), Typed: r.Typed, Method: methodCodes[r.Method-1],
		ReadAt: r.ReadAt.UTC(), EnteredAt: r.EnteredAt.UTC(), ReadBy: r.Reader, EnteredBy: r.Recorder, Station: value(r.Station),
		Reason: value(r.Reason), Replaced: replaced, Second: r.Flags&flagSecondLook != 0}
	if r.Code != nil {
		line.Code = observation(*r.Code)
	} else {
		line.Value = trial.Milli(*r.Value).String()
	}
	return line
}

// EndMovement takes a movement out of the trial for a cause, or (InTrial) takes its end back. The
// cause is always said in words; its readings stay.
func (l *Lab) EndMovement(ctx context.Context, a Actor, code, serial string, end End, cause string, seen Observation) error {
	cause = strings.TrimSpace(cause)
	var f faults
	if !slices.Contains(ends, end) {
		f.add(invalid("end", "unknown_end"))
	}
	if cause == "" {
		f.add(invalid("cause", "needed"))
	}
	if err := f.err(); err != nil {
		return err
	}
	return l.do(ctx, a, verb{"end_movement", RightEnd}, func(w *work) error {
		var (
			locked []rows.Series
			nth    int16
			b      = &pgx.Batch{}
		)
		rows.LockSeries(b, &locked, l.site, []string{code}, []string{serial})
		rows.LastEnding(b, &nth, l.site, code, serial)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(locked) == 0 {
			return failure(KindNotFound, "no_movement", "code", code, "serial", serial)
		}
		m := locked[0]
		if m.Released {
			return failure(KindConflict, "released", "serial", serial)
		}
		if (end == InTrial) != (m.Ended != 0) {
			return failure(KindConflict, "end_as_is", "serial", serial)
		}
		e := rows.Ending{Batch: m.Batch, No: m.No, Nth: nth + 1, Kind: int16(slices.Index(ends, end)), Cause: cause, At: w.now}
		if i := slices.Index(Observations, seen); i >= 0 {
			n := int16(i + 1)
			e.Code = &n
		}
		w.batch(m.Batch)
		w.act.Reason = &cause
		w.act.Body = map[string]any{"batch": m.Batch.String(), "no": int(m.No), "end": string(end), "cause": cause, "seen": string(seen)}
		rows.QueueEnding(w.out, e, w.act.ID)
		return nil
	})
}

// Remark is what somebody noted on a batch or a movement, and what became of it.
type Remark struct {
	ID     uuid.UUID
	Serial string // "" for the whole batch
	Step   int    // -1 for none
	Kind   string
	Words  string
	State  string // "open", "assessed", "closed"
	At     time.Time
	By     string
	Last   string // what was said at its newest state
}

func remarksOf(list []rows.Remark) []Remark {
	out := make([]Remark, len(list))
	for i, r := range list {
		out[i] = Remark{ID: r.ID, Serial: value(r.Serial), Step: -1, Kind: r.Kind, Words: r.Words, State: r.State, At: r.At.UTC(), By: r.By, Last: r.Last}
		if r.Step != nil {
			out[i].Step = int(*r.Step)
		}
	}
	return out
}

func straysOf(list []rows.Stray) []Stray {
	out := make([]Stray, len(list))
	for i, r := range list {
		out[i] = Stray{r.ID, r.GotAt.UTC(), r.Why, r.Raw}
	}
	return out
}

// AddRemark notes something on a batch, or on one of its movements. An open remark on a movement
// holds its release.
func (l *Lab) AddRemark(ctx context.Context, a Actor, code, serial string, step int, words string) error {
	if words = strings.TrimSpace(words); words == "" {
		return invalid("words", "needed")
	}
	return l.do(ctx, a, verb{"add_remark", RightRemark}, func(w *work) error {
		var (
			found     []rows.Batch
			movements []rows.Movement
			b         = &pgx.Batch{}
		)
		rows.FindBatch(b, &found, l.site, code)
		rows.FindMovement(b, &movements, l.site, code, serial)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(found) == 0 {
			return failure(KindNotFound, "no_batch", "code", code)
		}
		r := rows.Remark{ID: l.newID(), Kind: "note", Words: words, At: w.now}
		if serial != "" {
			if len(movements) == 0 {
				return failure(KindNotFound, "no_movement", "code", code, "serial", serial)
			}
			r.No = &movements[0].No
		}
		if step >= len(found[0].Days) {
			return failure(KindNotFound, "no_round", "code", code, "round", strconv.Itoa(step))
		}
		if step >= 0 {
			k := int16(step)
			r.Step = &k
		}
		w.batch(found[0].ID)
		w.act.Body = map[string]any{"remark": r.ID.String(), "batch": found[0].ID.String(), "serial": serial, "step": step, "words": words}
		rows.QueueRemark(w.out, found[0].ID, r, w.act.ID)
		return nil
	})
}

// CloseRemark says what became of a remark: "assessed" or "closed", with the effect in words.
func (l *Lab) CloseRemark(ctx context.Context, a Actor, id uuid.UUID, state, words string) error {
	if words = strings.TrimSpace(words); words == "" {
		return invalid("words", "needed")
	}
	if state != "assessed" && state != "closed" {
		return invalid("state", "unknown_state")
	}
	return l.do(ctx, a, verb{"move_remark", RightAssess}, func(w *work) error {
		var found []rows.Remark
		b := &pgx.Batch{}
		rows.FindRemark(b, &found, id)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(found) == 0 {
			return failure(KindNotFound, "no_remark")
		}
		if found[0].State == "closed" {
			return failure(KindConflict, "remark_closed")
		}
		w.batch(found[0].Batch)
		w.act.Body = map[string]any{"remark": id.String(), "state": state, "words": words}
		rows.QueueRemarkState(w.out, id, found[0].Nth+1, state, words, w.now, w.act.ID)
		return nil
	})
}
