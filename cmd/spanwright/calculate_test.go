package main

import (
	"bytes"
	"context"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"spanwright/estimate/document"
)

// calculateWith runs the subcommand and returns its code and what it printed.
func calculateWith(input string, args ...string) (int, string, string) {
	var out, errs bytes.Buffer
	p := &program{stdin: strings.NewReader(input), stdout: &out, stderr: &errs, getenv: func(string) string { return "" }}
	code := p.main(context.Background(), append([]string{"calculate"}, args...))
	return code, out.String(), errs.String()
}

const boomJSON = `{"length_m": 50, "section": "CHS 508x25.4", "grade": "S355",
  "supports": [{"position_m": 0, "kind": "pinned"}, {"position_m": 33.333333333333336, "kind": "pinned"}]}`

const steelJSON = `"candidates": ["CHS"], "grade": "S355", "design_basis": "en1993"`

// Every calculator answers the JSON of its request with the caution.
func TestCalculate(t *testing.T) {
	for name, row := range map[string]struct{ request, holds string }{
		"beam":         {boomJSON, `"max_kn": 111.17`},
		"section":      {`{"designation": "ipe300"}`, `"designation": "IPE 300"`},
		"resistance":   {`{"section": "IPE 300", "grade": "S235", "design_basis": "en1993", "demand": {"shear_kn": 10}}`, `"id": "shear"`},
		"sizing":       {`{"length_m": 5, "upright": true, "axial_kn": 300, ` + steelJSON + `}`, `"passes": true`},
		"arrangements": {`{"length_m": 20, "kinds": ["equal spans"], "equal_spans": [2], ` + steelJSON + `}`, `"kind": "equal spans"`},
		"cutting-plan": {`{"pieces": [{"mark": "B1", "length_m": 6.05, "count": 24}], "stock": [{"length_m": 12.1}, {"length_m": 15.1}], "kerf_mm": 5}`, `"bars": 12`},
		"range":        {`{"lines": [{"id": "steel", "amount": 1000, "spread": {"distribution": "fixed", "likely": 1}}], "trials": 64}`, `"mean": 1000`},
	} {
		code, out, errs := calculateWith(row.request, name)
		var answer struct{ Caution string }
		if err := json.Unmarshal([]byte(out), &answer); code != 0 || err != nil || answer.Caution != document.Caution {
			t.Errorf("%s: code %d, %v, caution %q, %s", name, code, err, answer.Caution, errs)
		}
		if !strings.Contains(out, row.holds) {
			t.Errorf("%s: the answer does not hold %s", name, row.holds)
		}
	}
}

// A file in and a file out; the drawing is the same each time.
func TestCalculateDrawing(t *testing.T) {
	dir := t.TempDir()
	in, out := filepath.Join(dir, "boom.json"), filepath.Join(dir, "boom.svg")
	if err := os.WriteFile(in, []byte(boomJSON), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errs := calculateWith("", "beam", "--format", "svg", "--out", out, in); code != 0 {
		t.Fatal(errs)
	}
	written, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	_, printed, _ := calculateWith(boomJSON, "beam", "--format", "svg", "-")
	if string(written) != printed || !strings.HasPrefix(printed, "<svg ") || !strings.Contains(printed, "−412") {
		t.Errorf("the drawing of %d bytes differs from that of %d bytes, or is none", len(written), len(printed))
	}
}

func TestCalculateRefusals(t *testing.T) {
	for name, row := range map[string]struct {
		input string
		args  []string
		code  int
		says  []string
	}{
		"no calculator":      {"", nil, 2, []string{"usage: spanwright calculate"}},
		"too many arguments": {"", []string{"beam", "a", "b"}, 2, []string{"usage"}},
		"unknown calculator": {"{}", []string{"truss"}, 1, []string{`"truss"`, "beam, section, resistance, sizing, arrangements"}},
		"unknown format":     {"{}", []string{"beam", "--format", "pdf"}, 1, []string{`"pdf"`, "json"}},
		"no drawing of it":   {"{}", []string{"section", "--format", "svg"}, 1, []string{"svg", "section"}},
		"no such file":       {"", []string{"beam", "nowhere.json"}, 1, []string{"nowhere.json"}},
		"no JSON":            {"length 5", []string{"beam"}, 1, []string{"not JSON", "a fault in the request"}},
		"unknown field":      {`{"colour": 1}`, []string{"beam"}, 1, []string{"unknown field", "colour"}},
		"key twice":          {`{"length_m": 1, "length_m": 2}`, []string{"beam"}, 1, []string{"/length_m", "given twice"}},
		"faults":             {`{"length_m": 5, "section": "IPE 301"}`, []string{"beam"}, 1, []string{"/supports", "/section", "IPE 300", "2 faults"}},
	} {
		code, out, errs := calculateWith(row.input, row.args...)
		if code != row.code || out != "" {
			t.Errorf("%s: code %d, want %d; printed %q", name, code, row.code, out)
		}
		for _, want := range row.says {
			if !strings.Contains(errs, want) {
				t.Errorf("%s: %q does not say %q", name, errs, want)
			}
		}
	}
}
