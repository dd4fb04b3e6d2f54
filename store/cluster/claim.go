package cluster

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
)

const lockName = "ratehouse.lock"

// What the lock file says, and by that whether the data may be thrown away.
const (
	lastingText   = "The private PostgreSQL of Ratehouse. While this file is locked, a running program uses this directory.\n"
	throwawayText = "A throw-away PostgreSQL of Ratehouse's tests. Nothing in this directory is worth keeping.\n"
)

// claim checks the directory, makes it if it is missing, and takes it for the life of this process.
func (c *Cluster) claim() error {
	if c.cfg.Dir == "" {
		return errors.New("no directory given for the private database")
	}
	abs, err := filepath.Abs(c.cfg.Dir)
	if err != nil {
		return err
	}
	if c.user, err = serverAccount(abs); err != nil {
		return err
	}
	if c.dir, err = checkPath(abs, c.user); err != nil {
		return fmt.Errorf("data directory %s: %w", c.cfg.Dir, err)
	}
	if _, err = checkPath(c.cfg.Bin, c.user); err != nil {
		return fmt.Errorf("server programs in %s: %w", c.cfg.Bin, err)
	}
	if err = c.checkOurs(); err != nil {
		return err
	}
	if err = c.makeDir(); err != nil {
		return err
	}
	return c.takeLock()
}

// checkOurs refuses a directory that holds anything but a cluster of ours.
func (c *Cluster) checkOurs() error {
	entries, err := os.ReadDir(c.dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return fmt.Errorf("data directory: %w", err)
	}
	if len(entries) == 0 {
		return nil
	}
	if _, err := os.Lstat(c.lockFile()); err == nil {
		return nil
	}
	return fmt.Errorf("%s holds other files (%s) and no database of Ratehouse; nothing in it was touched: "+
		"choose an empty or a new directory", c.dir, entries[0].Name())
}

func (c *Cluster) makeDir() error {
	if err := c.makeAbove(); err != nil {
		return err
	}
	if err := os.Mkdir(c.dir, 0o700); err != nil && !errors.Is(err, fs.ErrExist) {
		return err
	}
	info, err := os.Stat(c.dir)
	if err != nil {
		return err
	}
	if owner(info) != c.user.uid {
		if c.user.cred == nil || owner(info) != 0 {
			return fmt.Errorf("%s belongs to user %s: start as that user or as root, or choose another data directory", c.dir, nameOf(owner(info)))
		}
		if err := c.user.own(c.dir); err != nil {
			return err
		}
	}
	return os.Chmod(c.dir, 0o700)
}

// makeAbove makes the missing folders above the cluster. They stay ours; the server may pass through
// them whatever this process's umask, not look.
func (c *Cluster) makeAbove() error {
	for _, part := range components(filepath.Dir(c.dir)) {
		err := os.Mkdir(part, 0o711)
		if err == nil {
			err = os.Chmod(part, 0o711)
		}
		if err != nil && !errors.Is(err, fs.ErrExist) && !isDir(part) { // a read-only system says so even of what exists
			return err
		}
	}
	return nil
}

// takeLock marks the directory as ours and locks it. The kernel drops the lock with this process,
// however it dies, so a held lock means a living owner.
func (c *Cluster) takeLock() error {
	f, err := os.OpenFile(c.lockFile(), os.O_CREATE|os.O_RDWR|syscall.O_NOFOLLOW, 0o600)
	if err != nil {
		return err
	}
	if err := syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB); err != nil {
		f.Close()
		if errors.Is(err, syscall.EWOULDBLOCK) {
			return fmt.Errorf("data directory %s is %w: stop that one first, or choose another data directory", c.dir, ErrInUse)
		}
		return fmt.Errorf("data directory %s cannot be locked: %w", c.dir, err)
	}
	c.lock = f
	return c.mark()
}

// mark writes into the lock file what kind of cluster this is, and refuses one of the other kind: a
// test must not run on data worth keeping, nor a laboratory on a server that forgets.
func (c *Cluster) mark() error {
	said, err := os.ReadFile(c.lockFile())
	if err != nil {
		return err
	}
	mine := lastingText
	if c.cfg.Throwaway {
		mine = throwawayText
	}
	if len(said) == 0 {
		_, err = c.lock.WriteString(mine)
		return errors.Join(err, c.user.own(c.lockFile()))
	}
	if throwaway := string(said) == throwawayText; throwaway != c.cfg.Throwaway {
		return fmt.Errorf("%s holds another kind of database (its %s says: %s); nothing in it was touched: choose another data directory",
			c.dir, lockName, strings.TrimSpace(string(said)))
	}
	return nil
}

// release unlocks before it closes: a program just being started by another goroutine may still hold
// a copy of the open file.
func (c *Cluster) release() {
	if c.lock != nil {
		_ = syscall.Flock(int(c.lock.Fd()), syscall.LOCK_UN)
		c.lock.Close()
		c.lock = nil
	}
}

// checkData refuses a database made by another major version of PostgreSQL or by another account.
func (c *Cluster) checkData(ctx context.Context) error {
	info, err := os.Lstat(c.dataDir())
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	if owner(info) != c.user.uid {
		return fmt.Errorf("%s belongs to user %s, but the database server runs as %s: give it back (chown -R %s %s)",
			c.dataDir(), nameOf(owner(info)), c.user.name, c.user.name, quoteShell(c.dataDir()))
	}
	made, err := os.ReadFile(filepath.Join(c.dataDir(), "PG_VERSION"))
	if err != nil {
		return fmt.Errorf("%s is not a PostgreSQL database; nothing in it was touched: restore it from a backup, or choose another data directory: %w", c.dataDir(), err)
	}
	have, err := serverMajor(ctx, c.cfg.Bin)
	if err != nil {
		return err
	}
	if was := strings.TrimSpace(string(made)); was != have {
		return fmt.Errorf("%s was made by PostgreSQL %s, but the programs in %s are PostgreSQL %s; nothing in it was touched: "+
			"set PG_BIN to the programs of version %s, or restore a backup into a new directory", c.dataDir(), was, c.cfg.Bin, have, was)
	}
	return nil
}

// serverMajor asks the server program for its major version, such as "15".
func serverMajor(ctx context.Context, bin string) (string, error) {
	out, err := exec.CommandContext(ctx, filepath.Join(bin, "postgres"), "--version").Output()
	if err != nil {
		return "", fmt.Errorf("%s does not run: %w", filepath.Join(bin, "postgres"), err)
	}
	// "postgres (PostgreSQL) 15.18 (Debian 15.18-0+deb12u1)", "postgres (PostgreSQL) 19beta1"
	_, version, _ := strings.Cut(string(out), "(PostgreSQL) ")
	major := digits.FindString(version)
	if major == "" {
		return "", fmt.Errorf("%s: unknown version %q", filepath.Join(bin, "postgres"), strings.TrimSpace(string(out)))
	}
	return major, nil
}
