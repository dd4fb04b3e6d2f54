package store_test

import (
	"context"
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

func addToken(t *testing.T, h *storetest.House, n store.NewToken) (string, store.Token) {
	t.Helper()
	secret, token, err := h.AddToken(t.Context(), h.Manager, n)
	if err != nil {
		t.Fatal(err)
	}
	return secret, token
}

func wantUnknown(t *testing.T, h *storetest.House, secret, why string) {
	t.Helper()
	if a, err := h.Token(t.Context(), secret); store.KindOf(err) != store.KindUnauthenticated {
		t.Errorf("%s: got %+v, %v", why, a, err)
	}
}

func TestTokenTellsWhoActs(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	secret, _ := addToken(t, h, store.NewToken{Title: "bench 3", Account: "technician", Scopes: []store.Scope{store.ScopeReadings}, Station: "BENCH-3"})
	if !strings.HasPrefix(secret, "rh_") || len(secret) != 3+43 {
		t.Errorf("secret has the form %.5s…, %d signs", secret, len(secret))
	}
	a, err := h.Token(t.Context(), secret)
	if err != nil {
		t.Fatal(err)
	}
	if a.Account != h.Technician.Account || a.Via != "api" || a.Station != "BENCH-3" || !a.Has(store.ScopeReadings) || a.Has(store.ScopeRead) {
		t.Errorf("actor %+v", a)
	}
	if _, second := addToken(t, h, store.NewToken{Title: "bench 3 again", Account: "second", Scopes: []store.Scope{store.ScopeRead}, Station: "BENCH-3"}); second.Station != "BENCH-3" {
		t.Error("a station cannot be named twice")
	}
	wantUnknown(t, h, secret+"x", "another secret")
	wantUnknown(t, h, strings.TrimPrefix(secret, "rh_"), "without its prefix")
	wantUnknown(t, h, "", "no secret")
}

func TestTokenEnds(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	secret, _ := addToken(t, h, store.NewToken{Title: "a day", Account: "technician", Scopes: store.Scopes, EndsAt: h.Clock.Now().Add(24 * time.Hour)})
	revoked, token := addToken(t, h, store.NewToken{Title: "lost", Account: "technician", Scopes: store.Scopes})
	locked, _ := addToken(t, h, store.NewToken{Title: "left us", Account: "second", Scopes: store.Scopes})
	for _, s := range []string{secret, revoked, locked} {
		if _, err := h.Token(t.Context(), s); err != nil {
			t.Fatal(err)
		}
	}
	for range 2 {
		if err := h.RevokeToken(t.Context(), h.Manager, token.ID); err != nil {
			t.Fatal(err)
		}
	}
	wantUnknown(t, h, revoked, "revoked")
	if err := h.DisableAccount(t.Context(), h.Manager, "second"); err != nil {
		t.Fatal(err)
	}
	wantUnknown(t, h, locked, "account locked")
	h.Clock.Advance(24 * time.Hour)
	wantUnknown(t, h, secret, "ended")
	list, err := h.Tokens(t.Context(), h.Manager)
	if err != nil || len(list) != 3 {
		t.Fatalf("%d tokens, %v", len(list), err)
	}
	for _, k := range list {
		if (k.Title == "lost") == k.Revoked.IsZero() {
			t.Errorf("token %s revoked at %v", k.Title, k.Revoked)
		}
	}
}

func TestTokenRefusals(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	good := store.NewToken{Title: "x", Account: "technician", Scopes: []store.Scope{store.ScopeRead}}
	if err := h.DisableAccount(t.Context(), h.Manager, "second"); err != nil {
		t.Fatal(err)
	}
	for field, change := range map[string]func(*store.NewToken){
		"title":    func(n *store.NewToken) { n.Title = " " },
		"scopes":   func(n *store.NewToken) { n.Scopes = nil },
		"scopes ":  func(n *store.NewToken) { n.Scopes = []store.Scope{"everything"} },
		"account":  func(n *store.NewToken) { n.Account = "nobody" },
		"account ": func(n *store.NewToken) { n.Account = "second" },
		"station":  func(n *store.NewToken) { n.Station = "bench 3" },
		"ends_at":  func(n *store.NewToken) { n.EndsAt = h.Clock.Now() },
	} {
		n := good
		change(&n)
		secret, _, err := h.AddToken(t.Context(), h.Manager, n)
		e, _ := errors.AsType[*store.Error](err)
		if secret != "" || e == nil || e.Kind != store.KindInvalid || e.Field != strings.TrimSpace(field) {
			t.Errorf("%s: got %v", field, err)
		}
	}
	if _, _, err := h.AddToken(t.Context(), h.Lead, good); store.KindOf(err) != store.KindForbidden {
		t.Errorf("the lead made a token: %v", err)
	}
	if err := h.RevokeToken(t.Context(), h.Manager, uuid.New()); store.KindOf(err) != store.KindNotFound {
		t.Errorf("revoking an unknown token: %v", err)
	}
}

// The database holds no secret: whoever reads it cannot use what he finds.
func TestTokenSecretIsNotKept(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	secret, _ := addToken(t, h, store.NewToken{Title: "x", Account: "technician", Scopes: []store.Scope{store.ScopeRead}})
	conn, err := pgx.Connect(t.Context(), h.DB.Owner)
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.WithoutCancel(t.Context()))
	var found bool
	if err := conn.QueryRow(t.Context(), `SELECT EXISTS (SELECT FROM rh.token t WHERE t::text LIKE '%' || $1 || '%')
		OR EXISTS (SELECT FROM rh.act a WHERE a::text LIKE '%' || $1 || '%')`, secret[3:]).Scan(&found); err != nil || found {
		t.Errorf("the secret stands in the database: %v, %v", found, err)
	}
	var hashes int
	if err := conn.QueryRow(t.Context(), `SELECT count(*) FROM rh.token WHERE octet_length(hash) = 32`).Scan(&hashes); err != nil || hashes != 1 {
		t.Errorf("%d hashes, %v", hashes, err)
	}
}
