package schedule

import (
	"strings"
	"testing"

	"spanwright/structural/unit"
)

// What documentation and template show is what the reader reads.
func TestHeadersAreRead(t *testing.T) {
	for name, list := range map[string][]definition{"columns": columns[:], "keys": jobKeys[:], "definition": definitionHeads[:], "risks": riskHeads[:]} {
		for i, d := range list {
			for _, text := range []string{d.Header, strings.ToUpper(d.name()), " " + strings.ReplaceAll(d.name(), " ", "  ")} {
				if h := readHeading(text, list); h.wrong != nil || h.id != i {
					t.Errorf("%s: %q is read as %+v, want %d", name, text, h, i)
				}
			}
			if d.Meaning == "" || d.Example == "" {
				t.Errorf("%s: %s has no meaning or no example", name, d.Header)
			}
			if len(d.dimensions) == 1 && d.Unit != "" && unit.Must(d.Unit).Dimension != d.dimensions[0] {
				t.Errorf("%s: %s is in %s", name, d.Header, d.Unit)
			}
		}
	}
}

// No hint is the name of another column, and none stands for two.
func TestHintsAreUnambiguous(t *testing.T) {
	for name, list := range map[string][]definition{"columns": columns[:], "keys": jobKeys[:], "definition": definitionHeads[:], "risks": riskHeads[:]} {
		seen := map[string]string{}
		for _, d := range list {
			for _, hint := range d.hints {
				key := fold(hint)
				if other, twice := seen[key]; twice && other != d.Header {
					t.Errorf("%s: %q stands for %s and %s", name, hint, other, d.Header)
				}
				seen[key] = d.Header
			}
		}
	}
}

func TestUnitsOfHeaders(t *testing.T) {
	for text, want := range map[string]string{
		"Length (mm)": "mm", "length[FT]": "ft", "LENGTH, in": "in", "Length  ( m )": "m",
		"Axial load (kN, compression +)": "kN", "Axial load (compression +, kip)": "kip", "Axial load (compression +)": "",
		"Permanent load (plf)": "plf", "Area load (psf)": "psf", "Mass if not sized (kg/m or kg/m²)": "", "Mass if not sized (lb/ft)": "lb/ft",
		"Mass if not sized (kg/m2)": "kg/m²", "Length (')": "ft", "Quantity (#)": "", "Quantity (pcs)": "", "Deflection limit (L/n)": "",
	} {
		h := readHeading(text, columns[:])
		if h.wrong != nil || h.unit.Symbol != want {
			t.Errorf("%q: unit %q, fault %v; want %q", text, h.unit.Symbol, h.wrong, want)
		}
	}
}

// A percentage in a key's brackets is its unit.
func TestPercentOfHeaders(t *testing.T) {
	for _, text := range []string{"Tax (%)", "Confidence (%)"} {
		if h := readHeading(text, jobKeys[:]); h.wrong != nil || h.unit.Symbol != "%" {
			t.Errorf("%q: unit %q, fault %v; want %%", text, h.unit.Symbol, h.wrong)
		}
	}
}

// Lengths along the member take the unit of Length where their header has none.
func TestUnitOfLengthIsShared(t *testing.T) {
	s := mustRead(t, "Mark,Quantity,Length (ft),Section or family,Permanent load (klf),Variable load (klf),Support positions\nB1,1,20,IPE,1,1,0; 10; 20 ft\n", Options{})
	if got := s.Members[0].Supports; len(got) != 3 || got[1].Position != 3.048 || got[2].Position != 6.096 {
		t.Errorf("supports %v, want 0, 3.048 and 6.096 m", got)
	}
}

func TestColumnsAreDescribed(t *testing.T) {
	list := Columns()
	if len(list) != int(columnCount) || len(JobKeys()) != int(jobCount) {
		t.Fatalf("%d columns, %d keys", len(list), len(JobKeys()))
	}
	var needed []string
	for _, c := range list {
		if c.Obligatory {
			needed = append(needed, c.Header)
		}
	}
	if got, want := strings.Join(needed, " | "), "Mark | Quantity | Length (m) | Section or family"; got != want {
		t.Errorf("obligatory columns %s, want %s", got, want)
	}
	if got := list[colPermanent].Accepts; !strings.Contains(got, "klf") {
		t.Errorf("Permanent load accepts %q", got)
	}
	list[0].Header = "spoilt"
	if Columns()[0].Header != "Mark" {
		t.Error("a caller can change the columns")
	}
}
