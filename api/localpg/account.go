package localpg

import (
	"fmt"
	"io/fs"
	"os"
	"os/user"
	"path/filepath"
	"strconv"
)

// account is who runs the server. PostgreSQL refuses to run as root, so a program
// that runs as root drops to another account.
type account struct {
	uid, gid int
	name     string
	drop     bool
}

// accountFor chooses the account: the program's own; under root the owner of the
// data folder, or postgres, or nobody.
func accountFor(data string) (account, error) {
	info, err := os.Stat(data)
	owner, exists := 0, false
	if err == nil {
		owner, exists = ownerOf(info)
	}
	if me := os.Geteuid(); me != 0 {
		if exists && owner != me {
			return account{}, fmt.Errorf("localpg: the data folder %s belongs to user %d, and the program runs as user %d: run it as that user or choose another folder", data, owner, me)
		}
		return account{uid: me, gid: os.Getegid(), name: "user " + strconv.Itoa(me)}, nil
	}
	if exists {
		u, err := user.LookupId(strconv.Itoa(owner))
		if err != nil || owner == 0 {
			return account{}, fmt.Errorf("localpg: the data folder %s belongs to user %d, which cannot run PostgreSQL: give it to the user postgres", data, owner)
		}
		return dropTo(u)
	}
	for _, name := range []string{"postgres", "nobody"} {
		if u, err := user.Lookup(name); err == nil {
			return dropTo(u)
		}
	}
	return account{}, fmt.Errorf("localpg: PostgreSQL does not run as root, and there is neither a user postgres nor a user nobody: run the program as another user")
}

func dropTo(u *user.User) (account, error) {
	uid, err := strconv.Atoi(u.Uid)
	if err != nil {
		return account{}, fmt.Errorf("localpg: user %s: %w", u.Username, err)
	}
	gid, err := strconv.Atoi(u.Gid)
	if err != nil {
		return account{}, fmt.Errorf("localpg: user %s: %w", u.Username, err)
	}
	return account{uid: uid, gid: gid, name: "user " + u.Username, drop: true}, nil
}

// reachable checks that the account may pass through every folder down to dir.
func reachable(dir string, a account) error {
	if !a.drop {
		return nil
	}
	for at := dir; ; at = filepath.Dir(at) {
		info, err := os.Stat(at)
		if err != nil {
			return fmt.Errorf("localpg: folder %s: %w", at, err)
		}
		if !mayEnter(info, a) {
			return fmt.Errorf("localpg: the folder %s cannot be used: the server runs as %s, who may not enter %s (mode %#o): choose a folder outside it, such as /var/lib/spanwright",
				dir, a.name, at, info.Mode().Perm())
		}
		if at == filepath.Dir(at) {
			return nil
		}
	}
}

func mayEnter(info fs.FileInfo, a account) bool {
	if info.Mode().Perm()&0o001 != 0 {
		return true
	}
	uid, known := ownerOf(info)
	return known && uid == a.uid && info.Mode().Perm()&0o100 != 0
}
