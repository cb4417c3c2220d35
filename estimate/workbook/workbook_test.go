package workbook

import (
	"bytes"
	"context"
	"errors"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// cells reads a workbook back: sheet → address → text.
func cells(t *testing.T, data []byte) map[string]map[string]string {
	t.Helper()
	b, err := sheet.Open(data, "estimate.xlsx", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]map[string]string{}
	for _, name := range b.Sheets() {
		out[name] = map[string]string{}
		err := b.Rows(context.Background(), name, func(row int, cs []sheet.Cell) error {
			for _, c := range cs {
				if c.Kind == sheet.FormulaWithoutValue || c.Kind == sheet.ErrorValue {
					t.Errorf("%s row %d column %d holds %v %q", name, row, c.Column, c.Kind, c.Text)
				}
				out[name][sheet.Address{Row: row, Column: c.Column}.String()] = c.Text
			}
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	return out
}

func write(t *testing.T, d document.Document) []byte {
	t.Helper()
	data, err := XLSX(d)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// same compares a cell with an amount as numbers, because a workbook has no
// trailing zeros.
func same(t *testing.T, where, cell string, want money.Decimal) {
	t.Helper()
	got, err := money.Parse(cell)
	if err != nil || !got.Equal(want) {
		t.Errorf("%s is %q, want %s", where, cell, want)
	}
}

// find returns the address of the first cell of column A that holds a text.
func find(t *testing.T, cells map[string]string, label string) int {
	t.Helper()
	for row := 1; row < 2000; row++ {
		if cells[sheet.Address{Row: row, Column: 1}.String()] == label {
			return row
		}
	}
	t.Fatalf("no row %q among %v", label, cells)
	return 0
}

// at reads a cell by its column's letter and row.
func at(cells map[string]string, letter string, row int) string {
	return cells[letter+sheet.Address{Row: row}.String()]
}

func TestCachedValuesAreTheDocuments(t *testing.T) {
	d := brackwater(t)
	book := cells(t, write(t, d))
	lines := book[linesSheet]
	for i, l := range d.Lines {
		row := firstRow + i
		if got := at(lines, "A", row); got != l.ID {
			t.Errorf("row %d is %q, want %q", row, got, l.ID)
		}
		same(t, l.ID+" quantity", at(lines, "E", row), l.Quantity)
		same(t, l.ID+" rate", at(lines, "G", row), l.Rate)
		for j, m := range l.Multipliers {
			same(t, l.ID+" multiplier", at(lines, sheet.Letters(8+j), row), m.Value)
		}
		same(t, l.ID+" unit price", at(lines, "J", row), l.UnitPrice)
		same(t, l.ID+" amount", at(lines, "K", row), l.Amount)
	}
	same(t, "total of the lines", at(lines, "K", find(t, lines, "base estimate")), d.Totals.Base)
	categories := book[categoriesSheet]
	for i, c := range d.Categories {
		same(t, c.Category, at(categories, "B", firstRow+i), c.Amount)
	}
	same(t, "total of the categories", at(categories, "B", find(t, categories, "base estimate")), d.Totals.Base)
	for _, g := range d.Groups {
		same(t, g.Group, at(book[groupsSheet], "B", find(t, book[groupsSheet], g.Group)), g.Amount)
	}
	s := book[summarySheet]
	same(t, "base", at(s, "B", find(t, s, "base estimate")), d.Totals.Base)
	same(t, "contingency", at(s, "B", find(t, s, "contingency")), d.Totals.Contingency)
	same(t, "at confidence", at(s, "B", find(t, s, "at the chosen confidence")), d.Totals.AtConfidence)
	same(t, "delivered", at(s, "B", find(t, s, "delivered, t")), d.Totals.Delivered)
	_, sum, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	for label, want := range map[string]string{"project": d.Job.Project, "base date": "2026-06-01", "currency": "EUR",
		"unsafe findings": "2", "engine version": strconv.Itoa(document.EngineVersion), "estimate class": "4", "chosen confidence": "80%"} {
		if got := at(s, "B", find(t, s, label)); got != want {
			t.Errorf("%s is %q, want %q", label, got, want)
		}
	}
	if got := at(s, "D", find(t, s, "estimate document")); got != sum {
		t.Errorf("hash of the document is %q, want %q", got, sum)
	}
}

func TestCautionComesFirst(t *testing.T) {
	d := brackwater(t)
	book := cells(t, write(t, d))
	if got := book[summarySheet]["A1"]; got != document.Caution {
		t.Errorf("Summary begins with %q", got)
	}
	if got := book[summarySheet]["A2"]; !strings.HasPrefix(got, "UNSAFE: 2 findings") {
		t.Errorf("Summary goes on with %q", got)
	}
	if got := book[scheduleSheet]["A2"]; got != document.Caution {
		t.Errorf("Members begins with %q", got)
	}
	if got := Table(d); !strings.HasPrefix(strings.Join(strings.Fields(got), " "), document.Caution) {
		t.Errorf("the table begins with %.150q", got)
	}
}

func TestMembersShowSizingAndUnsafeMarks(t *testing.T) {
	m := cells(t, write(t, brackwater(t)))[scheduleSheet]
	for _, c := range []struct{ mark, section, governing, utilisation, unsafe string }{
		{"B1", "CHS 508 × 16", "deflection", "0.9712", "UNSAFE: shortcut"}, {"B2", "CHS 711 × 20", "bending", "0.8123", ""},
		{"T1", "HEB 300", "flexural buckling", "1.0841", "UNSAFE: fails"}, {"W1", "", "", "", ""},
	} {
		row := find(t, m, c.mark)
		got := []string{at(m, "G", row), at(m, "K", row), at(m, "L", row), at(m, "M", row)}
		if d := cmp.Diff([]string{c.section, c.governing, c.utilisation, c.unsafe}, got); d != "" {
			t.Errorf("%s: %s", c.mark, d)
		}
	}
}

func TestAssumptionsShowTheirSpread(t *testing.T) {
	a := cells(t, write(t, brackwater(t)))[assumptionsSheet]
	for _, c := range []struct {
		id   string
		want []string
	}{
		{"allowance/bolts", []string{"pert", "0.01", "0.02", "0.03", "limits"}},
		{"setting/confidence", []string{"", "", "", "", ""}},
		{"systemic/class 4", []string{"lognormal", "0.794", "1", "1.2595", "p10-p90"}},
	} {
		row := find(t, a, c.id)
		got := []string{}
		for _, letter := range []string{"F", "G", "H", "I", "J"} {
			got = append(got, at(a, letter, row))
		}
		if d := cmp.Diff(c.want, got); d != "" {
			t.Errorf("%s: %s", c.id, d)
		}
	}
}

func TestScopeListsEverything(t *testing.T) {
	d := brackwater(t)
	book := cells(t, write(t, d))
	var got []string
	for row := 2; row <= 7; row++ {
		got = append(got, at(book[scopeSheet], "A", row)+": "+at(book[scopeSheet], "B", row))
	}
	want := []string{"included: Steelwork as scheduled", "included: Connections, bolts, growth", "excluded: Foundations",
		"excluded: Taxes", "excluded: Fatigue checks", "note: Rates are invented."}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	if got := book[findingsSheet]; got["A2"] != "UNSAFE" || got["C3"] != "T1" || got["A5"] != "notice" {
		t.Errorf("findings are %v", got)
	}
}

// Percentiles stand in rows 2 to 5 with the contingency that each needs, mean and
// deviation below them, then what the reader must know, then the curve of 101 points.
func TestRangeSheet(t *testing.T) {
	d := brackwater(t)
	d.Range.Percentiles[3].Contingency = decimal(t, "259999.99")
	d.Range.Sensitivities = []document.Sensitivity{{Assumption: "allowance/bolts", Share: 0.25, Swing: 1234.5, Narrowing: 4321}}
	d.Range.Risks = []document.RiskRange{{Assumption: "risk/1", Name: "late permit", Probability: 0.2, Mean: 900, Share: 0.01, Contingency: decimal(t, "12.34")}}
	r := cells(t, write(t, d))[rangeSheet]
	curve := find(t, r, "cumulative curve")
	for _, c := range []struct {
		row           int
		label, column string
		value         float64
	}{
		{2, "10%", "B", d.Range.Percentiles[0].Value.Rounded()}, {5, "90%", "B", d.Range.Percentiles[3].Value.Rounded()}, {5, "90%", "D", 259999.99},
		{6, "mean", "B", d.Range.Mean.Rounded()}, {find(t, r, "allowance/bolts"), "allowance/bolts", "B", 4321}, {find(t, r, "late permit"), "late permit", "D", 12.34},
		{curve + 1, "0%", "B", d.Range.Curve[0].Rounded()}, {curve + 51, "50%", "B", d.Range.Curve[50].Rounded()}, {curve + 101, "100%", "B", d.Range.Curve[100].Rounded()},
	} {
		if got := at(r, "A", c.row); got != c.label {
			t.Errorf("row %d is %q, want %q", c.row, got, c.label)
		}
		value, err := strconv.ParseFloat(at(r, c.column, c.row), 64)
		if err != nil || value != c.value {
			t.Errorf("%s%d holds %q, want %v", c.column, c.row, at(r, c.column, c.row), c.value)
		}
	}
	find(t, r, fromSimulation)
}

func TestSameBytesEveryTime(t *testing.T) {
	first := write(t, brackwater(t))
	for range 3 {
		if !bytes.Equal(first, write(t, brackwater(t))) {
			t.Fatal("two workbooks of one document differ")
		}
	}
	a, err := CSV(brackwater(t))
	b, _ := CSV(brackwater(t))
	if err != nil || !bytes.Equal(a, b) {
		t.Errorf("two CSV files of one document differ, %v", err)
	}
}

// The texts are the ways to start a formula that OWASP's page on CSV injection
// lists (from memory).
func TestTextsCannotRun(t *testing.T) {
	for _, evil := range []string{"=1+1", "+1", "-1", "@SUM(A1)", "\t=1", "\r=1", `=HYPERLINK("http://x")`} {
		d := brackwater(t)
		d.Job.Project, d.Job.Scheme, d.Members[0].Mark, d.Findings[0].Message = evil, evil, evil, evil
		d.Lines[0].Multipliers = []document.Multiplier{{Name: evil, Scope: evil, Value: money.FromInt(1)}}
		for i := range d.Lines {
			if d.Lines[i].Group == "boom" {
				d.Lines[i].Group = evil
			}
		}
		d.Groups[0].Group = evil
		data := write(t, d)
		for _, xml := range parts(t, data, "xl/worksheets/", "xl/sharedStrings") {
			for _, s := range textsOf(xml) {
				if strings.ContainsRune("=+-@\t\r", rune(s[0])) {
					t.Errorf("%q: the workbook holds the text %q", evil, s)
				}
			}
		}
		csv, err := CSV(d)
		if err != nil {
			t.Fatal(err)
		}
		for _, line := range strings.Split(string(csv), "\r\n")[1:] {
			for _, field := range strings.Split(line, ",") {
				if field = strings.TrimPrefix(field, `"`); strings.HasPrefix(field, "=") || strings.HasPrefix(field, "@") || strings.HasPrefix(field, "+") {
					t.Errorf("%q: CSV holds the field %q", evil, field)
				}
			}
		}
	}
}

func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		name   string
		change func(*document.Document)
		want   string
	}{
		{"a line that does not compute", func(d *document.Document) { d.Lines[1].Amount = d.Lines[1].Amount.Add(decimal(t, "0.01")) }, "line/boom/CHS/size/tube boom/fabrication: quantity × unit price is"},
		{"lines and base", func(d *document.Document) { d.Totals.Base = decimal(t, "1.00") }, "the document's base is 1.00"},
		{"lines and category", func(d *document.Document) { d.Categories[0].Amount = decimal(t, "1.00") }, `category "material" add up to`},
		{"a missing category", func(d *document.Document) { d.Categories = d.Categories[1:] }, "the categories add up to"},
		{"a currency", func(d *document.Document) { d.Job.Currency = "EURO" }, "EUR"},
		{"not a number", func(d *document.Document) { d.Range.Mean = document.Number(nan()) }, "NaN"},
		{"too many digits", func(d *document.Document) { d.Lines[0].Quantity = decimal(t, "81.9150000000001234") }, "significant digits"},
	} {
		d := brackwater(t)
		c.change(&d)
		if _, err := XLSX(d); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: XLSX error is %v, want one with %q", c.name, err, c.want)
		}
		if _, err := CSV(d); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: CSV error is %v, want one with %q", c.name, err, c.want)
		}
	}
}

func nan() float64 { z := 0.0; return z / z }

func TestEmptyDocument(t *testing.T) {
	d := document.Document{EngineVersion: document.EngineVersion, Caution: document.Caution, Job: document.Job{Currency: "JPY"}}
	book := cells(t, write(t, d))
	if got := book[linesSheet]["I2"]; got != "0" {
		t.Errorf("base of no lines is %q, want 0", got)
	}
	if got := Table(d); !strings.Contains(got, "base estimate") {
		t.Errorf("table of no lines:\n%s", got)
	}
}

func TestCSV(t *testing.T) {
	d := estimate(t, "EUR", []plainLine{
		{"boom", "material", "1.005", "1", nil},
		{"boom, inner", "fabrication", "2.000", "0.5", []string{"1.10"}},
	})
	got, err := CSV(d)
	if err != nil {
		t.Fatal(err)
	}
	want := strings.Join([]string{
		"id,group,category,driver,quantity,unit,rate,m1,unit price,amount,currency,multipliers",
		"line/item 1/material,boom,material,delivered tonnes,1.005,t,1,,1.0000,1.01,EUR,",
		`line/item 2/fabrication,"boom, inner",fabrication,delivered tonnes,2.000,t,0.5,1.10,0.5500,1.10,EUR,"m1 multiplier 1 (group boom, inner)"`,
		"category/material,,material,,,,,,,1.01,EUR,",
		"category/fabrication,,fabrication,,,,,,,1.10,EUR,",
		"base,,,,,,,,,2.11,EUR,", "",
	}, "\r\n")
	if diff := cmp.Diff(want, string(got)); diff != "" {
		t.Error(diff)
	}
}

// An estimate of the first engine does not state what live formulas need: it is
// refused by name, never written with holes.
func TestAnEarlierEstimateIsRefusedByName(t *testing.T) {
	d := brackwater(t)
	d.EngineVersion = 1
	for name, write := range map[string]func(document.Document) ([]byte, error){"XLSX": XLSX, "CSV": CSV} {
		if _, err := write(d); !errors.Is(err, document.ErrEarlier) {
			t.Errorf("%s: got %v, want %v", name, err, document.ErrEarlier)
		}
	}
}
