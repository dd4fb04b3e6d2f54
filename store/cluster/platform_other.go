//go:build !linux

package cluster

import (
	"os/exec"
	"strconv"
	"strings"
	"syscall"
)

const initLocale = "C"

// dieWithParent does nothing here: the next start ends a server that was left.
func dieWithParent(*syscall.SysProcAttr) {}

// serverProcesses asks ps whether the noted postmaster still runs on this data directory; its
// children end with it.
func serverProcesses(data string, postmaster int) ([]int, error) {
	if postmaster <= 1 || syscall.Kill(postmaster, 0) != nil {
		return nil, nil
	}
	out, err := exec.Command("ps", "-o", "command=", "-p", strconv.Itoa(postmaster)).Output()
	if err != nil || !strings.Contains(string(out), data) {
		return nil, nil // no such process any more, or the number was given to another
	}
	return []int{postmaster}, nil
}
