package main

import (
	"encoding/json"
	"net/http"
	"strings"
	"testing"

	"spanwright/api/auth"
	"spanwright/estimate/document"
)

const tides = `{"name":"tides","scope":"group","subject":"Loading boom","categories":["erection"],
 "spread":{"distribution":"triangular","low":1.1,"likely":1.4,"high":2},"group":"labour","reason":"work between tides"}`

// An edited multiplier changes the next estimate, leaves the last one alone, and
// is an audit event with before and after.
func TestEditingAMultiplierChangesTheNextEstimateAndIsRecorded(t *testing.T) {
	s := newServer(t)
	estimator, manager := s.token(t, "Brackwater", auth.Estimator), s.token(t, "Brackwater", auth.Manager)
	first := s.take(t, estimator, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), nil)
	made := s.do(t, http.MethodPost, "/v1/projects/"+first.Project.ID+"/multipliers", estimator, []byte(`{"multiplier":`+tides+`}`), "Content-Type", "application/json")
	if made.status != http.StatusCreated {
		t.Fatalf("create: %d %s", made.status, made.body)
	}
	var m struct {
		ID      string
		Version int
	}
	made.decode(t, &m)
	second := s.estimate(t, estimator, first.Scheme.ID)
	if second.Base == first.Estimate.Base {
		t.Error("the multiplier did not change the next estimate")
	}
	stronger := strings.Replace(tides, `"likely":1.4`, `"likely":1.8`, 1)
	path := "/v1/multipliers/" + m.ID
	for _, c := range []struct {
		match string
		want  int
	}{{"", http.StatusPreconditionRequired}, {`"99"`, http.StatusPreconditionFailed}, {made.header.Get("ETag"), http.StatusOK}, {made.header.Get("ETag"), http.StatusPreconditionFailed}} {
		headers := []string{"Content-Type", "application/json"}
		if c.match != "" {
			headers = append(headers, "If-Match", c.match)
		}
		if a := s.do(t, http.MethodPut, path, estimator, []byte(`{"multiplier":`+stronger+`}`), headers...); a.status != c.want {
			t.Errorf("If-Match %q: got %d %s, want %d", c.match, a.status, a.body, c.want)
		}
	}
	third := s.estimate(t, estimator, first.Scheme.ID)
	if third.Base == second.Base {
		t.Error("the edit did not change the next estimate")
	}
	again := s.do(t, http.MethodGet, "/v1/estimates/"+second.ID+"/document", estimator, nil)
	d, err := document.Parse(again.body)
	if err != nil {
		t.Fatal(err)
	}
	if d.Totals.Base.String() != second.Base {
		t.Error("an older estimate changed with the multiplier")
	}
	checkTideLines(t, d)
	checkAudit(t, s, manager, m.ID)
}

// checkTideLines looks for the multiplier on the lines of its group alone.
func checkTideLines(t *testing.T, d document.Document) {
	t.Helper()
	for _, l := range d.Lines {
		has := false
		for _, m := range l.Multipliers {
			has = has || m.Name == "tides" && m.Scope == "group" && m.Value.String() == "1.4"
		}
		if want := l.Group == "Loading boom" && l.Category == "erection"; has != want {
			t.Errorf("line %s: multiplier on it: %v, want %v", l.ID, has, want)
		}
	}
}

func checkAudit(t *testing.T, s *server, manager, id string) {
	t.Helper()
	a := s.do(t, http.MethodGet, "/v1/audit-events?limit=200", manager, nil)
	var events struct {
		Items []struct {
			Action, SubjectID string
			SubjectKind       string `json:"subject_kind"`
			Subject           string `json:"subject_id"`
			Actor             string `json:"actor_name"`
			Before, After     json.RawMessage
		}
	}
	a.decode(t, &events)
	actions := ""
	for _, e := range events.Items {
		if e.Subject != id {
			continue
		}
		actions += e.Action + " "
		if e.Action == "update" && (!strings.Contains(string(e.Before), "1.4") || !strings.Contains(string(e.After), "1.8") || e.Actor != "test estimator") {
			t.Errorf("the event is by %q, from %s to %s", e.Actor, e.Before, e.After)
		}
	}
	if actions != "update create " {
		t.Errorf("events of the multiplier: %q, want one update after one creation", actions)
	}
	if strings.Contains(string(a.body), "swt_") || strings.Contains(string(a.body), "secret") {
		t.Error("the audit events hold a secret")
	}
}

type head struct{ ID, Base string }

func (s *server) estimate(t *testing.T, token, scheme string) head {
	t.Helper()
	a := s.do(t, http.MethodPost, "/v1/schemes/"+scheme+"/estimates", token, []byte(`{}`), "Content-Type", "application/json")
	if a.status != http.StatusCreated {
		t.Fatalf("estimate: %d %s", a.status, a.body)
	}
	var h head
	a.decode(t, &h)
	return h
}

// Another organisation sees nothing of it, whatever it asks for.
func TestAnotherOrganisationFindsNothing(t *testing.T) {
	s := newServer(t)
	own := s.token(t, "Brackwater", auth.Administrator)
	other := s.token(t, "Another quay", auth.Administrator)
	got := s.take(t, own, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), nil)
	for _, path := range []string{
		"/v1/projects/" + got.Project.ID, "/v1/projects/" + got.Project.ID + "/schemes", "/v1/projects/" + got.Project.ID + "/multipliers",
		"/v1/schemes/" + got.Scheme.ID, "/v1/schemes/" + got.Scheme.ID + "/schedules", "/v1/schemes/" + got.Scheme.ID + "/estimates",
		"/v1/schedules/" + got.Schedule.ID, "/v1/schedules/" + got.Schedule.ID + "/source",
		"/v1/estimates/" + got.Estimate.ID, "/v1/estimates/" + got.Estimate.ID + "/document", "/v1/estimates/" + got.Estimate.ID + "/lines",
	} {
		if a := s.do(t, http.MethodGet, path, own, nil); a.status != http.StatusOK {
			t.Errorf("%s as its owner: %d %s", path, a.status, a.body)
		}
		if a := s.do(t, http.MethodGet, path, other, nil); a.status != http.StatusNotFound || strings.Contains(string(a.body), "Brackwater") {
			t.Errorf("%s as another organisation: %d %s", path, a.status, a.body)
		}
	}
	if a := s.do(t, http.MethodGet, "/v1/projects", other, nil); strings.Contains(string(a.body), got.Project.ID) {
		t.Error("the other organisation's list holds the project")
	}
	a := s.do(t, http.MethodPost, "/v1/schemes/"+got.Scheme.ID+"/estimates", other, []byte(`{}`), "Content-Type", "application/json")
	if a.status != http.StatusNotFound {
		t.Errorf("an estimate of another organisation's scheme: %d %s", a.status, a.body)
	}
}
