package cluster

import (
	"context"
	"errors"
	"fmt"
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

// abandon undoes a Start that failed half-way.
func (c *Cluster) abandon() error {
	if c.cmd == nil {
		return c.closeSocketDir()
	}
	return c.Stop(context.Background())
}

func gone(exited <-chan struct{}) bool {
	select {
	case <-exited:
		return true
	default:
		return false
	}
}
