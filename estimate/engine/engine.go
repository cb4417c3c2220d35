// Package engine runs a job through every stage; there is no other way.
//
//	job → size (members, in parallel; again by the split method) → take-off (items)
//	    → pricing (decimal lines, cost model) → ranges (simulation)
//	    → register and findings of every stage → document
//
// A job that is the same gives a document that is the same to the last byte,
// whatever the machine's cores and the order of the rows.
package engine

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
	"spanwright/structural/material"
	"spanwright/structural/section"
)

// Progress is told how far a stage has come. It may be called from several
// goroutines; nil is allowed.
type Progress func(stage string, done, total int)

// Fault is one member that cannot be estimated as it stands.
type Fault struct {
	Mark    string
	Problem string
	Remedy  string
}

// FaultsError lists every member that cannot be estimated, by mark.
type FaultsError struct {
	Faults []Fault
}

// Error names the first fault and how many there are.
func (e *FaultsError) Error() string {
	f := e.Faults[0]
	s := fmt.Sprintf("member %s: %s; %s", f.Mark, f.Problem, f.Remedy)
	if n := len(e.Faults) - 1; n > 0 {
		s += fmt.Sprintf(" (and %d more)", n)
	}
	return s
}

// RatesError reports rates or multipliers that cannot be priced together, such as
// a product of more digits than a workbook can hold.
type RatesError struct{ Err error }

// Error says what cannot be priced.
func (e *RatesError) Error() string { return "the rates cannot be priced: " + e.Err.Error() }

// Unwrap returns the cause.
func (e *RatesError) Unwrap() error { return e.Err }

// Data returns the hashes of the embedded data that this engine computes with.
func Data() job.Data {
	return job.Data{Catalogue: section.DataHash(), Grades: material.DataHash()}
}

// ErrOtherEngine reports a job frozen for another engine version or other data.
var ErrOtherEngine = errors.New("the job was frozen for another engine")

// Run computes the estimate of a job. It returns a *FaultsError when members
// cannot be estimated, ErrOtherEngine when the job was frozen for another
// engine, the context's error when cancelled.
func Run(ctx context.Context, j job.Job, progress Progress) (document.Document, error) {
	if progress == nil {
		progress = func(string, int, int) {}
	}
	if j.EngineVersion != document.EngineVersion || j.Data != Data() {
		return document.Document{}, fmt.Errorf("%w: it asks for version %d, this is version %d; or its catalogue differs", ErrOtherEngine, j.EngineVersion, document.EngineVersion)
	}
	currency, err := j.Money()
	if err != nil {
		return document.Document{}, err
	}
	sized, err := sizeAll(ctx, j, progress)
	if err != nil {
		return document.Document{}, err
	}
	r := &run{job: j, currency: currency, sized: sized, progress: progress}
	return r.finish(ctx)
}

// run carries one job through the stages after sizing.
type run struct {
	job      job.Job
	currency money.Currency
	sized    []sizedMember
	progress Progress

	allowances takeoff.Allowances
	items      []takeoff.Item
	itemOf     map[string]string // mark → item
	priced     pricing.Priced
	systemic   takeoff.Allowance
	ranged     ranges.Result
	register   assumption.Register
}

func (r *run) finish(ctx context.Context) (document.Document, error) {
	var err error
	if r.allowances, r.systemic, err = bookAllowances(r.job); err != nil {
		return document.Document{}, err
	}
	if err := r.count(); err != nil {
		return document.Document{}, err
	}
	r.priced, err = pricing.Price(r.items, pricing.Rates{
		Book: r.job.Book, Multipliers: r.job.Multipliers, Currency: r.currency, Systemic: r.systemic,
	})
	if err != nil {
		return document.Document{}, &RatesError{err}
	}
	r.ranged, err = ranges.Simulate(ctx, r.priced.Model, ranges.Settings{
		Seed: r.job.Sampling.Seed, Replicates: r.job.Sampling.Replicates, Trials: r.job.Sampling.Trials,
		Percentiles: percentiles(r.job.Settings.Confidence), Correlation: r.job.Book.Correlation,
	}, func(done, total int) { r.progress("range", done, total) })
	var faulty *ranges.Error
	switch {
	case errors.As(err, &faulty):
		return document.Document{}, &RatesError{err}
	case err != nil:
		return document.Document{}, fmt.Errorf("range: %w", err)
	}
	if err := r.fillRegister(); err != nil {
		return document.Document{}, err
	}
	return r.assemble()
}

// percentiles are those shown for every estimate, with the chosen confidence.
func percentiles(confidence float64) []float64 {
	p := []float64{0.1, 0.5, 0.8, 0.9}
	if !slices.Contains(p, confidence) {
		p = append(p, confidence)
		slices.Sort(p)
	}
	return p
}

func (r *run) count() error {
	pieces := make([]takeoff.Piece, len(r.sized))
	for i, s := range r.sized {
		pieces[i] = s.piece()
		pieces[i].Split = r.overrides(pieces[i])
	}
	if err := r.knownClasses(); err != nil {
		return err
	}
	items, err := takeoff.Count(pieces, r.allowances)
	if err != nil {
		return fmt.Errorf("take-off: %w", err)
	}
	r.items, r.itemOf = items, map[string]string{}
	for _, it := range items {
		for _, m := range it.Marks {
			r.itemOf[m] = it.ID
		}
	}
	r.progress("take-off", len(pieces), len(pieces))
	return nil
}

// knownClasses reports the members whose connection class the rate book lacks.
func (r *run) knownClasses() error {
	var f FaultsError
	for _, s := range r.sized {
		if _, ok := r.job.Book.Connections[s.member.ConnectionClass]; !ok {
			f.Faults = append(f.Faults, Fault{Mark: s.member.Mark,
				Problem: fmt.Sprintf("the rate book %q has no connection class %q", r.job.Book.Name, s.member.ConnectionClass),
				Remedy:  "one of " + strings.Join(sortedKeys(r.job.Book.Connections), ", ")})
		}
	}
	if len(f.Faults) > 0 {
		return &f
	}
	return nil
}

// overrides names the multipliers that apply to this member alone; pieces with
// some are counted by themselves.
func (r *run) overrides(p takeoff.Piece) string {
	s := ""
	for _, m := range r.job.Multipliers {
		if m.Scope == ratebook.MemberScope && m.Subject == p.Member.Mark {
			s += m.Name + "\x00"
		}
	}
	return s
}
