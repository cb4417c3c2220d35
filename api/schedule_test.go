package api

import (
	"net/http"
	"strings"
	"testing"
)

const jsonSchedule = `{"rows":[{"Mark":"B1","Quantity":4,"Length (m)":6,"Support":"simple","Permanent load (kN/m)":8,"Variable load (kN/m)":2,"Section or family":"IPE","Grade":"S355"}]}`

func TestSchedulePosting(t *testing.T) {
	form, formType := formOf(filled{"file", "form.csv", "text/csv", csvSchedule})
	for name, c := range map[string]struct {
		body, contentType, header, value string
		file, source                     string
	}{
		"csv":                 {csvSchedule, "text/csv", "X-File-Name", "quay.csv", "quay.csv", mediaCSV},
		"csv with parameters": {csvSchedule, "text/csv; charset=utf-8; header=present", "Content-Disposition", `attachment; filename="quay 2.csv"`, "quay 2.csv", mediaCSV},
		"without a name":      {csvSchedule, "text/csv", "X-Other", "", "schedule", mediaCSV},
		"bytes":               {csvSchedule, mediaBytes, "X-File-Name", "../../etc/quay.csv", "quay.csv", mediaCSV},
		"json":                {jsonSchedule, mediaJSON, "Content-Disposition", "attachment; filename*=UTF-8''k%C3%A4i.json", "käi.json", mediaJSON},
		"form":                {form, formType, "X-File-Name", "not this.csv", "form.csv", mediaCSV},
	} {
		t.Run(name, func(t *testing.T) {
			w := newWorld(t)
			ids := stock(w)
			rec, body := w.want(201, call{method: "POST", path: "/v1/schemes/" + ids["scheme"] + "/schedules", body: c.body, contentType: c.contentType}.with(c.header, c.value))
			if body["source_name"] != c.file || body["number"] != 2.0 || body["members"] != 1.0 {
				t.Errorf("stored %v, want the name %q, number 2, 1 member", body, c.file)
			}
			location := rec.Header().Get("Location")
			_, read := w.want(200, call{method: "GET", path: location})
			if read["id"] != body["id"] {
				t.Errorf("Location %s leads to %v", location, read)
			}
			want := c.body
			if c.contentType == formType {
				want = csvSchedule
			}
			source, _ := w.want(200, call{method: "GET", path: location + "/source"})
			if source.Body.String() != want || source.Header().Get("Content-Type") != c.source || !strings.HasPrefix(source.Header().Get("Content-Disposition"), "attachment; filename") {
				t.Errorf("source: %v %q", source.Header(), source.Body)
			}
			w.want(201, call{method: "POST", path: "/v1/schemes/" + ids["scheme"] + "/estimates", body: `{}`})
		})
	}
}

func TestScheduleRefusals(t *testing.T) {
	w := newWorld(t)
	path := "/v1/schemes/" + stock(w)["scheme"] + "/schedules"
	for _, c := range []struct {
		body, contentType string
		status            int
		says              string
	}{
		{strings.Replace(csvSchedule, "simple", "dangling", 1), "text/csv", 422, "dangling"},
		{"%PDF-1.7 x", mediaBytes, 415, "PDF"},
		{csvSchedule, mediaXLSX, 415, "declared"},
		{"PK\x03\x04 no workbook", mediaXLSX, 422, ""},
		{strings.Replace(jsonSchedule, `"Quantity":4`, `"Quantity":-4`, 1), mediaJSON, 422, "Quantity"},
		{strings.Replace(jsonSchedule, `"Quantity":4`, `"Quantity":4,"Quantity":5`, 1), mediaJSON, 400, "twice"},
		{`{"rows":[`, mediaJSON, 400, "too early"},
	} {
		rec, _ := w.want(c.status, call{method: "POST", path: path, body: c.body, contentType: c.contentType})
		if !strings.Contains(rec.Body.String(), c.says) {
			t.Errorf("%.20q: %s does not say %q", c.body, rec.Body, c.says)
		}
	}
	if n := len(w.store.tenants[w.own].revisions); n != 1 {
		t.Errorf("%d revisions stored, want the first alone", n)
	}
}

func TestSourceType(t *testing.T) {
	for data, want := range map[string]string{"PK\x03\x04": mediaXLSX, " \n{}": mediaJSON, "Mark,": mediaCSV, "": mediaCSV} {
		if got := sourceType([]byte(data)); got != want {
			t.Errorf("%q: %s, want %s", data, got, want)
		}
	}
}

func TestFileName(t *testing.T) {
	for _, c := range []struct{ name, value, want string }{
		{"X-File-Name", "a.csv", "a.csv"}, {"Content-Disposition", `form-data; name="x"`, ""}, {"Content-Disposition", "nonsense;;", ""}, {"Accept", "a.csv", ""},
	} {
		if got := fileName(http.Header{c.name: {c.value}}); got != c.want {
			t.Errorf("%s: %s: %q, want %q", c.name, c.value, got, c.want)
		}
	}
}
