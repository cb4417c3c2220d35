package resistance

import (
	"math"
	"strings"
	"testing"

	"spanwright/structural/section"
)

func named(t *testing.T, name string) section.Section {
	t.Helper()
	s, err := section.Find(name)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Each limit of EN 1993-1-1:2005 table 5.2 (from memory), just under and just over
// it, in S235.
func TestClassLimits(t *testing.T) {
	outstand := func(ct float64) section.Section { return platedI(0.2, 2*ct*0.010+0.010, 0.010, 0.010) }
	tube := func(ct float64) section.Section {
		s := section.Section{Shape: section.RectangularTube, H: 0.1, B: (ct + 3) * 0.005, Tw: 0.005, Tf: 0.005, A: 2e-3, Iy: 1e-6, Wely: 1e-5, Wply: 1e-5}
		return s
	}
	round := func(dt float64) section.Section {
		return section.Section{Shape: section.RoundTube, H: dt * 0.005, B: dt * 0.005, Tw: 0.005, A: 2e-3, Wely: 1e-5, Wply: 1e-5}
	}
	for _, tc := range []struct {
		name   string
		make   func(float64) section.Section
		limits [3]float64
	}{
		{"outstand", outstand, [3]float64{9, 10, 14}}, {"internal part", tube, [3]float64{33, 38, 42}}, {"round tube", round, [3]float64{50, 70, 90}},
	} {
		for i, limit := range tc.limits {
			under, over := tc.make(limit*0.999), tc.make(limit*1.001)
			d := Demand{Moment: 1, LateralSpacing: 1}
			if got := caseOf(&under, s235, &d).y.class; got != i+1 {
				t.Errorf("%s just under %v: class %d, want %d", tc.name, limit, got, i+1)
			}
			x := caseOf(&over, s235, &d)
			if refused := tc.name == "round tube" && i == 2; refused && x.refusal == "" || !refused && x.y.class != i+2 {
				t.Errorf("%s just over %v: class %d, %q, want %d or refused", tc.name, limit, x.y.class, x.refusal, i+2)
			}
		}
	}
	strut := Demand{Axial: 1, LengthY: 1, LengthZ: 1}
	for thickness, want := range map[float64]bool{0.1 / 11.49: true, 0.1 / 11.51: false} {
		s := section.Section{Shape: section.Angle, H: 0.1, B: 0.1, Tw: thickness}
		if got := caseOf(&s, s235, &strut).refusal == ""; got != want {
			t.Errorf("angle, (b + h)/2t = %v: covered %v, want %v", 0.1/thickness, got, want)
		}
	}
}

// Flange c/t = 19.5 (λp = 1.2870, ρ = 0.66352), web 58 (λp = 1.2550, ρ = 0.65712), by
// hand.
func TestEffectiveAreaOfBothPlates(t *testing.T) {
	s := platedI(0.6, 0.4, 0.010, 0.010)
	x := caseOf(&s, s355, &Demand{Axial: 1, LengthY: 1, LengthZ: 1})
	if want := 0.0138 - 4*0.33648*0.00195 - 0.34288*0.0058; !near(x.area, want, 1e-4) {
		t.Errorf("Aeff %v m², want %v m²", x.area, want)
	}
}

// The same section about z, pressed tips gone: Weff by rectangles in a program of its
// own.
func TestEffectiveTips(t *testing.T) {
	s := platedI(0.6, 0.4, 0.010, 0.010)
	x := caseOf(&s, s355, &Demand{MomentZ: 1})
	if x.z.class != 4 || !near(x.z.w, 0.0003601740312773944, 1e-9) {
		t.Errorf("class %d, Weff,z %v m³, want 4, 3.6017403e-4 m³", x.z.class, x.z.w)
	}
}

// ρ = (2·0.8 − 1)² = 0.36 at 0.8 of the plastic shear, 6.2.8.
func TestBendingBesideShear(t *testing.T) {
	tube := section.Section{Shape: section.RectangularTube, H: 0.2, B: 0.1, Tw: 0.01, Tf: 0.01, A: 56e-4, Wply: 3.56e-4, Wely: 3e-4, Wplz: 2.16e-4, Welz: 2e-4, Avz: 37.33e-4, Avy: 18.67e-4, Iy: 1, Iz: 1}
	solid := section.Section{Shape: section.SolidRound, H: 0.06, B: 0.06, Tw: 0.06, A: 28e-4, Wply: 3.6e-5, Wplz: 3.6e-5, Avz: 21e-4, Avy: 21e-4, Iy: 1, Iz: 1}
	for name, tc := range map[string]struct {
		s    *section.Section
		y, z float64
	}{
		"tube":  {&tube, 3.56e-4 - 0.36*37.33e-4*37.33e-4/0.08, 0.64 * 2.16e-4},
		"solid": {&solid, 0.64 * 3.6e-5, 0.64 * 3.6e-5},
		"I":     {&ipe300, 628.4e-6 - 0.36*0.0071*0.2786*0.2786/4, 0.64 * 125.2e-6},
	} {
		d := Demand{Moment: 1, MomentZ: 1, Shear: 0.8 * tc.s.Avz * 235e6 / math.Sqrt(3), ShearY: 0.8 * tc.s.Avy * 235e6 / math.Sqrt(3)}
		x := caseOf(tc.s, s235, &d)
		if y, z := x.sectionModulus(nil), x.sectionModulusZ(nil); !near(y, tc.y, 1e-9) || !near(z, tc.z, 1e-9) {
			t.Errorf("%s: moduli %v, %v m³, want %v, %v m³", name, y, z, tc.y, tc.z)
		}
		if got, want := x.shearTaken(), 0.36*max(tc.s.Avz, tc.s.Avy); !near(got, want, 1e-9) {
			t.Errorf("%s: shear takes %v m², want %v m²", name, got, want)
		}
		n := 0.5 * tc.s.A * 235e6
		d.Axial, d.MomentZ, d.ShearY, d.LengthY, d.LengthZ, d.LateralSpacing = n, 0, 0, 0.01, 0.01, 0.01
		c, _ := find(basisEN(t, Partial{}).Explain(tc.s, s235, &d), Interaction)
		if want := n / ((tc.s.A - 0.36*tc.s.Avz) * 235e6); !near(c.Inputs[0].Value, want, 1e-9) {
			t.Errorf("%s: N/NRd = %v, want %v", name, c.Inputs[0].Value, want)
		}
	}
}

func TestPartialFactorsStandWhereTheyBelong(t *testing.T) {
	b, plain := basisEN(t, Partial{M0: 1.1, M1: 1.25, M2: 1.3}), basisEN(t, Partial{M0: 1, M1: 1, M2: 1})
	thin := platedI(1.5, 0.3, 0.008, 0.02)
	for _, tc := range []struct {
		id    string
		s     *section.Section
		d     Demand
		ratio float64
	}{
		{Bending, &ipe300, Demand{Moment: 1, LateralSpacing: 1}, 1.1},
		{BendingZ, &ipe300, Demand{MomentZ: 1}, 1.1},
		{LateralBuckling, &ipe300, Demand{Moment: 1, LateralSpacing: 5}, 1.25},
		{Shear, &ipe300, Demand{Shear: 1}, 1.1},
		{ShearY, &ipe300, Demand{ShearY: 1}, 1.1},
		{WebBuckling, &thin, Demand{Shear: 1}, 1.25},
		{Axial, &ipe300, Demand{Axial: 1, LengthY: 4, LengthZ: 4}, 1.25},
		{Axial, &ipe300, Demand{Axial: -1}, 1.1},
		{Axial, &ipe300, Demand{Axial: -1, NetAreaFactor: 0.5}, 1.3},
	} {
		x, _ := find(plain.Explain(tc.s, s235, &tc.d), tc.id)
		y, _ := find(b.Explain(tc.s, s235, &tc.d), tc.id)
		if !near(x.Resistance/y.Resistance, tc.ratio, 1e-9) {
			t.Errorf("%s, %+v: over a factor of %v, want %v", tc.id, tc.d, x.Resistance/y.Resistance, tc.ratio)
		}
	}
}

// EN 1993-1-5:2006 8 (1): k = 0.4 where the plastic moment is used. Two webs of a
// tube resist shear together.
func TestWebsOfOtherSections(t *testing.T) {
	s := platedI(0.5, 0.2, 0.010, 0.016)
	b := basisEN(t, Partial{})
	c, _ := find(b.Explain(&s, s355, &Demand{Moment: 1, LateralSpacing: 1}), LocalBuckling)
	if want := 0.4 * 210e9 / 355e6 * math.Sqrt(0.468*0.010/(0.2*0.016)); !near(c.Resistance, want, 1e-12) {
		t.Errorf("class 1 flange induced buckling limit %v, want %v", c.Resistance, want)
	}
	tube := section.Section{Shape: section.RectangularTube, H: 0.4, B: 0.3, Tw: 0.004, Tf: 0.004, A: 5e-3, Avz: 3e-3, Avy: 2e-3, Wely: 1, Welz: 1, Iy: 1, Iz: 1}
	c, _ = find(b.Explain(&tube, s235, &Demand{Shear: 2, ShearY: 1}), WebBuckling)
	if want := 2 * 0.83 / (0.388 / 0.004 / 86.4) * 0.388 * 0.004 * 235e6 / math.Sqrt(3); !near(c.Resistance, want, 1e-9) {
		t.Errorf("two webs %v N, want %v N", c.Resistance, want)
	}
	c, _ = find(b.Explain(&tube, s235, &Demand{Shear: 1, ShearY: 2}), WebBuckling)
	if want := 2 * min(1.2, 0.83/(0.288/0.004/86.4)) * 0.288 * 0.004 * 235e6 / math.Sqrt(3); !near(c.Resistance, want, 1e-9) || !strings.Contains(c.Note, "width") {
		t.Errorf("two webs along the width %v N, want %v N", c.Resistance, want)
	}
}

// Annex B, tables B.1 and B.2 with every Cm = 1 (from memory), by hand at λy = 0.7,
// λz = 0.9, ny = 0.3, nz = 0.4; and at their caps.
func TestInteractionFactors(t *testing.T) {
	i, tube := ipe300, section.Section{Shape: section.RectangularTube}
	for _, tc := range []struct {
		name   string
		s      *section.Section
		class  int
		ly, lz float64
		want   pairing
	}{
		{"I, class 1", &i, 1, 0.7, 0.9, pairing{1.15, 0.6 * 1.48, 1 - 0.1*0.9*0.4/0.75, 1.48}},
		{"I, class 1, caps", &i, 2, 2, 2, pairing{1.24, 0.6 * 1.56, 1 - 0.1*0.4/0.75, 1.56}},
		{"I, class 3", &i, 3, 0.7, 0.9, pairing{1.126, 1.216, 1, 1.216}},
		{"I, class 3, caps", &i, 4, 2, 2, pairing{1.18, 1.24, 1, 1.24}},
		{"tube, class 1", &tube, 1, 0.7, 0.9, pairing{1.15, 0.6 * 1.28, 0.6 * 1.15, 1.28}},
		{"tube, class 1, caps", &tube, 1, 2, 2, pairing{1.24, 0.6 * 1.32, 0.6 * 1.24, 1.32}},
		{"tube, class 3", &tube, 3, 0.7, 0.9, pairing{1.126, 1.216, 0.8 * 1.126, 1.216}},
		{"no less than 1", &i, 1, 0.1, 0.1, pairing{1, 0.6, 1 - 0.1*0.1*0.4/0.75, 1}},
	} {
		x := enCase{s: tc.s, d: &Demand{}, m: s235, y: enBent{class: tc.class}, z: enBent{class: tc.class}}
		got := x.factors(&buckled{lambdaY: tc.ly, lambdaZ: tc.lz}, 0.3, 0.4)
		for what, pair := range map[string][2]float64{"kyy": {got.yy, tc.want.yy}, "kyz": {got.yz, tc.want.yz}, "kzy": {got.zy, tc.want.zy}, "kzz": {got.zz, tc.want.zz}} {
			if !near(pair[0], pair[1], 1e-12) {
				t.Errorf("%s: %s = %v, want %v", tc.name, what, pair[0], pair[1])
			}
		}
	}
	// λz = 0.3 of IPE 300 in S235: kzy = 0.6 + λz.
	length := 0.3 * math.Pi * math.Sqrt(210e9*ipe300.Iz/(ipe300.A*235e6))
	x := enCase{s: &i, d: &Demand{LengthZ: length}, m: s235, y: enBent{class: 1}}
	if got := x.twistFactor(0.3, 0.1); !near(got, 0.9, 1e-9) {
		t.Errorf("λz = 0.3: kzy = %v, want 0.9", got)
	}
}

// Of the relief by kzy no more than at My = Mb.
func TestReliefOfTwistIsBounded(t *testing.T) {
	d := Demand{Moment: 4e5, Axial: 2e5, LateralSpacing: 3, LengthY: 3, LengthZ: 3}
	x := caseOf(&ipe300, s235, &d)
	_, got := x.memberSums(nil)
	b := x.column()
	nz, my := 2e5/(b.chiZ*ipe300.A*235e6), 4e5/120199.49472208905
	if want := nz + my - 0.1*b.lambdaZ*nz/0.75; !near(got, want, 1e-9) {
		t.Errorf("(6.62) = %v, want %v", got, want)
	}
}

// 6.2.9.1 (5) for a tube with aw = 0.46429 and af = 0.28571 at n = 0.5, and about both
// axes with the lesser of them and the exponent 1.66.
func TestPlasticTube(t *testing.T) {
	s := section.Section{Shape: section.RectangularTube, H: 0.2, B: 0.15, Tw: 0.01, Tf: 0.01, A: 56e-4}
	x := enCase{s: &s, d: &Demand{}}
	for _, tc := range []struct{ y, z, want float64 }{
		{0.5 / (1 - 0.4642857143/2), 0, 1}, {0, 0.5 / (1 - 0.2857142857/2), 1},
		{0.4, 0.4, 0.5 + (1-0.2857142857/2)*0.4*math.Pow(2, 1/1.66)},
	} {
		if got := x.plasticSum(0.5, tc.y, tc.z); !near(got, tc.want, 1e-9) {
			t.Errorf("y = %v, z = %v: %v, want %v", tc.y, tc.z, got, tc.want)
		}
	}
}

// An angle buckles about v over the longer length; its twist goes with bending about
// u, the axis of symmetry of equal legs (closed form as for the channel).
func TestAngleStrut(t *testing.T) {
	s := named(t, "L 100x100x10")
	b := basisEN(t, Partial{})
	for _, d := range []Demand{{Axial: 1, LengthY: 4, LengthZ: 1}, {Axial: 1, LengthY: 1, LengthZ: 4}} {
		c, _ := find(b.Explain(&s, s235, &d), Axial)
		lambda := 4 / math.Pi * math.Sqrt(s.A*235e6/(210e9*s.Iv))
		if want := curveB.chi(lambda) * s.A * 235e6; !near(c.Resistance, want, 1e-9) {
			t.Errorf("%+v: %v N, want %v N about v", d, c.Resistance, want)
		}
		if got := caseOf(&s, s235, &d).column().lambdaZ; !near(got, lambda, 1e-9) {
			t.Errorf("%+v: λ about v %v, want %v", d, got, lambda)
		}
		a, _ := find(basisOf(t, 1.5).Explain(&s, s235, &d), Axial)
		if want := math.Pi * math.Pi * 210e9 * s.Iv / 16 / 1.5; !near(a.Resistance, want, 1e-9) {
			t.Errorf("allowable, %+v: %v N, want %v N about v", d, a.Resistance, want)
		}
	}
	held := s
	held.Iv = 1 // so that only the mode with u is left
	y0 := s.Y0*s.Y0 + s.Z0*s.Z0
	i2 := (s.Iy+s.Iz)/s.A + y0
	u, twist := math.Pi*math.Pi*210e9*s.Iu, (81e9*s.J+math.Pi*math.Pi*210e9*s.Iw)/i2
	beta := 1 - y0/i2
	want := u / (2 * beta) * (1 + twist/u - math.Sqrt((1-twist/u)*(1-twist/u)+4*(1-beta)*twist/u))
	if got := criticalTwist(&held, s235, 1, 1, 1); !near(got, want, 1e-6) {
		t.Errorf("flexural-torsional force %v N, want %v N", got, want)
	}
}

// With unequal flanges the moment factor is not counted; every other I gains by it.
func TestMomentFactorWithUnequalFlanges(t *testing.T) {
	for _, tc := range []struct {
		s     section.Section
		gains bool
	}{{girder, false}, {ipe500, true}} {
		one := caseOf(&tc.s, s355, &Demand{Moment: 1, LateralSpacing: 8}).lateral(nil)
		two := caseOf(&tc.s, s355, &Demand{Moment: 1, LateralSpacing: 8, MomentFactor: 2}).lateral(nil)
		if gains := two > one; gains != tc.gains {
			t.Errorf("%s: χLT %v, with C1 = 2 %v", tc.s.Designation, one, two)
		}
	}
}

// Bending about z presses the deeper side: 42ε of table 5.2.
func TestAllowableSideOfATube(t *testing.T) {
	s := section.Section{Shape: section.RectangularTube, H: 0.3, B: 0.1, Tw: 0.005, Tf: 0.005, A: 1, Iy: 1, Welz: 1}
	c, _ := find(basisOf(t, 1.5).Explain(&s, s235, &Demand{MomentZ: 1}), LocalBuckling)
	if want := 57.0 / 42; !near(c.Utilisation, want, 1e-9) {
		t.Errorf("side: (c/t)/limit %v, want %v", c.Utilisation, want)
	}
}
