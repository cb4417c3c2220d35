package resistance

import (
	"math"

	"spanwright/structural/section"
)

// refused returns why the basis does not cover the case, or "".
func (x *enCase) refused() string {
	switch {
	case x.m.Yield > 460e6*(1+1e-9):
		return "yield strength over 460 MPa: EN 1993-1-1:2005 3.1 (2) and table 3.1 end at S460; EN 1993-1-12 would apply"
	case x.m.Ultimate < 1.1*x.m.Yield:
		return "fu/fy under 1.10: EN 1993-1-1:2005 3.2.2 (1) asks for more ductility"
	}
	pushed, bends := x.push > 0, x.d.Moment != 0 || x.d.MomentZ != 0
	if !pushed && !bends {
		return ""
	}
	return x.refusedShape(pushed, bends)
}

// refusedShape is refused for a section that is pressed, bent or both.
func (x *enCase) refusedShape(pushed, bends bool) string {
	s := x.s
	thinFlange, thinWeb := s.FlangeSlender > 14*x.epsilon, s.WebSlender > 42*x.epsilon
	switch s.Shape {
	case section.ISection, section.RectangularTube, section.WeldedBox, section.SolidRound, section.Flat:
		return ""
	case section.RoundTube:
		if s.H/s.Tw > 90*x.epsilon*x.epsilon {
			return "class 4 round tube, d/t over 90ε² by EN 1993-1-1:2005 table 5.2 sheet 3: the table sends it to EN 1993-1-6, which this basis does not hold"
		}
		return ""
	case section.Angle:
		switch {
		case bends:
			return "angles in bending: EN 1993-1-1:2005 6.2.5 and 6.3.2 about principal axes are not held by this basis"
		case s.H/s.Tw > 15*x.epsilon || (s.H+s.B)/2/s.Tw > 11.5*x.epsilon:
			return "class 4 angle in compression by EN 1993-1-1:2005 table 5.2 sheet 3: effective widths of unsymmetrical sections are not held by this basis"
		}
		return ""
	case section.ChordSet:
		return "chord sets in bending or compression: EN 1993-1-1:2005 6.4 needs the stiffness of the lacing, which is not stated"
	case section.Channel, section.Tee, section.UnequalI:
	default:
		return "the clauses of EN 1993-1-1:2005 that this basis holds are not written for this shape"
	}
	switch {
	case pushed && bends:
		return "compression with bending of a section of one axis of symmetry: EN 1993-1-1:2005 6.3.3 (1) holds for doubly symmetric sections only"
	case s.Shape == section.Tee && (thinFlange || s.WebSlender > 14*x.epsilon),
		s.Shape == section.Channel && (thinFlange || s.WebSlender > 124*x.epsilon),
		s.Shape == section.UnequalI && x.d.MomentZ != 0 && x.thinOutstand(),
		pushed && (x.thinOutstand() || s.Shape != section.Tee && thinWeb):
		return "class 4 plate in a section of one axis of symmetry, EN 1993-1-1:2005 table 5.2: the shift of its effective centroid is not held by this basis"
	}
	return ""
}

// thinOutstand tells whether a flange is of class 4 under uniform compression.
func (x *enCase) thinOutstand() bool {
	s := x.s
	return s.FlangeSlender > 14*x.epsilon || s.Shape == section.UnequalI && (s.LowerB-s.Tw)/2 > 14*x.epsilon*s.LowerTf
}

func (x *enCase) notCovered(t *trace) use {
	if x.refusal == "" {
		return use{}
	}
	t.put("fy", x.m.Yield, "Pa")
	t.put("fu", x.m.Ultimate, "Pa")
	t.put("ε", x.epsilon, "")
	t.put("c/t or d/t of the web or wall", x.s.WebSlender, "")
	t.put("c/t of the flange", x.s.FlangeSlender, "")
	t.say(x.refusal)
	return refuse()
}

// plates are the flat parts of a section as seen by one axis of bending, one face
// pressed.
type plates struct {
	flange   float64 // m, c of the part in uniform compression
	flangeT  float64 // m
	outstand bool    // outstands on the flange, else one internal part
	parts    float64 // outstands or internal parts of one flange
	web      float64 // m, c of one web
	webT     float64 // m
	webs     float64
	face     float64 // m, from the centroid to the pressed face
	far      float64 // m, to the other face
	edge     float64 // m, from the centroid to the pressed edge of the web
	farEdge  float64 // m, to its other edge
	inertia  float64 // m⁴
	elastic  float64 // m³, Wel
	plastic  float64 // m³, Wpl
}

// strong returns the plates for bending about y, upper face pressed, of I sections,
// channels, boxes and rectangular tubes. c of a tube is its side less three walls
// (EN 1993-1-1:2005 table 5.2 sheet 1), of what is welded the clear width, without
// the welds taken off.
func strong(s *section.Section) plates {
	half := s.H / 2
	p := plates{flangeT: s.Tf, webT: s.Tw, webs: 1, parts: 1, face: half, far: half, inertia: s.Iy, elastic: s.Wely, plastic: s.Wply}
	switch s.Shape {
	case section.ISection:
		p.flange, p.outstand, p.parts = (s.B-s.Tw-2*s.R)/2, true, 2
		p.web = s.H - 2*s.Tf - 2*s.R
	case section.Channel:
		p.flange, p.outstand = s.B-s.Tw-s.R, true
		p.web = s.H - 2*s.Tf - 2*s.R
	case section.UnequalI:
		p.flange, p.outstand, p.parts = (s.B-s.Tw)/2, true, 2
		p.web = s.H - s.Tf - s.LowerTf
		p.face, p.far = s.H-s.Zc, s.Zc
		p.edge, p.farEdge = p.face-s.Tf, p.far-s.LowerTf
		return p
	case section.WeldedBox:
		p.flange, p.web, p.webs = s.B-2*s.Tw, s.H-2*s.Tf, 2
	default:
		p.flange, p.web, p.webs = s.B-3*s.Tw, s.H-3*s.Tw, 2
	}
	p.edge, p.farEdge = p.web/2, p.web/2
	return p
}

// weak returns the plates of a rectangular tube or a box for bending about z.
func weak(s *section.Section) plates {
	half := s.B / 2
	p := plates{
		flange: s.H - 3*s.Tw, flangeT: s.Tw, web: s.B - 3*s.Tw, webT: s.Tw, webs: 2, parts: 1,
		face: half, far: half, inertia: s.Iz, elastic: s.Welz, plastic: s.Wplz,
	}
	if s.Shape == section.WeldedBox {
		p.flange, p.web, p.webT = s.H-2*s.Tf, s.B-2*s.Tw, s.Tf
	}
	p.edge, p.farEdge = p.web/2, p.web/2
	return p
}

// lower returns the plates of an I with unequal flanges, lower face pressed.
func lower(s *section.Section) plates {
	p := strong(s)
	p.flange, p.flangeT = (s.LowerB-s.Tw)/2, s.LowerTf
	p.face, p.far, p.edge, p.farEdge = p.far, p.face, p.farEdge, p.edge
	return p
}

// class returns the class of the plates in bending with compression.
//
// The web's stresses are those at which the section yields: plastic with α = (1 +
// N/(c·t·fy))/2, elastic with ψ = 2·N/(A·fy) − 1. Both depend on N alone. At an
// edge stress under yield (little bending, or bending about the other axis) the
// web's part of N stands in the resistance to N, which has Aeff.
func (x *enCase) class(p *plates) int {
	web := webClass(p.web/p.webT/x.epsilon,
		min(1, (1+x.push/(p.webs*p.web*p.webT*x.yield()))/2),
		min(1, 2*x.push/(x.s.A*x.yield())-1))
	ct := p.flange / p.flangeT / x.epsilon
	if p.outstand {
		return max(web, rank(ct, 9, 10, 14))
	}
	return max(web, rank(ct, 33, 38, 42))
}

// webClass returns the class of an internal part of c/t over ε, EN 1993-1-1:2005
// table 5.2 sheet 1, from the part α in compression at full plasticity and the
// ratio ψ of the edge stresses in the elastic state.
func webClass(ct, alpha, psi float64) int {
	first, second := 36/alpha, 41.5/alpha
	if alpha > 0.5 {
		first, second = 396/(13*alpha-1), 456/(13*alpha-1)
	}
	return rank(ct, first, second, webLimit(psi))
}

// webLimit is the limit of class 3 on c/(t·ε) of an internal part.
func webLimit(psi float64) float64 {
	if psi > -1 {
		return 42 / (0.67 + 0.33*psi)
	}
	return max(124, 62*(1-psi)*math.Sqrt(-psi))
}

// rank returns the first class whose limit holds; anything else, NaN too, is 4.
func rank(ct, first, second, third float64) int {
	switch {
	case ct <= first:
		return 1
	case ct <= second:
		return 2
	case ct <= third:
		return 3
	}
	return 4
}

// bentStrong returns the bending about y. Of an I with unequal flanges the worse face
// is pressed and no plastic modulus is used.
func (x *enCase) bentStrong() enBent {
	s := x.s
	switch s.Shape {
	case section.ISection, section.RectangularTube, section.WeldedBox, section.Channel:
		p := strong(s)
		return x.bentPlates(&p)
	case section.UnequalI:
		up, down := strong(s), lower(s)
		return enBent{max(3, x.class(&up), x.class(&down)), min(x.effectiveModulus(&up), x.effectiveModulus(&down))}
	}
	return x.plain(s.Wply, s.Wely)
}

// bentWeak returns the bending about z, elastic for shapes without symmetry about z
// or y.
func (x *enCase) bentWeak() enBent {
	s := x.s
	switch s.Shape {
	case section.ISection:
		if x.y.class <= 2 {
			return enBent{x.y.class, s.Wplz}
		}
		return enBent{x.y.class, x.effectiveTips()}
	case section.RectangularTube, section.WeldedBox:
		p := weak(s)
		return x.bentPlates(&p)
	}
	return x.plain(s.Wplz, s.Welz)
}

func (x *enCase) bentPlates(p *plates) enBent {
	class := x.class(p)
	if class <= 2 {
		return enBent{class, p.plastic}
	}
	return enBent{class, x.effectiveModulus(p)}
}

// plain is the bending by the round tube's class, plastic for solid rounds, elastic
// for what is left. A flat is none of the parts of table 5.2: its twisting under
// compression is checked as torsional and lateral-torsional buckling.
func (x *enCase) plain(plastic, elastic float64) enBent {
	switch x.s.Shape {
	case section.SolidRound:
		return enBent{1, plastic}
	case section.RoundTube:
		e2 := x.epsilon * x.epsilon
		if class := rank(x.s.H/x.s.Tw, 50*e2, 70*e2, 90*e2); class <= 2 {
			return enBent{class, plastic}
		}
	}
	return enBent{3, elastic}
}
