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
type Fault = takeoff.Fault

// FaultsError lists every member that cannot be estimated, by mark.
type FaultsError = takeoff.FaultsError

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
	sized, err := Size(ctx, j, progress)
	if err != nil {
		return document.Document{}, err
	}
	return sized.Estimate(ctx, j, progress)
}

// run carries one job through the stages after sizing.
type run struct {
	job      job.Job
	currency money.Currency
	sized    *Sized
	progress Progress

	allowances  takeoff.Allowances
	settings    takeoff.Settings
	pieces      []takeoff.Piece
	items       []takeoff.Item
	breaches    []takeoff.Breach
	facts       pricing.Facts
	itemsOf     map[string][]string // mark → items
	itemAt      map[string]int
	priced      pricing.Priced
	conversions []assumption.Entry // exchange and escalation
	unescalated []string           // categories without an index
	stale       []string           // exchange rates past their date, in words
	exchanged   float64            // units of the job's currency for one of the book's
	systemic    takeoff.Allowance
	ranged      ranges.Result
	carbon      pricing.CarbonPriced
	carbonRange *ranges.Result
	split       splitMoney
	register    assumption.Register
}

func (r *run) finish(ctx context.Context) (document.Document, error) {
	steps := []func(context.Context) error{r.price, r.simulate, r.weighCarbon, r.priceSplit}
	for _, step := range steps {
		if err := step(ctx); err != nil {
			return document.Document{}, err
		}
	}
	if err := r.fillRegister(); err != nil {
		return document.Document{}, err
	}
	return r.assemble()
}

// price counts the quantities and prices them.
func (r *run) price(ctx context.Context) error {
	if err := r.count(ctx); err != nil {
		return err
	}
	rates, err := r.rates()
	if err != nil {
		return err
	}
	if r.priced, err = pricing.Price(r.items, rates); err != nil {
		return &RatesError{err}
	}
	return nil
}

// rangeSettings are those of the simulation of the total.
func (r *run) rangeSettings() ranges.Settings {
	return ranges.Settings{
		Seed: r.job.Sampling.Seed, Replicates: r.job.Sampling.Replicates, Trials: r.job.Sampling.Trials,
		Percentiles: percentiles(r.job.Settings.Confidence), Correlation: r.correlation(r.priced.Model), Sensitivities: true,
	}
}

// correlation is that of the groups which a model's assumptions are in.
func (r *run) correlation(m pricing.Model) map[string]float64 {
	out := map[string]float64{}
	for _, in := range m.Inputs {
		if rho, ok := r.job.Book.Correlation[in.Group]; ok {
			out[in.Group] = rho
		}
	}
	return out
}

func (r *run) simulate(ctx context.Context) error {
	var err error
	r.ranged, err = ranges.Simulate(ctx, r.priced.Model, r.rangeSettings(), func(done, total int) { r.progress("range", done, total) })
	return rangeError(err)
}

// rangeError tells a fault of the rates from one of the program.
func rangeError(err error) error {
	var faulty *ranges.Error
	switch {
	case err == nil:
		return nil
	case errors.As(err, &faulty):
		return &RatesError{err}
	}
	return fmt.Errorf("range: %w", err)
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

func (r *run) count(ctx context.Context) error {
	var err error
	if r.allowances, err = takeoff.FromBook(r.job.Book, r.job.Settings); err != nil {
		return err
	}
	if r.systemic, err = systemicFactor(r.job); err != nil {
		return err
	}
	if err := r.knownClasses(); err != nil {
		return err
	}
	r.settings = takeoff.SettingsOf(r.job.Book, r.job.Settings)
	r.pieces = r.piecesOf(func(s sizedMember) *section.Section { return s.chosen() })
	if r.settings.Plans, err = takeoff.Purchase(ctx, r.pieces, r.settings); err != nil {
		return takeoffError(err)
	}
	if r.items, err = takeoff.Count(r.pieces, r.allowances, r.settings); err != nil {
		return takeoffError(err)
	}
	r.breaches = takeoff.Breaches(r.pieces, r.allowances, r.settings)
	r.facts = r.askedFacts()
	r.itemsOf, r.itemAt = map[string][]string{}, map[string]int{}
	for i, it := range r.items {
		r.itemAt[it.ID] = i
		for _, m := range it.Marks {
			r.itemsOf[m] = append(r.itemsOf[m], it.ID)
		}
	}
	r.progress("take-off", len(r.pieces), len(r.pieces))
	return nil
}

// piecesOf are the rows with the section that pick gives each.
func (r *run) piecesOf(pick func(sizedMember) *section.Section) []takeoff.Piece {
	out := make([]takeoff.Piece, len(r.sized.members))
	alone := r.overrides()
	for i, s := range r.sized.members {
		out[i] = takeoff.NewPiece(s.member, pick(s))
		out[i].Split = alone[s.member.Mark]
	}
	return out
}

// takeoffError hands on what members lack as it is.
func takeoffError(err error) error {
	var faults *FaultsError
	if errors.As(err, &faults) {
		return faults
	}
	return fmt.Errorf("take-off: %w", err)
}

// knownClasses reports the members whose coating no rate of the book prices. A book
// without rates by coating takes any.
func (r *run) knownClasses() error {
	known := r.job.Book.Coatings()
	if len(known) == 0 {
		return nil
	}
	var f FaultsError
	for _, s := range r.sized.members {
		coating := s.member.Coating
		if coating == "" {
			coating = r.job.Settings.Coating
		}
		if coating != "" && !slices.Contains(known, coating) {
			f.Faults = append(f.Faults, Fault{Mark: s.member.Mark,
				Problem: fmt.Sprintf("the rate book %q has no rate for the coating %q", r.job.Book.Name, coating),
				Remedy:  "one of " + strings.Join(known, ", ")})
		}
	}
	if len(f.Faults) > 0 {
		return &f
	}
	return nil
}

// overrides names, by mark, the multipliers and rates that apply to one member
// alone; pieces with some are counted by themselves.
func (r *run) overrides() map[string]string {
	out := map[string]string{}
	for _, m := range r.job.Multipliers {
		if m.Scope == ratebook.MemberScope {
			out[m.Subject] += m.Name + "\x00"
		}
	}
	for _, rate := range r.job.Book.Rates {
		if rate.Scope == ratebook.MemberScope {
			out[rate.Subject] += "rate " + rate.ID + "\x00"
		}
	}
	return out
}
