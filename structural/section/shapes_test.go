package section

import (
	"encoding/json"
	"math"
	"os"
	"testing"
)

type checkSection struct {
	ID        string
	Kind      string
	Dims      map[string]float64 `json:"dims_mm"`
	Props     map[string]float64
	Published struct {
		Source string
		Values []struct {
			Prop      string
			Published float64
		}
	}
}

func readChecks(t *testing.T) []checkSection {
	t.Helper()
	text, err := os.ReadFile("testdata/sections.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Sections []checkSection }
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Sections) != 31 {
		t.Fatalf("testdata holds %d sections, want 31", len(file.Sections))
	}
	return file.Sections
}

func (c checkSection) build(t *testing.T) Section {
	t.Helper()
	d := func(name string) float64 { return c.Dims[name] / 1000 }
	var s Section
	var err error
	switch c.Kind {
	case "I_rolled", "W", "plate_girder":
		s, err = iSection(d("h"), d("b"), d("tw"), d("tf"), d("r"))
	case "CHS":
		s, err = roundTube(d("D"), d("t"))
	case "RHS":
		s, err = rectangularTube(d("h"), d("b"), d("t"), d("ro"), d("ri"))
	case "solid_round":
		s, err = solidRound(d("D"))
	case "flat":
		s, err = flat(d("b"), d("t"))
	default:
		t.Fatalf("%s: kind %q", c.ID, c.Kind)
	}
	if err != nil {
		t.Fatalf("%s: %v", c.ID, err)
	}
	return s
}

func properties(s Section) map[string]float64 {
	return map[string]float64{
		"A": s.A, "Iy": s.Iy, "Iz": s.Iz, "Wel_y": s.Wely, "Wel_z": s.Welz, "Wpl_y": s.Wply, "Wpl_z": s.Wplz,
		"iy": s.Ry, "iz": s.Rz, "perimeter": s.Perimeter, "mass": 7850 * s.A,
		"J": s.J, "J_EN_annex": s.J, "Iw_thin_wall": s.Iw, "Iw": s.Iw,
	}
}

// Values of testdata/sections.json: polygon integration for all but J and Iw,
// these by the formula or model that the key names. J of open sections is a
// handbook formula, so against the finite-element model it has a wider band: 4 %
// is the formula's own error (its values are those that EN section tables print).
func TestAgainstIndependentValues(t *testing.T) {
	swapped := map[string]string{"Iy": "Iz", "Iz": "Iy", "Wel_y": "Wel_z", "Wel_z": "Wel_y", "Wpl_y": "Wpl_z", "Wpl_z": "Wpl_y", "iy": "iz", "iz": "iy"}
	compared := 0
	for _, c := range readChecks(t) {
		got := properties(c.build(t))
		for name, want := range c.Props {
			tolerance := 1e-6
			if name == "J" {
				tolerance = map[string]float64{"CHS": 1e-9, "solid_round": 1e-9, "flat": 1e-3, "RHS": 0.02}[c.Kind]
				if tolerance == 0 {
					tolerance = 0.04
				}
			}
			// The model of the flat lies on its side.
			if other, ok := swapped[name]; ok && c.Kind == "flat" {
				name = other
			}
			if !(math.Abs(got[name]/want-1) <= tolerance) {
				t.Errorf("%s: %s = %.9g, want %.9g within %g", c.ID, name, got[name], want, tolerance)
			}
			compared++
		}
	}
	if compared < 350 {
		t.Errorf("compared %d values; want at least 350", compared)
	}
}

// Table values of the EN standards as recalled, in the same file, within 0.5 %;
// the one value printed with two digits (IPE 80: 0.12·10³ cm⁶) within half a unit
// of the last.
func TestAgainstPublishedTables(t *testing.T) {
	compared := 0
	for _, c := range readChecks(t) {
		got := properties(c.build(t))
		for _, v := range c.Published.Values {
			tolerance := 0.005
			if c.ID == "IPE 80" && v.Prop == "Iw" {
				tolerance = 0.005 / 0.12
			}
			if !(math.Abs(got[v.Prop]/v.Published-1) <= tolerance) {
				t.Errorf("%s: %s = %.5g, %s has %.5g", c.ID, v.Prop, got[v.Prop], c.Published.Source, v.Published)
			}
			compared++
		}
	}
	if compared < 100 {
		t.Errorf("compared %d values; want at least 100", compared)
	}
}

// Catalogue rows against the tables of EN 10365, EN 10210-2 and EN 10219-2, all
// from memory: cm², cm³, cm⁴, 10³ cm⁶, cm, m²/m; 0 is not compared.
func TestCatalogueAgainstTables(t *testing.T) {
	type table struct {
		designation                                                              string
		mass, a, iy, wely, wply, ry, avz, iz, welz, wplz, rz, j, iw, surfacePerM float64
	}
	for _, w := range []table{
		{"IPE 300", 42.2, 53.81, 8356, 557.1, 628.4, 12.46, 25.68, 603.8, 80.50, 125.2, 3.35, 20.12, 125.9, 1.16},
		{"HEA 200", 42.3, 53.83, 3692, 388.6, 429.5, 8.28, 18.08, 1336, 133.6, 203.8, 4.98, 20.98, 108.0, 1.136},
		{"HEB 300", 117, 149.1, 25170, 1678, 1869, 12.99, 47.43, 8563, 570.9, 870.1, 7.58, 185.0, 1688, 1.732},
		{"HEB 200", 61.3, 78.08, 5696, 569.6, 642.5, 8.54, 24.83, 2003, 200.3, 305.8, 5.07, 59.28, 171.1, 1.151},
		{"IPE 600", 122, 156.0, 92080, 3069, 3512, 24.30, 83.78, 3387, 307.9, 485.6, 4.66, 165.4, 2846, 2.015},
		{"CHS 168.3x6.3", 25.2, 32.1, 1053, 125, 165, 5.73, 0, 1053, 125, 165, 5.73, 2107, 0, 0.529},
		{"CHS 508x16", 194, 247, 74909, 2949, 3874, 17.4, 0, 74909, 2949, 3874, 17.4, 149818, 0, 1.60},
		{"SHS 100x5", 14.4, 18.4, 271, 54.2, 64.6, 3.84, 0, 271, 54.2, 64.6, 3.84, 441, 0, 0.383},
	} {
		s, err := Find(w.designation)
		if err != nil {
			t.Errorf("Find(%q): %v", w.designation, err)
			continue
		}
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"mass", s.Mass, w.mass}, {"A", s.A * 1e4, w.a}, {"Iy", s.Iy * 1e8, w.iy}, {"Wely", s.Wely * 1e6, w.wely},
			{"Wply", s.Wply * 1e6, w.wply}, {"Ry", s.Ry * 1e2, w.ry}, {"Avz", s.Avz * 1e4, w.avz}, {"Iz", s.Iz * 1e8, w.iz},
			{"Welz", s.Welz * 1e6, w.welz}, {"Wplz", s.Wplz * 1e6, w.wplz}, {"Rz", s.Rz * 1e2, w.rz}, {"J", s.J * 1e8, w.j},
			{"Iw", s.Iw * 1e9, w.iw}, {"Perimeter", s.Perimeter, w.surfacePerM},
		} {
			if c.want != 0 && !(math.Abs(c.got/c.want-1) <= 0.005) {
				t.Errorf("%s: %s = %.5g, table has %.5g", w.designation, c.name, c.got, c.want)
			}
		}
	}
}

// EN 1993-1-1 6.2.6(3): tubes 2A/π and Ah/(b+h), welded I the web, rolled I never
// under the web; elastic 3A/4 and 2A/3 for solids (any strength handbook).
func TestShearAreas(t *testing.T) {
	for _, c := range []struct {
		designation string
		avz, avy    float64 // mm²
	}{
		{"CHS 100x10", 2 * math.Pi * 90 * 10 / math.Pi, 2 * math.Pi * 90 * 10 / math.Pi},
		{"WELDED-I 500x200x10x16", 468 * 10, 2 * 200 * 16},
		{"ROUND 100", 0.75 * math.Pi * 2500, 0.75 * math.Pi * 2500},
		{"FLAT 150x10", 1000, 1000},
		{"IPE 300", 2567.9, 2 * 150 * 10.7},
		{"RHS 200x100x8", 4323.5 * 200 / 300, 4323.5 * 100 / 300}, // A by EN 10219-2: 43.2 cm²
	} {
		s, err := Find(c.designation)
		if err != nil {
			t.Errorf("Find(%q): %v", c.designation, err)
			continue
		}
		if !(math.Abs(s.Avz*1e6/c.avz-1) <= 1e-3) || !(math.Abs(s.Avy*1e6/c.avy-1) <= 1e-3) {
			t.Errorf("%s: Avz %.6g, Avy %.6g mm²; want %.6g, %.6g", c.designation, s.Avz*1e6, s.Avy*1e6, c.avz, c.avy)
		}
	}
}

// J of a square is 0.1406 a⁴ and of 10:1 0.312 ab³ (Timoshenko and Goodier,
// Theory of Elasticity, table in art. 109).
func TestFlatTorsion(t *testing.T) {
	for _, c := range []struct{ h, t, want, digit float64 }{
		{0.05, 0.05, 0.1406, 5e-5},
		{0.1, 0.01, 0.312, 5e-4},
		{0.02, 0.01, 0.229, 5e-4},
	} {
		s, err := flat(c.h, c.t)
		if err != nil {
			t.Fatal(err)
		}
		if got := s.J / (c.h * c.t * c.t * c.t); !(math.Abs(got-c.want) <= c.digit) {
			t.Errorf("flat %g x %g: J/(h t³) = %.5f, want %.4f", c.h, c.t, got, c.want)
		}
	}
}

func TestShapesRefuse(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, build := range map[string]func() (Section, error){
		"tube NaN wall":        func() (Section, error) { return roundTube(0.1, nan) },
		"tube infinite":        func() (Section, error) { return roundTube(inf, 0.01) },
		"tube no bore":         func() (Section, error) { return roundTube(0.1, 0.05) },
		"round zero":           func() (Section, error) { return solidRound(0) },
		"round negative":       func() (Section, error) { return solidRound(-0.1) },
		"flat NaN":             func() (Section, error) { return flat(nan, 0.01) },
		"I flanges meet":       func() (Section, error) { return iSection(0.1, 0.1, 0.01, 0.05, 0) },
		"I web as wide":        func() (Section, error) { return iSection(0.1, 0.01, 0.01, 0.01, 0) },
		"I NaN fillet":         func() (Section, error) { return iSection(0.1, 0.1, 0.01, 0.01, nan) },
		"I negative fillet":    func() (Section, error) { return iSection(0.1, 0.1, 0.01, 0.01, -0.001) },
		"I fillet too great":   func() (Section, error) { return iSection(0.1, 0.1, 0.01, 0.01, 0.045) },
		"tube corners meet":    func() (Section, error) { return rectangularTube(0.1, 0.05, 0.006, 0.026, 0.01) },
		"tube NaN corner":      func() (Section, error) { return rectangularTube(0.1, 0.05, 0.006, nan, 0.01) },
		"tube inner too great": func() (Section, error) { return rectangularTube(0.1, 0.05, 0.01, 0.02, 0.016) },
		"metres for mm":        func() (Section, error) { return solidRound(100) },
	} {
		if s, err := build(); err == nil {
			t.Errorf("%s: got %+v, want an error", name, s)
		}
	}
}
