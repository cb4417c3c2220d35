package schedule

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

const foundationHead = "Mark,Quantity,Length (m),Support,Section or family,Kind,Concrete (m³),Mass if not sized (kg/m or kg/m²)\n"

// A foundation may be of concrete alone, or have steel too; any row may have concrete.
// 1 yd³ is 0.764554857984 m³, 1 ft³ 0.028316846592 m³ (NIST SP 811, appendix B).
func TestFoundations(t *testing.T) {
	concrete := func(v float64) Member {
		return Member{Mark: "F1", Group: ungrouped, Kind: KindFoundation, Quantity: 2, Treatment: ByMass, Concrete: v, ConnectionClass: simpleBeams}
	}
	steel := concrete(2.4)
	steel.Length, steel.LineMass = 3, 12
	plinth := concrete(0.5)
	plinth.Kind, plinth.Length, plinth.LineMass = "handrail", 3, 12
	long := concrete(2.4)
	long.Length = 4
	for row, want := range map[string]Member{
		"F1,2,,,,foundation,2.4,":                   concrete(2.4),
		"F1,2,0,not sized,,Foundation,2.4,":         concrete(2.4),
		"F1,2,4,,,foundation,2.4,":                  long,
		"F1,2,0,,foundation,,2.4,":                  concrete(2.4),
		"F1,2,,not sized,foundation,,100 ft³,":      concrete(2.831684659),
		"F1,2,,not sized,foundation,,10 yd3,":       concrete(7.64554858),
		"F1,2,3,,,foundation,2.4,12 kg/m":           steel,
		"F1,2,3,not sized,handrail,,0.5 m³,12 kg/m": plinth,
	} {
		s, err := readCSV(t, foundationHead+row+"\n", Options{})
		if err != nil {
			t.Errorf("%s: %v", row, err)
			continue
		}
		if diff := cmp.Diff(want, s.Members[0], cmpopts.IgnoreFields(Member{}, "Row", "Defaults")); diff != "" {
			t.Errorf("%s (-want +got):\n%s", row, diff)
		}
		_, entered := entriesByID(s)["default/support/not sized"]
		if blank := strings.Split(row, ",")[3] == ""; entered != blank {
			t.Errorf("%s: the default support is in the register: %v, want %v", row, entered, blank)
		}
	}
}

func TestFaultsOfFoundations(t *testing.T) {
	for _, c := range []struct{ row, at, problem, remedy string }{
		{"F1,2,,not sized,,foundation,,", "G2", "needs its concrete", "Mass if not sized"},
		{"F1,2,,not sized,,foundation,0,", "G2", "needs its concrete", "Mass if not sized"},
		{"F1,2,,not sized,,footing,2.4,", "H2", "needs its mass", "foundation in Kind"},
		{"F1,2,0,not sized,,footing,2.4,30 kg/m", "C2", "out of bounds", "above 0"},
		{"F1,2,0,,,foundation,2.4,30 kg/m", "C2", "no mass", "above 0"},
		{"F1,2,,,,foundation,2.4,30 kg/m", "C2", "length is blank", "whole length"},
		{"F1,2,,,,foundation,2.4 m²,", "G2", "not a volume", "m³"},
	} {
		_, err := readCSV(t, foundationHead+c.row+"\n", Options{})
		faults := faultsOf(t, err)
		if len(faults) != 1 || faults[0].Address.String() != c.at || !strings.Contains(faults[0].Problem, c.problem) || !strings.Contains(faults[0].Remedy, c.remedy) {
			t.Errorf("%s: faults %v, want one at %s: %s; %s", c.row, err, c.at, c.problem, c.remedy)
		}
	}
}

// Without the column, the header row is where it is missing.
func TestConcreteColumnMissing(t *testing.T) {
	_, err := readCSV(t, "Mark,Quantity,Length (m),Section or family,Kind\nF1,2,,,foundation\nF2,2,,,foundation\n", Options{})
	faults := faultsOf(t, err)
	if len(faults) != 1 || faults[0].Address.String() != "1" || !strings.Contains(faults[0].Remedy, "add a column Concrete (m³)") {
		t.Errorf("faults %v, want one at the header row", err)
	}
}
