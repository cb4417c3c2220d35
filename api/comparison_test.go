package api

import (
	"context"
	"encoding/json"
	"fmt"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/estimate/comparison"
)

func comparing(ids ...string) call {
	return call{method: "POST", path: "/v1/comparisons", body: fmt.Sprintf(`{"estimates":["%s"]}`, strings.Join(ids, `","`))}
}

func TestComparison(t *testing.T) {
	w, ids := explained(t)
	rec, _ := w.want(200, comparing(ids["estimate"], ids["second"]))
	a, _ := build(Config{Exports: offered})
	checkAnswer(t, a, "compare-estimates", 200, rec.Body.Bytes())
	var c comparison.Comparison
	if err := json.Unmarshal(rec.Body.Bytes(), &c); err != nil {
		t.Fatal(err)
	}
	// Five pieces cost more than four of the same, in every trial.
	if len(c.Schemes) != 2 || c.Schemes[0].ID != ids["estimate"] || c.Schemes[0].Cheapest.Value != 1 || c.Pairs[0].Cheaper.Value != 1 {
		t.Errorf("comparison %+v", c)
	}
	rec, _ = w.want(200, comparing(ids["estimate"], ids["second"]).with("Accept", "text/plain"))
	if !strings.Contains(rec.Body.String(), c.Pairs[0].Sentence) || rec.Header().Get("Cache-Control") != "no-store" {
		t.Errorf("%v: %s", rec.Header(), rec.Body)
	}
}

func TestComparisonRefusals(t *testing.T) {
	w, ids := explained(t)
	w.want(201, call{method: "POST", path: "/v1/rate-books", body: strings.Replace(bookJSON(t, "dollars"), `"currency":"EUR"`, `"currency":"USD"`, 1)})
	_, dollars := w.want(201, intakeCall(filled{"file", "q.csv", "text/csv", csvSchedule}, filled{name: "project", data: "Q"}, filled{name: "scheme", data: "S"},
		filled{"job", "job.csv", "text/csv", "Key,Value\nCurrency,USD\n"}, filled{name: "rate_book", data: "dollars"}))
	usd, none := id(t, dollars, "estimate", "id"), uuid.NewString()
	many := make([]string, 17)
	for i := range many {
		many[i] = uuid.NewString()
	}
	for name, row := range map[string]struct {
		call    call
		status  int
		pointer string
	}{
		"one":              {comparing(ids["estimate"]), 422, "/estimates"},
		"seventeen":        {comparing(many...), 422, "/estimates"},
		"one twice":        {comparing(ids["estimate"], ids["second"], ids["estimate"]), 422, "/estimates/2"},
		"not an id":        {comparing(ids["estimate"], "x"), 422, "/estimates/1"},
		"unknown":          {comparing(ids["estimate"], none), 404, "/estimates/1"},
		"two currencies":   {comparing(ids["estimate"], usd), 422, "/estimates/1"},
		"bridge, unknown":  {bridging(ids["estimate"], none), 404, "/to"},
		"bridge, no id":    {bridging("x", ids["estimate"]), 422, "/from"},
		"bridge, currency": {bridging(usd, ids["estimate"]), 422, "/to"},
	} {
		p := w.refused(row.status, row.call)
		if len(p.Faults) != 1 || p.Faults[0].Pointer != row.pointer || p.Faults[0].Remedy == "" {
			t.Errorf("%s: faults %+v, want one at %s", name, p.Faults, row.pointer)
		}
	}
	for _, c := range []call{comparing(ids["estimate"], ids["second"]), bridging(ids["estimate"], ids["second"])} {
		w.refused(406, c.with("Accept", "image/png"))
		c.token = w.foreign
		w.refused(404, c)
	}
}

// A comparison and a bridge end with their request.
func TestExplanationsGiveUp(t *testing.T) {
	w, ids := explained(t)
	for _, c := range []call{comparing(ids["estimate"], ids["second"]), bridging(ids["estimate"], ids["second"])} {
		ctx, cancel := context.WithCancel(t.Context())
		cancel()
		r := httptest.NewRequest(c.method, c.path, strings.NewReader(c.body)).WithContext(ctx)
		r.Header.Set("Content-Type", mediaJSON)
		r.Header.Set("Authorization", "Bearer "+w.tokens["viewer"])
		rec := httptest.NewRecorder()
		w.handler.ServeHTTP(rec, r)
		if rec.Code != http.StatusServiceUnavailable {
			t.Errorf("%s: status %d, want 503: %s", c.path, rec.Code, rec.Body)
		}
	}
}
