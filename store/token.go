package store

import (
	"context"
	"crypto/rand"
	"crypto/sha256"
	"encoding/base64"
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// Token is a key to the API. Its secret is shown once, when it is made; only its hash is kept.
type Token struct {
	ID      uuid.UUID
	Title   string // what it is for
	Account string // log-in name of the account it acts for
	Scopes  []Scope
	Station string // code of the station it stands at, "" for none
	MadeAt  time.Time
	EndsAt  time.Time // zero: never
	Revoked time.Time // zero: not
}

// NewToken is what a manager types to give a program a key.
type NewToken struct {
	Title   string
	Account string // log-in name: what the program does is done under it
	Scopes  []Scope
	Station string    // code; made when it is named for the first time
	EndsAt  time.Time // zero: never
}

// TokenPrefix begins every secret, so that one left lying about is known for what it is.
const TokenPrefix = "rh_"

// AddToken makes a token and gives its secret, which cannot be shown again.
func (l *Lab) AddToken(ctx context.Context, a Actor, n NewToken) (secret string, t Token, err error) {
	n.Title, n.Station = strings.TrimSpace(n.Title), strings.TrimSpace(n.Station)
	if err := n.check(l.Now()); err != nil {
		return "", t, err
	}
	raw := make([]byte, 32)
	rand.Read(raw)
	secret = TokenPrefix + base64.RawURLEncoding.EncodeToString(raw)
	hash := sha256.Sum256([]byte(secret))
	err = l.do(ctx, a, verb{"add_token", RightAccounts}, func(w *work) error {
		account, err := w.account(ctx, n.Account)
		if err != nil {
			return err
		}
		row := rows.NewToken{ID: l.newID(), Hash: hash[:], Site: l.site, Title: n.Title, Account: account.ID, Station: optional(n.Station), MadeAt: w.now}
		body := map[string]any{"token": row.ID.String(), "title": n.Title, "account": account.ID.String(), "station": n.Station}
		if !n.EndsAt.IsZero() {
			row.EndsAt = &n.EndsAt
			body["ends_at"] = n.EndsAt.UTC().Format(rfc3339ms)
		}
		scopes := []any{}
		for _, s := range n.Scopes {
			row.Scopes, scopes = append(row.Scopes, string(s)), append(scopes, string(s))
		}
		body["scopes"] = scopes
		w.act.Body = body
		rows.QueueToken(w.out, row)
		t = Token{ID: row.ID, Title: n.Title, Account: account.Name, Scopes: n.Scopes, Station: n.Station, MadeAt: w.now, EndsAt: n.EndsAt}
		return nil
	})
	if err != nil {
		return "", Token{}, err
	}
	return secret, t, nil
}

func (n NewToken) check(now time.Time) error {
	var f faults
	if n.Title == "" {
		f.add(invalid("title", "needed"))
	}
	if len(n.Scopes) == 0 {
		f.add(invalid("scopes", "needed"))
	}
	for _, s := range n.Scopes {
		if !slices.Contains(Scopes, s) {
			f.add(invalid("scopes", "unknown_scope", "scope", string(s)))
		}
	}
	if n.Station != "" {
		f.add(checkCode("station", n.Station))
	}
	if !n.EndsAt.IsZero() && !n.EndsAt.After(now) {
		f.add(invalid("ends_at", "ends_before_now"))
	}
	return f.err()
}

// account finds somebody who may act: not one who is locked out.
func (w *work) account(ctx context.Context, name string) (rows.Account, error) {
	var found []rows.Account
	b := &pgx.Batch{}
	rows.FindAccount(b, &found, w.lab.site, name)
	if err := w.read(ctx, b); err != nil {
		return rows.Account{}, err
	}
	switch {
	case len(found) == 0:
		return rows.Account{}, invalid("account", "no_account", "name", name)
	case found[0].DisabledAt != nil:
		return rows.Account{}, invalid("account", "account_disabled", "name", name)
	}
	return found[0], nil
}

// Tokens lists all tokens, newest first, ended and revoked ones too.
func (l *Lab) Tokens(ctx context.Context, a Actor) ([]Token, error) {
	if !a.May(RightAccounts) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightAccounts))
	}
	list, err := rows.Tokens(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("tokens: %w", err)
	}
	out := make([]Token, len(list))
	for i, r := range list {
		out[i] = Token{ID: r.ID, Title: r.Title, Account: r.Name, Scopes: scopesOf(r.Scopes), Station: value(r.Station),
			MadeAt: r.MadeAt.UTC(), EndsAt: value(r.EndsAt).UTC(), Revoked: value(r.RevokedAt).UTC()}
	}
	return out, nil
}

func scopesOf(names []string) []Scope {
	out := make([]Scope, len(names))
	for i, s := range names {
		out[i] = Scope(s)
	}
	return out
}

// RevokeToken ends a token at once; doing it again changes nothing.
func (l *Lab) RevokeToken(ctx context.Context, a Actor, id uuid.UUID) error {
	return l.do(ctx, a, verb{"revoke_token", RightAccounts}, func(w *work) error {
		var found []rows.Token
		b := &pgx.Batch{}
		rows.FindToken(b, &found, l.site, id)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(found) == 0 {
			return failure(KindNotFound, "no_token", "token", id.String())
		}
		if w.skip = found[0].RevokedAt != nil; w.skip {
			return nil
		}
		w.act.Body = map[string]any{"token": id.String()}
		rows.QueueRevoke(w.out, id, w.now)
		return nil
	})
}

// Token tells who acts with the secret. It costs one query. A token that is unknown, ended or
// revoked, or whose account is locked, all answer alike.
func (l *Lab) Token(ctx context.Context, secret string) (Actor, error) {
	unknown := failure(KindUnauthenticated, "unknown_token")
	if !strings.HasPrefix(secret, TokenPrefix) {
		return Actor{}, unknown
	}
	hash := sha256.Sum256([]byte(secret))
	t, err := rows.TokenByHash(ctx, l.pool, hash[:])
	if errors.Is(err, pgx.ErrNoRows) {
		return Actor{}, unknown
	}
	if err != nil {
		return Actor{}, fmt.Errorf("token: %w", err)
	}
	if t.DisabledAt != nil || t.RevokedAt != nil || t.EndsAt != nil && !l.Now().Before(*t.EndsAt) {
		return Actor{}, unknown
	}
	return Actor{Account: t.Account, Name: t.Name, Title: t.Person, Role: Role(t.Role), Via: viaAPI,
		Scopes: scopesOf(t.Scopes), Station: value(t.Station), Language: value(t.Language)}, nil
}
