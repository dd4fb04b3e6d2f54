package cluster

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// checkPath goes through path component by component and names the first one that keeps the
// server's account out. It returns the path without symbolic links; its last parts need not exist.
func checkPath(path string, who account) (string, error) {
	abs, err := filepath.Abs(path)
	if err != nil {
		return "", err
	}
	if err := walk(abs, who); err != nil {
		return "", err
	}
	real, err := resolve(abs)
	if err != nil {
		return "", err
	}
	if real != abs { // where a link leads may be closed although the link is not
		err = walk(real, who)
	}
	return real, err
}

func walk(abs string, who account) error {
	var last string
	for _, part := range components(abs) {
		info, err := os.Stat(part)
		switch {
		case errors.Is(err, fs.ErrNotExist):
			if dangling(part) {
				return fmt.Errorf("%s is a symbolic link that leads nowhere: remove it or make its target", part)
			}
			return mayCreate(part, last, who)
		case err != nil:
			return fmt.Errorf("%s cannot be looked at: %w", part, err)
		case !info.IsDir():
			return fmt.Errorf("%s is not a directory: choose another data directory", part)
		case !who.may(info, 0o1):
			if real, err := filepath.EvalSymlinks(part); err == nil {
				part = real
			}
			return fmt.Errorf("%s cannot be entered by user %s, who runs the database server (mode %v, owner %s): "+
				"allow it (chmod o+x %s) or choose another data directory", part, who.name, info.Mode(), nameOf(owner(info)), quoteShell(part))
		}
		last = part
	}
	return nil
}

// mayCreate reports whether this process can make the missing part inside the existing folder. Root
// makes it and gives it away, so only an ordinary user can be in its own way.
func mayCreate(part, in string, who account) error {
	if who.cred != nil {
		return nil
	}
	info, err := os.Stat(in)
	if err != nil {
		return err
	}
	if !who.may(info, 0o3) {
		return fmt.Errorf("%s cannot be made: user %s may not write in %s (mode %v, owner %s): choose another data directory",
			part, who.name, in, info.Mode(), nameOf(owner(info)))
	}
	return nil
}

// components lists an absolute path's folders from the root down.
func components(abs string) []string {
	list := []string{abs}
	for abs != filepath.Dir(abs) {
		abs = filepath.Dir(abs)
		list = append(list, abs)
	}
	slices.Reverse(list)
	return list
}

func isDir(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir()
}

func dangling(path string) bool {
	_, err := os.Lstat(path)
	return err == nil
}

// resolve follows the links of the part of path that exists.
func resolve(abs string) (string, error) {
	real, err := filepath.EvalSymlinks(abs)
	if !errors.Is(err, fs.ErrNotExist) || abs == filepath.Dir(abs) {
		return real, err
	}
	parent, err := resolve(filepath.Dir(abs))
	return filepath.Join(parent, filepath.Base(abs)), err
}

func quoteShell(path string) string {
	if strings.ContainsAny(path, " '\"\\$`*?[]();&|<>") {
		return "'" + strings.ReplaceAll(path, "'", `'\''`) + "'"
	}
	return path
}
