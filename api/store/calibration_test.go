package store_test

import (
	"context"
	"encoding/json"
	"testing"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/spread"
)

// newCalibration is a proposal for the fixture's rate book, of invented figures.
func (f fixture) newCalibration() service.Calibration {
	f.t.Helper()
	old := spread.NewFixed(1)
	p := calibration.Proposal{Jobs: []string{"Pan house footbridge"}, Left: []calibration.Left{}, Unfitted: []calibration.Left{}, Statement: "better",
		Changes: []calibration.Change{{Target: calibration.TargetMultiplier, Name: calibration.Fabrication, Categories: []string{calibration.Fabrication}, Old: &old,
			New: spread.NewLognormal(0.91, 1.2000000000000002), Jobs: 20, Recommended: true, Evidence: "invented"}}}
	content, sum, err := p.Canonical()
	if err != nil {
		f.t.Fatal(err)
	}
	e := service.CalibrationEvidence{Currency: "EUR", BaseDate: "2026-06-01", GrowthClass: "4", Notes: []string{"a note"}, Outturns: []uuid.UUID{f.outturn.ID},
		Coverage: calibration.Covered{Left: []calibration.Left{}, Verdict: "none"}}
	raw, err := json.Marshal(e)
	if err != nil {
		f.t.Fatal(err)
	}
	return service.Calibration{ID: newID(), RateBook: f.book.ID, RateBookNumber: 1, SHA256: sum, Jobs: 20, LeftOut: 2, Recommended: true, Statement: p.Statement,
		State: service.Proposed, Version: 1, CreatedAt: at(8), CreatedBy: f.token.Name, Author: f.token.ID, Proposal: &p, Evidence: &e, Content: content, EvidenceRaw: raw}
}

// listed is a calibration as lists answer it.
func listed(c service.Calibration) service.Calibration {
	c.Proposal, c.Evidence = nil, nil
	return c
}

// decided is a calibration with a decision on it.
func (f fixture) decided(c service.Calibration, state string) service.Calibration {
	when := at(20)
	c.State, c.Reason, c.DecidedAt, c.Decider, c.DecidedBy, c.Version = state, "as the jobs say", &when, f.token.ID, f.token.Name, c.Version+1
	if state == service.Accepted {
		c.MadeNumber = 1
		c.Decision = &service.CalibrationDecision{Applied: []service.AppliedChange{{Field: "/multipliers/4", After: "1.045"}}, Left: []service.LeftChange{{Change: 1, Reason: "no norms"}}}
	}
	return c
}

func TestCalibration(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	other := f.newCalibration()
	other.CreatedAt = at(9)
	f.do(func(tx service.Tx) error { return tx.InsertCalibration(ctx, other) })
	other.Content, other.EvidenceRaw = nil, nil
	accepted, declined := f.decided(f.calibration, service.Accepted), f.decided(other, service.Declined)
	f.do(func(tx service.Tx) error {
		f.same(got[service.Calibration](f)(tx.Calibration(ctx, other.ID)), other)
		f.same(got[service.List[service.Calibration]](f)(tx.Calibrations(ctx, service.Page{})).Items, []service.Calibration{listed(other), listed(f.calibration)})
		if err := tx.DecideCalibration(ctx, accepted); err != nil {
			return err
		}
		return tx.DecideCalibration(ctx, declined)
	})
	f.do(func(tx service.Tx) error {
		f.same(got[service.Calibration](f)(tx.Calibration(ctx, f.calibration.ID)), accepted)
		f.same(got[service.List[service.Calibration]](f)(tx.Calibrations(ctx, service.Page{})).Items, []service.Calibration{listed(declined), listed(accepted)})
		return nil
	})
	f.refusedCalibrations(declined)
}

func (f fixture) refusedCalibrations(declined service.Calibration) {
	f.t.Helper()
	insert := func(change func(*service.Calibration)) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error {
			c := f.newCalibration()
			change(&c)
			return tx.InsertCalibration(ctx, c)
		}
	}
	decide := func(change func(*service.Calibration)) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error {
			c := f.newCalibration()
			if err := tx.InsertCalibration(ctx, c); err != nil {
				return err
			}
			c = f.decided(c, service.Accepted)
			change(&c)
			return tx.DecideCalibration(ctx, c)
		}
	}
	for _, test := range []struct {
		name  string
		kind  service.Kind
		words string
		do    func(context.Context, service.Tx) error
	}{
		{"an unknown version of the book", service.NotFound, "no such rate book version", insert(func(c *service.Calibration) { c.RateBookNumber = 9 })},
		{"an unknown author", service.NotFound, "no such token", insert(func(c *service.Calibration) { c.Author = newID() })},
		{"a state that does not fit", service.Invalid, "outside of what can be stored", insert(func(c *service.Calibration) { c.State = service.Accepted })},
		{"acceptance without a version", service.Invalid, "outside of what can be stored", decide(func(c *service.Calibration) { c.MadeNumber = 0 })},
		{"a version that was not made", service.NotFound, "no such rate book version", decide(func(c *service.Calibration) { c.MadeNumber = 9 })},
		{"an unknown decider", service.NotFound, "no such token", decide(func(c *service.Calibration) { c.Decider = newID() })},
		{"an older version", service.Stale, "the calibration has changed", decide(func(c *service.Calibration) { c.Version = 3 })},
		{"one that is decided", service.Stale, "the calibration has changed", func(ctx context.Context, tx service.Tx) error {
			return tx.DecideCalibration(ctx, f.decided(declined, service.Accepted))
		}},
		{"an unknown one", service.NotFound, "no such calibration", decide(func(c *service.Calibration) { c.ID = newID() })},
	} {
		f.refused(test.name, test.kind, test.words, test.do)
	}
}

// The proposal's bytes are stored as they were handed in, and their hash is theirs.
func TestCalibrationBytes(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	var proposal []byte
	if err := f.db.Owner.QueryRow(t.Context(), "select proposal from calibration where id = $1", f.calibration.ID).Scan(&proposal); err != nil {
		t.Fatal(err)
	}
	if hexSum(proposal) != f.calibration.SHA256 {
		t.Errorf("the stored proposal %q has not the hash of the record", proposal)
	}
}

// addForeignCalibrations adds outturns and calibrations of g that point to records of
// f, or the other way round.
func addForeignCalibrations(calls map[string]call, f, g fixture) {
	outturn, made, byForeigner := g.newOutturn("foreign"), g.newCalibration(), g.decided(g.calibration, service.Declined)
	outturn.Author, made.RateBook, byForeigner.Decider = f.token.ID, f.book.ID, f.token.ID
	calls["InsertOutturns"] = func(ctx context.Context, tx service.Tx) error {
		return tx.InsertOutturns(ctx, []service.Outturn{outturn})
	}
	calls["Outturn"] = func(ctx context.Context, tx service.Tx) error { _, err := tx.Outturn(ctx, f.outturn.ID); return err }
	calls["WithdrawOutturn"] = func(ctx context.Context, tx service.Tx) error { return tx.WithdrawOutturn(ctx, f.outturn.ID, 1, at(1)) }
	calls["InsertCalibration"] = func(ctx context.Context, tx service.Tx) error { return tx.InsertCalibration(ctx, made) }
	calls["Calibration"] = func(ctx context.Context, tx service.Tx) error {
		_, err := tx.Calibration(ctx, f.calibration.ID)
		return err
	}
	calls["DecideCalibration"] = func(ctx context.Context, tx service.Tx) error {
		if err := tx.DecideCalibration(ctx, g.decided(f.calibration, service.Declined)); kind(err) != service.NotFound {
			return err
		}
		return tx.DecideCalibration(ctx, byForeigner)
	}
}
