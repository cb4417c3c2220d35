package main

import (
	"bytes"
	"context"
	"encoding/json"
	"maps"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// run calls the program as the command line would.
func runProgram(t *testing.T, stdin []byte, args ...string) (int, string, string) {
	t.Helper()
	var out, errs bytes.Buffer
	p := &program{stdin: bytes.NewReader(stdin), stdout: &out, stderr: &errs, getenv: func(string) string { return "" }}
	code := p.main(t.Context(), args)
	return code, out.String(), errs.String()
}

func TestTheDocumentOfPriceOfTheAPIAndOfASecondRunAreByteEqual(t *testing.T) {
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	data := mustRead(t, "brackwater.xlsx")
	got := s.take(t, token, "brackwater.xlsx", data, nil)
	stored := s.do(t, http.MethodGet, "/v1/estimates/"+got.Estimate.ID+"/document", token, nil, "Accept", "application/json")
	if stored.status != http.StatusOK {
		t.Fatalf("document: %d %s", stored.status, stored.body)
	}
	for i := range 2 {
		code, out, errs := runProgram(t, nil, "price", "--format", "json", testFile("brackwater.xlsx"))
		if code != 0 {
			t.Fatal(errs)
		}
		if out != string(stored.body) {
			t.Fatalf("run %d of price and the API differ: %s", i+1, cmp.Diff(out, string(stored.body)))
		}
	}
	var compact bytes.Buffer
	if err := json.Compact(&compact, stored.body); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(compact.Bytes(), []byte(got.Document)) {
		t.Error("the document within the intake's answer is not the stored one")
	}
}

func TestTwoPostingsWithOneKeyMakeOneEstimate(t *testing.T) {
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	data := mustRead(t, "brackwater.xlsx")
	first := s.take(t, token, "brackwater.xlsx", data, nil, "Idempotency-Key", "k1")
	before := s.rows(t)
	second := s.take(t, token, "brackwater.xlsx", data, nil, "Idempotency-Key", "k1")
	if first.Estimate.ID != second.Estimate.ID {
		t.Errorf("two estimates: %s and %s", first.Estimate.ID, second.Estimate.ID)
	}
	asBook := s.intake(t, token, "brackwater.xlsx", data, nil, "Idempotency-Key", "k1", "Accept", sheet.MediaTypeXLSX)
	if asBook.status != http.StatusOK || asBook.header.Get("Content-Type") != sheet.MediaTypeXLSX {
		t.Fatalf("another Accept under the same key: %d %s %s", asBook.status, asBook.header.Get("Content-Type"), asBook.body[:min(len(asBook.body), 300)])
	}
	sameAmount(t, "the workbook's base", workbookBase(t, asBook.body), first.Estimate.Base)
	if after := s.rows(t); !maps.Equal(before, after) {
		t.Errorf("rows were added: %s", cmp.Diff(before, after))
	}
	other := s.intake(t, token, "brackwater.xlsx", mustRead(t, "brackwater-end-tower.xlsx"), nil, "Idempotency-Key", "k1")
	if other.status != http.StatusConflict {
		t.Errorf("the key with other content: %d, want 409", other.status)
	}
}

func TestSimultaneousPostingsWithOneKeyMakeOneEstimate(t *testing.T) {
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	data := mustRead(t, "brackwater.xlsx")
	var wg sync.WaitGroup
	ids := make([]string, 2)
	for i := range ids {
		wg.Go(func() {
			a := s.intake(t, token, "brackwater.xlsx", data, map[string]string{"project": "P"}, "Idempotency-Key", "same")
			var got taken
			if a.status == http.StatusCreated || a.status == http.StatusOK {
				_ = json.Unmarshal(a.body, &got) // an empty id fails below
			}
			ids[i] = got.Estimate.ID
			if got.Estimate.ID == "" {
				t.Errorf("%d %s", a.status, a.body)
			}
		})
	}
	wg.Wait()
	if ids[0] == "" || ids[0] != ids[1] {
		t.Errorf("got estimates %q", ids)
	}
	if n := s.rows(t)["estimate"]; n != 1 {
		t.Errorf("%d estimates are stored, want 1", n)
	}
}

// sameAmount compares two amounts as numbers: a workbook keeps no trailing zeros.
func sameAmount(t *testing.T, what, got, want string) {
	t.Helper()
	a, err := money.Parse(got)
	if err != nil {
		t.Fatalf("%s: %v", what, err)
	}
	b, err := money.Parse(want)
	if err != nil {
		t.Fatalf("%s: %v", what, err)
	}
	if !a.Equal(b) {
		t.Errorf("%s is %s, want %s", what, got, want)
	}
}

// workbookBase reads the base from the Summary sheet of a priced workbook.
func workbookBase(t *testing.T, data []byte) string {
	t.Helper()
	book, err := sheet.Open(data, "priced.xlsx", sheet.MediaTypeXLSX, sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	base := ""
	err = book.Rows(context.Background(), "Lines", func(_ int, cells []sheet.Cell) error {
		if len(cells) > 0 && len(cells[0].Text) >= 4 && cells[0].Text[:4] == "base" {
			for _, c := range cells[1:] {
				if c.Kind == sheet.Number {
					base = c.Text
				}
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return base
}

func TestACSVWithItsJobTableGivesTheSameFiguresAsTheWorkbook(t *testing.T) {
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	a := s.take(t, token, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), nil)
	code, out, errs := runProgram(t, nil, "price", "--format", "json", "--job", testFile("brackwater-job.csv"),
		"--definition", testFile("brackwater-definition.csv"), "--risks", testFile("brackwater-risks.csv"), testFile("brackwater.csv"))
	if code != 0 {
		t.Fatal(errs)
	}
	d, err := document.Parse([]byte(out))
	if err != nil {
		t.Fatal(err)
	}
	w, err := document.Parse(a.Document)
	if err != nil {
		t.Fatal(err)
	}
	if d.Job.JobSHA256 != w.Job.JobSHA256 {
		t.Errorf("job hashes: %s from CSV, %s from the workbook", d.Job.JobSHA256, w.Job.JobSHA256)
	}
	if d := cmp.Diff(d.Figures(), w.Figures()); d != "" {
		t.Errorf("figures differ (-csv +xlsx): %s", d)
	}
}

func TestPriceWritesEveryFormat(t *testing.T) {
	dir := t.TempDir()
	for _, format := range []string{"table", "json", "xlsx", "csv"} {
		file := filepath.Join(dir, "out."+format)
		code, _, errs := runProgram(t, nil, "price", testFile("brackwater.xlsx"), "--format", format, "--out", file)
		if code != 0 {
			t.Fatalf("%s: %s", format, errs)
		}
		data, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if format == "table" && !bytes.Contains(data, []byte(document.Caution[:40])) {
			t.Error("the table does not show the caution")
		}
		if format == "xlsx" && workbookBase(t, data) == "" {
			t.Error("the workbook has no base")
		}
	}
	for _, args := range [][]string{{"price"}, {"price", "a", "b"}, {"price", "--format", "pdf", testFile("brackwater.csv")}, {"prize"}, {}} {
		if code, _, _ := runProgram(t, nil, args...); code == 0 {
			t.Errorf("%v was accepted", args)
		}
	}
}

// By hand: LB1 is 42 m with 0.9 and 1.2 kN/m; the platform grating is 148 m² at
// 31 kg/m² = 4.588 t.
func TestCheckEchoesLoadsTonnesAndDefaults(t *testing.T) {
	code, out, errs := runProgram(t, nil, "price", "--check", testFile("brackwater.xlsx"))
	if code != 0 {
		t.Fatal(errs)
	}
	for _, want := range []string{"37.8          50.4", "Access platforms      99", "restrained at the supports alone"} {
		if !strings.Contains(out, want) {
			t.Errorf("the echo lacks %q:\n%s", want, out)
		}
	}
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	before := s.rows(t)
	a := s.do(t, http.MethodPost, "/v1/schedules/check", token, mustRead(t, "brackwater.xlsx"), "Content-Type", sheet.MediaTypeXLSX)
	var r struct {
		Echo struct {
			Members []struct {
				Mark      string
				Permanent float64 `json:"permanent_kn"`
			}
		}
	}
	a.decode(t, &r)
	if a.status != http.StatusOK || len(r.Echo.Members) != 50 {
		t.Errorf("check over the API: %d, %d members", a.status, len(r.Echo.Members))
	}
	if after := s.rows(t); !maps.Equal(before, after) {
		t.Errorf("rows were stored: %s", cmp.Diff(before, after))
	}
}
