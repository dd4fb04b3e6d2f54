package cluster

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

const (
	port         = "5432"                            // only a part of the socket's name
	maxSocket    = 100                               // bytes; the kernel's limit is 107, on macOS 103
	shortPrefix  = "rh-"                             // of a socket folder outside the cluster
	longestInRun = "/run/.s.PGSQL." + port + ".lock" // what the server makes below Dir
)

// openSocketDir makes the folder of the unix socket: run/ in the cluster, or, where that path is too
// long for a socket, a private one under the folder for temporary files, noted in run/where.
func (c *Cluster) openSocketDir(context.Context) error {
	run := filepath.Join(c.dir, "run")
	if err := c.ownDir(run); err != nil {
		return err
	}
	if len(c.dir)+len(longestInRun) <= maxSocket {
		c.socket = run
		return nil
	}
	base, err := c.shortBase()
	if err != nil {
		return err
	}
	if c.socket, err = os.MkdirTemp(base, shortPrefix); err != nil {
		return err
	}
	// Noted before use, so that the next start can clear it away should we be killed.
	return errors.Join(os.WriteFile(c.note(), []byte(c.socket), 0o600), c.ownDir(c.socket))
}

func (c *Cluster) note() string { return filepath.Join(c.dir, "run", "where") }

// shortBase finds a folder for temporary files that the server can enter and that is short enough.
func (c *Cluster) shortBase() (string, error) {
	var first error
	for _, base := range []string{os.TempDir(), "/tmp"} {
		real, err := checkPath(base, c.user)
		if err == nil && len(real)+len("/rh-4294967295/.s.PGSQL."+port+".lock") <= maxSocket {
			return real, nil
		}
		if err == nil {
			err = errors.New(base + " is too long for a socket")
		}
		first = errors.Join(first, err)
	}
	return "", first
}

func (c *Cluster) ownDir(dir string) error {
	if err := os.Mkdir(dir, 0o700); err != nil && !errors.Is(err, fs.ErrExist) {
		return err
	}
	return errors.Join(c.user.own(dir), os.Chmod(dir, 0o700))
}

// closeSocketDir removes a socket folder outside the cluster, ours or a killed predecessor's. Only
// one that has our form and our owner is touched.
func (c *Cluster) closeSocketDir() error {
	noted, err := os.ReadFile(c.note())
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	dir := string(noted)
	info, err := os.Lstat(dir)
	if err == nil && info.IsDir() && owner(info) == c.user.uid && strings.HasPrefix(filepath.Base(dir), shortPrefix) {
		err = errors.Join(removeSockets(dir), os.Remove(dir))
	}
	if err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	return os.Remove(c.note())
}

func removeSockets(dir string) error {
	left, _ := filepath.Glob(filepath.Join(dir, ".s.PGSQL.*"))
	for _, f := range left {
		if err := os.Remove(f); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return err
		}
	}
	return nil
}
