package store_test

import (
	"context"
	"testing"

	"spanwright/api/service"
	"spanwright/estimate/ratebook"
)

func TestMultiplier(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	wide := f.newMultiplier("tide", nil) // the same name for the whole project
	wide.CreatedAt, wide.UpdatedAt, wide.Value.Group = at(40), at(40), ""
	group := f.newMultiplier("tide", &f.scheme.ID)
	group.Value.Scope, group.Value.Subject, group.CreatedAt = ratebook.GroupScope, "boom", at(1)
	elsewhere := service.Scheme{ID: newID(), Project: f.project.ID, Name: "Towers", Version: 1, CreatedAt: at(9), UpdatedAt: at(9)}
	away := f.newMultiplier("tide", &elsewhere.ID)
	away.CreatedAt = at(50)
	f.do(func(tx service.Tx) error {
		if err := tx.InsertScheme(ctx, elsewhere); err != nil {
			return err
		}
		for _, m := range []service.Multiplier{wide, group, away} {
			if err := tx.InsertMultiplier(ctx, m); err != nil {
				return err
			}
		}
		return nil
	})
	f.do(func(tx service.Tx) error {
		f.same(got[service.Multiplier](f)(tx.Multiplier(ctx, f.multiplier.ID)), f.multiplier)
		f.same(got[service.Multiplier](f)(tx.Multiplier(ctx, wide.ID)), wide)
		f.same(got[service.List[service.Multiplier]](f)(tx.Multipliers(ctx, f.project.ID, service.Page{})),
			service.List[service.Multiplier]{Items: []service.Multiplier{away, wide, f.multiplier, group}})
		// The project's first although it is the youngest, then the scheme's by age.
		f.same(got[[]service.Multiplier](f)(tx.MultipliersInForce(ctx, f.project.ID, f.scheme.ID)), []service.Multiplier{wide, group, f.multiplier})
		return nil
	})

	changed := wide
	changed.Value.Name, changed.Value.Reason, changed.Value.Author, changed.Value.Categories, changed.Value.Group = "weather", "winter", "somebody else", []string{ratebook.Coating}, "supply"
	changed.Version, changed.UpdatedAt = 2, at(70)
	f.do(func(tx service.Tx) error { return tx.UpdateMultiplier(ctx, changed) })
	f.do(func(tx service.Tx) error {
		f.same(got[service.Multiplier](f)(tx.Multiplier(ctx, wide.ID)), changed)
		return tx.DeleteMultiplier(ctx, group.ID, 1, at(80))
	})
	f.do(func(tx service.Tx) error {
		f.same(got[[]service.Multiplier](f)(tx.MultipliersInForce(ctx, f.project.ID, f.scheme.ID)), []service.Multiplier{changed, f.multiplier})
		again := group // its name, scope and subject are free again
		again.ID = newID()
		return tx.InsertMultiplier(ctx, again)
	})
	var rows int
	if err := f.db.Owner.QueryRow(ctx, "select count(*) from multiplier where id = $1 and deleted_at = $2 and version = 2", group.ID, at(80)).Scan(&rows); rows != 1 || err != nil {
		t.Errorf("the deleted multiplier has %d rows, %v, want 1", rows, err)
	}
	f.refuseMultipliers(changed, group)
}

// refuseMultipliers tries what must fail: changed has version 2, deleted is out of
// force.
func (f fixture) refuseMultipliers(changed, deleted service.Multiplier) {
	f.t.Helper()
	insert := func(change func(*service.Multiplier)) func(context.Context, service.Tx) error {
		m := f.newMultiplier("fresh", &f.scheme.ID)
		change(&m)
		return func(ctx context.Context, tx service.Tx) error { return tx.InsertMultiplier(ctx, m) }
	}
	update := func(change func(*service.Multiplier)) func(context.Context, service.Tx) error {
		m := changed
		m.Version = 3
		change(&m)
		return func(ctx context.Context, tx service.Tx) error { return tx.UpdateMultiplier(ctx, m) }
	}
	remove := func(m service.Multiplier, version int64) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error { return tx.DeleteMultiplier(ctx, m.ID, version, at(90)) }
	}
	unknown := newID()
	for _, test := range []struct {
		name  string
		kind  service.Kind
		words string
		do    func(context.Context, service.Tx) error
	}{
		{"unknown", service.NotFound, "no such multiplier", func(ctx context.Context, tx service.Tx) error { _, err := tx.Multiplier(ctx, unknown); return err }},
		{"deleted", service.NotFound, "no such multiplier", func(ctx context.Context, tx service.Tx) error { _, err := tx.Multiplier(ctx, deleted.ID); return err }},
		{"taken for the scheme", service.Conflict, "is in force already", insert(func(m *service.Multiplier) { m.Value.Name = "tide" })},
		{"taken for the project", service.Conflict, "is in force already", insert(func(m *service.Multiplier) {
			m.Scheme, m.Value = nil, changed.Value
		})},
		{"no project", service.NotFound, "no such project", insert(func(m *service.Multiplier) { m.Project, m.Scheme, m.Value.Scope = newID(), nil, ratebook.ProjectScope })},
		{"no scheme", service.NotFound, "no such scheme", insert(func(m *service.Multiplier) { m.Scheme = &unknown })},
		{"scheme of another project", service.NotFound, "no such scheme of this project", func(ctx context.Context, tx service.Tx) error {
			other := f.project
			other.ID, other.Name = newID(), "Pan house"
			if err := tx.InsertProject(ctx, other); err != nil {
				return err
			}
			return insert(func(m *service.Multiplier) { m.Project = other.ID })(ctx, tx)
		}},
		{"NUL in the reason", service.Invalid, "cannot be stored", insert(func(m *service.Multiplier) { m.Value.Reason = "a\x00b" })},
		{"unknown category", service.Invalid, "outside of what can be stored", insert(func(m *service.Multiplier) { m.Value.Categories = []string{"tax"} })},
		{"update of an older version", service.Stale, "the multiplier has changed", update(func(m *service.Multiplier) { m.Version = 2 })},
		{"update of an unknown one", service.NotFound, "no such multiplier", update(func(m *service.Multiplier) { m.ID = newID() })},
		{"update of a deleted one", service.NotFound, "no such multiplier", update(func(m *service.Multiplier) { m.ID = deleted.ID })},
		{"delete of an older version", service.Stale, "the multiplier has changed", remove(changed, 1)},
		{"delete of an unknown one", service.NotFound, "no such multiplier", remove(service.Multiplier{ID: newID()}, 1)},
		{"delete of a deleted one", service.NotFound, "no such multiplier", remove(deleted, 2)},
	} {
		f.refused(test.name, test.kind, test.words, test.do)
	}
}
