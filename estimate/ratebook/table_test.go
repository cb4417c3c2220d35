package ratebook

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Reference: ISO 1461:2022, Table 3 (from memory): mean thickness in µm against mean
// mass, at the density of zinc that the standard converts with, 7.2 g/cm³, in steps
// of 5 g/m².
func TestZincMasses(t *testing.T) {
	for i, want := range []struct{ upTo, micrometres float64 }{{1.5, 45}, {3, 55}, {6, 70}, {0, 85}} {
		got := ZincMasses()[i]
		if mass := 5 * math.Round(want.micrometres*7.2/5); got.UpTo != want.upTo || got.Mass != mass || !strings.Contains(got.Source, "from memory") {
			t.Errorf("%d: %+v, want %g g/m² up to %g mm", i, got, mass, want.upTo)
		}
	}
}

// Reference: EN 1090-2, Table 24, percentages of EXC2 / EXC3 / EXC4 (from memory).
func TestExtentsOfExecutionClasses(t *testing.T) {
	percent := func(class, weld, utilisation string) float64 {
		for _, e := range Extents(class) {
			if strings.HasPrefix(e.Weld, weld) && e.Utilisation == utilisation {
				return math.Round(100 * e.Fraction)
			}
		}
		return 0
	}
	for _, want := range []struct {
		weld, utilisation string
		percent           [4]float64
	}{
		{"every weld", "", [4]float64{100, 100, 100, 100}},
		{"transverse butt weld in a butt joint", "0.5 and above", [4]float64{0, 10, 20, 100}},
		{"transverse butt weld in a butt joint", "below 0.5", [4]float64{0, 0, 10, 50}},
		{"transverse butt weld in a cruciform", "", [4]float64{0, 10, 20, 100}},
		{"transverse butt weld in a T", "", [4]float64{0, 5, 10, 50}},
		{"transverse fillet weld in tension or shear, throat over 12", "", [4]float64{0, 5, 10, 20}},
		{"transverse fillet weld in tension or shear, throat to 12", "", [4]float64{0, 0, 5, 10}},
		{"full-penetration longitudinal weld", "", [4]float64{0, 10, 20, 100}},
		{"other longitudinal weld", "", [4]float64{0, 0, 5, 10}},
	} {
		var got [4]float64
		for i, class := range executions()[:4] {
			got[i] = percent(class, want.weld, want.utilisation)
		}
		if got != want.percent {
			t.Errorf("%s %s: %v %%, want %v", want.weld, want.utilisation, got, want.percent)
		}
	}
}

// Reference: AISC 360, N5.5b: 10 % of complete-penetration groove welds 8 mm and
// thicker in risk category II; N5.5 and Appendix 3: all whose fatigue category rests
// on soundness, without reduction.
func TestExtentsOfAISC(t *testing.T) {
	if e := Extents("AISC static")[1]; e.Fraction != 0.1 || !strings.Contains(e.Source, "N5.5b") {
		t.Errorf("static: %+v", e)
	}
	if e := Extents("AISC cyclic")[1]; e.Fraction != 1 || !strings.Contains(e.Weld, "fatigue") {
		t.Errorf("cyclic: %+v", e)
	}
	for _, class := range executions() {
		list := Extents(class)
		if len(list) == 0 || list[0].Method != visual || list[0].Fraction != 1 {
			t.Errorf("%s does not begin with looking at every weld", class)
		}
		for _, e := range list {
			if !(e.Fraction > 0 && e.Fraction <= 1) || e.Source == "" || e.Method == "" {
				t.Errorf("%s: %+v", class, e)
			}
		}
	}
	if got := Extents("EXC5"); got != nil {
		t.Errorf("EXC5: %+v", got)
	}
	Extents("AISC static")[0].Weld = "changed"
	if Extents("AISC static")[0].Weld == "changed" {
		t.Error("a caller can change the table")
	}
}

// Reference: ISO 12944-5:2018, Tables B.2 and B.4 (from memory): least coats and
// nominal thickness in µm of epoxy or polyurethane, alkyd where that has none.
func TestCoatingSystems(t *testing.T) {
	type system struct{ coats, thickness int }
	want := map[string]system{
		"C2 low": {1, 100}, "C2 medium": {1, 100}, "C2 high": {1, 120}, "C2 very high": {2, 180},
		"C3 low": {1, 100}, "C3 medium": {1, 120}, "C3 high": {2, 180}, "C3 very high": {2, 240},
		"C4 low": {1, 120}, "C4 medium": {2, 180}, "C4 high": {2, 240}, "C4 very high": {2, 300},
		"C5 low": {2, 180}, "C5 medium": {2, 240}, "C5 high": {2, 300}, "C5 very high": {3, 360},
		"CX": {3, 280}, "hot-dip galvanised": {0, 0}, "galvanised and painted C4 high": {2, 160}, "galvanised and painted C5 high": {2, 200}, "none": {0, 0},
	}
	got := map[string]system{}
	for _, s := range CoatingSystems() {
		got[s.Name] = system{s.Coats, s.Thickness}
		if s.Corrosivity != "" && s.Years == "" || s.Source == "" {
			t.Errorf("%s: durability %q years, source %q", s.Name, s.Years, s.Source)
		}
	}
	if d := cmp.Diff(want, got, cmp.AllowUnexported(system{})); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
}

// Reference: AACE 18R-97 and 56R-08, Table 1, in per cent (from memory).
func TestTypicalBands(t *testing.T) {
	for class, want := range map[int][2]string{
		5: {"-20 -50 30 100", "-20 -30 30 50"},
		4: {"-15 -30 20 50", "-10 -20 20 30"},
		3: {"-10 -20 10 30", "-5 -15 10 20"},
		2: {"-5 -15 5 20", "-5 -10 5 15"},
		1: {"-3 -10 3 15", "-3 -5 3 10"},
	} {
		bands := TypicalBands(class)
		for i, industry := range []string{"process plant", "building"} {
			b := bands[i]
			var got []string
			for _, x := range []float64{b.LowFrom, b.LowTo, b.HighFrom, b.HighTo} {
				got = append(got, number(math.Round(100*x)))
			}
			if b.Industry != industry || strings.Join(got, " ") != want[i] {
				t.Errorf("class %d, %s: %v, want %s of %s", class, b.Industry, got, want[i], industry)
			}
		}
	}
	for _, class := range []int{-1, 0, 6} {
		if got := TypicalBands(class); got != nil {
			t.Errorf("class %d: %+v", class, got)
		}
	}
}
