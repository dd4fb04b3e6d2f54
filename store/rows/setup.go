package rows

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Named is a depositor or calibre by id and code.
type Named struct {
	ID    uuid.UUID
	Code  string
	Title string
}

// Depositor is a row of depositor.
type Depositor struct {
	ID       uuid.UUID
	Site     int16
	Code     string
	Title    string
	Address  string
	Language *string
	Act      uuid.UUID
}

// QueueDepositor inserts a depositor.
func QueueDepositor(b *pgx.Batch, d Depositor) {
	b.Queue(`INSERT INTO depositor (id, site, code, title, address, language, act) VALUES ($1, $2, $3, $4, $5, $6, $7)`,
		d.ID, d.Site, d.Code, d.Title, d.Address, d.Language, d.Act)
}

const depositorColumns = `id, site, code, title, address, language, act`

// FindDepositor queues the look-up of one code; into has one row or none.
func FindDepositor(b *pgx.Batch, into *[]Depositor, site int16, code string) {
	list(b, into, `SELECT `+depositorColumns+` FROM depositor WHERE site = $1 AND code = $2`, site, code)
}

// Depositors lists all depositors by code.
func Depositors(ctx context.Context, db Reader, site int16) ([]Depositor, error) {
	return collect[Depositor](ctx, db, `SELECT `+depositorColumns+` FROM depositor WHERE site = $1 ORDER BY code`, site)
}

// Calibre is a calibre with the newest version of its card; Version is nil while it has none.
type Calibre struct {
	ID              uuid.UUID
	Code            string
	Version         *int16
	Title           *string
	DiameterUM      *int32 `db:"diameter_um"`
	AreaUM2         *int64 `db:"area_um2"`
	WindingTurns    *int16
	WindingNote     *string
	Automatic       *string
	Seconds         *string
	SecondsOclock   *int16
	SecondsRadiusUM *int32 `db:"seconds_radius_um"`
	DialHours       *int16
	MinuteHand      *bool
	BeatsPerHour    *int32
	StopSeconds     *bool
	CrownOclock     *int16
	Accessory       *string
	AccessoryNote   *string
	ReserveHours    *int16
	Organ           *string
	OrganStepMilli  *int32
}

const calibreQuery = `SELECT c.id, c.code, k.version, k.title, k.diameter_um, k.area_um2, k.winding_turns, k.winding_note, k.automatic,
		k.seconds, k.seconds_oclock, k.seconds_radius_um, k.dial_hours, k.minute_hand, k.beats_per_hour, k.stop_seconds,
		k.crown_oclock, k.accessory, k.accessory_note, k.reserve_hours, k.organ, k.organ_step_milli
	FROM calibre c LEFT JOIN LATERAL (SELECT * FROM calibre_card k WHERE k.calibre = c.id ORDER BY version DESC LIMIT 1) k ON true
	WHERE c.site = $1`

// FindCalibre queues the look-up of one code; into has one row or none.
func FindCalibre(b *pgx.Batch, into *[]Calibre, site int16, code string) {
	list(b, into, calibreQuery+` AND c.code = $2`, site, code)
}

// Calibres lists all calibres by code.
func Calibres(ctx context.Context, db Reader, site int16) ([]Calibre, error) {
	return collect[Calibre](ctx, db, calibreQuery+` ORDER BY c.code`, site)
}

// QueueCalibre inserts a calibre without a card.
func QueueCalibre(b *pgx.Batch, id uuid.UUID, site int16, code string, act uuid.UUID) {
	b.Queue(`INSERT INTO calibre (id, site, code, act) VALUES ($1, $2, $3, $4)`, id, site, code, act)
}

// QueueCard inserts the next version of a calibre's card.
func QueueCard(b *pgx.Batch, c Calibre, version int16, act uuid.UUID) {
	b.Queue(`INSERT INTO calibre_card (calibre, version, title, diameter_um, area_um2, winding_turns, winding_note, automatic, seconds,
			seconds_oclock, seconds_radius_um, dial_hours, minute_hand, beats_per_hour, stop_seconds, crown_oclock, accessory,
			accessory_note, reserve_hours, organ, organ_step_milli, act)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17, $18, $19, $20, $21, $22)`,
		c.ID, version, c.Title, c.DiameterUM, c.AreaUM2, c.WindingTurns, c.WindingNote, c.Automatic, c.Seconds,
		c.SecondsOclock, c.SecondsRadiusUM, c.DialHours, c.MinuteHand, c.BeatsPerHour, c.StopSeconds, c.CrownOclock, c.Accessory,
		c.AccessoryNote, c.ReserveHours, c.Organ, c.OrganStepMilli, act)
}

// Programme is a row of programme without the act that brought it.
type Programme struct {
	Hash    []byte
	Code    string
	Version string
	Title   string
	Body    string
}

// FindProgramme queues the look-up of the newest version of a code; into has one row or none.
func FindProgramme(b *pgx.Batch, into *[]Programme, site int16, code string) {
	list(b, into, `SELECT p.hash, p.code, p.version, p.title, p.body FROM programme p JOIN act a ON a.id = p.act
		WHERE p.site = $1 AND p.code = $2 ORDER BY a.at DESC, a.id DESC LIMIT 1`, site, code)
}

// ProgrammeByHash is one programme; pgx.ErrNoRows when there is none.
func ProgrammeByHash(ctx context.Context, db Reader, site int16, hash []byte) (Programme, error) {
	return one[Programme](ctx, db, `SELECT hash, code, version, title, body FROM programme WHERE site = $1 AND hash = $2`, site, hash)
}

// Programmes lists all programmes, newest version of a code first.
func Programmes(ctx context.Context, db Reader, site int16) ([]Programme, error) {
	return collect[Programme](ctx, db, `SELECT p.hash, p.code, p.version, p.title, p.body FROM programme p JOIN act a ON a.id = p.act
		WHERE p.site = $1 ORDER BY p.code, a.at DESC`, site)
}

// QueueProgramme inserts a programme.
func QueueProgramme(b *pgx.Batch, site int16, p Programme, act uuid.UUID) {
	b.Queue(`INSERT INTO programme (site, hash, code, version, title, body, act) VALUES ($1, $2, $3, $4, $5, $6, $7)`,
		site, p.Hash, p.Code, p.Version, p.Title, p.Body, act)
}

// CardOf queues the calibre of a batch with its card; into has one row or none.
func CardOf(b *pgx.Batch, into *[]Calibre, site int16, batch string) {
	list(b, into, calibreQuery+` AND c.id = (SELECT calibre FROM batch WHERE site = $1 AND code = $2)`, site, batch)
}
