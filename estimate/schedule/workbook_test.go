package schedule

import (
	"bytes"
	"context"
	"fmt"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"spanwright/estimate/sheet"
)

// workbook writes a workbook with the schedule and a Job sheet; numbers in the
// texts become numbers. plant may spoil it before it is saved.
func workbook(t *testing.T, rows, job [][]string, plant func(f *excelize.File)) *sheet.Book {
	t.Helper()
	f := excelize.NewFile()
	defer f.Close()
	check := func(err error) {
		if err != nil {
			t.Fatalf("writing the test's workbook: %v", err)
		}
	}
	check(f.SetSheetName("Sheet1", "Schedule"))
	_, err := f.NewSheet("Job")
	check(err)
	for name, table := range map[string][][]string{"Schedule": rows, "Job": job} {
		for i, r := range table {
			for j, text := range r {
				cell := sheet.Letters(j+1) + strconv.Itoa(i+1)
				if x, err := strconv.ParseFloat(text, 64); err == nil {
					check(f.SetCellFloat(name, cell, x, -1, 64))
				} else if text != "" {
					check(f.SetCellStr(name, cell, text))
				}
			}
		}
	}
	if plant != nil {
		plant(f)
	}
	var b bytes.Buffer
	check(f.Write(&b))
	book, err := sheet.Open(b.Bytes(), "test.xlsx", "", sheet.DefaultLimits())
	check(err)
	return book
}

// job is a Job sheet that names every key.
var job = [][]string{
	{"Key", "Value"},
	{"Confidence", "P80"},
	{"project", "Brackwater loading quay"},
	{"Scheme", "inner support"},
	{"Standard", "Allowable"},
	{"Grade", "S 355"},
	{"Deflection limit", "L/300"},
	{"Factor", "1.6"},
	{"Restraint (m)", "3"},
	{"Connection class", "Trestles"},
	{"Coating", "C5"},
	{"Execution class", "EXC2"},
	{"Stock lengths", "12 m"},
	{"Estimate class", "4"},
	{"Currency", "eur"},
	{"Base date", "2026-01-01"},
}

func TestReadWorkbookWithJob(t *testing.T) {
	book := workbook(t, everyColumn, job, func(f *excelize.File) {
		_ = f.SetCellValue("Job", "B16", time.Date(2026, 2, 1, 0, 0, 0, 0, time.UTC)) // checked by the date read
	})
	s, err := Read(context.Background(), book, Options{Project: "Salt works"})
	if err != nil {
		t.Fatal(err)
	}
	want := Settings{
		Project: "Salt works", Scheme: "inner support", DesignBasis: "allowable", Factor: 1.6, Grade: "S355", DeflectionLimit: 300,
		Restraint: 3, ConnectionClass: "trestles", Coating: "C5", ExecutionClass: "EXC2", StockLengths: []float64{12}, Kerf: 0.005, Purchase: "waste", Money: "base date",
		EstimateClass: 4, Currency: "EUR", BaseDate: "2026-02-01", Confidence: 0.8,
	}
	if diff := cmp.Diff(want, s.Settings); diff != "" {
		t.Errorf("settings (-want +got):\n%s", diff)
	}
	for _, m := range s.Members {
		if m.Mark != "B4" {
			continue
		}
		if m.Grade != "S355" || m.DeflectionLimit != 300 || m.Restraint != 3 || m.ConnectionClass != "trestles" {
			t.Errorf("B4 does not take the job's values: %+v", m)
		}
		if diff := cmp.Diff(map[string]string{"kind": "default/kind/beam", "length_factor": "default/length factor/1 for spans, 2 for free ends"}, m.Defaults); diff != "" {
			t.Errorf("defaults of B4 (-want +got):\n%s", diff)
		}
		if m.Row.String() != "Schedule!A5" {
			t.Errorf("B4 comes from %v", m.Row)
		}
	}
	for _, e := range s.Defaults {
		for _, id := range []string{"default/factor", "default/confidence", "default/grade/S355", "default/deflection limit/300"} {
			if e.ID == id {
				t.Errorf("%s is in the register although the job names it", id)
			}
		}
	}
}

// Fourteen faults of fourteen sorts on two sheets give fourteen faults.
func TestFourteenPlantedFaults(t *testing.T) {
	book := workbook(t, everyColumn, job, func(f *excelize.File) {
		check := func(err error) {
			if err != nil {
				t.Fatalf("planting: %v", err)
			}
		}
		set := func(name, cell string, v any) { check(f.SetCellValue(name, cell, v)) }
		set("Schedule", "A3", "B10")                                        // a mark twice
		set("Schedule", "C2", 2.5)                                          // a fraction of a piece
		set("Schedule", "C4", time.Date(2026, 6, 12, 0, 0, 0, 0, time.UTC)) // 6/12 turned into a date
		set("Schedule", "D4", "6 kN")                                       // wrong unit
		set("Schedule", "F5", true)                                         // a truth value
		set("Schedule", "G5", nil)
		check(f.SetCellFormula("Schedule", "G5", "1/0"))         // without a value
		check(f.SetCellStr("Schedule", "I2", "S345"))            // unknown grade
		check(f.SetCellStr("Schedule", "H6", "IPE 301"))         // unknown section
		check(f.MergeCell("Schedule", "F6", "G6"))               // G6 covered
		check(f.SetCellStr("Schedule", "R8", "0 fixed; 28; 43")) // support outside
		check(f.SetCellStr("Schedule", "W10", "25 ton/m2"))      // bare ton
		check(f.SetCellStr("Job", "B5", "EN 1994-1-1"))          // composite structures: no basis
		check(f.SetCellStr("Job", "A8", "Fcator"))               // misspelt key
		set("Job", "B14", 6)                                     // no such class
	})
	_, err := Read(context.Background(), book, Options{})
	var got []string
	for _, f := range faultsOf(t, err) {
		got = append(got, f.Address.String())
	}
	want := []string{ // by sheet, row and column
		"Job!B5", "Job!A8", "Job!B14",
		"Schedule!C2", "Schedule!I2", "Schedule!A3", "Schedule!C4", "Schedule!D4", "Schedule!F5", "Schedule!G5",
		"Schedule!G6", "Schedule!H6", "Schedule!R8", "Schedule!W10",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("cells with faults (-want +got):\n%s\n%v", diff, err)
	}
}

func TestKindsOfCells(t *testing.T) {
	day := time.Date(2026, 6, 12, 0, 0, 0, 0, time.UTC)
	for _, c := range []struct {
		name, cell, problem string
		value               any
	}{
		{"date as length", "D2", "is a date", day},
		{"date as mark", "A2", "is a date", day},
		{"date as deflection limit", "U2", "is a date", day},
		{"date as support positions", "R8", "is a date", day},
		{"date as mass", "W10", "is a date", day},
		{"truth value as load", "G2", "truth value", true},
		{"truth value as grade", "I2", "truth value", false},
		{"number as support", "E2", "no support word", 1},
		{"number as section", "H2", "names no section", 300},
	} {
		t.Run(c.name, func(t *testing.T) {
			book := workbook(t, everyColumn, nil, func(f *excelize.File) {
				if err := f.SetCellValue("Schedule", c.cell, c.value); err != nil {
					t.Fatal(err)
				}
			})
			_, err := Read(context.Background(), book, Options{})
			faults := faultsOf(t, err)
			if len(faults) != 1 || faults[0].Address.String() != "Schedule!"+c.cell || !strings.Contains(faults[0].Problem, c.problem) {
				t.Errorf("faults %v, want one at %s: %s", err, c.cell, c.problem)
			}
		})
	}
}

// A merged range over three rows is one fault, whatever it covers.
func TestMergedCellsAreOneFault(t *testing.T) {
	book := workbook(t, everyColumn, nil, func(f *excelize.File) {
		if err := f.MergeCell("Schedule", "B2", "B4"); err != nil {
			t.Fatal(err)
		}
	})
	_, err := Read(context.Background(), book, Options{})
	faults := faultsOf(t, err)
	if len(faults) != 1 || faults[0].Address.String() != "Schedule!B3" || !strings.Contains(faults[0].Problem, "B2:B4") {
		t.Errorf("faults %v, want one at B3", err)
	}
}

func TestWhichSheet(t *testing.T) {
	for _, c := range []struct {
		names         []string
		schedule, job string
		ok            bool
	}{
		{[]string{""}, "", "", true},
		{[]string{"Job", "Members"}, "Members", "Job", true},
		{[]string{"Lists", "JOB", "schedule", "Help"}, "schedule", "JOB", true},
		{[]string{"Definition", "Members", "RISKS"}, "Members", "", true},
		{[]string{"Members", "Towers"}, "", "", false},
		{[]string{"Job"}, "", "", false},
	} {
		at, fault := pickSheets(c.names)
		schedule, job := at.schedule, at.beside[besideJob]
		if schedule != c.schedule || job != c.job || (fault == nil) != c.ok {
			t.Errorf("%q: schedule %q, job %q, fault %v", c.names, schedule, job, fault)
		}
	}
}

func TestJobTwice(t *testing.T) {
	book := workbook(t, everyColumn, job, nil)
	if _, err := Read(context.Background(), book, Options{JobTable: []byte("Key,Value\nGrade,S275\n")}); err == nil {
		t.Error("a Job sheet and a job table are both taken")
	}
}

func TestContextEnds(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Read(ctx, workbook(t, everyColumn, job, nil), Options{}); err == nil || !strings.Contains(fmt.Sprint(err), context.Canceled.Error()) {
		t.Errorf("error %v, want %v", err, context.Canceled)
	}
}
