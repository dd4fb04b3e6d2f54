package rows

import (
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
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

// CertificatesOf lists the papers of a batch in the order of its movements.
func CertificatesOf(ctx context.Context, db Reader, site int16, batch string) ([]Certificate, error) {
	return collect[Certificate](ctx, db, certificateQuery+`WHERE c.batch = (SELECT id FROM batch WHERE site = $1 AND code = $2) ORDER BY c.no, c.at`, site, batch)
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
