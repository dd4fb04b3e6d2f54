package rows

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// drainLock is the class of the advisory lock that one drain holds for its transaction.
const drainLock = 0x5248 // "RH"

// TryDrain tells whether this transaction may empty the outbox; only one at a time may.
func TryDrain(ctx context.Context, tx pgx.Tx, site int16) (bool, error) {
	var ok bool
	err := tx.QueryRow(ctx, `SELECT pg_try_advisory_xact_lock($1::int, $2::int)`, drainLock, int32(site)).Scan(&ok)
	return ok, err
}

// Outboxed is an act taken from the outbox, with the batches it touched.
type Outboxed struct {
	Act   uuid.UUID
	Batch *uuid.UUID
	Code  *string
}

// TakeOutbox removes up to most acts from the outbox. An act on readings of several batches names
// none itself: its batches are found by its evidence.
func TakeOutbox(ctx context.Context, tx pgx.Tx, most int) ([]Outboxed, error) {
	return collect[Outboxed](ctx, tx, `WITH taken AS (
			DELETE FROM to_seal WHERE act IN (SELECT act FROM to_seal ORDER BY act LIMIT $1) RETURNING act)
		SELECT t.act, b.id AS batch, b.code FROM taken t JOIN act a ON a.id = t.act
		LEFT JOIN LATERAL (SELECT a.batch AS id WHERE a.batch IS NOT NULL
			UNION SELECT (item->>1)::uuid FROM json_array_elements(CASE WHEN a.batch IS NULL AND a.verb = 'save_readings'
				THEN (a.body::json)->'readings' ELSE '[]' END) item) x ON true
		LEFT JOIN batch b ON b.id = x.id`, most)
}

// QueueNotice sends one notice on a channel when the transaction commits.
func QueueNotice(b *pgx.Batch, channel, payload string) {
	b.Queue(`SELECT pg_notify($1, $2)`, channel, payload)
}

// QueueStale marks the summaries of batches, of every engine, as older than their data. They are
// locked in the order in which summaries are claimed, so that neither waits for the other in a ring.
func QueueStale(b *pgx.Batch, batches []uuid.UUID) {
	b.Queue(`UPDATE batch_summary s SET stale = true
		FROM (SELECT batch, engine FROM batch_summary WHERE batch = ANY ($1::uuid[]) ORDER BY batch, engine FOR UPDATE) o
		WHERE s.batch = o.batch AND s.engine = o.engine`, batches)
}
