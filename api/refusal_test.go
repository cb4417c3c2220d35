package api

import (
	"encoding/json"
	"fmt"
	"maps"
	"net/http"
	"slices"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/api/auth"
)

// endpoint is a request that succeeds, by operation id, with the least role that
// may make it. {…} in the path stands for an id of the stock.
type endpoint struct {
	operation string
	method    string
	path      string
	body      string
	least     auth.Role
	status    int
}

const multiplierBody = `{"multiplier":{"name":"tidal work","scope":"project","categories":["erection"],"spread":{"distribution":"fixed","likely":1.2},"reason":"erection between tides"}}`

func endpoints(t *testing.T) []endpoint {
	t.Helper()
	return []endpoint{
		{"list-projects", "GET", "/v1/projects", "", auth.Viewer, 200},
		{"create-project", "POST", "/v1/projects", `{"name":"Another quay"}`, auth.Estimator, 201},
		{"get-project", "GET", "/v1/projects/{project}", "", auth.Viewer, 200},
		{"update-project", "PUT", "/v1/projects/{project}", `{"name":"Brackwater quay"}`, auth.Estimator, 200},
		{"list-schemes", "GET", "/v1/projects/{project}/schemes", "", auth.Viewer, 200},
		{"create-scheme", "POST", "/v1/projects/{project}/schemes", `{"name":"One trestle"}`, auth.Estimator, 201},
		{"get-scheme", "GET", "/v1/schemes/{scheme}", "", auth.Viewer, 200},
		{"list-schedules", "GET", "/v1/schemes/{scheme}/schedules", "", auth.Viewer, 200},
		{"post-schedule", "POST", "/v1/schemes/{scheme}/schedules", csvSchedule, auth.Estimator, 201},
		{"check-schedule", "POST", "/v1/schedules/check", csvSchedule, auth.Estimator, 200},
		{"get-schedule-template", "GET", "/v1/schedules/template", "", auth.Viewer, 200},
		{"get-schedule", "GET", "/v1/schedules/{schedule}", "", auth.Viewer, 200},
		{"get-schedule-source", "GET", "/v1/schedules/{schedule}/source", "", auth.Viewer, 200},
		{"list-estimates", "GET", "/v1/schemes/{scheme}/estimates", "", auth.Viewer, 200},
		{"create-estimate", "POST", "/v1/schemes/{scheme}/estimates", `{}`, auth.Estimator, 201},
		{"get-estimate", "GET", "/v1/estimates/{estimate}", "", auth.Viewer, 200},
		{"get-estimate-document", "GET", "/v1/estimates/{estimate}/document", "", auth.Viewer, 200},
		{"get-estimate-lines", "GET", "/v1/estimates/{estimate}/lines", "", auth.Viewer, 200},
		{"get-estimate-assumptions", "GET", "/v1/estimates/{estimate}/assumptions", "", auth.Viewer, 200},
		{"get-estimate-range", "GET", "/v1/estimates/{estimate}/range", "", auth.Viewer, 200},
		{"get-estimate-findings", "GET", "/v1/estimates/{estimate}/findings", "", auth.Viewer, 200},
		{"get-estimate-members", "GET", "/v1/estimates/{estimate}/members", "", auth.Viewer, 200},
		{"trace-estimate", "GET", "/v1/estimates/{estimate}/trace?figure=base", "", auth.Viewer, 200},
		{"list-estimate-figures", "GET", "/v1/estimates/{estimate}/figures", "", auth.Viewer, 200},
		{"preview-estimate", "POST", "/v1/estimates/{estimate}/preview", exampleBody(t, "NewPreview"), auth.Viewer, 200},
		{"compare-estimates", "POST", "/v1/comparisons", `{"estimates":["{estimate}","{second}"]}`, auth.Viewer, 200},
		{"compare-arrangements", "POST", "/v1/comparisons/arrangements", "{" + quayWays + "}", auth.Viewer, 200},
		{"bridge-estimates", "POST", "/v1/bridges", `{"from":"{estimate}","to":"{second}"}`, auth.Viewer, 200},
		{"intake", "POST", "/v1/intake", "form", auth.Estimator, 201},
		{"list-rate-books", "GET", "/v1/rate-books", "", auth.Viewer, 200},
		{"create-rate-book", "POST", "/v1/rate-books", bookJSON(t, "quay rates"), auth.Estimator, 201},
		{"get-starting-rate-book", "GET", "/v1/rate-books/starting", "", auth.Viewer, 200},
		{"get-rate-book", "GET", "/v1/rate-books/{book}", "", auth.Viewer, 200},
		{"update-rate-book", "PUT", "/v1/rate-books/{book}", bookJSON(t, "ratio"), auth.Estimator, 200},
		{"get-rate-book-version", "GET", "/v1/rate-books/{book}/versions/1", "", auth.Viewer, 200},
		{"list-multipliers", "GET", "/v1/projects/{project}/multipliers", "", auth.Viewer, 200},
		{"create-multiplier", "POST", "/v1/projects/{project}/multipliers", strings.Replace(multiplierBody, "tidal", "night", 1), auth.Estimator, 201},
		{"get-multiplier", "GET", "/v1/multipliers/{multiplier}", "", auth.Viewer, 200},
		{"update-multiplier", "PUT", "/v1/multipliers/{multiplier}", multiplierBody, auth.Estimator, 200},
		{"delete-multiplier", "DELETE", "/v1/multipliers/{multiplier}", "", auth.Estimator, 204},
		{"list-tokens", "GET", "/v1/tokens", "", auth.Administrator, 200},
		{"create-token", "POST", "/v1/tokens", `{"name":"spare","role":"viewer"}`, auth.Administrator, 201},
		{"revoke-token", "DELETE", "/v1/tokens/{token}", "", auth.Administrator, 200},
		{"list-audit-events", "GET", "/v1/audit-events", "", auth.Manager, 200},
		{"list-outturns", "GET", "/v1/outturns", "", auth.Viewer, 200},
		{"post-outturns", "POST", "/v1/outturns", csvOutturn, auth.Estimator, 201},
		{"get-outturn-template", "GET", "/v1/outturns/template", "", auth.Viewer, 200},
		{"get-outturn", "GET", "/v1/outturns/{outturn}", "", auth.Viewer, 200},
		{"withdraw-outturn", "DELETE", "/v1/outturns/{outturn}", "", auth.Manager, 204},
		{"list-calibrations", "GET", "/v1/calibrations", "", auth.Viewer, 200},
		{"create-calibration", "POST", "/v1/calibrations", `{}`, auth.Estimator, 201},
		{"get-calibration", "GET", "/v1/calibrations/{calibration}", "", auth.Viewer, 200},
		{"decide-calibration", "POST", "/v1/calibrations/{calibration}/decision", `{"decision":"decline","reason":"too few kinds"}`, auth.Manager, 200},
		{"calculate-beam", "POST", "/v1/calculators/beam", exampleBody(t, "BeamRequest"), auth.Viewer, 200},
		{"calculate-section", "POST", "/v1/calculators/section", exampleBody(t, "SectionRequest"), auth.Viewer, 200},
		{"calculate-resistance", "POST", "/v1/calculators/resistance", exampleBody(t, "ResistanceRequest"), auth.Viewer, 200},
		{"calculate-sizing", "POST", "/v1/calculators/sizing", exampleBody(t, "SizingRequest"), auth.Viewer, 200},
		{"calculate-arrangements", "POST", "/v1/calculators/arrangements", exampleBody(t, "ArrangementsRequest"), auth.Viewer, 200},
		{"calculate-cutting-plan", "POST", "/v1/calculators/cutting-plan", exampleBody(t, "CuttingPlanRequest"), auth.Viewer, 200},
		{"calculate-range", "POST", "/v1/calculators/range", exampleBody(t, "RangeRequest"), auth.Viewer, 200},
	}
}

// bookJSON is the starting book under another name.
func bookJSON(t *testing.T, name string) string {
	t.Helper()
	data, err := marshal(examples()["RateBookContent"])
	if err != nil {
		t.Fatal(err)
	}
	return strings.Replace(strings.TrimSpace(string(data)), `"name":"ratio"`, `"name":"`+name+`"`, 1)
}

// stock fills the own organisation and returns the ids by name.
func stock(w *world) map[string]string {
	w.t.Helper()
	_, taken := w.want(201, intakeCall())
	ids := map[string]string{"project": id(w.t, taken, "project", "id"), "scheme": id(w.t, taken, "scheme", "id"),
		"schedule": id(w.t, taken, "schedule", "id"), "estimate": id(w.t, taken, "estimate", "id"), "book": id(w.t, taken, "estimate", "rate_book_id")}
	_, m := w.want(201, call{method: "POST", path: "/v1/projects/" + ids["project"] + "/multipliers", body: multiplierBody})
	ids["multiplier"] = id(w.t, m, "id")
	_, k := w.want(201, call{method: "POST", path: "/v1/tokens", body: `{"name":"to be revoked","role":"viewer"}`})
	ids["token"] = id(w.t, k, "token", "id")
	stockOutturns(w, ids)
	_, e := w.want(201, call{method: "POST", path: "/v1/schemes/" + ids["scheme"] + "/estimates", body: `{}`})
	ids["second"] = id(w.t, e, "id")
	return ids
}

func (e endpoint) call(ids map[string]string) call {
	c := call{method: e.method, path: e.path, body: e.body}
	for name, id := range ids {
		c.path = strings.ReplaceAll(c.path, "{"+name+"}", id)
		c.body = strings.ReplaceAll(c.body, "{"+name+"}", id)
	}
	switch e.body {
	case "form":
		c = intakeCall()
	case csvSchedule, csvOutturn:
		c.contentType = "text/csv"
	}
	if e.method == "PUT" || e.operation == "delete-multiplier" || e.operation == "withdraw-outturn" {
		c = c.with("If-Match", `"1"`)
	}
	return c
}

// TestEndpointsAreAll holds the table of this file to the OpenAPI document: no
// operation can be added without its refusals being tested.
func TestEndpointsAreAll(t *testing.T) {
	data, err := Spec()
	if err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Paths map[string]map[string]struct{ OperationID string }
	}
	if err := json.Unmarshal(data, &doc); err != nil {
		t.Fatal(err)
	}
	want := map[string]bool{}
	for path, item := range doc.Paths {
		for _, o := range item {
			if strings.HasPrefix(path, "/v1/") {
				want[o.OperationID] = true
			}
		}
	}
	got := map[string]bool{}
	for _, e := range endpoints(t) {
		got[e.operation] = true
	}
	if !maps.Equal(got, want) {
		t.Errorf("operations tested: %v\nin the document: %v", slices.Sorted(maps.Keys(got)), slices.Sorted(maps.Keys(want)))
	}
}

func TestEveryEndpointByRole(t *testing.T) {
	for _, e := range endpoints(t) {
		t.Run(e.operation, func(t *testing.T) {
			t.Parallel()
			w := newWorld(t)
			c := e.call(stock(w))
			least := slices.Index(auth.Roles(), e.least)
			for i, role := range auth.Roles() {
				c.token = w.tokens[role]
				switch {
				case i < least:
					if p := w.refused(http.StatusForbidden, c); !strings.Contains(p.Detail, string(e.least)) {
						t.Errorf("%s: detail %q does not name the least role %s", role, p.Detail, e.least)
					}
				case i == least:
					w.want(e.status, c)
				default:
					if rec := w.do(c); rec.Code == http.StatusForbidden || rec.Code >= 500 {
						t.Errorf("%s: status %d", role, rec.Code)
					}
				}
			}
		})
	}
}

func TestEveryEndpointWithoutToken(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	unknown := auth.NewToken().Text
	revoked := w.tokens[auth.Manager]
	now := w.now
	for id, k := range w.store.tenants[w.own].tokens {
		if k.Role == auth.Manager {
			k.RevokedAt = &now
			w.store.tenants[w.own].tokens[id] = k
		}
		if k.Role == auth.Estimator {
			k.ExpiresAt = &now
			w.store.tenants[w.own].tokens[id] = k
		}
	}
	for _, e := range endpoints(t) {
		c := e.call(ids)
		for name, token := range map[string]string{"none": "none", "malformed": "swt_x", "unknown": unknown, "revoked": revoked, "expired": w.tokens[auth.Estimator]} {
			c.token = token
			rec := w.do(c)
			if rec.Code != http.StatusUnauthorized {
				t.Errorf("%s, %s token: status %d, want 401: %s", e.operation, name, rec.Code, rec.Body)
				continue
			}
			w.checkProblem(rec)
			want := `Bearer realm="spanwright"`
			if name != "none" {
				want += `, error="invalid_token"`
			}
			if got := rec.Header().Get("WWW-Authenticate"); got != want {
				t.Errorf("%s, %s token: WWW-Authenticate %q, want %q", e.operation, name, got, want)
			}
		}
	}
}

func TestOtherSchemesOfAuthorization(t *testing.T) {
	w := newWorld(t)
	token := w.tokens[auth.Viewer]
	for header, status := range map[string]int{"bearer " + token: 200, "BEARER  " + token: 200, "Basic " + token: 401, token: 401, "Bearer": 401, "Bearer " + token + " x": 401} {
		w.want(status, call{method: "GET", path: "/v1/projects", token: "none"}.with("Authorization", header))
	}
}

// Another organisation's ids are not found, and answer exactly as unknown ones.
func TestEveryIDOfAnotherOrganisation(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	unknown, wrong := map[string]string{}, map[string]string{}
	for name := range ids {
		unknown[name], wrong[name] = uuid.NewString(), "not-an-id"
	}
	for _, e := range endpoints(t) {
		if !strings.Contains(e.path, "{") {
			continue
		}
		c := e.call(ids)
		c.token = w.foreign
		foreign := w.refused(http.StatusNotFound, c)
		missing := w.refused(http.StatusNotFound, e.call(unknown))
		if foreign.Detail != missing.Detail {
			t.Errorf("%s: another organisation's id says %q, an unknown one %q", e.operation, foreign.Detail, missing.Detail)
		}
		p := w.refused(http.StatusUnprocessableEntity, e.call(wrong))
		if len(p.Faults) == 0 || p.Faults[0].Found != "not-an-id" || !strings.Contains(p.Faults[0].Problem, "path parameter id") {
			t.Errorf("%s: faults %+v do not say that not-an-id is no id", e.operation, p.Faults)
		}
	}
}

func TestIDsInBodiesOfAnotherOrganisation(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	other := newWorldIn(w)
	for _, c := range []call{
		{method: "POST", path: "/v1/schemes/" + other["scheme"] + "/estimates", body: `{"rate_book_id":"` + ids["book"] + `"}`},
		{method: "POST", path: "/v1/schemes/" + other["scheme"] + "/estimates", body: `{"schedule_revision_id":"` + ids["schedule"] + `"}`},
		{method: "POST", path: "/v1/projects/" + other["project"] + "/multipliers",
			body: strings.Replace(strings.Replace(multiplierBody, "{", `{"scheme_id":"`+ids["scheme"]+`",`, 1), `"project"`, `"scheme"`, 1)},
		intakeCall(filled{"file", "q.csv", "text/csv", csvSchedule}, filled{name: "project", data: "Q"}, filled{name: "scheme", data: "S"}, filled{name: "rate_book_id", data: ids["book"]}),
	} {
		c.token = w.foreign
		w.want(http.StatusNotFound, c)
	}
}

// newWorldIn stocks the other organisation of the same server.
func newWorldIn(w *world) map[string]string {
	own := w.tokens[auth.Administrator]
	w.tokens[auth.Administrator] = w.foreign
	defer func() { w.tokens[auth.Administrator] = own }()
	return stock(w)
}

// limitOf is the largest body of an operation.
func limitOf(e endpoint) int {
	if e.operation == "intake" || e.operation == "post-schedule" || e.operation == "check-schedule" || e.operation == "post-outturns" {
		return 2048 + formSlack
	}
	return smallBody
}

func TestEveryBodyAtItsLimit(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.limits.Sheet.Bytes = 2048 })
	ids := stock(w)
	for _, e := range endpoints(t) {
		if e.body == "" {
			continue
		}
		c := e.call(ids)
		limit := limitOf(e)
		c.body = c.body[:len(c.body)-1] + strings.Repeat(" ", limit-len(c.body)) + c.body[len(c.body)-1:]
		// A raw schedule of this size passes the door, and the limit of a file refuses
		// it: see TestScheduleAtItsLimit.
		if rec := w.do(c); len(c.body) != limit || rec.Code == http.StatusRequestEntityTooLarge && e.operation != "post-schedule" && e.operation != "check-schedule" && e.operation != "post-outturns" {
			t.Errorf("%s: %d bytes, the limit: status %d: %s", e.operation, len(c.body), rec.Code, rec.Body)
		}
		c.body += " "
		w.refused(http.StatusRequestEntityTooLarge, c)
		if p := w.refusedStreaming(c); p.Status != http.StatusRequestEntityTooLarge {
			t.Errorf("%s: %d bytes of unknown length: status %d, want 413", e.operation, len(c.body), p.Status)
		}
	}
}

// A schedule may be as large as the limit, as a raw body and as a part of a form.
func TestScheduleAtItsLimit(t *testing.T) {
	const limit = 2048
	w := newWorld(t, func(w *world, _ *Config) { w.limits.Sheet.Bytes = limit })
	ids := stock(w)
	full := csvSchedule + strings.Repeat("\n", limit-len(csvSchedule))
	path := "/v1/schemes/" + ids["scheme"] + "/schedules"
	w.want(201, call{method: "POST", path: path, body: full, contentType: "text/csv"})
	w.refused(413, call{method: "POST", path: path, body: full + "\n", contentType: "text/csv"})
	for size, status := range map[string]int{full: 201, full + "\n": 413} {
		body, contentType := formOf(filled{"file", "q.csv", "text/csv", size})
		w.want(status, call{method: "POST", path: path, body: body, contentType: contentType})
		w.want(status, intakeCall(filled{"file", "q.csv", "text/csv", size}, filled{name: "project", data: fmt.Sprint(status)}, filled{name: "scheme", data: "S"}))
	}
}

func TestEveryBodyOfTheWrongKind(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, e := range endpoints(t) {
		if e.body == "" {
			continue
		}
		for _, contentType := range []string{"application/x-www-form-urlencoded", "text/html", "application/json; charset=utf-16", "nonsense;;", "application/xml"} {
			c := e.call(ids)
			c.contentType = contentType
			p := w.refused(http.StatusUnsupportedMediaType, c)
			if len(p.Faults) != 1 || p.Faults[0].Found != contentType || !strings.Contains(p.Faults[0].Remedy, "/") {
				t.Errorf("%s as %s: faults %+v do not name found and accepted", e.operation, contentType, p.Faults)
			}
		}
		c := e.call(ids)
		c.body = ""
		p := w.refused(http.StatusBadRequest, c)
		if len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Remedy, "/") {
			t.Errorf("%s without a body: faults %+v do not say what would be accepted", e.operation, p.Faults)
		}
	}
}

func TestEveryJSONBody(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, e := range endpoints(t) {
		if e.body == "" || e.body[0] != '{' {
			continue
		}
		c := e.call(ids)
		for name, change := range map[string]struct {
			edit   func(string) string
			status int
		}{
			"unknown field":   {func(s string) string { return strings.Replace(s, "{", `{"colour":"red",`, 1) }, 422},
			"other case":      {func(s string) string { return strings.Replace(s, "{", `{"NAME":"x",`, 1) }, 422},
			"key twice":       {func(s string) string { return strings.Replace(s, "{", `{"colour":1,"colour":2,`, 1) }, 400},
			"something after": {func(s string) string { return s + " {}" }, 400},
			"cut short":       {func(s string) string { return s[:len(s)-1] }, 400},
			"a list":          {func(s string) string { return "[" + s + "]" }, 422},
			"not UTF-8":       {func(s string) string { return s[:1] + "\xff" + s[1:] }, 400},
		} {
			d := c
			d.body = strings.Replace(change.edit(c.body), ",}", "}", 1)
			if p := w.refused(change.status, d); len(p.Faults) == 0 {
				t.Errorf("%s, %s: no fault named", e.operation, name)
			}
		}
	}
}

func TestEveryUnknownQuery(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, e := range endpoints(t) {
		c := e.call(ids)
		c.path += map[bool]string{false: "?", true: "&"}[strings.Contains(c.path, "?")] + "colour=red"
		if p := w.refused(http.StatusUnprocessableEntity, c); len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Problem, "query parameter colour") {
			t.Errorf("%s: faults %+v do not name the parameter", e.operation, p.Faults)
		}
	}
}

func TestEveryList(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, e := range endpoints(t) {
		if !strings.HasPrefix(e.operation, "list-") {
			continue
		}
		path := e.call(ids).path
		for _, query := range []string{"limit=0", "limit=201", "limit=-1", "limit=x", "cursor=nonsense", "cursor=" + strings.Repeat("a", 501)} {
			w.refused(http.StatusUnprocessableEntity, call{method: "GET", path: path + "?" + query})
		}
	}
}

func TestBusy(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.limits.Heavy = 1 })
	ids := stock(w)
	entered, release := make(chan struct{}), make(chan struct{})
	stub := w.run
	w.run = blocking(entered, release, stub)
	done := make(chan int)
	go func() { done <- w.do(intakeCall()).Code }()
	<-entered
	for _, c := range []call{intakeCall(), {method: "POST", path: "/v1/schemes/" + ids["scheme"] + "/estimates", body: `{}`}} {
		rec, _ := w.want(http.StatusTooManyRequests, c)
		if got := rec.Header().Get("Retry-After"); got != "2" {
			t.Errorf("%s: Retry-After %q, want 2", c.path, got)
		}
	}
	close(release)
	if got := <-done; got != 201 {
		t.Errorf("the request that was first: status %d, want 201", got)
	}
}

func TestConflicts(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, c := range []call{
		{method: "POST", path: "/v1/projects", body: `{"name":"Brackwater loading quay"}`},
		{method: "POST", path: "/v1/projects/" + ids["project"] + "/schemes", body: `{"name":"Two trestles"}`},
		{method: "POST", path: "/v1/projects/" + ids["project"] + "/multipliers", body: multiplierBody},
		{method: "POST", path: "/v1/rate-books", body: bookJSON(t, "ratio")},
	} {
		w.refused(http.StatusConflict, c)
	}
	_, p := w.want(201, call{method: "POST", path: "/v1/projects", body: `{"name":"Brackwater stores"}`})
	c := call{method: "PUT", path: "/v1/projects/" + id(t, p, "id"), body: `{"name":"Brackwater loading quay"}`}
	w.refused(http.StatusConflict, c.with("If-Match", "*"))
}
