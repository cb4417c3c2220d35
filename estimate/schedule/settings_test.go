package schedule

import (
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

const oneBeam = "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m)\nB1,1,6,IPE,1,1\n"

func TestFaultsOfSettings(t *testing.T) {
	for _, c := range []struct{ key, value, at, problem, remedy string }{
		{"Standard", "AISC 360", "Job!B1", "no design basis", "AISC 360 LRFD"},
		{"Standard", "BS 5950", "Job!B1", "no design basis", "en1993"},
		{"Standard", "en1994", "Job!B1", "no design basis", "en1993"},
		{"Frequency floor (Hz)", "0", "Job!B1", "out of bounds", "none"},
		{"Frequency floor", "4", "Job!B1", "no unit", "Hz"},
		{"Execution class", "EXC9", "Job!B1", "no execution class", "EXC2"},
		{"Execution class", "AISC statik", "Job!B1", "no execution class", "AISC static"},
		{"Stock lengths", "12; 15", "Job!B1", "no unit", "m, mm"},
		{"Stock lengths (m)", "12; 0.4", "Job!B1", "out of bounds", "0.5 to 100 m"},
		{"Stock lengths (m)", "12; ; 15", "Job!B1", "empty place", "12; 15 m"},
		{"Stock lengths (m)", "12; 15; 12 m", "Job!B1", "named already", "once"},
		{"Stock lengths (m)", "12; long", "Job!B1", "not a number", "length"},
		{"Stock lengths (m)", "1;2;3;4;5;6;7;8;9;10;11;12;13;14;15;16;17;18;19;20;21", "Job!B1", "too many", "20"},
		{"Stock lengths (kg)", "12", "Job!A1", "wrong unit", "Stock lengths (m)"},
		{"Kerf (mm)", "5", "Job!B1", "no Stock lengths", "Stock lengths"},
		{"Kerf (mm)", "51", "Job!B1", "out of bounds", "50 mm"},
		{"Purchase", "first fit", "Job!B1", "no Stock lengths", "waste here"},
		{"Purchase", "first fitt", "Job!B1", "no way to buy", "did you mean first fit"},
		{"Purchase", "by hand", "Job!B1", "no way to buy", "least stock"},
		{"Money", "outturn", "Job!B1", "needs the Spend date", "yyyy-mm-dd"},
		{"Money", "nominal", "Job!B1", "no money", "base date, outturn"},
		{"Spend date", "mid 2027", "Job!B1", "no date", "yyyy-mm-dd"},
		{"Site conditions", "tidall; height", "Job!B1", "no site condition", "did you mean tidal"},
		{"Site conditions", "tidal; mud", "Job!B1", "no site condition", "live plant"},
		{"Site conditions", "tidal; Tidal", "Job!B1", "named twice", "once"},
		{"Haul distance (km)", "far", "Job!B1", "not a number", "plain number"},
		{"Haul distance (km)", "50001", "Job!B1", "out of bounds", "50,000 km"},
		{"Haul distance (km)", "-1", "Job!B1", "out of bounds", "from 0"},
		{"Haul distance (kg)", "1", "Job!A1", "without a unit", "Haul distance (km)"},
		{"Tax (%)", "101", "Job!B1", "out of bounds", "100 %"},
		{"Tax", "20", "Job!B1", "no unit", "%"},
		{"Owner's costs", "maybe", "Job!B1", "neither yes nor no", "yes, no"},
		{"Management reserve", "-1", "Job!B1", "out of bounds", "from 0"},
		{"Management reserve", "150000.005", "Job!B1", "more places than EUR", "minor units"},
		{"Management reserve", "1e5", "Job!B1", "no plain amount", "150000"},
		{"Management reserve", "a lot", "Job!B1", "not a number", "plain number"},
		{"Manegement reserve", "1", "Job!A1", "not known", "Management reserve"},
		{"VAT", "20", "Job!A1", "not known", "Tax (%)"},
		{"Standard", "alowable", "Job!B1", "no design basis", "allowable"},
		{"Grade", "S999", "Job!B1", "no steel grade", "S"},
		{"Grade", "A53 B", "Job!B1", "does not suit IPE of row 2", "name a grade"},
		{"Factor", "1.2", "Job!B1", "out of bounds", "1.5 to 10"},
		{"Factor", "NaN", "Job!B1", "not a number", "plain number"},
		{"Deflection limit", "often", "Job!B1", "not a number", "plain number"},
		{"Restraint", "3", "Job!B1", "no unit", "m, mm"},
		{"Restraint (kN)", "3", "Job!A1", "wrong unit", "Restraint (m)"},
		{"Connection class", "welded", "Job!B1", "no connection class", "lattice"},
		{"Estimate class", "0", "Job!B1", "not a whole number", "5 to 1"},
		{"Estimate class", "four", "Job!B1", "not a number", "plain number"},
		{"Currency", "EURO", "Job!B1", "no currency", "EUR"},
		{"Base date", "1.2.2026", "Job!B1", "no date", "yyyy-mm-dd"},
		{"Base date", "2026-02-30", "Job!B1", "no date", "yyyy-mm-dd"},
		{"Confidence", "80", "Job!B1", "out of bounds", "P80"},
		{"Confidence", "P100", "Job!B1", "out of bounds", "P80"},
		{"Confidnce", "0.8", "Job!A1", "not known", "Confidence"},
		{"Colour", "red", "Job!A1", "not known", "accepted are Project"},
		{"250", "L", "Job!A1", "not known", "accepted are Project"},
		{"", "red", "Job!A1", "without a key", "Project"},
		{"Project", strings.Repeat("x", 501), "Job!B1", "501 characters", "500"},
	} {
		t.Run(c.key+"="+shorten(c.value), func(t *testing.T) {
			_, err := readCSV(t, oneBeam, Options{JobTable: oneKey(c.key, c.value)})
			faults := faultsOf(t, err)
			if len(faults) != 1 {
				t.Fatalf("%d faults, want 1: %v", len(faults), err)
			}
			f := faults[0]
			if f.Address.String() != c.at || !strings.Contains(f.Problem, c.problem) || !strings.Contains(f.Remedy, c.remedy) {
				t.Errorf("fault %+v, want at %s problem %q, remedy %q", f, c.at, c.problem, c.remedy)
			}
		})
	}
}

// oneKey is a job table of one key, quoted, so that no sign of the value parts cells.
func oneKey(key, value string) []byte {
	return []byte(strconv.Quote(key) + "," + strconv.Quote(value) + "\n")
}

func TestKeyTwice(t *testing.T) {
	_, err := readCSV(t, oneBeam, Options{JobTable: []byte("Grade,S235\ngrade,S999\n")})
	faults := faultsOf(t, err)
	if len(faults) != 1 || faults[0].Address.String() != "Job!A2" || !strings.Contains(faults[0].Problem, "twice") {
		t.Errorf("faults %v, want one at Job!A2", err)
	}
}

func TestSpellingsOfSettings(t *testing.T) {
	read := func(key, value string) Settings {
		t.Helper()
		return mustRead(t, oneBeam, Options{JobTable: []byte(csvOf([]string{"Key", "Value"}, []string{key, value}))}).Settings
	}
	for value, want := range map[string]float64{"0.8": 0.8, "80 %": 0.8, "P80": 0.8, "p 90": 0.9, "75%": 0.75} {
		if got := read("Confidence", value).Confidence; got != want {
			t.Errorf("confidence %q: %v, want %v", value, got, want)
		}
	}
	for value, want := range map[string]float64{"250": 250, "L/300": 300, "1/200": 200, "l / 360": 360, "none": 0} {
		if got := read("Deflection limit (L/n)", value).DeflectionLimit; got != want {
			t.Errorf("deflection limit %q: %v, want %v", value, got, want)
		}
	}
	for value, want := range map[string]float64{"full span": 0, "Full Span": 0, "10 ft": 3.048, "3 m": 3} {
		if got := read("Restraint", value).Restraint; got != want {
			t.Errorf("restraint %q: %v, want %v", value, got, want)
		}
	}
	if got := read("Estimate class", "Class 3").EstimateClass; got != 3 {
		t.Errorf("estimate class %d, want 3", got)
	}
}

func TestOverrides(t *testing.T) {
	o := Options{JobTable: []byte("Factor,3\nScheme,a\n"), Scheme: "b", Overrides: map[string]string{"factor": "1.6", "Grade": "S275"}}
	s := mustRead(t, oneBeam, o)
	if s.Settings.Factor != 1.6 || s.Settings.Scheme != "b" || s.Members[0].Grade != "S275" {
		t.Errorf("settings %+v, grade %s; want the overrides", s.Settings, s.Members[0].Grade)
	}
	o.Overrides = map[string]string{"Fctor": "2", "Grade": "S999"}
	_, err := readCSV(t, oneBeam, o)
	if faults := faultsOf(t, err); len(faults) != 2 || faults[0].Address.Sheet != "overrides" {
		t.Errorf("faults %v, want two in overrides", err)
	}
}

// A job's restraint is not longer than the member: the full span is then meant.
func TestJobRestraintOnShortMembers(t *testing.T) {
	csv := oneBeam + "B2,1,2.5,IPE,1,1\n"
	s := mustRead(t, csv, Options{JobTable: []byte("Restraint,3 m\n")})
	if got := []float64{s.Members[0].Restraint, s.Members[1].Restraint}; !cmp.Equal(got, []float64{3, 0}) {
		t.Errorf("restraints %v, want 3 and 0 (full span)", got)
	}
}

func TestConnectionClassesOfTheBook(t *testing.T) {
	o := Options{ConnectionClasses: []string{"Bolted"}, JobTable: []byte("Connection class,bolted\n")}
	s, err := readCSV(t, oneBeam, o)
	if err != nil || s.Members[0].ConnectionClass != "Bolted" {
		t.Errorf("class %v, error %v", s.Members, err)
	}
}
