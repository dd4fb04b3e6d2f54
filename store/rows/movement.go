package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Movement is a movement with its series and where it lies.
type Movement struct {
	Series
	Attempt     int16
	Holder      *uuid.UUID
	HolderCode  *string
	HolderType  *string
	Place       *int16
	Cause       *string // of its end
	EndCode     *int16
	EndStep     *int16
	EndedAt     *time.Time
	Certificate *string // newest paper
	PaperKind   *string
	Remarks     int32
}

// movementQuery gathers what hangs on movements once for the batch and joins it: asked for each row,
// a batch of 5,000 would cost as many searches of every table.
const movementQuery = `SELECT s.batch, s.no, m.serial, s.rate, s.found, s.as_left, s.at_s, s.code, s.rate_nth, s.found_nth, s.left_nth, s.ended,
		coalesce(c.released, false) AS released, m.attempt, p.holder, h.code AS holder_code, h.type AS holder_type, p.place,
		e.cause, e.code AS end_code, e.step AS end_step, e.at AS ended_at, c.number AS certificate, c.kind AS paper_kind, coalesce(k.n, 0) AS remarks
	FROM movement m JOIN series s ON s.batch = m.batch AND s.no = m.no
	LEFT JOIN place p ON p.batch = m.batch AND p.no = m.no LEFT JOIN holder h ON h.id = p.holder
	LEFT JOIN (SELECT DISTINCT ON (no) no, cause, code, step, at FROM ending WHERE batch = ` + batchByCode + ` ORDER BY no, nth DESC) e
		ON s.ended > 0 AND e.no = m.no
	LEFT JOIN (SELECT c.no, max(c.number) FILTER (WHERE n.number IS NULL) AS number, max(c.kind) FILTER (WHERE n.number IS NULL) AS kind,
			bool_or(v.number IS NULL) AS released
		FROM certificate c LEFT JOIN certificate n ON n.replaces = c.number LEFT JOIN revocation v ON v.number = c.number
		WHERE c.batch = ` + batchByCode + ` GROUP BY c.no) c ON c.no = m.no
	LEFT JOIN (SELECT no, count(*)::int AS n FROM remark WHERE batch = ` + batchByCode + ` AND no IS NOT NULL GROUP BY no) k ON k.no = m.no
	WHERE m.batch = ` + batchByCode

const batchByCode = `(SELECT id FROM batch WHERE site = $1 AND code = $2)`

// MovementsOf queues all movements of a batch in order.
func MovementsOf(b *pgx.Batch, into *[]Movement, batch string, site int16) {
	list(b, into, movementQuery+` ORDER BY m.no`, site, batch)
}

// FindMovement queues the look-up of one movement; into has one row or none.
func FindMovement(b *pgx.Batch, into *[]Movement, site int16, batch, serial string) {
	list(b, into, movementQuery+` AND m.serial = $3`, site, batch, serial)
}

// Ending is one row of ending.
type Ending struct {
	Batch uuid.UUID
	No    int16
	Nth   int16
	Kind  int16
	Cause string
	Code  *int16
	Step  *int16
	At    time.Time
}

// EndingsOf queues the ends of one movement, oldest first.
func EndingsOf(b *pgx.Batch, into *[]Ending, batch uuid.UUID, no int16) {
	list(b, into, `SELECT batch, no, nth, kind, cause, code, step, at FROM ending WHERE batch = $1 AND no = $2 ORDER BY nth`, batch, no)
}

// LastEnding queues how many ends a movement had; 0 when none.
func LastEnding(b *pgx.Batch, into *int16, site int16, batch, serial string) {
	b.Queue(`SELECT coalesce(max(e.nth), 0)::smallint FROM ending e JOIN movement m ON m.batch = e.batch AND m.no = e.no JOIN batch b ON b.id = m.batch
		WHERE b.site = $1 AND b.code = $2 AND m.serial = $3`, site, batch, serial).QueryRow(func(r pgx.Row) error { return r.Scan(into) })
}

// QueueEnding ends a movement or takes its end back (kind 0).
func QueueEnding(b *pgx.Batch, e Ending, act uuid.UUID) {
	b.Queue(`INSERT INTO ending (batch, no, nth, kind, cause, code, step, at, act) VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9)`,
		e.Batch, e.No, e.Nth, e.Kind, e.Cause, e.Code, e.Step, e.At, act)
	b.Queue(`UPDATE series SET ended = $3 WHERE batch = $1 AND no = $2`, e.Batch, e.No, e.Kind)
}

// Remark is a remark with its newest state.
type Remark struct {
	ID     uuid.UUID
	Batch  uuid.UUID
	No     *int16
	Serial *string
	Step   *int16
	Kind   string
	Words  string
	State  string
	At     time.Time
	By     string
	Nth    int16
	Last   string
}

const remarkQuery = `SELECT k.id, k.batch, k.no, m.serial, k.step, k.kind, k.words, s.state, a.at, coalesce(w.title, '') AS by, s.nth, s.words AS last
	FROM remark k JOIN act a ON a.id = k.act LEFT JOIN account w ON w.id = a.actor
	LEFT JOIN movement m ON m.batch = k.batch AND m.no = k.no
	JOIN LATERAL (SELECT state, nth, words FROM remark_state s WHERE s.remark = k.id ORDER BY nth DESC LIMIT 1) s ON true `

// RemarksOf queues the remarks of a batch, newest first.
func RemarksOf(b *pgx.Batch, into *[]Remark, site int16, batch string) {
	list(b, into, remarkQuery+`WHERE k.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) ORDER BY a.at DESC, k.id DESC`, site, batch)
}

// FindRemark queues one remark; into has one row or none.
func FindRemark(b *pgx.Batch, into *[]Remark, id uuid.UUID) {
	list(b, into, remarkQuery+`WHERE k.id = $1`, id)
}

// QueueRemark inserts an open remark.
func QueueRemark(b *pgx.Batch, batch uuid.UUID, r Remark, act uuid.UUID) {
	b.Queue(`INSERT INTO remark (id, batch, no, step, kind, words, act) VALUES ($1, $2, $3, $4, $5, $6, $7)`, r.ID, batch, r.No, r.Step, r.Kind, r.Words, act)
	QueueRemarkState(b, r.ID, 1, "open", r.Words, r.At, act)
}

// QueueRemarkState moves a remark on.
func QueueRemarkState(b *pgx.Batch, id uuid.UUID, nth int16, state, words string, at time.Time, act uuid.UUID) {
	b.Queue(`INSERT INTO remark_state (remark, nth, state, words, at, act) VALUES ($1, $2, $3, $4, $5, $6)`, id, nth, state, words, at, act)
}

// Neighbours are the serials before and after a movement in its batch.
type Neighbours struct{ Before, Next *string }

// NeighboursOf queues the movements beside one.
func NeighboursOf(b *pgx.Batch, into *Neighbours, site int16, batch, serial string) {
	b.Queue(`SELECT (SELECT serial FROM movement x WHERE x.batch = m.batch AND x.no < m.no ORDER BY x.no DESC LIMIT 1),
			(SELECT serial FROM movement x WHERE x.batch = m.batch AND x.no > m.no ORDER BY x.no LIMIT 1)
		FROM (SELECT batch, no FROM movement WHERE batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND serial = $3
			UNION ALL SELECT NULL, NULL LIMIT 1) m`, site, batch, serial).QueryRow(func(r pgx.Row) error { return r.Scan(&into.Before, &into.Next) })
}
