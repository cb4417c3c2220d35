package service

import (
	"context"
	"errors"
	"fmt"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// basis is what an estimate is made from, read in one transaction.
type basis struct {
	project     Project
	scheme      Scheme
	revision    Revision
	book        ratebook.Book
	bookID      uuid.UUID
	bookNumber  int
	multipliers []ratebook.Multiplier
}

// CreateEstimate computes and stores an estimate of a scheme: NotFound, Invalid
// (members that cannot be sized, by mark), Busy.
func (s *Service) CreateEstimate(ctx context.Context, a Actor, scheme uuid.UUID, n NewEstimate, key Idempotency) (Estimate, error) {
	if err := s.allow(a, auth.MakeEstimates); err != nil {
		return Estimate{}, err
	}
	operation := "create estimate " + scheme.String()
	var b basis
	var earlier *Estimate
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		m, found, err := s.remembered(ctx, tx, a, operation, key)
		if err != nil {
			return err
		}
		if found {
			e, err := tx.Estimate(ctx, m.Resource)
			earlier = &e
			return err
		}
		b, err = s.basis(ctx, tx, scheme, n)
		return err
	})
	if err != nil || earlier != nil {
		if earlier == nil {
			earlier = &Estimate{}
		}
		return *earlier, err
	}
	sampling, err := n.sampling(s.limits.Trials)
	if err != nil {
		return Estimate{}, err
	}
	sch, err := s.readPosting(ctx, b.revision.posting(), b.book.ConnectionClasses(), b.project.Name, b.scheme.Name)
	if err != nil {
		return Estimate{}, err
	}
	made, err := s.compute(ctx, a, b, sch, sampling)
	if err != nil {
		return Estimate{}, err
	}
	return once(ctx, s, a, operation, key, made.head.ID,
		func(tx Tx, id uuid.UUID) (Estimate, error) { return tx.Estimate(ctx, id) },
		func(tx Tx) (Estimate, error) { return made.head, s.insertEstimate(ctx, tx, a, made) })
}

func (s *Service) basis(ctx context.Context, tx Tx, scheme uuid.UUID, n NewEstimate) (basis, error) {
	var b basis
	var err error
	if b.scheme, err = tx.Scheme(ctx, scheme); err != nil {
		return b, err
	}
	if b.project, err = tx.Project(ctx, b.scheme.Project); err != nil {
		return b, err
	}
	if n.Revision == nil {
		b.revision, err = tx.NewestRevision(ctx, scheme)
	} else {
		b.revision, err = tx.Revision(ctx, *n.Revision)
	}
	if err != nil {
		return b, err
	}
	if b.revision.Scheme != scheme {
		return b, invalid("/schedule_revision_id", b.revision.ID.String(), "belongs to another scheme", "a revision of this scheme")
	}
	book := n.RateBook
	if book == nil && n.BookName == "" { // the scheme goes on with the book of its last estimate
		last, err := tx.NewestEstimate(ctx, scheme)
		switch {
		case err == nil:
			book = &last.RateBook
		case !isKind(err, NotFound):
			return b, err
		}
	}
	if err := s.rates(ctx, tx, &b, book, n.BookName); err != nil {
		return b, err
	}
	return b, nil
}

// rates fills in the rate book and the multipliers in force.
func (s *Service) rates(ctx context.Context, tx Tx, b *basis, book *uuid.UUID, name string) error {
	stored, err := bookNamed(ctx, tx, book, name)
	if err != nil {
		return err
	}
	b.book, b.bookID, b.bookNumber = stored.Content, stored.ID, stored.Number
	ms, err := tx.MultipliersInForce(ctx, b.project.ID, b.scheme.ID)
	if err != nil {
		return err
	}
	for _, m := range ms {
		b.multipliers = append(b.multipliers, m.inForce())
	}
	return nil
}

// bookOf reads a rate book, the starting one when none is named: NotFound.
func bookOf(ctx context.Context, tx Tx, id *uuid.UUID) (RateBook, error) {
	if id == nil {
		return tx.RateBookByName(ctx, StartingBook)
	}
	return tx.RateBook(ctx, *id)
}

// bookNamed reads a rate book by its id or by its name: NotFound, Invalid for both.
func bookNamed(ctx context.Context, tx Tx, id *uuid.UUID, name string) (RateBook, error) {
	switch {
	case name == "":
		return bookOf(ctx, tx, id)
	case id != nil:
		return RateBook{}, invalid("/rate_book", name, "the rate book is given twice", "rate_book with a name, or rate_book_id")
	}
	b, err := tx.RateBookByName(ctx, name)
	if isKind(err, NotFound) {
		err = &Error{Kind: NotFound, Message: "no such rate book", Faults: []Fault{{Pointer: "/rate_book", Found: shortened(name), Problem: "no rate book of this name",
			Remedy: "the name of a rate book of this organisation; each begins with ratio and unit-rate"}}}
	}
	return b, err
}

func (n NewEstimate) sampling(limit int) (job.Sampling, error) {
	sampling := job.DefaultSampling()
	if n.Seed != nil {
		sampling.Seed = *n.Seed
	}
	if n.Replicates != 0 {
		sampling.Replicates = n.Replicates
	}
	if n.Trials != 0 {
		sampling.Trials = n.Trials
	}
	field := "/trials"
	if sampling.Replicates < job.MinReplicates || sampling.Replicates > limit {
		field = "/replicates"
	}
	found := fmt.Sprintf("%d × %d", sampling.Replicates, sampling.Trials)
	if sampling.Trials > 0 && sampling.Replicates > limit/sampling.Trials {
		return sampling, invalid(field, found, "more trials than this server runs", fmt.Sprintf("%d in all", limit))
	}
	if err := sampling.Validate(); err != nil {
		return sampling, invalid(field, found, err.Error(), "32 or more replicates of 64 or more trials")
	}
	return sampling, nil
}

// computed is an estimate ready to be stored.
type computed struct {
	head          Estimate
	job, document []byte
}

// compute runs the engine; no transaction is open meanwhile.
func (s *Service) compute(ctx context.Context, a Actor, b basis, sch schedule.Schedule, sampling job.Sampling) (computed, error) {
	if err := sameCurrency(b.project, sch); err != nil {
		return computed{}, err
	}
	select {
	case s.heavy <- struct{}{}:
		defer func() { <-s.heavy }()
	default:
		return computed{}, &Error{Kind: Busy, Message: "as many estimates as this server allows are being computed; try again in a moment"}
	}
	j, err := job.Freeze(sch, job.Source{Name: b.revision.SourceName, SHA256: b.revision.SourceSHA256}, b.book, b.multipliers, sampling)
	if err != nil {
		return computed{}, &Error{Kind: Invalid, Message: err.Error(), Faults: []Fault{{Found: "the job", Problem: err.Error(), Remedy: "correct the job's settings or choose another rate book"}}}
	}
	j.EngineVersion, j.Data, j.Build = document.EngineVersion, engine.Data(), s.build
	doc, err := s.run(ctx, j, nil)
	if err != nil {
		return computed{}, fromEngine(err, sch)
	}
	return s.seal(a, b, j, doc)
}

// fromEngine turns members that cannot be sized into faults by row.
func fromEngine(err error, sch schedule.Schedule) error {
	var rates *engine.RatesError
	if errors.As(err, &rates) {
		return &Error{Kind: Invalid, Message: rates.Error(), Faults: []Fault{{Found: "the rate book and the multipliers in force", Problem: rates.Err.Error(),
			Remedy: "rates, indices, exchange rates and multipliers that fit together, as the problem says"}}, Err: err}
	}
	var f *engine.FaultsError
	if !errors.As(err, &f) {
		return err
	}
	rows := map[string]schedule.Member{}
	for _, m := range sch.Members {
		rows[m.Mark] = m
	}
	out := &Error{Kind: Invalid, Message: "members cannot be sized; nothing was stored"}
	for _, x := range f.Faults {
		at := rows[x.Mark].Row
		out.Faults = append(out.Faults, Fault{Sheet: at.Sheet, Row: at.Row, Mark: x.Mark, Found: "member " + x.Mark, Problem: x.Problem, Remedy: x.Remedy})
	}
	return out
}

// sameCurrency refuses a schedule in another currency than its project's.
func sameCurrency(p Project, sch schedule.Schedule) error {
	if p.Currency == sch.Settings.Currency {
		return nil
	}
	return &Error{Kind: Invalid, Message: fmt.Sprintf("the project is in %s, the schedule in %s", p.Currency, sch.Settings.Currency),
		Faults: []Fault{{Sheet: "Job", Header: "Currency", Found: sch.Settings.Currency, Problem: "differs from the project's currency", Remedy: p.Currency + ", or another project"}}}
}

// largestDocument is the size in bytes beyond which an estimate is not stored.
const largestDocument = 128 << 20

// seal writes the canonical bytes and the head that lists and pages read.
func (s *Service) seal(a Actor, b basis, j job.Job, d document.Document) (computed, error) {
	var c computed
	var jobSum, docSum string
	var err error
	if c.job, jobSum, err = j.Canonical(); err != nil {
		return c, err
	}
	if c.document, docSum, err = d.Canonical(); err != nil {
		return c, err
	}
	if n := len(c.document); n > largestDocument {
		return c, &Error{Kind: Invalid, Message: fmt.Sprintf("the estimate would be %d MB, more than the %d MB that are stored; split the schedule", n>>20, largestDocument>>20)}
	}
	id, err := s.newID()
	if err != nil {
		return c, err
	}
	c.head, err = Head(d)
	if err != nil {
		return c, err
	}
	h := &c.head
	h.ID, h.Scheme, h.Revision, h.RateBook, h.RateBookNumber = id, b.scheme.ID, b.revision.ID, b.bookID, b.bookNumber
	h.JobSHA256, h.DocumentSHA256, h.CreatedAt, h.CreatedBy, h.Author = jobSum, docSum, s.now(), a.Name, a.Token
	return c, nil
}

// Head returns the query columns of a document: the one projection of it, from
// which the table can be rebuilt.
func Head(d document.Document) (Estimate, error) {
	currency, err := money.FindCurrency(d.Job.Currency)
	if err != nil {
		return Estimate{}, err
	}
	e := Estimate{
		EngineVersion: d.EngineVersion, Currency: d.Job.Currency, Base: d.Totals.Base, Confidence: float64(d.Totals.Confidence),
		Contingency: d.Totals.Contingency, Net: d.Totals.Net, Delivered: d.Totals.Delivered, Purchased: d.Totals.Purchased,
		Members: d.Totals.Members, Unsafe: d.Totals.Unsafe,
	}
	if e.Mean, err = money.FromFloat(d.Range.Mean.Rounded(), currency.MinorDigits); err != nil {
		return e, err
	}
	into := map[document.Number]*money.Decimal{0.1: &e.P10, 0.5: &e.P50, 0.8: &e.P80, 0.9: &e.P90}
	for _, p := range d.Range.Percentiles {
		if to, ok := into[p.P]; ok {
			if *to, err = money.FromFloat(p.Value.Rounded(), currency.MinorDigits); err != nil {
				return e, err
			}
		}
	}
	return e, nil
}

func (s *Service) insertEstimate(ctx context.Context, tx Tx, a Actor, c computed) error {
	if err := tx.InsertEstimate(ctx, c.head, c.job, c.document); err != nil {
		return err
	}
	return s.audit(ctx, tx, a, "create", "estimate", c.head.ID, nil, c.head)
}

// Estimate reads the head of one estimate: NotFound.
func (s *Service) Estimate(ctx context.Context, a Actor, id uuid.UUID) (Estimate, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Estimate, error) { return tx.Estimate(ctx, id) })
}

// Document reads the canonical bytes of an estimate's document: NotFound.
func (s *Service) Document(ctx context.Context, a Actor, id uuid.UUID) ([]byte, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) ([]byte, error) { return tx.EstimateDocument(ctx, id) })
}

// Estimates lists the estimates of a scheme, newest first: NotFound.
func (s *Service) Estimates(ctx context.Context, a Actor, scheme uuid.UUID, p Page) (List[Estimate], error) {
	return list(ctx, s, a, auth.ReadProjects, func(tx Tx) (List[Estimate], error) {
		if _, err := tx.Scheme(ctx, scheme); err != nil {
			return List[Estimate]{}, err
		}
		return tx.Estimates(ctx, scheme, p)
	})
}

// NewestEstimate reads the newest estimate of a scheme: NotFound.
func (s *Service) NewestEstimate(ctx context.Context, a Actor, scheme uuid.UUID) (Estimate, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Estimate, error) { return tx.NewestEstimate(ctx, scheme) })
}
