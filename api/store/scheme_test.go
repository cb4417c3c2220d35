package store_test

import (
	"context"
	"testing"

	"spanwright/api/service"
)

func TestScheme(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	other := service.Project{ID: newID(), Name: "Pan house", Currency: "EUR", DisplayUnits: "SI", Version: 1, CreatedAt: at(10), UpdatedAt: at(10)}
	namesake := service.Scheme{ID: newID(), Project: other.ID, Name: f.scheme.Name, Version: 1, CreatedAt: at(11), UpdatedAt: at(12)}
	f.do(func(tx service.Tx) error {
		if err := tx.InsertProject(ctx, other); err != nil {
			return err
		}
		return tx.InsertScheme(ctx, namesake)
	})
	f.do(func(tx service.Tx) error {
		f.same(got[service.Scheme](f)(tx.Scheme(ctx, f.scheme.ID)), f.scheme)
		f.same(got[service.Scheme](f)(tx.SchemeByName(ctx, other.ID, f.scheme.Name)), namesake)
		f.same(got[service.List[service.Scheme]](f)(tx.Schemes(ctx, f.project.ID, service.Page{})), service.List[service.Scheme]{Items: []service.Scheme{f.scheme}})
		return nil
	})
	twin, orphan := namesake, namesake
	twin.ID = newID()
	orphan.ID, orphan.Project = newID(), newID()
	f.refused("unknown", service.NotFound, "no such scheme", func(ctx context.Context, tx service.Tx) error { _, err := tx.Scheme(ctx, newID()); return err })
	f.refused("unknown name", service.NotFound, "no such scheme", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.SchemeByName(ctx, other.ID, "Towers")
		return err
	})
	f.refused("taken name", service.Conflict, "scheme of this name", func(ctx context.Context, tx service.Tx) error { return tx.InsertScheme(ctx, twin) })
	f.refused("no project", service.NotFound, "no such project", func(ctx context.Context, tx service.Tx) error { return tx.InsertScheme(ctx, orphan) })
}
