package localpg

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
)

const lockName = "lock"

// longestSocketFolder leaves room for "/.s.PGSQL.5432" within the 107 bytes of a
// socket's address (unix(7), sun_path).
const longestSocketFolder = 107 - len("/.s.PGSQL."+port)

// makeFolder makes the folder of the server and resolves it to an absolute path
// without symbolic links, because orphans are recognised by that path.
func makeFolder(dir string) (string, error) {
	if dir == "" {
		return "", errors.New("localpg: no folder given: want one for the server's data")
	}
	abs, err := filepath.Abs(dir)
	if err != nil {
		return "", fmt.Errorf("localpg: folder %s: %w", dir, err)
	}
	_, statErr := os.Stat(abs)
	if err := os.MkdirAll(abs, 0o755); err != nil {
		return "", fmt.Errorf("localpg: folder %s: %w", dir, err)
	}
	if errors.Is(statErr, fs.ErrNotExist) {
		// The server's account passes through, whatever the umask of the program.
		if err := os.Chmod(abs, 0o711); err != nil {
			return "", fmt.Errorf("localpg: folder %s: %w", dir, err)
		}
	}
	real, err := filepath.EvalSymlinks(abs)
	if err != nil {
		return "", fmt.Errorf("localpg: folder %s: %w", dir, err)
	}
	return real, nil
}

// takeLock holds the folder for this program. The kernel frees the lock when the
// program ends, however it ends.
func takeLock(dir string) (*os.File, error) {
	f, err := os.OpenFile(filepath.Join(dir, lockName), os.O_RDWR|os.O_CREATE, 0o600)
	if err != nil {
		return nil, fmt.Errorf("localpg: lock %s: %w", dir, err)
	}
	if err := lockFile(f); err != nil {
		holder, _ := os.ReadFile(f.Name())
		return nil, errors.Join(fmt.Errorf("localpg: the folder %s is in use by another program (process %s): stop it or choose another folder: %w",
			dir, strings.TrimSpace(string(holder)), err), f.Close())
	}
	if err := errors.Join(f.Truncate(0), writeAt(f, strconv.Itoa(os.Getpid()))); err != nil {
		return nil, errors.Join(fmt.Errorf("localpg: lock %s: %w", dir, err), f.Close())
	}
	return f, nil
}

func writeAt(f *os.File, s string) error {
	_, err := f.WriteAt([]byte(s), 0)
	return err
}

// dataMajor is the major version that made the data folder, 0 when there is none
// yet. A folder that PostgreSQL did not make is an error.
func dataMajor(data string) (int, error) {
	if _, err := os.Stat(data); errors.Is(err, fs.ErrNotExist) {
		return 0, nil
	}
	text, err := os.ReadFile(filepath.Join(data, "PG_VERSION"))
	if err != nil {
		return 0, fmt.Errorf("localpg: %s is not a PostgreSQL data folder, and was left as it is: %w", data, err)
	}
	major, err := strconv.Atoi(strings.TrimSpace(string(text)))
	if err != nil || major < 1 {
		return 0, fmt.Errorf("localpg: %s/PG_VERSION holds %q, want a major version such as 15", data, strings.TrimSpace(string(text)))
	}
	return major, nil
}

// socketFolder is where the socket lies: inside the server's folder, or under the
// temporary folder when that path is too long for a socket's address.
func socketFolder(dir string) (string, error) {
	inside := filepath.Join(dir, "run")
	if len(inside) <= longestSocketFolder && !strings.Contains(inside, ",") {
		return inside, nil
	}
	tmp, err := filepath.EvalSymlinks(os.TempDir())
	if err != nil {
		return "", fmt.Errorf("localpg: temporary folder for the socket: %w", err)
	}
	sum := sha256.Sum256([]byte(dir))
	short := filepath.Join(tmp, "spanwright-"+hex.EncodeToString(sum[:8]))
	if len(short) > longestSocketFolder {
		return "", fmt.Errorf("localpg: socket folder %s has %d bytes, want at most %d: choose a shorter folder for the server", short, len(short), longestSocketFolder)
	}
	return short, nil
}

// clearSocketFolder makes the socket folder anew: it holds nothing that outlives
// a server. One that belongs to somebody else is refused.
func (s *Server) clearSocketFolder() error {
	if info, err := os.Lstat(s.socket); err == nil {
		uid, known := ownerOf(info)
		if !info.IsDir() || (known && uid != s.account.uid && uid != os.Geteuid()) {
			return fmt.Errorf("localpg: socket folder %s belongs to another user: remove it or choose another folder", s.socket)
		}
	}
	if err := os.RemoveAll(s.socket); err != nil {
		return fmt.Errorf("localpg: socket folder: %w", err)
	}
	if err := s.ownedFolder(s.socket); err != nil {
		return fmt.Errorf("localpg: socket folder: %w", err)
	}
	return nil
}

// ownedFolder makes a new folder that only the server's account may enter.
func (s *Server) ownedFolder(path string) error {
	if err := os.Mkdir(path, 0o700); err != nil {
		return err
	}
	if !s.account.drop {
		return nil
	}
	return os.Chown(path, s.account.uid, s.account.gid)
}

// initialise makes the data folder unless there is one. initdb works in a
// temporary folder that is renamed when it is whole, so that a start that was
// interrupted leaves nothing that looks like data.
func (s *Server) initialise(ctx context.Context) error {
	unfinished := s.data + ".unfinished"
	if err := os.RemoveAll(unfinished); err != nil {
		return fmt.Errorf("localpg: %w", err)
	}
	if _, err := os.Stat(s.data); err == nil {
		return nil
	}
	if err := s.ownedFolder(unfinished); err != nil {
		return fmt.Errorf("localpg: %w", err)
	}
	args := []string{"--pgdata=" + unfinished, "--username=" + Superuser, "--auth-local=trust", "--auth-host=reject", "--encoding=UTF8", "--locale=C"}
	if s.fast {
		args = append(args, "--no-sync")
	}
	cmd := exec.CommandContext(ctx, s.bin.path("initdb"), args...)
	s.prepare(cmd)
	cmd.SysProcAttr = attributes(s.account, true)
	runtime.LockOSThread() // see startProcess
	defer runtime.UnlockOSThread()
	if out, err := cmd.CombinedOutput(); err != nil {
		return errors.Join(fmt.Errorf("localpg: initdb: %w: %s", err, lastLines(out)), os.RemoveAll(unfinished))
	}
	if err := os.Rename(unfinished, s.data); err != nil {
		return fmt.Errorf("localpg: %w", err)
	}
	s.log.Info("local PostgreSQL: data folder made", "folder", s.data, "version", s.bin.major)
	return nil
}

// prepare gives a command of ours a folder that the account can enter and an
// environment without variables that would change what PostgreSQL does.
func (s *Server) prepare(cmd *exec.Cmd) {
	cmd.Dir = s.dir
	for _, kv := range os.Environ() {
		if !strings.HasPrefix(kv, "PG") && !strings.HasPrefix(kv, "LC_") && !strings.HasPrefix(kv, "LANG") {
			cmd.Env = append(cmd.Env, kv)
		}
	}
	cmd.Env = append(cmd.Env, "LC_ALL=C")
}

// lastLines is the end of what a command said, short enough for an error.
func lastLines(out []byte) string {
	const most = 1500
	text := strings.TrimSpace(string(out))
	if len(text) > most {
		text = "… " + strings.ToValidUTF8(text[len(text)-most:], "")
	}
	return text
}
