package api

import (
	"bytes"
	"encoding/json"
	"fmt"
	"net/http"
	"sync"

	"github.com/labstack/echo/v4"
	"github.com/swaggest/swgui"
	"github.com/swaggest/swgui/v5emb"
)

// docsPolicy lets the documentation pages run their own inline script and reach
// this server alone; they load nothing from elsewhere.
const docsPolicy = "default-src 'none'; script-src 'self' 'unsafe-inline'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; font-src 'self' data:; connect-src 'self'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'"

// Spec returns the OpenAPI 3.1 document, indented. It depends on the program's
// source alone.
func Spec() ([]byte, error) {
	a, _ := build(Config{Exports: offered})
	return a.spec()
}

func (a *api) spec() ([]byte, error) {
	data, err := json.Marshal(a.huma.OpenAPI())
	if err != nil {
		return nil, fmt.Errorf("writing the OpenAPI document: %w", err)
	}
	return indent(data)
}

func indent(data []byte) ([]byte, error) {
	var b bytes.Buffer
	if err := json.Indent(&b, data, "", "  "); err != nil {
		return nil, fmt.Errorf("indenting the OpenAPI document: %w", err)
	}
	b.WriteByte('\n')
	return b.Bytes(), nil
}

// documents are the OpenAPI documents by path, written when first asked for.
func (a *api) documents() (map[string][]byte, error) {
	spec, err := a.spec()
	if err != nil {
		return nil, err
	}
	old, err := a.huma.OpenAPI().Downgrade()
	if err != nil {
		return nil, fmt.Errorf("writing the OpenAPI 3.0 document: %w", err)
	}
	if old, err = indent(old); err != nil {
		return nil, err
	}
	return map[string][]byte{"/openapi.json": spec, "/openapi-3.0.json": old}, nil
}

// documentation serves the OpenAPI documents and the pages that show them.
func (a *api) documentation(e *echo.Echo) {
	documents := sync.OnceValues(a.documents)
	for _, path := range []string{"/openapi.json", "/openapi-3.0.json"} {
		e.GET(path, func(c echo.Context) error {
			all, err := documents()
			if err != nil {
				return err
			}
			c.Response().Header().Set("Cache-Control", "no-cache")
			return c.Blob(http.StatusOK, mediaJSON, all[path])
		})
	}
	pages := v5emb.NewHandlerWithConfig(swgui.Config{Title: "Spanwright API", SwaggerJSON: "/openapi.json", BasePath: "/docs/"})
	e.GET("/docs", func(c echo.Context) error { return c.Redirect(http.StatusMovedPermanently, "/docs/") })
	e.GET("/docs/*", func(c echo.Context) error {
		c.Response().Header().Set("Content-Security-Policy", docsPolicy)
		pages.ServeHTTP(c.Response(), c.Request())
		return nil
	})
}
