package api

import (
	"errors"
	"fmt"
	"log/slog"
	"net/http"
	"runtime/debug"
	"strings"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humaecho"
	"github.com/google/uuid"
	"github.com/labstack/echo/v4"
	"github.com/labstack/echo/v4/middleware"
)

const requestIDHeader = "X-Request-Id"

// middleware puts the common steps before the routing, outermost first, so that
// they hold for unknown paths and for the pages as well.
func (a *api) middleware(e *echo.Echo, pages http.Handler) {
	e.HTTPErrorHandler = func(err error, c echo.Context) { a.answerError(c, err) }
	e.Pre(a.identify, a.accessLog, compress(), a.catch, secure)
	if pages != nil {
		e.Pre(elsewhere(pages))
	}
}

// identify gives the request its id, the caller's own where it is a plain token,
// and returns it. The request passes it on to the pages.
func (a *api) identify(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		r := newRequest(c.Request())
		r.Registry = a.huma.OpenAPI().Components.Schemas
		c.Response().Header().Set(requestIDHeader, r.ID)
		h := c.Request().WithContext(withRequest(c.Request().Context(), r))
		h.Header.Set(requestIDHeader, r.ID)
		c.SetRequest(h)
		return next(c)
	}
}

// requestID returns a proposed id of 1 to 100 letters, digits and -_.: or a new one.
func requestID(proposed string) string {
	sane := func(r rune) bool {
		return 'a' <= r && r <= 'z' || 'A' <= r && r <= 'Z' || '0' <= r && r <= '9' || strings.ContainsRune("-_.:", r)
	}
	if proposed != "" && len(proposed) <= 100 && strings.IndexFunc(proposed, func(r rune) bool { return !sane(r) }) < 0 {
		return proposed
	}
	return uuid.NewString()
}

// accessLog writes one line a request. It names no header, no query and no body,
// so no secret can be in it. Bytes are counted before compression.
func (a *api) accessLog(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		start := time.Now()
		err := next(c)
		level := slog.LevelInfo
		if c.Path() == "/healthz" || c.Path() == "/readyz" {
			level = slog.LevelDebug
		}
		r := requestOf(c.Request().Context())
		a.log.LogAttrs(c.Request().Context(), level, "request",
			slog.String("method", c.Request().Method), slog.String("route", route(c)), slog.Int("status", c.Response().Status),
			slog.Int64("bytes", c.Response().Size), slog.Duration("duration", time.Since(start)),
			slog.String("request_id", r.ID), slog.String("actor", r.Actor.Name))
		return err
	}
}

// route is the pattern that matched, never the path itself.
func route(c echo.Context) string {
	switch {
	case c.Request().Pattern != "":
		return c.Request().Pattern
	case c.Path() != "":
		return c.Path()
	case !owned(c.Request().URL.Path):
		return "pages"
	}
	return "unknown"
}

// compress answers with gzip above 1 kB, except for what is compressed already.
func compress() echo.MiddlewareFunc {
	return middleware.GzipWithConfig(middleware.GzipConfig{MinLength: 1024, Skipper: func(c echo.Context) bool {
		path := c.Request().URL.Path
		return strings.Contains(c.Request().Header.Get("Accept"), mediaXLSX) || strings.HasSuffix(path, "/source") || strings.HasPrefix(path, "/docs/")
	}})
}

// catch turns errors and panics below it into problem documents.
func (a *api) catch(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		defer func() {
			v := recover()
			if v == nil {
				return
			}
			if v == http.ErrAbortHandler {
				panic(v)
			}
			a.log.Error("panic", "panic", fmt.Sprint(v), "route", route(c), "request_id", requestOf(c.Request().Context()).ID, "stack", string(debug.Stack()))
			a.answerError(c, newProblem(http.StatusInternalServerError, ""))
		}()
		if err := next(c); err != nil {
			a.answerError(c, err)
		}
		return nil
	}
}

// secure sets the headers that every answer has. The pages add their own policy.
func secure(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		h := c.Response().Header()
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("Referrer-Policy", "same-origin")
		if path := c.Request().URL.Path; owned(path) && !strings.HasPrefix(path, "/docs") {
			h.Set("Cache-Control", "no-store")
			h.Set("Content-Security-Policy", "default-src 'none'; frame-ancestors 'none'")
		}
		return next(c)
	}
}

// owned reports whether a path is the API's own and not one of the pages.
func owned(path string) bool {
	switch path {
	case "/v1", "/docs", "/openapi.json", "/openapi-3.0.json", "/healthz", "/readyz":
		return true
	}
	return strings.HasPrefix(path, "/v1/") || strings.HasPrefix(path, "/docs/")
}

// elsewhere hands every other path to the pages.
func elsewhere(pages http.Handler) echo.MiddlewareFunc {
	return func(next echo.HandlerFunc) echo.HandlerFunc {
		return func(c echo.Context) error {
			if owned(c.Request().URL.Path) {
				return next(c)
			}
			pages.ServeHTTP(c.Response(), c.Request())
			return nil
		}
	}
}

// authenticate finds the actor of the bearer token, where the operation needs one.
func (a *api) authenticate(ctx huma.Context, next func(huma.Context)) {
	r := requestOf(ctx.Context())
	r.Operation = ctx.Operation()
	if len(ctx.Operation().Security) == 0 {
		next(ctx)
		return
	}
	scheme, token, _ := strings.Cut(ctx.Header("Authorization"), " ")
	if !strings.EqualFold(scheme, "Bearer") {
		token = ""
	}
	actor, err := a.service.Authenticate(ctx.Context(), strings.TrimSpace(token), r.ID)
	if err != nil {
		p := a.problem(ctx.Context(), r, err)
		if p.Status == http.StatusUnauthorized && ctx.Header("Authorization") != "" {
			p.header.Set("WWW-Authenticate", challenge+`, error="invalid_token"`) // RFC 6750, 3.1
		}
		a.refuse(ctx, p)
		return
	}
	r.Actor = actor
	next(ctx)
}

// refuse ends a request with a problem from a middleware of huma.
func (a *api) refuse(ctx huma.Context, p *Problem) {
	a.answer(humaecho.Unwrap(ctx), p)
}

// answerError answers what echo, a page or a panic reports.
func (a *api) answerError(c echo.Context, err error) {
	var p *Problem
	var he *echo.HTTPError
	switch {
	case errors.As(err, &p):
	case errors.As(err, &he):
		p = fromEcho(he, c.Request())
	default:
		p = a.problem(c.Request().Context(), requestOf(c.Request().Context()), err)
	}
	a.answer(c, p)
}
