// These tests read /proc to see which processes live.

//go:build linux

package localpg

import (
	"context"
	"log/slog"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"
)

// stray starts the server that belongs to the stopped s outside its care, without
// the parent-death signal: what a killed program leaves on systems without one.
func stray(t *testing.T, s *Server) *process {
	t.Helper()
	if err := s.clearSocketFolder(); err != nil {
		t.Fatal(err)
	}
	log, _, err := s.openLog()
	if err != nil {
		t.Fatal(err)
	}
	defer log.Close()
	cmd := s.command(log)
	cmd.SysProcAttr = attributes(s.account, false)
	p, err := startProcess(cmd)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { p.stop(context.Background()) })
	if err := s.ready(t.Context(), p); err != nil {
		t.Fatal(err)
	}
	return p
}

func TestOrphanIsStoppedAndForeignServerIsNot(t *testing.T) {
	foreign := mustStart(t, Config{Dir: folder(t), Fast: true})
	dir := folder(t)
	s := mustStart(t, Config{Dir: dir, Fast: true})
	mustExec(t, s, "create table kept (n int); insert into kept values (7)")
	mustStop(t, s)

	orphan := stray(t, s)
	again := mustStart(t, Config{Dir: dir, Fast: true})
	select {
	case <-orphan.exited:
	case <-time.After(10 * time.Second):
		t.Fatal("the orphan still runs")
	}
	if got := query[int](t, again, "select n from kept"); got != 7 {
		t.Errorf("kept row = %d, want 7", got)
	}
	if got := query[int](t, foreign, "select 1"); got != 1 {
		t.Error("the foreign server was disturbed")
	}
	select {
	case <-foreign.current().exited:
		t.Error("the foreign server was stopped")
	default:
	}
}

func TestStalePidFileOfAForeignProcess(t *testing.T) {
	dir := folder(t)
	s := mustStart(t, Config{Dir: dir, Fast: true})
	mustStop(t, s)
	// The number in the file now belongs to a process that is no server of ours.
	sleep := exec.Command("sleep", "60")
	s.prepare(sleep)
	sleep.SysProcAttr = attributes(s.account, false)
	if err := sleep.Start(); err != nil {
		t.Fatal(err)
	}
	defer func() { sleep.Process.Kill(); sleep.Wait() }()
	pidFile := filepath.Join(s.data, "postmaster.pid")
	if err := os.WriteFile(pidFile, []byte(strconv.Itoa(sleep.Process.Pid)+"\n"+s.data+"\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	mustStart(t, Config{Dir: dir, Fast: true})
	if !alive(sleep.Process.Pid) {
		t.Error("a process that is not ours was signalled")
	}
}

func TestServersOfNeedsThisVeryFolder(t *testing.T) {
	s := mustStart(t, Config{Dir: folder(t), Fast: true})
	for _, other := range []string{s.dir, s.data + "2", strings.TrimSuffix(s.data, "a"), ""} {
		pids, err := serversOf(other)
		if err != nil || len(pids) != 0 {
			t.Errorf("serversOf(%q) = %v, %v, want none", other, pids, err)
		}
	}
	pids, err := serversOf(s.data)
	if err != nil || len(pids) != 1 || pids[0] != s.current().os.Pid {
		t.Errorf("serversOf(%q) = %v, %v, want process %d alone", s.data, pids, err, s.current().os.Pid)
	}
}

func TestLongFolderGetsAShortSocket(t *testing.T) {
	dir := filepath.Join(folder(t), strings.Repeat("long", 30))
	s := mustStart(t, Config{Dir: dir, Fast: true})
	if len(s.socket) > longestSocketFolder {
		t.Errorf("socket folder %s has %d bytes, want at most %d", s.socket, len(s.socket), longestSocketFolder)
	}
	if got := query[int](t, s, "select 1"); got != 1 {
		t.Error("no answer")
	}
}

func TestStopWithAClientAndAnExpiredContext(t *testing.T) {
	s := mustStart(t, Config{Dir: folder(t), Fast: true, Logger: slog.New(slog.DiscardHandler)})
	conn, err := pgx.Connect(t.Context(), s.URL(Superuser, "postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.Background())
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	began := time.Now()
	if err := s.Stop(ctx); err != nil {
		t.Fatal(err)
	}
	if took := time.Since(began); took > gentle {
		t.Errorf("Stop took %v with an expired context, want an immediate end", took)
	}
	if err := conn.Ping(t.Context()); err == nil {
		t.Error("the client still has a server")
	}
}

func TestRemove(t *testing.T) {
	dir := folder(t)
	s := mustStart(t, Config{Dir: dir, Fast: true})
	mustStop(t, s)
	if err := Remove(t.Context(), dir); err != nil {
		t.Fatal(err)
	}
	if _, err := os.Stat(dir); !os.IsNotExist(err) {
		t.Errorf("folder after Remove: %v, want it gone", err)
	}
	foreign := t.TempDir()
	if err := Remove(t.Context(), foreign); err == nil {
		t.Error("Remove of a folder that is not a server's succeeded")
	}
	if _, err := os.Stat(foreign); err != nil {
		t.Errorf("a foreign folder was touched: %v", err)
	}
}
