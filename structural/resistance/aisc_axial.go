package resistance

import (
	"math"

	"spanwright/structural/section"
)

// axial holds compression to chapter E and tension to chapter D.
func (a aisc) axial(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	if d.Axial == 0 || uncovered(s, m, d) != "" {
		return use{}
	}
	if d.Axial < 0 {
		return against(-d.Axial, a.tension(s, m, d, t))
	}
	return against(d.Axial, a.available(compressionStrength(s, m, d, t), general, t))
}

// tension returns the available strength (N) in tension, the lesser of
//
//	yielding in the gross section Pn = Fy·Ag (D2-1) and
//	rupture in the net section Pn = Fu·Ae (D2-2), Ae = U·An,
//
// where NetAreaFactor is U·An/Ag.
func (a aisc) tension(s *section.Section, m Material, d *Demand, t *aiscTrace) float64 {
	t.cite("D2 (D2-1), (D2-2)", "N ≤ Fy·Ag and N ≤ Fu·Ae, each by its own φ or Ω; Ae = U·An")
	net, usable := netFactor(d, t.plain())
	if !usable {
		return unstated
	}
	t.put("Ag", s.A, "m²")
	t.put("Ae/Ag", net, "")
	t.put("Fy", m.Yield, "Pa")
	t.put("Fu", m.Ultimate, "Pa")
	if d.NetAreaFactor == 0 {
		t.say("net area and shear lag are not stated: Ae = Ag")
	}
	// Ratios over 300 are advice in D1, hence a remark only.
	if worst := max(d.LengthY/s.Ry, d.LengthZ/s.Rz); worst > 300 {
		t.say("slenderness over 300 in tension (D1, advice)")
	}
	yield := a.available(m.Yield*s.A, general, t)
	return min(yield, a.available(m.Ultimate*net*s.A, rupture, t))
}

// columnStress returns the critical stress Fn (Pa) for a yield and an elastic
// buckling stress (Pa), AISC 360-22 E3:
//
//	Fn = 0.658^(Fy/Fe)·Fy for Fy/Fe ≤ 2.25 (E3-2), else 0.877·Fe (E3-3)
func columnStress(yield, elastic float64) float64 {
	if yield/elastic <= 2.25 {
		return math.Pow(0.658, yield/elastic) * yield
	}
	return 0.877 * elastic
}

// compressionStrength returns the nominal strength Pn = Fn·Ae (N) of E3, E4 and E7.
// Torsional buckling is taken over LengthZ: restraints of the weak axis hold the twist
// too. A rolled I section then buckles in flexure, by the scope of E4.
func compressionStrength(s *section.Section, m Material, d *Demand, t *aiscTrace) float64 {
	t.cite("E3 (E3-1) to (E3-4), E4 (E4-2), (E4-3), E7", "N ≤ Fn·Ae by φ or Ω; Fn = 0.658^(Fy/Fe)·Fy for Fy/Fe ≤ 2.25, else 0.877·Fe")
	y, z := slendernessOf(s, d)
	t.put("Lcy/ry", y, "")
	t.put("Lcz/rz", z, "")
	if !(y > 0 && z > 0) {
		t.say("a buckling length is not stated, so the resistance is taken as zero")
		return unstated
	}
	if max(y, z) > slender {
		t.say("slenderness over 200 in compression (E2, advice)")
	}
	elastic := elasticStress(s, m, y, z, d.LengthZ, t)
	critical := columnStress(m.Yield, elastic)
	t.steel(m)
	t.put("Fe", elastic, "Pa")
	t.put("Fn", critical, "Pa")
	t.sayStrut(s, d)
	t.sayWall(s)
	return critical * effectiveArea(s, m, critical, t)
}

// slendernessOf returns Lc/r about both axes; of single angles the longer length over
// the least radius, twice.
func slendernessOf(s *section.Section, d *Demand) (y, z float64) {
	y, z = d.LengthY/s.Ry, d.LengthZ/s.Rz
	if s.Shape == section.Angle && y > 0 && z > 0 {
		y = max(d.LengthY, d.LengthZ) / s.Rv
		z = y
	}
	return y, z
}

// sayStrut names what the strength of a strut takes for granted.
func (t *aiscTrace) sayStrut(s *section.Section, d *Demand) {
	switch s.Shape {
	case section.Angle:
		t.say("the angle is loaded through its centroid; E5 is not used")
	case section.ISection, section.UnequalI, section.Channel, section.Tee:
		if d.LengthZ < d.LengthY {
			t.say("the restraints of the weak axis are taken to hold the twist too")
		}
	}
}

// elasticStress returns Fe (Pa): flexural about the weaker axis (E3-4), torsional for
// built-up I sections and flats (table B4.1a limits no flat), flexural-torsional for
// channels, tees and unequal flanges.
func elasticStress(s *section.Section, m Material, y, z, length float64, t *aiscTrace) float64 {
	euler := func(slenderness float64) float64 { return math.Pi * math.Pi * m.E / (slenderness * slenderness) }
	elastic := euler(max(y, z))
	var twist float64
	switch s.Shape {
	case section.Flat:
		twist = torsionalStress(s, m, length)
	case section.ISection:
		if !builtUp(s) {
			return elastic
		}
		twist = torsionalStress(s, m, length)
	case section.Channel:
		twist = coupledStress(s, euler(y), torsionalStress(s, m, length))
	case section.Tee, section.UnequalI:
		twist = coupledStress(s, euler(z), torsionalStress(s, m, length))
	default:
		return elastic
	}
	t.put("Fe with twist", twist, "Pa")
	return min(elastic, twist)
}

// polarSquare returns r0² (m²) about the shear centre, (E4-9).
func polarSquare(s *section.Section) float64 {
	return (s.Iy+s.Iz)/s.A + s.Y0*s.Y0 + s.Z0*s.Z0
}

// torsionalStress returns Fez (Pa) over a length (m), (E4-7); of a doubly symmetric
// member it is Fe, (E4-2).
func torsionalStress(s *section.Section, m Material, length float64) float64 {
	return (math.Pi*math.Pi*m.E*s.Iw/(length*length) + m.G*s.J) / (s.A * polarSquare(s))
}

// coupledStress returns Fe (Pa) of a singly symmetric member, (E4-3), from the
// flexural stress about the axis of symmetry and the torsional stress:
//
//	Fe = (Fe1 + Fez)/(2·H)·(1 − √(1 − 4·Fe1·Fez·H/(Fe1 + Fez)²)), H = 1 − (y0² + z0²)/r0²
func coupledStress(s *section.Section, flexural, torsional float64) float64 {
	h := 1 - (s.Y0*s.Y0+s.Z0*s.Z0)/polarSquare(s)
	sum := flexural + torsional
	root := math.Sqrt(max(0, 1-4*flexural*torsional*h/(sum*sum)))
	// The form 2ab/(1 + √…) keeps the digits that 1 − √… would lose.
	return 2 * flexural * torsional / (sum * (1 + root))
}

// imperfection is the pair c1, c2 of table E7.1.
type imperfection struct{ c1, c2 float64 }

var (
	stiffened = imperfection{0.18, 1.31} // case (a)
	tubeWall  = imperfection{0.20, 1.38} // case (b)
	outstand  = imperfection{0.22, 1.49} // case (c)
)

// lost returns by how much (m) an element is wider than its effective width, E7.1:
// b for λ ≤ λr·√(Fy/Fn) (E7-2), else b·(1 − c1·√(Fel/Fn))·√(Fel/Fn) (E7-3) with
// Fel = (c2·λr/λ)²·Fy (E7-5).
func (e element) lost(slender, yield, critical float64, c imperfection) float64 {
	lambda := e.lambda()
	if lambda <= slender*math.Sqrt(yield/critical) {
		return 0
	}
	root := c.c2 * slender / lambda * math.Sqrt(yield/critical)
	return e.width * (1 - min(1, max(0, (1-c.c1*root)*root)))
}

// effectiveArea returns Ae (m²) of E7 at the critical stress. Rounds and flats have no
// slender element. Limits are those of table B4.1a.
func effectiveArea(s *section.Section, m Material, critical float64, t *aiscTrace) float64 {
	area, root := s.A, rootOf(m)
	switch s.Shape {
	case section.RoundTube:
		// E7.2 (E7-6), (E7-7); over 0.45·E/Fy local slenderness refuses.
		area *= min(1, 0.038*m.E/(m.Yield*(s.H/s.Tw))+2.0/3)
	case section.RectangularTube:
		for _, e := range [2]element{webOf(s), sideOf(s)} {
			area -= 2 * e.thickness * e.lost(1.40*root, m.Yield, critical, tubeWall)
		}
	case section.WeldedBox:
		for _, e := range [2]element{webOf(s), sideOf(s)} {
			area -= 2 * e.thickness * e.lost(1.49*root, m.Yield, critical, stiffened)
		}
	case section.Angle:
		for _, e := range [2]element{webOf(s), flangeOf(s)} {
			area -= e.thickness * e.lost(0.45*root, m.Yield, critical, outstand)
		}
	case section.ISection, section.UnequalI, section.Channel, section.Tee:
		area -= lostOfOpen(s, m, critical)
	}
	t.put("Ae", area, "m²")
	if area < s.A {
		t.say("slender elements: Ae is less than A (E7)")
	}
	return area
}

// lostOfOpen returns the ineffective area (m²) of flanges, web or stem.
func lostOfOpen(s *section.Section, m Material, critical float64) float64 {
	root, flange, web := rootOf(m), flangeOf(s), webOf(s)
	edge := 0.56 * root
	if builtUp(s) && s.Shape != section.Tee {
		edge = 0.64 * root * math.Sqrt(kc(web.lambda()))
	}
	half := flange.thickness * flange.lost(edge, m.Yield, critical, outstand)
	if s.Shape == section.Tee {
		return 2*half + web.thickness*web.lost(0.75*root, m.Yield, critical, outstand)
	}
	middle := web.thickness * web.lost(1.49*root, m.Yield, critical, stiffened)
	switch s.Shape {
	case section.Channel:
		return 2*half + middle
	case section.UnequalI:
		lower := element{s.LowerB / 2, s.LowerTf}
		return 2*half + 2*lower.thickness*lower.lost(edge, m.Yield, critical, outstand) + middle
	}
	return 4*half + middle
}
