package store_test

import (
	"context"
	"errors"
	"testing"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/pgtest"
	"spanwright/api/store"
)

const insertProject = `insert into project (organisation_id, id, name, currency, base_date, display_units)
	values ($1, $2, $3, 'EUR', '2026-01-01', 'metric')`

func countProjects(t *testing.T, s *store.Store, organisation uuid.UUID) int {
	t.Helper()
	var n int
	err := store.InTenant(t.Context(), s, organisation, func(tx pgx.Tx) error {
		return tx.QueryRow(t.Context(), "select count(*) from project").Scan(&n)
	})
	if err != nil {
		t.Fatal(err)
	}
	return n
}

func TestInTenant(t *testing.T) {
	db := pgtest.New(t)
	s := mustOpen(t, db.ServiceURL, store.Options{})
	first, second := newOrganisation(t, db), newOrganisation(t, db)
	insert := func(in, of uuid.UUID) error {
		return store.InTenant(t.Context(), s, in, func(tx pgx.Tx) error {
			_, err := tx.Exec(t.Context(), insertProject, of, uuid.Must(uuid.NewV7()), "loading quay")
			return err
		})
	}
	if err := insert(first, first); err != nil {
		t.Fatal(err)
	}
	if got := code(insert(second, first)); got != "42501" { // insufficient_privilege
		t.Errorf("insert for another organisation: %s, want 42501", got)
	}
	if got := countProjects(t, s, first); got != 1 {
		t.Errorf("own projects = %d, want 1", got)
	}
	if got := countProjects(t, s, second); got != 0 {
		t.Errorf("projects of another organisation = %d, want 0", got)
	}

	fault := errors.New("fault")
	err := store.InTenant(t.Context(), s, second, func(tx pgx.Tx) error {
		if _, err := tx.Exec(t.Context(), insertProject, second, uuid.Must(uuid.NewV7()), "pan house"); err != nil {
			return err
		}
		return fault
	})
	if !errors.Is(err, fault) {
		t.Errorf("error %v, want the function's own", err)
	}
	if got := countProjects(t, s, second); got != 0 {
		t.Errorf("projects after a rolled-back transaction = %d, want 0", got)
	}
	called := false
	if err := store.InTenant(t.Context(), s, uuid.Nil, func(pgx.Tx) error { called = true; return nil }); err == nil || called {
		t.Errorf("without an organisation: error %v, called %v", err, called)
	}
}

// After each way for a transaction to end, the only connection of the pool must
// see nothing when no organisation is set.
func TestNoSettingIsLeftOnAPooledConnection(t *testing.T) {
	db := pgtest.New(t)
	organisation := newOrganisation(t, db)
	if _, err := db.Owner.Exec(t.Context(), insertProject, organisation, uuid.Must(uuid.NewV7()), "loading quay"); err != nil {
		t.Fatal(err)
	}
	s := mustOpen(t, db.ServiceURL, store.Options{MaxConnections: 1})
	pool := store.Pool(s)
	endings := map[string]func(context.Context, context.CancelFunc, pgx.Tx) error{
		"commit":   func(context.Context, context.CancelFunc, pgx.Tx) error { return nil },
		"rollback": func(context.Context, context.CancelFunc, pgx.Tx) error { return errors.New("fault") },
		"sql error": func(ctx context.Context, _ context.CancelFunc, tx pgx.Tx) error {
			_, err := tx.Exec(ctx, "select 1/0")
			return err
		},
		"cancelled before a statement": func(ctx context.Context, cancel context.CancelFunc, tx pgx.Tx) error {
			cancel()
			_, err := tx.Exec(ctx, "select 1")
			return err
		},
		"cancelled in a statement": func(ctx context.Context, cancel context.CancelFunc, tx pgx.Tx) error {
			timer := time.AfterFunc(50*time.Millisecond, cancel)
			defer timer.Stop()
			_, err := tx.Exec(ctx, "select pg_sleep(10)")
			return err
		},
		"cancelled before commit": func(_ context.Context, cancel context.CancelFunc, _ pgx.Tx) error { cancel(); return nil },
	}
	for name, ending := range endings {
		ctx, cancel := context.WithCancel(t.Context())
		err := store.InTenant(ctx, s, organisation, func(tx pgx.Tx) error {
			var n int
			if err := tx.QueryRow(ctx, "select count(*) from project").Scan(&n); err != nil || n != 1 {
				t.Errorf("%s: inside the transaction %d projects, %v, want 1", name, n, err)
			}
			return ending(ctx, cancel, tx)
		})
		cancel()
		if (err == nil) != (name == "commit") {
			t.Errorf("%s: error %v", name, err)
		}
		var n int
		var setting *string
		if err := pool.QueryRow(t.Context(), "select (select count(*) from project), nullif(current_setting('app.organisation', true), '')").Scan(&n, &setting); err != nil {
			t.Fatal(err)
		}
		if n != 0 || setting != nil {
			t.Errorf("%s: afterwards %d projects are seen and the setting is %v, want none", name, n, setting)
		}
	}
}
