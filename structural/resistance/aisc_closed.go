package resistance

import (
	"math"

	"spanwright/structural/section"
)

// tubeBending is a rectangular tube or welded box bent about one axis.
type tubeBending struct {
	z, s, i     float64 // m³, m³, m⁴
	depth       float64 // m, in the plane of bending
	flange, web element
	shape       section.Shape
}

// limits returns λr of the flange, table B4.1b case 17 or 21, and the constant of
// be, (F7-4) or (F7-5): of tubes 1.40·√(E/Fy) and 0.38, of welded boxes 1.49 and 0.34.
func (b tubeBending) limits() (slenderFrom, constant float64) {
	if b.shape == section.WeldedBox {
		return 1.49, 0.34
	}
	return 1.40, 0.38
}

// tubeStrength returns Mn (N·m) of a rectangular tube by yielding and local buckling,
// F7.1 to F7.3; limits of table B4.1b cases 17, 19 and 21. Slender webs are refused by
// the local slenderness check.
func tubeStrength(b tubeBending, m Material, t *aiscTrace) float64 {
	t.cite("F7 (F7-1) to (F7-6)",
		"M ≤ Mn by φ or Ω; Mn = Fy·Z; noncompact flange Mp − (Mp − Fy·S)·(3.57·λ·√(Fy/E) − 4.0); slender flange Fy·Se; noncompact web Mp − (Mp − Fy·S)·(0.305·λ·√(Fy/E) − 0.738)")
	root := rootOf(m)
	plastic, yield := m.Yield*b.z, m.Yield*b.s
	flange, web := b.flange.lambda(), b.web.lambda()
	slenderFrom, constant := b.limits()
	t.sayClass("flange", flange, 1.12*root, slenderFrom*root)
	t.sayClass("web", web, 2.42*root, 5.70*root)
	top := plastic
	switch {
	case flange > slenderFrom*root:
		top = m.Yield * effectiveModulus(b, root, constant, t)
	case flange > 1.12*root:
		top = min(top, plastic-(plastic-yield)*(3.57*flange/root-4))
	}
	if web > 2.42*root {
		top = min(top, plastic-(plastic-yield)*(0.305*web/root-0.738))
	}
	return top
}

// effectiveModulus returns Se (m³) of F7.2(c): be = 1.92·t·√(E/Fy)·(1 − 0.38/λ·√(E/Fy))
// (F7-4), of boxes with 0.34 (F7-5). What the compression flange loses is taken from both flanges, on the safe
// side and as the design examples of the AISC do.
func effectiveModulus(b tubeBending, root, constant float64, t *aiscTrace) float64 {
	t0 := b.flange.thickness
	effective := min(b.flange.width, 1.92*t0*root*(1-constant/b.flange.lambda()*root))
	lost := (b.flange.width - effective) * t0
	arm := (b.depth - t0) / 2
	modulus := max(0, b.i-2*lost*(arm*arm+t0*t0/12)) / (b.depth / 2)
	t.put("be", effective, "m")
	t.put("Se", modulus, "m³")
	return modulus
}

// tubeLateral returns Mn (N·m) of a rectangular tube bent about its strong axis by
// lateral-torsional buckling, F7.4:
//
//	Lp = 0.13·E·ry·√(J·Ag)/Mp (F7-12); Lr = 2·E·ry·√(J·Ag)/(0.7·Fy·Sx) (F7-13)
//	to Lr Cb·(Mp − (Mp − 0.7·Fy·Sx)·(Lb − Lp)/(Lr − Lp)) ≤ Mp (F7-10);
//	beyond 2·E·Cb·√(J·Ag)/(Lb/ry) ≤ Mp (F7-11)
func tubeLateral(s *section.Section, m Material, length, cb float64, t *aiscTrace) float64 {
	t.cite("F7.4 (F7-10) to (F7-13)",
		"M ≤ Mn by φ or Ω; Mn = Mp to Lp, Cb·(Mp − (Mp − 0.7·Fy·Sx)·(Lb − Lp)/(Lr − Lp)) ≤ Mp to Lr, 2·E·Cb·√(J·Ag)/(Lb/ry) ≤ Mp beyond")
	plastic, first := m.Yield*s.Wply, 0.7*m.Yield*s.Wely
	elastic := 2 * m.E * s.Rz * math.Sqrt(s.J*s.A)
	lp, lr := 0.065*elastic/plastic, elastic/first
	t.put("Mp", plastic, "N·m")
	t.put("0.7·Fy·Sx", first, "N·m")
	t.put("Lp", lp, "m")
	t.put("Lr", lr, "m")
	switch {
	case length <= lp:
		return plastic
	case length <= lr:
		return min(plastic, cb*(plastic-(plastic-first)*(length-lp)/(lr-lp)))
	}
	return min(plastic, cb*elastic/length)
}

// roundTubeStrength returns Mn (N·m) of a round tube, F8, limits of table B4.1b case
// 20: Fy·Z (F8-1); noncompact (0.021·E/(D/t) + Fy)·S (F8-2); slender
// 0.33·E/(D/t)·S (F8-3, F8-4). The lesser holds.
func roundTubeStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("F8 (F8-1) to (F8-4)",
		"M ≤ Mn by φ or Ω; Mn = Fy·Z; noncompact wall ≤ (0.021·E/(D/t) + Fy)·S; slender wall 0.33·E·S/(D/t)")
	lambda, unit := s.H/s.Tw, m.E/m.Yield
	t.sayClass("wall", lambda, 0.07*unit, 0.31*unit)
	plastic := m.Yield * s.Wply
	switch {
	case lambda <= 0.07*unit:
		return plastic
	case lambda <= 0.31*unit:
		return min(plastic, (0.021*m.E/lambda+m.Yield)*s.Wely)
	}
	return min(plastic, 0.33*m.E/lambda*s.Wely)
}

// barStrength returns Mn (N·m) of a flat or solid round by yielding, F11.1:
// Fy·Z ≤ 1.6·Fy·S (F11-1).
func barStrength(z, s float64, m Material, t *aiscTrace) float64 {
	t.cite("F11.1 (F11-1)", "M ≤ Mn by φ or Ω; Mn = Fy·Z ≤ 1.6·Fy·S")
	return m.Yield * min(z, 1.6*s)
}

// barLateral returns Mn (N·m) of a flat bent on edge by lateral-torsional buckling,
// F11.2: with λ = Lb·d/t² Mp to 0.08·E/Fy;
// Cb·(1.52 − 0.274·λ·Fy/E)·My ≤ Mp to 1.9·E/Fy (F11-2); 1.9·E·Cb·Sx/λ ≤ Mp beyond
// (F11-3, F11-4).
func barLateral(s *section.Section, m Material, length, cb float64, t *aiscTrace) float64 {
	t.cite("F11.2 (F11-2) to (F11-4)",
		"M ≤ Mn by φ or Ω; λ = Lb·d/t²; Mn = Mp for λ ≤ 0.08·E/Fy, Cb·(1.52 − 0.274·λ·Fy/E)·My ≤ Mp for λ ≤ 1.9·E/Fy, 1.9·E·Cb·Sx/λ ≤ Mp beyond")
	plastic, yield := barStrength(s.Wply, s.Wely, m, nil), m.Yield*s.Wely
	lambda := length * s.H / (s.B * s.B) * m.Yield / m.E
	t.put("Mp", plastic, "N·m")
	t.put("Lb·d·Fy/(t²·E)", lambda, "")
	switch {
	case lambda <= 0.08:
		return plastic
	case lambda <= 1.9:
		return min(plastic, cb*(1.52-0.274*lambda)*yield)
	}
	return min(plastic, 1.9*cb*yield/lambda)
}
