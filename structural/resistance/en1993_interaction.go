package resistance

import (
	"math"

	"spanwright/structural/section"
)

// interaction reports the condition of 6.2.9 and 6.3.3 that uses most, where two of
// axial force and both moments act.
func (x *enCase) interaction(t *trace) use {
	acting := 0
	for _, v := range [...]float64{x.d.Axial, x.d.Moment, x.d.MomentZ} {
		if v != 0 {
			acting++
		}
	}
	if acting < 2 {
		return use{}
	}
	across := x.sectionSum(t)
	var y, z float64
	if x.push > 0 || x.d.Moment != 0 && x.d.MomentZ != 0 {
		y, z = x.memberSums(t)
	}
	worst := max(across, y, z) // NaN stays NaN and fails
	switch worst {
	case across:
		t.say("6.2.9, section, governs")
	case y:
		t.say("6.3.3 (6.61), member, governs")
	case z:
		t.say("6.3.3 (6.62), member, governs")
	}
	return against(worst, 1)
}

// sectionSum returns the utilisation of the section, 6.2.9: plastic where the classes
// allow, else the sum of shares.
func (x *enCase) sectionSum(t *trace) float64 {
	most := x.area * x.yield()
	if x.d.Axial < 0 {
		most = x.tension(nil)
	} else {
		most -= x.shearTaken() * x.yield()
	}
	n := ratio(math.Abs(x.d.Axial), most)
	y := ratio(x.d.Moment, x.sectionModulus(nil)*x.yield())
	var z float64
	if x.d.MomentZ != 0 {
		z = ratio(x.d.MomentZ, x.sectionModulusZ(nil)*x.yield())
	}
	t.put("N/NRd", n, "")
	t.put("My/MyRd", y, "")
	t.put("Mz/MzRd", z, "")
	if x.y.class > 2 || x.z.class > 2 || !symmetric(x.s) {
		return n + y + z
	}
	return x.plasticSum(n, y, z)
}

// shearTaken is the area (m²) that shear takes from what resists compression, 6.2.10.
func (x *enCase) shearTaken() float64 {
	taken := x.shearLoss() * x.s.Avz
	if x.d.MomentZ != 0 {
		taken = max(taken, x.shearLossY()*x.s.Avy)
	}
	return min(taken, x.area)
}

// plasticSum returns the utilisation of a class 1 or 2 section under the shares n, y
// and z of its resistances, 6.2.9.1. M ≤ MN is written as a share of the force, which
// is the same condition and stays finite where N alone is too much:
//
//	I about y, tubes: M ≤ Mpl·(1 − n)/(1 − a/2)                as  n + (1 − a/2)·m ≤ 1, m ≤ 1
//	I about z:        M ≤ Mpl·(1 − ((n − a)/(1 − a))²), n > a  as  n + (1 − a)·(1 − √(1 − m)) ≤ 1, m ≤ 1
//	round:            M ≤ Mpl·cos(π·n/2), the plastic state of a thin tube, which a
//	                  thicker one exceeds; the edition has no formula of its own
//
// Both axes: m is the factor by which y and z together reach (y/m)^α + (z/m)^β = 1,
// with α = 2 and β = 1 (I), 2 and 2 (round), 1.66 and 1.66 (tubes): the values of
// 6.2.9.1 (6) where n is small, which grow with n. MN is that of the axis that loses
// more. Both are on the safe side.
func (x *enCase) plasticSum(n, y, z float64) float64 {
	s := x.s
	switch s.Shape {
	case section.ISection:
		a := min(0.5, (s.A-2*s.B*s.Tf)/s.A)
		if y == 0 {
			return max(z, n+(1-a)*(1-math.Sqrt(max(0, 1-z))+max(0, z-1)))
		}
		m := z/2 + math.Sqrt(z*z/4+y*y)
		return max(m, n+(1-a/2)*m)
	case section.RectangularTube, section.WeldedBox:
		aw, af := min(0.5, (s.A-2*s.B*s.Tf)/s.A), min(0.5, (s.A-2*s.H*s.Tw)/s.A)
		if y == 0 {
			return max(z, n+(1-af/2)*z)
		}
		if z == 0 {
			return max(y, n+(1-aw/2)*y)
		}
		const alpha = 1.66
		m := max(y, z)
		m *= math.Pow(math.Pow(y/m, alpha)+math.Pow(z/m, alpha), 1/alpha)
		return max(m, n+(1-min(aw, af)/2)*m)
	}
	m := math.Hypot(y, z)
	return n + 2/math.Pi*math.Asin(min(m, 1)) + max(0, m-1)
}

// memberSums returns (6.61) and (6.62) of 6.3.3 with annex B and every Cm = 1: what
// any shape of moment diagram asks for. Of the relief of My by kzy no more is taken
// than My = Mb would bring, so that more demand never lowers the sum.
func (x *enCase) memberSums(t *trace) (float64, float64) {
	var b buckled
	var ny, nz, my, mz float64
	if x.push > 0 {
		b = x.column()
		ny = ratio(x.push, b.chiY*x.squash()/x.p.M1)
		nz = ratio(x.push, b.chiZ*x.squash()/x.p.M1)
		b.note(t)
	}
	if x.d.Moment != 0 {
		my = ratio(x.d.Moment, x.lateral(nil)*x.y.w*x.m.Yield/x.p.M1)
	}
	if x.d.MomentZ != 0 {
		mz = ratio(x.d.MomentZ, x.z.w*x.m.Yield/x.p.M1)
	}
	k := x.factors(&b, ny, nz)
	t.put("My/Mb", my, "")
	t.put("kyy", k.yy, "")
	t.put("kyz", k.yz, "")
	t.put("kzy", k.zy, "")
	t.put("kzz", k.zz, "")
	return ny + k.yy*my + k.yz*mz, nz + max(k.zy*my, my-(1-k.zy)) + k.zz*mz
}

// pairing holds the interaction factors of 6.3.3.
type pairing struct{ yy, yz, zy, zz float64 }

// factors returns the interaction factors of annex B, table B.1, and for shapes that
// twist table B.2, each by the class of the axis whose moment it stands with; round
// shapes as rectangular tubes. kzy of table B.2 for class 3 and 4 is taken as 1,
// without its relief of at most 0.05·nz/0.75.
func (x *enCase) factors(b *buckled, ny, nz float64) pairing {
	var k pairing
	twists := bucklesSideways(x.s)
	if !symmetric(x.s) { // bending about both axes alone: the sum of shares, 6.2.1 (7)
		return pairing{1, 1, 1, 1}
	}
	switch {
	case x.z.class > 2:
		k.zz = 1 + 0.6*min(b.lambdaZ, 1)*nz
		k.yz = k.zz
	case twists:
		k.zz = 1 + within(2*b.lambdaZ-0.6, 1.4)*nz
		k.yz = 0.6 * k.zz
	default:
		k.zz = 1 + within(b.lambdaZ-0.2, 0.8)*nz
		k.yz = 0.6 * k.zz
	}
	if x.y.class > 2 {
		k.yy = 1 + 0.6*min(b.lambdaY, 1)*ny
		k.zy = 0.8 * k.yy
	} else {
		k.yy = 1 + within(b.lambdaY-0.2, 0.8)*ny
		k.zy = 0.6 * k.yy
	}
	if twists {
		k.zy = x.twistFactor(b.lambdaZ, nz)
	}
	return k
}

// twistFactor returns kzy of table B.2 with CmLT = 1. The slenderness that it asks for
// λz < 0.4 is that of the gross area, so that it holds without compression too.
func (x *enCase) twistFactor(lambda, nz float64) float64 {
	if x.y.class > 2 {
		return 1
	}
	k := 1 - 0.1/0.75*min(lambda, 1)*min(nz, 1)
	stocky := math.Sqrt(x.s.A * x.m.Yield / x.euler(x.s.Iz, x.d.LengthZ))
	if stocky > 0 && stocky < 0.4 {
		return min(k, 0.6+stocky)
	}
	return k
}

func within(v, most float64) float64 { return max(0, min(v, most)) }
