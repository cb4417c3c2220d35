package resistance

import (
	"math"

	"spanwright/structural/section"
)

// bucklesSideways tells whether a beam of the shape can buckle sideways and twist:
// closed tubes and solid rounds are too stiff in torsion, and have no weak axis or
// warp hardly at all.
func bucklesSideways(s *section.Section) bool {
	return s.Shape == section.ISection || s.Shape == section.Flat
}

// part is the plate of a section that comes nearest to its limit, or over it most.
type part struct {
	name  string
	ct    float64 // width over thickness
	limit float64 // of class 3
}

func (p part) ratio() float64 { return ratio(p.ct, p.limit) }

// localBuckling holds each plate in compression to the limit of class 3, EN
// 1993-1-1:2005 Table 5.2, so that elastic resistances are reached:
//
//	round tube d/t ≤ 90ε²; outstand flange c/tf ≤ 14ε; internal flange c/t ≤ 42ε
//	web c/t ≤ 42ε/(0.67 + 0.33ψ) for ψ > −1, 124ε in pure bending; ε = √(235 MPa/fy)
//
// ψ is the ratio of the stresses at the web's edges under the compression together
// with the greatest moment; tension is not counted in its favour. Solid rounds and
// flats have no plate in the sense of the table.
func (a allowable) localBuckling(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.Moment == 0 && d.Axial <= 0 {
		return use{}
	}
	epsilon := math.Sqrt(235e6 / m.Yield)
	var worst part
	switch s.Shape {
	case section.RoundTube:
		worst = part{"wall", s.H / s.Tw, 90 * epsilon * epsilon}
	case section.ISection:
		flange := part{"flange", (s.B - s.Tw - 2*s.R) / 2 / s.Tf, 14 * epsilon}
		worst = worse(flange, web(s, s.H-2*s.Tf-2*s.R, epsilon, d, t))
	case section.RectangularTube:
		flange := part{"flange", (s.B - 3*s.Tw) / s.Tw, 42 * epsilon}
		worst = worse(flange, web(s, s.H-3*s.Tw, epsilon, d, t))
	default:
		return use{}
	}
	t.put("fy", m.Yield, "Pa")
	t.put("ε", epsilon, "")
	u := against(worst.ct, worst.limit)
	switch {
	case t == nil: // the search: no text is put together
	case Passes(u.utilisation):
		t.say(worst.name)
	default:
		t.say(worst.name + " is over the limit of class 3 (class 4), which this basis does not cover")
	}
	return u
}

func worse(a, b part) part {
	if b.ratio() > a.ratio() {
		return b
	}
	return a
}

// web returns the web of depth c between its edges (m).
func web(s *section.Section, c, epsilon float64, d *Demand, t *trace) part {
	psi := edgeRatio(d.Axial/s.A, d.Moment*c/2/s.Iy)
	t.put("ψ", psi, "")
	limit := 124 * epsilon
	if psi > -1 {
		limit = 42 * epsilon / (0.67 + 0.33*psi)
	}
	return part{"web", c / s.Tw, limit}
}

// edgeRatio returns ψ, the stress at the less over that at the more compressed edge,
// from the axial stress (compression +) and the bending stress at the edges. Without
// compression it is −1, pure bending.
func edgeRatio(axial, bending float64) float64 {
	if axial <= 0 {
		return -1
	}
	return (axial - bending) / (axial + bending)
}
