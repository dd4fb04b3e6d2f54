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
	Corrections int32
	Remarks     int32
}

const movementQuery = `SELECT ` + seriesColumns + `, m.attempt, p.holder, h.code AS holder_code, h.type AS holder_type, p.place,
		e.cause, e.code AS end_code, e.step AS end_step, e.at AS ended_at, c.number AS certificate, c.kind AS paper_kind,
		(SELECT count(*)::int FROM reading r WHERE r.batch = m.batch AND r.no = m.no AND r.nth > 1) AS corrections,
		(SELECT count(*)::int FROM remark k WHERE k.batch = m.batch AND k.no = m.no) AS remarks
	FROM movement m JOIN series s ON s.batch = m.batch AND s.no = m.no
	LEFT JOIN place p ON p.batch = m.batch AND p.no = m.no LEFT JOIN holder h ON h.id = p.holder
	LEFT JOIN LATERAL (SELECT cause, code, step, at FROM ending e WHERE e.batch = m.batch AND e.no = m.no ORDER BY nth DESC LIMIT 1) e ON s.ended > 0
	LEFT JOIN LATERAL (SELECT number, kind FROM certificate c WHERE c.batch = m.batch AND c.no = m.no
		AND NOT EXISTS (SELECT FROM certificate n WHERE n.replaces = c.number)) c ON true `

// MovementsOf queues all movements of a batch in order.
func MovementsOf(b *pgx.Batch, into *[]Movement, batch string, site int16) {
	list(b, into, movementQuery+`WHERE m.batch = (SELECT id FROM batch WHERE site = $2 AND code = $1) ORDER BY m.no`, batch, site)
}

// FindMovement queues the look-up of one movement; into has one row or none.
func FindMovement(b *pgx.Batch, into *[]Movement, site int16, batch, serial string) {
	list(b, into, movementQuery+`WHERE m.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND m.serial = $3`, site, batch, serial)
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

const remarkQuery = `SELECT k.id, k.no, m.serial, k.step, k.kind, k.words, s.state, a.at, coalesce(w.title, '') AS by, s.nth, s.words AS last
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
