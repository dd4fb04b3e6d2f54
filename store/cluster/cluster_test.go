package cluster

import (
	"context"
	"os"
	"path/filepath"
	"testing"

	"github.com/jackc/pgx/v5"
)

// start runs a cluster that ends with the test.
func start(t *testing.T, cfg Config) *Cluster {
	t.Helper()
	c, err := Start(t.Context(), cfg)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		if err := c.Stop(context.WithoutCancel(t.Context())); err != nil {
			t.Error(err)
		}
	})
	return c
}

// tempDir is a folder that the server's account can enter too; testing's own is closed to it.
func tempDir(t *testing.T) string {
	t.Helper()
	dir, err := os.MkdirTemp("", "cluster-test-")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.RemoveAll(dir) })
	if err := os.Chmod(dir, 0o711); err != nil {
		t.Fatal(err)
	}
	return dir
}

func connect(t *testing.T, dsn string) *pgx.Conn {
	t.Helper()
	conn, err := pgx.Connect(t.Context(), dsn)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { conn.Close(context.WithoutCancel(t.Context())) })
	return conn
}

func TestSmoke(t *testing.T) {
	t.Parallel()
	c := start(t, Config{Dir: filepath.Join(tempDir(t), "a", "b")})
	if err := c.EnsureDatabase(t.Context(), "lab"); err != nil {
		t.Fatal(err)
	}
	for _, role := range []string{Superuser, Owner, App, Read} {
		conn := connect(t, c.DSN(role, "lab"))
		var who string
		if err := conn.QueryRow(t.Context(), "select current_user").Scan(&who); err != nil || who != role {
			t.Error(who, err)
		}
	}
}
