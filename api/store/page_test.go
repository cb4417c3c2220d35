package store_test

import (
	"context"
	"encoding/base64"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/uuid"

	"spanwright/api/service"
)

// walk reads a list page by page and returns the ids in the order in which they came.
func walk(t *testing.T, limit int, read func(service.Page) (service.List[service.Project], error)) []uuid.UUID {
	t.Helper()
	var ids []uuid.UUID
	for p := (service.Page{Limit: limit}); ; {
		l, err := read(p)
		if err != nil {
			t.Fatal(err)
		}
		if len(l.Items) > limit || (l.Next != "" && len(l.Items) != limit) {
			t.Fatalf("a page of %d, limit %d, next %q", len(l.Items), limit, l.Next)
		}
		if len(ids) > 1000 {
			t.Fatalf("limit %d: the pages have no end", limit)
		}
		for _, item := range l.Items {
			ids = append(ids, item.ID)
		}
		if l.Next == "" {
			return ids
		}
		p.Cursor = l.Next
	}
}

func TestPagesOverEqualTimes(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	want := []service.Project{f.project}
	f.do(func(tx service.Tx) error {
		for i := range 119 {
			p := service.Project{ID: newID(), Name: fmt.Sprint("project ", i), Currency: "EUR", DisplayUnits: "SI", Version: 1, CreatedAt: at(100 + i/40), UpdatedAt: at(100)}
			if err := tx.InsertProject(ctx, p); err != nil {
				return err
			}
			want = append(want, p)
		}
		return nil
	})
	slices.SortFunc(want, func(a, b service.Project) int { // newest first, then the largest id
		if c := b.CreatedAt.Compare(a.CreatedAt); c != 0 {
			return c
		}
		return strings.Compare(b.ID.String(), a.ID.String())
	})
	ids := make([]uuid.UUID, len(want))
	for i := range want {
		ids[i] = want[i].ID
	}
	for _, limit := range []int{1, 7, 40, 60, 119, 120, 121, 200} {
		f.do(func(tx service.Tx) error {
			got := walk(t, limit, func(p service.Page) (service.List[service.Project], error) { return tx.Projects(ctx, p) })
			if diff := cmp.Diff(ids, got); diff != "" {
				t.Errorf("limit %d (-want +got):\n%s", limit, diff)
			}
			return nil
		})
	}
	f.do(func(tx service.Tx) error {
		l := got[service.List[service.Project]](f)(tx.Projects(ctx, service.Page{}))
		if len(l.Items) != 50 || l.Next == "" {
			t.Errorf("without a limit: %d items, next %q, want 50 and more", len(l.Items), l.Next)
		}
		return nil
	})
	// A row that is made between two pages moves no other one.
	var first service.List[service.Project]
	f.do(func(tx service.Tx) error {
		first = got[service.List[service.Project]](f)(tx.Projects(ctx, service.Page{Limit: 10}))
		return nil
	})
	f.do(func(tx service.Tx) error {
		return tx.InsertProject(ctx, service.Project{ID: newID(), Name: "late", Currency: "EUR", DisplayUnits: "SI", Version: 1, CreatedAt: at(999), UpdatedAt: at(999)})
	})
	f.do(func(tx service.Tx) error {
		second := got[service.List[service.Project]](f)(tx.Projects(ctx, service.Page{Limit: 10, Cursor: first.Next}))
		if second.Items[0].ID != ids[10] {
			t.Errorf("the second page begins with %s, want %s", second.Items[0].Name, want[10].Name)
		}
		return nil
	})
}

// Every list goes through the same reader; each must know its own columns.
func TestEveryListTakesACursor(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	cursor := cursorOf(at(10_000), newID()) // later than everything
	page := service.Page{Limit: 1, Cursor: cursor}
	f.do(func(tx service.Tx) error {
		event := service.AuditEvent{ID: newID(), At: at(1), ActorName: "a", ActorRole: "b", Action: "c", SubjectKind: "d", SubjectID: newID()}
		if err := tx.InsertAudit(t.Context(), event); err != nil {
			return err
		}
		for name, n := range lists(t.Context(), tx, f, page) {
			if n != 1 {
				t.Errorf("%s: %d items after a cursor in the future, want 1", name, n)
			}
		}
		page.Cursor = cursorOf(time.UnixMicro(0), uuid.Nil)
		for name, n := range lists(t.Context(), tx, f, page) {
			if n != 0 {
				t.Errorf("%s: %d items after a cursor in the past, want 0", name, n)
			}
		}
		return nil
	})
}

// lists counts the items that every list of Tx answers with; -1 is an error.
func lists(ctx context.Context, tx service.Tx, f fixture, p service.Page) map[string]int {
	counts := map[string]int{}
	counts["projects"] = length(tx.Projects(ctx, p))
	counts["schemes"] = length(tx.Schemes(ctx, f.project.ID, p))
	counts["revisions"] = length(tx.Revisions(ctx, f.scheme.ID, p))
	counts["estimates"] = length(tx.Estimates(ctx, f.scheme.ID, p))
	counts["rate books"] = length(tx.RateBooks(ctx, p))
	counts["multipliers"] = length(tx.Multipliers(ctx, f.project.ID, p))
	counts["outturns"] = length(tx.Outturns(ctx, p))
	counts["calibrations"] = length(tx.Calibrations(ctx, p))
	counts["tokens"] = length(tx.Tokens(ctx, p))
	counts["audit events"] = length(tx.Audit(ctx, p))
	return counts
}

func length[T any](l service.List[T], err error) int {
	if err != nil {
		return -1
	}
	return len(l.Items)
}

// cursorOf makes a cursor by its documented form.
func cursorOf(at time.Time, id uuid.UUID) string {
	b := make([]byte, 8, 24)
	for i, n := 7, uint64(at.UnixMicro()); i >= 0; i, n = i-1, n>>8 {
		b[i] = byte(n)
	}
	return base64.RawURLEncoding.EncodeToString(append(b, id[:]...))
}

func TestBadPages(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	good := cursorOf(at(1), newID())
	for _, p := range []service.Page{
		{Cursor: "x"}, {Cursor: "%"}, {Cursor: good[:30]}, {Cursor: good + "AAAA"}, {Cursor: good + "="}, {Cursor: good + "\n"}, {Cursor: strings.Repeat("A", 5000)},
		{Cursor: cursorOf(at(1).AddDate(9000, 0, 0), newID())}, {Cursor: cursorOf(at(1).AddDate(-100, 0, 0), newID())},
		{Limit: -1}, {Limit: 201},
	} {
		pointer := "/cursor"
		if p.Cursor == "" {
			pointer = "/limit"
		}
		err := f.s.InTenant(t.Context(), f.organisation, func(tx service.Tx) error { _, err := tx.Projects(t.Context(), p); return err })
		var e *service.Error
		if !errors.As(err, &e) || e.Kind != service.Invalid || len(e.Faults) != 1 || e.Faults[0].Pointer != pointer || e.Faults[0].Remedy == "" {
			t.Errorf("%.60v: %v, want one fault at %s", p, err, pointer)
		} else if len(e.Faults[0].Found) > 300 {
			t.Errorf("%.60v: the fault quotes %d bytes", p, len(e.Faults[0].Found))
		}
	}
}
