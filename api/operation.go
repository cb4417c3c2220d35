package api

import (
	"context"
	"net/http"
	"slices"
	"strings"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/uuid"
)

// handler is one operation: its input is validated and its actor known.
type handler[I, O any] func(ctx context.Context, r *request, in *I) (*O, error)

// What the middleware reads from an operation's metadata.
const (
	limitKey       = "body limit" // int64, bytes
	conditionalKey = "conditional"
)

// smallBody is the limit of JSON bodies, in bytes.
const smallBody = 1 << 20

// operation describes an operation that needs a token. errs are the statuses
// that it answers besides 401, 422 and 500, and 404 for a path with an id.
func operation(method, path, id, tag, summary string, errs ...int) huma.Operation {
	errs = append(errs, http.StatusUnauthorized)
	if strings.Contains(path, "{") {
		errs = append(errs, http.StatusNotFound)
	}
	o := huma.Operation{Method: method, Path: path, OperationID: id, Summary: summary, Tags: []string{tag}, Errors: errs,
		Security: []map[string][]string{{securityScheme: {}}}, Metadata: map[string]any{}, Responses: map[string]*huma.Response{}}
	switch method {
	case http.MethodPost:
		o.DefaultStatus = http.StatusCreated
	case http.MethodPut, http.MethodDelete:
		if slices.Contains(errs, http.StatusPreconditionFailed) {
			o.Metadata[conditionalKey] = true
		}
	}
	return o
}

// described adds a description to an operation.
func described(o huma.Operation, text string) huma.Operation {
	o.Description = text
	return o
}

// writing are the statuses of every operation that changes something.
func writing(errs ...int) []int { return append(errs, http.StatusForbidden) }

// conditional are those of operations with If-Match.
func conditional(errs ...int) []int {
	return writing(append(errs, http.StatusBadRequest, http.StatusPreconditionFailed, http.StatusPreconditionRequired)...)
}

// register adds an operation whose body, if it has one, is JSON. The body is read
// by readBody beforehand, so huma's own limit and deadline are switched off: its
// deadline would otherwise end the request's context during a long computation.
func register[I, O any](a *api, o huma.Operation, h handler[I, O]) {
	o.MaxBodyBytes, o.BodyReadTimeout = -1, -1
	if o.Method == http.MethodPost || o.Method == http.MethodPut {
		if o.Metadata[limitKey] == nil {
			o.Metadata[limitKey] = int64(smallBody)
		}
		for _, s := range []int{http.StatusBadRequest, http.StatusRequestTimeout, http.StatusRequestEntityTooLarge, http.StatusUnsupportedMediaType} {
			if !slices.Contains(o.Errors, s) {
				o.Errors = append(o.Errors, s)
			}
		}
	}
	huma.Register(a.huma, o, func(ctx context.Context, in *I) (*O, error) {
		r := requestOf(ctx)
		out, err := h(ctx, r, in)
		if err != nil {
			return nil, a.problem(ctx, r, err)
		}
		return out, nil
	})
}

// registerRaw adds an operation that reads its body itself, of the media types
// given. huma must not see the body, so it is documented afterwards.
func registerRaw[I, O any](a *api, o huma.Operation, limit int64, body *huma.RequestBody, h handler[I, O]) {
	o.Metadata[limitKey] = limit
	register(a, o, h)
	a.huma.OpenAPI().Paths[o.Path].Post.RequestBody = body
}

// ByID is the input of operations on one resource. It is exported because huma
// looks into exported embedded types only.
type ByID struct {
	ID uuid.UUID `path:"id" doc:"id of the resource"`
}
