package localpg

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"log/slog"
	"os"
	"os/exec"
	"path/filepath"
	"time"

	"github.com/jackc/pgx/v5"
)

const (
	// attempts covers the second or so for which the processes of a killed server
	// still hold its shared memory.
	attempts = 6
	// mostLog is the size in bytes above which server.log starts afresh.
	mostLog = 16 << 20
)

func (s *Server) current() *process {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.proc
}

// launch starts the process and returns when it answers.
func (s *Server) launch(ctx context.Context) error {
	began := time.Now()
	var err error
	for attempt := range attempts {
		if attempt > 0 {
			s.log.Warn("local PostgreSQL did not start, trying again", "attempt", attempt+1, "cause", err)
			if waitErr := pause(ctx, time.Duration(attempt)*200*time.Millisecond); waitErr != nil {
				return errors.Join(err, waitErr)
			}
		}
		if err = s.clear(ctx); err != nil {
			return err
		}
		if err = s.try(ctx); err == nil {
			s.log.Info("local PostgreSQL ready", "folder", s.dir, "version", s.bin.major, "account", s.account.name, "after", time.Since(began))
			return nil
		}
		if ctx.Err() != nil {
			return err
		}
	}
	return err
}

// clear removes what an earlier server left: the server itself, its pid file and
// its socket.
func (s *Server) clear(ctx context.Context) error {
	if err := stopOrphans(ctx, s.data, s.log); err != nil {
		return err
	}
	pidFile := filepath.Join(s.data, "postmaster.pid")
	if err := os.Remove(pidFile); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("localpg: stale pid file: %w", err)
	}
	return s.clearSocketFolder()
}

// stopOrphans ends the servers of this data folder, which the holder of the lock
// knows to belong to no living program.
func stopOrphans(ctx context.Context, data string, log *slog.Logger) error {
	pids, err := serversOf(data)
	if err != nil {
		return fmt.Errorf("localpg: looking for an earlier server: %w", err)
	}
	for _, pid := range pids {
		log.Warn("local PostgreSQL of an earlier program is still running: stopping it", "pid", pid, "folder", data)
		if err := stopPID(ctx, pid, data); err != nil {
			return err
		}
	}
	return nil
}

// try starts the process once.
func (s *Server) try(ctx context.Context) error {
	logFile, from, err := s.openLog()
	if err != nil {
		return err
	}
	defer logFile.Close()
	p, err := startProcess(s.command(logFile))
	if err != nil {
		return fmt.Errorf("localpg: starting postgres: %w", err)
	}
	if err := s.ready(ctx, p); err != nil {
		said := make([]byte, 64<<10)
		n, _ := logFile.ReadAt(said, from)
		return errors.Join(fmt.Errorf("localpg: postgres in %s: %w: %s", s.dir, err, lastLines(said[:n])), p.stop(context.WithoutCancel(ctx)))
	}
	s.mu.Lock()
	s.proc = p
	s.mu.Unlock()
	return nil
}

// command is the server's command line; serversOf recognises it again.
func (s *Server) command(log *os.File) *exec.Cmd {
	args := []string{"-D", s.data, "-k", s.socket, "-p", port,
		"-c", "listen_addresses=", "-c", "logging_collector=off", "-c", "log_destination=stderr",
		"-c", "timezone=UTC", "-c", "log_timezone=UTC"}
	if s.fast {
		args = append(args, "-c", "fsync=off", "-c", "synchronous_commit=off", "-c", "full_page_writes=off")
	}
	cmd := exec.Command(s.bin.path("postgres"), args...)
	s.prepare(cmd)
	cmd.Stdout, cmd.Stderr = log, log
	cmd.SysProcAttr = attributes(s.account, true)
	return cmd
}

// openLog opens server.log and tells where this start's lines begin.
func (s *Server) openLog() (*os.File, int64, error) {
	path := filepath.Join(s.dir, "server.log")
	if info, err := os.Stat(path); err == nil && info.Size() > mostLog {
		if err := os.Rename(path, path+".old"); err != nil {
			return nil, 0, fmt.Errorf("localpg: %w", err)
		}
	}
	f, err := os.OpenFile(path, os.O_CREATE|os.O_RDWR|os.O_APPEND, 0o600)
	if err != nil {
		return nil, 0, fmt.Errorf("localpg: %w", err)
	}
	info, err := f.Stat()
	if err != nil {
		return nil, 0, errors.Join(fmt.Errorf("localpg: %w", err), f.Close())
	}
	return f, info.Size(), nil
}

// ready returns when the server takes a connection, which after a crash is when
// its recovery is over.
func (s *Server) ready(ctx context.Context, p *process) error {
	for {
		conn, err := pgx.Connect(ctx, s.AdminURL("postgres"))
		if err == nil {
			return conn.Close(ctx)
		}
		select {
		case <-p.exited:
			return fmt.Errorf("it ended before it was ready: %w", p.err)
		case <-ctx.Done():
			return fmt.Errorf("it was not ready in time: %w: %w", ctx.Err(), err)
		case <-time.After(15 * time.Millisecond):
		}
	}
}

// supervise starts the server again when it dies without having been told to.
func (s *Server) supervise() {
	defer close(s.supervisor)
	for {
		p := s.current()
		select {
		case <-s.stopping.Done():
			return
		case <-p.exited:
		}
		s.log.Error("local PostgreSQL died: starting it again", "folder", s.dir, "cause", p.err)
		ctx, cancel := context.WithTimeout(s.stopping, 2*time.Minute)
		err := s.launch(ctx)
		cancel()
		if err != nil {
			s.log.Error("local PostgreSQL does not start again", "folder", s.dir, "cause", err)
			if pause(s.stopping, 5*time.Second) != nil {
				return
			}
		}
	}
}

func pause(ctx context.Context, d time.Duration) error {
	select {
	case <-ctx.Done():
		return ctx.Err()
	case <-time.After(d):
		return nil
	}
}
