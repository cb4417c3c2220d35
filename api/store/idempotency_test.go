package store_test

import (
	"bytes"
	"context"
	"sync/atomic"
	"testing"
	"time"

	"spanwright/api/service"
)

func memory() service.Memory {
	return service.Memory{Fingerprint: bytes.Repeat([]byte{7}, 32), Resource: newID(), Body: []byte(`{"scheme": 1}`), CreatedAt: at(1)}
}

func TestRemember(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	first, bodiless := memory(), memory()
	bodiless.Body = nil
	f.do(func(tx service.Tx) error {
		if _, err := tx.Remembered(ctx, f.token.ID, "intake", "k"); kind(err) != service.NotFound {
			t.Errorf("before: %v, want NotFound", err)
		}
		if err := tx.Remember(ctx, f.token.ID, "intake", "k", first); err != nil {
			return err
		}
		return tx.Remember(ctx, f.token.ID, "create project", "k", bodiless)
	})
	f.do(func(tx service.Tx) error {
		f.same(got[service.Memory](f)(tx.Remembered(ctx, f.token.ID, "intake", "k")), first)
		f.same(got[service.Memory](f)(tx.Remembered(ctx, f.token.ID, "create project", "k")), bodiless)
		return nil
	})
	remember := func(change func(*service.Memory)) func(context.Context, service.Tx) error {
		m := memory()
		change(&m)
		return func(ctx context.Context, tx service.Tx) error { return tx.Remember(ctx, f.token.ID, "intake", "k", m) }
	}
	f.refused("other key", service.NotFound, "no such idempotency record", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.Remembered(ctx, f.token.ID, "intake", "K")
		return err
	})
	f.refused("other token", service.NotFound, "no such idempotency record", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.Remembered(ctx, newID(), "intake", "k")
		return err
	})
	f.refused("twice", service.Conflict, "Idempotency-Key", remember(func(*service.Memory) {}))
	f.refused("fingerprint that is none", service.Invalid, "outside of what can be stored", remember(func(m *service.Memory) { m.Fingerprint = []byte("short") }))
	f.refused("no token", service.NotFound, "no such token", func(ctx context.Context, tx service.Tx) error {
		return tx.Remember(ctx, newID(), "intake", "other", memory())
	})
}

// Without asking first, one of many writes the record; the others get Conflict.
func TestOneOfManyRemembers(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	var won, lost atomic.Int32
	err := together(8, func(int) error {
		err := f.s.InTenant(t.Context(), f.organisation, func(tx service.Tx) error {
			err := tx.Remember(t.Context(), f.token.ID, "intake", "k", memory())
			time.Sleep(20 * time.Millisecond) // the others arrive before this one commits
			return err
		})
		switch {
		case err == nil:
			won.Add(1)
		case kind(err) == service.Conflict:
			lost.Add(1)
		default:
			return err
		}
		return nil
	})
	if err != nil || won.Load() != 1 || lost.Load() != 7 {
		t.Errorf("%d won, %d lost, %v, want 1 and 7", won.Load(), lost.Load(), err)
	}
}

// Who asks first makes the effect; the others, who asked at the same time, find
// its record and do not run into the name that it has taken.
func TestSimultaneousAttemptsMakeOneEffect(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	var made atomic.Int32
	err := together(8, func(int) error {
		return f.s.InTenant(t.Context(), f.organisation, func(tx service.Tx) error {
			_, err := tx.Remembered(t.Context(), f.token.ID, "create project", "k")
			if kind(err) != service.NotFound {
				return err
			}
			made.Add(1)
			time.Sleep(200 * time.Millisecond) // the others arrive meanwhile
			p := service.Project{ID: newID(), Name: "Once", Currency: "EUR", DisplayUnits: "SI", Version: 1, CreatedAt: at(1), UpdatedAt: at(1)}
			if err := tx.InsertProject(t.Context(), p); err != nil {
				return err
			}
			return tx.Remember(t.Context(), f.token.ID, "create project", "k", memory())
		})
	})
	if err != nil || made.Load() != 1 {
		t.Errorf("%d made it, %v, want 1", made.Load(), err)
	}
}
