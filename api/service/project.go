package service

import (
	"context"
	"fmt"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/money"
)

const nameLength = 200

// CreateProject makes a project: Invalid, Conflict (the name is taken).
func (s *Service) CreateProject(ctx context.Context, a Actor, n NewProject, key Idempotency) (Project, error) {
	if err := s.allow(a, auth.WriteProjects); err != nil {
		return Project{}, err
	}
	p, err := s.project(n)
	if err != nil {
		return Project{}, err
	}
	return once(ctx, s, a, "create project", key, p.ID,
		func(tx Tx, id uuid.UUID) (Project, error) { return tx.Project(ctx, id) },
		func(tx Tx) (Project, error) { return p, s.insertProject(ctx, tx, a, p) })
}

func (s *Service) insertProject(ctx context.Context, tx Tx, a Actor, p Project) error {
	if err := tx.InsertProject(ctx, p); err != nil {
		return err
	}
	return s.audit(ctx, tx, a, "create", "project", p.ID, nil, p)
}

func (s *Service) project(n NewProject) (Project, error) {
	if n.Currency == "" {
		n.Currency = "EUR"
	}
	if n.DisplayUnits == "" {
		n.DisplayUnits = "SI"
	}
	if err := n.validate(); err != nil {
		return Project{}, err
	}
	id, err := s.newID()
	if err != nil {
		return Project{}, err
	}
	now := s.now()
	return Project{ID: id, Name: n.Name, Currency: n.Currency, BaseDate: n.BaseDate, DisplayUnits: n.DisplayUnits, Version: 1, CreatedAt: now, UpdatedAt: now}, nil
}

func (n NewProject) validate() error {
	if err := checkName("/name", n.Name, nameLength); err != nil {
		return err
	}
	if _, err := money.FindCurrency(n.Currency); err != nil {
		return invalid("/currency", n.Currency, "unknown currency", err.Error())
	}
	if n.BaseDate != "" {
		if d, err := time.Parse(time.DateOnly, n.BaseDate); err != nil || d.Year() < 1900 || d.Year() > 2200 {
			return invalid("/base_date", n.BaseDate, "not a date of a job", "yyyy-mm-dd, from 1900 to 2200")
		}
	}
	if n.DisplayUnits != "SI" && n.DisplayUnits != "US" {
		return invalid("/display_units", n.DisplayUnits, "unknown units", "SI or US")
	}
	return nil
}

// Project reads one project: NotFound.
func (s *Service) Project(ctx context.Context, a Actor, id uuid.UUID) (Project, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Project, error) { return tx.Project(ctx, id) })
}

// Projects lists projects, newest first.
func (s *Service) Projects(ctx context.Context, a Actor, p Page) (List[Project], error) {
	return list(ctx, s, a, auth.ReadProjects, func(tx Tx) (List[Project], error) { return tx.Projects(ctx, p) })
}

// UpdateProject replaces a project's own fields where its version is still the
// one given: NotFound, Stale, Invalid, Conflict.
func (s *Service) UpdateProject(ctx context.Context, a Actor, id uuid.UUID, version int64, n NewProject) (Project, error) {
	if err := s.allow(a, auth.WriteProjects); err != nil {
		return Project{}, err
	}
	fresh, err := s.project(n)
	if err != nil {
		return Project{}, err
	}
	return update(ctx, s, a, "project", id, version, Tx.Project, func(tx Tx, before Project) (Project, error) {
		fresh.ID, fresh.CreatedAt, fresh.Version = id, before.CreatedAt, before.Version+1
		return fresh, tx.UpdateProject(ctx, fresh)
	})
}

// versioned is a record with a version for ETag and If-Match.
type versioned interface{ version() int64 }

func (p Project) version() int64    { return p.Version }
func (b RateBook) version() int64   { return b.Version }
func (m Multiplier) version() int64 { return m.Version }

// AnyVersion stands for “If-Match: *”.
const AnyVersion int64 = -1

// update reads a record, compares versions, writes and audits in one transaction.
func update[T versioned](ctx context.Context, s *Service, a Actor, kind string, id uuid.UUID, version int64,
	get func(Tx, context.Context, uuid.UUID) (T, error), write func(Tx, T) (T, error)) (T, error) {
	var after T
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		before, err := get(tx, ctx, id)
		if err != nil {
			return err
		}
		if version != AnyVersion && version != before.version() {
			return &Error{Kind: Stale, Message: fmt.Sprintf("the %s has version %d, If-Match names %d: read it again and repeat the change", kind, before.version(), version)}
		}
		if after, err = write(tx, before); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "update", kind, id, before, after)
	})
	return after, err
}

// CreateScheme makes a scheme of a project: NotFound, Invalid, Conflict.
func (s *Service) CreateScheme(ctx context.Context, a Actor, project uuid.UUID, name string, key Idempotency) (Scheme, error) {
	if err := s.allow(a, auth.WriteProjects); err != nil {
		return Scheme{}, err
	}
	sc, err := s.scheme(project, name)
	if err != nil {
		return Scheme{}, err
	}
	return once(ctx, s, a, "create scheme", key, sc.ID,
		func(tx Tx, id uuid.UUID) (Scheme, error) { return tx.Scheme(ctx, id) },
		func(tx Tx) (Scheme, error) {
			if _, err := tx.Project(ctx, project); err != nil {
				return sc, err
			}
			return sc, s.insertScheme(ctx, tx, a, sc)
		})
}

func (s *Service) insertScheme(ctx context.Context, tx Tx, a Actor, sc Scheme) error {
	if err := tx.InsertScheme(ctx, sc); err != nil {
		return err
	}
	return s.audit(ctx, tx, a, "create", "scheme", sc.ID, nil, sc)
}

func (s *Service) scheme(project uuid.UUID, name string) (Scheme, error) {
	if err := checkName("/name", name, nameLength); err != nil {
		return Scheme{}, err
	}
	id, err := s.newID()
	if err != nil {
		return Scheme{}, err
	}
	now := s.now()
	return Scheme{ID: id, Project: project, Name: name, Version: 1, CreatedAt: now, UpdatedAt: now}, nil
}

// Scheme reads one scheme: NotFound.
func (s *Service) Scheme(ctx context.Context, a Actor, id uuid.UUID) (Scheme, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Scheme, error) { return tx.Scheme(ctx, id) })
}

// Schemes lists the schemes of a project: NotFound.
func (s *Service) Schemes(ctx context.Context, a Actor, project uuid.UUID, p Page) (List[Scheme], error) {
	return list(ctx, s, a, auth.ReadProjects, func(tx Tx) (List[Scheme], error) {
		if _, err := tx.Project(ctx, project); err != nil {
			return List[Scheme]{}, err
		}
		return tx.Schemes(ctx, project, p)
	})
}
