// Package localpg runs a PostgreSQL of the program's own, so that one command
// brings the whole service up on a machine that has the binaries installed.
//
// The way through the package: [Start] takes the lock of its folder → finds the
// binaries (find.go) → chooses the account and makes the data folder once
// (account.go, folder.go) → stops a server that an earlier program left behind,
// starts ours and waits until it answers (launch.go, process.go) → a supervisor
// starts it again should it die → [Server.Stop].
//
// The folder given holds: lock (held while a program uses the folder), data (the
// cluster), run (the socket), server.log. The server listens on the socket only,
// never on TCP. Only servers whose command line names this data folder are ever
// signalled; a data folder of another major version is refused, never wiped.
//
// Authentication is "trust" on a socket folder of mode 0700 that belongs to the
// account of the server. A password would have to lie in a file that this same
// account can read, and the account owns the data files anyway: it would guard
// nothing. The kernel's check of the folder admits that account and root only.
package localpg

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
)

// Superuser is the role that initdb makes. It bypasses row-level security: the
// service must connect as another role.
const Superuser = "postgres"

// port only names the socket file; nothing listens on a network port.
const port = "5432"

// Config says where the server lives and which binaries run it.
type Config struct {
	// Dir is the folder that belongs to the server; it is made if it is absent.
	// It must lie where the server's account can reach it, so not under /root.
	Dir string
	// BinDir is the folder of postgres and initdb. Empty: they are searched for
	// as described at [EnvBinDir].
	BinDir string
	// Logger receives the life of the server; nil discards it. What PostgreSQL
	// itself says goes to server.log.
	Logger *slog.Logger
	// Fast switches off what protects data against a crash of the machine. For
	// tests only.
	Fast bool
}

// Server is a running PostgreSQL. It is safe for use by several goroutines.
type Server struct {
	dir, data, socket string
	bin               binaries
	account           account
	log               *slog.Logger
	fast              bool
	lock              *os.File

	mu   sync.Mutex
	proc *process

	stopping   context.Context
	beginStop  context.CancelFunc
	supervisor chan struct{}
	stopOnce   sync.Once
	stopErr    error
}

// Start brings up the server of cfg.Dir and returns when it answers. A first
// start makes the data folder; later starts keep what is in it, also after the
// program or the server was killed. Without a deadline in ctx it gives up after
// two minutes.
//
// It fails when no suitable binaries are installed, when another program holds
// the folder, when the folder cannot be reached by the server's account, and
// when the data folder is of another major version or is not one at all.
func Start(ctx context.Context, cfg Config) (*Server, error) {
	if _, ok := ctx.Deadline(); !ok {
		var cancel context.CancelFunc
		ctx, cancel = context.WithTimeout(ctx, 2*time.Minute)
		defer cancel()
	}
	candidates, err := newFinder().find(ctx, cfg.BinDir)
	if err != nil {
		return nil, err
	}
	dir, err := makeFolder(cfg.Dir)
	if err != nil {
		return nil, err
	}
	lock, err := takeLock(dir)
	if err != nil {
		return nil, err
	}
	s, err := start(ctx, cfg, dir, candidates)
	if err != nil {
		return nil, errors.Join(err, lock.Close())
	}
	s.lock = lock
	return s, nil
}

// start does what needs the lock of dir.
func start(ctx context.Context, cfg Config, dir string, candidates []binaries) (*Server, error) {
	s := &Server{dir: dir, data: filepath.Join(dir, "data"), fast: cfg.Fast, log: cfg.Logger, supervisor: make(chan struct{})}
	if s.log == nil {
		s.log = slog.New(slog.DiscardHandler)
	}
	var err error
	if s.bin, err = choose(candidates, s.data); err != nil {
		return nil, err
	}
	if s.account, err = accountFor(s.data); err != nil {
		return nil, err
	}
	if err := reachable(dir, s.account); err != nil {
		return nil, err
	}
	if s.socket, err = socketFolder(dir); err != nil {
		return nil, err
	}
	if err := s.initialise(ctx); err != nil {
		return nil, err
	}
	s.stopping, s.beginStop = context.WithCancel(context.Background())
	if err := s.launch(ctx); err != nil {
		s.beginStop()
		return nil, err
	}
	go s.supervise()
	return s, nil
}

// Stop ends the server: clients are disconnected and the data is written down;
// a server that has not ended after ten seconds, or at the end of ctx, is told
// to quit at once, which the next start recovers from. The folder is free for
// another program when it returns. A second call returns what the first did.
func (s *Server) Stop(ctx context.Context) error {
	s.stopOnce.Do(func() {
		s.beginStop()
		<-s.supervisor
		s.stopErr = s.current().stop(ctx)
		s.stopErr = errors.Join(s.stopErr, os.RemoveAll(s.socket), s.lock.Close())
		s.log.Info("local PostgreSQL stopped", "folder", s.dir)
	})
	return s.stopErr
}

// AdminURL is the connection URL of the superuser for a database.
func (s *Server) AdminURL(database string) string { return s.URL(Superuser, database) }

// URL is the connection URL of a role for a database; it holds no secret.
func (s *Server) URL(role, database string) string {
	u := url.URL{
		Scheme: "postgres", User: url.User(role), Path: "/" + database,
		RawQuery: url.Values{"host": {s.socket}, "port": {port}, "sslmode": {"disable"}}.Encode(),
	}
	return u.String()
}

// BinDir is the folder of the binaries in use; pg_dump lies there too.
func (s *Server) BinDir() string { return s.bin.dir }

// CreateDatabase makes a database of that name unless there is one.
func (s *Server) CreateDatabase(ctx context.Context, name string) error {
	if name == "" || strings.ContainsRune(name, 0) {
		return fmt.Errorf("localpg: database name %q: want a name without NUL", name)
	}
	conn, err := pgx.Connect(ctx, s.AdminURL("postgres"))
	if err != nil {
		return fmt.Errorf("localpg: create database %q: %w", name, err)
	}
	defer conn.Close(context.WithoutCancel(ctx))
	_, err = conn.Exec(ctx, "create database "+pgx.Identifier{name}.Sanitize())
	var pgErr *pgconn.PgError
	if errors.As(err, &pgErr) && (pgErr.Code == "42P04" || pgErr.Code == "23505") {
		return nil // it exists, or another session has just made it
	}
	if err != nil {
		return fmt.Errorf("localpg: create database %q: %w", name, err)
	}
	return nil
}

// Remove deletes the folder of a server that no program uses, after stopping a
// server that a killed program may have left running in it. It refuses a folder
// that a program holds, and one that is not a folder made by [Start].
func Remove(ctx context.Context, dir string) error {
	if _, err := os.Stat(filepath.Join(dir, lockName)); err != nil {
		return fmt.Errorf("localpg: %s is not the folder of a local PostgreSQL: %w", dir, err)
	}
	dir, err := filepath.EvalSymlinks(dir)
	if err != nil {
		return fmt.Errorf("localpg: remove: %w", err)
	}
	lock, err := takeLock(dir)
	if err != nil {
		return err
	}
	defer lock.Close()
	if err := stopOrphans(ctx, filepath.Join(dir, "data"), slog.New(slog.DiscardHandler)); err != nil {
		return err
	}
	if err := os.RemoveAll(dir); err != nil {
		return fmt.Errorf("localpg: remove: %w", err)
	}
	return nil
}
