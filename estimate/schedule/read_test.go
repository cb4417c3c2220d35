package schedule

import (
	"context"
	"encoding/csv"
	"errors"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"spanwright/estimate/sheet"
)

// readCSV reads a schedule in CSV.
func readCSV(t *testing.T, csv string, o Options) (Schedule, error) {
	t.Helper()
	book, err := sheet.Open([]byte(csv), "test.csv", "text/csv", sheet.DefaultLimits())
	if err != nil {
		t.Fatalf("opening: %v", err)
	}
	return Read(context.Background(), book, o)
}

// mustRead reads a schedule that has no fault.
func mustRead(t *testing.T, csv string, o Options) Schedule {
	t.Helper()
	s, err := readCSV(t, csv, o)
	if err != nil {
		t.Fatalf("reading: %v", err)
	}
	return s
}

// faultsOf returns the faults of an error, none for nil.
func faultsOf(t *testing.T, err error) sheet.Faults {
	t.Helper()
	var f sheet.Faults
	if err != nil && !errors.As(err, &f) {
		t.Fatalf("the error is no list of faults: %v", err)
	}
	return f
}

// csvOf writes rows as CSV, quoting what needs it.
func csvOf(rows ...[]string) string {
	var b strings.Builder
	w := csv.NewWriter(&b)
	_ = w.WriteAll(rows) // a strings.Builder never fails
	return b.String()
}

// extended are the columns that most rows leave blank, with the rows that do not.
var extended = struct {
	heads []string
	cells map[string][]string // by mark
}{
	[]string{"Horizontal load (kN/m)", "Moving load (kN)", "Dynamic factor", "Load set", "Moment factor", "Net area factor", "Frequency floor (Hz)",
		"Max depth (mm)", "Same size as", "Concrete (m³)", "Joints", "Coating", "Execution class"},
	map[string][]string{
		"B10": {"0.6", "", "1.3 point; 1.2 on horizontal load", "", "1.13", "", "4", "500", "", "", "2 pinned; 4 moment", "galvanised", "exc 3"},
		"B3":  {"", "40; 30; 40 @ 2 m", "1.25", "", "", "", "none", "", "", "", "", "", ""},
		"B5":  {"", "12", "", "", "", "0.85", "", "", "", "0.75", "", "", ""},
		"B7":  {"", "", "", "", "", "", "", "", "B6", "", "", "", ""},
		"F1":  {"", "", "", "", "", "", "", "", "", "2.4", "", "", ""},
		"B8":  {"", "", "1.1 variable", "walkway", "", "", "", "", "", "", "1 site splice", "", "aisc CYCLIC"},
	},
}

// everyColumn is a schedule that uses each support word and each column.
var everyColumn = extend(fewColumns)

func extend(rows [][]string) [][]string {
	out := [][]string{slices.Concat(rows[0], extended.heads)}
	for _, r := range rows[1:] {
		more, ok := extended.cells[r[0]]
		if !ok {
			more = make([]string, len(extended.heads))
		}
		out = append(out, slices.Concat(r, more))
	}
	return out
}

var fewColumns = [][]string{
	{"Mark", "Group", "Quantity", "Length (m)", "Support", "Permanent load (kN/m)", "Variable load (kN/m)", "Section or family", "Grade",
		"Kind", "Description", "Point load (kN)", "Point position (m)", "Axial load (kN, compression +)", "Area load (kN/m²)", "Tributary width (m)",
		"Overhang (m)", "Support positions (m)", "Restraint spacing (m)", "Effective length factor", "Deflection limit (L/n)", "Connection class",
		"Mass if not sized (kg/m or kg/m²)", "Area (m²)", "Remarks"},
	{"B10", "Deck", "4", "6", "simple", "2.5", "4", "IPE", "S355", "beam", "floor beam", "12", "3.2", "", "", "", "", "", "2", "1", "L/360", "Simple Beams", "", "", "as drawn"},
	{"B2", "Deck", "2", "3", "cantilever", "1", "0", "HE 200 B", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", ""},
	{"B3", "Deck", "1", "8", "fixed both ends", "1", "", "IPE", "", "", "", "", "", "", "5", "1.8", "", "", "full span", "", "none", "", "", "", ""},
	{"B4", "Deck", "1", "8", "propped", "1", "1", "SHS", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", ""},
	{"B5", "Deck", "1", "8", "overhang", "1", "1", "RHS", "", "", "", "", "", "", "", "", "2", "", "", "", "", "", "", "", ""},
	{"B6", "Deck", "1", "8", "two equal spans", "1", "1", "HEA", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", ""},
	{"B7", "Deck", "1", "4", "simple", "1", "2", "HEA", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "", ""},
	{"B8", "Deck", "1", "6", "simple", "", "", "UPN", "", "", "", "", "", "", "", "1.2", "", "", "", "", "", "", "", "", ""},
	{"BM1", "Boom", "1", "42", "", "0.5", "0.8", "PIPE", "", "loading boom", "", "5", "42", "20", "", "", "", "0 fixed; 28; 42", "", "0.8", "", "", "", "", ""},
	{"C1", "Tower", "4", "9", "strut", "", "", "CHS 168.3x6.3", "S235", "tower leg", "", "", "", "180", "", "", "", "", "", "", "", "", "", "", ""},
	{"F1", "Ground", "4", "", "", "", "", "", "", "Foundation", "", "", "", "", "", "", "", "", "", "", "", "", "", "", ""},
	{"G1", "", "1", "", "not sized", "", "", "grating", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "25 kg/m²", "36", ""},
	{"H1", "", "2", "12", "not sized", "", "", "handrail", "", "", "", "", "", "", "", "", "", "", "", "", "", "", "30 kg/m", "", ""},
}

func TestReadEveryColumn(t *testing.T) {
	s := mustRead(t, csvOf(everyColumn...), Options{Scheme: "inner support"})
	var marks []string
	for _, m := range s.Members {
		marks = append(marks, m.Mark)
	}
	if diff := cmp.Diff([]string{"B2", "B3", "B4", "B5", "B6", "B7", "B8", "B10", "BM1", "C1", "F1", "G1", "H1"}, marks); diff != "" {
		t.Errorf("order of marks (-want +got):\n%s", diff)
	}
	permanent := func(v float64) Load {
		return Load{Nature: "permanent", Kind: "uniform", Value: v, Label: "permanent load"}
	}
	variable := func(v float64) Load {
		return Load{Nature: "variable", Kind: "uniform", Value: v, Free: true, Label: "variable load"}
	}
	point := func(v, x float64) Load {
		return Load{Nature: "variable", Kind: "point", Value: v, Position: x, Free: true, Label: "point load"}
	}
	area := variable(9000) // 5 kN/m² over 1.8 m
	area.Label = "area load"
	struck := point(12000, 3.2)
	struck.Dynamic = 1.3
	horizontal := Load{Nature: "variable", Kind: "uniform", Value: 600, Free: true, Sideways: true, Dynamic: 1.2, Label: "horizontal load"}
	// 0.4 kN/m² (common practice, no source) and 3 kN/m² (EN 1991-1-1:2002 table 6.2,
	// C3, from memory) over 1.2 m.
	deck, people := permanent(480), variable(3600)
	deck.Label, people.Label, people.Dynamic = "walkway deck", "walkway people", 1.1
	train := func(dynamic float64, spacings []float64, wheels ...float64) Load {
		return Load{Nature: "variable", Kind: "train", Free: true, Wheels: wheels, Spacings: spacings, Dynamic: dynamic, Label: "moving load"}
	}
	want := []Member{
		{Mark: "B2", Group: "Deck", Kind: "cantilever", Quantity: 2, Length: 3, Treatment: CheckSection, Arrangement: "cantilever",
			Supports: []Support{{0, "fixed"}}, Loads: []Load{permanent(1000)}, Family: "HEB", Section: "HEB 200", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, ConnectionClass: "simple beams"},
		{Mark: "B3", Group: "Deck", Kind: "beam", Quantity: 1, Length: 8, Treatment: SizeFromFamily, Arrangement: "fixed both ends",
			Supports: []Support{{0, "fixed"}, {8, "fixed"}}, Loads: []Load{permanent(1000), area, train(1.25, []float64{2, 2}, 40000, 30000, 40000)}, Family: "IPE", Grade: "S235",
			LengthFactor: 0, ConnectionClass: "simple beams"},
		{Mark: "B4", Group: "Deck", Kind: "beam", Quantity: 1, Length: 8, Treatment: SizeFromFamily, Arrangement: "propped",
			Supports: []Support{{0, "fixed"}, {8, "pinned"}}, Loads: []Load{permanent(1000), variable(1000)}, Family: "SHS", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, ConnectionClass: "simple beams"},
		{Mark: "B5", Group: "Deck", Kind: "beam", Quantity: 1, Length: 8, Treatment: SizeFromFamily, Arrangement: "overhang",
			Supports: []Support{{0, "pinned"}, {6, "pinned"}}, Loads: []Load{permanent(1000), variable(1000), train(0, nil, 12000)}, Family: "RHS", Grade: "S235",
			LengthFactor: 0, NetAreaFactor: 0.85, Concrete: 0.75, DeflectionLimit: 250, ConnectionClass: "simple beams"},
		{Mark: "B6", Group: "Deck", Kind: "beam", Quantity: 1, Length: 8, Treatment: SizeFromFamily, Arrangement: "two equal spans",
			Supports: []Support{{0, "pinned"}, {4, "pinned"}, {8, "pinned"}}, Loads: []Load{permanent(1000), variable(1000)}, Family: "HEA", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, ConnectionClass: "simple beams"},
		{Mark: "B7", Group: "Deck", Kind: "beam", Quantity: 1, Length: 4, Treatment: SizeFromFamily, Arrangement: "simple",
			Supports: []Support{{0, "pinned"}, {4, "pinned"}}, Loads: []Load{permanent(1000), variable(2000)}, Family: "HEA", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, SameSizeAs: "B6", ConnectionClass: "simple beams"},
		{Mark: "B8", Group: "Deck", Kind: "beam", Quantity: 1, Length: 6, Treatment: SizeFromFamily, Arrangement: "simple",
			Supports: []Support{{0, "pinned"}, {6, "pinned"}}, Loads: []Load{deck, people}, Family: "UPN", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, LoadSet: "walkway", Joints: []Joint{{"site splice", 1}}, ConnectionClass: "simple beams", ExecutionClass: "AISC cyclic"},
		{Mark: "B10", Group: "Deck", Kind: "beam", Description: "floor beam", Quantity: 4, Length: 6, Treatment: SizeFromFamily, Arrangement: "simple",
			Supports: []Support{{0, "pinned"}, {6, "pinned"}}, Loads: []Load{permanent(2500), variable(4000), horizontal, struck}, Family: "IPE", Grade: "S355",
			Restraint: 2, LengthFactor: 1, DeflectionLimit: 360, MomentFactor: 1.13, FrequencyFloor: 4, MaxDepth: 0.5,
			Joints: []Joint{{"moment", 4}, {"pinned", 2}}, ConnectionClass: "simple beams", Coating: "galvanised", ExecutionClass: "EXC3", Remarks: "as drawn"},
		{Mark: "BM1", Group: "Boom", Kind: "loading boom", Quantity: 1, Length: 42, Treatment: SizeFromFamily, Arrangement: "positions",
			Supports: []Support{{0, "fixed"}, {28, "pinned"}, {42, "pinned"}}, Loads: []Load{permanent(500), variable(800), point(5000, 42)}, Axial: 20000,
			Family: "PIPE", Grade: "A53 B", LengthFactor: 0.8, DeflectionLimit: 100, ConnectionClass: "tube booms"},
		{Mark: "C1", Group: "Tower", Kind: "tower leg", Quantity: 4, Length: 9, Treatment: CheckSection, Arrangement: "strut", Upright: true,
			Supports: []Support{{0, "pinned"}, {9, "pinned"}}, Axial: 180000, Family: "CHS", Section: "CHS 168.3x6.3", Grade: "S235",
			LengthFactor: 0, DeflectionLimit: 250, ConnectionClass: "trestles"},
		{Mark: "F1", Group: "Ground", Kind: "foundation", Quantity: 4, Treatment: ByMass, Concrete: 2.4, ConnectionClass: "simple beams"},
		{Mark: "G1", Group: "ungrouped", Kind: "grating", Quantity: 1, Treatment: ByMass, AreaMass: 25, Area: 36, ConnectionClass: "simple beams"},
		{Mark: "H1", Group: "ungrouped", Kind: "handrail", Quantity: 2, Length: 12, Treatment: ByMass, LineMass: 30, ConnectionClass: "simple beams"},
	}
	if diff := cmp.Diff(want, s.Members, cmpopts.IgnoreFields(Member{}, "Row", "Defaults")); diff != "" {
		t.Errorf("members (-want +got):\n%s", diff)
	}
	settings := Settings{Scheme: "inner support", DesignBasis: "allowable", Factor: 3, Grade: "S235", DeflectionLimit: 250, EstimateClass: 5, Currency: "EUR", Confidence: 0.8,
		Kerf: 0.005, Purchase: "waste", Money: "base date"}
	if diff := cmp.Diff(settings, s.Settings); diff != "" {
		t.Errorf("settings (-want +got):\n%s", diff)
	}
	if got, want := s.Members[0].Row, (sheet.Address{Row: 3, Column: 1}); got != want {
		t.Errorf("row of B2: %v, want %v", got, want)
	}
}

func TestEcho(t *testing.T) {
	s := mustRead(t, csvOf(everyColumn...), Options{})
	byMark := map[string]EchoMember{}
	for _, m := range s.Echo.Members {
		byMark[m.Mark] = m
	}
	// By hand: 2.5 × 6; 4 × 6 + 1.3 × 12; 1.2 × 0.6 × 6.
	if got, want := byMark["B10"], (EchoMember{"B10", 15, 39.6, 4.32, 0}); got != want {
		t.Errorf("B10: %v, want %v", got, want)
	}
	// 1 × 8; 5 × 1.8 × 8 + 1.25 × (40 + 30 + 40).
	if got, want := byMark["B3"], (EchoMember{"B3", 8, 209.5, 0, 0}); got != want {
		t.Errorf("B3: %v, want %v", got, want)
	}
	if got, want := byMark["C1"], (EchoMember{"C1", 0, 0, 0, 180}); got != want {
		t.Errorf("C1: %v, want %v", got, want)
	}
	// HEB 200 is 61.3 kg/m (EN 10365:2017), CHS 168.3x6.3 is 25.2 kg/m (EN 10210-2:2006),
	// both from memory: 2 × 3 × 61.3 kg, 4 × 9 × 25.2 kg; 25 × 36 + 2 × 12 × 30 kg.
	want := []EchoGroup{{"Boom", 1, 0}, {"Deck", 12, 0.3678}, {"Ground", 4, 0}, {"Tower", 4, 0.9072}, {"ungrouped", 3, 1.62}}
	if diff := cmp.Diff(want, s.Echo.Groups); diff != "" {
		t.Errorf("groups (-want +got):\n%s", diff)
	}
}

func TestOmissions(t *testing.T) {
	s := mustRead(t, csvOf(everyColumn...), Options{})
	var names []string
	for _, o := range s.Omissions {
		name, _, _ := strings.Cut(strings.TrimPrefix(o, "No "), " rows:")
		names = append(names, name)
	}
	if diff := cmp.Diff([]string{"stair", "ladder", "bracing", "base plate"}, names); diff != "" {
		t.Errorf("omissions (-want +got):\n%s", diff)
	}
}
