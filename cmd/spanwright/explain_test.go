package main

import (
	"encoding/json"
	"fmt"
	"math"
	"net/http"
	"net/url"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/bridge"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/trace"
)

// explaining is the service with the two schemes of the demo, priced with the rate
// book unit-rate that every organisation begins with.
func explaining(t *testing.T) (s *server, token string, inner, tower taken) {
	t.Helper()
	s = newServer(t)
	token = s.token(t, "Brackwater", auth.Estimator)
	book := map[string]string{"rate_book": "unit-rate"}
	return s, token, s.take(t, token, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), book), s.take(t, token, "brackwater-end-tower.xlsx", mustRead(t, "brackwater-end-tower.xlsx"), book)
}

// ask sends a request that must succeed and reads its answer.
func ask[T any](t *testing.T, s *server, token, method, path string, body any) T {
	t.Helper()
	var data []byte
	var err error
	if body != nil {
		if data, err = json.Marshal(body); err != nil {
			t.Fatal(err)
		}
	}
	a := s.do(t, method, path, token, data, "Content-Type", "application/json")
	if a.status != http.StatusOK && a.status != http.StatusCreated {
		t.Fatalf("%s %s: %d %s", method, path, a.status, a.body)
	}
	var out T
	a.decode(t, &out)
	return out
}

// A gate reviewer asks why, from the base estimate down to the formula of a check:
// each answer names the next question.
func TestTraceFromTheBaseToAHandbookFormula(t *testing.T) {
	s, token, inner, _ := explaining(t)
	figures := ask[struct{ Items []trace.Summary }](t, s, token, "GET", "/v1/estimates/"+inner.Estimate.ID+"/figures", nil)
	known := map[string]string{}
	for _, f := range figures.Items {
		known[f.Figure] = f.Value
	}
	if known["base"] != inner.Estimate.Base {
		t.Errorf("the list of figures has a base of %s, the head %s", known["base"], inner.Estimate.Base)
	}
	why := func(figure string) trace.Node {
		return ask[trace.Node](t, s, token, "GET", "/v1/estimates/"+inner.Estimate.ID+"/trace?depth=1&figure="+url.QueryEscape(figure), nil)
	}
	figure, asked := "base", []string{}
	for _, next := range []string{"category/material", "line/", "item/", "member/", "/check/"} {
		n := why(figure)
		if n.What == "" || len(n.Children) == 0 && len(n.Next) == 0 {
			t.Fatalf("%s: no answer: %+v", figure, n)
		}
		asked = append(asked, figure)
		figure = below(n, next)
		if figure == "" {
			t.Fatalf("%s leads to nothing like %q: %+v", asked[len(asked)-1], next, n)
		}
	}
	check := why(figure)
	if check.Clause == "" || check.Formula == "" || check.Arithmetic == "" {
		t.Errorf("after %v, the check %s has clause %q, formula %q, numbers %q", asked, figure, check.Clause, check.Formula, check.Arithmetic)
	}
	text := s.do(t, "GET", "/v1/estimates/"+inner.Estimate.ID+"/trace?figure="+url.QueryEscape(figure), token, nil, "Accept", "text/plain")
	if text.status != 200 || !strings.Contains(string(text.body), "clause: ") {
		t.Errorf("%d %s", text.status, text.body)
	}
	t.Logf("why %s: %s, %s", strings.Join(append(asked, figure), " → "), check.Formula, check.Clause)
}

// below is the first figure under a node whose id holds a text.
func below(n trace.Node, holds string) string {
	for _, c := range n.Children {
		if strings.Contains(c.Figure, holds) {
			return c.Figure
		}
		for _, id := range append(c.Next, below(c, holds)) {
			if strings.Contains(id, holds) {
				return id
			}
		}
	}
	for _, id := range n.Next {
		if strings.Contains(id, holds) {
			return id
		}
	}
	return ""
}

// A preview says what the next estimate says once its multiplier is stored: the base
// to the cent, the percentiles within their errors.
func TestPreviewAgainstTheNextEstimate(t *testing.T) {
	s, token, inner, _ := explaining(t)
	m := map[string]any{"name": "tidal work", "scope": "group", "subject": groupOf(t, inner), "categories": []string{"erection", "shipping"},
		"spread": map[string]any{"distribution": "pert", "low": 1.05, "likely": 1.15, "high": 1.4}, "group": "labour", "reason": "erection between tides"}
	path := "/v1/estimates/" + inner.Estimate.ID + "/preview"
	p := ask[service.Preview](t, s, token, "POST", path, map[string]any{"multipliers": []any{m}})
	if p.StoredDraws || !p.Multipliers[0].Acts || p.Before.Base.String() != inner.Estimate.Base {
		t.Errorf("preview %+v of a base of %s", p, inner.Estimate.Base)
	}
	if again := ask[service.Preview](t, s, token, "POST", path, map[string]any{"multipliers": []any{m}}); !again.StoredDraws || fmt.Sprint(again.After) != fmt.Sprint(p.After) {
		t.Errorf("the second preview is another: %+v", again)
	}
	ask[struct{}](t, s, token, "POST", "/v1/projects/"+inner.Project.ID+"/multipliers", map[string]any{"multiplier": m})
	e := ask[service.Estimate](t, s, token, "POST", "/v1/schemes/"+inner.Scheme.ID+"/estimates", map[string]any{"rate_book": "unit-rate"})
	if !p.After.Base.Equal(e.Base) {
		t.Errorf("the preview says a base of %s, the estimate %s", p.After.Base, e.Base)
	}
	d := ask[document.Document](t, s, token, "GET", "/v1/estimates/"+e.ID.String()+"/document", nil)
	for i, q := range d.Range.Percentiles {
		got := p.After.Percentiles[i]
		if far := float64(got.Value - q.Value); got.P != q.P || !(math.Abs(far) <= 4*math.Hypot(float64(got.SE), float64(q.SE))) {
			t.Errorf("P%g: the preview says %v ± %v, the estimate %v ± %v", float64(100*q.P), got.Value, got.SE, q.Value, q.SE)
		}
	}
	var sum money.Decimal
	for _, c := range p.Categories {
		sum = sum.Add(c.Change)
	}
	if !sum.Equal(p.Change.Base) || sum.Sign() <= 0 {
		t.Errorf("the categories change by %s, the base by %s", sum, p.Change.Base)
	}
	b := ask[bridge.Bridge](t, s, token, "POST", "/v1/bridges", map[string]any{"from": inner.Estimate.ID, "to": e.ID})
	addsUp(t, b)
	for _, share := range b.Shares {
		if only := share.Cause == bridge.Multiplier; (share.Amount.Sign() != 0) != only {
			t.Errorf("a multiplier alone: %s has %s", share.Cause, share.Amount)
		}
	}
}

// groupOf is the group of the document's first line.
func groupOf(t *testing.T, x taken) string {
	t.Helper()
	d, err := document.Parse(x.Document)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range d.Lines {
		if l.Category == "erection" && l.Group != "" {
			return l.Group
		}
	}
	t.Fatal("no line of erection in a group")
	return ""
}

func addsUp(t *testing.T, b bridge.Bridge) {
	t.Helper()
	var sum money.Decimal
	for _, s := range b.Shares {
		sum = sum.Add(s.Amount)
	}
	if !sum.Equal(b.Change) || !b.Change.Equal(b.To.Total.Sub(b.From.Total)) {
		t.Errorf("the shares add up to %s, the change is %s, the totals %s and %s", sum, b.Change, b.From.Total, b.To.Total)
	}
}

// The demo's two schemes side by side, and the change from one to the other.
func TestTheTwoSchemesComparedAndBridged(t *testing.T) {
	s, token, inner, tower := explaining(t)
	c := ask[comparison.Comparison](t, s, token, "POST", "/v1/comparisons", map[string]any{"estimates": []string{inner.Estimate.ID, tower.Estimate.ID}})
	if len(c.Schemes) != 2 || c.Schemes[0].Base.String() != inner.Estimate.Base || c.Schemes[1].Base.String() != tower.Estimate.Base || c.Caution != document.Caution {
		t.Fatalf("schemes %+v", c.Schemes)
	}
	first, second := float64(c.Schemes[0].Cheapest.Value), float64(c.Schemes[1].Cheapest.Value)
	if math.Abs(first+second-1) > 1e-9 || math.Abs(first-float64(c.Pairs[0].Cheaper.Value)) > 1e-9 || c.Pairs[0].Sentence == "" {
		t.Errorf("cheapest %v and %v, pair %+v", first, second, c.Pairs[0])
	}
	// What the schemes share cancels: their difference is much narrower than either.
	wide := width(c.Schemes[0].Percentiles)
	var narrow float64
	for _, p := range c.Pairs[0].Difference.Percentiles {
		narrow += map[document.Number]float64{0.1: -1, 0.9: 1}[p.P] * float64(p.Value)
	}
	if !(0 < narrow && narrow < wide/2) {
		t.Errorf("P90 − P10 is %.0f for the difference and %.0f for one scheme", narrow, wide)
	}
	there := ask[bridge.Bridge](t, s, token, "POST", "/v1/bridges", map[string]any{"from": inner.Estimate.ID, "to": tower.Estimate.ID})
	addsUp(t, there)
	back := ask[bridge.Bridge](t, s, token, "POST", "/v1/bridges", map[string]any{"from": tower.Estimate.ID, "to": inner.Estimate.ID})
	for i, x := range there.Shares {
		if !x.Amount.Equal(back.Shares[i].Amount.Neg()) {
			t.Errorf("%s: %s there, %s back", x.Cause, x.Amount, back.Shares[i].Amount)
		}
	}
	none := ask[bridge.Bridge](t, s, token, "POST", "/v1/bridges", map[string]any{"from": tower.Estimate.ID, "to": tower.Estimate.ID})
	for _, x := range none.Shares {
		if x.Amount.Sign() != 0 {
			t.Errorf("to itself: %s has %s", x.Cause, x.Amount)
		}
	}
	text := s.do(t, "POST", "/v1/bridges", token, fmt.Appendf(nil, `{"from":%q,"to":%q}`, inner.Estimate.ID, tower.Estimate.ID), "Content-Type", "application/json", "Accept", "text/plain")
	if text.status != 200 || !strings.Contains(string(text.body), "Scope ") || !strings.Contains(string(text.body), there.Change.String()) {
		t.Errorf("%d %s", text.status, text.body)
	}
}

func width(list []document.Percentile) float64 {
	var w float64
	for _, p := range list {
		w += map[document.Number]float64{0.1: -1, 0.9: 1}[p.P] * float64(p.Value)
	}
	return w
}

// What another organisation has is not found, in the path and in a body.
func TestExplanationsOfAnotherOrganisation(t *testing.T) {
	s, token, inner, tower := explaining(t)
	other := s.token(t, "Saltmarsh", auth.Administrator)
	for path, body := range map[string]string{
		"/v1/estimates/" + inner.Estimate.ID + "/preview": `{"multipliers":[{"name":"m","scope":"project","categories":["erection"],"spread":{"distribution":"fixed","likely":1.1}}]}`,
		"/v1/comparisons": fmt.Sprintf(`{"estimates":[%q,%q]}`, inner.Estimate.ID, tower.Estimate.ID),
		"/v1/bridges":     fmt.Sprintf(`{"from":%q,"to":%q}`, inner.Estimate.ID, tower.Estimate.ID),
	} {
		if a := s.do(t, "POST", path, other, []byte(body), "Content-Type", "application/json"); a.status != http.StatusNotFound {
			t.Errorf("%s: %d %s, want 404", path, a.status, a.body)
		}
	}
	for _, path := range []string{"/trace?figure=base", "/figures"} {
		if a := s.do(t, "GET", "/v1/estimates/"+inner.Estimate.ID+path, other, nil); a.status != http.StatusNotFound {
			t.Errorf("%s: %d %s, want 404", path, a.status, a.body)
		}
		if a := s.do(t, "GET", "/v1/estimates/"+inner.Estimate.ID+path, token, nil); a.status != http.StatusOK {
			t.Errorf("%s: %d %s, want 200", path, a.status, a.body)
		}
	}
}

// The tables of a CSV posting are all that its workbook has on other sheets: both give
// the same job but for the name and the hash of what was posted.
func TestACSVWithAllItsTablesIsItsWorkbook(t *testing.T) {
	s, token, inner, _ := explaining(t)
	parts := map[string]string{"rate_book": "unit-rate", "project": "The same from CSV"}
	for _, name := range []string{"job", "definition", "risks"} {
		parts[name] = string(mustRead(t, "brackwater-"+name+".csv"))
	}
	fromCSV := s.take(t, token, "brackwater.csv", mustRead(t, "brackwater.csv"), parts)
	a, errA := document.Parse(inner.Document)
	b, errB := document.Parse(fromCSV.Document)
	if errA != nil || errB != nil {
		t.Fatal(errA, errB)
	}
	if d := cmp.Diff(a.Figures(), b.Figures()); d != "" {
		t.Errorf("figures differ (-workbook +csv): %s", d)
	}
	if len(b.Range.Risks) == 0 || len(b.Class.Definition) == 0 {
		t.Errorf("%d risks, %d items defined", len(b.Range.Risks), len(b.Class.Definition))
	}
	again := ask[service.Estimate](t, s, token, "POST", "/v1/schemes/"+fromCSV.Scheme.ID+"/estimates", map[string]any{"rate_book": "unit-rate"})
	if again.JobSHA256 == "" || again.DocumentSHA256 != fromCSV.Estimate.DocumentSHA256 {
		t.Errorf("an estimate from the stored revision is another: %s and %s", again.DocumentSHA256, fromCSV.Estimate.DocumentSHA256)
	}
}
