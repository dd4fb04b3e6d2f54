package rows

import (
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
)

// Account is a row of account.
type Account struct {
	ID         uuid.UUID
	Site       int16
	Name       string
	Title      string
	Role       string
	Secret     *string
	Language   *string
	MadeAt     time.Time
	DisabledAt *time.Time
}

const accountColumns = `id, site, name, title, role, secret, language, made_at, disabled_at`

// QueueAccount inserts an account.
func QueueAccount(b *pgx.Batch, a Account) {
	b.Queue(`INSERT INTO account (id, site, name, title, role, secret, language, made_at) VALUES ($1, $2, $3, $4, $5, $6, $7, $8)`,
		a.ID, a.Site, a.Name, a.Title, a.Role, a.Secret, a.Language, a.MadeAt)
}

// FindAccount queues the look-up of one name; into has one row or none.
func FindAccount(b *pgx.Batch, into *[]Account, site int16, name string) {
	list(b, into, `SELECT `+accountColumns+` FROM account WHERE site = $1 AND name = $2`, site, name)
}

// AccountByName is one account; pgx.ErrNoRows when there is none.
func AccountByName(ctx context.Context, db Reader, site int16, name string) (Account, error) {
	return one[Account](ctx, db, `SELECT `+accountColumns+` FROM account WHERE site = $1 AND name = $2`, site, name)
}

// Accounts lists all accounts of the site by name.
func Accounts(ctx context.Context, db Reader, site int16) ([]Account, error) {
	return collect[Account](ctx, db, `SELECT `+accountColumns+` FROM account WHERE site = $1 ORDER BY name`, site)
}

// QueueDisable locks an account and ends its sessions.
func QueueDisable(b *pgx.Batch, id uuid.UUID, at time.Time) {
	b.Queue(`UPDATE account SET disabled_at = $2 WHERE id = $1`, id, at)
	b.Queue(`DELETE FROM session WHERE account = $1`, id)
}

// QueueLanguage remembers the language of an account.
func QueueLanguage(b *pgx.Batch, id uuid.UUID, language string) {
	b.Queue(`UPDATE account SET language = $2 WHERE id = $1`, id, language)
}

// Session is a session with its account.
type Session struct {
	ID         uuid.UUID
	Name       string
	Title      string
	Role       string
	Language   *string
	DisabledAt *time.Time
	SeenAt     time.Time
	EndsAt     time.Time
}

// Account is the part of the session that says who it is.
func (s Session) Account() Account {
	return Account{ID: s.ID, Name: s.Name, Title: s.Title, Role: s.Role, Language: s.Language, DisabledAt: s.DisabledAt}
}

// SessionByHash finds a session by the hash of its token; pgx.ErrNoRows when there is none.
func SessionByHash(ctx context.Context, db Reader, hash []byte) (Session, error) {
	return one[Session](ctx, db, `SELECT a.id, a.name, a.title, a.role, a.language, a.disabled_at, s.seen_at, s.ends_at
		FROM session s JOIN account a ON a.id = s.account WHERE s.hash = $1`, hash)
}

// AddSession starts a session.
func AddSession(ctx context.Context, db Reader, hash []byte, account uuid.UUID, at, ends time.Time) error {
	_, err := db.Exec(ctx, `INSERT INTO session (hash, account, made_at, seen_at, ends_at) VALUES ($1, $2, $3, $3, $4)`, hash, account, at, ends)
	return err
}

// TouchSession notes when a session was last seen.
func TouchSession(ctx context.Context, db Reader, hash []byte, at time.Time) error {
	_, err := db.Exec(ctx, `UPDATE session SET seen_at = $2 WHERE hash = $1`, hash, at)
	return err
}

// EndSession ends a session.
func EndSession(ctx context.Context, db Reader, hash []byte) error {
	_, err := db.Exec(ctx, `DELETE FROM session WHERE hash = $1`, hash)
	return err
}
