package resistance

import (
	"math"

	"spanwright/structural/section"
)

// effectiveArea returns the area (m²) that resists compression alone: A, or Aeff of
// class 4, EN 1993-1-5:2006 4.3 and 4.4, of doubly symmetric shapes, whose centroid
// stays (eN = 0); the others are refused in class 4.
func (x *enCase) effectiveArea() float64 {
	s := x.s
	switch s.Shape {
	case section.ISection, section.RectangularTube, section.WeldedBox:
	default:
		return s.A
	}
	p := strong(s)
	lost := p.webs * (1 - x.internal(p.web/p.webT, 1)) * p.web * p.webT
	return s.A - lost - 2*x.lostFlange(&p)
}

// lostFlange returns the area (m²) of one flange that does not take part.
func (x *enCase) lostFlange(p *plates) float64 {
	rho := x.internal(p.flange/p.flangeT, 1)
	if p.outstand {
		rho = x.outstand(p.flange / p.flangeT)
	}
	return p.parts * (1 - rho) * p.flange * p.flangeT
}

// effectiveModulus returns the modulus (m³) that resists bending alone: Wel, or
// Weff of class 4. The flange's effective width comes first; the web's stress ratio
// is that of the section with it and the full web, EN 1993-1-5:2006 4.4 (3).
func (x *enCase) effectiveModulus(p *plates) float64 {
	flange := x.lostFlange(p)
	arm := p.face - p.flangeT/2
	shift := flange * arm / (x.s.A - flange)

	pressed := p.edge + shift
	psi := -(p.farEdge - shift) / pressed
	rho := x.internal(p.web/p.webT, psi)
	if flange == 0 && rho == 1 {
		return p.elastic
	}
	hole := (1 - rho) * pressed
	web := p.webs * hole * p.webT
	at := p.edge - 0.4*rho*pressed - hole/2 // table 4.1: be1 = 0.4·beff at the pressed edge

	area := x.s.A - flange - web
	shift = (flange*arm + web*at) / area
	inertia := p.inertia - flange*(arm*arm+p.flangeT*p.flangeT/12) - web*(at*at+hole*hole/12) - area*shift*shift
	return min(p.elastic, inertia/max(p.face+shift, p.far-shift))
}

// effectiveTips returns the modulus (m³) of an I section bent about z: Wel, or Weff
// where the outstands are of class 4. They count as uniformly pressed, which is on
// the safe side of their stress gradient.
func (x *enCase) effectiveTips() float64 {
	s := x.s
	c := strong(s).flange
	hole := (1 - x.outstand(c/s.Tf)) * c
	if hole == 0 {
		return s.Welz
	}
	lost, at := 2*hole*s.Tf, (s.B-hole)/2
	area := s.A - lost
	shift := lost * at / area
	inertia := s.Iz - lost*(at*at+hole*hole/12) - area*shift*shift
	return min(s.Welz, inertia/max(s.B/2-hole+shift, s.B/2-shift))
}

// internal returns ρ of an internal part of c/t with stress ratio ψ from −3 to 1,
// EN 1993-1-5:2006 4.4 (4.2) and table 4.1; 1 up to class 3.
func (x *enCase) internal(ct, psi float64) float64 {
	if ct <= webLimit(psi)*x.epsilon {
		return 1
	}
	lambda := ct / (28.4 * x.epsilon * math.Sqrt(buckle(psi)))
	if lambda <= 0.5+math.Sqrt(0.085-0.055*psi) {
		return 1
	}
	return min(1, (lambda-0.055*(3+psi))/(lambda*lambda))
}

// buckle returns kσ of an internal part, EN 1993-1-5:2006 table 4.1.
func buckle(psi float64) float64 {
	switch {
	case psi >= 0:
		return 8.2 / (1.05 + psi)
	case psi >= -1:
		return 7.81 - 6.29*psi + 9.78*psi*psi
	}
	return 5.98 * (1 - psi) * (1 - psi)
}

// outstand returns ρ of a uniformly pressed outstand, EN 1993-1-5:2006 4.4 (4.3) and
// table 4.2, kσ = 0.43; 1 up to class 3.
func (x *enCase) outstand(ct float64) float64 {
	if ct <= 14*x.epsilon {
		return 1
	}
	lambda := ct / (28.4 * x.epsilon * math.Sqrt(0.43))
	if lambda <= 0.748 {
		return 1
	}
	return min(1, (lambda-0.188)/(lambda*lambda))
}
