package schedule

import (
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/sheet"
)

// change is one cell of everyColumn that is written over: the row of the file and
// the column's header in it.
type change struct {
	row    int
	header string
	value  string
}

// with returns everyColumn with cells written over.
func with(t *testing.T, changes ...change) [][]string {
	t.Helper()
	rows := make([][]string, len(everyColumn))
	for i, r := range everyColumn {
		rows[i] = slices.Clone(r)
	}
	for _, c := range changes {
		rows[c.row-1][columnOf(t, c.header)-1] = c.value
	}
	return rows
}

func columnOf(t *testing.T, header string) int {
	t.Helper()
	i := slices.IndexFunc(everyColumn[0], func(h string) bool { return strings.HasPrefix(h, header) })
	if i < 0 {
		t.Fatalf("the test's schedule has no column %q", header)
	}
	return i + 1
}

// Rows of everyColumn.
const (
	rowB10, rowB2, rowB3, rowB5, rowB7, rowB8, rowBM1, rowC1, rowF1, rowG1, rowH1 = 2, 3, 4, 6, 8, 9, 10, 11, 12, 13, 14
)

func TestOneFaultInOneCell(t *testing.T) {
	for _, c := range []struct {
		change
		problem, remedy string // parts of the fault's texts
	}{
		{change{rowB10, "Mark", ""}, "mark is blank", "name of its own"},
		{change{rowB2, "Mark", "B10"}, "mark of row 2 already", "a mark of its own"},
		{change{rowB10, "Mark", strings.Repeat("B", 61)}, "61 characters", "60"},
		{change{rowB10, "Mark", "B\u200b10"}, "does not print", "anew"},
		{change{rowB10, "Quantity", ""}, "quantity is blank", "number of pieces"},
		{change{rowB10, "Quantity", "0"}, "not a whole number", "pieces"},
		{change{rowB10, "Quantity", "-1"}, "not a whole number", "pieces"},
		{change{rowB10, "Quantity", "2.5"}, "not a whole number", "pieces"},
		{change{rowB10, "Quantity", "1000001"}, "not a whole number", "pieces"},
		{change{rowB10, "Quantity", "four"}, "not a number", "plain number"},
		{change{rowB10, "Length", ""}, "length is blank", "whole length"},
		{change{rowB10, "Length", "-6"}, "out of bounds", "above 0"},
		{change{rowB10, "Length", "0"}, "out of bounds", "above 0"},
		{change{rowB10, "Length", "1e308"}, "too large", "length"},
		{change{rowB10, "Length", "1000.1"}, "out of bounds", "1000 m"},
		{change{rowB10, "Length", "NaN"}, "not a number", "length"},
		{change{rowB10, "Length", "long"}, "not a number", "length"},
		{change{rowB10, "Length", "6,5"}, "ambiguous", "12.5"},
		{change{rowB10, "Length", "6 kN"}, "kN is a force, not a length", "m, mm"},
		{change{rowB10, "Length", "6 furlongs"}, "unknown unit", "m, mm"},
		{change{rowB10, "Length", "#REF!"}, "error of the spreadsheet", "mend the formula"},
		{change{rowB10, "Support", "simpel"}, "no support word", "simple"},
		{change{rowB10, "Support", "clamped"}, "no support word", "cantilever"},
		{change{rowB10, "Permanent", ""}, "permanent load is blank", "enter 0"},
		{change{rowB10, "Variable", ""}, "variable load is blank", "enter 0"},
		{change{rowB10, "Permanent", "2.5 kN"}, "kN is a force", "kN/m"},
		{change{rowB10, "Permanent", "200 kg/m"}, "a mass is not turned into its weight", "kN/m"},
		{change{rowB10, "Variable", "1e9"}, "out of bounds", "1e9"},
		{change{rowB10, "Section", ""}, "no section and no family", "IPE"},
		{change{rowB10, "Section", "IPE 301"}, "names no section", "IPE 300"},
		{change{rowB10, "Section", "IPF 300"}, "names no section", "IPE 300"},
		{change{rowB10, "Section", "WELDED-I"}, "no catalogue", "IPE"},
		{change{rowB10, "Section", "grating"}, "names no section", "not sized"},
		{change{rowB10, "Grade", "S345"}, "no steel grade", "S355"},
		{change{rowB10, "Grade", "A53 B"}, "does not suit IPE", "S235"},
		{change{rowG1, "Grade", "S345"}, "no steel grade", "S355"},
		{change{rowB10, "Point load", ""}, "without a point load", "0 if there is none"},
		{change{rowB10, "Point position", ""}, "needs its position", "clear Point load"},
		{change{rowB10, "Point position", "6.01"}, "outside the member", "0 to the length"},
		{change{rowB10, "Point position", "-1"}, "out of bounds", "from 0"},
		{change{rowB3, "Area load", ""}, "without an area load", "enter the load"},
		{change{rowB3, "Tributary", ""}, "needs its tributary width", "clear Area load"},
		{change{rowB3, "Tributary", "-1"}, "out of bounds", "above 0"},
		{change{rowB3, "Area load", "5 kN/m"}, "load per length", "kN/m²"},
		{change{rowC1, "Axial", ""}, "needs its axial load", "compression"},
		{change{rowB5, "Overhang", ""}, "overhang is blank", "part of Length"},
		{change{rowB5, "Overhang", "8"}, "not shorter than the member", "below the length"},
		{change{rowB5, "Overhang", "0"}, "out of bounds", "above 0"},
		{change{rowB10, "Overhang", "1"}, "Support says simple", "blank"},
		{change{rowBM1, "Support positions", "0; 28; 43"}, "support at 43 m is outside", "0 to the length"},
		{change{rowBM1, "Support positions", "0; 28; 28"}, "two supports stand at 28 m", "one support"},
		{change{rowBM1, "Support positions", "7"}, "one pinned support", "one fixed"},
		{change{rowBM1, "Support positions", "0; twenty"}, "not a number", "length"},
		{change{rowBM1, "Support positions", "fixed; 28"}, "without its position", "0 fixed"},
		{change{rowBM1, "Support positions", "-1; 28"}, "out of bounds", "from 0"},
		{change{rowB10, "Support positions", "0; 6"}, "contradicts Support", "blank"},
		{change{rowBM1, "Point position", "42.5"}, "outside the member", "0 to the length"},
		{change{rowB10, "Restraint", "7"}, "longer than the member", "full span"},
		{change{rowB10, "Restraint", "0"}, "out of bounds", "above 0"},
		{change{rowB10, "Effective", "0"}, "out of bounds", "0.5 to 10"},
		{change{rowB10, "Effective", "1 m"}, "m is a length", "plain number"},
		{change{rowB10, "Deflection", "L/0"}, "no sensible deflection limit", "L/250"},
		{change{rowB10, "Deflection", "0.004"}, "no sensible deflection limit", "L/250"},
		{change{rowB10, "Deflection", "L/x"}, "not a number", "plain number"},
		{change{rowB10, "Connection", "lattise"}, "no connection class", "lattice"},
		{change{rowG1, "Mass", ""}, "needs its mass", "kg/m²"},
		{change{rowG1, "Mass", "25"}, "no unit", "kg/m"},
		{change{rowG1, "Mass", "25 ton"}, "bare ton", "short ton"},
		{change{rowG1, "Mass", "25 kN/m²"}, "load per area", "kg/m"},
		{change{rowG1, "Mass", "-25 kg/m²"}, "out of bounds", "kg/m²"},
		{change{rowG1, "Area (", ""}, "needs the area", "one piece"},
		{change{rowG1, "Area (", "36 m"}, "m is a length", "m²"},
		{change{rowG1, "Support", ""}, "a mass and no section", "write not sized"},
		{change{rowH1, "Length", ""}, "length is blank", "whole length"},
		{change{rowH1, "Variable", "1"}, "load on a row that is not sized", "blank"},
		{change{rowB10, "Horizontal", "wind"}, "not a number", "kN/m"},
		{change{rowB10, "Horizontal", "0.6 kN/m²"}, "load per area", "kN/m"},
		{change{rowH1, "Horizontal", "1"}, "load on a row that is not sized", "blank"},
		{change{rowB3, "Moving load", "40; 40; 40"}, "3 wheels and 0 distances", "40; 40 @ 2.0"},
		{change{rowB3, "Moving load", "40; 40; 40; 40 @ 2; 3"}, "4 wheels and 2 distances", "one fewer than wheels"},
		{change{rowB3, "Moving load", "40 @ 2"}, "1 wheels and 1 distances", "40; 40 @ 2.0"},
		{change{rowB3, "Moving load", "40; 0 @ 2"}, "out of bounds: 0", "above 0"},
		{change{rowB3, "Moving load", "40; -40 @ 2"}, "out of bounds: -40", "above 0"},
		{change{rowB3, "Moving load", "40; 40 @ 0"}, "out of bounds: 0", "above 0"},
		{change{rowB3, "Moving load", "40;; 40 @ 2"}, "empty place", "40; 40 @ 2.0"},
		{change{rowB3, "Moving load", "40; 40 @"}, "empty place", "40; 40 @ 2.0"},
		{change{rowB3, "Moving load", "40; 40 @ 2 kN"}, "kN is a force", "m, mm"},
		{change{rowB3, "Moving load", "40; truck @ 2"}, "not a number", "kN"},
		{change{rowB3, "Moving load", strings.Repeat("4;", 32) + "4 @ 1"}, "33 wheels", "32"},
		{change{rowH1, "Moving load", "40"}, "load on a row that is not sized", "blank"},
		{change{rowB10, "Dynamic", "0.9"}, "out of bounds: 0.9", "1 to 10"},
		{change{rowB10, "Dynamic", "1.3; 1.2"}, "two factors without a name", "1.25"},
		{change{rowB10, "Dynamic", "1.3 snow"}, "names no load", "variable, area, point"},
		{change{rowB10, "Dynamic", "1.3 point; 1.2 point"}, "names the point load twice", "1.25"},
		{change{rowB10, "Dynamic", "1.3 moving"}, "is for a moving load", "leave the factor out"},
		{change{rowB10, "Dynamic", "often"}, "not a number", "plain number"},
		{change{rowB2, "Dynamic", "1.3"}, "stands on no load", "name the load"},
		{change{rowB8, "Load set", "walkwy"}, "names no load set", "walkway"},
		{change{rowB8, "Load set", "office"}, "names no load set", "platform"},
		{change{rowB8, "Load set", "walkway; walkway"}, "names walkway twice", "once"},
		{change{rowB8, "Load set", "walkway height 3 m"}, "walkway does not ask for", "conveyor belt 1 m"},
		{change{rowB8, "Load set", "conveyor"}, "belt (m) is 0", "conveyor belt 1 m"},
		{change{rowB8, "Load set", "conveyor belt density 900"}, "leaves a value out", "conveyor belt 1 m"},
		{change{rowB8, "Load set", "conveyor belt wide density 900"}, "not a number", "length"},
		{change{rowB8, "Load set", "wind height 12 m face 0.5 m"}, "needs Wind speed", "Job sheet"},
		{change{rowB8, "Load set", "snow"}, "needs Ground snow", "Job sheet"},
		{change{rowB8, "Tributary", ""}, "the load set walkway needs the tributary width", "clear Load set"},
		{change{rowB8, "Tributary", "x"}, "not a number", "m"},
		{change{rowB10, "Load set", "conveyor belt 1 m density 900"}, "fills nothing", "clear the cells"},
		{change{rowH1, "Load set", "walkway"}, "load on a row that is not sized", "blank"},
		{change{rowB10, "Moment factor", "0.9"}, "out of bounds", "1 to 3"},
		{change{rowB5, "Net area", "1.1"}, "out of bounds", "up to 1"},
		{change{rowB5, "Net area", "0"}, "out of bounds", "above 0"},
		{change{rowB10, "Frequency", "0"}, "out of bounds", "or none"},
		{change{rowB10, "Frequency", "4 m"}, "m is a length", "Hz"},
		{change{rowB10, "Max depth", "0"}, "out of bounds", "above 0"},
		{change{rowB2, "Max depth", "500"}, "bounds a choice, and the section is given", "family"},
		{change{rowB7, "Same size", "B66"}, "no mark of the schedule", "B6"},
		{change{rowB7, "Same size", "B7"}, "row's own mark", "another row"},
		{change{rowB7, "Same size", "B2"}, "has a given section", "same section"},
		{change{rowB7, "Same size", "G1"}, "row that is not sized", "same family"},
		{change{rowB7, "Same size", "B5"}, "sized from RHS, this row from HEA", "one family"},
		{change{rowB2, "Same size", "B6"}, "asks for a choice", "family"},
		{change{rowG1, "Same size", "B6"}, "not sized", "blank"},
		{change{rowB10, "Execution", "EXC5"}, "no execution class", "EXC3"},
		{change{rowB10, "Execution", "AISC cylic"}, "no execution class", "AISC cyclic"},
		{change{rowB10, "Joints", "2 momant"}, "no kind of joint: momant", "did you mean moment"},
		{change{rowB10, "Joints", "2 welded"}, "no kind of joint: welded", "flanged tube"},
		{change{rowB10, "Joints", "0 moment"}, "whole number from 1", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "-2 moment"}, "whole number from 1", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "2.5 moment"}, "whole number from 1", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "10001 moment"}, "whole number from 1", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "moment"}, "whole number from 1", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "2"}, "names no kind", "2 moment; 4 pinned"},
		{change{rowB10, "Joints", "2 moment; 4 pinned; 1 Moment"}, "second count of moment", "one count of each kind"},
		{change{rowF1, "Concrete", ""}, "a foundation needs its concrete", "Mass if not sized"},
		{change{rowF1, "Concrete", "-1"}, "out of bounds", "100,000 m³"},
		{change{rowF1, "Concrete", "2.4 t"}, "t is a mass", "m³"},
		{change{rowF1, "Length", "-1"}, "out of bounds", "from 0"},
		{change{rowF1, "Variable", "4"}, "load on a row that is not sized", "blank"},
		{change{rowG1, "Length", "0"}, "out of bounds", "above 0"},
		{change{rowB10, "Joints", strings.Repeat("x", 501)}, "501 characters", "500"},
		{change{rowB10, "Description", strings.Repeat("x", 501)}, "501 characters", "500"},
	} {
		t.Run(c.header+"="+shorten(c.value), func(t *testing.T) {
			_, err := readCSV(t, csvOf(with(t, c.change)...), Options{})
			faults := faultsOf(t, err)
			if len(faults) != 1 {
				t.Fatalf("%d faults, want 1: %v", len(faults), err)
			}
			f := faults[0]
			if want := (sheet.Address{Row: c.row, Column: columnOf(t, c.header)}); f.Address != want {
				t.Errorf("address %v, want %v", f.Address, want)
			}
			if !strings.HasPrefix(f.Header, c.header) {
				t.Errorf("header %q, want %q", f.Header, c.header)
			}
			if !strings.Contains(f.Problem, c.problem) {
				t.Errorf("problem %q does not say %q", f.Problem, c.problem)
			}
			if !strings.Contains(f.Remedy, c.remedy) {
				t.Errorf("remedy %q does not say %q", f.Remedy, c.remedy)
			}
			if c.value != "" && f.Found == "" {
				t.Errorf("the fault does not say what was found")
			}
		})
	}
}

// Each of two bad cells in one row is reported, whatever the other.
func TestIndependentFaultsInOneRow(t *testing.T) {
	bad := []change{
		{rowB10, "Quantity", "2.5"}, {rowB10, "Length", "-6"}, {rowB10, "Support", "simpel"}, {rowB10, "Permanent", "x"},
		{rowB10, "Variable", "x"}, {rowB10, "Grade", "S345"}, {rowB10, "Point load", "x"}, {rowB10, "Effective", "0"},
		{rowB10, "Deflection", "x"}, {rowB10, "Connection", "x"},
	}
	for i, a := range bad {
		for _, b := range bad[i+1:] {
			_, err := readCSV(t, csvOf(with(t, a, b)...), Options{})
			faults := faultsOf(t, err)
			if len(faults) != 2 {
				t.Errorf("%s and %s: %d faults, want 2: %v", a.header, b.header, len(faults), err)
				continue
			}
			var got []int
			for _, f := range faults {
				got = append(got, f.Address.Column)
			}
			want := []int{columnOf(t, a.header), columnOf(t, b.header)}
			slices.Sort(want)
			if !slices.Equal(got, want) {
				t.Errorf("%s and %s: faults in columns %v, want %v", a.header, b.header, got, want)
			}
		}
	}
}

func TestFaultsOfHeaders(t *testing.T) {
	for _, c := range []struct {
		name            string
		header, becomes string
		problem, remedy string
		row             bool // the fault concerns the whole row
	}{
		{"misspelt obligatory column", "Length", "Lenght (m)", "not known", "Length (m)", false},
		{"misspelt column", "Permanent", "Permanant load (kN/m)", "not known", "Permanent load (kN/m)", false},
		{"another word in use", "Permanent", "Dead load (kN/m)", "not known", "Permanent load (kN/m)", false},
		{"unknown column", "Remarks", "Colour of the sky", "not known", "accepted are Mark", false},
		{"word in use for a new column", "Remarks", "Impact factor", "not known", "Dynamic factor", false},
		{"unit of the wrong dimension", "Length", "Length (kN)", "kN is a force", "Length (m)", false},
		{"bare ton", "Mass", "Mass if not sized (ton/m)", "bare ton", "kg/m", false},
		{"unknown unit", "Length", "Length (cubits)", "not read", "Length (m)", false},
		{"unit on a text", "Grade", "Grade (MPa)", "without a unit", "write Grade", false},
		{"two units", "Length", "Length (m, ft)", "two units", "Length (m)", false},
		{"second column of a name", "Remarks", "length [ft]", "second column Length; the first is column D", "leave one", false},
		{"no unit", "Length", "Length", "names no unit, and row 2 holds a bare number", "Length (m)", false},
		{"missing obligatory column", "Length", "", "", "", true},
		{"spreadsheet error", "Remarks", "#NAME?", "error of the spreadsheet", "text", false},
	} {
		t.Run(c.name, func(t *testing.T) {
			rows := with(t, change{1, c.header, c.becomes})
			at := columnOf(t, c.header)
			want := sheet.Address{Row: 1, Column: at}
			if c.row {
				for i := range rows {
					rows[i] = slices.Delete(rows[i], at-1, at)
				}
				want.Column = 0
			}
			_, err := readCSV(t, csvOf(rows...), Options{})
			faults := faultsOf(t, err)
			if len(faults) != 1 {
				t.Fatalf("%d faults, want 1: %v", len(faults), err)
			}
			f := faults[0]
			if f.Address != want || !strings.Contains(f.Problem, c.problem) || !strings.Contains(f.Remedy, c.remedy) {
				t.Errorf("fault %+v, want at %v problem %q, remedy %q", f, want, c.problem, c.remedy)
			}
		})
	}
}

// A cell under no header is one fault, however many rows have one.
func TestColumnWithoutHeader(t *testing.T) {
	rows := with(t)
	for i := range rows {
		rows[i] = append(rows[i], "")
		if i > 0 {
			rows[i][len(rows[i])-1] = "x"
		}
	}
	_, err := readCSV(t, csvOf(rows...), Options{})
	faults := faultsOf(t, err)
	want := sheet.Address{Row: 2, Column: len(everyColumn[0]) + 1}
	if len(faults) != 1 || faults[0].Address != want {
		t.Errorf("faults %v, want one at %v", err, want)
	}
}

func TestFaultsOfWholeSchedules(t *testing.T) {
	head := "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m)\n"
	for _, c := range []struct {
		name, csv, problem string
		at                 string
		max                int
	}{
		{"no rows", head, "no row under the header", "1", 0},
		{"a title first", "Loading quay,,\n" + head + "B1,1,6,IPE,1,1\n", "no header row", "1", 0},
		{"a note below", head + "B1,1,6,IPE,1,1\n\nchecked by the engineer\n", "stands alone", "A4", 0},
		{"no column for a load", "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m)\nB1,1,6,IPE,1\nB2,1,6,IPE,1\n", "the column is missing, and row 2 needs it", "1", 0},
		{"more rows than allowed", head + "B1,1,6,IPE,1,1\nB2,1,6,IPE,1,1\nB3,1,6,IPE,1,1\nB4,1,-6,IPE,1,1\n", "more than 2 rows", "4", 2},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := readCSV(t, c.csv, Options{MaxMembers: c.max})
			faults := faultsOf(t, err)
			if len(faults) != 1 || !strings.Contains(faults[0].Problem, c.problem) || faults[0].Address.String() != c.at {
				t.Errorf("faults %v, want one at %s: %s", err, c.at, c.problem)
			}
		})
	}
}

func TestMaxMembersExactly(t *testing.T) {
	csv := "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m)\nB1,1,6,IPE,1,1\nB2,1,6,IPE,1,1\n"
	if s := mustRead(t, csv, Options{MaxMembers: 2}); len(s.Members) != 2 {
		t.Errorf("%d members, want 2", len(s.Members))
	}
}
