package main

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"maps"
	"net/http"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/api/auth"
	"spanwright/estimate/sheet"
)

// plant is one fault planted in the demo's workbook: the cell that it must be
// reported at and what is written there.
type plant struct {
	sheet, mark, column, text string
}

// plants are 14 faults on two sheets. On the sheet Job the mark is the key.
var plants = []plant{
	{"Schedule", "LB1", "Length (m)", "-42"},
	{"Schedule", "LB2", "Quantity", "0"},
	{"Schedule", "LB3", "Axial load (kN)", "35 ton"},
	{"Schedule", "LB4", "Point position (m)", "12"},
	{"Schedule", "CG1", "Variable load (kN/m)", ""},
	{"Schedule", "CG2", "Length (m)", "1e308"},
	{"Schedule", "CG4", "Section or family", "SHZ"},
	{"Schedule", "CG6", "Permanent load (kN/m)", "NaN"},
	{"Schedule", "PB1", "Grade", "S999"},
	{"Schedule", "PB5", "Grade", "A36"},
	{"Schedule", "TW1", "Quantity", "eight"},
	{"Job", "Estimate class", "Value", "7"},
	{"Job", "Currency", "Value", "EUX"},
	{"Job", "Base date", "Value", "31.13.2026"},
}

// planted returns the workbook with the faults, and the cells that hold them.
func planted(t *testing.T) ([]byte, []string) {
	t.Helper()
	b := sheet.NewBuilder()
	var cells []string
	for _, part := range []struct{ name, file string }{{"Schedule", "brackwater.csv"}, {"Job", "brackwater-job.csv"}} {
		rows, err := csv.NewReader(bytes.NewReader(mustRead(t, part.file))).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range plants {
			if p.sheet != part.name {
				continue
			}
			column := slices.Index(rows[0], p.column)
			row := slices.IndexFunc(rows, func(r []string) bool { return r[0] == p.mark })
			if column < 0 || row < 0 {
				t.Fatalf("no place for %+v", p)
			}
			rows[row][column] = p.text
			cells = append(cells, sheet.Address{Sheet: part.name, Row: row + 1, Column: column + 1}.String())
		}
		columns := make([]sheet.Column, len(rows[0]))
		for k, head := range rows[0] {
			columns[k].Head = head
		}
		b.Sheet(part.name, columns...)
		for _, row := range rows[1:] {
			values := make([]sheet.Value, len(row))
			for k, cell := range row {
				values[k] = demoValue(cell)
				if cell == "1e308" || cell == "NaN" {
					values[k] = sheet.TextOf(cell)
				}
			}
			b.Row(values...)
		}
	}
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	slices.Sort(cells)
	return data, cells
}

// problem is what the tests read of a problem document.
type problem struct {
	Title  string
	Status int
	Detail string
	Faults []struct{ Cell, Found, Problem, Remedy, Pointer string }
}

func TestFourteenPlantedFaultsAreFoundAndNothingIsStored(t *testing.T) {
	data, want := planted(t)
	if len(want) != 14 {
		t.Fatalf("%d faults are planted", len(want))
	}
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	before := s.rows(t)
	a := s.intake(t, token, "faults.xlsx", data, nil)
	if a.status != http.StatusUnprocessableEntity {
		t.Fatalf("got %d %s", a.status, a.body)
	}
	var p problem
	a.decode(t, &p)
	var got []string
	for _, f := range p.Faults {
		got = append(got, f.Cell)
		if f.Problem == "" || f.Remedy == "" {
			t.Errorf("%s: problem %q, remedy %q", f.Cell, f.Problem, f.Remedy)
		}
	}
	slices.Sort(got)
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("cells (-planted +found): %s\n%s", d, a.body)
	}
	if after := s.rows(t); !maps.Equal(before, after) {
		t.Errorf("rows were stored: %s", cmp.Diff(before, after))
	}
	code, out, errs := runProgram(t, data, "price", "-")
	if code != 1 || out != "" {
		t.Errorf("offline: code %d, output %q", code, out)
	}
	for _, cell := range want {
		if !strings.Contains(errs, cell) {
			t.Errorf("offline: %s is not named in\n%s", cell, errs)
		}
	}
	if n := strings.Count(errs, "!"); n != 14 {
		t.Errorf("offline: %d faults are listed, want 14:\n%s", n, errs)
	}
}

// bad is one posting that must be refused as a fault of the caller.
type bad struct {
	name, file string
	data       []byte
	headers    []string
	status     int
	says       string
}

func badPostings(t *testing.T) []bad {
	t.Helper()
	row := func(header, cells string) []byte { return []byte(header + "\n" + cells + "\n") }
	const minimal = "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade"
	rows := func(n int) []byte {
		var b strings.Builder
		b.WriteString("Mark,Quantity,Length (m),Support,Mass if not sized (kg/m),Section or family\n")
		for i := range n {
			fmt.Fprintf(&b, "H%d,1,2,not sized,14.5,\n", i)
		}
		return []byte(b.String())
	}
	encrypted := append([]byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"), make([]byte, 504)...)
	for _, r := range "EncryptedPackage" { // the name of its stream, in UTF-16
		encrypted = append(encrypted, byte(r), 0)
	}
	encrypted = append(encrypted, make([]byte, 1024)...)
	return []bad{
		{name: "empty body", file: "a.csv", data: nil, status: 422, says: "empty"},
		{name: "unknown header", file: "a.csv", data: row(minimal+",Colour", "B1,1,6,simple,1,2,IPE,S275,red"), status: 422, says: "Colour"},
		{name: "missing column", file: "a.csv", data: row("Mark,Quantity,Support,Permanent load (kN/m),Variable load (kN/m),Section or family", "B1,1,simple,1,2,IPE"), status: 422, says: "Length"},
		{name: "wrong unit in a head", file: "a.csv", data: row(strings.Replace(minimal, "Length (m)", "Length (kg)", 1), "B1,1,6,simple,1,2,IPE,S275"), status: 422, says: "kg"},
		{name: "bare ton", file: "a.csv", data: row(minimal+",Axial load (kN)", "B1,1,6,simple,1,2,IPE,S275,3 ton"), status: 422, says: "ton"},
		{name: "blank load", file: "a.csv", data: row(minimal, "B1,1,6,simple,,2,IPE,S275"), status: 422, says: "0"},
		{name: "no size passes", file: "a.csv", data: row(minimal, "B1,1,60,simple,10,20,IPE,S275"), status: 422, says: "no size of IPE passes"},
		{name: "not a spreadsheet", file: "a.xlsx", data: []byte("%PDF-1.7 hello"), status: 415, says: "PDF"},
		{name: "an encrypted workbook", file: "a.xlsx", data: encrypted, status: 415, says: "encrypt"},
		{name: "a broken zip", file: "a.xlsx", data: []byte("PK\x03\x04 nothing more"), status: 422, says: ""},
		{name: "rows at limit + 1", file: "a.csv", data: rows(20_001), status: 422, says: "20"},
		{name: "bytes at limit + 1", file: "a.csv", data: bytes.Repeat([]byte("x"), 20<<20+1), status: 413, says: ""},
		{name: "a name with a control character", file: "a.csv", data: row(minimal, "B1,1,6,simple,1,2,IPE,S275"), headers: []string{"project", "a\x01b"}, status: 422, says: "project"},
	}
}

func TestBadPostingsAreTheCallersFaultAndStoreNothing(t *testing.T) {
	s := newServer(t)
	token := s.token(t, "Brackwater", auth.Estimator)
	before := s.rows(t)
	for _, b := range badPostings(t) {
		fields := map[string]string{"project": "P", "scheme": "S"}
		for i := 0; i+1 < len(b.headers); i += 2 {
			fields[b.headers[i]] = b.headers[i+1]
		}
		a := s.intake(t, token, b.file, b.data, fields)
		if a.status != b.status || !strings.Contains(strings.ToLower(string(a.body)), strings.ToLower(b.says)) {
			t.Errorf("%s: got %d %.400s; want %d and a word of %q", b.name, a.status, a.body, b.status, b.says)
		}
		if a.header.Get("Content-Type") != "application/problem+json" {
			t.Errorf("%s: answered as %q", b.name, a.header.Get("Content-Type"))
		}
	}
	if after := s.rows(t); !maps.Equal(before, after) {
		t.Errorf("rows were stored: %s", cmp.Diff(before, after))
	}
}
