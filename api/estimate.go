package api

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"net/http"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

const tagEstimates = "Estimates"

type newEstimate struct {
	ByID
	Keyed
	Body service.NewEstimate
}

func estimatePath(e service.Estimate) string { return "/v1/estimates/" + e.ID.String() }

func (a *api) estimates() {
	register(a, operation(http.MethodGet, "/v1/schemes/{id}/estimates", "list-estimates", tagEstimates, "List the estimates of a scheme, newest first"),
		func(ctx context.Context, r *request, in *listInput) (*listOutput[service.Estimate], error) {
			l, err := a.service.Estimates(ctx, r.Actor, in.ID, in.page())
			return listed(r, in.Paged, l, err)
		})
	register(a, described(operation(http.MethodPost, "/v1/schemes/{id}/estimates", "create-estimate", tagEstimates, "Compute an estimate of a scheme",
		writing(http.StatusConflict, http.StatusTooManyRequests)...),
		"From the newest schedule, or the one named, with the multipliers in force. An estimate is never edited, only superseded. An empty object takes every default."),
		func(ctx context.Context, r *request, in *newEstimate) (*made[service.Estimate], error) {
			e, err := a.service.CreateEstimate(ctx, r.Actor, in.ID, in.Body, r.attempt(in.Keyed, r.Body))
			return &made[service.Estimate]{Location: estimatePath(e), Body: e}, err
		})
	register(a, operation(http.MethodGet, "/v1/estimates/{id}", "get-estimate", tagEstimates, "Read the head of an estimate"),
		func(ctx context.Context, r *request, in *ByID) (*plain[service.Estimate], error) {
			e, err := a.service.Estimate(ctx, r.Actor, in.ID)
			return &plain[service.Estimate]{Body: e}, err
		})
	o := described(operation(http.MethodGet, "/v1/estimates/{id}/document", "get-estimate-document", tagEstimates, "Read the whole estimate", http.StatusNotAcceptable),
		"As JSON: the stored bytes, whose SHA-256 is the ETag. As a workbook with live formulas or the lines as CSV, by Accept.")
	a.document(&o, http.StatusOK, a.schema(document.Document{}))
	register(a, o, a.wholeDocument)
}

func (a *api) wholeDocument(ctx context.Context, r *request, in *ByID) (*content, error) {
	chosen, err := a.choose(r)
	if err != nil {
		return nil, err
	}
	return a.fromDocument(ctx, r, in.ID, chosen)
}

// fromDocument answers the document in a form, or 304 where the caller has it.
func (a *api) fromDocument(ctx context.Context, r *request, id uuid.UUID, o rendering) (*content, error) {
	head, err := a.service.Estimate(ctx, r.Actor, id)
	if err != nil {
		return nil, err
	}
	if tag := o.tag(head.DocumentSHA256); r.unchanged(tag) {
		return &content{Status: http.StatusNotModified, ETag: tag, CacheControl: "private, no-cache", Vary: "Accept"}, nil
	}
	canonical, err := a.service.Document(ctx, r.Actor, id)
	if err != nil {
		return nil, err
	}
	out, err := a.rendered(ctx, o, head, canonical)
	if err == nil {
		out.Status = http.StatusOK
	}
	return out, err
}

// Items is a whole list of an estimate. It is not paged: an estimate does not change.
type Items[T any] struct {
	Items []T `json:"items" nullable:"false"`
}

// estimateParts are the slices of the document.
func (a *api) estimateParts() {
	a.part("lines", "Read the priced lines", Items[document.Line]{})
	a.part("assumptions", "Read the register of assumptions", Items[assumption.Entry]{})
	a.part("range", "Read the distribution of the total", document.Range{})
	a.part("findings", "Read the findings: what is unsafe, doubtful or worth a notice", Items[document.Finding]{})
	a.part("members", "Read the members with their sizing and checks", Items[document.Member]{})
}

// part answers one field of the document, its bytes as they are stored.
func (a *api) part(field, summary string, shape any) {
	o := operation(http.MethodGet, "/v1/estimates/{id}/"+field, "get-estimate-"+field, tagEstimates, summary)
	a.document(&o, http.StatusOK, a.schema(shape))
	o.Responses["200"].Content = jsonOnly(o.Responses["200"].Content)
	_, whole := shape.(document.Range)
	slice := rendering{mediaJSON, field, func(canonical []byte) ([]byte, error) { return cut(canonical, field, whole) }}
	register(a, o, func(ctx context.Context, r *request, in *ByID) (*content, error) {
		return a.fromDocument(ctx, r, in.ID, slice)
	})
}

// cut takes one field out of the canonical bytes.
func cut(canonical []byte, field string, whole bool) ([]byte, error) {
	var fields map[string]json.RawMessage
	if err := json.Unmarshal(canonical, &fields); err != nil {
		return nil, fmt.Errorf("reading the %s of an estimate: %w", field, err)
	}
	if whole {
		return append(bytes.Clone(fields[field]), '\n'), nil
	}
	return fmt.Appendf(nil, "{\"items\":%s}\n", fields[field]), nil
}
