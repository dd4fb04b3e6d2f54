package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Move is a movement laid into a place, or (Holder nil) taken out of its holder.
type Move struct {
	Batch  uuid.UUID
	No     int16
	Nth    int16
	At     time.Time
	Holder *uuid.UUID
	Place  *int16
}

// FindHolder queues the look-up of one holder by code; into has one row or none.
func FindHolder(b *pgx.Batch, into *[]Holder, site int16, code string) {
	list(b, into, `SELECT id, code, type FROM holder WHERE site = $1 AND code = $2`, site, code)
}

// LastMove queues how often a movement was laid somewhere.
func LastMove(b *pgx.Batch, into *int16, site int16, batch, serial string) {
	b.Queue(`SELECT coalesce(max(p.nth), 0)::smallint FROM place_move p JOIN movement m ON m.batch = p.batch AND m.no = p.no
		JOIN batch b ON b.id = m.batch WHERE b.site = $1 AND b.code = $2 AND m.serial = $3`, site, batch, serial).
		QueryRow(func(r pgx.Row) error { return r.Scan(into) })
}

// QueueMove records the move and keeps where the movement lies now.
func QueueMove(b *pgx.Batch, m Move, act uuid.UUID) {
	b.Queue(`INSERT INTO place_move (batch, no, nth, at, holder, place, act) VALUES ($1, $2, $3, $4, $5, $6, $7)`,
		m.Batch, m.No, m.Nth, m.At, m.Holder, m.Place, act)
	b.Queue(`DELETE FROM place WHERE batch = $1 AND no = $2`, m.Batch, m.No)
	if m.Holder != nil {
		b.Queue(`INSERT INTO place (holder, place, batch, no) VALUES ($1, $2, $3, $4)`, m.Holder, m.Place, m.Batch, m.No)
	}
}
