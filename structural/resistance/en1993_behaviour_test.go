package resistance

import (
	"math"
	"strings"
	"testing"

	"spanwright/structural/section"
)

func TestEN1993RefusesFactors(t *testing.T) {
	for want, p := range map[string]Partial{
		"γM0": {M0: 0.9}, "γM1": {M1: math.NaN()}, "γM2": {M2: math.Inf(1)}, "γM0 is -1": {M0: -1},
	} {
		b, err := EN1993(p)
		if err == nil || b != nil || !strings.Contains(err.Error(), want) || !strings.Contains(err.Error(), "1 to 2") {
			t.Errorf("%+v: %v, want an error with %q", p, err, want)
		}
	}
	if name := basisEN(t, Partial{M2: 1.3}).Name(); name != "en1993" {
		t.Errorf("name %q", name)
	}
	// Recommended values, EN 1993-1-1:2005 6.1 note 2B.
	if got := basisEN(t, Partial{}).(en1993).p; got != (Partial{M0: 1, M1: 1, M2: 1.25}) {
		t.Errorf("factors %+v, want 1, 1, 1.25", got)
	}
}

func TestENUnrestrainedBeamFailsWhereTheRestrainedOnePasses(t *testing.T) {
	for _, p := range []Partial{{}, {RolledCase: true}} {
		b := basisEN(t, p)
		d := Demand{Moment: 450e3, Shear: 150e3, LateralSpacing: 12}
		if got, id := b.Utilisation(&ipe500, s355, &d); Passes(got) || id != LateralBuckling {
			t.Errorf("IPE 500 in S355, 12 m unrestrained: %v by %s, want over 1 by lateral-torsional buckling", got, id)
		}
		d.LateralSpacing = 1.5
		if got, _ := b.Utilisation(&ipe500, s355, &d); !Passes(got) {
			t.Errorf("IPE 500 in S355, restrained each 1.5 m: %v, want at most 1", got)
		}
	}
}

func TestENStrutOfMiddleSlendernessIsNotPassedOnTheLesserOfYieldAndEuler(t *testing.T) {
	length := math.Pi * math.Sqrt(210e9/235e6) * math.Sqrt(ipe300.Iz/ipe300.A) // λ = 1
	d := Demand{Axial: 0.7 * ipe300.A * 235e6, LengthY: length, LengthZ: length}
	got, id := basisEN(t, Partial{}).Utilisation(&ipe300, s235, &d)
	if id != Axial || !near(got, 0.7/0.5970, 0.0005) { // χ of curve b at λ = 1 by the published table
		t.Errorf("utilisation %v by %s, want %v by axial", got, id, 0.7/0.5970)
	}
}

func TestENNotCoveredIsNamed(t *testing.T) {
	b := basisEN(t, Partial{})
	strong := Material{Yield: 500e6, Ultimate: 600e6, E: 210e9, G: 81e9}
	brittle := Material{Yield: 355e6, Ultimate: 380e6, E: 210e9, G: 81e9}
	named := func(name string) section.Section {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	bent, both := Demand{Moment: 1, LateralSpacing: 1}, Demand{Moment: 1, Axial: 1, LateralSpacing: 1, LengthY: 1, LengthZ: 1}
	pressed := Demand{Axial: 1, LengthY: 1, LengthZ: 1}
	for _, tc := range []struct {
		name string
		s    section.Section
		m    Material
		d    Demand
		want string
	}{
		{"class 4 tube bent", named("CHS 610x6.3"), s355, bent, "table 5.2"},
		{"class 4 tube pressed", named("CHS 610x6.3"), s355, pressed, "EN 1993-1-6"},
		{"angle bent", named("L 100x100x10"), s235, bent, "angles in bending"},
		{"class 4 angle", named("L 150x150x8"), s355, pressed, "table 5.2 sheet 3"},
		{"chords", section.Section{Shape: section.ChordSet, A: 1}, s235, pressed, "6.4"},
		{"channel, N and M", named("CHANNEL 200x80x6x11"), s235, both, "6.3.3"},
		{"thin tee", named("TEE 300x200x6x10"), s355, bent, "effective centroid"},
		{"girder's web pressed", girder, s355, pressed, "effective centroid"},
		{"over S460", ipe300, strong, bent, "EN 1993-1-12"},
		{"not ductile", ipe300, brittle, bent, "3.2.2"},
		{"no shape", section.Section{A: 1}, s235, bent, "not written for this shape"},
	} {
		u, id := b.Utilisation(&tc.s, tc.m, &tc.d)
		c, ok := find(b.Explain(&tc.s, tc.m, &tc.d), NotCovered)
		if Passes(u) || id != NotCovered || !ok || !c.PassFail || c.Passes() || !strings.Contains(c.Note, tc.want) {
			t.Errorf("%s: %v by %q, %+v, want not covered with %q", tc.name, u, id, c, tc.want)
		}
	}
	for name, s := range map[string]section.Section{
		"tube in tension": named("CHS 610x6.3"), "angle in tension": named("L 150x150x8"), "channel in tension": named("CHANNEL 200x80x6x11"),
	} {
		if u, id := b.Utilisation(&s, s355, &Demand{Axial: -1}); !Passes(u) {
			t.Errorf("%s: %v by %s, want a pass", name, u, id)
		}
	}
	for name, d := range map[string]Demand{"L 100x100x10": pressed, "CHANNEL 200x80x6x11": bent, "TEE 150x200x20x20": bent} {
		s := named(name)
		if u, id := b.Utilisation(&s, s235, &d); !Passes(u) {
			t.Errorf("%s: %v by %s, want covered and passed", name, u, id)
		}
	}
}

// EN 1993-1-1:2005 table 6.2, from memory.
func TestColumnCurves(t *testing.T) {
	i := func(h, b, tf float64, making section.Making) section.Section {
		return section.Section{Shape: section.ISection, Making: making, H: h, B: b, Tf: tf}
	}
	shape := func(shape section.Shape, making section.Making) section.Section {
		return section.Section{Shape: shape, Making: making, H: 0.2, B: 0.2, Tw: 0.02, Tf: 0.02}
	}
	thinBox := shape(section.WeldedBox, section.Welded)
	thinBox.Tw, thinBox.Tf = 0.005, 0.005
	for _, tc := range []struct {
		name       string
		s          section.Section
		y, z       curve
		fineY, fzZ curve
	}{
		{"rolled, deep, thin", i(0.3, 0.15, 0.040, section.HotRolled), curveA, curveB, curveA0, curveA0},
		{"rolled, deep, thick", i(0.3, 0.15, 0.041, section.HotRolled), curveB, curveC, curveA, curveA},
		{"rolled, wide", i(0.36, 0.3, 0.02, section.HotRolled), curveB, curveC, curveA, curveA},
		{"rolled, wide, very thick", i(0.36, 0.3, 0.12, section.HotRolled), curveD, curveD, curveC, curveC},
		{"welded, thin", i(0.9, 0.3, 0.040, section.Welded), curveB, curveC, curveB, curveC},
		{"welded, thick", i(0.9, 0.3, 0.041, section.Welded), curveC, curveD, curveC, curveD},
		{"hot finished tube", shape(section.RoundTube, section.HotRolled), curveA, curveA, curveA0, curveA0},
		{"cold-formed tube", shape(section.RectangularTube, section.ColdFormed), curveC, curveC, curveC, curveC},
		{"welded box, thick plates", shape(section.WeldedBox, section.Welded), curveC, curveC, curveC, curveC},
		{"welded box", thinBox, curveB, curveB, curveB, curveB},
		{"channel", shape(section.Channel, section.HotRolled), curveC, curveC, curveC, curveC},
		{"tee", shape(section.Tee, section.HotRolled), curveC, curveC, curveC, curveC},
		{"angle", shape(section.Angle, section.HotRolled), curveB, curveB, curveB, curveB},
		{"solid", shape(section.SolidRound, section.HotRolled), curveC, curveC, curveC, curveC},
	} {
		x := enCase{s: &tc.s, m: Material{Yield: 450e6}}
		if y, z := x.columnCurves(); y != tc.y || z != tc.z {
			t.Errorf("%s: α = %v, %v, want %v, %v", tc.name, y, z, tc.y, tc.z)
		}
		x.m.Yield = 460e6
		if y, z := x.columnCurves(); y != tc.fineY || z != tc.fzZ {
			t.Errorf("%s in S460: α = %v, %v, want %v, %v", tc.name, y, z, tc.fineY, tc.fzZ)
		}
	}
}

// EN 1993-1-1:2005 tables 6.4 and 6.5, from memory, by χ at λ = 1 of each curve.
func TestLateralCurves(t *testing.T) {
	for _, tc := range []struct {
		name string
		s    section.Section
		want curve
	}{
		{"rolled, h/b = 2", section.Section{Shape: section.ISection, Making: section.HotRolled, H: 0.4, B: 0.2}, curveA},
		{"rolled, h/b = 2.5", section.Section{Shape: section.ISection, Making: section.HotRolled, H: 0.5, B: 0.2}, curveB},
		{"welded, h/b = 2", section.Section{Shape: section.ISection, Making: section.Welded, H: 0.4, B: 0.2}, curveC},
		{"welded, h/b = 2.5", section.Section{Shape: section.ISection, Making: section.Welded, H: 0.5, B: 0.2}, curveD},
		{"unequal, by the lesser width", section.Section{Shape: section.UnequalI, Making: section.Welded, H: 0.5, B: 0.3, LowerB: 0.2}, curveD},
		{"flat", section.Section{Shape: section.Flat, H: 0.2, B: 0.02}, curveD},
		{"channel", section.Section{Shape: section.Channel, H: 0.2, B: 0.1}, curveD},
		{"deep tube", section.Section{Shape: section.RectangularTube, H: 0.3, B: 0.1}, curveD},
	} {
		x := enCase{s: &tc.s}
		if got := x.lateralChi(1, 1); got != tc.want.chi(1) {
			t.Errorf("%s: χLT %v, want %v", tc.name, got, tc.want.chi(1))
		}
	}
	tube := enCase{s: &section.Section{Shape: section.RectangularTube, H: 0.3, B: 0.1}}
	if got := tube.lateralChi(0.4, 1); got != 1 {
		t.Errorf("tube up to λLT,0 = 0.4: χLT %v, want 1", got)
	}
	rolled := enCase{s: &section.Section{Shape: section.ISection, Making: section.HotRolled, H: 0.4, B: 0.2}, p: Partial{RolledCase: true}}
	if a, b := rolled.lateralChi(1, 1), rolled.lateralChi(1, 1.88); !(a > curveB.chi(1) && b > a) {
		t.Errorf("rolled case: χLT %v, with f %v; want over the general case, and f to help", a, b)
	}
}

func TestENMissingLengthsAndFactorsFail(t *testing.T) {
	b := basisEN(t, Partial{})
	for _, tc := range []struct {
		d          Demand
		want, note string
	}{
		{Demand{Moment: 1}, LateralBuckling, "not stated"},
		{Demand{Moment: 1, LateralSpacing: -2}, LateralBuckling, "not stated"},
		{Demand{Moment: 1, LateralSpacing: 2, MomentFactor: -1}, LateralBuckling, "moment factor"},
		{Demand{Moment: 1, LateralSpacing: 2, MomentFactor: 7}, LateralBuckling, "moment factor"},
		{Demand{Axial: 1}, Axial, "not stated"},
		{Demand{Axial: 1, LengthY: 3}, Axial, "not stated"},
		{Demand{Axial: 1, LengthZ: 3}, Axial, "not stated"},
		{Demand{Axial: -1, NetAreaFactor: 1.1}, Axial, "net area factor"},
		{Demand{Axial: -1, NetAreaFactor: -0.5}, Axial, "net area factor"},
		{Demand{FrequencyFloor: 3}, Vibrating, ""},
	} {
		got, id := b.Utilisation(&ipe300, s235, &tc.d)
		c, _ := find(b.Explain(&ipe300, s235, &tc.d), tc.want)
		if Passes(got) || id != tc.want || !strings.Contains(c.Note, tc.note) {
			t.Errorf("%+v: %v by %q, note %q, want over 1 by %q", tc.d, got, id, c.Note, tc.want)
		}
	}
}

func TestENNotANumberFails(t *testing.T) {
	b := basisEN(t, Partial{})
	nan := math.NaN()
	for name, spoil := range map[string]func(*Demand, *Material){
		"moment":          func(d *Demand, _ *Material) { d.Moment = nan },
		"moment z":        func(d *Demand, _ *Material) { d.MomentZ = nan },
		"shear":           func(d *Demand, _ *Material) { d.Shear = nan },
		"shear y":         func(d *Demand, _ *Material) { d.ShearY = nan },
		"axial":           func(d *Demand, _ *Material) { d.Axial = nan },
		"infinite axial":  func(d *Demand, _ *Material) { d.Axial = math.Inf(1) },
		"lateral spacing": func(d *Demand, _ *Material) { d.LateralSpacing = nan },
		"length y":        func(d *Demand, _ *Material) { d.LengthY = nan },
		"length z":        func(d *Demand, _ *Material) { d.LengthZ = nan },
		"moment factor":   func(d *Demand, _ *Material) { d.MomentFactor = nan },
		"frequency":       func(d *Demand, _ *Material) { d.Frequency = nan },
		"floor":           func(d *Demand, _ *Material) { d.FrequencyFloor = nan },
		"deflection":      func(d *Demand, _ *Material) { d.Deflections[0].Value = nan },
		"negative moment": func(d *Demand, _ *Material) { d.MomentZ = -1 },
		"yield":           func(_ *Demand, m *Material) { m.Yield = nan },
		"E":               func(_ *Demand, m *Material) { m.E = nan },
		"G":               func(_ *Demand, m *Material) { m.G = nan },
	} {
		d := Demand{
			Moment: 1e3, MomentZ: 1e2, Shear: 1e3, ShearY: 1e2, Axial: 1e3, LateralSpacing: 2, LengthY: 2, LengthZ: 2,
			Frequency: 5, FrequencyFloor: 3, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}},
		}
		m := s235
		if u, id := b.Utilisation(&ipe300, m, &d); !Passes(u) {
			t.Fatalf("unspoilt demand fails: %v by %s", u, id)
		}
		spoil(&d, &m)
		if u, id := b.Utilisation(&ipe300, m, &d); Passes(u) || !(u <= ceiling) || id == "" {
			t.Errorf("%s spoilt: %v by %q, want a finite figure over 1", name, u, id)
		}
		for _, c := range b.Explain(&ipe300, m, &d) {
			if math.IsNaN(c.Demand) || math.IsNaN(c.Resistance) || math.IsInf(c.Demand, 0) || math.IsInf(c.Resistance, 0) {
				t.Errorf("%s spoilt: %+v holds what is no finite number", name, c)
			}
		}
	}
}

func TestENTorsionWithoutShearModulusFails(t *testing.T) {
	m := s235
	m.G = math.NaN()
	d := Demand{Axial: 1, LengthY: 1, LengthZ: 1}
	for _, b := range []Basis{basisEN(t, Partial{}), basisOf(t, 1.5)} {
		if u, id := b.Utilisation(&ipe300, m, &d); Passes(u) || id != Axial {
			t.Errorf("%s: G not a number: %v by %s, want over 1 by axial", b.Name(), u, id)
		}
	}
}

func TestENInteractionNamesTheGoverningCondition(t *testing.T) {
	b := basisEN(t, Partial{})
	for want, d := range map[string]Demand{
		"6.2.9":  {Axial: -5e5, Moment: 8e4, LateralSpacing: 1},
		"(6.61)": {Axial: 5e5, Moment: 3e4, LateralSpacing: 0.5, LengthY: 12, LengthZ: 0.5},
		"(6.62)": {Axial: 3e5, Moment: 1e4, MomentZ: 3e3, LateralSpacing: 3, LengthY: 3, LengthZ: 3},
	} {
		if c, _ := find(b.Explain(&ipe300, s235, &d), Interaction); !strings.Contains(c.Note, want) {
			t.Errorf("%+v: note %q, want %q", d, c.Note, want)
		}
	}
}
