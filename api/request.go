package api

import (
	"context"
	"net/http"
	"strings"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

// request is what the middleware knows of a request. It is made once, travels in
// the context, and is filled on the way in.
type request struct {
	ID          string
	Path        string
	Accept      string
	IfMatch     string
	IfNoneMatch string
	FileName    string // of X-File-Name or Content-Disposition
	Actor       service.Actor

	Operation   *huma.Operation
	Registry    huma.Registry
	Body        []byte
	ContentType string // as sent
	MediaType   string // without parameters, in lower case
	Boundary    string // of a multipart body
}

type requestKey struct{}

func withRequest(ctx context.Context, r *request) context.Context {
	return context.WithValue(ctx, requestKey{}, r)
}

// requestOf returns the request of a context, an empty one where there is none.
func requestOf(ctx context.Context) *request {
	if r, ok := ctx.Value(requestKey{}).(*request); ok {
		return r
	}
	return &request{}
}

func newRequest(h *http.Request) *request {
	return &request{
		ID: requestID(h.Header.Get(requestIDHeader)), Path: h.URL.Path,
		Accept:      strings.Join(h.Header.Values("Accept"), ","),
		IfMatch:     strings.Join(h.Header.Values("If-Match"), ","),
		IfNoneMatch: strings.Join(h.Header.Values("If-None-Match"), ","),
		FileName:    fileName(h.Header),
	}
}
