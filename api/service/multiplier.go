package service

import (
	"context"
	"maps"
	"slices"
	"strings"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/ratebook"
)

// inForce is the multiplier as a job takes it.
func (m Multiplier) inForce() ratebook.Multiplier {
	v := m.Value
	v.Version = m.Version
	return v
}

// CreateMultiplier makes a multiplier on a project or scheme; the next estimate
// takes it: NotFound, Invalid, Conflict (the same name, scope and subject).
func (s *Service) CreateMultiplier(ctx context.Context, a Actor, n NewMultiplier, key Idempotency) (Multiplier, error) {
	if err := s.allow(a, auth.WriteRates); err != nil {
		return Multiplier{}, err
	}
	value, err := checkedMultiplier(n.Value, n.Scheme, a)
	if err != nil {
		return Multiplier{}, err
	}
	id, err := s.newID()
	if err != nil {
		return Multiplier{}, err
	}
	now := s.now()
	m := Multiplier{ID: id, Project: n.Project, Scheme: n.Scheme, Value: value, Version: 1, CreatedAt: now, UpdatedAt: now}
	return once(ctx, s, a, "create multiplier", key, id,
		func(tx Tx, id uuid.UUID) (Multiplier, error) { return tx.Multiplier(ctx, id) },
		func(tx Tx) (Multiplier, error) {
			if err := s.checkReach(ctx, tx, n); err != nil {
				return m, err
			}
			if err := tx.InsertMultiplier(ctx, m); err != nil {
				return m, err
			}
			return m, s.audit(ctx, tx, a, "create", "multiplier", id, nil, m)
		})
}

// checkGroup refuses a correlation group that no rate book of the organisation
// has, which would stop every later estimate.
func checkGroup(ctx context.Context, tx Tx, group string) error {
	if group == "" {
		return nil
	}
	books, err := tx.RateBooks(ctx, Page{Limit: 200})
	if err != nil {
		return err
	}
	known := map[string]bool{}
	for _, b := range books.Items {
		for g := range b.Content.Correlation {
			known[g] = true
		}
	}
	if known[group] {
		return nil
	}
	return invalid("/multiplier/group", group, "no rate book has this correlation group", strings.Join(slices.Sorted(maps.Keys(known)), ", ")+" or none")
}

func (s *Service) checkReach(ctx context.Context, tx Tx, n NewMultiplier) error {
	if err := checkGroup(ctx, tx, n.Value.Group); err != nil {
		return err
	}
	if _, err := tx.Project(ctx, n.Project); err != nil {
		return err
	}
	if n.Scheme == nil {
		return nil
	}
	sc, err := tx.Scheme(ctx, *n.Scheme)
	if err == nil && sc.Project != n.Project {
		err = invalid("/scheme_id", n.Scheme.String(), "belongs to another project", "a scheme of this project")
	}
	return err
}

// checkedMultiplier validates the value and fixes what the caller may not choose:
// author, version, and a scope that agrees with the reach.
func checkedMultiplier(v ratebook.Multiplier, scheme *uuid.UUID, a Actor) (ratebook.Multiplier, error) {
	v.Author, v.Version = a.Name, 0
	if err := v.Validate(); err != nil {
		return v, fromRates(err, "/multiplier")
	}
	if v.Scope == ratebook.BookScope {
		return v, invalid("/multiplier/scope", string(v.Scope), "a multiplier of a rate book is edited in the book", "member, group, family, scheme or project")
	}
	if v.Scope == ratebook.SchemeScope && scheme == nil {
		return v, invalid("/scheme_id", "", "missing", "the scheme that a multiplier of scope scheme is for")
	}
	if v.Scope == ratebook.ProjectScope && scheme != nil {
		return v, invalid("/multiplier/scope", string(v.Scope), "the whole project, but scheme_id names one scheme", "scope scheme, or no scheme_id")
	}
	return v, nil
}

// Multiplier reads one multiplier: NotFound.
func (s *Service) Multiplier(ctx context.Context, a Actor, id uuid.UUID) (Multiplier, error) {
	return read(ctx, s, a, auth.ReadRates, func(tx Tx) (Multiplier, error) { return tx.Multiplier(ctx, id) })
}

// Multipliers lists the multipliers of a project: NotFound.
func (s *Service) Multipliers(ctx context.Context, a Actor, project uuid.UUID, p Page) (List[Multiplier], error) {
	return list(ctx, s, a, auth.ReadRates, func(tx Tx) (List[Multiplier], error) {
		if _, err := tx.Project(ctx, project); err != nil {
			return List[Multiplier]{}, err
		}
		return tx.Multipliers(ctx, project, p)
	})
}

// UpdateMultiplier replaces the value: NotFound, Stale, Invalid.
func (s *Service) UpdateMultiplier(ctx context.Context, a Actor, id uuid.UUID, version int64, value ratebook.Multiplier) (Multiplier, error) {
	if err := s.allow(a, auth.WriteRates); err != nil {
		return Multiplier{}, err
	}
	return update(ctx, s, a, "multiplier", id, version, Tx.Multiplier, func(tx Tx, before Multiplier) (Multiplier, error) {
		after := before
		var err error
		if after.Value, err = checkedMultiplier(value, before.Scheme, a); err != nil {
			return after, err
		}
		if err := checkGroup(ctx, tx, value.Group); err != nil {
			return after, err
		}
		after.Version, after.UpdatedAt = before.Version+1, s.now()
		return after, tx.UpdateMultiplier(ctx, after)
	})
}

// DeleteMultiplier takes a multiplier out of force; its row and its audit events
// stay: NotFound, Stale.
func (s *Service) DeleteMultiplier(ctx context.Context, a Actor, id uuid.UUID, version int64) error {
	if err := s.allow(a, auth.WriteRates); err != nil {
		return err
	}
	return s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		before, err := tx.Multiplier(ctx, id)
		if err != nil {
			return err
		}
		if version != AnyVersion && version != before.Version {
			return &Error{Kind: Stale, Message: "the multiplier has changed: read it again and repeat"}
		}
		if err := tx.DeleteMultiplier(ctx, id, before.Version, s.now()); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "delete", "multiplier", id, before, nil)
	})
}
