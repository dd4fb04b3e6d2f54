package cluster

import (
	"context"
	"errors"
	"fmt"
	"os"
	"syscall"
	"time"
)

// Stop shuts the server down cleanly, with more force when that takes over half a minute or ctx
// ends, and gives the directory free. Stopping a stopped cluster does nothing.
func (c *Cluster) Stop(ctx context.Context) error {
	c.mu.Lock()
	if c.stopping {
		c.mu.Unlock()
		<-c.exited
		return nil
	}
	c.stopping = true
	c.mu.Unlock()
	err := c.end(ctx)
	err = errors.Join(err, c.closeSocketDir())
	c.release()
	return err
}

// end sends ever harsher signals until the server is gone: fast shutdown, immediate shutdown, kill.
func (c *Cluster) end(ctx context.Context) error {
	for _, try := range []struct {
		signal  syscall.Signal
		patient time.Duration
	}{{syscall.SIGINT, 30 * time.Second}, {syscall.SIGQUIT, 5 * time.Second}, {syscall.SIGKILL, 5 * time.Second}} {
		_ = c.cmd.Process.Signal(try.signal) // fails only when it is already gone
		wait, cancel := context.WithTimeout(context.WithoutCancel(ctx), try.patient)
		stopWatching := func() bool { return false }
		if try.signal == syscall.SIGINT {
			stopWatching = context.AfterFunc(ctx, cancel)
		}
		select {
		case <-c.exited:
		case <-wait.Done():
		}
		stopWatching()
		cancel()
		if gone(c.exited) {
			return nil
		}
	}
	return fmt.Errorf("the database server in %s (process %d) does not end", c.dir, c.cmd.Process.Pid)
}

// abandon ends what a start that failed half-way left; the directory stays ours.
func (c *Cluster) abandon() error {
	var err error
	if c.cmd != nil {
		c.mu.Lock()
		c.stopping = true
		c.mu.Unlock()
		err = c.end(context.Background())
	}
	return errors.Join(err, c.closeSocketDir())
}

// anew throws a throw-away cluster's data away and starts once more: without durability, a machine
// that was switched off may have left it broken.
func (c *Cluster) anew(ctx context.Context) error {
	if err := c.reapOrphan(ctx); err != nil {
		return err
	}
	if err := os.RemoveAll(c.dataDir()); err != nil {
		return err
	}
	c.cmd, c.stopping, c.err, c.exited = nil, false, nil, make(chan struct{})
	return c.run(ctx)
}

func gone(exited <-chan struct{}) bool {
	select {
	case <-exited:
		return true
	default:
		return false
	}
}
