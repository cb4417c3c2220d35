package resistance

import (
	"math"
	"strings"
	"testing"

	"spanwright/structural/section"
)

func TestAISCRefusesMethods(t *testing.T) {
	for _, method := range []string{"", "asd", "LRFD", "aisc"} {
		b, err := AISC(method)
		if err == nil || b != nil || !strings.Contains(err.Error(), `"aisc-asd" or "aisc-lrfd"`) {
			t.Errorf("method %q: %v, %v, want an error that names both", method, b, err)
		}
	}
	for _, method := range []string{ASD, LRFD} {
		if got := aiscOf(t, method).Name(); got != method {
			t.Errorf("name %q, want %q", got, method)
		}
	}
}

func TestNotCoveredIsRefusedByName(t *testing.T) {
	thin := l4
	thin.Tw, thin.Tf = .15*inch, .15*inch
	wide := c15x339
	wide.B = 8 * inch
	strut := Demand{Axial: 1, LengthY: 1, LengthZ: 1}
	for _, tc := range []struct {
		name string
		s    section.Section
		d    Demand
		want string
	}{
		{"angle bent", l4, Demand{Moment: 1, LateralSpacing: 1}, "F10"},
		{"angle bent about z", l4, Demand{MomentZ: 1}, "F10"},
		{"slender angle", thin, strut, "E4"},
		{"channel with a wide flange", wide, Demand{Moment: 1, LateralSpacing: 1}, "F2"},
		{"tee about its axis of symmetry", thinTee, Demand{MomentZ: 1}, "F9"},
		{"unequal flanges bent", section.Section{Shape: section.UnequalI}, Demand{Moment: 1, LateralSpacing: 1}, "F4"},
		{"chord set", section.Section{Shape: section.ChordSet}, strut, "E6"},
		{"no shape", section.Section{}, Demand{}, "no rule"},
	} {
		for _, method := range []string{ASD, LRFD} {
			b := aiscOf(t, method)
			u, id := b.Utilisation(&tc.s, a992, &tc.d)
			if Passes(u) || id != NotCovered {
				t.Errorf("%s: %v by %q, want over 1, not covered", tc.name, u, id)
			}
			c := aiscCheck(t, b, tc.s, a992, tc.d, NotCovered)
			if !c.PassFail || !strings.Contains(c.Note, tc.want) {
				t.Errorf("%s: %+v, want a pass-fail check that names %s", tc.name, c, tc.want)
			}
		}
	}
}

func TestStrongSteelIsRefused(t *testing.T) {
	s := wideOf(t, "W18X50")
	d := Demand{Moment: 1, LateralSpacing: 1}
	for fy, want := range map[float64]bool{100: false, 101: true, math.NaN(): true} {
		b := aiscOf(t, ASD)
		_, got := find(b.Explain(&s, steel(fy, 120), &d), NotCovered)
		if got != want {
			t.Errorf("Fy = %v ksi: refused %v, want %v", fy, got, want)
		}
	}
}

func TestShapesWithoutBendingAreCoveredInTension(t *testing.T) {
	chords := section.Section{Shape: section.ChordSet, A: 0.01}
	for _, s := range []section.Section{l4, chords, {Shape: section.UnequalI, A: 0.01, H: 0.5, Tw: 0.01, B: 0.2, Tf: 0.02, LowerB: 0.1, LowerTf: 0.02}} {
		d := Demand{Axial: -0.5 * s.A * a992.Yield * 0.9}
		if u, id := aiscOf(t, LRFD).Utilisation(&s, a992, &d); id != Axial || !near(u, 0.5, 1e-12) {
			t.Errorf("%v: %v by %s, want 0.5 by axial", s.Shape, u, id)
		}
		if c, bent := find(aiscOf(t, LRFD).Explain(&s, a992, &d), Bending); bent {
			t.Errorf("%v: bending explained without a strength: %+v", s.Shape, c)
		}
	}
}

func TestLocalLimits360(t *testing.T) {
	find := func(name string) section.Section {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		s.Nominal = s.Tw
		return s
	}
	bend := Demand{Moment: 1, LateralSpacing: 0.1}
	for _, tc := range []struct {
		name string
		s    section.Section
		d    Demand
		want float64 // value over limit, by hand
		note string
	}{
		// D/t = 266.7, 0.45·29000/50 = 261
		{"thin round tube", find("CHS 24inx0.09in"), bend, 266.6666667 / 261, "0.45·E/Fy"},
		{"thin round tube pressed", find("CHS 24inx0.09in"), Demand{Axial: 1, LengthY: 1, LengthZ: 1}, 266.6666667 / 261, "0.45·E/Fy"},
		// h/t = (500 − 9)/3 = 163.7, 5.70·√580 = 137.3
		{"thin rectangular tube", find("RHS 500x300x3"), bend, 163.6666667 / 137.2741, "F7.3(c)"},
		// h/tw = 97/0.375 = 258.7, min(260, 0.40·580 = 232)
		{"girder", find("WELDED-I 98.5inx20inx0.375inx0.75in"), bend, 258.6666667 / 232, "F13.2"},
		// aw = 59·0.375/(4·0.5) = 11.06 over 10; h/tw = 157.3
		{"girder with small flanges", find("WELDED-I 60inx4inx0.375inx0.5in"), bend, 1.10625, "10 times"},
	} {
		c := aiscCheck(t, aiscOf(t, ASD), tc.s, a992, tc.d, LocalBuckling)
		if !near(c.Utilisation, tc.want, 1e-6) || !c.PassFail || !strings.Contains(c.Note, tc.note) {
			t.Errorf("%s: %+v, want %v and %q", tc.name, c, tc.want, tc.note)
		}
	}
	s := find("RHS 500x300x3")
	if c, checked := aiscLocal(t, s, Demand{Axial: 1, LengthY: 1, LengthZ: 1}); checked {
		t.Errorf("a tube in compression has no limit in E7, got %+v", c)
	}
}

func aiscLocal(t *testing.T, s section.Section, d Demand) (Check, bool) {
	t.Helper()
	return find(aiscOf(t, ASD).Explain(&s, a992, &d), LocalBuckling)
}

func TestAISCMissingLengthsAndFactorsFail(t *testing.T) {
	for _, tc := range []struct {
		d          Demand
		want, note string
	}{
		{Demand{Moment: 1}, LateralBuckling, "not stated"},
		{Demand{Moment: 1, LateralSpacing: -2}, LateralBuckling, "not stated"},
		{Demand{Moment: 1, LateralSpacing: 2, MomentFactor: -1}, LateralBuckling, "Cb"},
		{Demand{Moment: 1, LateralSpacing: 2, MomentFactor: math.Inf(1)}, LateralBuckling, "Cb"},
		{Demand{Axial: 1}, Axial, "not stated"},
		{Demand{Axial: 1, LengthY: 3}, Axial, "not stated"},
		{Demand{Axial: 1, LengthZ: 3}, Axial, "not stated"},
		{Demand{Axial: -1, NetAreaFactor: 1.2}, Axial, "net area factor"},
		{Demand{Axial: -1, NetAreaFactor: -0.5}, Axial, "net area factor"},
		{Demand{FrequencyFloor: 3}, Vibrating, ""},
	} {
		s := wideOf(t, "W18X50")
		b := aiscOf(t, LRFD)
		if u, id := b.Utilisation(&s, a992, &tc.d); Passes(u) || id != tc.want {
			t.Errorf("%+v: %v by %q, want over 1 by %q", tc.d, u, id, tc.want)
		}
		if c := aiscCheck(t, b, s, a992, tc.d, tc.want); !strings.Contains(c.Note, tc.note) {
			t.Errorf("%+v: note %q lacks %q", tc.d, c.Note, tc.note)
		}
	}
}

func TestAISCNotANumberFails(t *testing.T) {
	nan := math.NaN()
	full := func() Demand {
		return Demand{
			Moment: 1e3, MomentZ: 1e3, Shear: 1e3, ShearY: 1e3, Axial: 1e3, LateralSpacing: 2, LengthY: 2, LengthZ: 2,
			MomentFactor: 1, Frequency: 9, FrequencyFloor: 3, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}},
		}
	}
	for name, spoil := range map[string]func(*Demand, *Material){
		"moment":          func(d *Demand, _ *Material) { d.Moment = nan },
		"moment z":        func(d *Demand, _ *Material) { d.MomentZ = nan },
		"shear":           func(d *Demand, _ *Material) { d.Shear = nan },
		"shear y":         func(d *Demand, _ *Material) { d.ShearY = nan },
		"axial":           func(d *Demand, _ *Material) { d.Axial = nan },
		"lateral spacing": func(d *Demand, _ *Material) { d.LateralSpacing = nan },
		"length y":        func(d *Demand, _ *Material) { d.LengthY = nan },
		"length z":        func(d *Demand, _ *Material) { d.LengthZ = nan },
		"Cb":              func(d *Demand, _ *Material) { d.MomentFactor = nan },
		"net area":        func(d *Demand, _ *Material) { d.Axial, d.NetAreaFactor = -1, nan },
		"frequency":       func(d *Demand, _ *Material) { d.Frequency = nan },
		"floor":           func(d *Demand, _ *Material) { d.FrequencyFloor = nan },
		"deflection":      func(d *Demand, _ *Material) { d.Deflections[0].Value = nan },
		"negative moment": func(d *Demand, _ *Material) { d.Moment = -1 },
		"yield":           func(_ *Demand, m *Material) { m.Yield = nan },
		"E":               func(_ *Demand, m *Material) { m.E = nan },
	} {
		s, d, m := wideOf(t, "W14X90"), full(), a992
		b := aiscOf(t, ASD)
		if u, id := b.Utilisation(&s, m, &d); !Passes(u) {
			t.Fatalf("unspoilt demand fails: %v by %s", u, id)
		}
		spoil(&d, &m)
		if u, id := b.Utilisation(&s, m, &d); Passes(u) || !(u <= ceiling) || id == "" {
			t.Errorf("%s spoilt: %v by %q, want a finite figure over 1", name, u, id)
		}
	}
}

// B1 of Appendix 8 by hand: W14x90, 20 ft, Pe = π²·29000·999/240² = 4964.1 kip;
// P = 300 kip: LRFD 1/(1 − 300/4964.1) = 1.064320, ASD 1/(1 − 480/4964.1) = 1.107045.
func TestSecondOrderAmplification(t *testing.T) {
	s := wideOf(t, "W14X90")
	d := Demand{Axial: 300 * kip, Moment: 1, MomentZ: 1, LateralSpacing: 1, LengthY: 20 * foot, LengthZ: 10 * foot}
	for method, want := range map[string]float64{LRFD: 1.064320, ASD: 1.107045} {
		c := aiscCheck(t, aiscOf(t, method), s, a992, d, Interaction)
		if got := aiscInput(t, c, "B1x"); math.Abs(got-want) > 1e-5 {
			t.Errorf("%s: B1 %.6f, want %.6f", method, got, want)
		}
	}
	d.Axial = -d.Axial
	if got := aiscInput(t, aiscCheck(t, aiscOf(t, LRFD), s, a992, d, Interaction), "B1x"); got != 1 {
		t.Errorf("tension: B1 %v, want 1", got)
	}
}

func TestInteractionAppliesToTwoOfThreeForces(t *testing.T) {
	s := wideOf(t, "W14X90")
	for want, list := range map[bool][]Demand{
		true:  {{Axial: 1, Moment: 1}, {Axial: -1, MomentZ: 1}, {Moment: 1, MomentZ: 1}},
		false: {{Axial: 1}, {Moment: 1}, {MomentZ: 1}, {Shear: 1}},
	} {
		for _, d := range list {
			if _, got := find(aiscOf(t, ASD).Explain(&s, a992, &d), Interaction); got != want {
				t.Errorf("%+v: interaction %v, want %v", d, got, want)
			}
		}
	}
}

func TestOverloadedColumnStaysFiniteAndOrdered(t *testing.T) {
	s := wideOf(t, "W14X90")
	last := 0.0
	for _, axial := range []float64{1e5, 1e6, 2e6, 5e6, 1e7, 2e7, 2.2e7, 2.21e7, 3e7, 1e8, 1e10} {
		d := Demand{Moment: 20e3, Axial: axial, LateralSpacing: 3, LengthY: 6, LengthZ: 6}
		c := aiscCheck(t, aiscOf(t, LRFD), s, a992, d, Interaction)
		if !(c.Utilisation > last && c.Utilisation <= ceiling) {
			t.Errorf("N = %v: interaction %v after %v, want more, at most %v", axial, c.Utilisation, last, ceiling)
		}
		last = c.Utilisation
	}
}

func TestUnrestrainedWideFlangeFailsWhereTheRestrainedOnePasses(t *testing.T) {
	s := wideOf(t, "W21X44")
	d := Demand{Moment: 200e3, Shear: 50e3, LateralSpacing: 12}
	if u, id := aiscOf(t, LRFD).Utilisation(&s, a992, &d); Passes(u) || id != LateralBuckling {
		t.Errorf("12 m unrestrained: %v by %s, want over 1 by lateral-torsional buckling", u, id)
	}
	d.LateralSpacing = 1
	if u, _ := aiscOf(t, LRFD).Utilisation(&s, a992, &d); !Passes(u) {
		t.Errorf("restrained each metre: %v, want at most 1", u)
	}
}

// At Fe = Fy a strut has 0.658 of its yield load, not all of it.
func TestColumnOfMiddleSlendernessIsNotPassedOnTheLesserOfYieldAndEuler(t *testing.T) {
	s := wideOf(t, "W14X90")
	length := math.Pi * rootOf(a992) * s.Rz
	d := Demand{Axial: 0.9 * 0.9 * s.A * a992.Yield, LengthY: length, LengthZ: length}
	got, id := aiscOf(t, LRFD).Utilisation(&s, a992, &d)
	if id != Axial || !near(got, 0.9/0.658, 1e-9) {
		t.Errorf("%v by %s, want %v by axial", got, id, 0.9/0.658)
	}
}
