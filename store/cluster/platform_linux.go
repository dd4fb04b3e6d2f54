package cluster

import (
	"errors"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
)

const initLocale = "C.UTF-8"

// deathSignal is what the kernel sends the server when we die, even by SIGKILL: a fast shutdown. A
// test turns it off.
var deathSignal = syscall.SIGINT

func dieWithParent(attr *syscall.SysProcAttr) { attr.Pdeathsig = deathSignal }

// serverProcesses lists the PostgreSQL processes whose working directory is the data directory: the
// postmaster and all its children have it.
func serverProcesses(data string, postmaster int) ([]int, error) {
	real, err := filepath.EvalSymlinks(data)
	if err != nil {
		return nil, err
	}
	links, err := filepath.Glob("/proc/[0-9]*/cwd")
	if err != nil {
		return nil, err
	}
	if len(links) == 0 {
		return nil, errors.New("/proc is not mounted: cannot see whether a database server was left running")
	}
	var pids []int
	for _, link := range links {
		if cwd, err := os.Readlink(link); err != nil || cwd != real {
			continue // another's, or gone meanwhile
		}
		name, err := os.ReadFile(filepath.Join(filepath.Dir(link), "comm"))
		if err != nil || strings.TrimSpace(string(name)) != "postgres" {
			continue // somebody's shell
		}
		if pid, err := strconv.Atoi(filepath.Base(filepath.Dir(link))); err == nil {
			pids = append(pids, pid)
		}
	}
	return pids, nil
}
