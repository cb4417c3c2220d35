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

// criticalMoment returns the elastic critical moment for lateral-torsional buckling,
// N·m, of a section symmetric about the plane of bending: uniform moment, loads at
// the shear centre, forks a length L (m) apart.
//
//	Mcr = π²·E·Iz/L² · √(Iw/Iz + L²·G·J/(π²·E·Iz))
//
// Source: Timoshenko and Gere, Theory of Elastic Stability, chapter 6; NCCI
// SN003 with C1 = 1, k = kw = 1, zg = 0.
func criticalMoment(s *section.Section, m Material, length float64) float64 {
	euler := math.Pi * math.Pi * m.E * s.Iz / (length * length)
	return euler * math.Sqrt(s.Iw/s.Iz+m.G*s.J/euler)
}

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
// buckles about its weaker axis.
//
//	σ = fy·(1 − λ²/(2·Cc²)) for λ ≤ Cc = √(2π²·E/fy), else π²·E/λ²
//
// which is the Johnson parabola on the Euler stress. Source: AISC ASD 1989 E2-1,
// E2-2 without their factor of safety.
func nominalColumn(s *section.Section, m Material, d *Demand, t *trace) float64 {
	y, z := d.LengthY/s.Ry, d.LengthZ/s.Rz
	t.put("λy", y, "")
	t.put("λz", z, "")
	if !(y > 0 && z > 0) {
		t.say("a buckling length is not stated, so the resistance is taken as zero")
		return unstated
	}
	worst := max(y, z)
	if worst > slender {
		t.say("slenderness over 200 in compression (common practice, no source)")
	}
	stress := johnson(m.Yield, math.Pi*math.Pi*m.E/(worst*worst))
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
		t.put("A", s.A, "m²")
		return against(-d.Axial, s.A*m.Yield/a.n)
	}
	return against(d.Axial, nominalColumn(s, m, d, t)/a.n)
}

func (a allowable) interaction(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.Axial == 0 || d.Moment == 0 {
		return use{}
	}
	bending := ratio(d.Moment, nominalMoment(s, m, d, nil)/a.n)
	t.put("M/Ma", bending, "")
	if d.Axial < 0 {
		axial := ratio(-d.Axial, s.A*m.Yield/a.n)
		t.put("N/Nt", axial, "")
		return against(axial+bending, 1)
	}
	axial := ratio(d.Axial, nominalColumn(s, m, d, nil)/a.n)
	euler := math.Pi * math.Pi * m.E * s.Iy / (d.LengthY * d.LengthY)
	share := ratio(a.n*d.Axial, euler)
	t.put("N/Na", axial, "")
	t.put("NEy", euler, "N")
	t.put("n", a.n, "")
	if share >= 1 {
		t.say("the compression times the factor reaches the Euler load in the plane of bending")
	}
	return against(axial+bending*amplification(share), 1)
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
