package resistance

import (
	"math"
	"strings"
	"testing"
)

func TestStrutOfMiddleSlendernessIsNotPassedOnTheLesserOfYieldAndEuler(t *testing.T) {
	// At λ = π·√(E/fy) yield and Euler stress are equal; the parabola gives 3/4 of
	// them. 0.9·A·fy/n would pass on the lesser of the two.
	length := math.Pi * math.Sqrt(210e9/235e6) * ipe300.Rz
	d := Demand{Axial: 0.9 * ipe300.A * 235e6 / 1.5, LengthY: length, LengthZ: length}
	got, id := basisOf(t, 1.5).Utilisation(&ipe300, s235, &d)
	if id != Axial || !near(got, 0.9/0.75, 1e-9) {
		t.Errorf("utilisation %v by %s, want 1.2 by axial", got, id)
	}
}

func TestUnrestrainedBeamFailsWhereTheRestrainedOnePasses(t *testing.T) {
	b := basisOf(t, 1.5)
	d := Demand{Moment: 300e3, Shear: 100e3, LateralSpacing: 12}
	if got, id := b.Utilisation(&ipe500, s355, &d); Passes(got) || id != LateralBuckling {
		t.Errorf("IPE 500 in S355, 12 m unrestrained: %v by %s, want over 1 by lateral-torsional buckling", got, id)
	}
	d.LateralSpacing = 1.5
	if got, _ := b.Utilisation(&ipe500, s355, &d); !Passes(got) {
		t.Errorf("IPE 500 in S355, restrained each 1.5 m: %v, want at most 1", got)
	}
}

func TestMissingLengthsFail(t *testing.T) {
	b := basisOf(t, 1.5)
	for _, tc := range []struct {
		d    Demand
		want string
	}{
		{Demand{Moment: 1}, LateralBuckling},
		{Demand{Moment: 1, LateralSpacing: -2}, LateralBuckling},
		{Demand{Axial: 1}, Axial},
		{Demand{Axial: 1, LengthY: 3}, Axial},
		{Demand{Axial: 1, LengthZ: 3}, Axial},
	} {
		got, id := b.Utilisation(&ipe300, s235, &tc.d)
		if Passes(got) || id != tc.want {
			t.Errorf("%+v: %v by %q, want over 1 by %q", tc.d, got, id, tc.want)
		}
		c, _ := find(b.Explain(&ipe300, s235, &tc.d), tc.want)
		if !strings.Contains(c.Note, "not stated") {
			t.Errorf("%+v: note %q lacks the reason", tc.d, c.Note)
		}
	}
}

func TestNotANumberFails(t *testing.T) {
	b := basisOf(t, 1.5)
	full := func() Demand {
		return Demand{Moment: 1e3, Shear: 1e3, Axial: 1e3, LateralSpacing: 2, LengthY: 2, LengthZ: 2, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}}}
	}
	nan := math.NaN()
	for name, spoil := range map[string]func(*Demand, *Material){
		"moment":           func(d *Demand, _ *Material) { d.Moment = nan },
		"shear":            func(d *Demand, _ *Material) { d.Shear = nan },
		"axial":            func(d *Demand, _ *Material) { d.Axial = nan },
		"lateral spacing":  func(d *Demand, _ *Material) { d.LateralSpacing = nan },
		"length y":         func(d *Demand, _ *Material) { d.LengthY = nan },
		"length z":         func(d *Demand, _ *Material) { d.LengthZ = nan },
		"deflection":       func(d *Demand, _ *Material) { d.Deflections[0].Value = nan },
		"deflection limit": func(d *Demand, _ *Material) { d.Deflections[0].Limit = nan },
		"no limit":         func(d *Demand, _ *Material) { d.Deflections[0].Limit = 0 },
		"negative moment":  func(d *Demand, _ *Material) { d.Moment = -1 },
		"yield":            func(_ *Demand, m *Material) { m.Yield = nan },
		"E":                func(_ *Demand, m *Material) { m.E = nan },
	} {
		d, m := full(), s235
		if u, _ := b.Utilisation(&ipe300, m, &d); !Passes(u) {
			t.Fatalf("unspoilt demand fails: %v", u)
		}
		spoil(&d, &m)
		u, id := b.Utilisation(&ipe300, m, &d)
		if Passes(u) || !(u <= ceiling) || id == "" {
			t.Errorf("%s spoilt: %v by %q, want a finite figure over 1", name, u, id)
		}
	}
}

func TestOverloadedStrutStaysFiniteAndOrdered(t *testing.T) {
	b := basisOf(t, 1.5)
	last := 0.0
	for _, axial := range []float64{1e5, 1e6, 2e6, 5e6, 1.2e7, 1.283e7, 1.29e7, 2e7, 1e8, 1e10} {
		d := Demand{Moment: 20e3, Axial: axial, LateralSpacing: 3, LengthY: 3, LengthZ: 3}
		c, _ := find(b.Explain(&ipe300, s235, &d), Interaction)
		if !(c.Utilisation > last && c.Utilisation <= ceiling) {
			t.Errorf("N = %v: interaction %v after %v, want more, at most %v", axial, c.Utilisation, last, ceiling)
		}
		last = c.Utilisation
	}
}

func TestAmplification(t *testing.T) {
	// 1/(1 − x): 4/3 at a quarter, 2 at a half; continuous where the tangent begins.
	for x, want := range map[float64]float64{0: 1, 0.25: 4.0 / 3, 0.5: 2, 0.999: 1000} {
		if got := amplification(x); !near(got, want, 1e-9) {
			t.Errorf("amplification(%v) = %v, want %v", x, got, want)
		}
	}
	if got := amplification(0.999 + 1e-12); !near(got, 1000, 1e-6) {
		t.Errorf("just above 0.999: %v, want 1000", got)
	}
}

func TestDeflectionReportsTheSpanNearestItsOwnLimit(t *testing.T) {
	d := Demand{Deflections: []Deflection{
		{Where: "span 1", Value: 0.020, Span: 10, Limit: 0.0333},
		{Where: "right overhang", Value: 0.009, Span: 1, Limit: 0.010, Overhang: true},
	}}
	c, ok := find(basisOf(t, 1.5).Explain(&ipe300, s235, &d), Deflecting)
	if !ok || c.Note != "right overhang" || !near(c.Utilisation, 0.9, 1e-12) {
		t.Errorf("got %+v, want the right overhang at 0.9", c)
	}
}

func TestClosedTubesAndRoundsDoNotBuckleSideways(t *testing.T) {
	d := Demand{Moment: 1e3, LateralSpacing: 30}
	for _, s := range catalogue(t) {
		_, checked := find(basisOf(t, 1.5).Explain(&s, s235, &d), LateralBuckling)
		if checked != bucklesSideways(&s) {
			t.Errorf("%s (%v): lateral-torsional buckling checked = %v", s.Designation, s.Shape, checked)
		}
	}
}

func TestPassFailCheckGovernsOnlyWhereNotMet(t *testing.T) {
	thin := ipe500
	thin.Tf = 0.004 // c/tf = 18.5, over 14·0.8136
	d := Demand{Moment: 1, LateralSpacing: 1}
	b := basisOf(t, 1.5)
	if u, id := b.Utilisation(&thin, s355, &d); id != LocalBuckling || Passes(u) {
		t.Errorf("thin flange: %v by %s, want over 1 by local slenderness", u, id)
	}
	c, _ := find(b.Explain(&thin, s355, &d), LocalBuckling)
	if !strings.Contains(c.Note, "flange") || !strings.Contains(c.Note, "class 4") {
		t.Errorf("note %q names neither the plate nor the class", c.Note)
	}
	if _, id := b.Utilisation(&ipe500, s355, &d); id == LocalBuckling {
		t.Error("local slenderness governs although its limit is met")
	}
}

func TestSlendernessOverTwoHundredIsNoted(t *testing.T) {
	for length, want := range map[float64]bool{199 * ipe300.Rz: false, 201 * ipe300.Rz: true} {
		d := Demand{Axial: 1e3, LengthY: length, LengthZ: length}
		c, _ := find(basisOf(t, 1.5).Explain(&ipe300, s235, &d), Axial)
		if got := strings.Contains(c.Note, "slenderness over 200"); got != want {
			t.Errorf("L = %v m: note %q, want noted %v", length, c.Note, want)
		}
	}
}

func TestAllowableRefusesFactors(t *testing.T) {
	for _, factor := range []float64{0, 1, 1.499, 10.01, -2, math.NaN(), math.Inf(1)} {
		b, err := Allowable(factor)
		if err == nil || b != nil || !strings.Contains(err.Error(), "1.5 to 10") {
			t.Errorf("factor %v: %v, %v, want an error that says 1.5 to 10", factor, b, err)
		}
	}
	if name := basisOf(t, 10).Name(); name != "allowable" {
		t.Errorf("name %q", name)
	}
}

func TestMaterialValidate(t *testing.T) {
	if err := s355.Validate(); err != nil {
		t.Error(err)
	}
	for want, spoil := range map[string]func(*Material){
		"yield strength":    func(m *Material) { m.Yield = 0 },
		"ultimate strength": func(m *Material) { m.Ultimate = math.NaN() },
		"modulus E":         func(m *Material) { m.E = math.Inf(1) },
		"modulus G":         func(m *Material) { m.G = -1 },
		"below the yield":   func(m *Material) { m.Ultimate = 300e6 },
	} {
		m := s355
		spoil(&m)
		if err := m.Validate(); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}
