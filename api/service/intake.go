package service

import (
	"context"
	"encoding/json"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/job"
	"spanwright/estimate/schedule"
)

// intakeMemory is what an idempotency key of an intake stands for.
type intakeMemory struct {
	Project, Scheme, Schedule, Estimate uuid.UUID
}

// Intake reads a schedule, makes project and scheme where they are missing,
// stores the revision and its estimate, all or nothing. Errors as those of
// PostSchedule and CreateEstimate.
func (s *Service) Intake(ctx context.Context, a Actor, in Intake, key Idempotency) (Taken, error) {
	for _, o := range []auth.Operation{auth.WriteProjects, auth.PostSchedules, auth.MakeEstimates} {
		if err := s.allow(a, o); err != nil {
			return Taken{}, err
		}
	}
	if t, found, err := s.takenBefore(ctx, a, key); err != nil || found {
		return t, err
	}
	book, err := read(ctx, s, a, auth.MakeEstimates, func(tx Tx) (RateBook, error) { return bookNamed(ctx, tx, in.RateBook, in.BookName) })
	if err != nil {
		return Taken{}, err
	}
	sch, err := s.readPosting(ctx, in.Posting, book.Content.ConnectionClasses(), in.Project, in.Scheme)
	if err != nil {
		return Taken{}, err
	}
	in.Project, in.Scheme = sch.Settings.Project, sch.Settings.Scheme
	if err := checkName("/project", in.Project, nameLength); err != nil {
		return Taken{}, err
	}
	if err := checkName("/scheme", in.Scheme, nameLength); err != nil {
		return Taken{}, err
	}
	for attempt := 0; ; attempt++ {
		t, err := s.intakeOnce(ctx, a, in, sch, key)
		if !isKind(err, Conflict) {
			return t, err
		}
		// A simultaneous request made the project, the scheme or the whole intake.
		if t, found, again := s.takenBefore(ctx, a, key); again != nil || found {
			return t, again
		}
		if attempt == 2 {
			return Taken{}, &Error{Kind: Conflict, Message: "other requests changed the same project or scheme at the same time; post again", Err: err}
		}
	}
}

// intakeOnce is one attempt at an intake, of a schedule that has been read.
func (s *Service) intakeOnce(ctx context.Context, a Actor, in Intake, sch schedule.Schedule, key Idempotency) (Taken, error) {
	b, f, err := s.intakeBasis(ctx, a, in, sch)
	if err != nil {
		return Taken{}, err
	}
	made, err := s.compute(ctx, a, b, sch, job.DefaultSampling())
	if err != nil {
		return Taken{}, err
	}
	t := Taken{Project: b.project, Scheme: b.scheme, Schedule: b.revision, Estimate: made.head}
	err = s.store.InTenant(ctx, a.Organisation, func(tx Tx) error { return s.take(ctx, tx, a, &t, made, f, key) })
	return t, err
}

// fresh says which records an intake makes new.
type fresh struct{ project, scheme bool }

// intakeBasis finds or prepares project and scheme, with the rates in force.
func (s *Service) intakeBasis(ctx context.Context, a Actor, in Intake, sch schedule.Schedule) (basis, fresh, error) {
	var b basis
	var f fresh
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		var err error
		b.project, err = tx.ProjectByName(ctx, in.Project)
		if isKind(err, NotFound) {
			f = fresh{project: true, scheme: true}
			b.project, err = s.project(NewProject{Name: in.Project, Currency: sch.Settings.Currency, BaseDate: sch.Settings.BaseDate})
		}
		if err != nil {
			return err
		}
		if !f.project {
			b.scheme, err = tx.SchemeByName(ctx, b.project.ID, in.Scheme)
			f.scheme = isKind(err, NotFound)
		}
		if f.scheme {
			b.scheme, err = s.scheme(b.project.ID, in.Scheme)
		}
		if err != nil {
			return err
		}
		return s.rates(ctx, tx, &b, in.RateBook, in.BookName)
	})
	if err != nil {
		return b, f, err
	}
	if err := sameCurrency(b.project, sch); err != nil {
		return b, f, err
	}
	b.revision, err = s.revision(a, b.scheme.ID, in.Posting, sch)
	return b, f, err
}

// take stores everything of an intake in one transaction.
func (s *Service) take(ctx context.Context, tx Tx, a Actor, t *Taken, made computed, f fresh, key Idempotency) error {
	if _, found, err := s.remembered(ctx, tx, a, "intake", key); err != nil || found {
		if found {
			err = raceError{&Error{Kind: Conflict, Message: "an attempt with this Idempotency-Key has just succeeded"}}
		}
		return err
	}
	if f.project {
		if err := s.insertProject(ctx, tx, a, t.Project); err != nil {
			return err
		}
	}
	if f.scheme {
		if err := s.insertScheme(ctx, tx, a, t.Scheme); err != nil {
			return err
		}
	}
	var err error
	if t.Schedule, err = s.insertRevision(ctx, tx, a, t.Schedule); err != nil {
		return err
	}
	if err := s.insertEstimate(ctx, tx, a, made); err != nil {
		return err
	}
	body, err := json.Marshal(intakeMemory{Project: t.Project.ID, Scheme: t.Scheme.ID, Schedule: t.Schedule.ID, Estimate: t.Estimate.ID})
	if err != nil {
		return err
	}
	return s.remember(ctx, tx, a, "intake", key, t.Estimate.ID, body)
}

// takenBefore reads what an earlier intake with the same key made.
func (s *Service) takenBefore(ctx context.Context, a Actor, key Idempotency) (Taken, bool, error) {
	t := Taken{Again: true}
	found := false
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		var m Memory
		var err error
		if m, found, err = s.remembered(ctx, tx, a, "intake", key); err != nil || !found {
			return err
		}
		var ids intakeMemory
		if err := json.Unmarshal(m.Body, &ids); err != nil {
			return err
		}
		if t.Project, err = tx.Project(ctx, ids.Project); err != nil {
			return err
		}
		if t.Scheme, err = tx.Scheme(ctx, ids.Scheme); err != nil {
			return err
		}
		if t.Schedule, err = tx.Revision(ctx, ids.Schedule); err != nil {
			return err
		}
		t.Estimate, err = tx.Estimate(ctx, ids.Estimate)
		return err
	})
	return t, found, err
}
