package service

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/calibration"
	"spanwright/estimate/ratebook"
)

// The states of a calibration.
const (
	Proposed = "proposed"
	Accepted = "accepted"
	Declined = "declined"
)

// Calibration is what was refitted from the outturns in force for one version of a
// rate book. It is never edited; it is decided once.
type Calibration struct {
	ID             uuid.UUID            `json:"id"`
	RateBook       uuid.UUID            `json:"rate_book_id"`
	RateBookNumber int                  `json:"rate_book_version" doc:"number of the content that it was fitted for"`
	SHA256         string               `json:"sha256" doc:"of the proposal's canonical bytes"`
	Jobs           int                  `json:"jobs" doc:"comparable jobs that it rests on"`
	LeftOut        int                  `json:"left_out" doc:"outturns in force that could not be compared"`
	Recommended    bool                 `json:"recommended" doc:"at least one change is recommended"`
	Statement      string               `json:"statement"`
	State          string               `json:"state" enum:"proposed,accepted,declined"`
	Reason         string               `json:"reason,omitempty" doc:"of the decision"`
	Decision       *CalibrationDecision `json:"decision,omitempty" doc:"of an accepted one: what was changed"`
	MadeNumber     int                  `json:"made_rate_book_version,omitempty" doc:"number of the content that the acceptance has made"`
	DecidedAt      *time.Time           `json:"decided_at,omitempty"`
	DecidedBy      string               `json:"decided_by,omitempty" doc:"name of the token"`
	Version        int64                `json:"version"`
	CreatedAt      time.Time            `json:"created_at"`
	CreatedBy      string               `json:"created_by" doc:"name of the token"`

	Proposal *calibration.Proposal `json:"proposal,omitempty" doc:"absent in lists"`
	Evidence *CalibrationEvidence  `json:"evidence,omitempty" doc:"absent in lists"`

	Author      uuid.UUID `json:"-"` // the token; CreatedBy is its name
	Decider     uuid.UUID `json:"-"` // the token; DecidedBy is its name
	Content     []byte    `json:"-"` // canonical bytes of Proposal, of one to be stored
	EvidenceRaw []byte    `json:"-"` // Evidence as it is stored
}

// CalibrationEvidence is what stands beside a proposal.
type CalibrationEvidence struct {
	Currency string `json:"currency" doc:"of the rate book: all outturns were brought to it"`
	BaseDate string `json:"base_date" doc:"of the rate book: all outturns were brought to its prices"`
	// GrowthClass is the estimate class of most jobs.
	GrowthClass string              `json:"growth_class" doc:"estimate class whose growth in the rate book the masses were held against"`
	Coverage    calibration.Covered `json:"coverage" doc:"whether past ranges held as often as they said"`
	Notes       []string            `json:"notes" doc:"what was supposed in bringing the outturns to the rate book"`
	Outturns    []uuid.UUID         `json:"outturn_ids" doc:"the outturns in force when it was fitted"`
}

// NewCalibration asks for a fit of the outturns in force.
type NewCalibration struct {
	RateBook *uuid.UUID `json:"rate_book_id,omitempty" doc:"the book that is to learn, in its newest version; when absent the organisation's book named unit-rate, else the one named ratio"`
}

// CreateCalibration brings the outturns in force to the currency, base date and
// indices of a rate book, fits them and stores what they propose; the book stays as
// it is: NotFound, Busy, Invalid when fewer than 20 jobs can be compared, with the
// reason of each that cannot.
func (s *Service) CreateCalibration(ctx context.Context, a Actor, n NewCalibration, key Idempotency) (Calibration, error) {
	const operation = "create calibration"
	if err := s.allow(a, auth.WriteOutturns); err != nil {
		return Calibration{}, err
	}
	var earlier *Calibration
	var book RateBook
	var outturns []Outturn
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		m, found, err := s.remembered(ctx, tx, a, operation, key)
		if err != nil {
			return err
		}
		if found {
			c, err := tx.Calibration(ctx, m.Resource)
			earlier = &c
			return err
		}
		if n.RateBook == nil { // the starting book that has indices and norms to learn
			book, err = tx.RateBookByName(ctx, ratebook.KindUnitRate)
		}
		if n.RateBook != nil || isKind(err, NotFound) {
			book, err = bookOf(ctx, tx, n.RateBook)
		}
		if err != nil {
			return err
		}
		outturns, err = tx.OutturnsInForce(ctx)
		return err
	})
	if err != nil {
		return Calibration{}, err
	}
	if earlier != nil {
		return *earlier, nil
	}
	c, err := s.calibrate(a, book, outturns)
	if err != nil {
		return Calibration{}, err
	}
	return once(ctx, s, a, operation, key, c.ID,
		func(tx Tx, id uuid.UUID) (Calibration, error) { return tx.Calibration(ctx, id) },
		func(tx Tx) (Calibration, error) {
			if err := tx.InsertCalibration(ctx, c); err != nil {
				return c, err
			}
			return c, s.audit(ctx, tx, a, "create", "calibration", c.ID, nil, c.head())
		})
}

// head is the record without what is too long for an audit event; SHA256 names it.
func (c Calibration) head() Calibration {
	c.Proposal, c.Evidence = nil, nil
	return c
}

func (c Calibration) version() int64 { return c.Version }

// calibrate fits, as a heavy request and outside of any transaction.
func (s *Service) calibrate(a Actor, book RateBook, outturns []Outturn) (Calibration, error) {
	select {
	case s.heavy <- struct{}{}:
		defer func() { <-s.heavy }()
	default:
		return Calibration{}, &Error{Kind: Busy, Message: "as many computations as this server allows are running; try again in a moment"}
	}
	id, err := s.newID()
	if err != nil {
		return Calibration{}, err
	}
	p, e, err := fitted(book, outturns)
	if err != nil {
		return Calibration{}, err
	}
	c := Calibration{ID: id, RateBook: book.ID, RateBookNumber: book.Number, Jobs: len(p.Jobs), LeftOut: len(p.Left), Recommended: p.Recommended,
		Statement: p.Statement, State: Proposed, Version: 1, CreatedAt: s.now(), CreatedBy: a.Name, Author: a.Token, Proposal: &p, Evidence: &e}
	if c.Content, c.SHA256, err = p.Canonical(); err != nil {
		return c, err
	}
	if c.EvidenceRaw, err = json.Marshal(e); err != nil {
		return c, fmt.Errorf("writing the evidence of the calibration: %w", err)
	}
	return c, nil
}

// fitted is what the outturns say of a rate book.
func fitted(book RateBook, outturns []Outturn) (calibration.Proposal, CalibrationEvidence, error) {
	e := CalibrationEvidence{Currency: book.Content.Currency, BaseDate: book.Content.BaseDate, Notes: notesOn(book.Content), Outturns: []uuid.UUID{}}
	var jobs []calibration.Comparable
	left := []calibration.Left{}
	for _, o := range outturns {
		e.Outturns = append(e.Outturns, o.ID)
		basis, err := basisOf(book.Content, o.Value)
		if err != nil {
			return calibration.Proposal{}, e, err
		}
		// One by one: the values of an index that a job needs are few.
		c, l, err := calibration.Normalise([]calibration.Outturn{o.Value}, basis)
		if err != nil {
			return calibration.Proposal{}, e, fromBasis(err, book)
		}
		jobs, left = append(jobs, c...), append(left, l...)
	}
	e.GrowthClass = classOf(jobs)
	options := currentOf(book.Content, e.GrowthClass)
	options.Left = left
	p, err := calibration.Fit(jobs, options)
	if err != nil {
		return p, e, fromFit(err, book)
	}
	e.Notes = append(e.Notes, fmt.Sprintf("Masses were held against the rate book's connections, bolts, and growth of estimate class %s, the class of most jobs.", e.GrowthClass))
	e.Coverage = calibration.Coverage(jobs)
	e.Coverage.Left = orEmpty(e.Coverage.Left)
	return p, e, nil
}

// fromBasis turns the faults of a rate book that outturns cannot be brought to into
// those of a request.
func fromBasis(err error, book RateBook) error {
	var faults calibration.Faults
	if !errors.As(err, &faults) {
		return fmt.Errorf("rate book %s, version %d: %w", book.ID, book.Number, err)
	}
	out := &Error{Kind: Invalid, Message: "outturns cannot be brought to the currency, base date, indices and exchange rates of the rate book " + book.Name}
	for _, f := range faults {
		out.Faults = append(out.Faults, Fault{Found: f.Found, Problem: "in the rate book, " + f.Pointer + ": " + f.Problem, Remedy: f.Remedy})
	}
	return out
}

// mostLeft bounds the jobs that a refusal lists.
const mostLeft = 100

// fromFit turns the refusal of a fit into one of a request.
func fromFit(err error, book RateBook) error {
	var few *calibration.TooFewError
	if !errors.As(err, &few) {
		return fmt.Errorf("rate book %s, version %d: %w", book.ID, book.Number, err)
	}
	out := &Error{Kind: Invalid, Message: fmt.Sprintf("%d comparable jobs were found and at least %d are needed; %d left out", few.Found, calibration.MinimumJobs, len(few.Left)),
		Faults: []Fault{{Found: strconv.Itoa(few.Found) + " comparable jobs", Problem: "fewer than a fit can rest on",
			Remedy: fmt.Sprintf("at least %d: post more outturns, or mend what keeps those below from being compared", calibration.MinimumJobs)}}}
	for i, l := range few.Left {
		if i == mostLeft {
			out.Faults = append(out.Faults, Fault{Found: fmt.Sprintf("%d jobs in all", len(few.Left)), Problem: "left out; only the first are listed", Remedy: "mend those listed first"})
			break
		}
		out.Faults = append(out.Faults, Fault{Found: l.Job, Problem: "left out: " + strings.Join(l.Reasons, "; "),
			Remedy: fmt.Sprintf("an outturn that can be brought to %s at prices of %s; indices and exchange rates are those of the rate book %s", book.Content.Currency, book.Content.BaseDate, book.Name)})
	}
	return out
}

// Calibration reads one calibration with its proposal: NotFound.
func (s *Service) Calibration(ctx context.Context, a Actor, id uuid.UUID) (Calibration, error) {
	return read(ctx, s, a, auth.ReadOutturns, func(tx Tx) (Calibration, error) { return tx.Calibration(ctx, id) })
}

// Calibrations lists calibrations without their proposals.
func (s *Service) Calibrations(ctx context.Context, a Actor, p Page) (List[Calibration], error) {
	return list(ctx, s, a, auth.ReadOutturns, func(tx Tx) (List[Calibration], error) { return tx.Calibrations(ctx, p) })
}
