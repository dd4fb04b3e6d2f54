package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgtype"
)

// Standing is what a summary needs of one movement.
type Standing struct {
	Batch   uuid.UUID
	No      int16
	Attempt int16
	Rate    []pgtype.Int4 // by step, as in Series
	Found   []pgtype.Int4
	AsLeft  []pgtype.Int4
	AtS     []pgtype.Int4
	Code    []pgtype.Int2
	Ended   int16
}

// StandingsOf queues the movements of several batches.
func StandingsOf(b *pgx.Batch, into *[]Standing, batches []uuid.UUID) {
	list(b, into, `SELECT s.batch, s.no, m.attempt, s.rate, s.found, s.as_left, s.at_s, s.code, s.ended
		FROM series s JOIN movement m ON m.batch = s.batch AND m.no = s.no WHERE s.batch = ANY ($1::uuid[]) ORDER BY s.batch, s.no`, batches)
}

// Summary is a row of batch_summary.
type Summary struct {
	Batch  uuid.UUID
	Counts []int32
	Failed []int32
	Alone  []int32
	Read   []int32
	Cannot int32
	MadeAt time.Time
}

// FreshSummaries queues the summaries of the engine that are true: not marked stale, and with no act
// on their batch since they were made.
func FreshSummaries(b *pgx.Batch, into *[]Summary, engine string, batches []uuid.UUID) {
	list(b, into, `SELECT s.batch, s.counts, s.failed, s.alone, s.read, s.cannot, s.made_at FROM batch_summary s
		WHERE s.engine = $1 AND s.batch = ANY ($2::uuid[]) AND NOT s.stale
		  AND NOT EXISTS (SELECT FROM act a WHERE a.batch = s.batch AND a.at >= s.made_at)`, engine, batches)
}

// ClaimSummaries locks the summaries of these batches in key order, making those that are not there
// yet, so that nobody marks or writes them while they are computed.
func ClaimSummaries(b *pgx.Batch, engine string, batches []uuid.UUID, at time.Time) {
	b.Queue(`INSERT INTO batch_summary (batch, engine, counts, failed, alone, read, cannot, made_at, stale)
		SELECT u.id, $1, '{}', '{}', '{}', '{}', 0, $3, true FROM (SELECT id FROM unnest($2::uuid[]) id ORDER BY id) u
		ON CONFLICT (batch, engine) DO UPDATE SET stale = true`, engine, batches, at)
}

// QueueSummaries writes summaries claimed before, each with its batch as a history.
func QueueSummaries(b *pgx.Batch, engine string, list []Summary, priors [][]byte) {
	for i, s := range list {
		b.Queue(`UPDATE batch_summary SET counts = $3, failed = $4, alone = $5, read = $6, cannot = $7, made_at = $8, prior = $9, stale = false
			WHERE batch = $1 AND engine = $2`, s.Batch, engine, s.Counts, s.Failed, s.Alone, s.Read, s.Cannot, s.MadeAt, priors[i])
	}
}

// Prior is one batch as a history for another.
type Prior struct {
	Own   bool // of the same calibre
	Prior []byte
}

// PriorsOf queues what the summaries of the engine know of every other batch on a programme.
func PriorsOf(b *pgx.Batch, into *[]Prior, engine string, programme []byte, calibre *uuid.UUID, but uuid.UUID) {
	list(b, into, `SELECT coalesce(b.calibre = $3, false) AS own, s.prior FROM batch_summary s JOIN batch b ON b.id = s.batch
		WHERE s.engine = $1 AND b.programme = $2 AND b.id <> $4 AND s.prior <> '' ORDER BY b.id`, engine, programme, calibre, but)
}

// RemarkCount is how many remarks of a batch are not closed.
type RemarkCount struct {
	Batch uuid.UUID
	Open  int32
}

// OpenRemarks queues the number of open remarks of several batches.
func OpenRemarks(b *pgx.Batch, into *[]RemarkCount, batches []uuid.UUID) {
	list(b, into, `SELECT k.batch, count(*)::int AS open FROM remark k
		WHERE k.batch = ANY ($1::uuid[]) AND NOT EXISTS (SELECT FROM remark_state s WHERE s.remark = k.id AND s.state = 'closed')
		GROUP BY k.batch`, batches)
}
