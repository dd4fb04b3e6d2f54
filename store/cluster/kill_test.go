package cluster

import (
	"bufio"
	"context"
	"fmt"
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"
)

const (
	programDir    = "RATEHOUSE_TEST_CLUSTER" // set: this binary is the program, on that directory
	programOrphan = "RATEHOUSE_TEST_ORPHAN"  // set: it leaves its server behind
	enoughRows    = 300                      // acknowledged before the kill
)

// TestMain turns this binary into the program that the kill tests kill.
func TestMain(m *testing.M) {
	if dir := os.Getenv(programDir); dir != "" {
		if err := program(dir); err != nil {
			fmt.Println("error", err)
			os.Exit(1)
		}
		os.Exit(0)
	}
	os.Exit(m.Run())
}

// program starts the cluster and writes rows for ever, printing each number once its commit is
// acknowledged.
func program(dir string) error {
	if os.Getenv(programOrphan) != "" {
		leaveServer()
	}
	ctx, cancel := signal.NotifyContext(context.Background(), syscall.SIGTERM)
	defer cancel()
	c, err := Start(ctx, Config{Dir: dir})
	if err != nil {
		return err
	}
	conn, err := pgx.Connect(ctx, c.DSN(Superuser, "postgres"))
	if err != nil {
		return err
	}
	if _, err := conn.Exec(ctx, "CREATE TABLE IF NOT EXISTS kept (n bigint PRIMARY KEY)"); err != nil {
		return err
	}
	var n int64
	if err := conn.QueryRow(ctx, "SELECT coalesce(max(n), 0) FROM kept").Scan(&n); err != nil {
		return err
	}
	for {
		n++
		if _, err := conn.Exec(ctx, "INSERT INTO kept VALUES ($1)", n); err != nil {
			if ctx.Err() != nil {
				return c.Stop(context.Background())
			}
			return err
		}
		fmt.Println(n)
	}
}

// begin runs the program until it has had enough commits acknowledged; acked gives all that it
// printed, once it has ended.
func begin(t *testing.T, cmd *exec.Cmd) (acked func() []int64) {
	t.Helper()
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	cmd.Stderr = os.Stderr
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { cmd.Process.Kill() })
	var rows []int64
	enough, done := make(chan struct{}), make(chan struct{})
	go func() {
		defer close(done)
		for lines := bufio.NewScanner(out); lines.Scan(); {
			n, err := strconv.ParseInt(lines.Text(), 10, 64)
			if err != nil {
				t.Error("the program says:", lines.Text())
				continue
			}
			if rows = append(rows, n); len(rows) == enoughRows {
				close(enough)
			}
		}
	}()
	select {
	case <-enough:
	case <-done:
		t.Fatalf("the program ended after %d rows", len(rows))
	}
	return func() []int64 {
		<-done
		_ = cmd.Wait() // it was killed: an error is what we expect
		return rows
	}
}

func self(t *testing.T, dir string, env ...string) *exec.Cmd {
	t.Helper()
	exe, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(exe)
	cmd.Env = append(append(os.Environ(), programDir+"="+dir), env...)
	return cmd
}

func postmaster(t *testing.T, dir string) int {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, "data", "postmaster.pid"))
	if err != nil {
		t.Fatal(err)
	}
	line, _, _ := strings.Cut(string(text), "\n")
	pid, err := strconv.Atoi(line)
	if err != nil {
		t.Fatal(err)
	}
	return pid
}

// holds wants every acknowledged row in the cluster; each of so many kills may have had one more
// commit under way.
func holds(t *testing.T, c *Cluster, acked []int64, kills int) {
	t.Helper()
	rows, err := connect(t, c.DSN(Superuser, "postgres")).Query(t.Context(), "SELECT n FROM kept ORDER BY n")
	if err != nil {
		t.Fatal(err)
	}
	have, err := pgx.CollectRows(rows, pgx.RowTo[int64])
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range acked {
		if _, found := slices.BinarySearch(have, n); !found {
			t.Errorf("row %d was acknowledged and is lost", n)
		}
	}
	if len(have) > len(acked)+kills {
		t.Errorf("%d rows for %d acknowledged", len(have), len(acked))
	}
}

// kill -9 of the database: the program is told at once, and the next start has every acknowledged row.
func TestKillDatabase(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	c := start(t, Config{Dir: dir})
	conn := connect(t, c.DSN(Superuser, "postgres"))
	if _, err := conn.Exec(t.Context(), "CREATE TABLE kept (n bigint PRIMARY KEY)"); err != nil {
		t.Fatal(err)
	}
	var acked []int64
	for n := int64(1); ; n++ {
		if n == enoughRows {
			kill(t, postmaster(t, dir))
		}
		if _, err := conn.Exec(t.Context(), "INSERT INTO kept VALUES ($1)", n); err != nil {
			break
		}
		acked = append(acked, n)
		if n > 100*enoughRows {
			t.Fatal("the database takes rows although it was killed")
		}
	}
	<-c.Done()
	if err := c.Err(); err == nil || !strings.Contains(err.Error(), "ended by itself: signal: killed") {
		t.Errorf("after the kill: %v", err)
	}
	stop(t, c)
	holds(t, start(t, Config{Dir: dir}), acked, 1)
}

// kill -9 of the program: its server ends by itself, cleanly, and nothing is lost.
func TestKillProgram(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	cmd := self(t, dir)
	acked := begin(t, cmd)
	refused(t, Config{Dir: dir}, ErrInUse.Error())
	server := postmaster(t, dir)
	kill(t, cmd.Process.Pid)
	rows := acked()
	if diesWithParent {
		for deadline := time.Now().Add(20 * time.Second); syscall.Kill(server, 0) == nil && isServer(t, dir, server); {
			if time.Now().After(deadline) {
				t.Fatal("the server outlived its program")
			}
			<-time.After(orphanPoll)
		}
	}
	holds(t, start(t, Config{Dir: dir}), rows, 1)
}

// kill -9 of the program where nothing takes its server along: the next start ends it first.
func TestKillProgramLeavingServer(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	cmd := self(t, dir, programOrphan+"=1")
	acked := begin(t, cmd)
	server := postmaster(t, dir)
	kill(t, cmd.Process.Pid)
	rows := acked()
	if !isServer(t, dir, server) {
		t.Fatal("the server went with its program: this test shows nothing")
	}
	holds(t, start(t, Config{Dir: dir}), rows, 1)
	if isServer(t, dir, server) {
		t.Error("the old server still runs")
	}
}

// kill -9 of both at once, three times over on the same data, restarted at once.
func TestKillBoth(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), strings.Repeat("long-", 20), "db")
	var rows []int64
	for range 3 {
		cmd := self(t, dir)
		acked := begin(t, cmd)
		server := postmaster(t, dir)
		kill(t, cmd.Process.Pid)
		kill(t, server)
		rows = append(rows, acked()...)
	}
	noted, err := os.ReadFile(filepath.Join(dir, "run", "where"))
	if err != nil {
		t.Fatal(err)
	}
	c := start(t, Config{Dir: dir})
	holds(t, c, rows, 3)
	if _, err := os.Lstat(string(noted)); err == nil {
		t.Errorf("the killed server's socket folder %s is left", noted)
	}
}

// A lock file of a dead server whose number now belongs to another living process of the same
// account would keep PostgreSQL itself from starting.
func TestStaleLockFile(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	c := start(t, Config{Dir: dir})
	stop(t, c)
	other := exec.Command("sleep", "60")
	other.SysProcAttr = &syscall.SysProcAttr{Credential: c.user.cred}
	if err := other.Start(); err != nil {
		t.Fatal(err)
	}
	defer func() { other.Process.Kill(); other.Wait() }()
	stale := fmt.Sprintf("%d\n%s\n1700000000\n5432\n%s\n\n  0  0\nready\n", other.Process.Pid, filepath.Join(dir, "data"), c.socket)
	for _, f := range []string{filepath.Join(dir, "data", "postmaster.pid"), filepath.Join(c.socket, ".s.PGSQL.5432.lock")} {
		if err := os.WriteFile(f, []byte(stale), 0o600); err != nil {
			t.Fatal(err)
		}
		if err := c.user.own(f); err != nil {
			t.Fatal(err)
		}
	}
	start(t, Config{Dir: dir})
	if syscall.Kill(other.Process.Pid, 0) != nil {
		t.Error("the other process was ended")
	}
}

// Run by an ordinary account: everything is its own, and what it may not write is named.
func TestOrdinaryUser(t *testing.T) {
	t.Parallel()
	if os.Geteuid() != 0 {
		t.Skip("already an ordinary user: the other tests show it")
	}
	base := tempDir(t)
	nobody, err := ownerNamed("nobody")
	if err != nil {
		t.Skip(err)
	}
	open := filepath.Join(base, "open")
	if err := os.Mkdir(open, 0o700); err != nil {
		t.Fatal(err)
	}
	if err := nobody.own(open); err != nil {
		t.Fatal(err)
	}
	exe := filepath.Join(base, "program")
	if out, err := exec.Command("cp", mustExecutable(t), exe).CombinedOutput(); err != nil {
		t.Fatal(err, string(out))
	}
	as := func(dir string) *exec.Cmd {
		cmd := exec.Command(exe)
		cmd.Dir = "/"
		cmd.Env = append(os.Environ(), programDir+"="+dir)
		cmd.SysProcAttr = &syscall.SysProcAttr{Credential: nobody.cred}
		return cmd
	}
	cmd := as(filepath.Join(open, "db"))
	acked := begin(t, cmd)
	if err := cmd.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	rows := acked()
	holds(t, start(t, Config{Dir: filepath.Join(open, "db")}), rows, 1) // root takes over as the owner
	for dir, word := range map[string]string{
		filepath.Join(base, "new", "db"): filepath.Join(base, "new") + " cannot be made: user nobody may not write in " + base,
		filepath.Join(base, "root"):      filepath.Join(base, "root") + " cannot be made",
	} {
		if out, err := as(dir).Output(); err == nil || !strings.Contains(string(out), word) {
			t.Errorf("%s: %s %v", dir, out, err)
		}
	}
}

func kill(t *testing.T, pid int) {
	t.Helper()
	if err := syscall.Kill(pid, syscall.SIGKILL); err != nil {
		t.Fatal(err)
	}
}

func isServer(t *testing.T, dir string, pid int) bool {
	t.Helper()
	left, err := serverProcesses(filepath.Join(dir, "data"), pid)
	if err != nil {
		t.Fatal(err)
	}
	return slices.Contains(left, pid)
}

func mustExecutable(t *testing.T) string {
	t.Helper()
	exe, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	return exe
}
