package service

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
)

// NewComparison asks for estimates side by side.
type NewComparison struct {
	Estimates []uuid.UUID `json:"estimates" minItems:"2" maxItems:"16" nullable:"false" doc:"ids of 2 to 16 estimates in one currency, each once"`
}

// storedEstimate is an estimate with what it was made from.
type storedEstimate struct {
	head     Estimate
	job      job.Job
	document document.Document
}

// Compare sets estimates side by side by their whole range on common draws: NotFound
// and Invalid by JSON pointer, Busy. Nothing is stored.
func (s *Service) Compare(ctx context.Context, a Actor, n NewComparison) (comparison.Comparison, error) {
	for i, id := range n.Estimates {
		if k := slices.Index(n.Estimates, id); k < i {
			return comparison.Comparison{}, invalid("/estimates/"+strconv.Itoa(i), id.String(), fmt.Sprintf("already given at /estimates/%d", k), "each estimate once")
		}
	}
	release, err := s.computing()
	if err != nil {
		return comparison.Comparison{}, err
	}
	defer release()
	all, err := s.storedEstimates(ctx, a, n.Estimates, func(i int) string { return "/estimates/" + strconv.Itoa(i) })
	if err != nil {
		return comparison.Comparison{}, err
	}
	sides := make([]comparison.Side, len(all))
	for i, e := range all {
		sides[i] = comparison.Side{ID: e.head.ID.String(), Job: e.job, Document: e.document}
	}
	out, err := comparison.Build(ctx, sides, engine.Joint)
	if err != nil {
		return comparison.Comparison{}, fromSeveral(err)
	}
	for _, e := range all {
		if e.head.EngineVersion != document.EngineVersion || e.job.Data != engine.Data() {
			out.Notes = append(out.Notes, fmt.Sprintf("%s was computed by engine version %d or from other data; the joint simulation ran on version %d.",
				e.job.Settings.Scheme, e.head.EngineVersion, document.EngineVersion))
		}
	}
	return out, nil
}

// storedEstimates reads estimates in one currency: NotFound and Invalid at the
// places of their ids in the request.
func (s *Service) storedEstimates(ctx context.Context, a Actor, ids []uuid.UUID, at func(int) string) ([]storedEstimate, error) {
	out := make([]storedEstimate, len(ids))
	bytes := 0
	for i, id := range ids {
		jobBytes, documentBytes, head, err := s.storedBytes(ctx, a, id)
		if err != nil {
			return nil, missingAt(err, at(i), id)
		}
		if bytes += len(jobBytes) + len(documentBytes); bytes > 2*largestDocument {
			return nil, invalid(at(i), id.String(), "the estimates up to this one are too large to be taken together", fmt.Sprintf("%d MB in all", 2*largestDocument>>20))
		}
		e := storedEstimate{head: head}
		if e.job, err = job.Parse(jobBytes); err != nil {
			return nil, &Error{Kind: Conflict, Err: err, Message: fmt.Sprintf("the job of estimate %s was stored in a form of engine version %d that this program does not read; make a new estimate of the scheme", id, head.EngineVersion)}
		}
		if e.document, err = document.Parse(documentBytes); err != nil {
			return nil, err
		}
		if c, first := e.job.Settings.Currency, out[0].job.Settings.Currency; i > 0 && c != first {
			return nil, invalid(at(i), c, "an estimate in another currency than the first, which is in "+first, "estimates in one currency")
		}
		out[i] = e
	}
	return out, nil
}

// storedBytes reads an estimate with its job and document in one transaction.
func (s *Service) storedBytes(ctx context.Context, a Actor, id uuid.UUID) (job, doc []byte, head Estimate, err error) {
	head, err = read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Estimate, error) {
		head, err := tx.Estimate(ctx, id)
		if err != nil {
			return head, err
		}
		if job, err = tx.EstimateJob(ctx, id); err != nil {
			return head, err
		}
		doc, err = tx.EstimateDocument(ctx, id)
		return head, err
	})
	return job, doc, head, err
}

// missingAt says which id of a request was not found.
func missingAt(err error, pointer string, id uuid.UUID) error {
	if !isKind(err, NotFound) {
		return err
	}
	return &Error{Kind: NotFound, Message: "no such estimate",
		Faults: []Fault{{Pointer: pointer, Found: id.String(), Problem: "no such estimate", Remedy: "the id of an estimate of this organisation"}}}
}

// fromSeveral turns what the engine reports of stored jobs that are computed
// together into faults of the request.
func fromSeveral(err error) error {
	var rates *engine.RatesError
	var members *engine.FaultsError
	if !errors.As(err, &rates) && !errors.As(err, &members) {
		return err
	}
	return &Error{Kind: Invalid, Message: "the estimates cannot be computed together on this engine: " + err.Error(), Err: err,
		Faults: []Fault{{Found: "the frozen jobs", Problem: err.Error(), Remedy: "new estimates of the schemes, which this engine can compute"}}}
}
