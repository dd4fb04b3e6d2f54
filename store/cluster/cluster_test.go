package cluster

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
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
	t.Cleanup(func() { stop(t, c) })
	return c
}

func stop(t *testing.T, c *Cluster) {
	t.Helper()
	if err := c.Stop(context.WithoutCancel(t.Context())); err != nil {
		t.Error(err)
	}
}

// refused wants an error that says all of the words.
func refused(t *testing.T, cfg Config, words ...string) {
	t.Helper()
	c, err := Start(t.Context(), cfg)
	if err == nil {
		stop(t, c)
		t.Fatalf("started in %s", cfg.Dir)
	}
	for _, w := range words {
		if !strings.Contains(err.Error(), w) {
			t.Errorf("the refusal does not say %q: %v", w, err)
		}
	}
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

func ask[T any](t *testing.T, c *Cluster, query string) (answer T) {
	t.Helper()
	conn, err := pgx.Connect(t.Context(), c.DSN(Superuser, "postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.WithoutCancel(t.Context()))
	if err := conn.QueryRow(t.Context(), query).Scan(&answer); err != nil {
		t.Fatal(query, err)
	}
	return answer
}

func run(t *testing.T, c *Cluster, sql string) {
	t.Helper()
	if _, err := connect(t, c.DSN(Superuser, "postgres")).Exec(t.Context(), sql); err != nil {
		t.Fatal(sql, err)
	}
}

// The three roles log in without a password and are nobody special; only the owner can build.
func TestRoles(t *testing.T) {
	t.Parallel()
	c := start(t, Config{Dir: filepath.Join(tempDir(t), "above", "it's here"), Throwaway: true})
	for range 2 { // making it twice changes nothing
		if err := c.EnsureDatabase(t.Context(), "lab"); err != nil {
			t.Fatal(err)
		}
	}
	for _, role := range []string{Owner, App, Read} {
		conn := connect(t, c.DSN(role, "lab"))
		var who, super string
		if err := conn.QueryRow(t.Context(), "SELECT current_user, current_setting('is_superuser')").Scan(&who, &super); err != nil {
			t.Fatal(err)
		}
		if who != role || super != "off" {
			t.Errorf("logged in as %s (superuser %s), want %s", who, super, role)
		}
		if _, err := conn.Exec(t.Context(), "CREATE SCHEMA mine"); (err == nil) != (role == Owner) {
			t.Errorf("%s makes a schema: %v", role, err)
		}
	}
	// Another command of the same account finds the running server.
	if dsn, err := RunningDSN(c.cfg.Dir, App, "lab"); err != nil || dsn != c.DSN(App, "lab") {
		t.Errorf("%s is found as %s, %v", c.DSN(App, "lab"), dsn, err)
	}
	run(t, c, "CREATE ROLE somebody LOGIN")
	if _, err := pgx.Connect(t.Context(), c.DSN("somebody", "lab")); err == nil {
		t.Error("a role that is not of the house logged in")
	}
}

// Nothing listens on TCP, the socket is closed to other accounts, and commits are durable.
func private(t *testing.T, c *Cluster) {
	t.Helper()
	for name, want := range map[string]string{
		"listen_addresses": "", "fsync": "on", "synchronous_commit": "on", "full_page_writes": "on",
		"data_checksums": "on", "server_encoding": "UTF8", "TimeZone": "UTC", "work_mem": "5MB",
	} {
		if got := ask[string](t, c, "SELECT current_setting('"+name+"')"); got != want {
			t.Errorf("%s = %q, want %q", name, got, want)
		}
	}
	for _, dir := range []string{c.dir, c.socket} {
		if info, err := os.Stat(dir); err != nil || info.Mode().Perm() != 0o700 || owner(info) != c.user.uid {
			t.Errorf("%s: %v, owner %d, %v", dir, info.Mode(), owner(info), err)
		}
	}
}

// A clean stop keeps the data, leaves no lock or socket, and gives the directory free.
func TestStopAndStart(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	c := start(t, Config{Dir: dir, Settings: map[string]string{"work_mem": "5MB"}})
	private(t, c)
	run(t, c, "CREATE TABLE kept AS SELECT 7 AS n")
	refused(t, Config{Dir: dir}, dir, ErrInUse.Error())
	if _, err := Start(t.Context(), Config{Dir: dir}); !errors.Is(err, ErrInUse) {
		t.Errorf("%v is not ErrInUse", err)
	}
	for range 2 {
		stop(t, c)
	}
	if err := c.Err(); err != nil {
		t.Errorf("after Stop: %v", err)
	}
	for _, f := range []string{"data/postmaster.pid", "run/.s.PGSQL.5432"} {
		if _, err := os.Lstat(filepath.Join(dir, f)); !errors.Is(err, fs.ErrNotExist) {
			t.Errorf("%s is left: %v", f, err)
		}
	}
	if n := ask[int](t, start(t, Config{Dir: dir}), "SELECT n FROM kept"); n != 7 {
		t.Errorf("kept %d", n)
	}
}

// A start that is called off half-way, has a setting that PostgreSQL refuses, or finds itself locked
// out leaves nothing running and the directory usable.
func TestStartFails(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := Start(ctx, Config{Dir: dir}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
	// What a killed initdb leaves must not matter, whatever it is.
	if err := os.MkdirAll(filepath.Join(dir, "data.init", "base"), 0o700); err != nil {
		t.Fatal(err)
	}
	refused(t, Config{Dir: dir, Settings: map[string]string{"work_mem": "plenty"}}, "work_mem", "plenty")
	refused(t, Config{Dir: dir, Settings: map[string]string{"ident_file": os.DevNull}}, "does not let us in")
	if left, err := serverProcesses(filepath.Join(dir, "data"), 0); err != nil || len(left) > 0 {
		t.Errorf("still running: %v %v", left, err)
	}
	start(t, Config{Dir: dir})
}

// Where the path is too long for a socket, a short private folder is used and cleared away.
func TestLongPath(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), strings.Repeat("long-", 30), "db")
	c := start(t, Config{Dir: dir, Throwaway: true})
	if strings.HasPrefix(c.socket, dir) {
		t.Fatalf("the socket is in %s", c.socket)
	}
	if info, err := os.Lstat(c.socket); err != nil || info.Mode().Perm() != 0o700 || owner(info) != c.user.uid {
		t.Errorf("%s: %v %v", c.socket, info, err)
	}
	dsn, err := RunningDSN(dir, Superuser, "postgres")
	if err != nil || dsn != c.DSN(Superuser, "postgres") {
		t.Errorf("%s is found as %s, %v", c.DSN(Superuser, "postgres"), dsn, err)
	}
	if n := ask[int](t, c, "SELECT 1"); n != 1 {
		t.Error(n)
	}
	stop(t, c)
	if _, err := os.Lstat(c.socket); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("%s is left", c.socket)
	}
}

// Only the databases of the prefix are dropped, and the one to keep stays.
func TestKeepOnly(t *testing.T) {
	t.Parallel()
	c := start(t, Config{Dir: filepath.Join(tempDir(t), "db"), Throwaway: true})
	for _, name := range []string{"demo_1", "demo_2", "lab"} {
		if err := c.EnsureDatabase(t.Context(), name); err != nil {
			t.Fatal(err)
		}
	}
	if err := c.KeepOnly(t.Context(), "demo_", "demo_2"); err != nil {
		t.Fatal(err)
	}
	left := ask[string](t, c, "SELECT string_agg(datname, ' ' ORDER BY datname) FROM pg_database WHERE NOT datistemplate")
	if left != "demo_2 lab postgres" {
		t.Errorf("left: %s", left)
	}
}

// A throw-away database that does not start is made anew, and is not used as a lasting one.
func TestThrowaway(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	c := start(t, Config{Dir: dir, Throwaway: true})
	if got := ask[string](t, c, "SELECT current_setting('fsync')"); got != "off" {
		t.Errorf("fsync = %s", got)
	}
	stop(t, c)
	refused(t, Config{Dir: dir}, dir, "another kind", "throw-away")
	if err := os.Remove(filepath.Join(dir, "data", "global", "pg_control")); err != nil {
		t.Fatal(err)
	}
	start(t, Config{Dir: dir, Throwaway: true})
}
