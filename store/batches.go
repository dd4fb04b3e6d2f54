package store

import (
	"context"
	"fmt"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// BatchFilter narrows a list of batches.
type BatchFilter struct {
	Words string // in the code, the depositor or the calibre; case ignored
	Most  int    // lines on a page; 0: 25
}

const batchesOnPage = 25

// BatchList is one page of batches, latest start first.
type BatchList struct {
	Lines []BatchLine
	Next  string // cursor of the next page; "" on the last one
}

// BatchLine is one batch of a list.
type BatchLine struct {
	Batch       Batch
	State       BatchState
	Rounds      []Round
	Due         int // step of the round that is due next; -1 when all are done
	Ended       int // movements that left the trial
	OpenRemarks int
	Summary     *Summary // nil for who may not see verdicts
}

// Round is the round that is due next, nil when all are done.
func (b *BatchLine) Round() *Round {
	if b.Due < 0 {
		return nil
	}
	return &b.Rounds[b.Due]
}

// BatchState says where a batch lies in time.
type BatchState string

// The states of a batch.
const (
	BatchWaiting BatchState = "waiting" // before its first reading
	BatchRunning BatchState = "running"
	BatchDone    BatchState = "done"
)

// NextDue is the first round that is not done, -1 when all are.
func NextDue(rounds []Round) int {
	for k := range rounds {
		if !rounds[k].Done() && rounds[k].Going > 0 {
			return k
		}
	}
	return -1
}

// StateOf tells where a batch lies in time by its rounds.
func StateOf(rounds []Round) BatchState {
	switch due := NextDue(rounds); {
	case due < 0:
		return BatchDone
	case due == 0 && rounds[0].Read == 0 && rounds[0].State == RoundWaiting:
		return BatchWaiting
	}
	return BatchRunning
}

// Batches is a page of the batches that match the filter, after the cursor. It costs two round trips,
// and two more when summaries on the page are older than their batch; those are made anew.
func (l *Lab) Batches(ctx context.Context, a Actor, f BatchFilter, cursor string) (BatchList, error) {
	var list BatchList
	if !a.May(RightBatches) {
		return list, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	if f.Most <= 0 {
		f.Most = batchesOnPage
	}
	before, code, err := parseCursor(cursor)
	if err != nil {
		return list, err
	}
	found, err := rows.ListBatches(ctx, l.pool, l.site, likeWords(f.Words), before, code, f.Most+1)
	if err != nil {
		return list, fmt.Errorf("batches: %w", err)
	}
	if len(found) > f.Most {
		found = found[:f.Most]
		last := found[f.Most-1]
		list.Next = strconv.FormatInt(last.StartsAt.UnixMicro(), 10) + "." + last.Code
	}
	batches := make([]*Batch, len(found))
	for i := range found {
		b, err := l.batchOf(ctx, l.pool, found[i])
		if err != nil {
			return list, err
		}
		batches[i] = &b
	}
	list.Lines, err = l.batchLines(ctx, a, batches)
	return list, err
}

// batchLines puts together what is known of the batches.
func (l *Lab) batchLines(ctx context.Context, a Actor, batches []*Batch) ([]BatchLine, error) {
	if len(batches) == 0 {
		return nil, nil
	}
	ids, codes := make([]uuid.UUID, len(batches)), make([]string, len(batches))
	for i, b := range batches {
		ids[i], codes[i] = b.ID, b.Code
	}
	var (
		events  []rows.RoundEvent
		remarks []rows.RemarkCount
		fresh   []rows.Summary
		q       = &pgx.Batch{}
	)
	rows.RoundsOf(q, &events, l.site, codes)
	rows.OpenRemarks(q, &remarks, ids)
	rows.FreshSummaries(q, &fresh, l.engine, ids)
	if err := rows.Run(ctx, l.pool, q); err != nil {
		return nil, fmt.Errorf("batches: %w", err)
	}
	sums, err := l.completeSummaries(ctx, batches, fresh)
	if err != nil {
		return nil, err
	}
	open := map[uuid.UUID]int{}
	for _, r := range remarks {
		open[r.Batch] = int(r.Open)
	}
	lines := make([]BatchLine, len(batches))
	for i, b := range batches {
		sum := sums[b.ID]
		rounds := roundsOf(*b, events, sum.reads(b.ID))
		lines[i] = BatchLine{Batch: *b, State: StateOf(rounds), Rounds: rounds, Due: NextDue(rounds), Ended: sum.All().Ended(), OpenRemarks: open[b.ID]}
		if a.May(RightVerdicts) {
			lines[i].Summary = sum
		}
	}
	return lines, nil
}

// completeSummaries makes those that are not fresh.
func (l *Lab) completeSummaries(ctx context.Context, batches []*Batch, fresh []rows.Summary) (map[uuid.UUID]*Summary, error) {
	have := map[uuid.UUID]*Summary{}
	for _, r := range fresh {
		have[r.Batch] = summaryOf(r)
	}
	var missing []*Batch
	for _, b := range batches {
		// A summary with another number of rounds is of before a phase was repeated.
		if s := have[b.ID]; s == nil || len(s.Read) != len(b.Steps) {
			missing = append(missing, b)
		}
	}
	made, err := l.summariseAll(ctx, missing)
	for id, s := range made {
		have[id] = s
	}
	return have, err
}

// reads is the progress by step in the form in which rounds take it.
func (s *Summary) reads(batch uuid.UUID) []rows.Read {
	out, going := make([]rows.Read, len(s.Read)), int32(s.Going())
	for k, n := range s.Read {
		out[k] = rows.Read{Batch: batch, Step: int16(k), Read: int32(n), Going: going}
	}
	return out
}

// parseCursor reads what Batches gave as Next.
func parseCursor(cursor string) (*time.Time, string, error) {
	if cursor == "" {
		return nil, "", nil
	}
	micro, code, ok := strings.Cut(cursor, ".")
	n, err := strconv.ParseInt(micro, 10, 64)
	if !ok || err != nil {
		return nil, "", invalid("cursor", "cursor_unknown")
	}
	t := time.UnixMicro(n).UTC()
	return &t, code, nil
}

// likeWords makes words a pattern that means nothing but themselves.
func likeWords(words string) string {
	return strings.NewReplacer(`\`, `\\`, `%`, `\%`, `_`, `\_`).Replace(strings.TrimSpace(words))
}
