package ranges

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mathext"

	"spanwright/estimate/spread"
)

// sumDistribution is the distribution of a sum of spreads, computed without any
// random number: conditional on the common factor Z (Gauss-Hermite nodes) the
// lines are independent, so their distributions, put on a lattice, are convolved.
type sumDistribution struct {
	origin, step   float64
	mass           []float64 // probability of origin + k·step
	mean, variance float64
}

// sumOf computes it for latent correlation r on a lattice of the given step.
func sumOf(spreads []spread.Spread, r, step float64) sumDistribution {
	nodes := 48
	if r == 0 {
		nodes = 1
	}
	z, w := make([]float64, nodes), make([]float64, nodes)
	quad.Hermite{}.FixedLocations(z, w, math.Inf(-1), math.Inf(1))
	var d sumDistribution
	d.step = step
	for k := range z {
		var total []float64
		d.origin = 0
		for _, s := range spreads {
			first, mass := lattice(s, r, math.Sqrt2*z[k], step)
			d.origin += first
			total = convolve(total, mass)
		}
		if d.mass == nil {
			d.mass = make([]float64, len(total))
		}
		for i, v := range total {
			d.mass[i] += v * w[k] / math.SqrtPi
		}
	}
	for i, v := range d.mass {
		d.mean += v * (d.origin + float64(i)*step)
	}
	for i, v := range d.mass {
		x := d.origin + float64(i)*step - d.mean
		d.variance += v * x * x
	}
	d.variance -= float64(len(spreads)) * step * step / 12 // Sheppard's correction
	return d
}

// lattice returns the first point and the probabilities of the points for one
// line given the common factor: P(x ≤ c) = Φ((Φ⁻¹(F(c)) − √r·Z)/√(1−r)).
func lattice(s spread.Spread, r, Z, step float64) (float64, []float64) {
	first := step * math.Floor(s.Quantile(1e-12)/step)
	last := s.Quantile(1 - 1e-9)
	below := func(x float64) float64 {
		u := s.CDF(x)
		if u <= 0 || u >= 1 {
			return u
		}
		return 0.5 * math.Erfc(-(mathext.NormalQuantile(u)-math.Sqrt(r)*Z)/math.Sqrt(1-r)/math.Sqrt2)
	}
	var mass []float64
	previous := 0.0
	for k := 0; ; k++ {
		x := first + float64(k)*step
		next := below(x + step/2)
		mass = append(mass, next-previous)
		previous = next
		if x > last {
			return first, mass
		}
	}
}

// convolve returns the distribution of the sum of two lattice variables; a nil
// first one is zero with certainty.
func convolve(a, b []float64) []float64 {
	if a == nil {
		return b
	}
	out := make([]float64, len(a)+len(b)-1)
	for i, x := range a {
		for j, y := range b {
			out[i+j] += x * y
		}
	}
	return out
}

// quantile returns the value not exceeded with probability p; the distribution
// function is linear between the midpoints of the lattice.
func (d sumDistribution) quantile(p float64) float64 {
	var below float64
	for i, v := range d.mass {
		if below+v >= p {
			return d.origin + d.step*(float64(i)-0.5+(p-below)/v)
		}
		below += v
	}
	return math.NaN()
}
