//go:build linux

package localpg

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

// installation makes a folder of programs that only say their version.
func installation(t *testing.T, version string) string {
	t.Helper()
	dir := filepath.Join(t.TempDir(), "bin")
	if err := os.Mkdir(dir, 0o755); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"postgres", "initdb"} {
		script := fmt.Sprintf("#!/bin/sh\necho '%s (PostgreSQL) %s'\n", name, version)
		if err := os.WriteFile(filepath.Join(dir, name), []byte(script), 0o755); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

func nothing(string) string { return "" }

func absent(string) (string, error) { return "", errors.New("not in PATH") }

func TestFind(t *testing.T) {
	v14, v15, v16 := installation(t, "14.9"), installation(t, "15.2 (some packager)"), installation(t, "16.1")
	v17 := installation(t, "17rc1")
	links := t.TempDir()
	for _, name := range []string{"postgres", "initdb"} {
		if err := os.Symlink(filepath.Join(v16, name), filepath.Join(links, name)); err != nil {
			t.Fatal(err)
		}
	}
	onPath := func(name string) (string, error) {
		if name == "pg_config" {
			return absent(name)
		}
		return filepath.Join(links, name), nil
	}
	script := filepath.Join(t.TempDir(), "pg_config")
	if err := os.WriteFile(script, []byte("#!/bin/sh\necho "+v17+"\n"), 0o755); err != nil {
		t.Fatal(err)
	}
	config := func(name string) (string, error) {
		if name == "pg_config" {
			return script, nil
		}
		return absent(name)
	}
	env := func(dir string) func(string) string {
		return func(name string) string {
			if name == EnvBinDir {
				return dir
			}
			return ""
		}
	}
	tests := []struct {
		name   string
		finder finder
		binDir string
		want   []string
	}{
		{"globs, newest first, too old left out", finder{nothing, absent, []string{v15, v14, v16}}, "", []string{v16, v15}},
		{"path through symbolic links, once", finder{nothing, onPath, []string{v15, v16}}, "", []string{v16, v15}},
		{"pg_config", finder{nothing, config, []string{v15}}, "", []string{v17, v15}},
		{"environment is the only one", finder{env(v15), onPath, []string{v16}}, "", []string{v15}},
		{"argument goes before environment", finder{env(v15), onPath, nil}, v16, []string{v16}},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			found, err := test.finder.find(t.Context(), test.binDir)
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for _, b := range found {
				got = append(got, b.dir)
			}
			if diff := cmp.Diff(test.want, got); diff != "" {
				t.Errorf("folders (-want +got):\n%s", diff)
			}
		})
	}
}

func TestFindRefusals(t *testing.T) {
	empty := t.TempDir()
	tests := []struct {
		name, binDir string
		want         []string
	}{
		{"nothing installed", "", []string{"no PostgreSQL 15 or newer is installed", "apt-get install postgresql", EnvBinDir}},
		{"folder without binaries", empty, []string{empty, "initdb is missing", "want the folder that holds postgres and initdb"}},
		{"too old", installation(t, "13.4"), []string{"PostgreSQL 13 is too old", "15 or newer"}},
		{"not PostgreSQL", installation(t, "x"), []string{`said "postgres (PostgreSQL) x"`}},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			_, err := finder{nothing, absent, []string{empty}}.find(t.Context(), test.binDir)
			if err == nil {
				t.Fatal("no error")
			}
			for _, want := range test.want {
				if !strings.Contains(err.Error(), want) {
					t.Errorf("error %q, want %q in it", err, want)
				}
			}
			if strings.Contains(err.Error(), "\n") {
				t.Errorf("error %q has several lines, want one sentence", err)
			}
		})
	}
}

func TestMissingBinariesNamedByTheEnvironment(t *testing.T) {
	t.Setenv(EnvBinDir, t.TempDir())
	dir := folder(t)
	_, err := Start(t.Context(), Config{Dir: dir})
	if err == nil || !strings.Contains(err.Error(), EnvBinDir) {
		t.Fatalf("Start: %v, want an error that names %s", err, EnvBinDir)
	}
	if _, err := os.Stat(dir); !os.IsNotExist(err) {
		t.Error("a folder was made although nothing could run in it")
	}
}

func TestFolderRefusals(t *testing.T) {
	tests := []struct {
		name string
		make func(t *testing.T, dir string)
		want []string
	}{
		{"other major version", func(t *testing.T, dir string) {
			put(t, filepath.Join(dir, "data", "PG_VERSION"), "9\n")
		}, []string{"was made by PostgreSQL 9", "nothing was changed", "pg_upgrade"}},
		{"not a data folder", func(t *testing.T, dir string) {
			put(t, filepath.Join(dir, "data", "letters.txt"), "dear")
		}, []string{"is not a PostgreSQL data folder"}},
		{"nonsense version", func(t *testing.T, dir string) {
			put(t, filepath.Join(dir, "data", "PG_VERSION"), "new")
		}, []string{`PG_VERSION holds "new"`}},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			dir := folder(t)
			test.make(t, dir)
			before := listing(t, filepath.Join(dir, "data"))
			_, err := Start(t.Context(), Config{Dir: dir, Fast: true})
			if err == nil {
				t.Fatal("no error")
			}
			for _, want := range test.want {
				if !strings.Contains(err.Error(), want) {
					t.Errorf("error %q, want %q in it", err, want)
				}
			}
			if diff := cmp.Diff(before, listing(t, filepath.Join(dir, "data"))); diff != "" {
				t.Errorf("the data folder changed (-before +after):\n%s", diff)
			}
		})
	}
	if _, err := Start(t.Context(), Config{}); err == nil || !strings.Contains(err.Error(), "no folder given") {
		t.Errorf("Start without a folder: %v", err)
	}
}

func put(t *testing.T, path, text string) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
}

func listing(t *testing.T, dir string) []string {
	t.Helper()
	var names []string
	err := filepath.Walk(dir, func(path string, info os.FileInfo, err error) error {
		if err == nil {
			names = append(names, fmt.Sprint(path, info.Size(), info.ModTime().Format(time.RFC3339Nano)))
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return names
}

func TestReachable(t *testing.T) {
	closed := filepath.Join(folder(t), "closed")
	dir := filepath.Join(closed, "pg")
	if err := os.MkdirAll(dir, 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(closed, 0o700); err != nil {
		t.Fatal(err)
	}
	stranger := account{uid: 54321, gid: 54321, name: "user stranger", drop: true}
	err := reachable(dir, stranger)
	for _, want := range []string{"user stranger", "may not enter " + closed, "/var/lib/spanwright"} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want %q in it", err, want)
		}
	}
	if err := reachable(dir, account{uid: os.Geteuid()}); err != nil {
		t.Errorf("without a change of account: %v", err)
	}
	if err := reachable(filepath.Dir(closed), stranger); err != nil {
		t.Errorf("open folder: %v", err)
	}
}
