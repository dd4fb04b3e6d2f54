package cluster

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
	"time"
)

const (
	orphanPoll    = 20 * time.Millisecond
	orphanPatient = 30 * time.Second // for a clean shutdown; then an immediate one
	orphanGiveUp  = 45 * time.Second
)

// reapOrphan ends what a killed program left running on this cluster and then removes the lock files
// it left. We hold the directory's lock, so no living program of ours uses it. The files go only when
// no server process is left: PostgreSQL itself would refuse to start where the noted process number
// has been given to another process, or belongs to one that died but was not reaped.
func (c *Cluster) reapOrphan(ctx context.Context) error {
	pidFile := filepath.Join(c.dataDir(), "postmaster.pid")
	text, err := os.ReadFile(pidFile)
	if errors.Is(err, fs.ErrNotExist) {
		return c.closeSocketDir()
	}
	if err != nil {
		return err
	}
	line, _, _ := strings.Cut(string(text), "\n")
	postmaster, _ := strconv.Atoi(strings.TrimSpace(line)) // 0 when unreadable: then it is none of those found
	if err := c.outlive(ctx, postmaster); err != nil {
		return err
	}
	if err := os.Remove(pidFile); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	return errors.Join(removeSockets(filepath.Join(c.dir, "run")), c.closeSocketDir())
}

// outlive waits until no server process has the cluster open, asking them to end.
func (c *Cluster) outlive(ctx context.Context, postmaster int) error {
	tick := time.NewTicker(orphanPoll)
	defer tick.Stop()
	asked, harsh := false, false
	for start := time.Now(); ; {
		left, err := serverProcesses(c.dataDir(), postmaster)
		if err != nil || len(left) == 0 {
			return err
		}
		waited := time.Since(start)
		switch {
		case waited > orphanGiveUp:
			return fmt.Errorf("server processes %v still use %s: end them and start again", left, c.dataDir())
		case waited > orphanPatient && !harsh:
			harsh = true
			send(left, syscall.SIGQUIT)
		case !asked:
			asked = true
			c.cfg.Logf("ending the database server that a killed program left (processes %v)", left)
			send([]int{postmaster}, syscall.SIGINT)
		}
		select {
		case <-ctx.Done():
			return ctx.Err()
		case <-tick.C:
		}
	}
}

func send(pids []int, s syscall.Signal) {
	for _, pid := range pids {
		if pid > 1 {
			_ = syscall.Kill(pid, s) // gone already: that is what we want
		}
	}
}
