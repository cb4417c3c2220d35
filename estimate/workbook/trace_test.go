package workbook

import (
	"context"
	"strings"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// rowsOf reads the rows of a sheet as texts.
func rowsOf(t *testing.T, data []byte, name string, width int) [][]string {
	t.Helper()
	b, err := sheet.Open(data, "estimate.xlsx", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	var out [][]string
	err = b.Rows(context.Background(), name, func(_ int, cs []sheet.Cell) error {
		row := make([]string, width)
		for _, c := range cs {
			if c.Column <= width {
				row[c.Column-1] = c.Text
			}
		}
		out = append(out, row)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// Whatever a figure depends on is a figure of the trace itself, an entry of the
// register, or a stated value with its unit: no chain ends in nothing. Every
// figure of money and mass of the document is in the trace.
func TestEveryChainEnds(t *testing.T) {
	for name, d := range map[string]document.Document{"demo": brackwater(t), "unit rates": first(unitRate(t, 2, "KWD", nil))} {
		rows := rowsOf(t, write(t, d), traceSheet, 6)
		known := map[string]bool{}
		for _, r := range rows[1:] {
			if known[r[0]] {
				t.Errorf("%s: %s is traced twice", name, r[0])
			}
			known[r[0]] = true
		}
		for id := range d.Figures() {
			if !known[id] {
				t.Errorf("%s: the figure %s is not in the trace", name, id)
			}
		}
		for _, e := range d.Assumptions {
			known[e.ID] = true
		}
		known["setting/confidence"] = true // of every job
		for _, r := range rows[1:] {
			for _, on := range strings.Split(r[4], "; ") {
				if on != "" && !known[on] && !strings.HasPrefix(on, "and ") && !strings.Contains(on, " = ") && !strings.HasPrefix(on, "rate/") && !outside(d, on) {
					t.Errorf("%s: %s depends on %q, which is nowhere", name, r[0], on)
				}
			}
		}
	}
}

func first(d document.Document, _ *generator) document.Document { return d }

// outside tells the marks of items whose members a generated document leaves out.
func outside(d document.Document, id string) bool {
	for _, m := range d.Members {
		if id == "member/"+assumption.Segment(m.Mark)+"/net" {
			return false
		}
	}
	return strings.HasPrefix(id, "member/")
}

// The chain from the base to the clause of a check, link by link.
func TestTraceFromTheBaseToAClause(t *testing.T) {
	rows := rowsOf(t, write(t, brackwater(t)), traceSheet, 6)
	at := func(figure string) []string {
		for _, r := range rows {
			if r[0] == figure {
				return r
			}
		}
		t.Fatalf("no %s in the trace", figure)
		return nil
	}
	for _, c := range []struct{ figure, on, how, source string }{
		{"base", "category/fabrication", "sum of the categories", ""},
		{"category/fabrication", "line/trestles/HEB/check/trestles/fabrication", "sum of the lines", ""},
		{"line/trestles/HEB/check/trestles/fabrication", "item/trestles/HEB/check/trestles/delivered", "delivered tonnes × rate", ""},
		{"item/trestles/HEB/check/trestles/delivered", "member/T1/net", "drawn mass × factors", ""},
		{"item/trestles/HEB/check/trestles/delivered", "allowance_bolts", "", ""},
		{"allowance_bolts", "allowance/bolts", "input: Bolts, on net mass", "invented, starting book"},
		{"member/T1/net", "member/T1/check/flexural buckling", "nominal kg/m, HEB 300 S235", "row of the schedule brackwater.csv"},
		{"member/T1/check/flexural buckling", "Lcr = 12 m", "NEd / Nb,Rd; 1204 / 1110.6 kN", "EN 1993-1-1, 6.3.1"},
	} {
		r := at(c.figure)
		if !strings.Contains(r[4], c.on) || !strings.Contains(r[3], c.how) || !strings.Contains(r[5], c.source) {
			t.Errorf("%s: made as %q of %q by %q; want %q, %q, %q", c.figure, r[3], r[4], r[5], c.how, c.on, c.source)
		}
	}
}

// Sheets of what a document may lack are there when it has it.
func TestFurtherSheets(t *testing.T) {
	data := write(t, brackwater(t))
	for name, want := range map[string][]string{
		classSheet:    {"suggested by the checklist", "connections", "process plant"},
		shippingSheet: {"boom", "B1", "galvanising bath 12.5 × 1.8 × 2.8 m"},
		cuttingSheet:  {"HEB 300"},
		rangeSheet:    {"systemic/class 4", "permit for the quay comes late"},
	} {
		found := map[string]bool{}
		for _, r := range rowsOf(t, data, name, 1) {
			found[r[0]] = true
		}
		for _, w := range want {
			if !found[w] {
				t.Errorf("no row %q on %s", w, name)
			}
		}
	}
	b, err := sheet.Open(write(t, estimate(t, "EUR", nil)), "estimate.xlsx", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range b.Sheets() {
		if s == classSheet || s == shippingSheet || s == cuttingSheet || s == carbonSheet {
			t.Errorf("the document has nothing for the sheet %s", s)
		}
	}
}
