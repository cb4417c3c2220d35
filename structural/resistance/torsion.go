package resistance

import (
	"math"

	"spanwright/structural/section"
)

// bucklesSideways tells whether a beam of the shape, bent about y, can buckle
// sideways and twist: closed and round shapes are too stiff in torsion.
func bucklesSideways(s *section.Section) bool {
	switch s.Shape {
	case section.ISection, section.Flat, section.Channel, section.Tee, section.UnequalI:
		return true
	}
	return false
}

// symmetric tells whether both y and z are axes of symmetry.
func symmetric(s *section.Section) bool {
	switch s.Shape {
	case section.Channel, section.Tee, section.UnequalI, section.Angle:
		return false
	}
	return true
}

// criticalMoment returns the elastic critical moment for lateral-torsional buckling,
// N·m, of a section symmetric about the plane of bending or about y: uniform moment,
// loads at the shear centre, forks a length L (m) apart.
//
//	Mcr = π²·E·Iz/L² · (√(Iw/Iz + L²·G·J/(π²·E·Iz) + (β/2)²) − |β|/2)
//
// β is the monosymmetry (Wagner) constant, 0 for sections symmetric about y; its sign
// is taken for the worse side in compression. Source: Timoshenko and Gere, Theory of
// Elastic Stability, chapter 6; NCCI SN003 with C1 = 1, k = kw = 1, zg = 0.
func criticalMoment(s *section.Section, m Material, length float64) float64 {
	euler := math.Pi * math.Pi * m.E * s.Iz / (length * length)
	half := math.Abs(s.Wagner) / 2
	return euler * (math.Sqrt(s.Iw/s.Iz+m.G*s.J/euler+half*half) - half)
}

// criticalTwist returns the compression (N) at which an open section buckles by
// twisting, alone or together with bending, or 0 for closed and round shapes, which
// do not. Lengths (m) are of buckling about the two axes and of twist.
//
//	NT = (G·J + π²·E·Iw/L²)/i0², i0² = (Iy + Iz)/A + y0² + z0²
//	(N − Ny)(N − Nz)(N − NT) = N²·(N − Nz)·(y0/i0)² + N²·(N − Ny)·(z0/i0)²
//
// on principal axes. Source: Timoshenko and Gere, Theory of Elastic Stability,
// chapter 5; EN 1993-1-1:2005 6.3.1.4.
func criticalTwist(s *section.Section, m Material, lengthY, lengthZ, lengthT float64) float64 {
	if !bucklesSideways(s) && s.Shape != section.Angle {
		return 0
	}
	polar := (s.Iy+s.Iz)/s.A + s.Y0*s.Y0 + s.Z0*s.Z0
	twist := (m.G*s.J + math.Pi*math.Pi*m.E*s.Iw/(lengthT*lengthT)) / polar
	if symmetric(s) {
		return twist
	}
	iy, iz, y0, z0 := s.Iy, s.Iz, s.Y0, s.Z0
	if s.Shape == section.Angle {
		iy, iz = s.Iu, s.Iv
		sin, cos := math.Sincos(s.Alpha)
		y0, z0 = s.Y0*cos+s.Z0*sin, s.Z0*cos-s.Y0*sin
	}
	euler := math.Pi * math.Pi * m.E
	return coupled(euler*iy/(lengthY*lengthY), euler*iz/(lengthZ*lengthZ), twist, y0*y0/polar, z0*z0/polar)
}

// coupled returns the least N with (N − Ny)(N − Nz)(N − NT) = N²·(N − Nz)·a +
// N²·(N − Ny)·b, by bisection between 0 and the least of the three: at 0 the
// difference of the sides is below, at the least of the three not below 0.
func coupled(y, z, twist, a, b float64) float64 {
	hi := min(y, z, twist)
	if !(hi > 0 && hi <= math.MaxFloat64) {
		return hi
	}
	scale, lo := hi, 0.0
	y, z, twist, hi = y/scale, z/scale, twist/scale, 1
	for range 53 {
		n := (lo + hi) / 2
		if (n-y)*(n-z)*(n-twist)-n*n*((n-z)*a+(n-y)*b) < 0 {
			lo = n
		} else {
			hi = n
		}
	}
	return lo * scale
}
