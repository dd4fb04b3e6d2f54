package cluster

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
)

// Roles of the private server. Start creates the last three; each may log in from the account the
// server runs as and from root, and from no other.
const (
	Superuser = "postgres" // PostgreSQL's own; for making databases only
	Owner     = "rh_owner" // owns the databases and their schema; migrates and restores
	App       = "rh_app"   // what serve uses; cannot rewrite evidence
	Read      = "rh_read"  // reports and checks; reads only
)

// ErrInUse says that another living program has the cluster open.
var ErrInUse = errors.New("in use by another running program")

// Config says which PostgreSQL to run where.
type Config struct {
	Bin       string            // folder of the server programs; empty: FindBin looks for them
	Dir       string            // the cluster's directory; made when missing
	Throwaway bool              // no durability at all: for tests and validation
	Settings  map[string]string // further server settings, by PostgreSQL's names
	Logf      func(format string, args ...any)
}

// Cluster is a running private server.
type Cluster struct {
	cfg    Config
	dir    string // cfg.Dir, absolute and without symbolic links
	socket string // folder of the unix socket
	user   account
	lock   *os.File
	cmd    *exec.Cmd
	exited chan struct{} // closed when the server has been reaped

	mu       sync.Mutex
	stopping bool
	err      error // why the server ended, unless it was asked to
}

// Start makes the cluster on first use, recovers it where an earlier program died, and returns when
// it takes connections. The server is a child of this process and is shut down with it. Errors name
// the file or setting at fault and what to do; the directory is then as it was.
func Start(ctx context.Context, cfg Config) (_ *Cluster, err error) {
	if cfg.Logf == nil {
		cfg.Logf = func(string, ...any) {}
	}
	c := &Cluster{cfg: cfg, exited: make(chan struct{})}
	if c.cfg.Bin, err = FindBin(cfg.Bin); err != nil {
		return nil, err
	}
	if err = c.claim(); err != nil {
		c.release()
		return nil, err
	}
	err = c.run(ctx)
	if err != nil && cfg.Throwaway && ctx.Err() == nil {
		c.cfg.Logf("making the throw-away database anew: %v", err)
		err = c.anew(ctx)
	}
	if err != nil {
		c.release()
		return nil, err
	}
	return c, nil
}

// run brings the claimed directory's server up, or leaves nothing running.
func (c *Cluster) run(ctx context.Context) error {
	for _, step := range []func(context.Context) error{
		c.checkData, c.reapOrphan, c.openSocketDir, c.initialise, c.boot, c.ensureRoles,
	} {
		if err := step(ctx); err != nil {
			return errors.Join(err, c.abandon())
		}
	}
	return nil
}

// DSN is the connection string of a role and a database on this server, for any client on this
// machine that runs as root or as the server's account.
func (c *Cluster) DSN(role, db string) string {
	return fmt.Sprintf("host=%s port=%s user=%s dbname=%s sslmode=disable", quote(c.socket), port, quote(role), quote(db))
}

// quote writes a value of a connection string; plain ones stay as they are.
func quote(v string) string {
	if v != "" && !strings.ContainsAny(v, ` '\`) {
		return v
	}
	return "'" + strings.NewReplacer(`\`, `\\`, `'`, `\'`).Replace(v) + "'"
}

// Done is closed when the server has ended, wanted or not.
func (c *Cluster) Done() <-chan struct{} { return c.exited }

// Err says why the server ended; nil while it runs and after Stop.
func (c *Cluster) Err() error {
	c.mu.Lock()
	defer c.mu.Unlock()
	return c.err
}

func (c *Cluster) dataDir() string  { return filepath.Join(c.dir, "data") }
func (c *Cluster) logFile() string  { return filepath.Join(c.dir, "server.log") }
func (c *Cluster) lockFile() string { return filepath.Join(c.dir, lockName) }
