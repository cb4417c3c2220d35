package spread

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// z90 is the standard normal's P90.
const z90 = 1.2815515655446004

// pertWeight is λ of the beta-PERT distribution.
const pertWeight = 4

// kind is a distribution as a small number, for the inner loops.
type kind uint8

const (
	kindFixed kind = iota
	kindUniform
	kindTriangular
	kindPERT
	kindLognormal
)

var kinds = map[Distribution]kind{
	Fixed: kindFixed, Uniform: kindUniform, Triangular: kindTriangular,
	PERT: kindPERT, Lognormal: kindLognormal,
}

// shape is a spread resolved to what its distribution is computed from.
type shape struct {
	kind        kind
	base        float64 // base value
	a, m, b     float64 // lower limit, mode, upper limit
	alpha, beta float64 // beta-PERT's exponents
	mu, sigma   float64 // mean and standard deviation of a lognormal's logarithm
}

// resolve validates s and solves for its limits.
func (s Spread) resolve() (shape, error) {
	if err := s.check(); err != nil {
		return shape{}, err
	}
	if s.Distribution == Fixed || s.Low == s.High {
		return s.fixed(), nil
	}
	sh := shape{kind: kinds[s.Distribution], base: s.Likely, a: s.Low, m: s.Likely, b: s.High}
	switch s.Distribution {
	case Lognormal:
		return s.lognormal(), nil
	case Uniform:
		if s.Bounds == BoundsPercentiles {
			tail := float64((s.High - s.Low) / 8) // a tenth of the whole, which is 10/8 of low to high
			sh.a, sh.b = s.Low-tail, s.High+tail
		}
		if s.Likely == 0 {
			sh.base = float64(0.5*s.Low) + float64(0.5*s.High)
		}
		return sh, nil
	}
	if s.Bounds == BoundsPercentiles {
		var err error
		if sh.a, sh.b, err = s.limits(); err != nil {
			return shape{}, err
		}
	}
	if s.Distribution == PERT {
		p := (sh.m - sh.a) / (sh.b - sh.a)
		sh.alpha, sh.beta = 1+float64(pertWeight*p), 1+float64(pertWeight*(1-p))
	}
	return sh, nil
}

// fixed resolves a spread without width.
func (s Spread) fixed() shape {
	value := s.Likely
	if s.Distribution != Fixed {
		value = s.Low
	}
	return shape{kind: kindFixed, base: value, a: value, m: value, b: value}
}

// lognormal resolves a lognormal spread: ln x is normal, z90 from its mean to
// either percentile.
func (s Spread) lognormal() shape {
	low, high := math.Log(s.Low), math.Log(s.High)
	sh := shape{kind: kindLognormal, sigma: (high - low) / (2 * z90)}
	if s.Likely != 0 {
		sh.base, sh.mu = s.Likely, math.Log(s.Likely)
	} else {
		sh.base, sh.mu = math.Sqrt(s.Low)*math.Sqrt(s.High), float64(0.5*low)+float64(0.5*high)
	}
	sh.b = math.Inf(1)
	return sh
}

// Base returns the value that the base estimate uses: the likely value; for
// lognormal the median; for uniform without a likely value the middle. NaN for
// an invalid spread.
func (s Spread) Base() float64 {
	sh, err := s.resolve()
	if err != nil {
		return math.NaN()
	}
	return sh.base
}

// Mean returns the expected value, NaN for an invalid spread. Closed forms:
// Johnson, Kotz, Balakrishnan, Continuous Univariate Distributions, chapters 14
// (lognormal), 25 (beta), 26 (uniform, triangular).
func (s Spread) Mean() float64 {
	sh, err := s.resolve()
	if err != nil {
		return math.NaN()
	}
	return sh.mean()
}

// mean is Mean of a resolved spread.
func (sh *shape) mean() float64 {
	switch sh.kind {
	case kindUniform:
		return float64(0.5*sh.a) + float64(0.5*sh.b)
	case kindTriangular:
		return (sh.a + sh.m + sh.b) / 3
	case kindPERT:
		return (sh.a + float64(pertWeight*sh.m) + sh.b) / (pertWeight + 2)
	case kindLognormal:
		return math.Exp(sh.mu + float64(0.5*sh.sigma*sh.sigma))
	}
	return sh.base
}

// Variance returns the variance in the square of the number's unit, NaN for an
// invalid spread. Sources as for Mean.
func (s Spread) Variance() float64 {
	sh, err := s.resolve()
	if err != nil {
		return math.NaN()
	}
	return sh.variance()
}

// variance is Variance of a resolved spread.
func (sh *shape) variance() float64 {
	w, l, h := sh.b-sh.a, sh.m-sh.a, sh.b-sh.m
	switch sh.kind {
	case kindUniform:
		return w * w / 12
	case kindTriangular:
		return (float64(l*l) + float64(l*h) + float64(h*h)) / 18
	case kindPERT:
		mean := sh.mean()
		return (mean - sh.a) * (sh.b - mean) / (pertWeight + 3)
	case kindLognormal:
		mean := sh.mean()
		return float64(mean*mean) * math.Expm1(sh.sigma*sh.sigma)
	}
	return 0
}

// Quantile returns the value not exceeded with probability u, for 0 ≤ u ≤ 1;
// NaN for any other u and for an invalid spread. A lognormal's is +Inf at u = 1.
func (s Spread) Quantile(u float64) float64 {
	sh, err := s.resolve()
	if err != nil || !(0 <= u && u <= 1) {
		return math.NaN()
	}
	return sh.quantile(u, 1-u)
}

// quantile takes u and 1 − u, each exact, so that neither tail loses digits.
func (sh *shape) quantile(u, above float64) float64 {
	w := sh.b - sh.a
	switch sh.kind {
	case kindUniform:
		if u <= 0.5 {
			return sh.a + float64(u*w)
		}
		return sh.b - float64(above*w)
	case kindTriangular:
		if l := sh.m - sh.a; u*w < l {
			return sh.a + math.Sqrt(u*w*l)
		}
		return sh.b - math.Sqrt(above*w*(sh.b-sh.m))
	case kindPERT:
		if u <= 0.5 {
			return sh.a + float64(w*mathext.InvRegIncBeta(sh.alpha, sh.beta, u))
		}
		return sh.b - float64(w*mathext.InvRegIncBeta(sh.beta, sh.alpha, above))
	case kindLognormal:
		z := mathext.NormalQuantile(min(u, above))
		if u > 0.5 {
			z = -z
		}
		return math.Exp(sh.mu + float64(sh.sigma*z))
	}
	return sh.base
}

// CDF returns the probability that the number is at most x: 0 to 1, NaN for NaN
// and for an invalid spread.
func (s Spread) CDF(x float64) float64 {
	sh, err := s.resolve()
	if err != nil || math.IsNaN(x) {
		return math.NaN()
	}
	return sh.cdf(x)
}

// cdf is CDF of a resolved spread.
func (sh *shape) cdf(x float64) float64 {
	w := sh.b - sh.a
	switch {
	case sh.kind == kindFixed && x >= sh.base, x >= sh.b:
		return 1
	case sh.kind == kindFixed, x <= sh.a:
		return 0
	}
	switch sh.kind {
	case kindUniform:
		return (x - sh.a) / w
	case kindTriangular:
		if x < sh.m {
			return (x - sh.a) / w * ((x - sh.a) / (sh.m - sh.a))
		}
		return 1 - float64((sh.b-x)/w*((sh.b-x)/(sh.b-sh.m)))
	case kindPERT:
		return mathext.RegIncBeta(sh.alpha, sh.beta, (x-sh.a)/w)
	}
	return 0.5 * math.Erfc(-(math.Log(x)-sh.mu)/(sh.sigma*math.Sqrt2))
}
