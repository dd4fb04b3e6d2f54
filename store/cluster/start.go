package cluster

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"runtime"
	"slices"
	"strings"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
)

const (
	readyPoll  = 5 * time.Millisecond
	maxLogSize = 8 << 20 // a longer server.log is put aside at the next start
	logTail    = 2000    // bytes of it shown in an error
)

// settings of every server, then those of a throw-away one, then the caller's.
func (c *Cluster) settings() map[string]string {
	all := map[string]string{
		"listen_addresses":        "",
		"unix_socket_directories": c.socket,
		"unix_socket_permissions": "0700",
		"timezone":                "UTC",
		"log_timezone":            "UTC",
		"log_checkpoints":         "off",
	}
	if c.cfg.Throwaway {
		maps.Copy(all, map[string]string{
			"fsync":              "off",
			"synchronous_commit": "off",
			"full_page_writes":   "off",
			"shared_buffers":     "64MB",
			"max_connections":    "400",
			"max_wal_size":       "256MB",
			"autovacuum":         "off",
		})
	}
	maps.Copy(all, c.cfg.Settings)
	return all
}

// boot starts the server and waits until it takes connections.
func (c *Cluster) boot(ctx context.Context) error {
	args := []string{"-D", c.dataDir(), "-p", port}
	all := c.settings()
	for _, name := range slices.Sorted(maps.Keys(all)) {
		args = append(args, "-c", name+"="+all[name])
	}
	log, err := c.openLog()
	if err != nil {
		return err
	}
	defer log.Close()
	c.cmd = c.command(context.WithoutCancel(ctx), "postgres", args...) // ends by Stop, not with ctx
	c.cmd.Stdout, c.cmd.Stderr = log, log
	dieWithParent(c.cmd.SysProcAttr)
	if err := c.spawn(); err != nil {
		c.cmd = nil
		return fmt.Errorf("starting the database server: %w", err)
	}
	return c.waitReady(ctx)
}

// spawn starts the child and reaps it. The death signal is sent when the thread that forked ends, so
// one goroutine keeps that thread for as long as the child lives.
func (c *Cluster) spawn() error {
	started := make(chan error, 1)
	go func() {
		runtime.LockOSThread()
		err := c.cmd.Start()
		started <- err
		if err != nil {
			runtime.UnlockOSThread()
			return
		}
		c.ended(c.cmd.Wait())
	}()
	return <-started
}

// ended notes why the server is gone.
func (c *Cluster) ended(err error) {
	c.mu.Lock()
	if !c.stopping {
		if err == nil {
			err = errors.New("exit status 0")
		}
		c.err = fmt.Errorf("the database server in %s ended by itself: %w\n%s", c.dir, err, c.lastLog())
	}
	c.mu.Unlock()
	close(c.exited)
}

func (c *Cluster) waitReady(ctx context.Context) error {
	tick := time.NewTicker(readyPoll)
	defer tick.Stop()
	for {
		select {
		case <-c.exited:
			return c.Err()
		case <-ctx.Done():
			return fmt.Errorf("waiting for the database server in %s: %w", c.dir, ctx.Err())
		case <-tick.C:
		}
		conn, err := pgx.Connect(ctx, c.DSN(Superuser, "postgres"))
		if err == nil {
			return conn.Close(ctx)
		}
		if said, ok := errors.AsType[*pgconn.PgError](err); ok && strings.HasPrefix(said.Code, "28") {
			return fmt.Errorf("the database server in %s does not let us in: %w", c.dir, err)
		}
	}
}

func (c *Cluster) openLog() (*os.File, error) {
	if info, err := os.Stat(c.logFile()); err == nil && info.Size() > maxLogSize {
		if err := os.Rename(c.logFile(), c.logFile()+".1"); err != nil {
			return nil, err
		}
	}
	f, err := os.OpenFile(c.logFile(), os.O_CREATE|os.O_APPEND|os.O_WRONLY, 0o600)
	if err != nil {
		return nil, err
	}
	if err := c.user.own(c.logFile()); err != nil && !errors.Is(err, fs.ErrPermission) {
		f.Close()
		return nil, err
	}
	return f, nil
}

// lastLog is the end of what the server said, for an error.
func (c *Cluster) lastLog() string {
	text, err := os.ReadFile(c.logFile())
	if err != nil {
		return ""
	}
	return string(text[max(0, len(text)-logTail):])
}
