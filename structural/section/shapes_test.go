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
	if len(file.Sections) != 42 {
		t.Fatalf("testdata holds %d sections, want 42", len(file.Sections))
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
		if c.Kind == "W" {
			s.J = torsionI(s.H, s.B, s.Tw, s.Tf, s.R)
		}
	case "CHS":
		s, err = roundTube(d("D"), d("t"))
	case "RHS":
		s, err = rectangularTube(d("h"), d("b"), d("t"), d("ro"), d("ri"))
	case "UPE":
		s, err = channel(channelSize{h: d("h"), b: d("b"), tw: d("tw"), tf: d("tf"), r: d("r")})
	case "UPN":
		s, err = channel(channelSize{d("h"), d("b"), d("tw"), d("tf"), d("r1"), d("r2"), c.Dims["slope"], d("tf_measured_at_y")})
	case "angle":
		s, err = angle(d("h"), d("b"), d("t"), d("r"), d("r2"))
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
		"Iyz": s.Iyz, "Iu": s.Iu, "Iv": s.Iv, "iu": s.Ru, "iv": s.Rv, "y_c": s.Yc, "z_c": s.Zc,
		"shear_y": -s.Y0, "shear_z": -s.Z0,
		"J": s.J, "J_EN_annex": s.J, "Iw_thin_wall": s.Iw, "Iw": s.Iw,
	}
}

// Values of testdata/sections.json: polygon integration for all but J, Iw and
// the shear centre, these by the formula or model that the key names.
func TestAgainstIndependentValues(t *testing.T) {
	swapped := map[string]string{"Iy": "Iz", "Iz": "Iy", "Wel_y": "Wel_z", "Wel_z": "Wel_y", "Wpl_y": "Wpl_z", "Wpl_z": "Wpl_y", "iy": "iz", "iz": "iy"}
	compared := 0
	for _, c := range readChecks(t) {
		got := properties(c.build(t))
		for name, want := range c.Props {
			tolerance := modelTolerance(c, name)
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
	if compared < 550 {
		t.Errorf("compared %d values; want at least 550", compared)
	}
}

// modelTolerance is 1e-6 for what is exact. J, Iw and shear centre are formulas
// against a finite-element model: the band is the formula's own error, which the
// printed tables share. J of IPE 80 is the only one over 3 %: the EN table prints
// 0.70 cm⁴ where the model has 0.673. Thin-walled shear centres and warping
// constants lose most where the walls are thick (UPE 80, small angles).
func modelTolerance(c checkSection, name string) float64 {
	bands := map[string]map[string]float64{
		"J": {"CHS": 1e-9, "solid_round": 1e-9, "flat": 1e-3, "RHS": 0.02, "I_rolled": 0.03, "W": 0.003, "plate_girder": 0.006,
			"UPE": 0.005, "UPN": 0.025, "angle": 0.025},
		"Iw":      {"UPE": 0.05, "UPN": 0.016, "angle": 0.10},
		"shear_y": {"UPE": 0.06, "UPN": 0.06, "angle": 0.06},
		"shear_z": {"angle": 0.06},
	}
	if c.ID == "IPE 80" && name == "J" {
		return 0.04
	}
	if band, ok := bands[name][c.Kind]; ok {
		return band
	}
	return 1e-6
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
