package main

import (
	"bytes"
	"encoding/csv"
	"flag"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
)

var update = flag.Bool("update", false, "write the files that tests compare with")

var demoJobs = []string{"brackwater", "brackwater-end-tower"}

func testFile(name string) string { return filepath.Join("..", "..", "testdata", name) }

func mustRead(t *testing.T, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(testFile(name))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// demoWorkbook makes the workbook of a demo job from its CSV files: the schedule
// and the Job sheet, numbers as numbers.
func demoWorkbook(t *testing.T, name string) []byte {
	t.Helper()
	b := sheet.NewBuilder()
	for _, part := range []struct{ sheet, file string }{{"Schedule", name + ".csv"}, {"Job", name + "-job.csv"}, {"Risks", name + "-risks.csv"}, {"Definition", name + "-definition.csv"}} {
		rows, err := csv.NewReader(bytes.NewReader(mustRead(t, part.file))).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		var columns []sheet.Column
		for k, head := range rows[0] {
			width := float64(max(9, len(head)/2+4))
			for _, row := range rows[1:] {
				width = max(width, min(38, float64(len(row[k]))+2))
			}
			columns = append(columns, sheet.Column{Head: head, Width: width})
		}
		b.Sheet(part.sheet, columns...)
		for _, row := range rows[1:] {
			values := make([]sheet.Value, len(row))
			for k, cell := range row {
				values[k] = demoValue(cell)
			}
			b.Row(values...)
		}
	}
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func demoValue(cell string) sheet.Value {
	if cell == "" {
		return sheet.Blank()
	}
	if _, err := strconv.ParseFloat(cell, 64); err == nil {
		return sheet.NumberOf(cell, sheet.General)
	}
	return sheet.TextOf(cell)
}

// The demo's workbooks are made from its CSV files; -update writes them anew.
func TestDemoWorkbooksAreThoseOfTheirCSV(t *testing.T) {
	for _, name := range demoJobs {
		want := demoWorkbook(t, name)
		if *update {
			if err := os.WriteFile(testFile(name+".xlsx"), want, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		if !bytes.Equal(mustRead(t, name+".xlsx"), want) {
			t.Errorf("%s.xlsx is not what its CSV files make: run go test ./cmd/spanwright -run DemoWorkbooks -update", name)
		}
		var o schedule.Options
		fromXLSX, err := readSchedule(t.Context(), want, name+".xlsx", o)
		if err != nil {
			t.Fatal(err)
		}
		o.JobTable, o.RiskTable, o.DefinitionTable = mustRead(t, name+"-job.csv"), mustRead(t, name+"-risks.csv"), mustRead(t, name+"-definition.csv")
		fromCSV, err := readSchedule(t.Context(), mustRead(t, name+".csv"), name+".csv", o)
		if err != nil {
			t.Fatal(err)
		}
		if d := cmp.Diff(fromCSV, fromXLSX, cmpopts.IgnoreFields(schedule.Member{}, "Row")); d != "" {
			t.Errorf("%s: CSV and workbook read differently (-csv +xlsx):\n%s", name, d)
		}
		if n := len(fromCSV.Members); n < 40 || n > 60 {
			t.Errorf("%s has %d rows, want 40 to 60", name, n)
		}
	}
}
