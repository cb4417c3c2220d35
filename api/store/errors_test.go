package store_test

import (
	"context"
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"spanwright/api/service"
	"spanwright/api/store"
)

// Every key of the schema that a caller could run into has words of its own.
func TestEveryKeyHasAMessage(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	names := func(query string) map[string]bool {
		rows, err := f.db.Owner.Query(t.Context(), query)
		if err != nil {
			t.Fatal(err)
		}
		defer rows.Close()
		found := map[string]bool{}
		for rows.Next() {
			var name string
			if err := rows.Scan(&name); err != nil {
				t.Fatal(err)
			}
			found[name] = true
		}
		return found
	}
	foreign := names(`select conname from pg_constraint where contype = 'f' and connamespace = 'spanwright'::regnamespace and confrelid <> 'spanwright.organisation'::regclass`)
	// Keys that end with the id are violated by a repeated id only.
	unique := names(`select relname from pg_index i join pg_class c on c.oid = indexrelid where indisunique and relnamespace = 'spanwright'::regnamespace
		and (select attname from pg_attribute where attrelid = indexrelid and attnum = indnatts) <> 'id'`)
	words := func(m map[string]string) map[string]bool {
		found := map[string]bool{}
		for name := range m {
			found[name] = true
		}
		return found
	}
	if diff := cmp.Diff(foreign, words(store.Missing)); diff != "" {
		t.Errorf("foreign keys (-schema +messages):\n%s", diff)
	}
	if diff := cmp.Diff(unique, words(store.Taken)); diff != "" {
		t.Errorf("unique keys (-schema +messages):\n%s", diff)
	}
}

func TestCancelledUseCaseReturnsPromptlyAndLeavesNoSetting(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	s := mustOpen(t, f.db.ServiceURL, store.Options{MaxConnections: 1, LockTimeout: time.Minute})
	// Somebody else holds the scheme, so that InsertRevision waits.
	holding, err := f.db.Owner.Begin(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	defer holding.Rollback(context.Background())
	if _, err := holding.Exec(t.Context(), "select from scheme for update"); err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	timer := time.AfterFunc(100*time.Millisecond, cancel)
	defer timer.Stop()
	start := time.Now()
	err = s.InTenant(ctx, f.organisation, func(tx service.Tx) error { _, err := tx.InsertRevision(ctx, f.newRevision()); return err })
	if took := time.Since(start); !errors.Is(err, context.Canceled) || took > 10*time.Second {
		t.Errorf("after %v: %v, want the cancellation at once", took, err)
	}
	var setting *string
	var n int
	query := "select nullif(current_setting('app.organisation', true), ''), (select count(*) from project)"
	if err := store.Pool(s).QueryRow(t.Context(), query).Scan(&setting, &n); err != nil || setting != nil || n != 0 {
		t.Errorf("afterwards the setting is %v, %d projects are seen, %v", setting, n, err)
	}
	for name, err := range map[string]error{
		"InTenant":        s.InTenant(ctx, f.organisation, func(service.Tx) error { t.Error("fn was called"); return nil }),
		"TokenByPublicID": errorOf(s.TokenByPublicID(ctx, "x")), "SessionBySecret": errorOf(s.SessionBySecret(ctx, nil)), "Ready": s.Ready(ctx),
	} {
		if !errors.Is(err, context.Canceled) {
			t.Errorf("%s under a context that has ended: %v", name, err)
		}
	}
	// Under a lock timeout of its own the wait ends as Busy.
	s = mustOpen(t, f.db.ServiceURL, store.Options{LockTimeout: 50 * time.Millisecond})
	f.s = s
	f.refused("locked", service.Busy, "by somebody else", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.InsertRevision(ctx, f.newRevision())
		return err
	})
}

func errorOf(_ service.Credential, err error) error { return err }

func TestReady(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	if err := f.s.Ready(t.Context()); err != nil {
		t.Errorf("ready: %v", err)
	}
	for _, test := range []struct {
		sql, words string
		want       error
	}{
		{"update spanwright_migration.schema_migrations set version = 99", "newer than this program", store.ErrNewer},
		{"update spanwright_migration.schema_migrations set version = 2", "older than this program", store.ErrOlder},
		{"update spanwright_migration.schema_migrations set dirty = true", "marked dirty", store.ErrDirty},
	} {
		if _, err := f.db.Admin.Exec(t.Context(), test.sql); err != nil {
			t.Fatal(err)
		}
		err := f.s.Ready(t.Context())
		var e *service.Error
		if !errors.Is(err, test.want) || !errors.As(err, &e) || !strings.Contains(e.Message, test.words) {
			t.Errorf("after %q: %v, want %v", test.sql, err, test.want)
			continue
		}
		noSQL(t, test.sql, &service.Error{Message: e.Message})
	}
	f.s.Close()
	var e *service.Error
	if err := f.s.Ready(t.Context()); !errors.As(err, &e) || e.Message != "the database does not answer" {
		t.Errorf("closed: %v", err)
	}
}
