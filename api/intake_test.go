package api

import (
	"context"
	"errors"
	"net/http"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
)

func TestIntakeAsJSON(t *testing.T) {
	w := newWorld(t)
	rec, body := w.want(201, intakeCall())
	estimate := id(t, body, "estimate", "id")
	if got := rec.Header().Get("Location"); got != "/v1/estimates/"+estimate {
		t.Errorf("Location %q", got)
	}
	stored := w.store.tenants[w.own].documents
	for _, canonical := range stored {
		if !strings.Contains(rec.Body.String(), `,"document":`+strings.TrimSpace(string(canonical))+"}\n") {
			t.Errorf("the document is not in the answer byte for byte: %s", rec.Body)
		}
	}
	if len(stored) != 1 || rec.Header().Get("Content-Type") != mediaJSON {
		t.Errorf("%d documents, Content-Type %q", len(stored), rec.Header().Get("Content-Type"))
	}
	if p := body["project"].(map[string]any); p["name"] != "Brackwater loading quay" {
		t.Errorf("project %v", p)
	}
	rec, _ = w.want(200, call{method: "GET", path: rec.Header().Get("Location")})
	if !strings.Contains(rec.Body.String(), estimate) {
		t.Errorf("Location leads to %s", rec.Body)
	}
}

func TestIntakeByAccept(t *testing.T) {
	for accept, want := range map[string]struct{ media, body, suffix string }{
		mediaXLSX: {mediaXLSX, "PK workbook", ".xlsx"}, "text/csv": {mediaCSV, "id,amount\n", ".csv"}, "text/csv;q=0.5," + mediaXLSX: {mediaXLSX, "PK workbook", ".xlsx"},
	} {
		w := newWorld(t)
		rec, _ := w.want(201, intakeCall().with("Accept", accept))
		if rec.Header().Get("Content-Type") != want.media || rec.Body.String() != want.body || !strings.Contains(rec.Header().Get("Content-Disposition"), want.suffix) ||
			!strings.HasPrefix(rec.Header().Get("Location"), "/v1/estimates/") || !strings.Contains(strings.Join(rec.Header().Values("Vary"), ","), "Accept") {
			t.Errorf("Accept %s: %v %q", accept, rec.Header(), rec.Body)
		}
	}
}

// What cannot be answered is refused before anything is stored.
func TestIntakeNotAcceptable(t *testing.T) {
	w := newWorld(t, func(_ *world, c *Config) { c.Exports.CSV = nil })
	for _, accept := range []string{"image/png", "text/csv"} {
		p := w.refused(http.StatusNotAcceptable, intakeCall().with("Accept", accept))
		if len(p.Faults) != 1 || p.Faults[0].Remedy != mediaJSON+", "+mediaXLSX {
			t.Errorf("faults %+v do not list what there is", p.Faults)
		}
	}
	if n := len(w.store.tenants[w.own].projects); n != 0 {
		t.Errorf("%d projects stored", n)
	}
}

func TestIntakeExportFails(t *testing.T) {
	w := newWorld(t, func(_ *world, c *Config) {
		c.Exports.CSV = func(document.Document) ([]byte, error) { return nil, errors.New("the lines do not add up") }
	})
	if p := w.refused(http.StatusInternalServerError, intakeCall().with("Accept", "text/csv")); p.Detail != "" {
		t.Errorf("detail %q", p.Detail)
	}
	if !strings.Contains(w.log.String(), "the lines do not add up") {
		t.Error("the log does not say why")
	}
}

func TestIntakeForm(t *testing.T) {
	file := filled{"file", "q.csv", "text/csv", csvSchedule}
	named := []filled{{name: "project", data: "P"}, {name: "scheme", data: "S"}}
	for name, c := range map[string]struct {
		parts  []filled
		status int
		says   string
	}{
		"no file":           {named, 422, "file is missing"},
		"unknown part":      {append([]filled{file, {name: "colour", data: "red"}}, named...), 422, "unknown part"},
		"part twice":        {append([]filled{file, file}, named...), 422, "twice"},
		"rate book":         {append([]filled{file, {name: "rate_book_id", data: "x"}}, named...), 422, "not an id"},
		"no such rate book": {append([]filled{file, {name: "rate_book_id", data: exampleID.String()}}, named...), 201, ""},
		"no project":        {[]filled{file, {name: "scheme", data: "S"}}, 422, "empty"},
		"faulty schedule":   {append([]filled{{"file", "q.csv", "text/csv", strings.Replace(csvSchedule, ",6,", ",six,", 1)}}, named...), 422, "six"},
		"a picture":         {append([]filled{{"file", "q.png", "image/png", "\x89PNG\r\n\x1a\n"}}, named...), 415, "picture"},
		"job table":         {append([]filled{file, {"job", "job.csv", "text/csv", "Key,Value\nProject,From the table\nEstimate class,3\n"}}, named[1]), 201, ""},
	} {
		t.Run(name, func(t *testing.T) {
			w := newWorld(t)
			rec, _ := w.want(c.status, intakeCall(c.parts...))
			if !strings.Contains(rec.Body.String(), c.says) {
				t.Errorf("%s does not say %q", rec.Body, c.says)
			}
			if name == "job table" && !strings.Contains(rec.Body.String(), "From the table") {
				t.Errorf("the job table was not read: %s", rec.Body)
			}
		})
	}
}

// A fault of a cell is told by its address.
func TestIntakeFaultsByCell(t *testing.T) {
	w := newWorld(t)
	p := w.refused(422, intakeCall(filled{"file", "q.csv", "text/csv", strings.Replace(csvSchedule, ",6,", ",six,", 1)}, filled{name: "project", data: "P"}, filled{name: "scheme", data: "S"}))
	if len(p.Faults) != 1 || p.Faults[0].Row != 2 || p.Faults[0].Column != "C" || p.Faults[0].Found != "six" || p.Faults[0].Remedy == "" || !strings.HasSuffix(p.Faults[0].Cell, "C2") {
		t.Errorf("faults %+v", p.Faults)
	}
	if n := len(w.store.tenants[w.own].projects); n != 0 {
		t.Errorf("%d projects stored", n)
	}
}

func TestBrokenForm(t *testing.T) {
	w := newWorld(t)
	c := intakeCall()
	whole := c.body
	for name, body := range map[string]string{"cut short": whole[:len(whole)-20], "not a form": "hello", "no end": whole[:len(whole)/2]} {
		c.body = body
		if p := w.refused(http.StatusBadRequest, c); len(p.Faults) != 1 || strings.Contains(p.Faults[0].Problem, "hello") {
			t.Errorf("%s: faults %+v", name, p.Faults)
		}
	}
	c.body, c.contentType = whole, mediaMultipart
	w.refused(http.StatusBadRequest, c)
	var many []filled
	for range 50 {
		many = append(many, filled{name: "x", data: "y"})
	}
	w.refused(http.StatusUnprocessableEntity, intakeCall(many...))
}

// What the spreadsheet of the same name says twice: the second intake makes the
// second revision of the same scheme.
func TestIntakeAgain(t *testing.T) {
	w := newWorld(t)
	_, first := w.want(201, intakeCall())
	_, second := w.want(201, intakeCall())
	if id(t, first, "scheme", "id") != id(t, second, "scheme", "id") || second["schedule"].(map[string]any)["number"] != 2.0 {
		t.Errorf("first %v, second %v", first["schedule"], second["schedule"])
	}
}

// A posting names its rate book by id or by name, and not by both.
func TestRateBookByName(t *testing.T) {
	w := newWorld(t)
	named := func(extra ...filled) call {
		return intakeCall(append([]filled{{"file", "quay.csv", "text/csv", csvSchedule}, {name: "project", data: "P"}, {name: "scheme", data: "S"}}, extra...)...)
	}
	_, taken := w.want(201, named(filled{name: "rate_book", data: "ratio"}))
	book := id(t, taken, "estimate", "rate_book_id")
	estimates := "/v1/schemes/" + id(t, taken, "scheme", "id") + "/estimates"
	_, e := w.want(201, call{method: "POST", path: estimates, body: `{"rate_book":"ratio"}`})
	if got := id(t, e, "rate_book_id"); got != book {
		t.Errorf("rate book %s, want %s", got, book)
	}
	for status, calls := range map[int][]call{
		404: {named(filled{name: "rate_book", data: "rates of nobody"}), {method: "POST", path: estimates, body: `{"rate_book":"rates of nobody"}`}},
		422: {named(filled{name: "rate_book", data: "ratio"}, filled{name: "rate_book_id", data: book}), {method: "POST", path: estimates, body: `{"rate_book":"ratio","rate_book_id":"` + book + `"}`}},
	} {
		for _, c := range calls {
			p := w.refused(status, c)
			if len(p.Faults) != 1 || p.Faults[0].Pointer != "/rate_book" || p.Faults[0].Remedy == "" {
				t.Errorf("%s: faults %+v", c.path, p.Faults)
			}
		}
	}
}

// A CSV schedule hands in its risks and what is defined as parts of the form; they are
// kept with the revision, so that a later estimate has them too, and are part of what
// an idempotency key stands for.
func TestDefinitionAndRisksBesideACSV(t *testing.T) {
	w := newWorld(t)
	var jobs []job.Job
	stub := w.run
	w.run = func(ctx context.Context, j job.Job, p engine.Progress) (document.Document, error) {
		jobs = append(jobs, j)
		return stub(ctx, j, p)
	}
	parts := []filled{{"file", "quay.csv", "text/csv", csvSchedule}, {name: "project", data: "P"}, {name: "scheme", data: "S"},
		{"definition", "definition.csv", "text/csv", "Item,State,Remark\nExecution class,Defined,EXC3 agreed\n"},
		{"risks", "risks.csv", "text/csv", "Risk,Probability (%),Low,Likely,High\nice,1,4000,5000,6000\n"}}
	first := intakeCall(parts...).with("Idempotency-Key", "k")
	_, taken := w.want(201, first)
	scheme := "/v1/schemes/" + id(t, taken, "scheme", "id")
	w.want(201, call{method: "POST", path: scheme + "/estimates", body: `{}`})
	body, contentType := formOf(parts[0], parts[3], parts[4])
	posted := call{method: "POST", path: scheme + "/schedules", body: body, contentType: contentType}
	_, revision := w.want(201, posted)
	if got, want := revision["source_sha256"], taken["schedule"].(map[string]any)["source_sha256"]; got != want {
		t.Errorf("the same posting has the hashes %v and %v", got, want)
	}
	w.want(201, call{method: "POST", path: scheme + "/estimates", body: `{}`})
	for i, j := range jobs {
		if len(j.Risks) != 1 || j.Risks[0].Name != "ice" || len(j.Settings.Definition) != 1 {
			t.Errorf("job %d has risks %+v and defined %+v", i, j.Risks, j.Settings.Definition)
		}
	}
	if len(jobs) != 3 {
		t.Errorf("%d jobs, want 3", len(jobs))
	}
	other := append(slices.Clone(parts[:4]), filled{"risks", "risks.csv", "text/csv", strings.Replace(parts[4].data, "ice,1", "ice,2", 1)})
	w.refused(409, intakeCall(other...).with("Idempotency-Key", "k"))
	bad := append(slices.Clone(parts[:4]), filled{"risks", "risks.csv", "text/csv", strings.Replace(parts[4].data, "ice,1", "ice,often", 1)})
	if p := w.refused(422, intakeCall(bad...)); len(p.Faults) != 1 || p.Faults[0].Found != "often" {
		t.Errorf("faults %+v", p.Faults)
	}
}
