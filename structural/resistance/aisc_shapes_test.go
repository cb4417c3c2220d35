package resistance

import (
	"math"
	"testing"

	"spanwright/structural/section"
)

// aiscGirder returns an I section of four plates in inches with the thin-plate torsion
// constant, as the check values below have it.
func aiscGirder(t testing.TB, name string) section.Section {
	t.Helper()
	s, err := section.Find(name)
	if err != nil {
		t.Fatal(err)
	}
	web := s.H - 2*s.Tf
	s.J = (2*s.B*math.Pow(s.Tf, 3) + web*math.Pow(s.Tw, 3)) / 3
	s.Iw = s.Iz * (s.H - s.Tf) * (s.H - s.Tf) / 4
	return s
}

// The strengths in this file were computed in Python in kip and inches, clause by
// clause and apart from this project (AISC 360-22 E3, E4, E7, F2 to F5, F7 to F9, F11,
// G2 to G5, from memory), for Fy = 50 ksi unless another is named.
func TestBuiltUpSections(t *testing.T) {
	for _, tc := range []struct {
		name                        string
		length, cb                  float64 // in
		lateral, local, shear, push float64 // kip-in, kip
		note                        string
	}{
		{"WELDED-I 20inx8inx0.375inx0.5in", 120, 1, 4788.37808, 5592.1875, 225, 494.758108, "flange compact; web compact"},
		{"WELDED-I 20inx16inx0.375inx0.5in", 60, 1, 9492.1875, 7429.8098, 225, 921.782592, "flange noncompact; web compact"},
		{"WELDED-I 20inx24inx0.5inx0.4in", 400, 1.2, 11712, 4004.33842, 300, 744.975633, "flange slender; web compact"},
		{"WELDED-I 40inx12inx0.375inx0.75in", 200, 1, 18958.9282, 23879.6965, 268.324521, 818.451408, "flange compact; web noncompact"},
		{"WELDED-I 40inx12inx0.375inx0.75in", 500, 1.3, 7491.61742, 23879.6965, 268.324521, 214.113235, "flange compact; web noncompact"},
		{"WELDED-I 60inx16inx0.375inx0.75in", 50, 1, 44643.1321, 41755.2647, 264.884463, 1397.60075, "flange noncompact; web slender"},
		{"WELDED-I 60inx16inx0.375inx0.75in", 200, 1, 39832.0558, 41755.2647, 264.884463, 1184.29413, "flange noncompact; web slender"},
		{"WELDED-I 60inx16inx0.375inx0.75in", 500, 1, 16714.5467, 41755.2647, 264.884463, 407.193332, "flange noncompact; web slender"},
		{"WELDED-I 60inx24inx0.375inx0.5in", 100, 1, 45127.6236, 14313.9181, 262.639679, 892.805697, "flange slender; web slender"},
	} {
		s := aiscGirder(t, tc.name)
		length := tc.length * inch
		d := Demand{Moment: 1, Shear: 1, Axial: 1, LateralSpacing: length, LengthY: length, LengthZ: length, MomentFactor: tc.cb}
		b := aiscOf(t, ASD)
		local := aiscCheck(t, b, s, a992, d, Bending)
		aiscSame(t, tc.name+" local", local.Resistance*1.67/kip/inch, tc.local)
		aiscSame(t, tc.name+" lateral", aiscCheck(t, b, s, a992, d, LateralBuckling).Resistance*1.67/kip/inch, tc.lateral)
		aiscSame(t, tc.name+" shear", aiscCheck(t, b, s, a992, d, Shear).Resistance*1.67/kip, tc.shear)
		aiscSame(t, tc.name+" axial", aiscCheck(t, b, s, a992, d, Axial).Resistance*1.67/kip, tc.push)
		if local.Note != tc.note {
			t.Errorf("%s: note %q, want %q", tc.name, local.Note, tc.note)
		}
	}
}

// thinTee is 8 x 7 in, stem 0.3, flange 0.4, without fillets.
var thinTee = section.Section{
	Designation: "tee", Shape: section.Tee, Making: section.HotRolled, H: 8 * inch, B: 7 * inch, Tw: .3 * inch, Tf: .4 * inch,
	A: 5.08 * inch * inch, Iy: 31.11881994750656 * math.Pow(inch, 4), Iz: 11.450433333333335 * math.Pow(inch, 4), J: 0.21953333333333336 * math.Pow(inch, 4),
	Wely: 5.182389369700148 * math.Pow(inch, 3), WelyTop: 15.596251512759794 * math.Pow(inch, 3), WelyBottom: 5.182389369700148 * math.Pow(inch, 3),
	Wply: 9.214342857142857 * math.Pow(inch, 3), Welz: 3.27 * math.Pow(inch, 3), Wplz: 5.07 * math.Pow(inch, 3),
	Z0: (7.8 - 6.004724409448818) * inch,
	Ry: math.Sqrt(31.11881994750656/5.08) * inch, Rz: math.Sqrt(11.450433333333335/5.08) * inch,
}

// unequalI is 30 in deep: web 0.25, upper flange 12 x 0.5, lower 8 x 0.75.
var unequalI = section.Section{
	Designation: "unequal flanges", Shape: section.UnequalI, Making: section.Welded,
	H: 30 * inch, B: 12 * inch, Tw: .25 * inch, Tf: .5 * inch, LowerB: 8 * inch, LowerTf: .75 * inch,
	A: 19.1875 * inch * inch, Iy: 3084.172181434921 * math.Pow(inch, 4), Iz: 104.03743489583333 * math.Pow(inch, 4),
	J: 1.7747395833333333 * math.Pow(inch, 4), Iw: 19116.346153846152 * math.Pow(inch, 6), Z0: 5.625626409421196 * inch,
	Ry: math.Sqrt(3084.172181434921/19.1875) * inch, Rz: math.Sqrt(104.03743489583333/19.1875) * inch,
}

// l4 is L4x4x1/4, table 1-7 of the AISC manual, from memory.
var l4 = section.Section{
	Designation: "L4x4x1/4", Shape: section.Angle, Making: section.HotRolled, H: 4 * inch, B: 4 * inch, Tw: .25 * inch, Tf: .25 * inch,
	A: 1.93 * inch * inch, Ry: 1.25 * inch, Rz: 1.25 * inch, Ru: 1.57 * inch, Rv: .783 * inch,
}

func hssOf(h, b, wall, a, rx, ry float64) section.Section {
	return section.Section{
		Shape: section.RectangularTube, Making: section.ColdFormed, H: h * inch, B: b * inch, Tw: wall * inch, Tf: wall * inch, Nominal: wall / 0.93 * inch,
		A: a * inch * inch, Ry: rx * inch, Rz: ry * inch,
	}
}

func TestOtherShapes(t *testing.T) {
	rhs := hssOf(12, 4, .233, 7.10, 4.10, 1.72)
	rhs.Iy, rhs.Wply, rhs.Wely, rhs.J = 119*math.Pow(inch, 4), 25.6*math.Pow(inch, 3), 119.0/6*math.Pow(inch, 3), 61.7*math.Pow(inch, 4)
	tube := func(name string) section.Section {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		if s.Shape == section.RoundTube {
			s.Nominal = s.Tw
		}
		return s
	}
	box := tube("WELDED-BOX 24inx16inx0.375inx0.5in")
	flat := tube("FLAT 8inx1in")
	slenderStem, flange16, flange10 := thinTee, thinTee, thinTee
	slenderStem.Tw = .18 * inch
	flange16.Tf, flange10.Tf = .16*inch, .1*inch
	flange16.WelyTop, flange10.WelyTop = 6*math.Pow(inch, 3), 6*math.Pow(inch, 3)
	flange16.Tw = .4 * inch
	beam := func(length float64) Demand { return Demand{Moment: 1, LateralSpacing: length * inch} }
	push := func(y, z float64) Demand { return Demand{Axial: 1, LengthY: y * inch, LengthZ: z * inch} }
	for _, tc := range []struct {
		name string
		s    section.Section
		m    Material
		d    Demand
		id   string
		want float64 // kip, kip-in
	}{
		{"channel, F2 inelastic", c15x339, a36, beam(60), LateralBuckling, 1739.2492194141446},
		{"channel, F2 elastic", c15x339, a36, beam(240), LateralBuckling, 723.4871494413782},
		{"channel, F6", c15x339, a36, Demand{MomentZ: 1}, BendingZ, 177.984},
		{"channel, E3", c15x339, a36, push(120, 120), Axial, 141.49711010022067},
		{"channel, E4 flexural-torsional", c15x339, a36, push(400, 30), Axial, 274.3890276877729},
		{"round tube, F8 noncompact", tube("CHS 24inx0.25in"), a992, beam(1), Bending, 6175.94411},
		{"round tube, F8 slender", tube("CHS 24inx0.125in"), a992, beam(1), Bending, 2774.86211},
		{"round tube, G5 0.6·Fy", tube("CHS 24inx0.25in"), a992, Demand{Shear: 1}, Shear, 224.289659},
		{"round tube, G5 buckling", tube("CHS 24inx0.125in"), a992, Demand{Shear: 1}, Shear, 39.8578646},
		{"round tube, E7", tube("CHS 24inx0.25in"), a992, push(240, 240), Axial, 787.434384},
		{"round tube, E7 thinner", tube("CHS 24inx0.125in"), a992, push(240, 240), Axial, 345.310319},
		{"flat, F11 yielding", flat, a36, beam(2), LateralBuckling, 576},
		{"flat, F11 inelastic", flat, a36, beam(60), LateralBuckling, 520.985777},
		{"flat, F11 elastic", flat, a36, beam(250), LateralBuckling, 293.866667},
		{"flat, F11 elastic, longer", flat, a36, beam(500), LateralBuckling, 146.933333},
		{"rectangular tube, F7.4 inelastic", rhs, a992, beam(300), LateralBuckling, 1240.84131},
		{"rectangular tube, F7.4 elastic", rhs, a992, beam(4000), LateralBuckling, 521.9972385},
		{"rectangular tube, E7", hssOf(12, 8, .174, 6.76, 4.56, 3.35), steel(46, 58), push(288, 288), Axial, 162.88841},
		{"box, F7 noncompact flange and web", box, a992, beam(1), Bending, 13324.6141},
		{"box, F7 slender flange", box, a992, Demand{MomentZ: 1}, BendingZ, 6432.8284},
		{"box, G4", box, a992, Demand{Shear: 1}, Shear, 499.810611},
		{"box, E7", box, a992, push(240, 240), Axial, 1261.03965},
		{"tee, F9 stem buckling", thinTee, a992, beam(120), Bending, 222.779096},
		{"tee, F9 lateral", thinTee, a992, beam(120), LateralBuckling, 259.119468},
		{"tee, E4 and E7", thinTee, a992, push(120, 120), Axial, 120.684422},
		{"tee, F9 slender stem", slenderStem, a992, beam(120), Bending, 115.64761},
		{"tee, F9 noncompact flange", flange16, a992, beam(120), Bending, 240.256412},
		{"tee, F9 slender flange", flange10, a992, beam(120), Bending, 99.4285714},
		{"tee, G6", flange10, a992, Demand{ShearY: 1}, ShearY, 17.411995864920254},
		{"channel, G6", c15x339, a36, Demand{ShearY: 1}, ShearY, 95.472},
		{"flat, shear along the depth", flat, a36, Demand{Shear: 1}, Shear, 115.2},
		{"unequal flanges, E4 and E7", unequalI, a992, push(180, 180), Axial, 427.087477},
		{"unequal flanges, G2", unequalI, a992, Demand{Shear: 1}, Shear, 119.773844},
		{"unequal flanges, G6", unequalI, a992, Demand{ShearY: 1}, ShearY, 360},
		{"angle, G3 shorter leg", l4, a992, Demand{ShearY: 1}, ShearY, 30},
		{"angle, E3 and E7", l4, a992, push(60, 30), Axial, 56.7394829},
		{"angle, G3", l4, a992, Demand{Shear: 1}, Shear, 0.6 * 50 * 4 * .25},
	} {
		unit := kip
		if tc.id == Bending || tc.id == BendingZ || tc.id == LateralBuckling {
			unit *= inch
		}
		aiscSame(t, tc.name, aiscCheck(t, aiscOf(t, ASD), tc.s, tc.m, tc.d, tc.id).Resistance*1.67/unit, tc.want)
		aiscSame(t, tc.name, aiscCheck(t, aiscOf(t, LRFD), tc.s, tc.m, tc.d, tc.id).Resistance/0.9/unit, tc.want)
	}
}

func TestDesignWall(t *testing.T) {
	for _, name := range []string{"SHS 200x10", "CHS 219.1x8"} {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		design := s.Design()
		for _, d := range []Demand{{Moment: 1}, {Axial: -1}, {Axial: 1, LengthY: 3, LengthZ: 3}} {
			b := aiscOf(t, LRFD)
			got, id := b.Utilisation(&s, a992, &d)
			want, wantID := b.Utilisation(&design, a992, &d)
			if got != want || id != wantID {
				t.Errorf("%s: %v by %s, with the design wall %v by %s", name, got, id, want, wantID)
			}
		}
		c := aiscCheck(t, aiscOf(t, LRFD), s, a992, Demand{Moment: 1}, Bending)
		if got := aiscInput(t, c, "t design") / aiscInput(t, c, "t nominal"); !near(got, 0.93, 1e-12) {
			t.Errorf("%s: design wall %v of nominal, want 0.93", name, got)
		}
	}
}
