// Package dashboard serves the pages: drawn on the server, complete without
// scripts.
//
//	request → request id, security headers, same-origin check → route
//	  → session cookie → Service.Session → Actor
//	  → Service (heads, document bytes) → document.Parse → view (texts, drawings)
//	  → template → buffer → answer
//
// A view holds finished texts, so that the templates only place them. An error
// becomes a page without detail; its cause goes to the log under the request id.
package dashboard

import (
	"context"
	"errors"
	"log/slog"
	"net/http"
	"time"

	"github.com/google/uuid"

	"spanwright/api/service"
)

// Service is what the pages ask of the use cases; *service.Service has it. Errors
// are *service.Error with the kinds named, or unknown ones.
type Service interface {
	// SignIn makes a session of a token and returns its secret and its end: Unauthenticated.
	SignIn(ctx context.Context, token, requestID string) (string, time.Time, error)
	// Export runs work that holds a whole document in memory: Busy.
	Export(ctx context.Context, work func() ([]byte, error)) ([]byte, error)
	// SignOut ends a session; an unknown one is no error.
	SignOut(ctx context.Context, secret, requestID string) error
	// Session finds who a session's secret stands for: Unauthenticated.
	Session(ctx context.Context, secret, requestID string) (service.Actor, error)

	// Projects lists the projects, newest first: Forbidden, Invalid (the cursor).
	Projects(ctx context.Context, a service.Actor, p service.Page) (service.List[service.Project], error)
	// Project reads one project: Forbidden, NotFound.
	Project(ctx context.Context, a service.Actor, id uuid.UUID) (service.Project, error)
	// Schemes lists a project's schemes, newest first: Forbidden, NotFound.
	Schemes(ctx context.Context, a service.Actor, project uuid.UUID, p service.Page) (service.List[service.Scheme], error)
	// NewestEstimate reads the newest head of a scheme: Forbidden, NotFound (none yet).
	NewestEstimate(ctx context.Context, a service.Actor, scheme uuid.UUID) (service.Estimate, error)
	// Document reads an estimate's canonical bytes: Forbidden, NotFound.
	Document(ctx context.Context, a service.Actor, id uuid.UUID) ([]byte, error)
}

var _ Service = (*service.Service)(nil)

// Config wires the pages.
type Config struct {
	Service       Service
	Logger        *slog.Logger
	SecureCookies bool // the session cookie goes over https only
}

type dashboard struct {
	service Service
	log     *slog.Logger
	secure  bool
	assets  assets
	pages   pages
}

// New returns the handler of all pages; its patterns begin at the root. It
// errors where the service is missing or a template cannot be parsed. A nil
// Logger discards.
func New(c Config) (http.Handler, error) {
	if c.Service == nil {
		return nil, errors.New("dashboard: Config.Service is missing")
	}
	if c.Logger == nil {
		c.Logger = slog.New(slog.DiscardHandler)
	}
	d := &dashboard{service: c.Service, log: c.Logger, secure: c.SecureCookies}
	var err error
	if d.assets, err = newAssets(); err != nil {
		return nil, err
	}
	if d.pages, err = parsePages(); err != nil {
		return nil, err
	}
	sameOrigin := http.NewCrossOriginProtection()
	sameOrigin.SetDenyHandler(d.open(func(http.ResponseWriter, *http.Request) error { return errCrossOrigin }))
	return harden(sameOrigin.Handler(d.routes())), nil
}

func (d *dashboard) routes() *http.ServeMux {
	m := http.NewServeMux()
	m.Handle("GET /sign-in", d.open(d.signInPage))
	m.Handle("POST /sign-in", d.open(d.signIn))
	m.Handle("POST /sign-out", d.open(d.signOut))
	m.Handle("GET /{$}", d.signedIn(d.projects))
	m.Handle("GET /projects/{id}", d.signedIn(d.project))
	m.Handle("GET /estimates/{id}/{file}", d.signedIn(d.estimateFile))
	m.Handle("GET /static/{file}", d.open(d.static))
	m.Handle("/", d.open(func(http.ResponseWriter, *http.Request) error { return errNoPage }))
	return m
}

// requestIDHeader carries the request's id to the log and to the reader.
const requestIDHeader = "X-Request-Id"

// harden sets the headers that every answer has. The request id is the one that
// the routes in front have set on the answer: the client's where it is a sane
// token, else a new one.
//
// The referrer goes to the own origin only; “no-referrer” would make browsers
// post forms with “Origin: null”, which the same-origin check refuses.
func harden(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		h := w.Header()
		if h.Get(requestIDHeader) == "" {
			h.Set(requestIDHeader, uuid.NewString())
		}
		h.Set("Content-Security-Policy", "default-src 'none'; style-src 'self'; img-src 'self' data:; "+
			"form-action 'self'; frame-ancestors 'none'; base-uri 'none'")
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("X-Frame-Options", "DENY")
		h.Set("Referrer-Policy", "same-origin")
		h.Set("Cross-Origin-Opener-Policy", "same-origin")
		h.Set("Cross-Origin-Resource-Policy", "same-origin")
		h.Set("Permissions-Policy", "camera=(), geolocation=(), microphone=()")
		h.Set("Cache-Control", "no-store")
		next.ServeHTTP(w, r)
	})
}
