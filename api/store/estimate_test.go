package store_test

import (
	"bytes"
	"context"
	"testing"

	"spanwright/api/service"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

func TestEstimate(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	second := f.newEstimate()
	second.CreatedAt = at(60)
	f.do(func(tx service.Tx) error { return tx.InsertEstimate(ctx, second, f.job, f.doc) })
	f.do(func(tx service.Tx) error {
		f.same(got[service.Estimate](f)(tx.Estimate(ctx, f.estimate.ID)), f.estimate)
		f.same(got[service.Estimate](f)(tx.NewestEstimate(ctx, f.scheme.ID)), second)
		f.same(got[service.List[service.Estimate]](f)(tx.Estimates(ctx, f.scheme.ID, service.Page{})), service.List[service.Estimate]{Items: []service.Estimate{second, f.estimate}})
		f.same(got[[]byte](f)(tx.EstimateJob(ctx, f.estimate.ID)), f.job)
		f.same(got[[]byte](f)(tx.EstimateDocument(ctx, f.estimate.ID)), f.doc)
		return nil
	})
	insert := func(change func(*service.Estimate)) func(context.Context, service.Tx) error {
		e := f.newEstimate()
		change(&e)
		return func(ctx context.Context, tx service.Tx) error { return tx.InsertEstimate(ctx, e, f.job, f.doc) }
	}
	for _, test := range []struct {
		name  string
		kind  service.Kind
		words string
		do    func(context.Context, service.Tx) error
	}{
		{"unknown", service.NotFound, "no such estimate", func(ctx context.Context, tx service.Tx) error { _, err := tx.Estimate(ctx, newID()); return err }},
		{"no newest", service.NotFound, "no such estimate", func(ctx context.Context, tx service.Tx) error { _, err := tx.NewestEstimate(ctx, newID()); return err }},
		{"no document", service.NotFound, "no such estimate", func(ctx context.Context, tx service.Tx) error {
			_, err := tx.EstimateDocument(ctx, newID())
			return err
		}},
		{"no job", service.NotFound, "no such estimate", func(ctx context.Context, tx service.Tx) error { _, err := tx.EstimateJob(ctx, newID()); return err }},
		{"no scheme", service.NotFound, "no such s", insert(func(e *service.Estimate) { e.Scheme = newID() })},
		{"no revision", service.NotFound, "no such schedule revision", insert(func(e *service.Estimate) { e.Revision = newID() })},
		{"no rate book", service.NotFound, "no such rate book version", insert(func(e *service.Estimate) { e.RateBook = newID() })},
		{"no version", service.NotFound, "no such rate book version", insert(func(e *service.Estimate) { e.RateBookNumber = 2 })},
		{"no author", service.NotFound, "no such token", insert(func(e *service.Estimate) { e.Author = newID() })},
		{"taken id", service.Conflict, "this estimate exists", insert(func(e *service.Estimate) { e.ID = f.estimate.ID })},
		{"confidence of 1", service.Invalid, "outside of what can be stored", insert(func(e *service.Estimate) { e.Confidence = 1 })},
	} {
		f.refused(test.name, test.kind, test.words, test.do)
	}
	for _, change := range []func(*service.Estimate){func(e *service.Estimate) { e.JobSHA256 = "x" }, func(e *service.Estimate) { e.DocumentSHA256 = "x" }} {
		if err := f.s.InTenant(ctx, f.organisation, func(tx service.Tx) error { return insert(change)(ctx, tx) }); err == nil {
			t.Error("a hash that is not hexadecimal was stored")
		}
	}
}

// A document of some megabytes with every byte value comes back as it went in.
func TestDocumentBytes(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	all := make([]byte, 256)
	for i := range all {
		all[i] = byte(i)
	}
	doc, e := bytes.Repeat(all, 16<<10), f.newEstimate()
	f.do(func(tx service.Tx) error { return tx.InsertEstimate(t.Context(), e, all, doc) })
	f.do(func(tx service.Tx) error {
		if back := got[[]byte](f)(tx.EstimateDocument(t.Context(), e.ID)); !bytes.Equal(back, doc) {
			t.Errorf("document of %d bytes came back with %d, or changed", len(doc), len(back))
		}
		return nil
	})
}

// DESIGN: the query columns are what service.Head makes of the stored document,
// before and after they are rebuilt.
func TestColumnsAreTheProjectionOfTheDocument(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	amount := func(text string) money.Decimal {
		d, err := money.Parse(text)
		if err != nil {
			t.Fatal(err)
		}
		return d
	}
	d := document.Document{EngineVersion: document.EngineVersion, Job: document.Job{Currency: "KWD"},
		Totals: document.Totals{Base: amount("100.000"), Confidence: 0.8, Contingency: amount("0.000"), Net: amount("1.250"), Delivered: amount("1.4"),
			Purchased: amount("1.5"), Members: 3, Unsafe: 1},
		Range: document.Range{Mean: 101.23456789, Percentiles: []document.Percentile{{P: 0.1, Value: 90}, {P: 0.5, Value: 99.5}, {P: 0.8, Value: 110.0005}, {P: 0.9, Value: 120}}}}
	head, err := service.Head(d)
	if err != nil {
		t.Fatal(err)
	}
	doc, sum, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	want := f.newEstimate()
	head.ID, head.Scheme, head.Revision, head.RateBook, head.RateBookNumber = want.ID, want.Scheme, want.Revision, want.RateBook, want.RateBookNumber
	head.JobSHA256, head.DocumentSHA256, head.CreatedAt, head.CreatedBy, head.Author = want.JobSHA256, sum, want.CreatedAt, want.CreatedBy, want.Author
	f.do(func(tx service.Tx) error { return tx.InsertEstimate(ctx, head, f.job, doc) })

	parsed := func(data []byte) (service.Estimate, error) {
		d, err := document.Parse(data)
		if err != nil {
			return service.Estimate{}, err
		}
		return service.Head(d)
	}
	check := func() {
		t.Helper()
		f.do(func(tx service.Tx) error {
			stored := got[service.Estimate](f)(tx.Estimate(ctx, head.ID))
			f.same(stored, head)
			fromDocument := got[service.Estimate](f)(parsed(got[[]byte](f)(tx.EstimateDocument(ctx, head.ID))))
			stored.ID, stored.Scheme, stored.Revision, stored.RateBook, stored.RateBookNumber = fromDocument.ID, fromDocument.Scheme, fromDocument.Revision, fromDocument.RateBook, 0
			stored.JobSHA256, stored.DocumentSHA256, stored.CreatedAt, stored.CreatedBy, stored.Author = "", "", fromDocument.CreatedAt, "", fromDocument.Author
			f.same(stored, fromDocument)
			return nil
		})
	}
	check()
	if _, err := f.db.Owner.Exec(ctx, "delete from estimate where id <> $1", head.ID); err != nil { // the fixture's document is none
		t.Fatal(err)
	}
	if _, err := f.db.Owner.Exec(ctx, "update estimate set base = 1, p10 = 0, mean = 5, members = 99, net_t = 7, confidence = 0.5, currency = 'EUR'"); err != nil {
		t.Fatal(err)
	}
	a := mustOpenAdmin(t, f.db.AdminURL)
	if n, err := a.RebuildProjection(ctx, parsed); n != 1 || err != nil {
		t.Fatalf("rebuilt %d, %v, want 1", n, err)
	}
	check()
	if _, err := a.RebuildProjection(ctx, func([]byte) (service.Estimate, error) { return service.Estimate{}, context.Canceled }); err == nil {
		t.Error("a document that cannot be read was passed over")
	}
}
