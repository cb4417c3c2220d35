package store_test

import (
	"context"
	"errors"
	"reflect"
	"testing"

	"spanwright/api/service"
)

// Every method of Tx, called under one organisation with the ids of another.
func TestAnotherOrganisationIsNotThere(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	g := populate(t, f.db, f.s)
	f.do(func(tx service.Tx) error {
		return errors.Join(tx.Remember(t.Context(), f.token.ID, "intake", "k", memory()),
			tx.InsertSession(t.Context(), newID(), f.token.ID, f.secret.SHA256, at(1), at(2)))
	})
	covered := map[string]bool{"InsertProject": true, "InsertAudit": true} // they name nothing that exists
	for name, do := range foreignCalls(f, g) {
		covered[name] = true
		g.refused(name, service.NotFound, "no such", do)
	}
	for name, n := range foreignLists(t.Context(), g, f, covered) {
		if n != 0 {
			t.Errorf("%s of another organisation: %d, want 0", name, n)
		}
	}
	for _, name := range []string{"Projects", "RateBooks", "Outturns", "OutturnsInForce", "Calibrations", "Tokens", "Audit", "ProjectByName", "RateBookByName"} {
		covered[name] = true // see below: each organisation has its own
	}
	g.do(func(tx service.Tx) error {
		ctx := t.Context()
		g.same(got[service.List[service.Project]](g)(tx.Projects(ctx, service.Page{})).Items, []service.Project{g.project})
		g.same(got[service.List[service.RateBook]](g)(tx.RateBooks(ctx, service.Page{})).Items, []service.RateBook{g.book})
		g.same(got[service.List[service.Outturn]](g)(tx.Outturns(ctx, service.Page{})).Items, []service.Outturn{g.outturn})
		g.same(got[[]service.Outturn](g)(tx.OutturnsInForce(ctx)), []service.Outturn{g.outturn})
		g.same(got[service.List[service.Calibration]](g)(tx.Calibrations(ctx, service.Page{})).Items, []service.Calibration{listed(g.calibration)})
		g.same(got[service.List[service.Token]](g)(tx.Tokens(ctx, service.Page{})).Items, []service.Token{g.token})
		g.same(got[service.Project](g)(tx.ProjectByName(ctx, f.project.Name)), g.project)
		g.same(got[service.RateBook](g)(tx.RateBookByName(ctx, f.book.Name)), g.book)
		if n := length(tx.Audit(ctx, service.Page{})); n != 0 {
			t.Errorf("%d audit events, want 0", n)
		}
		covered["DeleteSession"] = true // takes nothing away: checked at the end
		c := got[service.Credential](f)(f.s.SessionBySecret(ctx, f.secret.SHA256))
		return tx.DeleteSession(ctx, c.Session)
	})
	if c, err := f.s.SessionBySecret(t.Context(), f.secret.SHA256); err != nil || c.Organisation != f.organisation {
		t.Errorf("the session was ended by another organisation: %v", err)
	}
	methods := reflect.TypeFor[service.Tx]()
	for i := range methods.NumMethod() {
		if name := methods.Method(i).Name; !covered[name] {
			t.Errorf("method %s of Tx is not tried", name)
		}
	}
	f.untouched()
}

// untouched wants the records of the fixture to be as they were made.
func (f fixture) untouched() {
	f.t.Helper()
	ctx := f.t.Context()
	f.do(func(tx service.Tx) error {
		f.same(got[service.Project](f)(tx.Project(ctx, f.project.ID)), f.project)
		f.same(got[service.Scheme](f)(tx.Scheme(ctx, f.scheme.ID)), f.scheme)
		f.same(got[service.Revision](f)(tx.NewestRevision(ctx, f.scheme.ID)), f.revision)
		f.same(got[service.Estimate](f)(tx.NewestEstimate(ctx, f.scheme.ID)), f.estimate)
		f.same(got[service.RateBook](f)(tx.RateBook(ctx, f.book.ID)), f.book)
		f.same(got[[]service.Multiplier](f)(tx.MultipliersInForce(ctx, f.project.ID, f.scheme.ID)), []service.Multiplier{f.multiplier})
		f.same(got[service.Outturn](f)(tx.Outturn(ctx, f.outturn.ID)), f.outturn)
		f.same(got[service.Calibration](f)(tx.Calibration(ctx, f.calibration.ID)), f.calibration)
		f.same(got[service.Token](f)(tx.Token(ctx, f.token.ID)), f.token)
		return nil
	})
}

type call = func(context.Context, service.Tx) error

// foreignCalls are the methods that name one record, under g for records of f.
func foreignCalls(f, g fixture) map[string]call {
	calls := map[string]call{
		"Project": func(ctx context.Context, tx service.Tx) error { _, err := tx.Project(ctx, f.project.ID); return err },
		"Scheme":  func(ctx context.Context, tx service.Tx) error { _, err := tx.Scheme(ctx, f.scheme.ID); return err },
		"SchemeByName": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.SchemeByName(ctx, f.project.ID, f.scheme.Name)
			return err
		},
		"Revision": func(ctx context.Context, tx service.Tx) error { _, err := tx.Revision(ctx, f.revision.ID); return err },
		"NewestRevision": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.NewestRevision(ctx, f.scheme.ID)
			return err
		},
		"Estimate": func(ctx context.Context, tx service.Tx) error { _, err := tx.Estimate(ctx, f.estimate.ID); return err },
		"NewestEstimate": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.NewestEstimate(ctx, f.scheme.ID)
			return err
		},
		"EstimateDocument": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.EstimateDocument(ctx, f.estimate.ID)
			return err
		},
		"EstimateJob": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.EstimateJob(ctx, f.estimate.ID)
			return err
		},
		"RateBook": func(ctx context.Context, tx service.Tx) error { _, err := tx.RateBook(ctx, f.book.ID); return err },
		"RateBookVersion": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.RateBookVersion(ctx, f.book.ID, 1)
			return err
		},
		"Multiplier": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.Multiplier(ctx, f.multiplier.ID)
			return err
		},
		"DeleteMultiplier": func(ctx context.Context, tx service.Tx) error {
			return tx.DeleteMultiplier(ctx, f.multiplier.ID, 1, at(1))
		},
		"Token":       func(ctx context.Context, tx service.Tx) error { _, err := tx.Token(ctx, f.token.ID); return err },
		"RevokeToken": func(ctx context.Context, tx service.Tx) error { return tx.RevokeToken(ctx, f.token.ID, at(1)) },
		"InsertSession": func(ctx context.Context, tx service.Tx) error {
			return tx.InsertSession(ctx, newID(), f.token.ID, f.secret.SHA256, at(1), at(2))
		},
		"Remembered": func(ctx context.Context, tx service.Tx) error {
			_, err := tx.Remembered(ctx, f.token.ID, "intake", "k")
			return err
		},
		"Remember": func(ctx context.Context, tx service.Tx) error {
			return tx.Remember(ctx, f.token.ID, "intake", "other", memory())
		},
	}
	addForeignWrites(calls, f, g)
	addForeignCalibrations(calls, f, g)
	return calls
}

// addForeignWrites adds writes of records of g that point to records of f.
func addForeignWrites(calls map[string]call, f, g fixture) {
	project, book, multiplier := f.project, f.book, f.multiplier
	project.Version, book.Version, book.Number, multiplier.Version = 2, 2, 2, 2
	scheme, revision, ofScheme, estimate, token := g.scheme, g.newRevision(), g.newMultiplier("foreign", &f.scheme.ID), g.newEstimate(), g.token
	scheme.ID, scheme.Name, scheme.Project = newID(), "foreign", f.project.ID
	revision.Scheme = f.scheme.ID
	estimate.RateBook = f.book.ID
	token.ID, token.PublicID, token.CreatedBy = newID(), "another public id", &f.token.ID
	byForeigner := newBook(g.t, "foreign")
	calls["UpdateProject"] = func(ctx context.Context, tx service.Tx) error { return tx.UpdateProject(ctx, project) }
	calls["UpdateRateBook"] = func(ctx context.Context, tx service.Tx) error {
		return tx.UpdateRateBook(ctx, book, []byte("{}"), g.token.ID)
	}
	calls["UpdateMultiplier"] = func(ctx context.Context, tx service.Tx) error { return tx.UpdateMultiplier(ctx, multiplier) }
	calls["InsertScheme"] = func(ctx context.Context, tx service.Tx) error { return tx.InsertScheme(ctx, scheme) }
	calls["InsertRevision"] = func(ctx context.Context, tx service.Tx) error { _, err := tx.InsertRevision(ctx, revision); return err }
	calls["InsertEstimate"] = func(ctx context.Context, tx service.Tx) error { return tx.InsertEstimate(ctx, estimate, g.job, g.doc) }
	calls["InsertMultiplier"] = func(ctx context.Context, tx service.Tx) error { return tx.InsertMultiplier(ctx, ofScheme) }
	calls["InsertToken"] = func(ctx context.Context, tx service.Tx) error { return tx.InsertToken(ctx, token, f.secret.SHA256) }
	calls["InsertRateBook"] = func(ctx context.Context, tx service.Tx) error {
		return tx.InsertRateBook(ctx, byForeigner, canonical(g.t, byForeigner.Content), f.token.ID)
	}
}

// foreignLists counts what g sees in the lists below records of f.
func foreignLists(ctx context.Context, g, f fixture, covered map[string]bool) map[string]int {
	counts := map[string]int{}
	g.do(func(tx service.Tx) error {
		counts["Schemes"] = length(tx.Schemes(ctx, f.project.ID, service.Page{}))
		counts["Revisions"] = length(tx.Revisions(ctx, f.scheme.ID, service.Page{}))
		counts["Estimates"] = length(tx.Estimates(ctx, f.scheme.ID, service.Page{}))
		counts["Multipliers"] = length(tx.Multipliers(ctx, f.project.ID, service.Page{}))
		counts["OutturnsOfPosting"] = len(got[[]service.Outturn](g)(tx.OutturnsOfPosting(ctx, f.outturn.Posting)))
		counts["MultipliersInForce"] = len(got[[]service.Multiplier](g)(tx.MultipliersInForce(ctx, f.project.ID, f.scheme.ID)))
		return nil
	})
	for name := range counts {
		covered[name] = true
	}
	return counts
}

// An estimate of an own scheme must not point to a foreign revision or scheme.
func TestForeignPartsOfAnEstimateAreRefused(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	g := populate(t, f.db, f.s)
	for name, change := range map[string]func(*service.Estimate){
		"scheme":              func(e *service.Estimate) { e.Scheme = f.scheme.ID },
		"revision":            func(e *service.Estimate) { e.Revision = f.revision.ID },
		"scheme and revision": func(e *service.Estimate) { e.Scheme, e.Revision = f.scheme.ID, f.revision.ID },
		"rate book":           func(e *service.Estimate) { e.RateBook = f.book.ID },
		"author":              func(e *service.Estimate) { e.Author = f.token.ID },
	} {
		e := g.newEstimate()
		change(&e)
		g.refused(name, service.NotFound, "no such", func(ctx context.Context, tx service.Tx) error { return tx.InsertEstimate(ctx, e, g.job, g.doc) })
	}
}
