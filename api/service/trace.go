package service

import (
	"context"
	"errors"
	"strings"

	"github.com/google/uuid"

	"spanwright/estimate/document"
	"spanwright/estimate/trace"
)

// Trace answers where a figure of an estimate comes from, from its stored document
// alone: NotFound, Invalid for an unknown figure, with near misses.
func (s *Service) Trace(ctx context.Context, a Actor, id uuid.UUID, figure string, depth int) (trace.Node, error) {
	return traced(ctx, s, a, id, func(t *trace.Tracer) (trace.Node, error) {
		n, err := t.Tree(figure, trace.Limits{Depth: depth, Nodes: trace.MostNodes})
		return n, fromTrace(err)
	})
}

// Figures lists what can be asked of Trace, by rising id, and only ids that begin
// with the prefix: NotFound.
func (s *Service) Figures(ctx context.Context, a Actor, id uuid.UUID, prefix string) ([]trace.Summary, error) {
	return traced(ctx, s, a, id, func(t *trace.Tracer) ([]trace.Summary, error) {
		out := []trace.Summary{}
		for _, f := range t.Figures() {
			if strings.HasPrefix(f.Figure, prefix) {
				out = append(out, f)
			}
		}
		return out, nil
	})
}

// traced reads a stored document and asks it; a large one takes a place.
func traced[T any](ctx context.Context, s *Service, a Actor, id uuid.UUID, ask func(*trace.Tracer) (T, error)) (T, error) {
	var none T
	canonical, err := s.Document(ctx, a, id)
	if err != nil {
		return none, err
	}
	if len(canonical) > largePosting {
		release, err := s.place(ctx)
		if err != nil {
			return none, err
		}
		defer release()
	}
	d, err := document.Parse(canonical)
	if err != nil {
		return none, err
	}
	return ask(trace.New(d))
}

// fromTrace turns an unknown figure into a fault with near misses.
func fromTrace(err error) error {
	var unknown *trace.UnknownError
	if !errors.As(err, &unknown) {
		return err
	}
	remedy := "an id of GET /v1/estimates/{id}/figures, or of an assumption"
	if len(unknown.Near) > 0 {
		remedy = strings.Join(unknown.Near, ", ") + ", or another id of GET /v1/estimates/{id}/figures"
	}
	return &Error{Kind: Invalid, Message: "the estimate has no such figure",
		Faults: []Fault{{Found: shortened(unknown.Found), Problem: "query parameter figure: no such figure", Remedy: remedy}}}
}

// shortened is a text as a fault shows it.
func shortened(text string) string {
	const most = 80
	if r := []rune(text); len(r) > most {
		return string(r[:most]) + "…"
	}
	return text
}
