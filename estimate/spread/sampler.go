package spread

import "math"

// Sampler is a spread compiled for drawing: it maps uniform or standard normal
// numbers to values, monotonically, without allocating. Fixed, uniform and
// triangular are exact from uniform numbers. beta-PERT and every conversion
// between uniform and normal go by tables of cubics: error below 1e-7 of the
// standard deviation in the mean and in the deviation itself. Its methods may be
// called concurrently.
type Sampler struct {
	sh    shape
	width float64               // b − a
	table *[zSegments + 1]cubic // beta-PERT's value over z, in units of width from a
}

// Sampler compiles s. The error is Validate's.
func (s Spread) Sampler() (Sampler, error) {
	sh, err := s.resolve()
	if err != nil {
		return Sampler{}, err
	}
	r := Sampler{sh: sh, width: sh.b - sh.a}
	if sh.kind == kindPERT {
		r.table = buildPERT(&sh)
	}
	return r, nil
}

// Fixed reports whether every draw is the same.
func (r *Sampler) Fixed() bool { return r.sh.kind == kindFixed }

// Bounded reports whether the spread has limits: all but the lognormal have.
func (r *Sampler) Bounded() bool { return r.sh.kind != kindLognormal }

// Base returns the value that stands in the base estimate.
func (r *Sampler) Base() float64 { return r.sh.base }

// Mean returns the expected value.
func (r *Sampler) Mean() float64 { return r.sh.mean() }

// Variance returns the variance.
func (r *Sampler) Variance() float64 { return r.sh.variance() }

// FromUniform returns the quantile of u, 0 < u < 1.
func (r *Sampler) FromUniform(u float64) float64 {
	switch r.sh.kind {
	case kindUniform:
		return min(r.sh.a+float64(u*r.width), r.sh.b)
	case kindTriangular:
		return r.sh.quantile(u, 1-u)
	case kindPERT, kindLognormal:
		return r.FromNormal(StandardNormal(u))
	}
	return r.sh.base
}

// FromNormal returns the quantile of Φ(z), any finite z.
func (r *Sampler) FromNormal(z float64) float64 {
	switch r.sh.kind {
	case kindUniform, kindTriangular:
		half := math.Copysign(0.5-tail(-math.Abs(z)), z) // without a branch that would be mispredicted
		return r.FromUniform(0.5 + half)
	case kindPERT:
		x := float64((z + zEdge) * zKnotRate)
		if !(0 <= x && x < zSegments) {
			return r.outer(z)
		}
		i := int(x)
		return r.sh.a + float64(r.width*r.table[i].at(x-float64(i)))
	case kindLognormal:
		return exp(r.sh.mu + float64(r.sh.sigma*z))
	}
	return r.sh.base
}

// outer is beta-PERT beyond its table, exact.
func (r *Sampler) outer(z float64) float64 {
	t := lowerTail(-math.Abs(z))
	if z > 0 {
		return r.sh.quantile(1-t, t)
	}
	return r.sh.quantile(t, 1-t)
}
