package cluster

import (
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// listing is what a directory's database files are: name, size, mode, owner, time. What a refused
// start may still touch (the server's log, the access files it writes anew) is left out.
func listing(t *testing.T, dir string) string {
	t.Helper()
	var all strings.Builder
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		info, err := d.Info()
		switch d.Name() {
		case "server.log", "pg_hba.conf", "pg_ident.conf", "run", "data", "db":
			return err
		}
		fmt.Fprintln(&all, path, info.Size(), info.Mode(), owner(info), info.ModTime())
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return all.String()
}

// A directory with anything else in it is refused and stays as it is.
func TestForeignDirectory(t *testing.T) {
	t.Parallel()
	c := start(t, Config{Dir: filepath.Join(tempDir(t), "db"), Throwaway: true})
	stop(t, c)
	for name, prepare := range map[string]func(dir string) error{
		"a letter": func(dir string) error {
			return os.WriteFile(filepath.Join(dir, "letter.txt"), []byte("dear"), 0o600)
		},
		"a hidden file":     func(dir string) error { return os.WriteFile(filepath.Join(dir, ".hidden"), nil, 0o600) },
		"another's cluster": func(dir string) error { return os.CopyFS(dir, os.DirFS(c.dataDir())) },
	} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			dir := filepath.Join(tempDir(t), "db")
			if err := os.Mkdir(dir, 0o755); err != nil {
				t.Fatal(err)
			}
			if err := prepare(dir); err != nil {
				t.Fatal(err)
			}
			before := listing(t, dir)
			for _, throwaway := range []bool{false, true} {
				refused(t, Config{Dir: dir, Throwaway: throwaway}, dir, "nothing in it was touched")
			}
			info, err := os.Stat(dir)
			if err != nil || info.Mode().Perm() != 0o755 || listing(t, dir) != before {
				t.Errorf("%v %v\n%s\n---\n%s", info, err, before, listing(t, dir))
			}
		})
	}
}

// A database made by another major version, half a database, a broken one, and a lasting one asked
// for as throw-away are refused and not touched; put right, it works again.
func TestRefusedData(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	c := start(t, Config{Dir: dir})
	run(t, c, "CREATE TABLE kept AS SELECT 7 AS n")
	stop(t, c)
	version, control := filepath.Join(dir, "data", "PG_VERSION"), filepath.Join(dir, "data", "global", "pg_control")
	own, err := os.ReadFile(version)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		file  string
		text  string
		cfg   Config
		words []string
	}{
		{version, "9\n", Config{}, []string{"made by PostgreSQL 9", "PostgreSQL " + strings.TrimSpace(string(own)), "nothing in it was touched", "PG_BIN"}},
		{version, "", Config{}, []string{"not a PostgreSQL database", "nothing in it was touched"}},
		{control, "", Config{}, []string{"pg_control"}},
		{"", "", Config{Throwaway: true}, []string{"another kind", "nothing in it was touched"}},
	} {
		putBack := spoil(t, c.file, c.text)
		before := listing(t, dir)
		c.cfg.Dir = dir
		refused(t, c.cfg, append(c.words, dir)...)
		if after := listing(t, dir); after != before {
			t.Errorf("%v: touched:\n%s\n---\n%s", c.words, before, after)
		}
		putBack()
	}
	if n := ask[int](t, start(t, Config{Dir: dir}), "SELECT n FROM kept"); n != 7 {
		t.Errorf("kept %d", n)
	}
}

// spoil gives the file another text, or puts it aside when the text is empty.
func spoil(t *testing.T, file, text string) (putBack func()) {
	t.Helper()
	if file == "" {
		return func() {}
	}
	must := func(err error) {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
	}
	aside := filepath.Join(tempDir(t), "aside")
	must(os.Rename(file, aside))
	if text != "" {
		must(os.WriteFile(file, []byte(text), 0o600))
	}
	return func() { must(os.Rename(aside, file)) }
}

// The component that blocks the way is named, wherever it stands in the path.
func TestBlockedPath(t *testing.T) {
	t.Parallel()
	base := tempDir(t)
	file, closed, link := filepath.Join(base, "file"), filepath.Join(base, "closed"), filepath.Join(base, "link")
	dangling, through := filepath.Join(base, "dangling"), filepath.Join(base, "through")
	for _, err := range []error{
		os.WriteFile(file, nil, 0o600), os.Mkdir(closed, 0o700),
		os.Symlink(closed, link), os.Mkdir(filepath.Join(closed, "inner"), 0o755), os.Symlink(filepath.Join(closed, "inner"), through), os.Symlink(filepath.Join(base, "nowhere"), dangling),
	} {
		if err != nil {
			t.Fatal(err)
		}
	}
	refused(t, Config{Dir: filepath.Join(file, "a", "b")}, file+" is not a directory")
	refused(t, Config{Dir: filepath.Join(dangling, "a")}, dangling+" is a symbolic link that leads nowhere")
	refused(t, Config{}, "no directory")
	if os.Geteuid() == 0 { // closed to the server's account, though not to us
		refused(t, Config{Dir: filepath.Join(closed, "a")}, closed+" cannot be entered by user", "owner root", "chmod o+x "+closed)
		refused(t, Config{Dir: filepath.Join(link, "a")}, closed+" cannot be entered by user")
		refused(t, Config{Dir: filepath.Join(through, "a")}, closed+" cannot be entered by user")
	}
	if _, err := os.Lstat(filepath.Join(closed, "a")); err == nil {
		t.Error("something was made in the closed folder")
	}
}

// A programs folder that is not one is an error that names it; nothing else is used in its place.
func TestWrongBin(t *testing.T) {
	t.Parallel()
	base := tempDir(t)
	refused(t, Config{Bin: base, Dir: filepath.Join(base, "db")}, base, "does not hold the PostgreSQL server programs")
}

func TestFindBin(t *testing.T) {
	good, err := FindBin("")
	if err != nil {
		t.Fatal(err)
	}
	base := tempDir(t)
	fake := filepath.Join(base, ".cache", "pg", "bin")
	if err := os.MkdirAll(fake, 0o755); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"postgres", "initdb"} {
		if err := os.WriteFile(filepath.Join(fake, name), []byte("#!/bin/sh\n"), 0o755); err != nil {
			t.Fatal(err)
		}
	}
	t.Setenv("PG_BIN", fake)
	if got, err := FindBin(""); got != fake {
		t.Errorf("PG_BIN: %s %v", got, err)
	}
	if got, err := FindBin(good); got != good {
		t.Errorf("an explicit folder: %s %v", got, err)
	}
	t.Setenv("PG_BIN", base)
	if got, err := FindBin(""); err == nil || !strings.Contains(err.Error(), base) {
		t.Errorf("a wrong PG_BIN gave %s, %v", got, err)
	}
	t.Setenv("PG_BIN", "")
	t.Setenv("PATH", fake)
	if got, err := FindBin(""); got != fake {
		t.Errorf("PATH: %s %v", got, err)
	}
}
