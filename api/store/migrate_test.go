package store_test

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/jackc/pgx/v5"

	"spanwright/api/localpg"
	"spanwright/api/pgtest"
	"spanwright/api/store"
	"spanwright/migrations"
)

func mustVersion(t *testing.T, db *pgtest.Database) (uint, bool) {
	t.Helper()
	version, dirty, err := store.Version(t.Context(), db.Admin)
	if err != nil {
		t.Fatal(err)
	}
	return version, dirty
}

func TestMigrateVersionDown(t *testing.T) {
	db := pgtest.NewEmpty(t)
	if version, dirty := mustVersion(t, db); version != 0 || dirty {
		t.Errorf("empty database: version %d, dirty %v, want 0, false", version, dirty)
	}
	for range 2 { // the second finds nothing to do
		if err := store.Migrate(t.Context(), db.AdminURL); err != nil {
			t.Fatal(err)
		}
		if version, dirty := mustVersion(t, db); version != migrations.Latest || dirty {
			t.Errorf("version %d, dirty %v, want %d, false", version, dirty, migrations.Latest)
		}
	}
	if version, _, err := store.Version(t.Context(), db.Service); version != migrations.Latest || err != nil {
		t.Errorf("as the service: version %d, %v, want %d", version, err, migrations.Latest)
	}
	for _, to := range []uint{3, 3, 5, 0, 0} {
		if err := store.Down(t.Context(), db.AdminURL, to); err != nil {
			t.Fatal(err)
		}
		if version, _ := mustVersion(t, db); version > to {
			t.Errorf("version after Down to %d = %d", to, version)
		}
	}
}

func TestMigrateAsAMemberOfTheOwner(t *testing.T) {
	db := pgtest.NewEmpty(t)
	pgtest.New(t) // makes sure that the roles exist
	for _, sql := range []string{
		"create role test_migrator login in role spanwright_owner",
		"grant create on database " + db.Name + " to test_migrator, spanwright_owner",
	} {
		if _, err := db.Admin.Exec(t.Context(), sql); err != nil {
			t.Fatal(err)
		}
	}
	t.Cleanup(func() {
		if _, err := db.Admin.Exec(context.Background(), "drop owned by test_migrator; drop role test_migrator"); err != nil {
			t.Error(err)
		}
	})
	url := strings.Replace(db.AdminURL, "postgres@", "test_migrator@", 1)
	for _, step := range []func() error{
		func() error { return store.Migrate(t.Context(), url) },
		func() error { return store.Down(t.Context(), url, 0) },
		func() error { return store.Migrate(t.Context(), db.OwnerURL) },
	} {
		if err := step(); err != nil {
			t.Fatal(err)
		}
	}
	mustOpen(t, db.ServiceURL, store.Options{})
}

func TestMigrateRefusals(t *testing.T) {
	tests := []struct {
		name, sql string
		is        error
		want      []string
	}{
		{"newer", "update spanwright_migration.schema_migrations set version = 99", store.ErrNewer,
			[]string{"schema version 99", "use the newer program"}},
		{"dirty", "update spanwright_migration.schema_migrations set version = 4, dirty = true", store.ErrDirty,
			[]string{"at version 4", "migrations/000004_*", "set dirty = false", "set version = 3, dirty = false"}},
		{"dirty at the first", "update spanwright_migration.schema_migrations set version = 1, dirty = true", store.ErrDirty,
			[]string{"at version 1", "delete from spanwright_migration.schema_migrations"}},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			db := pgtest.New(t)
			if _, err := db.Admin.Exec(t.Context(), test.sql); err != nil {
				t.Fatal(err)
			}
			for _, err := range []error{store.Migrate(t.Context(), db.AdminURL), store.Down(t.Context(), db.AdminURL, 0)} {
				if !errors.Is(err, test.is) {
					t.Fatalf("error %v, want %v", err, test.is)
				}
				for _, want := range test.want {
					if !strings.Contains(err.Error(), want) {
						t.Errorf("error %q, want %q in it", err, want)
					}
				}
			}
		})
	}
}

// The advice of the dirty message is followed to the letter: a migration that did
// not take effect is marked so, then applied.
func TestMendingADirtySchema(t *testing.T) {
	db := pgtest.New(t)
	if err := store.Down(t.Context(), db.AdminURL, 4); err != nil {
		t.Fatal(err)
	}
	for _, sql := range []string{
		"update spanwright_migration.schema_migrations set version = 5, dirty = true", // as an interrupted 5 leaves it
		"update spanwright_migration.schema_migrations set version = 4, dirty = false",
	} {
		if _, err := db.Admin.Exec(t.Context(), sql); err != nil {
			t.Fatal(err)
		}
	}
	if err := store.Migrate(t.Context(), db.AdminURL); err != nil {
		t.Fatal(err)
	}
	mustOpen(t, db.ServiceURL, store.Options{})
}

// A migration that fails leaves nothing of itself: its file is one transaction.
func TestFailedMigrationLeavesNothing(t *testing.T) {
	db := pgtest.New(t)
	if err := store.Down(t.Context(), db.AdminURL, 5); err != nil {
		t.Fatal(err)
	}
	if _, err := db.Owner.Exec(t.Context(), "create table audit_event ()"); err != nil { // in the way of the second statement
		t.Fatal(err)
	}
	err := store.Migrate(t.Context(), db.AdminURL)
	if got := code(err); got != "42P07" { // duplicate_table
		t.Fatalf("error %v, want 42P07", err)
	}
	if !strings.Contains(err.Error(), "on the way to version 6") || strings.Contains(err.Error(), "\n") {
		t.Errorf("error %q, want one line that names the migration", err)
	}
	if version, dirty := mustVersion(t, db); version != 6 || !dirty {
		t.Errorf("version %d, dirty %v, want 6, true", version, dirty)
	}
	var exists bool
	if err := db.Owner.QueryRow(t.Context(), "select to_regclass('spanwright.idempotency') is not null").Scan(&exists); err != nil {
		t.Fatal(err)
	}
	if exists {
		t.Error("the first table of the failed migration exists")
	}
}

func TestMigrateTogether(t *testing.T) {
	db := pgtest.NewEmpty(t)
	if errs := together(4, func(int) error { return store.Migrate(t.Context(), db.AdminURL) }); errs != nil {
		t.Fatal(errs)
	}
	if version, dirty := mustVersion(t, db); version != migrations.Latest || dirty {
		t.Errorf("version %d, dirty %v, want %d, false", version, dirty, migrations.Latest)
	}
}

// A cluster without the roles, several databases of it migrated at once: the lock
// is per database, so that the roles are made in competition.
func TestRolesMadeTogether(t *testing.T) {
	base, err := os.MkdirTemp("", "roles")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.RemoveAll(base) })
	if err := os.Chmod(base, 0o711); err != nil {
		t.Fatal(err)
	}
	s, err := localpg.Start(t.Context(), localpg.Config{Dir: filepath.Join(base, "pg"), Fast: true})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { s.Stop(context.Background()) })
	names := []string{"a", "b", "c", "d", "e"}
	for _, name := range names {
		if err := s.CreateDatabase(t.Context(), name); err != nil {
			t.Fatal(err)
		}
	}
	if errs := together(len(names), func(i int) error { return store.Migrate(t.Context(), s.AdminURL(names[i])) }); errs != nil {
		t.Fatal(errs)
	}
	conn, err := pgx.Connect(t.Context(), s.AdminURL("a"))
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(context.Background())
	rows, err := conn.Query(t.Context(), `select rolname || ': super ' || rolsuper || ', bypass ' || rolbypassrls || ', create role ' || rolcreaterole || ', create database ' || rolcreatedb
		from pg_roles where rolname like 'spanwright%' order by rolname`)
	if err != nil {
		t.Fatal(err)
	}
	got, err := pgx.CollectRows(rows, pgx.RowTo[string])
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		"spanwright_owner: super false, bypass true, create role false, create database false",
		"spanwright_reader: super false, bypass false, create role false, create database false",
		"spanwright_service: super false, bypass false, create role false, create database false",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("roles (-want +got):\n%s", diff)
	}

	// Roles that somebody has changed are refused, with the way out.
	for _, change := range []struct{ damage, mend string }{
		{"alter role spanwright_owner nobypassrls", "alter role spanwright_owner bypassrls"},
		{"alter role spanwright_service bypassrls", "alter role spanwright_service nobypassrls"},
	} {
		if _, err := conn.Exec(t.Context(), change.damage); err != nil {
			t.Fatal(err)
		}
		if _, err := conn.Exec(t.Context(), "drop database if exists spoilt"); err != nil {
			t.Fatal(err)
		}
		if err := s.CreateDatabase(t.Context(), "spoilt"); err != nil {
			t.Fatal(err)
		}
		if err := store.Migrate(t.Context(), s.AdminURL("spoilt")); err == nil || !strings.Contains(err.Error(), "bypassrls)") {
			t.Errorf("after %q: %v, want a refusal with its remedy", change.damage, err)
		}
		if _, err := conn.Exec(t.Context(), change.mend); err != nil {
			t.Fatal(err)
		}
	}
}

func TestMigrateWaitsForTheLockNoLongerThanItsContext(t *testing.T) {
	db := pgtest.NewEmpty(t)
	conn, err := db.Admin.Acquire(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Release()
	if _, err := conn.Exec(t.Context(), "select pg_advisory_lock($1)", int64(0x7370616e77726931)); err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithTimeout(t.Context(), 200e6)
	defer cancel()
	if err := store.Migrate(ctx, db.AdminURL); !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v, want the deadline", err)
	}
	if version, _ := mustVersion(t, db); version != 0 {
		t.Errorf("version %d, want 0: another program held the lock", version)
	}
}

func together(n int, do func(int) error) error {
	errs := make([]error, n)
	var wait sync.WaitGroup
	for i := range n {
		wait.Go(func() { errs[i] = do(i) })
	}
	wait.Wait()
	return errors.Join(errs...)
}
