package cluster

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
)

// RunningDSN is the connection string of a role and a database on the private server that another
// living program has open in dir (see ErrInUse): a second command may work beside a running service.
func RunningDSN(dir, role, db string) (string, error) {
	abs, err := filepath.Abs(dir)
	if err != nil {
		return "", err
	}
	if abs, err = filepath.EvalSymlinks(abs); err != nil {
		return "", err
	}
	c := &Cluster{dir: abs, socket: filepath.Join(abs, "run")}
	noted, err := os.ReadFile(c.note())
	switch {
	case err == nil:
		c.socket = string(noted)
	case !errors.Is(err, fs.ErrNotExist):
		return "", err
	}
	return c.DSN(role, db), nil
}
