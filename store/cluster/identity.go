package cluster

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/user"
	"slices"
	"strconv"
	"syscall"
)

// account is the one the server runs as.
type account struct {
	name   string
	uid    uint32
	groups []uint32            // all of them, the first is the primary one
	cred   *syscall.Credential // nil: the account of this process
}

// serverAccount picks the account for the cluster in dir. PostgreSQL refuses root, so as root it is
// the owner of a cluster already there, else postgres, else nobody. It has to exist in the system's
// list: initdb looks its name up.
func serverAccount(dir string) (account, error) {
	if os.Geteuid() != 0 {
		return ownAccount()
	}
	if info, err := os.Lstat(dir); err == nil && owner(info) != 0 {
		if u, err := user.LookupId(strconv.Itoa(int(owner(info)))); err == nil {
			return accountOf(u)
		}
	}
	for _, name := range []string{"postgres", "nobody"} {
		if a, err := ownerNamed(name); err == nil {
			return a, nil
		}
	}
	return account{}, errors.New("the database server does not run as root, and there is no account named postgres or nobody " +
		"to run it: add one (useradd --system postgres), or start as an ordinary user")
}

func ownAccount() (account, error) {
	me, err := user.Current()
	if err != nil {
		return account{}, fmt.Errorf("the account with number %d has no name on this system, and the database server needs one: %w", os.Geteuid(), err)
	}
	a := account{name: me.Username, uid: uint32(os.Geteuid()), groups: []uint32{uint32(os.Getegid())}}
	more, err := os.Getgroups()
	for _, g := range more {
		a.groups = append(a.groups, uint32(g))
	}
	return a, err
}

func ownerNamed(name string) (account, error) {
	u, err := user.Lookup(name)
	if err != nil {
		return account{}, err
	}
	return accountOf(u)
}

func accountOf(u *user.User) (account, error) {
	uid, err1 := strconv.ParseUint(u.Uid, 10, 32)
	gid, err2 := strconv.ParseUint(u.Gid, 10, 32)
	if err := errors.Join(err1, err2); err != nil {
		return account{}, fmt.Errorf("account %s: %w", u.Username, err)
	}
	return account{
		name: u.Username, uid: uint32(uid), groups: []uint32{uint32(gid)},
		cred: &syscall.Credential{Uid: uint32(uid), Gid: uint32(gid)},
	}, nil
}

// own gives a file that this process made to the server's account.
func (a account) own(path string) error {
	if a.cred == nil {
		return nil
	}
	return os.Lchown(path, int(a.cred.Uid), int(a.cred.Gid))
}

// may reports whether the account has the wanted permissions (of 7) on a file, by its mode alone.
func (a account) may(info fs.FileInfo, want fs.FileMode) bool {
	mode := info.Mode().Perm()
	switch {
	case a.uid == owner(info):
		mode >>= 6
	case slices.Contains(a.groups, group(info)):
		mode >>= 3
	}
	return mode&want == want
}

func owner(info fs.FileInfo) uint32 { return info.Sys().(*syscall.Stat_t).Uid }
func group(info fs.FileInfo) uint32 { return info.Sys().(*syscall.Stat_t).Gid }

// nameOf says whose a file is, in words.
func nameOf(uid uint32) string {
	id := strconv.Itoa(int(uid))
	if u, err := user.LookupId(id); err == nil {
		return u.Username
	}
	return "number " + id
}
