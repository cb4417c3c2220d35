package api

import (
	"errors"
	"net/http"
	"strings"
	"testing"

	"spanwright/estimate/document"
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
		"no file":           {named, 422, "schedule is missing"},
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
