package storetest

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sync"
	"syscall"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/cluster"
)

const (
	slots       = 64 // test processes at once
	startWithin = 2 * time.Minute
)

// Server is the throw-away PostgreSQL of this test process: started at first use, without any
// durability, and shut down with the process. Its directory is one of a few slots under the folder
// for temporary files, each locked by the process that uses it and taken over warm by the next, so
// that nothing piles up and packages tested side by side never meet.
func Server(t testing.TB) *cluster.Cluster {
	t.Helper()
	c, err := server()
	if err != nil {
		t.Fatal(err)
	}
	return c
}

var server = sync.OnceValues(func() (*cluster.Cluster, error) {
	ctx, cancel := context.WithTimeout(context.Background(), startWithin)
	defer cancel()
	base, err := slotDir()
	if err != nil {
		return nil, err
	}
	for slot := range slots {
		c, err := cluster.Start(ctx, cluster.Config{Dir: filepath.Join(base, fmt.Sprint(slot)), Throwaway: true})
		if errors.Is(err, cluster.ErrInUse) {
			continue
		}
		if err != nil {
			return nil, fmt.Errorf("test database: %w", err)
		}
		return c, tidy(ctx, c)
	}
	return nil, fmt.Errorf("test database: all %d slots in %s are in use by running tests", slots, base)
})

// slotDir is a folder of this account's own: its name can be guessed, so its owner is checked.
func slotDir() (string, error) {
	dir := filepath.Join(os.TempDir(), fmt.Sprintf("ratehouse-test-%d", os.Geteuid()))
	if err := os.Mkdir(dir, 0o711); err != nil && !errors.Is(err, os.ErrExist) {
		return "", err
	}
	info, err := os.Lstat(dir)
	if err != nil {
		return "", err
	}
	if !info.IsDir() || int(info.Sys().(*syscall.Stat_t).Uid) != os.Geteuid() {
		return "", fmt.Errorf("test database: %s is not a folder of this account: remove it or set TMPDIR", dir)
	}
	return dir, os.Chmod(dir, 0o711)
}

// tidy drops what earlier test processes left on a server just taken over.
func tidy(ctx context.Context, c *cluster.Cluster) error {
	return superuser(ctx, c, func(conn *pgx.Conn) error {
		rows, err := conn.Query(ctx, `SELECT datname FROM pg_database WHERE NOT datistemplate AND datname NOT IN ('postgres', $1)`, template)
		if err != nil {
			return err
		}
		left, err := pgx.CollectRows(rows, pgx.RowTo[string])
		if err != nil {
			return err
		}
		for _, name := range left {
			if err := drop(ctx, conn, name); err != nil {
				return err
			}
		}
		return nil
	})
}

func superuser(ctx context.Context, c *cluster.Cluster, work func(*pgx.Conn) error) error {
	conn, err := pgx.Connect(ctx, c.DSN(cluster.Superuser, "postgres"))
	if err != nil {
		return err
	}
	return errors.Join(work(conn), conn.Close(ctx))
}

func drop(ctx context.Context, conn *pgx.Conn, name string) error {
	_, err := conn.Exec(ctx, "DROP DATABASE IF EXISTS "+pgx.Identifier{name}.Sanitize()+" WITH (FORCE)")
	return err
}
