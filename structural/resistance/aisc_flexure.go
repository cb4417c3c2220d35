package resistance

import (
	"math"

	"spanwright/structural/section"
)

// bending holds the moment about the strong axis to yielding and local buckling.
func (a aisc) bending(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if !bends(s) || uncovered(s, m, d) != "" {
		return use{}
	}
	return against(d.Moment, a.available(strongStrength(s, m, t), general, t))
}

// bends tells whether the shape has a strength in bending here; where it has none,
// uncovered refuses the moment.
func bends(s *section.Section) bool {
	switch s.Shape {
	case section.Angle, section.UnequalI, section.ChordSet:
		return false
	}
	return true
}

// bendingZ holds the moment about the weak axis to yielding and local buckling.
func (a aisc) bendingZ(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if d.MomentZ == 0 || uncovered(s, m, d) != "" {
		return use{}
	}
	return against(d.MomentZ, a.available(weakStrength(s, m, t), general, t))
}

// lateralBuckling holds the moment about the strong axis to lateral-torsional
// buckling between restraints.
func (a aisc) lateralBuckling(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if d.Moment == 0 || !yieldsSideways(s) || uncovered(s, m, d) != "" {
		return use{}
	}
	return against(d.Moment, a.available(lateralStrength(s, m, d, t), general, t))
}

// yieldsSideways tells whether lateral-torsional buckling is a limit state: not for
// round and square tubes and solid rounds.
func yieldsSideways(s *section.Section) bool {
	switch s.Shape {
	case section.ISection, section.Channel, section.Tee, section.Flat:
		return true
	case section.RectangularTube, section.WeldedBox:
		return s.H > s.B
	}
	return false
}

// strongStrength returns the nominal strength Mn (N·m) about the strong axis by
// yielding and local buckling.
func strongStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.steel(m)
	t.put("Z", s.Wply, "m³")
	t.put("S", s.Wely, "m³")
	t.sayWall(s)
	switch s.Shape {
	case section.ISection, section.Channel:
		return girderStrength(s, m, t)
	case section.Tee:
		return teeStrength(s, m, t)
	case section.RectangularTube, section.WeldedBox:
		return tubeStrength(tubeBending{s.Wply, s.Wely, s.Iy, s.H, sideOf(s), webOf(s), s.Shape}, m, t)
	case section.RoundTube:
		return roundTubeStrength(s, m, t)
	}
	return barStrength(s.Wply, s.Wely, m, t)
}

// weakStrength returns the nominal strength Mn (N·m) about the weak axis.
func weakStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.steel(m)
	t.put("Z", s.Wplz, "m³")
	t.put("S", s.Welz, "m³")
	switch s.Shape {
	case section.ISection, section.Channel:
		return weakFlangeStrength(s, m, t)
	case section.RectangularTube, section.WeldedBox:
		return tubeStrength(tubeBending{s.Wplz, s.Welz, s.Iz, s.B, webOf(s), sideOf(s), s.Shape}, m, t)
	case section.RoundTube:
		return roundTubeStrength(s, m, t)
	}
	return barStrength(s.Wplz, s.Welz, m, t)
}

// lateralStrength returns the nominal strength Mn (N·m) about the strong axis by
// lateral-torsional buckling over LateralSpacing, with Cb = MomentFactor.
func lateralStrength(s *section.Section, m Material, d *Demand, t *aiscTrace) float64 {
	cb := d.MomentFactor
	if cb == 0 {
		cb = 1
	}
	t.cite("F2.2 to F11.2, lateral-torsional buckling", "M ≤ Mn by φ or Ω")
	t.steel(m)
	t.put("Lb", d.LateralSpacing, "m")
	t.put("Cb", cb, "")
	if !(cb > 0 && cb <= math.MaxFloat64) {
		t.say("Cb must be a number above 0, so the resistance is taken as zero")
		return unstated
	}
	if !(d.LateralSpacing > 0) {
		t.say("the spacing of lateral restraints is not stated, so the resistance is taken as zero")
		return unstated
	}
	switch s.Shape {
	case section.ISection, section.Channel:
		l := lateralOf(s, m)
		l.note(t)
		if s.Shape == section.Channel {
			t.say("loads are taken to act through the shear centre")
		}
		return l.moment(d.LateralSpacing, cb)
	case section.Tee:
		return teeLateral(s, m, d.LateralSpacing, t)
	case section.RectangularTube, section.WeldedBox:
		return tubeLateral(s, m, d.LateralSpacing, cb, t)
	}
	return barLateral(s, m, d.LateralSpacing, cb, t)
}

// girderStrength returns Mn of an I section or channel without lateral-torsional buckling: F2.1
// with a compact web and flange, F3.2 with another flange, F4.1 and F4.3 with a
// noncompact web, F5.1 and F5.3 with a slender one.
func girderStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("F2 (F2-1), F3 (F3-1), F3 (F3-2), F4, F5",
		"M ≤ Mn by φ or Ω; Mn = Mp to λp, Mp − (Mp − 0.7·Fy·Sx)·(λ − λp)/(λr − λp) to λr, 0.9·E·kc·Sx/λ² beyond; a noncompact web lowers Mp to Rpc·My, a slender one to Rpg·My")
	flange, web := flangeOf(s).lambda(), webOf(s).lambda()
	compact, slenderFrom := flexureLimits(s, m)
	t.sayClass("flange", flange, compact, slenderFrom)
	t.sayClass("web", web, 3.76*rootOf(m), 5.70*rootOf(m))
	plateau, reduction := plateauOf(s, m)
	first := 0.7 * reduction * m.Yield * s.Wely
	switch {
	case flange <= compact:
		return plateau
	case flange <= slenderFrom:
		return plateau - (plateau-first)*(flange-compact)/(slenderFrom-compact)
	}
	return 0.9 * reduction * m.E * kc(web) * s.Wely / (flange * flange)
}

// plateauOf returns the moment (N·m) of a short I section with a compact flange, and
// the bending strength reduction Rpg (1 unless the web is slender):
//
//	Mp = Fy·Zx (F2-1) for compact webs;
//	Rpc·My (F4-1), Rpc by (F4-9b), Mp ≤ 1.6·Fy·Sx, for noncompact webs;
//	Rpg·My (F5-1), Rpg by (F5-6), for slender webs.
func plateauOf(s *section.Section, m Material) (plateau, reduction float64) {
	yield, plastic := m.Yield*s.Wely, m.Yield*s.Wply
	lambda, root := webOf(s).lambda(), rootOf(m)
	compact, slenderFrom := 3.76*root, 5.70*root
	switch {
	case lambda <= compact:
		return plastic, 1
	case lambda <= slenderFrom:
		top := min(plastic, 1.6*yield)
		return top - (top-yield)*(lambda-compact)/(slenderFrom-compact), 1
	}
	aw := min(10, webToFlange(s))
	reduction = max(0, 1-aw/(1200+300*aw)*(lambda-slenderFrom))
	return reduction * yield, reduction
}

// lateral is the curve of moment over unbraced length of an I section.
type lateral struct {
	plateau float64 // N·m, to Lp
	first   float64 // N·m, at Lr
	modulus float64 // m³, Sx, in F5 times Rpg
	radius  float64 // m, rts (F2) or rt (F4, F5)
	torsion float64 // J·c/(Sx·h0), 0 in F5
	lp, lr  float64 // m
	e       float64 // Pa
}

// lateralOf returns the curve of F2.2, F4.2 or F5.2; c = 1, of channels
// h0/2·√(Iy/Cw) (F2-8b):
//
//	compact web: Lp = 1.76·ry·√(E/Fy) (F2-5), rts² = √(Iy·Cw)/Sx (F2-7)
//	else: Lp = 1.1·rt·√(E/Fy) (F4-7), rt = b/√(12·(1 + aw/6)) (F4-11)
//	Lr = 1.95·r·E/(0.7·Fy)·√(x + √(x² + 6.76·(0.7·Fy/E)²)) (F2-6), (F4-8)
//	slender web: Lr = π·rt·√(E/(0.7·Fy)) (F5-5)
func lateralOf(s *section.Section, m Material) lateral {
	root := rootOf(m)
	if webOf(s).lambda() <= 3.76*root {
		radius := math.Sqrt(math.Sqrt(s.Iz*s.Iw) / s.Wely)
		h0, c := s.H-s.Tf, 1.0
		if s.Shape == section.Channel {
			c = h0 / 2 * math.Sqrt(s.Iz/s.Iw)
		}
		return rolledLateral(m, s.Wply, s.Wely, s.Rz, radius, s.J*c, h0)
	}
	plateau, reduction := plateauOf(s, m)
	l := lateral{
		plateau: plateau, first: 0.7 * reduction * m.Yield * s.Wely, modulus: reduction * s.Wely, e: m.E,
		radius: s.B / math.Sqrt(12*(1+webToFlange(s)/6)),
	}
	l.lp = 1.1 * l.radius * root
	if webOf(s).lambda() > 5.70*root {
		l.lr = math.Pi * l.radius * root / math.Sqrt(0.7)
		return l
	}
	l.torsion = s.J / (s.Wely * (s.H - s.Tf))
	l.lr = inelasticEnd(m, l.radius, l.torsion)
	return l
}

// rolledLateral returns the curve of F2.2 from the plastic and elastic modulus (m³),
// the radii ry and rts (m), J·c (m⁴) and the distance h0 (m) between flange centroids.
func rolledLateral(m Material, z, sx, ry, rts, jc, h0 float64) lateral {
	l := lateral{
		plateau: m.Yield * z, first: 0.7 * m.Yield * sx, modulus: sx, radius: rts, e: m.E,
		torsion: jc / (sx * h0), lp: 1.76 * ry * rootOf(m),
	}
	l.lr = inelasticEnd(m, rts, l.torsion)
	return l
}

// inelasticEnd returns Lr (m), (F2-6).
func inelasticEnd(m Material, radius, torsion float64) float64 {
	f := 0.7 * m.Yield / m.E
	return 1.95 * radius / f * math.Sqrt(torsion+math.Sqrt(torsion*torsion+6.76*f*f))
}

// moment returns Mn (N·m) over an unbraced length (m):
//
//	Mp to Lp (F2-1);
//	Cb·(Mp − (Mp − 0.7·Fy·Sx)·(Lb − Lp)/(Lr − Lp)) ≤ Mp to Lr (F2-2);
//	Fcr·Sx ≤ Mp beyond (F2-3), Fcr = Cb·π²·E/(Lb/rts)²·√(1 + 0.078·x·(Lb/rts)²) (F2-4)
func (l lateral) moment(length, cb float64) float64 {
	switch {
	case length <= l.lp:
		return l.plateau
	case length <= l.lr:
		return min(l.plateau, cb*(l.plateau-(l.plateau-l.first)*(length-l.lp)/(l.lr-l.lp)))
	}
	ratio := length / l.radius
	elastic := math.Pi * math.Pi * l.e / (ratio * ratio) * math.Sqrt(1+0.078*l.torsion*ratio*ratio)
	return min(l.plateau, cb*elastic*l.modulus)
}

func (l lateral) note(t *aiscTrace) {
	t.cite("F2.2 (F2-2) to (F2-8), F4.2, F5.2",
		"M ≤ Mn by φ or Ω; Mn = Mp to Lp, Cb·(Mp − (Mp − 0.7·Fy·Sx)·(Lb − Lp)/(Lr − Lp)) ≤ Mp to Lr, Fcr·Sx ≤ Mp beyond; Fcr = Cb·π²·E/(Lb/rts)²·√(1 + 0.078·J·c/(Sx·h0)·(Lb/rts)²)")
	t.put("Mp", l.plateau, "N·m")
	t.put("0.7·Fy·Sx", l.first, "N·m")
	t.put("rts", l.radius, "m")
	t.put("J·c/(Sx·h0)", l.torsion, "")
	t.put("Lp", l.lp, "m")
	t.put("Lr", l.lr, "m")
}

// weakFlangeStrength returns Mn (N·m) of an I section or channel about its weak axis, F6:
//
//	Mp = Fy·Zy ≤ 1.6·Fy·Sy (F6-1); noncompact flange (F6-2), λp = 0.38·√(E/Fy),
//	λr = 1.0·√(E/Fy) (table B4.1b case 13); slender flange 0.69·E·Sy/λ² (F6-3, F6-4)
//
// 0.69 from memory of the 2016 edition; 0.70 would meet (F6-2) at λr.
func weakFlangeStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("F6 (F6-1) to (F6-4)",
		"M ≤ Mn by φ or Ω; Mn = Fy·Zy ≤ 1.6·Fy·Sy to λp, Mp − (Mp − 0.7·Fy·Sy)·(λ − λp)/(λr − λp) to λr, 0.69·E·Sy/λ² beyond")
	lambda, root := flangeOf(s).lambda(), rootOf(m)
	compact, slenderFrom := 0.38*root, root
	t.sayClass("flange", lambda, compact, slenderFrom)
	top := min(m.Yield*s.Wplz, 1.6*m.Yield*s.Welz)
	switch {
	case lambda <= compact:
		return top
	case lambda <= slenderFrom:
		return top - (top-0.7*m.Yield*s.Welz)*(lambda-compact)/(slenderFrom-compact)
	}
	return 0.69 * m.E * s.Welz / (lambda * lambda)
}
