package rows

import (
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Series is the working row of one movement with what a save or a page needs beside it.
type Series struct {
	Batch    uuid.UUID
	No       int16
	Serial   string
	Rate     []*int32
	Found    []*int32
	AsLeft   []*int32
	AtS      []*int32
	Code     []*int16
	RateNth  []int16
	FoundNth []int16
	LeftNth  []int16
	Ended    int16
	Released bool // a paper hangs on it
}

const seriesColumns = `s.batch, s.no, m.serial, s.rate, s.found, s.as_left, s.at_s, s.code, s.rate_nth, s.found_nth, s.left_nth, s.ended,
	EXISTS (SELECT FROM certificate p WHERE p.batch = s.batch AND p.no = s.no AND NOT EXISTS (SELECT FROM revocation v WHERE v.number = p.number)) AS released`

// LockSeries queues the look-up of movements by batch code and serial, locked in key order so that
// two saves never wait for each other crosswise. The rows are read by a statement of their own after
// the lock is held: what else the locking one saw, such as papers, may be older than its wait.
func LockSeries(b *pgx.Batch, into *[]Series, site int16, codes, serials []string) {
	const named = `
		FROM unnest($2::text[], $3::text[]) w(code, serial)
		JOIN batch b ON b.site = $1 AND b.code = w.code
		JOIN movement m ON m.batch = b.id AND m.serial = w.serial
		JOIN series s ON s.batch = m.batch AND s.no = m.no
		ORDER BY s.batch, s.no`
	b.Queue(`SELECT 1`+named+` FOR UPDATE OF s`, site, codes, serials)
	list(b, into, `SELECT `+seriesColumns+named, site, codes, serials)
}

// Reading is one entry of the evidence.
type Reading struct {
	Batch      uuid.UUID
	No         int16
	Step       int16
	Kind       int16
	Nth        int16
	ID         uuid.UUID
	Value      *int32
	Code       *int16
	Typed      string
	Method     int16
	ReadAt     time.Time
	EnteredAt  time.Time
	ReadBy     uuid.UUID
	EnteredBy  uuid.UUID
	Station    *string
	OffsetMS   *int32 `db:"offset_ms"`
	BoundMS    *int32 `db:"bound_ms"`
	Evidence   []byte
	EvidenceAt *string
	Flags      int16
	Reason     *string
}

// SeenReading is a reading with the names of the people in it.
type SeenReading struct {
	Reading
	Reader   string
	Recorder string
}

const readingColumns = `r.batch, r.no, r.step, r.kind, r.nth, r.id, r.value, r.code, r.typed, r.method, r.read_at, r.entered_at, r.read_by, r.entered_by,
	r.station, r.offset_ms, r.bound_ms, r.evidence, r.evidence_at, r.flags, r.reason`

const seenColumns = readingColumns + `, a.title AS reader, e.title AS recorder`

const seenFrom = ` FROM reading r JOIN account a ON a.id = r.read_by JOIN account e ON e.id = r.entered_by `

// ReadingsByID queues the look-up of readings that already used these ids.
func ReadingsByID(b *pgx.Batch, into *[]SeenReading, ids []uuid.UUID) {
	list(b, into, `SELECT `+seenColumns+seenFrom+`WHERE r.id = ANY ($1::uuid[])`, ids)
}

// Newest queues the newest reading of the cells asked for, each by step or (step -1) by day: what a conflict shows,
// and who may correct without giving a reason.
func Newest(b *pgx.Batch, into *[]SeenReading, site int16, codes, serials []string, steps, days []int16) {
	list(b, into, `SELECT DISTINCT ON (r.batch, r.no, r.step, r.kind) `+seenColumns+`
		FROM unnest($2::text[], $3::text[], $4::smallint[], $5::smallint[]) w(code, serial, step, day)
		JOIN batch b ON b.site = $1 AND b.code = w.code
		JOIN movement m ON m.batch = b.id AND m.serial = w.serial
		JOIN reading r ON r.batch = m.batch AND r.no = m.no
			AND r.step = CASE WHEN w.step >= 0 THEN w.step ELSE (SELECT max(t.step) FROM step t WHERE t.batch = m.batch AND t.day = w.day) END
		JOIN account a ON a.id = r.read_by JOIN account e ON e.id = r.entered_by
		ORDER BY r.batch, r.no, r.step, r.kind, r.nth DESC`, site, codes, serials, steps, days)
}

// ReadingsOf queues all readings of one movement, in the order of the trial.
func ReadingsOf(b *pgx.Batch, into *[]SeenReading, batch uuid.UUID, no int16) {
	list(b, into, `SELECT `+seenColumns+seenFrom+`WHERE r.batch = $1 AND r.no = $2 ORDER BY r.step, r.kind, r.nth`, batch, no)
}

// QueueReadings inserts evidence, all under one act.
func QueueReadings(b *pgx.Batch, list []Reading, act uuid.UUID) {
	var c columns
	for _, r := range list {
		c.add(r)
	}
	b.Queue(`INSERT INTO reading (batch, no, step, kind, nth, id, value, code, typed, method, read_at, entered_at, read_by, entered_by,
			station, offset_ms, bound_ms, evidence, evidence_at, flags, reason, act)
		SELECT u.*, $22::uuid FROM unnest($1::uuid[], $2::smallint[], $3::smallint[], $4::smallint[], $5::smallint[], $6::uuid[], $7::int[], $8::smallint[],
			$9::text[], $10::smallint[], $11::timestamptz[], $12::timestamptz[], $13::uuid[], $14::uuid[], $15::text[], $16::int[],
			$17::int[], $18::bytea[], $19::text[], $20::smallint[], $21::text[]) u`,
		c.batch, c.no, c.step, c.kind, c.nth, c.id, c.value, c.code, c.typed, c.method, c.readAt, c.enteredAt, c.readBy, c.enteredBy,
		c.station, c.offset, c.bound, c.evidence, c.evidenceAt, c.flags, c.reason, act)
}

// columns turns rows into one array a column, the form in which unnest takes them.
type columns struct {
	batch, id, readBy, enteredBy       []uuid.UUID
	no, step, kind, nth, method, flags []int16
	value, offset, bound               []*int32
	code                               []*int16
	typed                              []string
	readAt, enteredAt                  []time.Time
	station, evidenceAt, reason        []*string
	evidence                           [][]byte
}

func (c *columns) add(r Reading) {
	c.batch, c.id = append(c.batch, r.Batch), append(c.id, r.ID)
	c.readBy, c.enteredBy = append(c.readBy, r.ReadBy), append(c.enteredBy, r.EnteredBy)
	c.no, c.step, c.kind, c.nth = append(c.no, r.No), append(c.step, r.Step), append(c.kind, r.Kind), append(c.nth, r.Nth)
	c.method, c.flags = append(c.method, r.Method), append(c.flags, r.Flags)
	c.value, c.offset, c.bound = append(c.value, r.Value), append(c.offset, r.OffsetMS), append(c.bound, r.BoundMS)
	c.code, c.typed = append(c.code, r.Code), append(c.typed, r.Typed)
	c.readAt, c.enteredAt = append(c.readAt, r.ReadAt), append(c.enteredAt, r.EnteredAt)
	c.station, c.evidenceAt, c.reason = append(c.station, r.Station), append(c.evidenceAt, r.EvidenceAt), append(c.reason, r.Reason)
	c.evidence = append(c.evidence, r.Evidence)
}

// Element is one step of one movement's series as it shall be.
type Element struct {
	Batch                      uuid.UUID
	No                         int16
	Step                       int16
	Rate, Found, AsLeft, AtS   *int32
	Code                       *int16
	RateNth, FoundNth, LeftNth int16
}

// QueueElements writes series element by element. UPDATE ... FROM applies only one match per row,
// so the elements of one movement go into separate statements.
func QueueElements(b *pgx.Batch, list []Element) {
	type key struct {
		batch uuid.UUID
		no    int16
	}
	var layers [][]Element
	depth := map[key]int{}
	for _, e := range list {
		k := key{e.Batch, e.No}
		d := depth[k]
		if d == len(layers) {
			layers = append(layers, nil)
		}
		layers[d] = append(layers[d], e)
		depth[k] = d + 1
	}
	for _, layer := range layers {
		queueLayer(b, layer)
	}
}

func queueLayer(b *pgx.Batch, list []Element) {
	n := len(list)
	batch, no, at := make([]uuid.UUID, n), make([]int16, n), make([]int16, n)
	rate, found, left, atS := make([]*int32, n), make([]*int32, n), make([]*int32, n), make([]*int32, n)
	code, rateNth, foundNth, leftNth := make([]*int16, n), make([]int16, n), make([]int16, n), make([]int16, n)
	for i, e := range list {
		batch[i], no[i], at[i] = e.Batch, e.No, e.Step+1
		rate[i], found[i], left[i], atS[i] = e.Rate, e.Found, e.AsLeft, e.AtS
		code[i], rateNth[i], foundNth[i], leftNth[i] = e.Code, e.RateNth, e.FoundNth, e.LeftNth
	}
	b.Queue(`UPDATE series s SET rate[q.i] = q.rate, found[q.i] = q.found, as_left[q.i] = q.as_left, at_s[q.i] = q.at_s, code[q.i] = q.code,
			rate_nth[q.i] = q.rate_nth, found_nth[q.i] = q.found_nth, left_nth[q.i] = q.left_nth
		FROM unnest($1::uuid[], $2::smallint[], $3::smallint[], $4::int[], $5::int[], $6::int[], $7::int[], $8::smallint[], $9::smallint[], $10::smallint[], $11::smallint[])
			q(batch, no, i, rate, found, as_left, at_s, code, rate_nth, found_nth, left_nth)
		WHERE s.batch = q.batch AND s.no = q.no`,
		batch, no, at, rate, found, left, atS, code, rateNth, foundNth, leftNth)
}

// Look is a value typed while a second look was asked.
type Look struct {
	ID      uuid.UUID
	Nth     int16
	Batch   uuid.UUID
	No      int16
	Step    int16
	Kind    int16
	Value   int32
	Typed   string
	Finding string
	At      time.Time
	By      uuid.UUID
}

// LooksByID queues the looks that belong to these entries.
func LooksByID(b *pgx.Batch, into *[]Look, ids []uuid.UUID) {
	list(b, into, `SELECT id, nth, batch, no, step, kind, value, typed, finding, at, by FROM look WHERE id = ANY ($1::uuid[]) ORDER BY id, nth`, ids)
}

// LooksOf queues all looks of one movement.
func LooksOf(b *pgx.Batch, into *[]Look, batch uuid.UUID, no int16) {
	list(b, into, `SELECT id, nth, batch, no, step, kind, value, typed, finding, at, by FROM look WHERE batch = $1 AND no = $2 ORDER BY step, at, nth`, batch, no)
}

// Looked is a movement for which a second look was asked.
type Looked struct{ No int16 }

// LooksAt queues the movements of a batch for which a second look was asked at a step.
func LooksAt(b *pgx.Batch, into *[]Looked, site int16, batch string, step int16) {
	list(b, into, `SELECT DISTINCT no FROM look WHERE batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND step = $3`, site, batch, step)
}

// QueueLooks records values typed while a second look was asked; one already recorded stays.
func QueueLooks(b *pgx.Batch, looks []Look, act uuid.UUID) {
	for _, k := range looks {
		b.Queue(`INSERT INTO look (id, nth, batch, no, step, kind, value, typed, finding, at, by, act)
			VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12) ON CONFLICT DO NOTHING`,
			k.ID, k.Nth, k.Batch, k.No, k.Step, k.Kind, k.Value, k.Typed, k.Finding, k.At, k.By, act)
	}
}

// Stray is a refused item: kept and shown, never dropped.
type Stray struct {
	ID     uuid.UUID
	Hash   []byte
	GotAt  time.Time
	Sender uuid.UUID
	Batch  *string
	Raw    string
	Why    string
}

// QueueStrays keeps refused items; the same item refused again is kept once.
func QueueStrays(b *pgx.Batch, list []Stray) {
	for _, s := range list {
		b.Queue(`INSERT INTO stray (id, hash, got_at, sender, batch, raw, why) VALUES ($1, $2, $3, $4, $5, $6, $7) ON CONFLICT DO NOTHING`,
			s.ID, s.Hash, s.GotAt, s.Sender, s.Batch, s.Raw, s.Why)
	}
}

// StraysOf queues the refused items that named this batch, newest first.
func StraysOf(b *pgx.Batch, into *[]Stray, batch string, most int) {
	list(b, into, `SELECT id, hash, got_at, sender, batch, raw, why FROM stray WHERE batch = $1 ORDER BY got_at DESC LIMIT $2`, batch, most)
}

// AccountIDs queues the look-up of people by log-in name.
func AccountIDs(b *pgx.Batch, into *[]AccountID, site int16, names []string) {
	list(b, into, `SELECT id, name, title FROM account WHERE site = $1 AND name = ANY ($2::text[])`, site, names)
}

// AccountID is a person by log-in name.
type AccountID struct {
	ID    uuid.UUID
	Name  string
	Title string
}
