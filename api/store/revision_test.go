package store_test

import (
	"context"
	"slices"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/api/service"
)

func TestRevision(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	second := f.newRevision()
	second.JobTable, second.DefinitionTable, second.RiskTable, second.CreatedAt = nil, nil, nil, at(1) // a clock that went backwards does not make it the older one
	f.do(func(tx service.Tx) error {
		var err error
		second, err = tx.InsertRevision(ctx, second)
		return err
	})
	if second.Number != 2 {
		t.Errorf("number %d, want 2", second.Number)
	}
	listed := []service.Revision{f.revision, second} // by time
	for i := range listed {
		listed[i].Source, listed[i].JobTable, listed[i].DefinitionTable, listed[i].RiskTable = nil, nil, nil, nil
	}
	f.do(func(tx service.Tx) error {
		f.same(got[service.Revision](f)(tx.Revision(ctx, f.revision.ID)), f.revision)
		f.same(got[service.Revision](f)(tx.NewestRevision(ctx, f.scheme.ID)), second)
		f.same(got[service.List[service.Revision]](f)(tx.Revisions(ctx, f.scheme.ID, service.Page{})), service.List[service.Revision]{Items: listed})
		return nil
	})
	orphan, unsigned, twin, empty := f.newRevision(), f.newRevision(), f.newRevision(), f.newRevision()
	orphan.Scheme, unsigned.Author, twin.ID, empty.Source = newID(), newID(), second.ID, []byte{}
	insert := func(r service.Revision) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error { _, err := tx.InsertRevision(ctx, r); return err }
	}
	f.refused("unknown", service.NotFound, "no such schedule revision", func(ctx context.Context, tx service.Tx) error { _, err := tx.Revision(ctx, newID()); return err })
	f.refused("none", service.NotFound, "no such schedule revision", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.NewestRevision(ctx, newID())
		return err
	})
	f.refused("no scheme", service.NotFound, "no such scheme", insert(orphan))
	f.refused("no author", service.NotFound, "no such token", insert(unsigned))
	f.refused("taken id", service.Conflict, "this schedule revision exists", insert(twin))
	f.refused("empty source", service.Invalid, "outside of what can be stored", insert(empty))
	broken := f.newRevision()
	broken.SourceSHA256 = "no hash"
	if err := f.s.InTenant(ctx, f.organisation, func(tx service.Tx) error { return insert(broken)(ctx, tx) }); err == nil {
		t.Error("a hash that is not hexadecimal was stored")
	}
}

func TestRevisionsPostedTogetherAreNumberedInTurn(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	scheme := service.Scheme{ID: newID(), Project: f.project.ID, Name: "Towers", Version: 1, CreatedAt: at(1), UpdatedAt: at(1)}
	f.do(func(tx service.Tx) error { return tx.InsertScheme(t.Context(), scheme) })
	var lock sync.Mutex
	var numbers []int
	err := together(20, func(int) error {
		r := f.newRevision()
		r.Scheme = scheme.ID
		return f.s.InTenant(t.Context(), f.organisation, func(tx service.Tx) error {
			r, err := tx.InsertRevision(t.Context(), r)
			lock.Lock()
			defer lock.Unlock()
			numbers = append(numbers, r.Number)
			return err
		})
	})
	if err != nil {
		t.Fatal(err)
	}
	slices.Sort(numbers)
	want := make([]int, 20)
	for i := range want {
		want[i] = i + 1
	}
	if diff := cmp.Diff(want, numbers); diff != "" {
		t.Errorf("numbers (-want +got):\n%s", diff)
	}
}
