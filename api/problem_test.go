package api

import (
	"context"
	"errors"
	"fmt"
	"net/http"
	"strings"
	"testing"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/go-cmp/cmp"

	"spanwright/api/service"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
)

func TestEveryKindHasItsStatus(t *testing.T) {
	want := map[service.Kind]int{service.Internal: 500, service.Unauthenticated: 401, service.Forbidden: 403, service.NotFound: 404, service.Conflict: 409,
		service.Stale: 412, service.PreconditionRequired: 428, service.Invalid: 422, service.Malformed: 400, service.Unsupported: 415, service.TooLarge: 413, service.Busy: 429}
	for kind, status := range want {
		w, _ := build(Config{})
		err := fmt.Errorf("wrapped: %w", &service.Error{Kind: kind, Message: "told", Faults: []service.Fault{{Pointer: "/a"}}, Err: errors.New("not told")})
		p := w.problem(context.Background(), &request{ID: "r"}, err)
		if p.Status != status || p.RequestID != "r" {
			t.Errorf("kind %d: %+v, want status %d", kind, p, status)
		}
		if detail, faults := p.Detail, len(p.Faults); (detail == "told" && faults == 1) == (kind == service.Internal) {
			t.Errorf("kind %d: detail %q, %d faults", kind, detail, faults)
		}
	}
	if len(statuses) != int(service.Busy)+1 || len(want) != len(statuses) {
		t.Errorf("%d statuses for %d kinds", len(statuses), service.Busy+1)
	}
}

func TestRouterRefusals(t *testing.T) {
	w := newWorld(t)
	for _, c := range []struct {
		method, path string
		status       int
		allow        string
	}{
		{"GET", "/v1", 404, ""}, {"GET", "/v1/nothing", 404, ""}, {"GET", "/v1/projects/", 404, ""}, {"GET", "/nothing", 404, ""}, {"GET", "/v1/schemas/Project", 404, ""},
		{"DELETE", "/v1/projects", 405, "GET, OPTIONS, POST"}, {"PATCH", "/v1/projects", 405, "GET, OPTIONS, POST"}, {"POST", "/healthz", 405, "GET, OPTIONS"},
	} {
		rec, _ := w.want(c.status, call{method: c.method, path: c.path})
		if got := sorted(rec.Header().Get("Allow")); got != c.allow {
			t.Errorf("%s %s: Allow %q, want %q", c.method, c.path, got, c.allow)
		}
	}
}

func TestPanic(t *testing.T) {
	w := newWorld(t)
	w.run = func(context.Context, job.Job, engine.Progress) (document.Document, error) {
		panic("secret of the panic")
	}
	p := w.refused(http.StatusInternalServerError, intakeCall())
	if p.Detail != "" || len(p.Faults) != 0 {
		t.Errorf("the problem tells %q, %v", p.Detail, p.Faults)
	}
	if log := w.log.String(); !strings.Contains(log, "secret of the panic") || !strings.Contains(log, "problem_test.go") || !strings.Contains(log, p.RequestID) {
		t.Errorf("the log has no panic with its stack and request id: %s", log)
	}
	w.want(200, call{method: "GET", path: "/healthz"})
}

func TestInternalError(t *testing.T) {
	w := newWorld(t)
	w.store.broken = errDatabase
	p := w.refused(http.StatusInternalServerError, call{method: "GET", path: "/v1/projects"})
	if p.Detail != "" || len(p.Faults) != 0 {
		t.Errorf("the problem tells %q, %v", p.Detail, p.Faults)
	}
	if !strings.Contains(w.log.String(), errDatabase.Error()) || !strings.Contains(w.log.String(), p.RequestID) {
		t.Errorf("the log has no error with its request id: %s", w.log)
	}
}

func TestGivenUp(t *testing.T) {
	a, _ := build(Config{})
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if p := a.problem(ctx, &request{}, ctx.Err()); p.Status != http.StatusServiceUnavailable {
		t.Errorf("status %d, want 503", p.Status)
	}
}

// Each fault has the JSON pointer of RFC 6901, what was found, and what would do.
func TestFaults(t *testing.T) {
	w := newWorld(t)
	project := stock(w)["project"]
	multiplier := func(s string) call {
		return call{method: "POST", path: "/v1/projects/" + project + "/multipliers", body: s}
	}
	for _, c := range []struct {
		call call
		want []service.Fault
	}{
		{call{method: "POST", path: "/v1/projects", body: `{}`}, []service.Fault{{Pointer: "/name", Found: "nothing", Problem: "missing", Remedy: "the field is obligatory"}}},
		{call{method: "POST", path: "/v1/projects", body: `{"name":"A","colour":{"secret":1}}`},
			[]service.Fault{{Pointer: "/colour", Found: "colour", Problem: "unknown field", Remedy: "one of base_date, currency, display_units, name"}}},
		{call{method: "POST", path: "/v1/projects", body: `{"name":{"a":"hidden"},"display_units":"metric"}`}, []service.Fault{
			{Pointer: "/display_units", Found: "metric", Problem: "not accepted", Remedy: `one of "SI, US"`},
			{Pointer: "/name", Found: "an object", Problem: "not accepted", Remedy: "string"}}},
		{call{method: "POST", path: "/v1/projects", body: `{"name":[1]}`}, []service.Fault{{Pointer: "/name", Found: "a list", Problem: "not accepted", Remedy: "string"}}},
		{call{method: "POST", path: "/v1/projects", body: `{"name":7}`}, []service.Fault{{Pointer: "/name", Found: "7", Problem: "not accepted", Remedy: "string"}}},
		{call{method: "POST", path: "/v1/projects", body: `{"name":"` + strings.Repeat("x", 201) + `"}`},
			[]service.Fault{{Pointer: "/name", Found: strings.Repeat("x", 80) + "…", Problem: "not accepted", Remedy: "length <= 200"}}},
		{call{method: "POST", path: "/v1/projects", body: `[]`}, []service.Fault{{Found: "the body", Problem: "expected object", Remedy: "a body as the documentation shows it"}}},
		{multiplier(`{"multiplier":{"name":"x","scope":"project","categories":["erection",3],"spread":{"distribution":"fixed","likly":1},"reason":"r","a.b/c~d":1}}`), []service.Fault{
			{Pointer: "/multiplier/a.b~1c~0d", Found: "a.b/c~d", Problem: "unknown field", Remedy: "one of categories, group, name, reason, scope, spread, subject"},
			{Pointer: "/multiplier/categories/1", Found: "3", Problem: "not accepted", Remedy: "string"},
			{Pointer: "/multiplier/spread/likly", Found: "likly", Problem: "unknown field", Remedy: "one of bounds, distribution, high, likely, low"}}},
	} {
		if d := cmp.Diff(c.want, w.refused(http.StatusUnprocessableEntity, c.call).Faults); d != "" {
			t.Errorf("%s: %s", c.call.body, d)
		}
	}
}

// Keys that hold dots and brackets are found in the body, not guessed.
func TestSplit(t *testing.T) {
	body := map[string]any{"a.b": map[string]any{"c[0]": []any{map[string]any{"d": 1}}}, "a": 1, "": 2}
	for path, want := range map[string][]string{
		".a.b.c[0][0].d": {"a.b", "c[0]", "0", "d"}, ".a": {"a"}, ".x.y": {"x", "y"}, "[3].z": {"3", "z"}, "": nil, ".a.b": {"a.b"}, "[": {""},
	} {
		if d := cmp.Diff(want, split(path, body)); d != "" {
			t.Errorf("%q: %s", path, d)
		}
	}
}

func TestHumaErrorsAreOurs(t *testing.T) {
	shapeErrors()
	p, ok := huma.NewError(500, "detail of a fault", errors.New("cause")).(*Problem)
	if !ok || p.Detail != "" || len(p.Faults) != 0 {
		t.Errorf("a server's fault tells %+v", p)
	}
	q, ok := huma.NewErrorWithContext(nil, 422, "x", errors.New("cause")).(*Problem)
	if !ok || len(q.Faults) != 1 {
		t.Errorf("an error without detail gives %+v", q)
	}
}

// A decoder's message names the value and the field, never a type of the program.
func TestUnfit(t *testing.T) {
	for message, want := range map[string][2]string{
		"json: cannot unmarshal number 1e999 into Go value of type float64":                             {"number 1e999", "that it stands in"},
		"json: cannot unmarshal number 1e30 into Go struct field CuttingPiece.pieces.count of type int": {"number 1e30", "pieces.count"},
		"json: cannot unmarshal string into Go struct field Spread.spread.likely of type float64":       {"string", "spread.likely"},
	} {
		value, field, ok := unfit(message)
		if !ok || value != want[0] || field != want[1] {
			t.Errorf("%s: got %q, %q, %v", message, value, field, ok)
		}
	}
	if _, _, ok := unfit("expected number"); ok {
		t.Error("another message was taken apart")
	}
}
