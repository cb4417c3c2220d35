package localpg

import (
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
)

// attributes are those of a child process: its account and a process group of its
// own. There is no parent-death signal: a server that outlives a killed program
// is stopped by the next start.
func attributes(a account, _ bool) *syscall.SysProcAttr {
	attr := &syscall.SysProcAttr{Setpgid: true}
	if a.drop {
		attr.Credential = &syscall.Credential{Uid: uint32(a.uid), Gid: uint32(a.gid)}
	}
	return attr
}

// serversOf lists the processes that serve a data folder, told by their command
// lines.
func serversOf(data string) ([]int, error) {
	out, err := exec.Command("ps", "-axww", "-o", "pid=,args=").Output()
	if err != nil {
		return nil, err
	}
	var pids []int
	for line := range strings.Lines(string(out)) {
		number, args, _ := strings.Cut(strings.TrimSpace(line), " ")
		program, rest, found := strings.Cut(strings.TrimSpace(args), " -D ")
		if !found || filepath.Base(program) != "postgres" || !strings.HasPrefix(rest, data+" ") {
			continue
		}
		if pid, err := strconv.Atoi(number); err == nil {
			pids = append(pids, pid)
		}
	}
	return pids, nil
}
