package resistance

import (
	"math"

	"spanwright/structural/section"
)

// slender is the slenderness L/r above which a compression member is noted (common
// practice, no source).
const slender = 200

// unstated stands for a resistance that cannot be known because a length is missing:
// the check then fails instead of passing on a length of zero.
const unstated = 0

// johnson takes an elastic critical value to a nominal strength by the Johnson
// parabola, so that a member of middle slenderness is not credited with the lesser
// of yield and elastic buckling: yield·(1 − yield/(4·critical)) down to half of
// yield, the critical value below. Source: Timoshenko and Gere, Theory of Elastic
// Stability, chapter 4 (columns); used for beams in the same form.
func johnson(yield, critical float64) float64 {
	if critical >= yield/2 {
		return yield * (1 - yield/(4*critical))
	}
	return critical
}

// nominalMoment returns the moment (N·m, before the factor) at which the section
// buckles sideways or yields: Wel·fy for closed and round shapes.
func nominalMoment(s *section.Section, m Material, d *Demand, t *trace) float64 {
	yield := s.Wely * m.Yield
	if !bucklesSideways(s) {
		return yield
	}
	t.put("My", yield, "N·m")
	t.put("L", d.LateralSpacing, "m")
	if !(d.LateralSpacing > 0) {
		t.say("the spacing of lateral restraints is not stated, so the resistance is taken as zero")
		return unstated
	}
	critical := criticalMoment(s, m, d.LateralSpacing)
	t.put("Iz", s.Iz, "m⁴")
	t.put("Iw", s.Iw, "m⁶")
	t.put("J", s.J, "m⁴")
	t.put("E", m.E, "Pa")
	t.put("G", m.G, "Pa")
	t.put("Mcr", critical, "N·m")
	return johnson(yield, critical)
}

func (a allowable) lateralBuckling(s *section.Section, m Material, d *Demand, t *trace) use {
	if !bucklesSideways(s) || d.Moment == 0 {
		return use{}
	}
	a.factor(m, t)
	return against(d.Moment, nominalMoment(s, m, d, t)/a.n)
}

// nominalColumn returns the compression (N, before the factor) at which the section
// buckles about an axis or by twisting.
//
//	σ = fy·(1 − λ²/(2·Cc²)) for λ ≤ Cc = √(2π²·E/fy), else π²·E/λ²
//
// which is the Johnson parabola on the Euler stress; where twisting is critical
// first, on its stress. Source: AISC ASD 1989 E2-1, E2-2 without their factor of
// safety. Angles buckle about their principal axes, at the longer of both lengths.
func nominalColumn(s *section.Section, m Material, d *Demand, t *trace) float64 {
	lengthY, lengthZ, ry, rz := d.LengthY, d.LengthZ, s.Ry, s.Rz
	if s.Shape == section.Angle {
		lengthY, lengthZ, ry, rz = max(lengthY, lengthZ), max(lengthY, lengthZ), s.Ru, s.Rv
	}
	y, z := lengthY/ry, lengthZ/rz
	t.put("λy", y, "")
	t.put("λz", z, "")
	if !(d.LengthY > 0 && d.LengthZ > 0) {
		t.say("a buckling length is not stated, so the resistance is taken as zero")
		return unstated
	}
	worst := max(y, z)
	if worst > slender {
		t.say("slenderness over 200 in compression (common practice, no source)")
	}
	critical := math.Pi * math.Pi * m.E / (worst * worst)
	if twist := criticalTwist(s, m, lengthY, lengthZ, max(lengthZ, d.LateralSpacing)); twist != 0 {
		t.put("NT", twist, "N")
		critical = min(critical, twist/s.A)
	}
	stress := johnson(m.Yield, critical)
	t.put("A", s.A, "m²")
	t.put("E", m.E, "Pa")
	t.put("σ", stress, "Pa")
	return s.A * stress
}

func (a allowable) axial(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.Axial == 0 {
		return use{}
	}
	a.factor(m, t)
	if d.Axial < 0 {
		return against(-d.Axial, a.tension(s, m, d, t))
	}
	return against(d.Axial, nominalColumn(s, m, d, t)/a.n)
}

// tension returns the allowable tension, N. Fracture of the net section is asked only
// where there are holes, that is a net area factor under 1; its factor is 1.2·n, as
// 0.50·Fu stands beside 0.60·Fy in AISC ASD 1989 D1.
func (a allowable) tension(s *section.Section, m Material, d *Demand, t *trace) float64 {
	t.put("A", s.A, "m²")
	most := s.A * m.Yield / a.n
	net, ok := netFactor(d, t)
	switch {
	case !ok:
		return unstated
	case net < 1:
		t.put("Anet/A", net, "")
		t.put("fu", m.Ultimate, "Pa")
		most = min(most, net*s.A*m.Ultimate/(1.2*a.n))
	}
	return most
}

func (a allowable) interaction(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.Moment == 0 && d.MomentZ == 0 || d.Axial == 0 && (d.Moment == 0 || d.MomentZ == 0) {
		return use{}
	}
	var y, z float64
	if d.Moment != 0 {
		y = ratio(d.Moment, nominalMoment(s, m, d, nil)/a.n)
		t.put("My/Ma", y, "")
	}
	if d.MomentZ != 0 {
		z = ratio(d.MomentZ, s.Welz*m.Yield/a.n)
		t.put("Mz/Maz", z, "")
	}
	if d.Axial < 0 {
		axial := ratio(-d.Axial, a.tension(s, m, d, nil))
		t.put("N/Nt", axial, "")
		return against(axial+y+z, 1)
	}
	if d.Axial == 0 {
		return against(y+z, 1)
	}
	axial := ratio(d.Axial, nominalColumn(s, m, d, nil)/a.n)
	t.put("N/Na", axial, "")
	t.put("n", a.n, "")
	if d.Moment != 0 {
		y *= amplification(a.eulerShare("NEy", s.Iy, d.LengthY, m, d, t))
	}
	if d.MomentZ != 0 {
		z *= amplification(a.eulerShare("NEz", s.Iz, d.LengthZ, m, d, t))
	}
	return against(axial+y+z, 1)
}

// eulerShare returns the compression times the factor as a share of the Euler load in
// a plane of bending.
func (a allowable) eulerShare(symbol string, inertia, length float64, m Material, d *Demand, t *trace) float64 {
	euler := math.Pi * math.Pi * m.E * inertia / (length * length)
	share := ratio(a.n*d.Axial, euler)
	t.put(symbol, euler, "N")
	if share >= 1 {
		t.say("the compression times the factor reaches the Euler load in the plane of bending")
	}
	return share
}

// amplification returns 1/(1 − x), the growth of a moment under a share x of the
// Euler load. From x = 0.999 it goes on along its tangent, so that an overloaded
// member gets a finite utilisation that still grows with the load; such a member
// already fails by x itself, which the axial term is never below.
func amplification(x float64) float64 {
	const last = 0.999
	if x <= last {
		return 1 / (1 - x)
	}
	const top = 1 / (1 - last)
	return top + top*top*(x-last)
}
