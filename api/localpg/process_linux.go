package localpg

import (
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"syscall"
)

// attributes are those of a child process: its account, a process group of its
// own (so that an interrupt at the terminal reaches the program only) and, for
// one that is bound to the program, an interrupt when the program dies: to the
// server it means a fast shutdown.
func attributes(a account, bound bool) *syscall.SysProcAttr {
	attr := &syscall.SysProcAttr{Setpgid: true}
	if a.drop {
		attr.Credential = &syscall.Credential{Uid: uint32(a.uid), Gid: uint32(a.gid)}
	}
	if bound {
		attr.Pdeathsig = syscall.SIGINT
	}
	return attr
}

// serversOf lists the processes that serve a data folder, told by their command
// lines. The children of a server change theirs and are not listed.
func serversOf(data string) ([]int, error) {
	entries, err := filepath.Glob("/proc/[0-9]*/cmdline")
	if err != nil {
		return nil, err
	}
	var pids []int
	for _, entry := range entries {
		text, err := os.ReadFile(entry)
		if err != nil {
			continue // it has ended meanwhile
		}
		args := strings.Split(strings.TrimRight(string(text), "\x00"), "\x00")
		if filepath.Base(args[0]) != "postgres" || !isServerOf(args, data) {
			continue
		}
		if pid, err := strconv.Atoi(filepath.Base(filepath.Dir(entry))); err == nil {
			pids = append(pids, pid)
		}
	}
	return pids, nil
}

// isServerOf tells whether a command line is that of a server of the data folder.
func isServerOf(args []string, data string) bool {
	at := slices.Index(args, "-D")
	return at > 0 && at+1 < len(args) && args[at+1] == data
}
