package api

import (
	"archive/zip"
	"bytes"
	"encoding/json"
	"strconv"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/workbook"
)

// The engine itself behind the API: what it answers fits the OpenAPI document,
// survives reading and writing, and comes as a workbook and as CSV.
func TestEngineBehindTheAPI(t *testing.T) {
	w := newWorld(t, func(w *world, c *Config) {
		w.run = engine.Run
		c.Exports = Exports{Workbook: workbook.XLSX, CSV: workbook.CSV}
	})
	rec, taken := w.want(201, intakeCall())
	a, _ := build(Config{Exports: offered})
	checkAnswer(t, a, "intake", rec.Code, rec.Body.Bytes())
	path := "/v1/estimates/" + id(t, taken, "estimate", "id")
	for operation, part := range map[string]string{"get-estimate": "", "get-estimate-document": "/document", "get-estimate-lines": "/lines", "get-estimate-assumptions": "/assumptions",
		"get-estimate-range": "/range", "get-estimate-findings": "/findings", "get-estimate-members": "/members"} {
		rec, _ := w.want(200, call{method: "GET", path: path + part})
		checkAnswer(t, a, operation, 200, rec.Body.Bytes())
	}
	rec, _ = w.want(200, call{method: "GET", path: path + "/document"})
	d, err := document.Parse(rec.Body.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	if again, _, err := d.Canonical(); err != nil || !bytes.Equal(again, rec.Body.Bytes()) {
		t.Errorf("the document read and written again differs: %v", err)
	}
	rec, _ = w.want(200, call{method: "GET", path: path + "/document"}.with("Accept", mediaXLSX))
	if _, err := zip.NewReader(bytes.NewReader(rec.Body.Bytes()), int64(rec.Body.Len())); err != nil {
		t.Errorf("the workbook is no archive: %v", err)
	}
	rec, _ = w.want(200, call{method: "GET", path: path + "/document"}.with("Accept", "text/csv"))
	if base := d.Totals.Base.String(); !strings.Contains(rec.Body.String(), base) {
		t.Errorf("the CSV has no base of %s: %s", base, rec.Body)
	}
}

func checkAnswer(t *testing.T, a *api, operation string, status int, body []byte) {
	t.Helper()
	var v any
	if err := json.Unmarshal(body, &v); err != nil {
		t.Fatal(err)
	}
	fits(t, a, operation+", answer", operations(a)[operation].Responses[strconv.Itoa(status)].Content[mediaJSON].Schema, v)
}

// A member that no section carries is told by its mark and row.
func TestMemberThatCannotBeSized(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.run = engine.Run })
	p := w.refused(422, intakeCall(filled{"file", "q.csv", "text/csv", strings.Replace(csvSchedule, ",8,", ",80000,", 1)}, filled{name: "project", data: "P"}, filled{name: "scheme", data: "S"}))
	if len(p.Faults) != 1 || p.Faults[0].Mark != "B1" || p.Faults[0].Row != 2 || p.Faults[0].Remedy == "" {
		t.Errorf("faults %+v", p.Faults)
	}
	if n := len(w.store.tenants[w.own].projects); n != 0 {
		t.Errorf("%d projects stored", n)
	}
}
