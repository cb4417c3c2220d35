package localpg

import (
	"cmp"
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"time"
)

// EnvBinDir names the environment variable that holds the folder of postgres and
// initdb. When it is unset, they are taken from PATH (through symbolic links),
// from pg_config --bindir and from the folders in which packages put them,
// newest version first.
const EnvBinDir = "SPANWRIGHT_POSTGRES_BIN"

// oldestMajor is the first version with security_invoker views, which the schema
// needs (PostgreSQL 15 release notes, E.1.3.1.6).
const oldestMajor = 15

// binaries is one installation of PostgreSQL.
type binaries struct {
	dir          string
	major, minor int
}

func (b binaries) path(name string) string { return filepath.Join(b.dir, executable(name)) }

func executable(name string) string {
	if runtime.GOOS == "windows" {
		return name + ".exe"
	}
	return name
}

// finder holds what the search asks the machine, so that tests can answer.
type finder struct {
	getenv   func(string) string
	lookPath func(string) (string, error)
	globs    []string
}

func newFinder() finder {
	return finder{getenv: os.Getenv, lookPath: exec.LookPath, globs: []string{
		"/usr/lib/postgresql/*/bin", "/usr/pgsql-*/bin", "/usr/local/pgsql/bin", "/usr/libexec/postgresql*",
		"/opt/homebrew/opt/postgresql*/bin", "/usr/local/opt/postgresql*/bin",
		"/Applications/Postgres.app/Contents/Versions/*/bin", "/Library/PostgreSQL/*/bin",
		`C:\Program Files\PostgreSQL\*\bin`,
	}}
}

// find lists the usable installations, newest first. A folder that was named,
// by argument or environment, is the only candidate, and must be usable.
func (f finder) find(ctx context.Context, binDir string) ([]binaries, error) {
	named, origin := binDir, "the configured folder"
	if named == "" {
		named, origin = f.getenv(EnvBinDir), EnvBinDir
	}
	if named != "" {
		b, err := inspect(ctx, named)
		if err != nil {
			return nil, fmt.Errorf("localpg: %s %s: %w; want the folder that holds postgres and initdb of PostgreSQL %d or newer", origin, named, err, oldestMajor)
		}
		return []binaries{b}, nil
	}
	var found []binaries
	for _, dir := range f.folders(ctx) {
		if b, err := inspect(ctx, dir); err == nil {
			found = append(found, b)
		}
	}
	if len(found) == 0 {
		return nil, fmt.Errorf("localpg: no PostgreSQL %d or newer is installed: install it (Debian, Ubuntu: apt-get install postgresql; Fedora: dnf install postgresql-server; macOS: brew install postgresql) or set %s to the folder of postgres and initdb", oldestMajor, EnvBinDir)
	}
	slices.SortStableFunc(found, func(a, b binaries) int {
		return cmp.Or(cmp.Compare(b.major, a.major), cmp.Compare(b.minor, a.minor))
	})
	return found, nil
}

// folders lists where binaries may lie, each folder once.
func (f finder) folders(ctx context.Context) []string {
	var dirs []string
	for _, name := range []string{"postgres", "initdb"} {
		if path, err := f.lookPath(name); err == nil {
			if real, err := filepath.EvalSymlinks(path); err == nil {
				dirs = append(dirs, filepath.Dir(real))
			}
		}
	}
	if path, err := f.lookPath("pg_config"); err == nil {
		if out, err := output(ctx, path, "--bindir"); err == nil {
			dirs = append(dirs, strings.TrimSpace(out))
		}
	}
	for _, glob := range f.globs {
		if matches, err := filepath.Glob(glob); err == nil {
			dirs = append(dirs, matches...)
		}
	}
	var once []string
	for _, dir := range dirs {
		if !slices.Contains(once, dir) {
			once = append(once, dir)
		}
	}
	return once
}

var versionLine = regexp.MustCompile(`^postgres \(PostgreSQL\) (\d+)(?:\.(\d+))?`)

// inspect reads the version of the binaries in dir.
func inspect(ctx context.Context, dir string) (binaries, error) {
	dir, err := filepath.Abs(dir)
	if err != nil {
		return binaries{}, err
	}
	b := binaries{dir: dir}
	for _, name := range []string{"initdb", "postgres"} {
		if _, err := os.Stat(b.path(name)); err != nil {
			return binaries{}, fmt.Errorf("%s is missing", executable(name))
		}
	}
	out, err := output(ctx, b.path("postgres"), "--version")
	if err != nil {
		return binaries{}, fmt.Errorf("postgres --version: %w", err)
	}
	m := versionLine.FindStringSubmatch(out)
	if m == nil {
		return binaries{}, fmt.Errorf("postgres --version said %q", strings.TrimSpace(out))
	}
	if b.major, err = strconv.Atoi(m[1]); err != nil {
		return binaries{}, fmt.Errorf("postgres --version said %q", strings.TrimSpace(out))
	}
	b.minor, _ = strconv.Atoi(m[2]) // absent in a beta release: 0
	if b.major < oldestMajor {
		return binaries{}, fmt.Errorf("PostgreSQL %d is too old", b.major)
	}
	return b, nil
}

func output(ctx context.Context, name string, args ...string) (string, error) {
	ctx, cancel := context.WithTimeout(ctx, 10*time.Second)
	defer cancel()
	out, err := exec.CommandContext(ctx, name, args...).Output()
	return string(out), err
}

// choose picks the installation for a data folder: the newest for a new one, and
// for an existing one the newest of the major version that made it.
func choose(candidates []binaries, data string) (binaries, error) {
	major, err := dataMajor(data)
	if err != nil {
		return binaries{}, err
	}
	if major == 0 {
		return candidates[0], nil
	}
	var have []string
	for _, b := range candidates {
		if b.major == major {
			return b, nil
		}
		have = append(have, fmt.Sprintf("%d in %s", b.major, b.dir))
	}
	return binaries{}, fmt.Errorf("localpg: the data folder %s was made by PostgreSQL %d, and installed is %s: nothing was changed; install PostgreSQL %d, convert the folder with pg_upgrade, or choose another folder",
		data, major, strings.Join(have, ", "), major)
}
