package material

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// A500/A500M by letter and shape in ksi, from memory of the 2018 issue: round A
// 33, B 42, C 46, D 36; shaped A 39, B 46, C 50, D 36. Stainless plate against bar:
// EN 1993-1-4 table 2.1 in MPa.
func TestFor(t *testing.T) {
	for _, c := range []struct {
		grade, family string
		fy, fu        float64 // MPa
	}{
		{"A500 A", "HSS-ROUND", 227.527, 310.264}, {"A500 A", "HSS", 268.896, 310.264},
		{"A500 B", "HSS-ROUND", 289.580, 399.896}, {"A500 B", "HSS", 317.159, 399.896},
		{"A500 C", "HSS-ROUND", 317.159, 427.475}, {"A500 C", "HSS", 344.738, 427.475}, {"A500 C", "SHS", 344.738, 427.475}, {"A500 C", "CHS", 317.159, 427.475},
		{"A500 D", "HSS", 248.211, 399.896}, {"A500 B", "", 289.580, 399.896},
		{"1.4301", "WELDED-I", 210, 520}, {"1.4301", "ROUND", 190, 500}, {"1.4462", "FLAT", 460, 640}, {"1.4462", "IPE", 450, 640},
		{"S355", "IPE", 355, 470},
	} {
		g, err := Find(c.grade)
		if err != nil {
			t.Fatal(err)
		}
		fy, fu, err := g.For(c.family).Strength(0.01)
		if err != nil || !(math.Abs(fy/1e6-c.fy) < 1e-3) || !(math.Abs(fu/1e6-c.fu) < 1e-3) {
			t.Errorf("%s in %s: %.3f, %.3f MPa, %v; want %.3f, %.3f", c.grade, c.family, fy/1e6, fu/1e6, err, c.fy, c.fu)
		}
	}
}

// Without a family a grade must be on the safe side at every thickness.
func TestNoFamilyIsTheLowest(t *testing.T) {
	variants := 0
	for _, name := range Names() {
		g, err := Find(name)
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range g.Variants {
			variants++
			for _, b := range v.Bands {
				fy, fu, err := g.Strength(b.UpTo)
				if err != nil || fy > b.Yield || fu > b.Ultimate {
					t.Errorf("%s at %g m: %g, %g Pa, %v; %v have %g, %g", name, b.UpTo, fy, fu, err, v.Families, b.Yield, b.Ultimate)
				}
			}
		}
	}
	if variants < 6 {
		t.Errorf("%d variants; want those of A500 and stainless", variants)
	}
}

func sound() Grade {
	return Grade{Name: "Q345", E: 206e9, G: 79e9, Density: 7850, Bands: []Band{{0.016, 345e6, 470e6}, {0.040, 335e6, 470e6}}}
}

func TestNew(t *testing.T) {
	given := sound()
	g, err := New(given)
	if err != nil {
		t.Fatal(err)
	}
	given.Bands[0].Yield = 1
	want := sound()
	want.Standard, want.Source = "custom", "given by the user"
	if d := cmp.Diff(want, g); d != "" {
		t.Errorf("New (-want +got):\n%s", d)
	}
	if fy, fu, err := g.Strength(0.02); fy != 335e6 || fu != 470e6 || err != nil {
		t.Errorf("Strength(20 mm) = %g, %g, %v", fy, fu, err)
	}
}

func TestNewRefuses(t *testing.T) {
	nan := math.NaN()
	for name, c := range map[string]struct {
		change func(*Grade)
		want   string
	}{
		"no name":         {func(g *Grade) { g.Name = " " }, "without a name"},
		"held":            {func(g *Grade) { g.Name = "s355 J2" }, "stands for grade S355 already"},
		"E in GPa":        {func(g *Grade) { g.E = 206 }, "Young's modulus"},
		"E NaN":           {func(g *Grade) { g.E = nan }, "Young's modulus"},
		"G over E/2":      {func(g *Grade) { g.G = 110e9 }, "shear modulus of 110 GPa; want 3.33333 to 103 GPa"},
		"density in t/m3": {func(g *Grade) { g.Density = 7.85 }, "density of 7.85 kg/m³; want 1000 to 25000"},
		"no bands":        {func(g *Grade) { g.Bands = nil }, "no strength"},
		"yield in MPa":    {func(g *Grade) { g.Bands[0].Yield = 345 }, "band 1 has yield"},
		"yield NaN":       {func(g *Grade) { g.Bands[1].Yield = nan }, "band 2 has yield"},
		"fu under fy":     {func(g *Grade) { g.Bands[1].Ultimate = 300e6 }, "band 2 has yield 335 and ultimate 300 MPa"},
		"bands fall":      {func(g *Grade) { g.Bands[1].UpTo = 0.016 }, "band 2 reaches to 16 mm; want over 16"},
		"thickness in mm": {func(g *Grade) { g.Bands[1].UpTo = 40 }, "band 2 reaches to 40000 mm"},
		"infinite":        {func(g *Grade) { g.Bands[1].Ultimate = math.Inf(1) }, "band 2"},
		"variant":         {func(g *Grade) { g.Variants = []Variant{{Families: []string{"HSS"}}} }, "in HSS: no strength"},
		"variant of none": {func(g *Grade) { g.Variants = []Variant{{Bands: g.Bands}} }, "names no family"},
	} {
		g := sound()
		c.change(&g)
		if _, err := New(g); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error with %q", name, err, c.want)
		}
	}
}
