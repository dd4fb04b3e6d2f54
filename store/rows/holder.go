package rows

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// HolderType is a row of holder_type: what a tray, strip or rack looks like.
type HolderType struct {
	Code    string
	Title   string
	Rows    int16
	Columns int16
	Origin  string
	Along   string
	Blocked []int16
	Carries string
}

const holderTypeColumns = `code, title, rows, columns, origin, along, blocked, carries`

// QueueHolderType inserts a holder type.
func QueueHolderType(b *pgx.Batch, site int16, t HolderType, act uuid.UUID) {
	b.Queue(`INSERT INTO holder_type (site, code, title, rows, columns, origin, along, blocked, carries, act)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10)`,
		site, t.Code, t.Title, t.Rows, t.Columns, t.Origin, t.Along, t.Blocked, t.Carries, act)
}

// FindHolderType queues the look-up of one code; into has one row or none.
func FindHolderType(b *pgx.Batch, into *[]HolderType, site int16, code string) {
	list(b, into, `SELECT `+holderTypeColumns+` FROM holder_type WHERE site = $1 AND code = $2`, site, code)
}

// HolderTypes lists all holder types by code.
func HolderTypes(ctx context.Context, db Reader, site int16) ([]HolderType, error) {
	return collect[HolderType](ctx, db, `SELECT `+holderTypeColumns+` FROM holder_type WHERE site = $1 ORDER BY code`, site)
}

// Holder is a holder by id, code and type.
type Holder struct {
	ID   uuid.UUID
	Code string
	Type string
}

// FreeHolders queues the search for empty holders of a type that are not retired, by code.
// Registrations of a type queue up for it, so that two never take the same one.
func FreeHolders(b *pgx.Batch, into *[]Holder, site int16, kind string, most int) {
	b.Queue(`SELECT pg_advisory_xact_lock($1::int, hashtext($2))`, int32(site), "holders "+kind)
	list(b, into, `SELECT h.id, h.code, h.type FROM holder h
		WHERE h.site = $1 AND h.type = $2
		  AND NOT EXISTS (SELECT FROM place p WHERE p.holder = h.id)
		  AND NOT EXISTS (SELECT FROM holder_move m WHERE m.holder = h.id AND m.retired)
		ORDER BY h.code LIMIT $3`, site, kind, most)
}

// LastHolder queues the highest number among holders of a type that carry our numbering TYPE-0001.
func LastHolder(b *pgx.Batch, into *int, site int16, kind string) {
	b.Queue(`SELECT coalesce(max(substring(code FROM '-([0-9]{4,6})$')::int), 0) FROM holder WHERE site = $1 AND type = $2`,
		site, kind).QueryRow(func(r pgx.Row) error { return r.Scan(into) })
}

// QueueHolder inserts a holder.
func QueueHolder(b *pgx.Batch, site int16, h Holder, act uuid.UUID) {
	b.Queue(`INSERT INTO holder (id, site, code, type, act) VALUES ($1, $2, $3, $4, $5)`, h.ID, site, h.Code, h.Type, act)
}

// QueueHolderTypes queues all holder types.
func QueueHolderTypes(b *pgx.Batch, into *[]HolderType, site int16) {
	list(b, into, `SELECT `+holderTypeColumns+` FROM holder_type WHERE site = $1 ORDER BY code`, site)
}
