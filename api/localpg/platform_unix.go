//go:build linux || darwin

package localpg

import (
	"io/fs"
	"os"
	"syscall"
)

// lockFile takes the lock of an open file without waiting.
func lockFile(f *os.File) error {
	return syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
}

// ownerOf is the user that a file belongs to.
func ownerOf(info fs.FileInfo) (int, bool) {
	stat, ok := info.Sys().(*syscall.Stat_t)
	if !ok {
		return 0, false
	}
	return int(stat.Uid), true
}
