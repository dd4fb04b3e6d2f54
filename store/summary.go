package store

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgtype"

	"ratehouse/store/rows"
	"ratehouse/trial"
	"ratehouse/trial/lot"
)

// Counts is how the movements of a batch stand: each in one of these. Those that left the trial are
// counted by their end, the others by what their rates say.
type Counts struct {
	Pass, Fail, Open, None                 int // None: the category has no limits
	Rejected, Withdrawn, VoidEnds, Removed int
}

// Failed is how many count as fail: by the rates, rejected for cause, or removed because they could
// not pass.
func (c Counts) Failed() int { return c.Fail + c.Rejected + c.Removed }

// Judged is what a yield is a share of: passed and failed. Withdrawn and void leave it.
func (c Counts) Judged() int { return c.Pass + c.Failed() }

// Ended is how many left the trial.
func (c Counts) Ended() int { return c.Rejected + c.Withdrawn + c.VoidEnds + c.Removed }

// All is every movement.
func (c Counts) All() int { return c.Pass + c.Fail + c.Open + c.None + c.Ended() }

func (c Counts) plus(d Counts) Counts {
	return countsOf(addAll(c.list(), d.list()))
}

func (c Counts) list() []int32 {
	out := make([]int32, 0, standings)
	for _, n := range []int{c.Pass, c.Fail, c.Open, c.None, c.Rejected, c.Withdrawn, c.VoidEnds, c.Removed} {
		out = append(out, int32(n))
	}
	return out
}

func countsOf(n []int32) Counts {
	return Counts{int(n[0]), int(n[1]), int(n[2]), int(n[3]), int(n[4]), int(n[5]), int(n[6]), int(n[7])}
}

func addAll(a, b []int32) []int32 {
	out := slices.Clone(a)
	for i := range b {
		out[i] += b[i]
	}
	return out
}

// standings is the number of fields of Counts.
const standings = 8

// Add counts one movement.
func (c *Counts) Add(v trial.Verdict, end End) {
	switch end {
	case Rejected:
		c.Rejected++
	case Withdrawn:
		c.Withdrawn++
	case Void:
		c.VoidEnds++
	case Removed:
		c.Removed++
	default:
		switch v {
		case trial.Pass:
			c.Pass++
		case trial.Fail:
			c.Fail++
		case trial.None:
			c.None++
		default:
			c.Open++
		}
	}
}

// Summary is how a batch stands: derived from its readings by this engine, thrown away and made anew
// at will, never on a paper. First presentations and re-submissions are counted apart, because a
// yield that mixes them says nothing.
type Summary struct {
	First  Counts // presented for the first time
	Again  Counts
	Failed []int // by criterion: movements that count as fail and are outside it
	Alone  []int // of these, outside nothing else
	Read   []int // by step: movements in trial that are read or have an observation
	Cannot int   // in trial, open, and cannot pass
	MadeAt time.Time
}

// All counts every movement, whatever its attempt.
func (s *Summary) All() Counts { return s.First.plus(s.Again) }

// Going is how many movements are in trial.
func (s *Summary) Going() int { return s.All().All() - s.All().Ended() }

// tallier makes the summary of one batch, movement by movement.
type tallier struct {
	batch  *Batch
	judge  *trial.Judge
	result trial.Result
	sum    Summary
	prior  *trial.Prior
	fails  *lot.Failures // of those that count as fail; who was rejected for cause has a bar of its own
}

func newTallier(b *Batch) (*tallier, error) {
	j, err := trial.NewJudge(b.Programme, b.Category)
	if err != nil {
		return nil, fmt.Errorf("batch %s: %w", b.Code, err)
	}
	fails := lot.NewFailures(len(b.Programme.Criteria))
	return &tallier{batch: b, judge: j, fails: fails, prior: trial.NewPrior(len(b.Programme.Days)),
		sum: Summary{Failed: fails.Outside, Alone: fails.Alone, Read: make([]int, len(b.Steps))}}, nil
}

func (t *tallier) add(rates []trial.Rate, read func(step int) bool, attempt int, end End) {
	t.judge.Rates(rates, &t.result)
	_ = t.prior.Add(rates) // refused is what is no history: a rate that no movement runs at
	counts := &t.sum.First
	if attempt > 1 {
		counts = &t.sum.Again
	}
	counts.Add(t.result.Verdict, end)
	switch end {
	case InTrial:
		for k := range t.sum.Read {
			if read(k) {
				t.sum.Read[k]++
			}
		}
		if t.result.Verdict == trial.Open && t.judge.CannotPass(rates) {
			t.sum.Cannot++
		}
		if t.result.Verdict == trial.Fail {
			t.fails.Add(&t.result)
		}
	case Removed:
		t.fails.Add(&t.result)
	}
}

// Summarise counts a sheet that is in memory already.
func (s *BatchSheet) Summarise() (Summary, error) {
	t, err := newTallier(&s.Batch)
	if err != nil {
		return Summary{}, err
	}
	for i := range s.Movements {
		m := &s.Movements[i]
		t.add(m.Rates, m.ReadAt, m.Attempt, m.End)
	}
	return t.sum, nil
}

// ReadAt tells whether the movement has something at a step: a value or an observation.
func (m *Movement) ReadAt(step int) bool {
	return m.series.Rate[step] != nil || m.series.Found[step] != nil || m.Codes[step] != ""
}

// summarise makes the summary of one batch anew: what the drain calls for every batch touched.
func (l *Lab) summarise(ctx context.Context, batch uuid.UUID) error {
	var found []rows.Batch
	b := &pgx.Batch{}
	rows.BatchesByID(b, &found, []uuid.UUID{batch})
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return fmt.Errorf("batch %s: %w", batch, err)
	}
	batches := make([]*Batch, len(found))
	for i := range found {
		one, err := l.batchOf(ctx, l.pool, found[i])
		if err != nil {
			return err
		}
		batches[i] = &one
	}
	_, err := l.summariseAll(ctx, batches)
	return err
}

// summariseAll makes summaries anew in two round trips. They are locked while they are made, so that
// who marks one stale meanwhile waits, and marks the new one.
func (l *Lab) summariseAll(ctx context.Context, batches []*Batch) (made map[uuid.UUID]*Summary, err error) {
	made = map[uuid.UUID]*Summary{}
	if len(batches) == 0 {
		return made, nil
	}
	conn, err := l.pool.Acquire(ctx)
	if err != nil {
		return nil, fmt.Errorf("summaries: connection: %w", err)
	}
	defer conn.Release()
	w := &work{lab: l, now: l.Now(), conn: conn, out: &pgx.Batch{}, skip: true}
	w.act.Verb = "summarise"
	if err := l.makeSummaries(ctx, w, batches, made); err != nil {
		return nil, errors.Join(err, w.rollback(ctx))
	}
	if err := w.commit(ctx); err != nil {
		return nil, errors.Join(named(err, "summarise"), w.rollback(ctx))
	}
	return made, nil
}

func (l *Lab) makeSummaries(ctx context.Context, w *work, batches []*Batch, made map[uuid.UUID]*Summary) error {
	ids := make([]uuid.UUID, len(batches))
	talliers := map[uuid.UUID]*tallier{}
	for i, b := range batches {
		t, err := newTallier(b)
		if err != nil {
			return err
		}
		ids[i], talliers[b.ID] = b.ID, t
	}
	var standings []rows.Standing
	b := &pgx.Batch{}
	rows.ClaimSummaries(b, l.engine, ids, w.now)
	rows.StandingsOf(b, &standings, ids)
	if err := w.read(ctx, b); err != nil {
		return err
	}
	for i := range standings {
		talliers[standings[i].Batch].stand(&standings[i])
	}
	list, priors := make([]rows.Summary, len(ids)), make([][]byte, len(ids))
	for i, id := range ids {
		t := talliers[id]
		t.sum.MadeAt = w.now
		made[id], list[i] = &t.sum, t.sum.row(id)
		priors[i] = t.prior.Bytes()
	}
	rows.QueueSummaries(w.out, l.engine, list, priors)
	return nil
}

func (t *tallier) stand(s *rows.Standing) {
	has := func(list []pgtype.Int4, k int) (int32, bool) { return list[k].Int32, list[k].Valid }
	start := t.batch.StartsAt.Unix()
	cells := make([]trial.Cell, len(t.batch.Steps))
	for k := range cells {
		c := &cells[k]
		if v, ok := has(s.Rate, k); ok {
			c.HasRate, c.Rate = true, trial.Milli(v)
		}
		if v, ok := has(s.Found, k); ok {
			c.HasFound, c.Found = true, trial.State(v)
		}
		if v, ok := has(s.AsLeft, k); ok {
			c.HasLeft, c.Left = true, trial.State(v)
		}
		if v, ok := has(s.AtS, k); ok {
			c.At = start + int64(v)
		}
	}
	read := func(k int) bool { return s.Rate[k].Valid || s.Found[k].Valid || s.Code[k].Valid }
	t.add(t.batch.Programme.Assemble(t.batch.Steps, cells), read, int(s.Attempt), endOf(s.Ended))
}

func (s *Summary) row(batch uuid.UUID) rows.Summary {
	return rows.Summary{Batch: batch, Counts: append(s.First.list(), s.Again.list()...), Failed: narrow(s.Failed), Alone: narrow(s.Alone),
		Read: narrow(s.Read), Cannot: int32(s.Cannot), MadeAt: s.MadeAt}
}

func summaryOf(r rows.Summary) *Summary {
	return &Summary{First: countsOf(r.Counts[:standings]), Again: countsOf(r.Counts[standings:]), Failed: widen(r.Failed), Alone: widen(r.Alone),
		Read: widen(r.Read), Cannot: int(r.Cannot), MadeAt: r.MadeAt.UTC()}
}

func narrow(list []int) []int32 {
	out := make([]int32, len(list))
	for i, n := range list {
		out[i] = int32(n)
	}
	return out
}

func widen(list []int32) []int {
	out := make([]int, len(list))
	for i, n := range list {
		out[i] = int(n)
	}
	return out
}
