package section

import (
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestFindSpellings(t *testing.T) {
	for spelling, want := range map[string]string{
		"IPE 300": "IPE 300", "ipe300": "IPE 300", " Ipe-300 ": "IPE 300", "IPE\u00a0300": "IPE 300", "ipe_300": "IPE 300",
		"HEA 200": "HEA 200", "HE 200 A": "HEA 200", "he200a": "HEA 200", "HE-A 200": "HEA 200", "HE A 200": "HEA 200",
		"HEB200": "HEB 200", "HE 200 B": "HEB 200", "heb-1000": "HEB 1000", "HE 1000-B": "HEB 1000",

		"CHS 168.3x6.3": "CHS 168.3x6.3", "chs168.3X6.3": "CHS 168.3x6.3", "CHS 168,3 × 6,3": "CHS 168.3x6.3",
		"CHS 168.3*6.3": "CHS 168.3x6.3", "CHS 168.30x6.30": "CHS 168.3x6.3", "CHS 168.3 x 6.3 mm": "CHS 168.3x6.3",
		"CHS 168.3 mm x 6.3 mm": "CHS 168.3x6.3", "round tube 168.3x6.3": "CHS 168.3x6.3", "CHS 16.83cm x 0.63 cm": "CHS 168.3x6.3",
		"CHS 508x25.4": "CHS 508x25.4", "CHS 20 in x 1 in": "CHS 508x25.4", "CHS 508x16 EN 10210-2": "CHS 508x16",
		"CHS 508x16 EN 10219": "CHS 508x16 EN 10219-2", "CHS 168.3x6.3 to BS EN 10219-2": "CHS 168.3x6.3 EN 10219-2",

		"NPS 20 XS": "NPS 20 XS", "nps20xs": "NPS 20 XS", "PIPE NPS 20 XS": "NPS 20 XS", "Pipe 20 XS": "NPS 20 XS",
		"PIPE 20 in XS": "NPS 20 XS", `20" XS pipe`: "NPS 20 XS", "PIPE 20 inch XH": "NPS 20 XS", "NPS 20 SCH 30": "NPS 20 XS",
		"NPS 20 STD": "NPS 20 STD", "NPS 20 Sch. 20": "NPS 20 STD", "NPS 20 SCH STD": "NPS 20 STD",
		"NPS 12 SCH 40": "NPS 12 SCH 40", "NPS 12 schedule 40": "NPS 12 SCH 40", "NPS 12 S40": "NPS 12 SCH 40", "PIPE NPS 12 40": "NPS 12 SCH 40",
		"NPS 12 XXH": "NPS 12 XXS", "NPS 1-1/2 XS": "NPS 1-1/2 XS", "NPS 1 1/2 SCH 80": "NPS 1-1/2 XS", "NPS 1.5 XS": "NPS 1-1/2 XS",
		`Pipe 1-1/2" SCH 80`: "NPS 1-1/2 XS", "NPS 1/2 STD": "NPS 1/2 STD", "NPS 0.5 STD": "NPS 1/2 STD", "NPS 3/4 SCH 160": "NPS 3/4 SCH 160",
		"PIPE 508x12.7": "NPS 20 XS", "PIPE 20 in x 1/2 in": "NPS 20 XS", `pipe 24" x 0.375"`: "NPS 24 STD", "PIPE 12.75 x 0.5 in": "NPS 12 XS",
		"PIPE 508x25.4": "PIPE 508x25.4", "Pipe 20 in x 1 in": "PIPE 508x25.4", "PIPE 24 in x 1-1/4 in": "PIPE 610x31.75",

		"SHS 100x5": "SHS 100x5", "SHS 100x100x5": "SHS 100x5", "RHS 100x100x5": "SHS 100x5", "shs100*5.0": "SHS 100x5",
		"SHS 100x5 EN 10219": "SHS 100x5", "SHS 100x5 EN 10210": "SHS 100x5 EN 10210-2", "SHS 111x7": "SHS 111x7",
		"RHS 200x100x8": "RHS 200x100x8", "RHS 100x200x8": "RHS 200x100x8", "rectangular tube 200 x 100 x 8": "RHS 200x100x8",
		"RHS 200x100x8.5": "RHS 200x100x8.5", "RHS 8x4x0.375 in": "RHS 203.2x101.6x9.525",

		"HEM 300": "HEM 300", "HE 300 M": "HEM 300", "UPN200": "UPN 200", "UNP 200": "UPN 200", "upe 200": "UPE 200",
		"W18x50": "W18x50", "W 18 X 50": "W18x50", "w18×50": "W18x50", "W6x8.5": "W6x8.5", "C10x20": "C10x20", "C 10 x 15.3": "C10x15.3",
		"L 100x100x10": "L 100x100x10", "L100x10": "L 100x100x10", "angle 100 x 100 x 10": "L 100x100x10", "L 75x150x10": "L 150x75x10",
		"L 45x4.5": "L 45x45x4.5", "L 110x90x9": "L 110x90x9", "L 110x90x9x12": "L 110x90x9x12", "L 4x4x0.5 in": "L 101.6x101.6x12.7",
		"HSS8x8x1/2": "HSS8x8x1/2", "HSS 8 x 8 x 1/2": "HSS8x8x1/2", "HSS8x8x.5": "HSS8x8x1/2", "HSS 8x8x0.500": "HSS8x8x1/2",
		"HSS4x8x3/8": "HSS8x4x3/8", "HSS 4x4x0.188": "HSS4x4x3/16", "HSS3-1/2x3-1/2x1/4": "HSS3-1/2x3-1/2x1/4", "HSS 3.5x3.5x1/4": "HSS3-1/2x3-1/2x1/4",
		"HSS 203.2x203.2x12.7 mm": "HSS8x8x1/2", "HSS 7.25x3x0.2": "HSS 184.15x76.2x5.08 mm",
		"HSS 6.625x0.280": "HSS6.625x0.280", "HSS6.625x.28": "HSS6.625x0.280", "round HSS 6.625x0.280": "HSS6.625x0.280",
		"HSS 6x0.280": "HSS6.000x0.280", "HSS 9x0.4": "HSS-ROUND 228.6x10.16 mm",
		"WELDED-I 900x300x10x20x400x25": "WELDED-I 900x300x10x20x400x25", "PG 900x300x10x20x300x20": "WELDED-I 900x300x10x20",
		"WELDED-BOX 600x400x12x20": "WELDED-BOX 600x400x12x20", "box 600x400x12x20": "WELDED-BOX 600x400x12x20",
		"TEE 150x200x10x15": "TEE 150x200x10x15", "tee 140x140x12x15x12": "TEE 140x140x12x15x12", "CHANNEL 200x80x6x11": "CHANNEL 200x80x6x11",
		"1/2 IPE 300": "1/2 IPE 300", "½ he 300 a": "1/2 HEA 300", "WT9x25": "WT9x25", "WT 4 x 7.5": "WT4x7.5",
		"2x UPN 200 @ 600": "2x UPN 200 @ 600", "2 UPN200 at 600 mm": "2x UPN 200 @ 600", "4xL 100x100x10@800x600": "4x L 100x100x10 @ 800x600",
		"4 x CHS 168.3x6.3 at 1.2x0.9 m": "4x CHS 168.3x6.3 @ 1200x900", "2 x HSS8x8x1/2 @ 24 in": "2x HSS8x8x1/2 @ 609.6",

		"WELDED-I 500x200x10x16": "WELDED-I 500x200x10x16", "welded I 500 x 200 x 10 x 16": "WELDED-I 500x200x10x16", "WI500x200x10x16": "WELDED-I 500x200x10x16",
		"ROUND 50": "ROUND 50", "round bar 50 mm": "ROUND 50", "RD 2 in": "ROUND 50.8", "ROUND .5 in": "ROUND 12.7",
		"FLAT 100x10": "FLAT 100x10", "FL 10x100": "FLAT 100x10", "flat bar 100 x 10": "FLAT 100x10",
	} {
		s, err := Find(spelling)
		if err != nil {
			t.Errorf("Find(%q): %v", spelling, err)
			continue
		}
		if s.Designation != want {
			t.Errorf("Find(%q) = %s, want %s", spelling, s.Designation, want)
		}
		again, err := Find(s.Designation)
		if err != nil || again != s {
			t.Errorf("Find(%q) does not give the same section again: %v", s.Designation, err)
		}
	}
}

func TestFindGeometry(t *testing.T) {
	for designation, want := range map[string]Section{
		"CHS 508x25.4":           {Family: "CHS", Shape: RoundTube, Making: HotRolled, H: 508, B: 508, Tw: 25.4},
		"CHS 508x16 EN 10219":    {Family: "CHS", Shape: RoundTube, Making: ColdFormed, H: 508, B: 508, Tw: 16},
		"NPS 20 XS":              {Family: "PIPE", Shape: RoundTube, Making: HotRolled, H: 508, B: 508, Tw: 12.7},
		"RHS 100x200x8":          {Family: "RHS", Shape: RectangularTube, Making: ColdFormed, H: 200, B: 100, Tw: 8, Tf: 8, R: 20},
		"SHS 100x5 EN 10210":     {Family: "SHS", Shape: RectangularTube, Making: HotRolled, H: 100, B: 100, Tw: 5, Tf: 5, R: 7.5},
		"HE 300 B":               {Family: "HEB", Shape: ISection, Making: HotRolled, H: 300, B: 300, Tw: 11, Tf: 19, R: 27},
		"WELDED-I 500x200x10x16": {Family: "WELDED-I", Shape: ISection, Making: Welded, H: 500, B: 200, Tw: 10, Tf: 16},
		"ROUND 50":               {Family: "ROUND", Shape: SolidRound, Making: HotRolled, H: 50, B: 50, Tw: 50},
		"FLAT 10x100":            {Family: "FLAT", Shape: Flat, Making: HotRolled, H: 100, B: 10, Tw: 10},
	} {
		s, err := Find(designation)
		if err != nil {
			t.Errorf("Find(%q): %v", designation, err)
			continue
		}
		round := func(x float64) float64 { return math.Round(x*1e7) / 1e4 }
		got := Section{Family: s.Family, Shape: s.Shape, Making: s.Making,
			H: round(s.H), B: round(s.B), Tw: round(s.Tw), Tf: round(s.Tf), R: round(s.R)}
		if d := cmp.Diff(want, got); d != "" {
			t.Errorf("Find(%q), mm (-want +got):\n%s", designation, d)
		}
	}
}

func TestFindRefuses(t *testing.T) {
	for designation, want := range map[string]struct {
		why  string
		near []string
	}{
		"IPE 310":                     {"IPE has no such size", []string{"IPE 300", "IPE 330", "IPE 270"}},
		"HE 210 A":                    {"HEA has no such size", []string{"HEA 220", "HEA 200", "HEA 240"}},
		"IPF 300":                     {"no such family or size; families are IPE, HEA, HEB, HEM, UPN, UPE, W, C, L, CHS, PIPE, SHS, RHS, HSS, HSS-ROUND, WELDED-I, WELDED-BOX, TEE, CHANNEL, ROUND, FLAT", []string{"IPE 300"}},
		"XYZW 300":                    {"no such family or size", nil},
		"":                            {"no such family or size", nil},
		"300":                         {"no such family or size", nil},
		"W18x51":                      {"W has no such size", []string{"W18x50"}},
		"W 18":                        {"W has no such size", []string{"W18x106", "W18x119", "W18x130"}},
		"HE 310 M":                    {"HEM has no such size", []string{"HEM 320", "HEM 300"}},
		"UPN 210":                     {"UPN has no such size", []string{"UPN 220", "UPN 200"}},
		"C10x19":                      {"C has no such size", []string{"C10x20"}},
		"WT9x26":                      {"WT is half of a W; there is no W18x52", []string{"W18x50"}},
		"HSS 8x8":                     {"leaves no bore", nil},
		"L 100x100x":                  {"is not a dimension; write L 100x100x10", nil},
		"L 100x100x60":                {"do not fit", nil},
		"WIDGET 300":                  {"no such family or size", nil},
		"3x UPN 200 @ 600":            {"a set of 3 chords; want 2 or 4", nil},
		"2x UPN 200 @ 60":             {"overlap; want 200 mm or more", nil},
		"2x UPN 200 @ 600x60":         {"two chords with a spacing of 60 mm in the width", nil},
		"4x UPN 200 @ 600":            {"chords 0 mm apart in the width", nil},
		"4x UPM 200 @ 600":            {"chord of the set: unknown section", nil},
		"2x UPN 200 @ wide":           {"spacing \"wide\"", nil},
		"TEE 150x200x10":              {"TEE takes depth x width x stem x flange", nil},
		"WELDED-BOX 60x40x20x20":      {"do not fit into 60 x 40 mm", nil},
		"WELDED-I 900x300x10x20x5x25": {"do not fit into 900 mm", nil},
		"CHANNEL 200x80x90x11":        {"do not fit into 200 x 80 mm", nil},
		"IPE":                         {"IPE is a family, not a size", nil},
		"CHS":                         {"CHS is a family, not a size", nil},
		"CHS 508":                     {"CHS takes diameter x wall, such as CHS 508x25.4; found 1 dimensions", nil},
		"CHS 100x50x5":                {"CHS takes diameter x wall", nil},
		"CHS 168.3x84.15":             {"wall 84.15 mm leaves no bore", nil},
		"CHS 168.3x":                  {`"" is not a dimension; write CHS 508x25.4 (diameter x wall in mm)`, nil},
		"CHS 168.3xNaN":               {`"NAN" is not a dimension`, nil},
		"CHS -5x1x":                   {"is not a dimension", nil},
		"CHS 0x0":                     {"diameter of 0 mm; want 0.1 to 20000 mm", nil},
		"CHS 20 in x 25":              {"only some dimensions have a unit", nil},
		"CHS 1/0x5":                   {`"1/0" is not a dimension`, nil},
		"CHS 508 ft x 2 ft":           {"is not a dimension", nil},
		"SHS 100x80x5":                {"SHS has equal sides; write RHS 100x80x5", nil},
		"SHS 20x6":                    {"does not fit into 20 x 20 mm", nil},
		"RHS 180x60x12.5":             {"wall 12.5 mm with corner radius 37.5 mm does not fit into 180 x 60 mm; want a thinner wall", nil},
		"RHS 200x100":                 {"RHS takes depth x width x wall", nil},
		"FLAT 100x10 EN10210":         {"FLAT is not made to EN 10210-2; leave the standard out", nil},
		"WELDED-I 500x200":            {"WELDED-I takes depth x width x web x flange", nil},
		"NPS 20 SCH 35":               {"no such size and schedule", nil},
		"NPS 7 STD":                   {"no such size and schedule", nil},
		"PIPE 12 in x 0.5 in":         {"no nominal pipe size has an outside diameter of 304.8 mm; write NPS and schedule, or CHS", []string{"NPS 12 XS"}},
		"ROUND 50000":                 {"diameter of 50000 mm; want 0.1 to 20000 mm", nil},
	} {
		s, err := Find(designation)
		var unknown *UnknownError
		if !errors.As(err, &unknown) {
			t.Errorf("Find(%q) = %s, %v; want an *UnknownError", designation, s.Designation, err)
			continue
		}
		if unknown.Found != designation || !strings.Contains(unknown.Why, want.why) {
			t.Errorf("Find(%q): %v\nwant %q", designation, err, want.why)
		}
		if len(want.near) == 0 {
			continue
		}
		if d := cmp.Diff(want.near, unknown.Near[:min(len(want.near), len(unknown.Near))]); d != "" {
			t.Errorf("Find(%q): near misses (-want +got):\n%s", designation, d)
		}
	}
	_, err := Find("IPE 310")
	if want := `unknown section "IPE 310": IPE has no such size; did you mean IPE 300 or IPE 330 or IPE 270?`; err.Error() != want {
		t.Errorf("got %v\nwant %s", err, want)
	}
}

func TestIsFamily(t *testing.T) {
	for text, want := range map[string]string{
		"IPE": "IPE", "ipe": "IPE", " HE-A ": "HEA", "he b": "HEB", "he-m": "HEM", "upn": "UPN", "UNP": "UPN", "w": "W", "C": "C", "L": "L", "angle": "L", "hss": "HSS", "Round HSS": "HSS-ROUND", "box": "WELDED-BOX", "chs": "CHS", "NPS": "PIPE", "pipe": "PIPE",
		"Square tube": "SHS", "rhs": "RHS", "welded I": "WELDED-I", "WELDED-I": "WELDED-I", "flat bar": "FLAT", "round": "ROUND",
	} {
		if got, ok := IsFamily(text); !ok || got != want {
			t.Errorf("IsFamily(%q) = %q, %v; want %q", text, got, ok, want)
		}
	}
	for _, text := range []string{"", "IPE 300", "I", "HE", "UB", "CHS 508x25.4"} {
		if got, ok := IsFamily(text); ok {
			t.Errorf("IsFamily(%q) = %q; want none", text, got)
		}
	}
	for _, f := range Families() {
		if got, ok := IsFamily(f.Name); !ok || got != f.Name {
			t.Errorf("IsFamily(%q) = %q, %v", f.Name, got, ok)
		}
	}
}

func TestFamilyWordsAreTold(t *testing.T) {
	owner := map[string]string{}
	for name, spellings := range words {
		for _, w := range spellings {
			if old, twice := owner[w]; twice {
				t.Errorf("%q names both %s and %s", w, old, name)
			}
			owner[w] = name
		}
	}
}

// Any text gives a sound section or an *UnknownError.
func TestFindAnyText(t *testing.T) {
	pieces := rapid.SampledFrom([]string{"IPE", "HE", "A", "CHS ", "SHS", "L ", "C", "W", "HSS", "TEE ", "CHANNEL ", "WELDED-BOX ", "2x", "4x", "@", "1/2 ", "WT", "RHS ", "PIPE ", "NPS", "WELDED-I ", "FLAT", "ROUND", "x", "x", "X",
		"1", "20", "168.3", "6.3", "1/2", "1-1/2", "/", "0", " in", "mm", `"`, "STD", "SCH", " ", "-", ".", ",", "EN 10210", "99999999999999999999", "é"})
	rapid.Check(t, func(r *rapid.T) {
		text := strings.Join(rapid.SliceOfN(pieces, 0, 10).Draw(r, "pieces"), "")
		s, err := Find(text)
		if err != nil {
			var unknown *UnknownError
			if !errors.As(err, &unknown) || unknown.Found != text {
				r.Fatalf("Find(%q): %v", text, err)
			}
			return
		}
		for _, x := range []float64{s.A, s.Iy, s.Iz, s.Wply, s.Wplz, s.J, s.Avy, s.Avz, s.Mass} {
			if !(x > 0 && x < math.MaxFloat64) {
				r.Fatalf("Find(%q) = %+v: a property is not above zero", text, s)
			}
		}
		if again, err := Find(s.Designation); err != nil || again != s {
			r.Fatalf("Find(%q) = %s, which does not find itself: %v", text, s.Designation, err)
		}
	})
}

func BenchmarkFind(b *testing.B) {
	for b.Loop() {
		if _, err := Find("CHS 168.3x6.3"); err != nil {
			b.Fatal(err)
		}
	}
}

// All data is read once, at the first use: it must not be felt at the start.
func BenchmarkLoad(b *testing.B) {
	for b.Loop() {
		if _, err := read(); err != nil {
			b.Fatal(err)
		}
	}
}
