//go:build !linux && !darwin

package localpg

import (
	"errors"
	"io/fs"
	"os"
	"syscall"
)

var errPlatform = errors.New("a PostgreSQL of the program's own needs Linux or macOS: give the URL of a PostgreSQL that is already running")

func lockFile(*os.File) error { return errPlatform }

func ownerOf(fs.FileInfo) (int, bool) { return 0, false }

func attributes(account, bool) *syscall.SysProcAttr { return nil }

func serversOf(string) ([]int, error) { return nil, errPlatform }
