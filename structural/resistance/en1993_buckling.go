package resistance

import (
	"math"

	"spanwright/structural/section"
)

// curve is a buckling curve by its imperfection factor α, EN 1993-1-1:2005 tables
// 6.1 and 6.3.
type curve float64

const (
	curveA0 curve = 0.13
	curveA  curve = 0.21
	curveB  curve = 0.34
	curveC  curve = 0.49
	curveD  curve = 0.76
)

// chi returns the reduction factor at a slenderness, 6.3.1.2 (6.49) and 6.3.2.2
// (6.56): 1 up to 0.2; 0 where the slenderness is not a number.
func (c curve) chi(lambda float64) float64 {
	phi := (1 + float64(c)*(lambda-0.2) + lambda*lambda) / 2
	return reduce(lambda, 0.2, phi, 1)
}

// reduce returns 1/(Φ + √(Φ² − β·λ²)), at most 1, and 1 up to a plateau.
func reduce(lambda, plateau, phi, beta float64) float64 {
	switch {
	case lambda <= plateau:
		return 1
	case lambda <= math.MaxFloat64:
		return min(1, 1/(phi+math.Sqrt(max(0, phi*phi-beta*lambda*lambda))))
	}
	return 0
}

// fine tells whether the column "S460" of table 6.2 holds. Thicker S460 yields at
// less than 460 MPa and so stays on the lower curves, on the safe side.
func (x *enCase) fine() bool { return x.m.Yield >= 460e6*(1-1e-9) }

// columnCurves returns the curves for buckling about y and z, EN 1993-1-1:2005 table
// 6.2. Flanges over 100 mm get curve d at any depth. A round tube welded from plate
// is not in the table and is taken as cold formed; of a welded box with thick plates
// the welds are taken as thick too.
func (x *enCase) columnCurves() (curve, curve) {
	s := x.s
	switch s.Shape {
	case section.ISection, section.UnequalI:
		switch {
		case s.Making != section.Welded:
			return x.rolledCurves()
		case max(s.Tf, s.LowerTf) <= 0.040:
			return curveB, curveC
		}
		return curveC, curveD
	case section.RoundTube, section.RectangularTube:
		switch {
		case s.Making != section.HotRolled:
			return curveC, curveC
		case x.fine():
			return curveA0, curveA0
		}
		return curveA, curveA
	case section.WeldedBox:
		if s.B < 30*s.Tf && s.H < 30*s.Tw {
			return curveC, curveC
		}
		return curveB, curveB
	case section.Angle:
		return curveB, curveB
	}
	return curveC, curveC
}

func (x *enCase) rolledCurves() (curve, curve) {
	s, fine := x.s, x.fine()
	slim := s.H/s.B > 1.2
	switch {
	case s.Tf > 0.100 && fine:
		return curveC, curveC
	case s.Tf > 0.100:
		return curveD, curveD
	case slim && s.Tf <= 0.040 && fine:
		return curveA0, curveA0
	case slim && s.Tf <= 0.040:
		return curveA, curveB
	case fine:
		return curveA, curveA
	}
	return curveB, curveC
}

// buckled is a section in compression: slenderness and χ about both axes, of angles
// about u and v. χ of z takes in torsional and flexural-torsional buckling.
type buckled struct {
	lambdaY, lambdaZ float64
	twisting         float64 // λT of 6.3.1.4; 0 for shapes that do not twist
	chiY, chiZ       float64
}

// squash returns A·fy (N), the characteristic resistance without buckling.
func (x *enCase) squash() float64 { return x.area * x.m.Yield }

// slenderness returns λ at a critical force (N).
func (x *enCase) slenderness(critical float64) float64 { return math.Sqrt(x.squash() / critical) }

// euler returns the critical force (N) of a second moment (m⁴) over a length (m).
func (x *enCase) euler(inertia, length float64) float64 {
	return math.Pi * math.Pi * x.m.E * inertia / (length * length)
}

// column finds how the section buckles in compression; both χ are 0 where a buckling
// length is missing. Restraints hold against twist too, at the wider of both
// spacings; twisting takes the curve of z (6.3.1.4 (3)). Of a flat it is its
// buckling as a plate.
func (x *enCase) column() buckled {
	var b buckled
	s, d := x.s, x.d
	if !(d.LengthY > 0 && d.LengthZ > 0) {
		return b
	}
	iy, iz, lengthY, lengthZ := s.Iy, s.Iz, d.LengthY, d.LengthZ
	if s.Shape == section.Angle {
		iy, iz, lengthY, lengthZ = s.Iu, s.Iv, max(lengthY, lengthZ), max(lengthY, lengthZ)
	}
	y, z := x.columnCurves()
	b.lambdaY, b.lambdaZ = x.slenderness(x.euler(iy, lengthY)), x.slenderness(x.euler(iz, lengthZ))
	b.chiY, b.chiZ = y.chi(b.lambdaY), z.chi(b.lambdaZ)
	if critical := criticalTwist(s, x.m, lengthY, lengthZ, max(lengthZ, d.LateralSpacing)); critical != 0 {
		b.twisting = x.slenderness(critical)
		b.chiZ = min(b.chiZ, z.chi(b.twisting))
	}
	return b
}

func (x *enCase) axial(t *trace) use {
	switch {
	case x.d.Axial == 0:
		return use{}
	case x.d.Axial < 0:
		return against(-x.d.Axial, x.tension(t))
	}
	b := x.column()
	x.steel(t)
	t.put("γM1", x.p.M1, "")
	t.put("A", x.area, "m²")
	if x.area < x.s.A {
		t.say("class 4: effective area")
	}
	b.note(t)
	t.put("λT", b.twisting, "")
	most := min(x.area*x.yield(), min(b.chiY, b.chiZ)*x.squash()/x.p.M1)
	if !(most > 0) {
		t.say("a buckling length is not stated, so the resistance is taken as zero")
	}
	return against(x.d.Axial, most)
}

func (b *buckled) note(t *trace) {
	t.put("λy", b.lambdaY, "")
	t.put("λz", b.lambdaZ, "")
	t.put("χy", b.chiY, "")
	t.put("χz", b.chiZ, "")
}

// tension returns Nt,Rd (N), 6.2.3. The net section is asked only where there are
// holes, that is a net area factor under 1.
func (x *enCase) tension(t *trace) float64 {
	x.steel(t)
	t.put("A", x.s.A, "m²")
	most := x.s.A * x.yield()
	net, ok := netFactor(x.d, t)
	switch {
	case !ok:
		return unstated
	case net < 1:
		t.put("Anet/A", net, "")
		t.put("fu", x.m.Ultimate, "Pa")
		t.put("γM2", x.p.M2, "")
		most = min(most, 0.9*net*x.s.A*x.m.Ultimate/x.p.M2)
	}
	return most
}

// susceptible tells whether bending about y can end in lateral-torsional buckling:
// open sections and flats, and tubes and boxes deeper than wide, which 6.3.2.1 (2)
// does not leave out.
func (x *enCase) susceptible() bool { return bucklesSideways(x.s) || x.deep() }

func (x *enCase) deep() bool {
	return (x.s.Shape == section.RectangularTube || x.s.Shape == section.WeldedBox) && x.s.H > x.s.B
}

// lateral returns χLT: 1 for shapes that cannot buckle sideways, 0 where the spacing
// of restraints or the moment factor is not to be used.
func (x *enCase) lateral(t *trace) float64 {
	if !x.susceptible() {
		return 1
	}
	c1, length := x.d.MomentFactor, x.d.LateralSpacing
	if c1 == 0 || c1 > 1 && x.s.Wagner != 0 {
		c1 = 1 // C3, which goes with C1, is not stated
	}
	t.put("L", length, "m")
	t.put("C1", c1, "")
	switch {
	case !(length > 0):
		t.say("the spacing of lateral restraints is not stated, so the resistance is taken as zero")
		return unstated
	case !(c1 > 0 && c1 <= 5):
		t.say("the moment factor C1 is not from above 0 to 5, so the resistance is taken as zero")
		return unstated
	}
	critical := c1 * criticalMoment(x.s, x.m, length)
	lambda := math.Sqrt(x.y.w * x.m.Yield / critical)
	chi := x.lateralChi(lambda, c1)
	t.put("Mcr", critical, "N·m")
	t.put("λLT", lambda, "")
	t.put("χLT", chi, "")
	return chi
}

// lateralChi returns χLT at a slenderness, by the general or the rolled case.
func (x *enCase) lateralChi(lambda, c1 float64) float64 {
	s := x.s
	slim := s.H/s.B > 2
	welded := s.Making == section.Welded
	switch {
	case x.deep() && lambda <= 0.4:
		return 1 // 6.3.2.2 (4) with λLT,0 = 0.4
	case s.Shape == section.UnequalI:
		slim = s.H/min(s.B, s.LowerB) > 2
	case s.Shape != section.ISection:
		return curveD.chi(lambda) // table 6.4, other cross-sections
	case x.p.RolledCase:
		return rolledChi(lambda, c1, slim, welded)
	}
	switch {
	case welded && slim:
		return curveD.chi(lambda)
	case welded:
		return curveC.chi(lambda)
	case slim:
		return curveB.chi(lambda)
	}
	return curveA.chi(lambda)
}

// rolledChi returns χLT,mod, 6.3.2.3 (6.57), (6.58) with table 6.5, λLT,0 = 0.4, β =
// 0.75 and kc = 1/√C1, which stands in for table 6.6 (United Kingdom national annex
// NA.2.18; EN 1993-1-1:2022 8.3.2.3).
func rolledChi(lambda, c1 float64, slim, welded bool) float64 {
	c := curveB
	switch {
	case slim && welded:
		c = curveD
	case slim || welded:
		c = curveC
	}
	phi := (1 + float64(c)*(lambda-0.4) + 0.75*lambda*lambda) / 2
	chi := min(reduce(lambda, 0.4, phi, 0.75), 1/(lambda*lambda))
	kc := min(1, 1/math.Sqrt(c1))
	f := min(1, 1-0.5*(1-kc)*(1-2*(lambda-0.8)*(lambda-0.8)))
	return min(1, chi/f, 1/(lambda*lambda))
}

func (x *enCase) lateralBuckling(t *trace) use {
	if x.d.Moment == 0 || !x.susceptible() {
		return use{}
	}
	t.put("Wy", x.y.w, "m³")
	t.put("fy", x.m.Yield, "Pa")
	t.put("γM1", x.p.M1, "")
	if x.p.RolledCase && x.s.Shape == section.ISection {
		t.say("6.3.2.3 with f and kc = 1/√C1")
	} else {
		t.say("6.3.2.2")
	}
	return against(x.d.Moment, x.lateral(t)*x.y.w*x.m.Yield/x.p.M1)
}
