package storetest

import (
	"context"
	"strings"
	"testing"

	"github.com/jackc/pgx/v5"

	"ratehouse/migrations"
)

func connect(t *testing.T, dsn string) *pgx.Conn {
	t.Helper()
	conn, err := pgx.Connect(t.Context(), dsn)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { conn.Close(context.WithoutCancel(t.Context())) })
	return conn
}

// Two tests at once see the current schema and nothing of each other.
func TestDatabasesAreApart(t *testing.T) {
	t.Parallel()
	for range 4 {
		t.Run("", func(t *testing.T) {
			t.Parallel()
			db := Database(t)
			app := connect(t, db.App)
			if err := migrations.Current(t.Context(), app); err != nil {
				t.Fatal(err)
			}
			var n int
			if err := app.QueryRow(t.Context(), "SELECT count(*) FROM rh.setting").Scan(&n); err != nil || n != 0 {
				t.Fatalf("%d settings in a fresh database, %v", n, err)
			}
			if _, err := app.Exec(t.Context(), "INSERT INTO rh.setting (name, value) VALUES ('mine', '')"); err != nil {
				t.Fatal(err)
			}
		})
	}
}

// The roles are what they claim: the program's cannot make or empty tables, the reader's cannot write.
func TestRolesAreLimited(t *testing.T) {
	t.Parallel()
	db := Database(t)
	for _, c := range []struct{ dsn, sql, code string }{
		{db.App, "CREATE TABLE rh.mine (n int)", "42501"},
		{db.App, "TRUNCATE rh.reading", "42501"},
		{db.Read, "INSERT INTO rh.setting (name, value) VALUES ('mine', '')", "42501"},
		{db.Read, "SELECT version_id FROM rh.schema_version", ""},
	} {
		_, err := connect(t, c.dsn).Exec(t.Context(), c.sql)
		if got := code(err); got != c.code {
			t.Errorf("%s: got code %q, want %q (%v)", c.sql, got, c.code, err)
		}
	}
}

func code(err error) string {
	if err == nil {
		return ""
	}
	_, after, _ := strings.Cut(err.Error(), "SQLSTATE ")
	return strings.TrimSuffix(after, ")")
}
