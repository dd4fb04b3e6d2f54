package cluster

import (
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
)

// FindBin finds the folder that holds the PostgreSQL server programs: the one given, else PG_BIN,
// else what pg_config says, else PATH, else the places where packages put them (newest first), else
// what tools/setup.sh unpacked under .cache of this or an outer folder. A folder that was given by
// name and is not one is an error; nothing is looked for in its place.
func FindBin(explicit string) (string, error) {
	for _, named := range []string{explicit, os.Getenv("PG_BIN")} {
		if named == "" {
			continue
		}
		if !holdsServer(named) {
			return "", fmt.Errorf("%s does not hold the PostgreSQL server programs postgres and initdb: "+
				"correct the setting (PG_BIN) or leave it empty", named)
		}
		return filepath.Abs(named)
	}
	for _, dir := range candidates() {
		if holdsServer(dir) {
			return filepath.Abs(dir)
		}
	}
	return "", errors.New("no PostgreSQL server programs found: install PostgreSQL (Debian: apt-get install postgresql, " +
		"macOS: brew install postgresql), or set PG_BIN to the folder of postgres and initdb, " +
		"or DATABASE_URL to a database of your own")
}

func candidates() []string {
	var dirs []string
	if out, err := exec.Command("pg_config", "--bindir").Output(); err == nil {
		dirs = append(dirs, strings.TrimSpace(string(out)))
	}
	if p, err := exec.LookPath("postgres"); err == nil {
		dirs = append(dirs, filepath.Dir(p))
	}
	for _, pattern := range []string{"/usr/lib/postgresql/*/bin", "/usr/pgsql-*/bin", "/opt/homebrew/opt/postgresql@*/bin", "/usr/local/opt/postgresql@*/bin"} {
		dirs = append(dirs, newestFirst(pattern)...)
	}
	here, err := os.Getwd()
	for err == nil && here != filepath.Dir(here) {
		dirs = append(dirs, filepath.Join(here, ".cache", "pg", "bin"))
		here = filepath.Dir(here)
	}
	return dirs
}

var digits = regexp.MustCompile(`\d+`)

func newestFirst(pattern string) []string {
	found, _ := filepath.Glob(pattern) // the patterns are constants and well formed
	major := func(p string) int {
		n, _ := strconv.Atoi(digits.FindString(p))
		return n
	}
	slices.SortFunc(found, func(a, b string) int { return major(b) - major(a) })
	return found
}

func holdsServer(dir string) bool {
	for _, name := range []string{"postgres", "initdb"} {
		info, err := os.Stat(filepath.Join(dir, name))
		if err != nil || info.IsDir() || info.Mode()&0o111 == 0 {
			return false
		}
	}
	return true
}
