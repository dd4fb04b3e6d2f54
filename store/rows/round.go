package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// RoundEvent is the last thing that happened to a round.
type RoundEvent struct {
	Batch  uuid.UUID
	Step   int16
	Nth    int16
	Kind   string
	At     time.Time
	By     uuid.UUID
	ByName string
}

const roundColumns = `SELECT DISTINCT ON (e.batch, e.step) e.batch, e.step, e.nth, e.kind, e.at, e.by, a.title AS by_name
	FROM round_event e JOIN account a ON a.id = e.by `

// RoundsOf queues the last event of every round of the batches with these codes.
func RoundsOf(b *pgx.Batch, into *[]RoundEvent, site int16, codes []string) {
	list(b, into, roundColumns+`JOIN batch b ON b.id = e.batch WHERE b.site = $1 AND b.code = ANY ($2::text[])
		ORDER BY e.batch, e.step, e.nth DESC`, site, codes)
}

// RunningRounds queues the last event of every round of the batches that started after since.
func RunningRounds(b *pgx.Batch, into *[]RoundEvent, site int16, since time.Time) {
	list(b, into, roundColumns+`JOIN batch b ON b.id = e.batch WHERE b.site = $1 AND b.starts_at > $2
		ORDER BY e.batch, e.step, e.nth DESC`, site, since)
}

// QueueRoundEvent records that a round was opened, closed or reopened.
func QueueRoundEvent(b *pgx.Batch, e RoundEvent, station *string, act uuid.UUID) {
	b.Queue(`INSERT INTO round_event (batch, step, nth, kind, at, by, station, act) VALUES ($1, $2, $3, $4, $5, $6, $7, $8)`,
		e.Batch, e.Step, e.Nth, e.Kind, e.At, e.By, station, act)
}

// Read is how many movements of a batch have something at a step, and how many are in trial.
type Read struct {
	Batch  uuid.UUID
	Step   int16
	Read   int32 // in trial and read, or given an observation code
	Going  int32 // in trial
	LastAt *time.Time
}

// RunningReads queues the progress of every step of the batches that started after since.
func RunningReads(b *pgx.Batch, into *[]Read, site int16, since time.Time) {
	list(b, into, readColumns+`WHERE b.site = $1 AND b.starts_at > $2 GROUP BY s.batch, g.i`, site, since)
}

// ReadsOf queues the progress of every step of one batch.
func ReadsOf(b *pgx.Batch, into *[]Read, batch uuid.UUID) {
	list(b, into, readColumns+`WHERE s.batch = $1 GROUP BY s.batch, g.i`, batch)
}

const readColumns = `SELECT s.batch, (g.i - 1)::smallint AS step,
		count(*) FILTER (WHERE s.ended = 0 AND (s.rate[g.i] IS NOT NULL OR s.found[g.i] IS NOT NULL OR s.code[g.i] IS NOT NULL))::int AS read,
		count(*) FILTER (WHERE s.ended = 0)::int AS going,
		max(b.starts_at + make_interval(secs => s.at_s[g.i])) AS last_at
	FROM series s JOIN batch b ON b.id = s.batch
	CROSS JOIN LATERAL (SELECT i FROM generate_series(1, (SELECT count(*)::int FROM step t WHERE t.batch = s.batch)) i) g `

// CellReader says who read and who typed the newest entry of a movement at a step.
type CellReader struct {
	No        int16
	ReadBy    uuid.UUID
	EnteredBy uuid.UUID
}

// ReadersOf queues who read what stands at one step of a batch.
func ReadersOf(b *pgx.Batch, into *[]CellReader, site int16, batch string, step int16) {
	list(b, into, `SELECT DISTINCT ON (r.no) r.no, r.read_by, r.entered_by FROM reading r
		WHERE r.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND r.step = $3 AND r.kind IN (1, 2)
		ORDER BY r.no, r.nth DESC`, site, batch, step)
}
