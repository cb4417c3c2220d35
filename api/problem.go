package api

import (
	"context"
	"encoding/json"
	"errors"
	"net/http"

	"github.com/labstack/echo/v4"

	"spanwright/api/service"
)

// Problem is every refusal: a problem document of RFC 9457 with the faults and
// the id under which the log has the request.
type Problem struct {
	Type      string          `json:"type" doc:"always about:blank: the status says which problem it is"`
	Title     string          `json:"title" doc:"the status in words"`
	Status    int             `json:"status"`
	Detail    string          `json:"detail,omitempty" doc:"what is wrong with this request"`
	RequestID string          `json:"request_id,omitempty" doc:"of the header X-Request-Id"`
	Faults    []service.Fault `json:"faults,omitempty" doc:"everything that is wrong, each with what would be accepted"`

	header http.Header // to be sent with it
}

const (
	mediaProblem = "application/problem+json"
	challenge    = `Bearer realm="spanwright"`
)

func newProblem(status int, detail string, faults ...service.Fault) *Problem {
	return &Problem{Type: "about:blank", Title: http.StatusText(status), Status: status, Detail: detail, Faults: faults, header: http.Header{}}
}

// Error returns the title, with the detail where there is one.
func (p *Problem) Error() string {
	if p.Detail == "" {
		return p.Title
	}
	return p.Title + ": " + p.Detail
}

// GetStatus is the status, for huma.
func (p *Problem) GetStatus() int { return p.Status }

// GetHeaders are sent with the problem, for huma.
func (p *Problem) GetHeaders() http.Header { return p.header }

// ContentType is the media type of RFC 9457, for huma.
func (p *Problem) ContentType(string) string { return mediaProblem }

var statuses = map[service.Kind]int{
	service.Internal:             http.StatusInternalServerError,
	service.Unauthenticated:      http.StatusUnauthorized,
	service.Forbidden:            http.StatusForbidden,
	service.NotFound:             http.StatusNotFound,
	service.Conflict:             http.StatusConflict,
	service.Stale:                http.StatusPreconditionFailed,
	service.PreconditionRequired: http.StatusPreconditionRequired,
	service.Invalid:              http.StatusUnprocessableEntity,
	service.Malformed:            http.StatusBadRequest,
	service.Unsupported:          http.StatusUnsupportedMediaType,
	service.TooLarge:             http.StatusRequestEntityTooLarge,
	service.Busy:                 http.StatusTooManyRequests,
}

// retryAfter is when a refused heavy request may be repeated, in seconds.
const retryAfter = "2"

// problem classifies an error of a use case. What the service does not classify
// is logged and answered without detail.
func (a *api) problem(ctx context.Context, r *request, err error) *Problem {
	var p *Problem
	var e *service.Error
	switch {
	case errors.As(err, &p):
	case errors.As(err, &e) && e.Kind != service.Internal:
		status, ok := statuses[e.Kind]
		if !ok {
			status = http.StatusInternalServerError
		}
		p = newProblem(status, e.Message, e.Faults...)
		if e.Err != nil {
			a.log.WarnContext(ctx, "refused", "status", status, "request_id", r.ID, "cause", e.Err.Error())
		}
	case ctx.Err() != nil:
		p = newProblem(http.StatusServiceUnavailable, "the request was given up before it was answered")
	default:
		a.log.ErrorContext(ctx, "internal error", "request_id", r.ID, "error", err.Error())
		p = newProblem(http.StatusInternalServerError, "")
	}
	p.RequestID = r.ID
	switch p.Status {
	case http.StatusUnauthorized:
		p.header.Set("WWW-Authenticate", challenge)
	case http.StatusTooManyRequests:
		p.header.Set("Retry-After", retryAfter)
	}
	return p
}

// fromEcho words what the router refuses.
func fromEcho(e *echo.HTTPError, r *http.Request) *Problem {
	switch e.Code {
	case http.StatusNotFound:
		return newProblem(e.Code, "no such address; /docs/ lists those that there are")
	case http.StatusMethodNotAllowed:
		return newProblem(e.Code, "this address does not take "+r.Method+"; the header Allow lists what it takes")
	}
	return newProblem(e.Code, "")
}

// answer writes a problem. Once an answer has begun nothing can be written.
func (a *api) answer(c echo.Context, p *Problem) {
	if c.Response().Committed {
		return
	}
	p.RequestID = requestOf(c.Request().Context()).ID
	h := c.Response().Header()
	for name, values := range p.header {
		h[name] = values
	}
	h.Set("Content-Type", mediaProblem)
	for _, name := range []string{"Content-Encoding", "Content-Disposition", "ETag"} {
		h.Del(name)
	}
	c.Response().WriteHeader(p.Status)
	enc := json.NewEncoder(c.Response())
	enc.SetEscapeHTML(false)
	if err := enc.Encode(p); err != nil {
		a.log.Info("answer not written", "request_id", p.RequestID, "error", err.Error())
	}
}
