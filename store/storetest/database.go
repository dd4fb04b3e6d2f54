package storetest

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"io/fs"
	"sync"
	"sync/atomic"
	"testing"

	"github.com/jackc/pgx/v5"

	"ratehouse/migrations"
	"ratehouse/store/cluster"
)

// DB is one test's own database: the connection strings of its three roles.
type DB struct {
	App, Owner, Read string
}

var (
	template     = "template_" + migrationsHash()
	makeTemplate = sync.OnceValue(func() error {
		c, err := server()
		if err != nil {
			return err
		}
		return buildTemplate(context.Background(), c)
	})
	count atomic.Int64
)

// Database gives the test a database of its own with the current schema and nothing in it, dropped
// when the test ends.
func Database(t testing.TB) DB {
	t.Helper()
	c := Server(t)
	if err := makeTemplate(); err != nil {
		t.Fatal(err)
	}
	name := fmt.Sprintf("test_%d", count.Add(1))
	copyOf(t, c, name, template)
	return DB{App: c.DSN(cluster.App, name), Owner: c.DSN(cluster.Owner, name), Read: c.DSN(cluster.Read, name)}
}

// Empty gives the test a database without the schema, for what migrates or restores.
func Empty(t testing.TB) DB {
	t.Helper()
	c := Server(t)
	name := fmt.Sprintf("test_%d", count.Add(1))
	copyOf(t, c, name, "template1")
	return DB{App: c.DSN(cluster.App, name), Owner: c.DSN(cluster.Owner, name), Read: c.DSN(cluster.Read, name)}
}

func copyOf(t testing.TB, c *cluster.Cluster, name, template string) {
	t.Helper()
	err := superuser(t.Context(), c, func(conn *pgx.Conn) error {
		return create(t.Context(), conn, name, template)
	})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		ctx := context.WithoutCancel(t.Context())
		if err := superuser(ctx, c, func(conn *pgx.Conn) error { return drop(ctx, conn, name) }); err != nil {
			t.Error(err)
		}
	})
}

// buildTemplate migrates once for each state of the migration files; a half-made one has another
// name.
func buildTemplate(ctx context.Context, c *cluster.Cluster) error {
	const half = "half_made"
	return superuser(ctx, c, func(conn *pgx.Conn) error {
		var have bool
		if err := conn.QueryRow(ctx, `SELECT EXISTS (SELECT FROM pg_database WHERE datname = $1)`, template).Scan(&have); err != nil || have {
			return err
		}
		if err := drop(ctx, conn, half); err != nil {
			return err
		}
		if err := create(ctx, conn, half, "template1"); err != nil {
			return err
		}
		if _, err := migrations.Up(ctx, c.DSN(cluster.Owner, half)); err != nil {
			return err
		}
		_, err := conn.Exec(ctx, "ALTER DATABASE "+half+" RENAME TO "+template)
		return err
	})
}

func create(ctx context.Context, conn *pgx.Conn, name, template string) error {
	_, err := conn.Exec(ctx, "CREATE DATABASE "+name+" TEMPLATE "+template+" OWNER "+cluster.Owner)
	return err
}

// migrationsHash names the state of the schema; it changes with any byte of the files.
func migrationsHash() string {
	h := sha256.New()
	err := fs.WalkDir(migrations.Files, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		text, err := fs.ReadFile(migrations.Files, name)
		fmt.Fprintf(h, "%s %d\n%s", name, len(text), text)
		return err
	})
	if err != nil {
		panic(err) // files embedded in this program are always readable
	}
	return hex.EncodeToString(h.Sum(nil)[:8])
}
