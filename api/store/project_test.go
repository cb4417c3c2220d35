package store_test

import (
	"context"
	"testing"

	"spanwright/api/service"
)

func TestProject(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	undated := service.Project{ID: newID(), Name: "Pan house", Currency: "KWD", DisplayUnits: "US", Version: 1, CreatedAt: at(10), UpdatedAt: at(11)}
	f.do(func(tx service.Tx) error { return tx.InsertProject(ctx, undated) })
	changed := undated
	changed.Name, changed.Currency, changed.BaseDate, changed.DisplayUnits, changed.Version, changed.UpdatedAt = "Brine house", "USD", "2024-02-29", "SI", 2, at(12)
	f.do(func(tx service.Tx) error {
		f.same(got[service.Project](f)(tx.Project(ctx, f.project.ID)), f.project)
		f.same(got[service.Project](f)(tx.Project(ctx, undated.ID)), undated)
		f.same(got[service.Project](f)(tx.ProjectByName(ctx, "Pan house")), undated)
		f.same(got[service.List[service.Project]](f)(tx.Projects(ctx, service.Page{})), service.List[service.Project]{Items: []service.Project{undated, f.project}})
		return tx.UpdateProject(ctx, changed)
	})
	f.do(func(tx service.Tx) error {
		f.same(got[service.Project](f)(tx.Project(ctx, undated.ID)), changed)
		f.same(got[service.Project](f)(tx.Project(ctx, f.project.ID)), f.project)
		return nil
	})
	renamed, unknown, lost := f.project, f.project, f.project
	renamed.Name, renamed.Version = "Brine house", 2
	unknown.ID, unknown.Version = newID(), 2
	lost.Version = 7
	twin := undated
	twin.ID, twin.Name = newID(), "Loading quay"
	long := undated
	long.ID, long.Name, long.BaseDate = newID(), "x", "0000-01-01"
	for _, test := range []struct {
		name  string
		kind  service.Kind
		words string
		do    func(context.Context, service.Tx) error
	}{
		{"unknown", service.NotFound, "no such project", func(ctx context.Context, tx service.Tx) error { _, err := tx.Project(ctx, newID()); return err }},
		{"unknown name", service.NotFound, "no such project", func(ctx context.Context, tx service.Tx) error {
			_, err := tx.ProjectByName(ctx, "loading quay")
			return err
		}},
		{"insert a taken name", service.Conflict, "a project of this name", func(ctx context.Context, tx service.Tx) error { return tx.InsertProject(ctx, twin) }},
		{"insert a taken id", service.Conflict, "this project exists", func(ctx context.Context, tx service.Tx) error { return tx.InsertProject(ctx, changed) }},
		{"update to a taken name", service.Conflict, "a project of this name", func(ctx context.Context, tx service.Tx) error { return tx.UpdateProject(ctx, renamed) }},
		{"update of an older version", service.Stale, "the project has changed", func(ctx context.Context, tx service.Tx) error { return tx.UpdateProject(ctx, changed) }},
		{"update of a later version", service.Stale, "the project has changed", func(ctx context.Context, tx service.Tx) error { return tx.UpdateProject(ctx, lost) }},
		{"update of an unknown one", service.NotFound, "no such project", func(ctx context.Context, tx service.Tx) error { return tx.UpdateProject(ctx, unknown) }},
		{"a year that no date column holds", service.Invalid, "cannot be stored", func(ctx context.Context, tx service.Tx) error { return tx.InsertProject(ctx, long) }},
	} {
		f.refused(test.name, test.kind, test.words, test.do)
	}
}
