package resistance

import (
	"math"

	"spanwright/structural/section"
)

// shear holds the shear in the depth to chapter G.
func (a aisc) shear(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if s.Shape == section.ChordSet || uncovered(s, m, d) != "" {
		return use{}
	}
	return against(d.Shear, a.shearStrength(s, m, webOf(s), s.Avz, t))
}

// shearY holds the shear along the width to chapter G.
func (a aisc) shearY(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if d.ShearY == 0 || uncovered(s, m, d) != "" {
		return use{}
	}
	switch s.Shape {
	case section.ISection, section.UnequalI, section.Channel, section.Tee:
		return against(d.ShearY, a.available(flangeShear(s, m, t), general, t))
	case section.Angle:
		return against(d.ShearY, a.available(legShear(flangeOf(s), m, t), general, t))
	}
	return against(d.ShearY, a.shearStrength(s, m, sideOf(s), s.Avy, t))
}

// shearStrength returns the available strength (N) in shear; web is the plate that
// carries it, elastic the shear area (m²) of a bar.
func (a aisc) shearStrength(s *section.Section, m Material, web element, elastic float64, t *aiscTrace) float64 {
	t.steel(m)
	switch s.Shape {
	case section.ISection, section.UnequalI, section.Channel:
		return a.webShear(s, m, web, t)
	case section.Angle, section.Tee:
		return a.available(legShear(web, m, t), general, t)
	case section.RectangularTube, section.WeldedBox:
		t.cite("G4 (G4-1), G2.2, kv = 5", "V ≤ 0.6·Fy·2·h·t·Cv2 by φ or Ω")
		factor := cv2(web.lambda(), 5, m)
		t.put("h/t", web.lambda(), "")
		t.put("Cv2", factor, "")
		return a.available(0.6*m.Yield*2*web.width*web.thickness*factor, general, t)
	case section.RoundTube:
		return a.available(roundShear(s, m, t), general, t)
	}
	t.cite("G1; bars are not listed in chapter G, hence the elastic shear area", "V ≤ 0.6·Fy·Av by φ or Ω")
	t.put("Av", elastic, "m²")
	return a.available(0.6*m.Yield*elastic, general, t)
}

// webShear returns the available strength (N) of an unstiffened web, G2.1:
//
//	Vn = 0.6·Fy·Aw·Cv1 (G2-1), Aw = d·tw; Cv1 = 1 (G2-2), φ = 1.00, Ω = 1.50 for webs
//	of rolled I sections with h/tw ≤ 2.24·√(E/Fy); else kv = 5.34, Cv1 = 1 to
//	1.10·√(kv·E/Fy) (G2-3) and 1.10·√(kv·E/Fy)/(h/tw) beyond (G2-4)
func (a aisc) webShear(s *section.Section, m Material, web element, t *aiscTrace) float64 {
	t.cite("G2.1 (G2-1) to (G2-4)", "V ≤ 0.6·Fy·d·tw·Cv1 by φ or Ω")
	lambda, root := web.lambda(), rootOf(m)
	plastic := 0.6 * m.Yield * s.H * s.Tw
	t.put("h/tw", lambda, "")
	t.put("Aw", s.H*s.Tw, "m²")
	if s.Shape == section.ISection && !builtUp(s) && lambda <= 2.24*root {
		return a.available(plastic, rolledWeb, t)
	}
	factor := min(1, 1.10*math.Sqrt(5.34)*root/lambda)
	t.put("Cv1", factor, "")
	return a.available(plastic*factor, general, t)
}

// cv2 is the web shear buckling coefficient of G2.2 (G2-9) to (G2-11).
func cv2(lambda, kv float64, m Material) float64 {
	root := math.Sqrt(kv) * rootOf(m)
	switch {
	case lambda <= 1.10*root:
		return 1
	case lambda <= 1.37*root:
		return 1.10 * root / lambda
	}
	return 1.51 * root * root / (lambda * lambda)
}

// flangeShear returns Vn (N) of the flanges along the width, G6 (G6-1):
// 0.6·Fy·b·tf·Cv2 each, kv = 1.2.
func flangeShear(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("G6 (G6-1), G2.2, kv = 1.2", "V ≤ 0.6·Fy·b·tf·Cv2 of each flange by φ or Ω")
	t.steel(m)
	flange := flangeOf(s)
	factor := cv2(flange.lambda(), 1.2, m)
	t.put("b/t", flange.lambda(), "")
	t.put("Cv2", factor, "")
	area := s.B * s.Tf * factor
	switch s.Shape {
	case section.Tee:
	case section.UnequalI:
		area += s.LowerB * s.LowerTf * cv2(s.LowerB/2/s.LowerTf, 1.2, m)
	default:
		area *= 2
	}
	return 0.6 * m.Yield * area
}

// legShear returns Vn (N) of the leg of an angle or the stem of a tee, G3 (G3-1):
// 0.6·Fy·b·t·Cv2, kv = 1.2.
func legShear(leg element, m Material, t *aiscTrace) float64 {
	t.cite("G3 (G3-1), G2.2, kv = 1.2", "V ≤ 0.6·Fy·b·t·Cv2 by φ or Ω")
	factor := cv2(leg.lambda(), 1.2, m)
	t.put("b/t", leg.lambda(), "")
	t.put("Cv2", factor, "")
	return 0.6 * m.Yield * leg.width * leg.thickness * factor
}

// roundShear returns Vn (N) of a round tube, G5: Fcr·Ag/2 (G5-1) with
// Fcr = 0.78·E/(D/t)^1.5 (G5-2b) ≤ 0.6·Fy. The standard lets the greater of (G5-2a)
// and (G5-2b) hold; the first needs the length of the shear span and is left out, on
// the safe side.
func roundShear(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("G5 (G5-1), (G5-2b)", "V ≤ Fcr·Ag/2 by φ or Ω; Fcr = 0.78·E/(D/t)^1.5 ≤ 0.6·Fy")
	lambda := s.H / s.Tw
	critical := min(0.6*m.Yield, 0.78*m.E/(lambda*math.Sqrt(lambda)))
	t.put("D/t", lambda, "")
	t.put("Fcr", critical, "Pa")
	t.put("Ag", s.A, "m²")
	return critical * s.A / 2
}
