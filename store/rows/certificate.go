package rows

import (
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
)

// Certificate is a row of certificate, with what happened to it since.
type Certificate struct {
	Number     string
	Batch      uuid.UUID
	No         int16
	Kind       string
	Record     string
	Hash       []byte
	JWS        string `db:"jws"`
	KeyID      string
	Replaces   *string
	At         time.Time
	ReplacedBy *string
	RevokedAt  *time.Time
	Revoked    *string // why
	PublicJWK  *string `db:"public_jwk"`
}

const certificateQuery = `SELECT c.number, c.batch, c.no, c.kind, c.record, c.hash, c.jws, c.key_id, c.replaces, c.at,
		(SELECT n.number FROM certificate n WHERE n.replaces = c.number) AS replaced_by, v.at AS revoked_at, v.reason AS revoked, k.public_jwk
	FROM certificate c LEFT JOIN revocation v ON v.number = c.number JOIN signing_key k ON k.key_id = c.key_id `

// CertificateByNumber is one paper; pgx.ErrNoRows when there is none.
func CertificateByNumber(ctx context.Context, db Reader, site int16, number string) (Certificate, error) {
	return one[Certificate](ctx, db, certificateQuery+`WHERE c.site = $1 AND c.number = $2`, site, number)
}

// QueueCertificate freezes a paper.
func QueueCertificate(b *pgx.Batch, site int16, c Certificate, act uuid.UUID) {
	b.Queue(`INSERT INTO certificate (number, site, batch, no, kind, record, hash, jws, key_id, replaces, at, act)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)`,
		c.Number, site, c.Batch, c.No, c.Kind, c.Record, c.Hash, c.JWS, c.KeyID, c.Replaces, c.At, act)
}

// QueueKey makes the public key known; a known one stays.
func QueueKey(b *pgx.Batch, site int16, id, jwk string, at time.Time) {
	b.Queue(`INSERT INTO signing_key (key_id, site, public_jwk, from_at) VALUES ($1, $2, $3, $4) ON CONFLICT DO NOTHING`, id, site, jwk, at)
}

// QueueRevocation takes a paper back.
func QueueRevocation(b *pgx.Batch, number, reason string, at time.Time, act uuid.UUID) {
	b.Queue(`INSERT INTO revocation (number, reason, at, act) VALUES ($1, $2, $3, $4)`, number, reason, at, act)
}

// FindMovements queues several movements of a batch, in order.
func FindMovements(b *pgx.Batch, into *[]Movement, site int16, batch string, serials []string) {
	list(b, into, movementQuery+` AND m.serial = ANY ($3::text[]) ORDER BY m.no`, site, batch, serials)
}

// ReadingsOfMany queues all readings of several movements, in the order of movements and trial.
func ReadingsOfMany(b *pgx.Batch, into *[]SeenReading, site int16, batch string, serials []string) {
	list(b, into, `SELECT `+seenColumns+seenFrom+`JOIN movement m ON m.batch = r.batch AND m.no = r.no
		WHERE r.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND m.serial = ANY ($3::text[])
		ORDER BY r.no, r.step, r.kind, r.nth`, site, batch, serials)
}

// RemarkActor says who moved a remark of a movement.
type RemarkActor struct {
	No    int16
	Actor uuid.UUID
	State string
}

// RemarkActors queues who decided remarks of a batch's movements.
func RemarkActors(b *pgx.Batch, into *[]RemarkActor, site int16, batch string) {
	list(b, into, `SELECT k.no, a.actor, s.state FROM remark k JOIN remark_state s ON s.remark = k.id JOIN act a ON a.id = s.act
		WHERE k.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) AND k.no IS NOT NULL`, site, batch)
}

// Paper is a certificate without its record: for lists.
type Paper struct {
	Number     string
	No         int16
	Serial     string
	Kind       string
	At         time.Time
	By         string // who released it
	Replaces   *string
	ReplacedBy *string
	RevokedAt  *time.Time
	Revoked    *string // why
}

// PapersOf queues the papers of a batch in the order of its movements, a movement's oldest first.
func PapersOf(b *pgx.Batch, into *[]Paper, site int16, batch string) {
	list(b, into, `SELECT c.number, c.no, m.serial, c.kind, c.at, coalesce(w.title, '') AS by, c.replaces, n.number AS replaced_by, v.at AS revoked_at, v.reason AS revoked
		FROM certificate c JOIN movement m ON m.batch = c.batch AND m.no = c.no
		JOIN act a ON a.id = c.act LEFT JOIN account w ON w.id = a.actor
		LEFT JOIN certificate n ON n.replaces = c.number LEFT JOIN revocation v ON v.number = c.number
		WHERE c.batch = `+batchByCode+` ORDER BY c.no, c.at, c.number`, site, batch)
}

// CertificatesAfter is a part of a batch's papers with their records, in the order of its movements:
// valid ones alone, after the number of the movement and at most so many.
func CertificatesAfter(ctx context.Context, db Reader, site int16, batch string, after int16, most int) ([]Certificate, error) {
	return collect[Certificate](ctx, db, certificateQuery+`LEFT JOIN certificate x ON x.replaces = c.number
		WHERE c.batch = `+batchByCode+` AND c.no > $3 AND x.number IS NULL AND v.number IS NULL ORDER BY c.no LIMIT $4`, site, batch, after, most)
}

// Hands is what one account had to do with the readings of a movement.
type Hands struct {
	No       int16
	Readings int32
	Own      int32 // read or entered by the account
	Touched  bool  // the account corrected one, or confirmed a second look
	ByHand   bool  // a seconds hand was read: what it says is ambiguous by whole minutes
	Last     *time.Time
}

// HandsOf queues, for every movement of a batch with readings, what the account had to do with them.
func HandsOf(b *pgx.Batch, into *[]Hands, site int16, batch string, account uuid.UUID) {
	list(b, into, `SELECT r.no, count(*)::int AS readings, count(*) FILTER (WHERE $3 IN (r.read_by, r.entered_by))::int AS own,
			coalesce(bool_or(r.nth > 1 AND r.kind <= 3 OR r.flags & 1 <> 0) FILTER (WHERE $3 IN (r.read_by, r.entered_by)), false) AS touched,
			bool_or(r.method IN (2, 3)) AS by_hand, max(r.read_at) AS last
		FROM reading r WHERE r.batch = `+batchByCode+` GROUP BY r.no`, site, batch, account)
}

// RivalsOf queues the movements of a batch of which another batch holds a valid certificate: same
// depositor and number, and the same calibre, where an absent calibre matches every one. A batch that
// was registered with a reason to test them again has none.
func RivalsOf(b *pgx.Batch, into *[]int16, site int16, batch string) {
	b.Queue(`SELECT DISTINCT m.no FROM batch t JOIN act a ON a.id = t.act JOIN movement m ON m.batch = t.id
		JOIN movement o ON o.depositor = m.depositor AND o.serial = m.serial AND o.batch <> m.batch
			AND (o.calibre IS NULL OR m.calibre IS NULL OR o.calibre = m.calibre)
		JOIN certificate c ON c.batch = o.batch AND c.no = o.no AND c.kind = 'certificate'
		WHERE t.site = $1 AND t.code = $2 AND a.reason IS NULL
			AND NOT EXISTS (SELECT FROM revocation v WHERE v.number = c.number)
			AND NOT EXISTS (SELECT FROM certificate n WHERE n.replaces = c.number)`, site, batch).Query(func(r pgx.Rows) error {
		got, err := pgx.CollectRows(r, pgx.RowTo[int16])
		*into = got
		return err
	})
}

// LockDepositor queues a lock on releases for the depositor of a batch until the transaction ends.
func LockDepositor(b *pgx.Batch, site int16, batch string) {
	b.Queue(`SELECT pg_advisory_xact_lock(7, hashtext(depositor::text)) FROM batch WHERE site = $1 AND code = $2`, site, batch).
		Exec(func(pgconn.CommandTag) error { return nil })
}
