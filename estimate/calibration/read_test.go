package calibration

import (
	"context"
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// demoCSV is the invented table of 24 jobs.
func demoCSV(t testing.TB) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", "outturns.csv"))
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func readTable(t testing.TB, data []byte, name string, o Options) ([]Outturn, error) {
	t.Helper()
	book, err := sheet.Open(data, name, "", sheet.DefaultLimits())
	if err != nil {
		t.Fatalf("opening: %v", err)
	}
	return Read(context.Background(), book, o)
}

func demo(t testing.TB) []Outturn {
	t.Helper()
	list, err := readTable(t, []byte(demoCSV(t)), "outturns.csv", Options{})
	if err != nil {
		t.Fatalf("reading the demo: %v", err)
	}
	return list
}

// table is a small CSV whose columns a test names by head: cells replace those of
// one sound row.
var soundRow = []struct{ head, cell string }{
	{"Job", "Pan walkway"}, {"Completed", "2023-09-30"}, {"Currency", "EUR"}, {"Class", "4"}, {"Kind", "trestles"},
	{"Take-off mass (kg)", "41800"}, {"Drawing mass (kg)", "45100"}, {"Weighed mass (kg)", "46300"},
	{"Estimate fabrication", "90000"}, {"Outturn fabrication", "99000.50"},
	{"P10", "80000"}, {"P50", "90000"}, {"P80", "100000"}, {"P90", "110000"},
	{"Estimate currency", "EUR"}, {"Estimate base date", "2022-06-30"}, {"Source", "final account"},
}

// tableWith is the sound row with cells replaced and heads renamed ("old=>new").
func tableWith(cells map[string]string, rename map[string]string) string {
	var heads, row []string
	for _, c := range soundRow {
		head, cell := c.head, c.cell
		if v, ok := cells[head]; ok {
			cell = v
		}
		if v, ok := rename[head]; ok {
			head = v
		}
		heads, row = append(heads, `"`+head+`"`), append(row, `"`+cell+`"`)
	}
	return strings.Join(heads, ",") + "\n" + strings.Join(row, ",") + "\n"
}

var sameMoney = cmp.Comparer(func(a, b money.Decimal) bool { return a.Equal(b) })

func TestDemoReads(t *testing.T) {
	list := demo(t)
	if len(list) != 24 {
		t.Fatalf("got %d jobs, want 24", len(list))
	}
	for _, o := range list {
		if !strings.Contains(o.Source+o.Remarks, "invented") {
			t.Errorf("%s does not say that it is invented", o.Job)
		}
	}
}

// The same jobs from CSV, from a workbook in t and lb, and from JSON.
func TestFormsAgree(t *testing.T) {
	want := demo(t)
	data, err := json.Marshal(map[string]any{"outturns": want})
	if err != nil {
		t.Fatal(err)
	}
	fromJSON, err := ReadJSON(data, Options{})
	if err != nil {
		t.Fatalf("reading JSON: %v", err)
	}
	if diff := cmp.Diff(want, fromJSON, sameMoney); diff != "" {
		t.Errorf("JSON (-csv +json):\n%s", diff)
	}
	fromBook, err := readTable(t, demoWorkbook(t), "outturns.xlsx", Options{})
	if err != nil {
		t.Fatalf("reading the workbook: %v", err)
	}
	if diff := cmp.Diff(want, fromBook, sameMoney); diff != "" {
		t.Errorf("workbook (-csv +xlsx):\n%s", diff)
	}
}

// demoWorkbook is the demo's table as XLSX beside another sheet.
func demoWorkbook(t *testing.T) []byte {
	t.Helper()
	b := sheet.NewBuilder()
	b.Sheet("Notes")
	b.Row(sheet.TextOf("invented"))
	b.Sheet("Outturns")
	book, err := sheet.Open([]byte(demoCSV(t)), "outturns.csv", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	err = book.Rows(context.Background(), "", func(_ int, cells []sheet.Cell) error {
		row := make([]sheet.Value, len(definitions))
		for _, c := range cells {
			row[c.Column-1] = sheet.TextOf(c.Text)
			if day, err := time.Parse(time.DateOnly, c.Text); err == nil {
				row[c.Column-1] = sheet.DateOf(day)
			}
			if _, err := money.Parse(c.Text); err == nil {
				row[c.Column-1] = sheet.NumberOf(c.Text, sheet.General)
			}
		}
		b.Row(row...)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func TestUnitsAndDecimalComma(t *testing.T) {
	list, err := readTable(t, []byte(tableWith(map[string]string{"Take-off mass (kg)": "41.8", "Drawing mass (kg)": "100000", "Weighed mass (kg)": "46.3 t"},
		map[string]string{"Take-off mass (kg)": "take-off mass (t)", "Drawing mass (kg)": "Drawing mass (lb)"})), "a.csv", Options{})
	if err != nil {
		t.Fatal(err)
	}
	o := list[0]
	// 1 lb = 0.45359237 kg exactly (international yard and pound agreement, 1959).
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"take-off", o.TakeOffMass, 41800}, {"drawing", o.DrawingMass, 45359.237}, {"weighed", o.WeighedMass, 46300}} {
		if c.got != c.want {
			t.Errorf("%s mass: got %v kg, want %v", c.name, c.got, c.want)
		}
	}
	if got := o.Costs[Fabrication].String(); got != "99000.50" {
		t.Errorf("amount: got %s, want 99000.50", got)
	}
	if _, there := o.Costs[Erection]; there {
		t.Error("a category without a column is there")
	}
	comma := tableWith(map[string]string{"Outturn fabrication": "99.000,50", "Take-off mass (kg)": "41.800,5"}, nil)
	list, err = readTable(t, []byte(strings.ReplaceAll(comma, `","`, `";"`)), "comma.csv", Options{})
	if err != nil {
		t.Fatal(err)
	}
	if got := list[0].Costs[Fabrication].String(); got != "99000.50" || list[0].TakeOffMass != 41800.5 {
		t.Errorf("decimal comma: got %s and %v kg, want 99000.50 and 41800.5", got, list[0].TakeOffMass)
	}
}

func TestFaultsNameTheCell(t *testing.T) {
	for _, c := range []struct {
		name          string
		cells, rename map[string]string
		cell          string
		words         []string
	}{
		{"zero tonnage", map[string]string{"Weighed mass (kg)": "0"}, nil, "H2", []string{"Weighed mass", "without tonnage"}},
		{"zero tonnage with unit", map[string]string{"Take-off mass (kg)": "0 t"}, nil, "F2", []string{"Take-off", "without tonnage"}},
		{"negative tonnage", map[string]string{"Drawing mass (kg)": "-3"}, nil, "G2", []string{"negative tonnage"}},
		{"blank tonnage", map[string]string{"Weighed mass (kg)": ""}, nil, "H2", []string{"is blank"}},
		{"a slip of the unit", map[string]string{"Weighed mass (kg)": "46.3"}, nil, "H2", []string{"0.00111 times the take-off mass", "or its unit"}},
		{"a force", map[string]string{"Weighed mass (kg)": "46 kN"}, nil, "H2", []string{"46 kN"}},
		{"negative cost", map[string]string{"Outturn fabrication": "-1"}, nil, "J2", []string{"negative cost"}},
		{"no amount", map[string]string{"Outturn fabrication": "12,34"}, nil, "J2", []string{"no amount"}},
		{"not a number", map[string]string{"Outturn fabrication": "NaN"}, nil, "J2", []string{"no amount"}},
		{"unknown currency", map[string]string{"Currency": "EUX"}, nil, "C2", []string{"no currency", "EUR"}},
		{"unknown estimate currency", map[string]string{"Estimate currency": "eur"}, nil, "O2", []string{"no currency", "EUR"}},
		{"completed before the estimate", map[string]string{"Completed": "2021-01-01"}, nil, "B2", []string{"2021-01-01", "before the estimate base date 2022-06-30"}},
		{"no date", map[string]string{"Completed": "31.12.2023"}, nil, "B2", []string{"no date"}},
		{"percentiles out of order", map[string]string{"P80": "85000"}, nil, "M2", []string{"85000", "below P50, 90000"}},
		{"percentile of nothing", map[string]string{"P10": "0"}, nil, "K2", []string{"no cost of a whole job"}},
		{"unknown class", map[string]string{"Class": "7"}, nil, "D2", []string{"no estimate class"}},
		{"unknown kind", map[string]string{"Kind": "trestle"}, nil, "E2", []string{"did you mean trestles?"}},
		{"no outturn cost", map[string]string{"Outturn fabrication": ""}, nil, "2", []string{"no outturn cost"}},
		{"no estimate", map[string]string{"Estimate fabrication": ""}, nil, "2", []string{"no past estimate"}},
		{"misspelt head", nil, map[string]string{"Outturn fabrication": "Outturn fabricaton"}, "J1", []string{"did you mean Outturn fabrication?"}},
		{"head in other words", nil, map[string]string{"P10": "Actual coating"}, "K1", []string{"did you mean Outturn coating?"}},
		{"mass without unit", nil, map[string]string{"Weighed mass (kg)": "Weighed mass"}, "H1", []string{"mass without a unit", "Weighed mass (kg)"}},
		{"mass in tons", nil, map[string]string{"Weighed mass (kg)": "Weighed mass (ton)"}, "H1", []string{"ton", "not read"}},
		{"unit of money", nil, map[string]string{"P10": "P10 (kg)"}, "K1", []string{"column without a unit"}},
		{"column twice", nil, map[string]string{"P10": "P50"}, "L1", []string{"second time", "column K"}},
		{"missing column", nil, map[string]string{"Source": "Remarks"}, "1", []string{"column Source is missing"}},
		{"under no head", nil, map[string]string{"Class": ""}, "D2", []string{"under no head"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := readTable(t, []byte(tableWith(c.cells, c.rename)), "a.csv", Options{})
			var faults sheet.Faults
			if !errors.As(err, &faults) {
				t.Fatalf("got %v, want faults", err)
			}
			if len(faults) != 1 {
				t.Fatalf("got %d faults, want 1: %v", len(faults), err)
			}
			if got := faults[0].Address.String(); got != c.cell {
				t.Errorf("cell: got %s, want %s (%v)", got, c.cell, faults[0])
			}
			for _, w := range c.words {
				if !strings.Contains(faults[0].Error(), w) {
					t.Errorf("%q lacks %q", faults[0].Error(), w)
				}
			}
		})
	}
}

func TestAllFaultsAtOnce(t *testing.T) {
	bad := tableWith(map[string]string{"Weighed mass (kg)": "0", "Currency": "XXX", "P90": "1", "Completed": "2020-01-01"}, nil)
	row := strings.Split(tableWith(nil, nil), "\n")[1]
	_, err := readTable(t, []byte(bad+row+"\n"), "a.csv", Options{})
	var faults sheet.Faults
	if !errors.As(err, &faults) {
		t.Fatalf("got %v, want faults", err)
	}
	var got []string
	for _, f := range faults {
		got = append(got, f.Address.String())
	}
	if diff := cmp.Diff([]string{"B2", "C2", "H2", "N2", "A3"}, got); diff != "" {
		t.Errorf("cells (-want +got):\n%s", diff)
	}
	if !strings.Contains(faults[4].Error(), "stands in row 2 already") {
		t.Errorf("a job twice: got %q", faults[4].Error())
	}
}

func TestEmptyTables(t *testing.T) {
	heads := strings.Split(tableWith(nil, nil), "\n")[0]
	if _, err := readTable(t, []byte(heads+"\n"), "a.csv", Options{}); err == nil || !strings.Contains(err.Error(), "no row under the header") {
		t.Errorf("got %v", err)
	}
	b := sheet.NewBuilder()
	b.Sheet("Outturns")
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := readTable(t, data, "a.xlsx", Options{}); err == nil || !strings.Contains(err.Error(), "the table is empty") {
		t.Errorf("got %v", err)
	}
	b = sheet.NewBuilder()
	b.Sheet("A")
	b.Sheet("B")
	if data, err = b.Bytes(); err != nil {
		t.Fatal(err)
	}
	if _, err := readTable(t, data, "a.xlsx", Options{}); err == nil || !strings.Contains(err.Error(), "does not say which sheet") {
		t.Errorf("got %v", err)
	}
}

func TestTemplateReads(t *testing.T) {
	data, err := Template()
	if err != nil {
		t.Fatal(err)
	}
	list, err := readTable(t, data, "template.xlsx", Options{})
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 1 || len(list[0].Costs) != len(categories) || list[0].Estimate.P90 == nil || list[0].WeighedMass != 46300 {
		t.Errorf("got %+v", list)
	}
}

func TestColumnsAreComplete(t *testing.T) {
	fields := map[string]bool{}
	for _, c := range Columns() {
		if c.Header == "" || c.Field == "" || c.Accepts == "" || c.Meaning == "" || c.Example == "" || fields[c.Field] {
			t.Errorf("incomplete or double column %+v", c)
		}
		fields[c.Field] = true
	}
}

// No table makes the reader panic, and what it accepts has tonnage and a past.
func FuzzRead(f *testing.F) {
	f.Add(tableWith(nil, nil))
	f.Add(tableWith(map[string]string{"Weighed mass (kg)": "0"}, map[string]string{"P10": "p 10 (t)"}))
	f.Fuzz(func(t *testing.T, csv string) {
		book, err := sheet.Open([]byte(csv), "a.csv", "", sheet.DefaultLimits())
		if err != nil {
			return
		}
		list, err := Read(context.Background(), book, Options{})
		if err != nil {
			return
		}
		for _, o := range list {
			if !(o.TakeOffMass > 0 && o.WeighedMass > 0) || len(o.Costs) == 0 || len(o.Estimate.Base) == 0 || o.Completed < o.Estimate.BaseDate {
				t.Errorf("accepted %+v", o)
			}
		}
	})
}
