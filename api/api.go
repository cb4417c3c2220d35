// Package api is the REST API: it turns requests into use cases of package
// service and their results and errors into answers. It holds no rule of its own.
//
//	request → id, log, gzip, recovery (middleware.go) → route
//	  → bearer token → Actor; body, limits, duplicate keys (body.go)
//	  → huma: parameters and body against the schema
//	  → Service use case → JSON, workbook or CSV by Accept
//	  any refusal on the way → one problem document (problem.go, RFC 9457)
//
// The OpenAPI document is generated from the same registrations, see Spec.
package api

import (
	"errors"
	"log/slog"
	"net/http"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humaecho"
	"github.com/labstack/echo/v4"

	"spanwright/api/service"
	"spanwright/estimate/document"
)

// Config wires the API.
type Config struct {
	Service *service.Service
	Logger  *slog.Logger   // nil discards
	Limits  service.Limits // those of the Service; the zero value is service.DefaultLimits
	Pages   http.Handler   // everything that the API does not answer itself; nil answers 404
	Version string         // of the program, told by /healthz
	Exports Exports
}

// Exports turn a document into the forms that Accept may ask for besides JSON. A
// nil one is not offered.
type Exports struct {
	Workbook func(document.Document) ([]byte, error)
	CSV      func(document.Document) ([]byte, error)
}

// api is what the handlers share.
type api struct {
	service *service.Service
	log     *slog.Logger
	limits  service.Limits
	exports Exports
	version string
	huma    huma.API
}

// New returns the routes, ready to be served. The error says what is missing in
// the configuration.
func New(c Config) (*echo.Echo, error) {
	if c.Service == nil {
		return nil, errors.New("api: no service")
	}
	a, e := build(c)
	a.documentation(e)
	a.middleware(e, c.Pages)
	return e, nil
}

// build registers every operation.
func build(c Config) (*api, *echo.Echo) {
	shapeErrors()
	if c.Logger == nil {
		c.Logger = slog.New(slog.DiscardHandler)
	}
	if c.Limits == (service.Limits{}) {
		c.Limits = service.DefaultLimits()
	}
	e := echo.New()
	e.HideBanner, e.HidePort = true, true
	a := &api{service: c.Service, log: c.Logger, limits: c.Limits, exports: c.Exports, version: c.Version}
	a.huma = humaecho.New(e, openAPI())
	a.huma.UseMiddleware(a.authenticate, a.precondition, a.oneKey, a.readBody)
	for _, register := range []func(){
		a.intake, a.projects, a.schemes, a.schedules, a.estimates, a.estimateParts,
		a.traces, a.previews, a.comparisons, a.bridges, a.arrangementPrices,
		a.rateBooks, a.multipliers, a.tokens, a.auditEvents, a.calculators, a.health,
		a.outturns, a.calibrations,
	} {
		register()
	}
	a.illustrate()
	return a, e
}

// The time limits of Server. The body may take as long as 20 MB need at 1.5 Mbit/s.
const (
	headerTimeout = 10 * time.Second
	readTimeout   = 2 * time.Minute
	writeTimeout  = 10 * time.Minute // the longest computation and a slow reader
	idleTimeout   = 2 * time.Minute
	maxHeader     = 64 << 10 // bytes
)

// Server returns an HTTP server with time limits on headers, bodies and idle
// connections. It sets none on the answer, because an estimate may compute for
// longer than any fixed time.
func Server(addr string, h http.Handler) *http.Server {
	return &http.Server{Addr: addr, Handler: h, ReadHeaderTimeout: headerTimeout, ReadTimeout: readTimeout,
		WriteTimeout: writeTimeout, IdleTimeout: idleTimeout, MaxHeaderBytes: maxHeader}
}
