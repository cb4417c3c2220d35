// Package pgtest gives tests a real database. It is imported from tests only.
//
// The way: [Main] runs the tests of a package → the first [New] starts one server
// for the whole test binary and migrates a template → every New copies the
// template into a database of its own and connects the four roles to it → the
// test's cleanup drops the database → Main stops the server and removes it.
//
// Nothing is skipped: where PostgreSQL is not installed the tests fail and say
// what to install.
package pgtest

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgxpool"

	"spanwright/api/localpg"
	"spanwright/api/store"
)

const (
	template = "spanwright_template"
	prefix   = "spanwright-pgtest-"
)

// Database is a database for one test, with a pool and a URL a role. Pools
// connect when they are first used. Their search path is the schema spanwright.
type Database struct {
	Name                                      string
	Admin, Owner, Service, Reader             *pgxpool.Pool
	AdminURL, OwnerURL, ServiceURL, ReaderURL string
}

// running is the server of this test binary.
var running struct {
	sync.Mutex
	main   bool
	server *localpg.Server
	dir    string
	err    error
}

var counter atomic.Int64

// Main is the body of a package's TestMain: it runs the tests, stops the server
// and ends the process.
func Main(m *testing.M) { os.Exit(Run(m)) }

// Run is [Main] for a TestMain that has more to do: it returns the exit code.
func Run(m *testing.M) int {
	running.Lock()
	running.main = true
	running.Unlock()
	code := m.Run()
	if err := stop(); err != nil {
		fmt.Fprintln(os.Stderr, "pgtest:", err)
		code = max(code, 1)
	}
	return code
}

// New makes a database with the newest schema and no rows.
func New(tb testing.TB) *Database {
	tb.Helper()
	return create(tb, server(tb), template)
}

// NewEmpty makes a database without the schema, for tests of migrations.
func NewEmpty(tb testing.TB) *Database {
	tb.Helper()
	return create(tb, server(tb), "template1")
}

// BinDir is the folder of the server's programs, such as pg_dump.
func BinDir(tb testing.TB) string {
	tb.Helper()
	return server(tb).BinDir()
}

func create(tb testing.TB, s *localpg.Server, from string) *Database {
	tb.Helper()
	name := fmt.Sprintf("test_%d", counter.Add(1))
	ctx := context.Background()
	if err := execute(ctx, s, "create database "+name+" template "+from); err != nil {
		tb.Fatalf("pgtest: create database: %v", err)
	}
	d := &Database{
		Name: name, AdminURL: s.AdminURL(name), OwnerURL: s.URL("spanwright_owner", name),
		ServiceURL: s.URL("spanwright_service", name), ReaderURL: s.URL("spanwright_reader", name),
	}
	tb.Cleanup(func() {
		if err := execute(ctx, s, "drop database "+name+" with (force)"); err != nil {
			tb.Errorf("pgtest: drop database: %v", err)
		}
	})
	d.Admin, d.Owner = open(tb, d.AdminURL), open(tb, d.OwnerURL)
	d.Service, d.Reader = open(tb, d.ServiceURL), open(tb, d.ReaderURL)
	return d
}

func open(tb testing.TB, url string) *pgxpool.Pool {
	tb.Helper()
	config, err := pgxpool.ParseConfig(url)
	if err != nil {
		tb.Fatalf("pgtest: %v", err)
	}
	config.MaxConns = 4
	config.ConnConfig.RuntimeParams["search_path"] = "spanwright"
	pool, err := pgxpool.NewWithConfig(context.Background(), config)
	if err != nil {
		tb.Fatalf("pgtest: %v", err)
	}
	tb.Cleanup(pool.Close)
	return pool
}

func execute(ctx context.Context, s *localpg.Server, sql string) error {
	conn, err := pgx.Connect(ctx, s.AdminURL("postgres"))
	if err != nil {
		return err
	}
	_, err = conn.Exec(ctx, sql)
	return errors.Join(err, conn.Close(ctx))
}

// server returns the server of this test binary and starts it when it is the
// first to ask.
func server(tb testing.TB) *localpg.Server {
	tb.Helper()
	running.Lock()
	defer running.Unlock()
	if !running.main {
		tb.Fatal("pgtest: the package needs func TestMain(m *testing.M) { pgtest.Main(m) }, which stops the server")
	}
	if running.server == nil && running.err == nil {
		running.server, running.dir, running.err = begin()
	}
	if running.err != nil {
		tb.Fatalf("pgtest: %v", running.err)
	}
	return running.server
}

func begin() (*localpg.Server, string, error) {
	ctx := context.Background()
	removeLeftovers(ctx)
	dir, err := os.MkdirTemp("", prefix)
	if err != nil {
		return nil, "", err
	}
	if err := os.Chmod(dir, 0o711); err != nil { // the server runs as another user than root
		return nil, dir, err
	}
	s, err := localpg.Start(ctx, localpg.Config{Dir: dir, Fast: true})
	if err != nil {
		return nil, dir, err
	}
	err = s.CreateDatabase(ctx, template)
	if err == nil {
		err = store.Migrate(ctx, s.AdminURL(template))
	}
	return s, dir, err
}

// removeLeftovers removes the servers of test binaries that were killed; those in
// use refuse.
func removeLeftovers(ctx context.Context) {
	dirs, err := filepath.Glob(filepath.Join(os.TempDir(), prefix+"*"))
	if err != nil {
		return
	}
	for _, dir := range dirs {
		if info, err := os.Stat(dir); err == nil && time.Since(info.ModTime()) > time.Hour {
			_ = localpg.Remove(ctx, dir) // in use, or somebody else's: it stays
		}
	}
}

func stop() error {
	running.Lock()
	defer running.Unlock()
	var err error
	if running.server != nil {
		err = running.server.Stop(context.Background())
	}
	if running.dir != "" {
		err = errors.Join(err, os.RemoveAll(running.dir))
	}
	return err
}
