package resistance

import (
	"math"

	"spanwright/structural/section"
)

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
//	round tube d/t ≤ 90ε²; outstand flange or stem c/t ≤ 14ε; internal flange c/t ≤ 42ε
//	web c/t ≤ 42ε/(0.67 + 0.33ψ) for ψ > −1, 124ε in pure bending; ε = √(235 MPa/fy)
//	angle h/t ≤ 15ε and (b + h)/2t ≤ 11.5ε
//
// ψ is the ratio of the stresses at the web's edges under the compression together
// with the greatest moment about y, the larger part of the web pressed; tension is
// not counted in its favour. Bending about z presses the whole side of a tube. Stems
// count as pressed all over. Solid rounds and flats have no plate in the sense of the
// table.
func (a allowable) localBuckling(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.Moment == 0 && d.MomentZ == 0 && d.Axial <= 0 {
		return use{}
	}
	epsilon := math.Sqrt(235e6 / m.Yield)
	worst, ok := worstPart(s, epsilon, d, t)
	if !ok {
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

// worstPart returns the plate nearest to its limit, and whether there is any.
func worstPart(s *section.Section, epsilon float64, d *Demand, t *trace) (part, bool) {
	switch s.Shape {
	case section.RoundTube:
		return part{"wall", s.H / s.Tw, 90 * epsilon * epsilon}, true
	case section.Angle:
		return worse(part{"longer leg", s.H / s.Tw, 15 * epsilon}, part{"legs together", (s.H + s.B) / 2 / s.Tw, 11.5 * epsilon}), true
	case section.Tee:
		return worse(part{"flange", s.FlangeSlender, 14 * epsilon}, part{"stem", s.WebSlender, 14 * epsilon}), true
	case section.ISection, section.RectangularTube, section.WeldedBox, section.Channel, section.UnequalI:
	default:
		return part{}, false
	}
	p := strong(s)
	limit := 42 * epsilon
	if p.outstand {
		limit = 14 * epsilon
	}
	worst := worse(part{"flange", p.flange / p.flangeT, limit}, web(s, &p, epsilon, d, t))
	if s.Shape == section.UnequalI {
		lower := (s.LowerB - s.Tw) / 2 / s.LowerTf
		worst = worse(worst, part{"lower flange", lower, limit})
	}
	if d.MomentZ != 0 && !p.outstand {
		side := weak(s)
		worst = worse(worst, part{"side", side.flange / side.flangeT, limit})
	}
	return worst, true
}

func worse(a, b part) part {
	if b.ratio() > a.ratio() {
		return b
	}
	return a
}

// web returns the web with the larger part of it pressed.
func web(s *section.Section, p *plates, epsilon float64, d *Demand, t *trace) part {
	far, near := max(p.edge, p.farEdge), min(p.edge, p.farEdge)
	psi := edgeRatio(d.Axial/s.A, d.Moment*far/s.Iy, near/far)
	t.put("ψ", psi, "")
	limit := 124 * epsilon
	if psi > -1 {
		limit = 42 * epsilon / (0.67 + 0.33*psi)
	}
	return part{"web", p.web / p.webT, limit}
}

// edgeRatio returns ψ, the stress at the less over that at the more compressed edge,
// from the axial stress (compression +), the bending stress at the more compressed
// edge and its share at the other. Without compression it is that of pure bending.
func edgeRatio(axial, bending, share float64) float64 {
	if axial <= 0 {
		return -share
	}
	return (axial - share*bending) / (axial + bending)
}
