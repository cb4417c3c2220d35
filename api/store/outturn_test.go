package store_test

import (
	"context"
	"encoding/json"
	"errors"
	"testing"

	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
)

// newOutturn is an invented job with amounts whose places must survive.
func (f fixture) newOutturn(job string) service.Outturn {
	f.t.Helper()
	amount := func(text string) money.Decimal {
		d, err := money.Parse(text)
		if err != nil {
			f.t.Fatal(err)
		}
		return d
	}
	p80 := amount("222000.50")
	o := service.Outturn{ID: newID(), Posting: newID(), SourceName: "outturns.csv", SourceSHA256: hexSum([]byte("source")), Version: 1,
		CreatedAt: at(7), CreatedBy: f.token.Name, Author: f.token.ID,
		Value: calibration.Outturn{Job: job, Completed: "2025-09-30", Currency: "EUR", Kind: "trestles", TakeOffMass: 41_800.000_000_000_1, WeighedMass: 46_300,
			Costs: map[string]money.Decimal{calibration.Fabrication: amount("99000.50"), calibration.Erection: amount("0.00")},
			Estimate: calibration.Past{Currency: "EUR", BaseDate: "2024-06-30", P80: &p80,
				Base: map[string]money.Decimal{calibration.Fabrication: amount("90000"), calibration.Erection: amount("52000.10")}},
			Source: "invented"}}
	content, err := json.Marshal(o.Value)
	if err != nil {
		f.t.Fatal(err)
	}
	o.Content, o.SHA256 = content, hexSum(content)
	return o
}

func TestOutturn(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	first, second := f.newOutturn("Brine tank stair"), f.newOutturn("quay ladder")
	second.Posting, second.CreatedAt, first.CreatedAt = first.Posting, at(8), at(8)
	f.do(func(tx service.Tx) error { return tx.InsertOutturns(ctx, []service.Outturn{second, first}) })
	first.Content, second.Content = nil, nil
	f.do(func(tx service.Tx) error {
		f.same(got[service.Outturn](f)(tx.Outturn(ctx, f.outturn.ID)), f.outturn)
		f.same(got[service.List[service.Outturn]](f)(tx.Outturns(ctx, service.Page{})).Items, []service.Outturn{second, first, f.outturn})
		f.same(got[[]service.Outturn](f)(tx.OutturnsInForce(ctx)), []service.Outturn{first, f.outturn, second}) // capitals first: by bytes
		f.same(got[[]service.Outturn](f)(tx.OutturnsOfPosting(ctx, first.Posting)), []service.Outturn{first, second})
		return tx.WithdrawOutturn(ctx, first.ID, 1, at(9))
	})
	withdrawn, when := first, at(9)
	withdrawn.WithdrawnAt, withdrawn.Version = &when, 2
	f.do(func(tx service.Tx) error {
		f.same(got[[]service.Outturn](f)(tx.OutturnsInForce(ctx)), []service.Outturn{f.outturn, second})
		f.same(got[[]service.Outturn](f)(tx.OutturnsOfPosting(ctx, first.Posting)), []service.Outturn{withdrawn, second})
		again := f.newOutturn(first.Value.Job) // the job is free again
		return tx.InsertOutturns(ctx, []service.Outturn{again})
	})
	f.refusedOutturns(withdrawn, second)
}

// refusedOutturns tries what must not be stored; nothing of a refused posting stays.
func (f fixture) refusedOutturns(withdrawn, second service.Outturn) {
	f.t.Helper()
	insert := func(change func(*service.Outturn)) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error {
			o := f.newOutturn("Loading boom")
			change(&o)
			return tx.InsertOutturns(ctx, []service.Outturn{f.newOutturn("Conveyor gallery"), o})
		}
	}
	withdraw := func(o service.Outturn, version int64) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error { return tx.WithdrawOutturn(ctx, o.ID, version, at(1)) }
	}
	for _, test := range []struct {
		name  string
		kind  service.Kind
		words string
		do    func(context.Context, service.Tx) error
	}{
		{"a job that is in force", service.Conflict, "has an outturn in force already", insert(func(o *service.Outturn) { o.Value.Job = second.Value.Job })},
		{"no job", service.Invalid, "outside of what can be stored", insert(func(o *service.Outturn) { o.Value.Job = "" })},
		{"no date", service.Invalid, "cannot be stored", insert(func(o *service.Outturn) { o.Value.Completed = "soon" })},
		{"an unknown author", service.NotFound, "no such token", insert(func(o *service.Outturn) { o.Author = newID() })},
		{"withdrawing an older version", service.Stale, "the outturn has changed", withdraw(second, 2)},
		{"withdrawing an unknown one", service.NotFound, "no such outturn", withdraw(service.Outturn{ID: newID()}, 1)},
		{"withdrawing a withdrawn one", service.NotFound, "no such outturn", withdraw(withdrawn, 2)},
		{"reading a withdrawn one", service.NotFound, "no such outturn", func(ctx context.Context, tx service.Tx) error { _, err := tx.Outturn(ctx, withdrawn.ID); return err }},
	} {
		f.refused(test.name, test.kind, test.words, test.do)
	}
	f.do(func(tx service.Tx) error {
		for _, o := range got[[]service.Outturn](f)(tx.OutturnsInForce(f.t.Context())) {
			if o.Value.Job == "Conveyor gallery" {
				f.t.Error("an outturn of a refused posting is stored")
			}
		}
		return nil
	})
}

// A hash that is no hexadecimal text must not reach the database.
func TestOutturnWithABadHash(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	for _, change := range []func(*service.Outturn){func(o *service.Outturn) { o.SHA256 = "x" }, func(o *service.Outturn) { o.SourceSHA256 = "x" }} {
		o := f.newOutturn("Loading boom")
		change(&o)
		err := f.s.InTenant(t.Context(), f.organisation, func(tx service.Tx) error { return tx.InsertOutturns(t.Context(), []service.Outturn{o}) })
		var known *service.Error
		if err == nil || errors.As(err, &known) {
			t.Errorf("%v, want an internal error", err)
		}
	}
}
