package section

import (
	"bytes"
	"crypto/sha256"
	"encoding/csv"
	"encoding/hex"
	"errors"
	"math"
	"reflect"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Rows a family, in the order of Families. The counts of the I series are those
// of EN 10365 (IPE 80 to 600; HE 100 to 1000); the tubes' are our own choice of
// sizes and only guard against a lost line.
func TestFamilies(t *testing.T) {
	got := map[string]int{}
	var order []string
	for _, f := range Families() {
		got[f.Name] = f.Sizes
		order = append(order, f.Name)
		if f.Title == "" || f.Standard == "" {
			t.Errorf("family %s: title %q, standard %q; want both", f.Name, f.Title, f.Standard)
		}
		if wantForm := !strings.Contains("IPE HEA HEB", f.Name); f.ByDimensions != wantForm {
			t.Errorf("family %s: ByDimensions = %v", f.Name, f.ByDimensions)
		}
	}
	want := map[string]int{"IPE": 18, "HEA": 24, "HEB": 24, "CHS": 254, "PIPE": 172, "SHS": 142, "RHS": 155, "WELDED-I": 0, "ROUND": 0, "FLAT": 0}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("sizes a family (-want +got):\n%s", d)
	}
	wantOrder := []string{"IPE", "HEA", "HEB", "CHS", "PIPE", "SHS", "RHS", "WELDED-I", "ROUND", "FLAT"}
	if d := cmp.Diff(wantOrder, order); d != "" {
		t.Errorf("order (-want +got):\n%s", d)
	}
}

// The nominal mass of every row to the last digit printed, at 7850 kg/m³; round
// tube by 0.0246615 (D − T) T of EN 10210-2 and ASME B36.10M.
func TestNominalMass(t *testing.T) {
	for _, file := range catalogueFiles {
		text, err := dataFiles.ReadFile("data/" + file)
		if err != nil {
			t.Fatal(err)
		}
		r := csv.NewReader(bytes.NewReader(text))
		r.Comment = '#'
		records, err := r.ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		column := map[string]int{}
		for i, name := range records[0] {
			column[name] = i
		}
		for _, record := range records[1:] {
			printed := record[column["mass"]]
			s, err := Find(record[0])
			if err != nil {
				t.Fatal(err)
			}
			mass := 7850 * s.A
			if s.Shape == RoundTube {
				mass = 0.0246615 * (s.H - s.Tw) * s.Tw * 1e6
			}
			_, decimals, _ := strings.Cut(printed, ".")
			if got := strconv.FormatFloat(mass, 'f', len(decimals), 64); got != printed {
				t.Errorf("%s: dimensions give %s kg/m (%.5f), the standard prints %s", record[0], got, mass, printed)
			}
			if want, _ := strconv.ParseFloat(printed, 64); s.Mass != want {
				t.Errorf("%s: billed at %g kg/m, want the printed %s", record[0], s.Mass, printed)
			}
		}
	}
}

// Masses that ASME B36.10M and EN 10210-2/10219-2 print, from memory; the rows of
// the files were computed, so these are the outside check.
func TestPrintedMasses(t *testing.T) {
	for designation, want := range map[string]float64{
		"NPS 1/2 STD": 1.27, "NPS 2 STD": 5.44, "NPS 2 XXS": 13.44, "NPS 4 STD": 16.08, "NPS 6 SCH 160": 67.57,
		"NPS 8 STD": 42.55, "NPS 8 XS": 64.64, "NPS 10 STD": 60.29, "NPS 12 STD": 73.86, "NPS 12 SCH 40": 79.71,
		"NPS 16 SCH 80": 203.54, "NPS 18 STD": 105.17, "NPS 20 STD": 117.15, "NPS 24 SCH 40": 255.43, "NPS 24 SCH 160": 808.27,
		"NPS 36 STD": 212.57, "CHS 21.3x2.6": 1.20, "CHS 114.3x5": 13.5, "CHS 168.3x6.3": 25.2, "CHS 219.1x8": 41.6,
		"CHS 273x10": 64.9, "CHS 323.9x10": 77.4, "CHS 508x16": 194, "SHS 50x4": 5.45, "SHS 100x5": 14.4,
		"SHS 200x10": 57.0, "RHS 120x80x5": 14.4, "RHS 200x100x8": 33.9, "RHS 300x200x10": 72.7,
	} {
		s, err := Find(designation)
		if err != nil {
			t.Errorf("Find(%q): %v", designation, err)
			continue
		}
		if s.Mass != want {
			t.Errorf("%s: %g kg/m, the standard prints %g", designation, s.Mass, want)
		}
	}
}

// What must hold in every row of every family, and for each shape by dimensions.
func TestEveryRow(t *testing.T) {
	seen := map[string]bool{}
	for _, f := range Families() {
		if f.Sizes == 0 {
			continue
		}
		list, err := Series(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		for i, s := range list {
			if seen[s.Designation] {
				t.Errorf("%s stands twice", s.Designation)
			}
			seen[s.Designation] = true
			if i > 0 && !(list[i-1].Mass < s.Mass || list[i-1].Mass == s.Mass && list[i-1].Designation < s.Designation) {
				t.Errorf("%s (%g kg/m) stands before %s (%g kg/m)", list[i-1].Designation, list[i-1].Mass, s.Designation, s.Mass)
			}
			checkRow(t, f, s)
		}
	}
}

func checkRow(t *testing.T, f Family, s Section) {
	t.Helper()
	if s.Family != f.Name || s.Source == "" || s.Shape == 0 || s.Making == 0 {
		t.Errorf("%s: family %q, source %q, shape %v, making %v", s.Designation, s.Family, s.Source, s.Shape, s.Making)
	}
	found, err := Find(s.Designation)
	if err != nil || found != s {
		t.Errorf("Find(%q) does not give the row back: %v", s.Designation, err)
	}
	v := reflect.ValueOf(s)
	for i := range v.NumField() {
		name := v.Type().Field(i).Name
		if v.Field(i).Kind() != reflect.Float64 || name == "Tf" || name == "R" || name == "Iw" {
			continue
		}
		if x := v.Field(i).Float(); !(x > 0 && x < 1e6) {
			t.Errorf("%s: %s = %g, want above zero", s.Designation, name, x)
		}
	}
	if !(s.Iw >= 0) || !(s.Tf >= 0) || !(s.R >= 0) {
		t.Errorf("%s: Iw %g, Tf %g, R %g; want none below zero", s.Designation, s.Iw, s.Tf, s.R)
	}
	if !(s.Iy >= s.Iz) || !(s.Wply > s.Wely) || !(s.Wplz > s.Welz) || !(s.Avz+s.Avy < 2*s.A) {
		t.Errorf("%s: y is not the strong axis, or a plastic modulus is under the elastic one", s.Designation)
	}
	if s.Thickness != math.Max(s.Tw, s.Tf) {
		t.Errorf("%s: thickness %g, want the greater of %g and %g", s.Designation, s.Thickness, s.Tw, s.Tf)
	}
}

func TestSeriesIsTheCallersOwn(t *testing.T) {
	first, err := Series("ipe")
	if err != nil {
		t.Fatal(err)
	}
	want := first[0]
	first[0] = Section{}
	again, err := Series("IPE")
	if err != nil {
		t.Fatal(err)
	}
	if again[0] != want || again[0].Designation != "IPE 80" {
		t.Errorf("after a caller's change the lightest IPE is %q", again[0].Designation)
	}
	families := Families()
	families[0].Name = "changed"
	if Families()[0].Name != "IPE" {
		t.Errorf("a caller's change reached Families")
	}
}

func TestSeriesRefuses(t *testing.T) {
	for family, want := range map[string]string{
		"":      `unknown section "": no such family; families with a catalogue are IPE, HEA, HEB, CHS, PIPE, SHS, RHS`,
		"IPX":   `unknown section "IPX": no such family; families with a catalogue are IPE, HEA, HEB, CHS, PIPE, SHS, RHS`,
		"round": `unknown section "round": family ROUND has no catalogue to size from; name one size, such as ROUND 50, or a family of IPE, HEA, HEB, CHS, PIPE, SHS, RHS`,
	} {
		_, err := Series(family)
		var unknown *UnknownError
		if !errors.As(err, &unknown) || err.Error() != want {
			t.Errorf("Series(%q): got %v\nwant %s", family, err, want)
		}
	}
}

func TestDataHash(t *testing.T) {
	h := sha256.New()
	for _, name := range []string{"ipe", "hea", "heb", "chs", "pipe", "shs", "rhs"} {
		text, err := dataFiles.ReadFile("data/" + name + ".csv")
		if err != nil {
			t.Fatal(err)
		}
		h.Write(text)
	}
	if got, want := DataHash(), hex.EncodeToString(h.Sum(nil)); got != want {
		t.Errorf("DataHash() = %s, sha256 of the files is %s", got, want)
	}
	listed, err := dataFiles.ReadDir("data")
	if err != nil {
		t.Fatal(err)
	}
	if len(listed) != len(catalogueFiles) {
		t.Errorf("data holds %d files, %d are loaded", len(listed), len(catalogueFiles))
	}
}

const goodTable = `# family: IPE
# title: t
# standard: EN 10365
# source: s
# shape: I section
# making: hot rolled
# units: mm kg/m
designation,h,b,tw,tf,r,mass
IPE 300,300,150,7.1,10.7,15,42.2
`

func TestTableRefuses(t *testing.T) {
	if tab, err := readTable([]byte(goodTable)); err != nil || len(tab.rows) != 1 {
		t.Fatalf("good table: %d rows, %v", len(tab.rows), err)
	}
	for name, c := range map[string]struct{ old, with, want string }{
		"no shape":     {"# shape: I section\n", "", "shape"},
		"unknown unit": {"mm kg/m", "in lb/ft", "units"},
		"no rows":      {"IPE 300,300,150,7.1,10.7,15,42.2\n", "", "no rows"},
		"not a number": {"10.7", "ten", "column tf"},
		"NaN mass":     {"42.2", "NaN", "mass"},
		"NaN width":    {",150,", ",NaN,", "width"},
		"no column":    {"tw", "web", `no column "tw"`},
		"shape":        {"I section", "star", "star"},
		"making":       {"hot rolled", "found", "found"},
		"short row":    {",42.2", "", "fields"},
	} {
		text := strings.Replace(goodTable, c.old, c.with, 1)
		tab, err := readTable([]byte(text))
		if err == nil {
			_, err = tab.section(tab.rows[0])
		}
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error with %q", name, err, c.want)
		}
	}
}

func TestAddRefusesTwoOfOneSpelling(t *testing.T) {
	tab, err := readTable([]byte(goodTable + "ipe-300,330,160,7.5,11.5,18,49.1\n"))
	if err != nil {
		t.Fatal(err)
	}
	c := &catalogue{series: map[string][]Section{}, index: map[string]Section{}}
	if err := c.add(tab); err == nil || !strings.Contains(err.Error(), "stands for both") {
		t.Errorf("got %v, want an error that names both rows", err)
	}
}
