package api

import (
	"context"
	"errors"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

// Health says that the process is up, and which program it is.
type Health struct {
	Status  string `json:"status" enum:"up,ready"`
	Version string `json:"version,omitempty" doc:"of the program"`
}

func (a *api) health() {
	open := func(path, id, summary string, errs ...int) huma.Operation {
		return huma.Operation{Method: http.MethodGet, Path: path, OperationID: id, Summary: summary, Tags: []string{"Health"},
			Errors: errs, Responses: map[string]*huma.Response{}}
	}
	register(a, open("/healthz", "health", "Is the process up", http.StatusInternalServerError), func(context.Context, *request, *struct{}) (*plain[Health], error) {
		return &plain[Health]{Body: Health{Status: "up", Version: a.version}}, nil
	})
	register(a, open("/readyz", "readiness", "Can requests be served", http.StatusServiceUnavailable),
		func(ctx context.Context, r *request, _ *struct{}) (*plain[Health], error) {
			if err := a.service.Ready(ctx); err != nil {
				return nil, a.unready(ctx, r, err)
			}
			return &plain[Health]{Body: Health{Status: "ready", Version: a.version}}, nil
		})
}

// unready tells the reason where the store worded it for callers. Nobody has
// shown a token here, so other errors, which may name hosts, go to the log alone.
func (a *api) unready(ctx context.Context, r *request, err error) *Problem {
	a.log.WarnContext(ctx, "not ready", "request_id", r.ID, "error", err.Error())
	reason := "the database cannot be used; the log says why"
	var e *service.Error
	if errors.As(err, &e) && e.Message != "" {
		reason = e.Message
	}
	return newProblem(http.StatusServiceUnavailable, reason)
}
