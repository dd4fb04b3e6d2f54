package rows

import (
	"context"
	"strings"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Batch is a batch with the codes of what it hangs on.
type Batch struct {
	ID             uuid.UUID
	Code           string
	Programme      []byte
	Category       string
	Entry          string
	StartsAt       time.Time
	Depositor      uuid.UUID
	DepositorCode  string
	DepositorTitle string
	Calibre        *uuid.UUID
	CalibreCode    *string
	CalibreTitle   *string
	DialHours      *int16
	Days           []*int16 // by step
	DeliveryNote   *string
	OrderNumber    *string
	ReceivedAt     *time.Time
	Condition      *string
	Language       *string
	Size           int32 // movements
}

const batchQuery = `SELECT b.id, b.code, b.programme, b.category, b.entry, b.starts_at, b.depositor,
		d.code AS depositor_code, d.title AS depositor_title, b.calibre, c.code AS calibre_code,
		k.title AS calibre_title, k.dial_hours, b.delivery_note, b.order_number, b.received_at, b.condition, b.language,
		(SELECT array_agg(s.day ORDER BY s.step) FROM step s WHERE s.batch = b.id) AS days,
		(SELECT count(*)::int FROM movement m WHERE m.batch = b.id) AS size
	FROM batch b JOIN depositor d ON d.id = b.depositor LEFT JOIN calibre c ON c.id = b.calibre
	LEFT JOIN LATERAL (SELECT title, dial_hours FROM calibre_card k WHERE k.calibre = b.calibre ORDER BY version DESC LIMIT 1) k ON true
	WHERE b.site = $1`

// FindBatch queues the look-up of one batch by code; into has one row or none.
func FindBatch(b *pgx.Batch, into *[]Batch, site int16, code string) {
	list(b, into, batchQuery+` AND b.code = $2`, site, code)
}

// FindBatches queues the look-up of several batches by code.
func FindBatches(b *pgx.Batch, into *[]Batch, site int16, codes []string) {
	list(b, into, batchQuery+` AND b.code = ANY ($2::text[])`, site, codes)
}

// BatchesByID queues the look-up of batches by their ids.
func BatchesByID(b *pgx.Batch, into *[]Batch, ids []uuid.UUID) {
	list(b, into, strings.Replace(batchQuery, "b.site = $1", "b.id = ANY ($1::uuid[])", 1), ids)
}

// RunningBatches lists the batches that started after since, by code.
func RunningBatches(b *pgx.Batch, into *[]Batch, site int16, since time.Time) {
	list(b, into, batchQuery+` AND b.starts_at > $2 ORDER BY b.starts_at, b.code`, site, since)
}

// ListBatches is a page of batches, latest start first, whose code, depositor or calibre contains
// the words (case ignored; ” for all), after the cursor.
func ListBatches(ctx context.Context, db Reader, site int16, words string, before *time.Time, beforeCode string, most int) ([]Batch, error) {
	return collect[Batch](ctx, db, batchQuery+`
		AND ($2 = '' OR b.code ILIKE '%'||$2||'%' OR d.title ILIKE '%'||$2||'%' OR d.code ILIKE '%'||$2||'%' OR c.code ILIKE '%'||$2||'%')
		AND ($3::timestamptz IS NULL OR (b.starts_at, b.code COLLATE "C") < ($3, $4::text COLLATE "C"))
		ORDER BY b.starts_at DESC, b.code COLLATE "C" DESC LIMIT $5`, site, words, before, beforeCode, most)
}

// LastBatchNumber is the greatest number behind the stem among the codes of batches, 0 for none.
func LastBatchNumber(ctx context.Context, db Reader, site int16, stem string) (int, error) {
	var last int
	err := db.QueryRow(ctx, `SELECT coalesce(max(substring(code FROM length($2) + 1)::int), 0) FROM batch
		WHERE site = $1 AND starts_with(code, $2) AND substring(code FROM length($2) + 1) ~ '^[0-9]{1,6}$'`, site, stem).Scan(&last)
	return last, err
}

// NewBatch is what registering inserts.
type NewBatch struct {
	ID           uuid.UUID
	Site         int16
	Code         string
	Programme    []byte
	Category     string
	Calibre      *uuid.UUID
	Depositor    uuid.UUID
	Entry        string
	StartsAt     time.Time
	DeliveryNote *string
	OrderNumber  *string
	ReceivedAt   *time.Time
	ReceivedBy   *uuid.UUID
	Condition    *string
	Service      *string
	Language     *string
	Act          uuid.UUID
}

// QueueBatch inserts a batch with its steps; step k serves day k.
func QueueBatch(b *pgx.Batch, n NewBatch, days int) {
	b.Queue(`INSERT INTO batch (id, site, code, programme, category, calibre, depositor, entry, starts_at, delivery_note,
			order_number, received_at, received_by, condition, service, language, act)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17)`,
		n.ID, n.Site, n.Code, n.Programme, n.Category, n.Calibre, n.Depositor, n.Entry, n.StartsAt, n.DeliveryNote,
		n.OrderNumber, n.ReceivedAt, n.ReceivedBy, n.Condition, n.Service, n.Language, n.Act)
	b.Queue(`INSERT INTO step (batch, step, day, act) SELECT $1, k, k, $2 FROM generate_series(0, $3::int) k`, n.ID, n.Act, days)
}

// Piece is one movement as registered.
type Piece struct {
	No      int16
	Serial  string
	Attempt int16
	Holder  uuid.UUID
	Place   int16
}

// QueuePieces inserts movements with their empty series of so many elements, and lays them down.
func QueuePieces(b *pgx.Batch, n NewBatch, pieces []Piece, steps int, at time.Time) {
	nos, serials, attempts := make([]int16, len(pieces)), make([]string, len(pieces)), make([]int16, len(pieces))
	holders, places := make([]uuid.UUID, len(pieces)), make([]int16, len(pieces))
	for i, p := range pieces {
		nos[i], serials[i], attempts[i], holders[i], places[i] = p.No, p.Serial, p.Attempt, p.Holder, p.Place
	}
	b.Queue(`INSERT INTO movement (batch, no, serial, depositor, calibre, attempt)
		SELECT $1, no, serial, $2, $3, attempt FROM unnest($4::smallint[], $5::text[], $6::smallint[]) u(no, serial, attempt)`,
		n.ID, n.Depositor, n.Calibre, nos, serials, attempts)
	b.Queue(`INSERT INTO series (batch, no, rate, found, as_left, at_s, code, rate_nth, found_nth, left_nth)
		SELECT $1, no, array_fill(NULL::int, ARRAY[$3::int]), array_fill(NULL::int, ARRAY[$3]), array_fill(NULL::int, ARRAY[$3]),
			array_fill(NULL::int, ARRAY[$3]), array_fill(NULL::smallint, ARRAY[$3]), array_fill(0::smallint, ARRAY[$3]),
			array_fill(0::smallint, ARRAY[$3]), array_fill(0::smallint, ARRAY[$3])
		FROM unnest($2::smallint[]) u(no)`, n.ID, nos, steps)
	b.Queue(`INSERT INTO place_move (batch, no, nth, at, holder, place, act)
		SELECT $1, no, 1, $2, holder, place, $3 FROM unnest($4::smallint[], $5::uuid[], $6::smallint[]) u(no, holder, place)`,
		n.ID, at, n.Act, nos, holders, places)
	b.Queue(`INSERT INTO place (holder, place, batch, no)
		SELECT holder, place, $1, no FROM unnest($2::smallint[], $3::uuid[], $4::smallint[]) u(no, holder, place)`,
		n.ID, nos, holders, places)
}

// Earlier is an earlier appearance of a movement's identity.
type Earlier struct {
	Serial      string
	Batch       string
	Attempt     int16
	Certificate *string // number of a valid certificate, if it has one
}

// EarlierPieces queues the search for the same movements in other batches: same depositor and
// number, and the same calibre, where an absent calibre matches every one.
func EarlierPieces(b *pgx.Batch, into *[]Earlier, depositor uuid.UUID, calibre *uuid.UUID, serials []string) {
	list(b, into, `SELECT m.serial, b.code AS batch, m.attempt, (
			SELECT c.number FROM certificate c WHERE c.batch = m.batch AND c.no = m.no AND c.kind = 'certificate'
			  AND NOT EXISTS (SELECT FROM revocation r WHERE r.number = c.number)
			  AND NOT EXISTS (SELECT FROM certificate n WHERE n.replaces = c.number) LIMIT 1) AS certificate
		FROM movement m JOIN batch b ON b.id = m.batch
		WHERE m.depositor = $1 AND m.serial = ANY ($3::text[]) AND ($2::uuid IS NULL OR m.calibre IS NULL OR m.calibre = $2)`,
		depositor, calibre, serials)
}
