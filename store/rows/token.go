package rows

import (
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Token is a key to the API with the account it acts for.
type Token struct {
	ID         uuid.UUID
	Title      string
	Account    uuid.UUID
	Name       string // of the account
	Person     string
	Role       string
	Language   *string
	DisabledAt *time.Time
	Scopes     []string
	Station    *string
	MadeAt     time.Time
	EndsAt     *time.Time
	RevokedAt  *time.Time
}

const tokenQuery = `SELECT t.id, t.title, t.account, a.name, a.title AS person, a.role, a.language, a.disabled_at,
		t.scopes, t.station, t.made_at, t.ends_at, t.revoked_at
	FROM token t JOIN account a ON a.id = t.account `

// TokenByHash finds a token by the hash of its secret; pgx.ErrNoRows when there is none.
func TokenByHash(ctx context.Context, db Reader, hash []byte) (Token, error) {
	return one[Token](ctx, db, tokenQuery+`WHERE t.hash = $1`, hash)
}

// Tokens lists all tokens of the site, newest first.
func Tokens(ctx context.Context, db Reader, site int16) ([]Token, error) {
	return collect[Token](ctx, db, tokenQuery+`WHERE t.site = $1 ORDER BY t.made_at DESC, t.id DESC`, site)
}

// FindToken queues the look-up of one token; into has one row or none.
func FindToken(b *pgx.Batch, into *[]Token, site int16, id uuid.UUID) {
	list(b, into, tokenQuery+`WHERE t.site = $1 AND t.id = $2`, site, id)
}

// NewToken is what adding a token inserts.
type NewToken struct {
	ID      uuid.UUID
	Hash    []byte
	Site    int16
	Title   string
	Account uuid.UUID
	Scopes  []string
	Station *string
	MadeAt  time.Time
	EndsAt  *time.Time
}

// QueueToken inserts a token, and the station it stands at if that is named for the first time.
func QueueToken(b *pgx.Batch, n NewToken) {
	if n.Station != nil {
		b.Queue(`INSERT INTO station (site, code, title) VALUES ($1, $2::text, $2::text) ON CONFLICT DO NOTHING`, n.Site, *n.Station)
	}
	b.Queue(`INSERT INTO token (id, hash, site, title, account, scopes, station, made_at, ends_at)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9)`,
		n.ID, n.Hash, n.Site, n.Title, n.Account, n.Scopes, n.Station, n.MadeAt, n.EndsAt)
}

// QueueRevoke ends a token; one revoked before keeps its first date.
func QueueRevoke(b *pgx.Batch, id uuid.UUID, at time.Time) {
	b.Queue(`UPDATE token SET revoked_at = coalesce(revoked_at, $2) WHERE id = $1`, id, at)
}
