package cluster

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"syscall"
)

// initialise makes the database on first use, and writes who may log in each time.
func (c *Cluster) initialise(ctx context.Context) error {
	if _, err := os.Lstat(c.dataDir()); errors.Is(err, fs.ErrNotExist) {
		if err := c.initdb(ctx); err != nil {
			return err
		}
	} else if err != nil {
		return err
	}
	return c.writeAccess(c.dataDir())
}

// initdb works in another folder and renames it when whole: one that was killed half-way leaves
// nothing that looks like a database.
func (c *Cluster) initdb(ctx context.Context) error {
	half := c.dataDir() + ".init"
	if err := os.RemoveAll(half); err != nil {
		return err
	}
	args := []string{"-D", half, "-U", Superuser, "--encoding=UTF8", "--locale=" + initLocale, "--auth=reject", "--data-checksums"}
	if c.cfg.Throwaway {
		args = append(args, "--no-sync")
	}
	if out, err := c.command(ctx, "initdb", args...).CombinedOutput(); err != nil {
		return fmt.Errorf("making the database in %s: %w\n%s", c.dir, err, out)
	}
	if err := os.Rename(half, c.dataDir()); err != nil {
		return err
	}
	return syncDir(c.dir)
}

// writeAccess lets root and the server's account be any of our roles: the kernel says who is at the
// other end of the socket, so there is no password to keep.
func (c *Cluster) writeAccess(data string) error {
	ident := ""
	for _, role := range []string{Superuser, Owner, App, Read} {
		ident += "house root " + role + "\n"
		if c.user.name != "root" {
			ident += fmt.Sprintf("house %q %s\n", c.user.name, role)
		}
	}
	for name, text := range map[string]string{"pg_hba.conf": "local all all peer map=house\n", "pg_ident.conf": ident} {
		path := filepath.Join(data, name)
		if err := errors.Join(os.WriteFile(path, []byte(text), 0o600), c.user.own(path)); err != nil {
			return err
		}
	}
	return nil
}

// command prepares a server program with a small environment, as the server's account and in a
// process group of its own, so that a Ctrl-C reaches only us.
func (c *Cluster) command(ctx context.Context, name string, args ...string) *exec.Cmd {
	cmd := exec.CommandContext(ctx, filepath.Join(c.cfg.Bin, name), args...)
	cmd.Dir = c.dir
	cmd.Env = []string{"PATH=" + os.Getenv("PATH"), "LC_ALL=C", "TZ=UTC", "HOME=" + c.dir}
	cmd.SysProcAttr = &syscall.SysProcAttr{Credential: c.user.cred, Setpgid: true}
	return cmd
}

func syncDir(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	return d.Sync()
}
