// These tests read /proc to see which processes live.

//go:build linux

package localpg

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"
	"go.uber.org/goleak"
)

// envChild makes the test binary a program that starts a server and waits to be
// killed.
const envChild = "SPANWRIGHT_LOCALPG_TEST_CHILD"

func TestMain(m *testing.M) {
	if dir := os.Getenv(envChild); dir != "" {
		child(dir)
	}
	goleak.VerifyTestMain(m)
}

func child(dir string) {
	s, err := Start(context.Background(), Config{Dir: dir})
	if err != nil {
		fmt.Fprintln(os.Stdout, "failed:", err)
		os.Exit(1)
	}
	conn, err := pgx.Connect(context.Background(), s.AdminURL("postgres"))
	if err == nil {
		_, err = conn.Exec(context.Background(), "create table kept (n int); insert into kept values (42)")
	}
	fmt.Fprintln(os.Stdout, "ready", s.current().os.Pid, err)
	time.Sleep(time.Minute)
	os.Exit(2)
}

// folder is a folder that the account of the server can reach: t.TempDir is not
// when the tests run as root.
func folder(t *testing.T) string {
	t.Helper()
	base, err := os.MkdirTemp("", "localpg")
	if err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(base, 0o755); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		if err := os.RemoveAll(base); err != nil {
			t.Error(err)
		}
	})
	return filepath.Join(base, "pg")
}

func mustStart(t *testing.T, cfg Config) *Server {
	t.Helper()
	s, err := Start(t.Context(), cfg)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { mustStop(t, s) })
	return s
}

func mustStop(t *testing.T, s *Server) {
	t.Helper()
	if err := s.Stop(context.Background()); err != nil {
		t.Error(err)
	}
}

func mustExec(t *testing.T, s *Server, sql string) {
	t.Helper()
	conn, err := pgx.Connect(t.Context(), s.AdminURL("postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.Background())
	if _, err := conn.Exec(t.Context(), sql); err != nil {
		t.Fatal(err)
	}
}

func query[T any](t *testing.T, s *Server, sql string) T {
	t.Helper()
	var got T
	conn, err := pgx.Connect(t.Context(), s.AdminURL("postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.Background())
	if err := conn.QueryRow(t.Context(), sql).Scan(&got); err != nil {
		t.Fatal(err)
	}
	return got
}

func alive(pid int) bool {
	pids, err := filepath.Glob(fmt.Sprintf("/proc/%d/cmdline", pid))
	if err != nil || len(pids) == 0 {
		return false
	}
	text, err := os.ReadFile(pids[0])
	return err == nil && len(text) > 0
}

func TestStartKeepsDataBetweenRuns(t *testing.T) {
	dir := folder(t)
	s := mustStart(t, Config{Dir: dir})
	if got := query[string](t, s, "show listen_addresses"); got != "" {
		t.Errorf("listen_addresses = %q, want none: the server must not listen on TCP", got)
	}
	for _, private := range []string{s.data, s.socket} {
		info, err := os.Stat(private)
		if err != nil {
			t.Fatal(err)
		}
		if got := info.Mode().Perm(); got != 0o700 {
			t.Errorf("mode of %s = %#o, want 0700", private, got)
		}
	}
	for range 2 {
		if err := s.CreateDatabase(t.Context(), `salt "works"`); err != nil {
			t.Fatal(err)
		}
	}
	mustExec(t, s, "create table kept (n int); insert into kept values (7)")
	pid := s.current().os.Pid
	mustStop(t, s)
	if alive(pid) {
		t.Errorf("process %d lives on after Stop", pid)
	}
	if _, err := os.Stat(s.socket); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("socket folder after Stop: %v, want it gone", err)
	}

	began := time.Now()
	warm := mustStart(t, Config{Dir: dir})
	t.Logf("warm start after %v", time.Since(began))
	if got := query[int](t, warm, "select n from kept"); got != 7 {
		t.Errorf("kept row = %d, want 7", got)
	}
	conn, err := pgx.Connect(t.Context(), warm.AdminURL(`salt "works"`))
	if err != nil {
		t.Fatalf("database of the first run: %v", err)
	}
	conn.Close(t.Context())
}

func TestFolderHeldByAnotherProgramIsRefused(t *testing.T) {
	dir := folder(t)
	s := mustStart(t, Config{Dir: dir, Fast: true})
	_, err := Start(t.Context(), Config{Dir: dir, Fast: true})
	want := fmt.Sprintf("in use by another program (process %d)", os.Getpid())
	if err == nil || !strings.Contains(err.Error(), want) {
		t.Fatalf("second Start: %v, want %q", err, want)
	}
	if err := Remove(t.Context(), dir); err == nil {
		t.Fatal("Remove of a folder in use succeeded")
	}
	if got := query[int](t, s, "select 1"); got != 1 {
		t.Error("the first server was disturbed")
	}
}

func TestServerKilledIsStartedAgain(t *testing.T) {
	s := mustStart(t, Config{Dir: folder(t)})
	mustExec(t, s, "create table kept (n int); insert into kept values (7)")
	first := s.current().os.Pid
	if err := syscall.Kill(first, syscall.SIGKILL); err != nil {
		t.Fatal(err)
	}
	deadline := time.Now().Add(30 * time.Second)
	for s.current().os.Pid == first {
		if time.Now().After(deadline) {
			t.Fatal("the server was not started again within 30 s")
		}
		time.Sleep(20 * time.Millisecond)
	}
	if got := query[int](t, s, "select n from kept"); got != 7 {
		t.Errorf("kept row = %d, want 7", got)
	}
}

// runChild starts a program with a server in dir and returns it with the
// server's process number.
func runChild(t *testing.T, dir string) (*exec.Cmd, int) {
	t.Helper()
	cmd := exec.Command(os.Args[0], "-test.run=^$")
	cmd.Env = append(os.Environ(), envChild+"="+dir)
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	line, _ := bufio.NewReader(out).ReadString('\n')
	fields := strings.Fields(line)
	if len(fields) != 3 || fields[2] != "<nil>" {
		cmd.Process.Kill()
		cmd.Wait()
		t.Fatalf("the child said %q", line)
	}
	pid, err := strconv.Atoi(fields[1])
	if err != nil {
		t.Fatal(err)
	}
	return cmd, pid
}

func TestProgramKilled(t *testing.T) {
	dir := folder(t)
	cmd, pid := runChild(t, dir)
	if err := cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	cmd.Wait()
	s := mustStart(t, Config{Dir: dir})
	if alive(pid) {
		t.Errorf("server %d of the killed program still lives", pid)
	}
	if got := query[int](t, s, "select n from kept"); got != 42 {
		t.Errorf("kept row = %d, want 42", got)
	}
}

func TestProgramAndServerKilled(t *testing.T) {
	dir := folder(t)
	cmd, pid := runChild(t, dir)
	for _, victim := range []int{cmd.Process.Pid, pid} {
		if err := syscall.Kill(victim, syscall.SIGKILL); err != nil {
			t.Fatal(err)
		}
	}
	cmd.Wait()
	if _, err := os.Stat(filepath.Join(dir, "data", "postmaster.pid")); err != nil {
		t.Fatalf("want a stale pid file to start from: %v", err)
	}
	s := mustStart(t, Config{Dir: dir})
	if got := query[int](t, s, "select n from kept"); got != 42 {
		t.Errorf("kept row = %d, want 42", got)
	}
}

func TestParentDeathEndsTheServer(t *testing.T) {
	cmd, pid := runChild(t, folder(t))
	if err := cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	cmd.Wait()
	for deadline := time.Now().Add(20 * time.Second); alive(pid); {
		if time.Now().After(deadline) {
			t.Fatalf("server %d outlived its program by 20 s", pid)
		}
		time.Sleep(20 * time.Millisecond)
	}
}
