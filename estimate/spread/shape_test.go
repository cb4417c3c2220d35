package spread

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/stat/distuv"
)

// reference is the same distribution in gonum/stat/distuv.
type reference interface {
	CDF(float64) float64
	Quantile(float64) float64
}

// scaled is a beta distribution moved to a and stretched to width w.
type scaled struct {
	beta distuv.Beta
	a, w float64
}

func (s scaled) CDF(x float64) float64      { return s.beta.CDF((x - s.a) / s.w) }
func (s scaled) Quantile(u float64) float64 { return s.a + s.w*s.beta.Quantile(u) }

// Reference: gonum.org/v1/gonum/stat/distuv.
func TestQuantileAndCDFAgainstDistuv(t *testing.T) {
	sigma := math.Log(4) / (2 * 1.2815515655446004)
	for _, c := range []struct {
		s         Spread
		ref       reference
		mean, std float64
	}{
		{NewUniform(-3, 9), distuv.Uniform{Min: -3, Max: 9}, 3, 12 / math.Sqrt(12)},
		{NewTriangular(0.8, 1, 1.5), distuv.NewTriangle(0.8, 1.5, 1, nil), distuv.NewTriangle(0.8, 1.5, 1, nil).Mean(), distuv.NewTriangle(0.8, 1.5, 1, nil).StdDev()},
		{NewPERT(18, 28, 42), scaled{distuv.Beta{Alpha: 1 + 4*10.0/24, Beta: 1 + 4*14.0/24}, 18, 24}, 18 + 24*distuv.Beta{Alpha: 1 + 4*10.0/24, Beta: 1 + 4*14.0/24}.Mean(), 24 * distuv.Beta{Alpha: 1 + 4*10.0/24, Beta: 1 + 4*14.0/24}.StdDev()},
		{NewLognormal(50, 200), distuv.LogNormal{Mu: math.Log(100), Sigma: sigma}, distuv.LogNormal{Mu: math.Log(100), Sigma: sigma}.Mean(), distuv.LogNormal{Mu: math.Log(100), Sigma: sigma}.StdDev()},
	} {
		if got := c.s.Mean(); math.Abs(got-c.mean) > 1e-12*c.std {
			t.Errorf("%v: mean %v, want %v", c.s, got, c.mean)
		}
		if got := math.Sqrt(c.s.Variance()); math.Abs(got-c.std) > 1e-12*c.std {
			t.Errorf("%v: standard deviation %v, want %v", c.s, got, c.std)
		}
		for _, u := range []float64{1e-9, 0.001, 0.1, 0.25, 0.5, 0.6, 0.9, 0.999} {
			want := c.ref.Quantile(u)
			if got := c.s.Quantile(u); math.Abs(got-want) > 1e-9*c.std {
				t.Errorf("%v: quantile of %v = %v, want %v", c.s, u, got, want)
			}
			if got := c.s.CDF(want); math.Abs(got-u) > 1e-9 {
				t.Errorf("%v: CDF(%v) = %v, want %v", c.s, want, got, u)
			}
		}
	}
}

// Published: P10, P90 of a lognormal are exp(±1.28155 σ) about the median; table
// of the normal distribution, any handbook of statistics.
func TestLogDeviationPercentiles(t *testing.T) {
	s := LogDeviation(0.25)
	for _, c := range []struct{ u, want float64 }{{0.1, math.Exp(-1.2815516 * 0.25)}, {0.5, 1}, {0.8, math.Exp(0.8416212 * 0.25)}, {0.9, math.Exp(1.2815516 * 0.25)}} {
		if got := s.Quantile(c.u); math.Abs(got-c.want) > 1e-7 {
			t.Errorf("quantile of %v = %v, want %v", c.u, got, c.want)
		}
	}
}

// Property of the definition: low and high are the percentiles asked for, and the
// limits enclose them.
func TestPercentileBounds(t *testing.T) {
	for _, d := range []Distribution{Triangular, PERT, Uniform} {
		for i := range 21 {
			likely := 10 + float64(i)/20*5
			s := Spread{Distribution: d, Low: 10, Likely: likely, High: 15, Bounds: BoundsPercentiles}
			if err := s.Validate(); err != nil {
				t.Errorf("%v: %v", s, err)
				continue
			}
			if p10, p90 := s.CDF(10), s.CDF(15); math.Abs(p10-0.1) > 1e-9 || math.Abs(p90-0.9) > 1e-9 {
				t.Errorf("%v: probability %v at low and %v at high, want 0.1 and 0.9", s, p10, p90)
			}
			if s.Base() != likely {
				t.Errorf("%v: base %v", s, s.Base())
			}
			if a, b := s.Quantile(0), s.Quantile(1); !(a < 10 && b > 15) {
				t.Errorf("%v: limits %v to %v", s, a, b)
			}
		}
	}
}

// Reference: mean and variance by Gauss-Legendre quadrature of the quantile
// function, ∫ Q du and ∫ (Q − mean)² du, cut at the mode's kink.
func TestMomentsByQuadrature(t *testing.T) {
	for name, s := range everyShape() {
		mean, variance := s.Mean(), s.Variance()
		sh, err := s.resolve() // once: percentile bounds are solved for
		if err != nil {
			t.Fatal(err)
		}
		// u = t²(3 − 2t) flattens the infinite slopes at both ends.
		integral := func(f func(float64) float64) float64 {
			var sum float64
			kink := s.CDF(s.Likely)
			k := quantileOfSmoothstep(kink)
			for _, r := range [][2]float64{{0, k}, {k, 1}} {
				sum += quad.Fixed(func(t float64) float64 {
					u := t * t * (3 - 2*t)
					return f(sh.quantile(u, 1-u)) * 6 * t * (1 - t)
				}, r[0], r[1], 400, quad.Legendre{}, 0)
			}
			return sum
		}
		scale := math.Sqrt(variance) + 1e-300
		if got := integral(func(x float64) float64 { return (x - mean) / scale }); math.Abs(got) > 1e-5 {
			t.Errorf("%s: mean off by %v standard deviations", name, got)
		}
		if got := integral(func(x float64) float64 { return (x - mean) / scale * ((x - mean) / scale) }); variance > 0 && math.Abs(got-1) > 2e-4 {
			t.Errorf("%s: variance %v of the closed form", name, got)
		}
	}
}

// quantileOfSmoothstep solves t²(3 − 2t) = u by bisection.
func quantileOfSmoothstep(u float64) float64 {
	lo, hi := 0.0, 1.0
	for range 60 {
		if t := (lo + hi) / 2; t*t*(3-2*t) < u {
			lo = t
		} else {
			hi = t
		}
	}
	return lo
}

func TestQuantileOutsideIsNaN(t *testing.T) {
	for name, s := range everyShape() {
		for _, u := range []float64{-1e-9, 1 + 1e-9, math.NaN(), math.Inf(1)} {
			if got := s.Quantile(u); !math.IsNaN(got) {
				t.Errorf("%s: quantile of %v = %v", name, u, got)
			}
		}
		if got := s.CDF(math.NaN()); !math.IsNaN(got) {
			t.Errorf("%s: CDF of NaN = %v", name, got)
		}
	}
}

// Property: CDF and Quantile are inverse, from limit to limit.
func TestQuantileInvertsCDF(t *testing.T) {
	for name, s := range everyShape() {
		if s.Variance() == 0 {
			continue
		}
		for i := 1; i < 50; i++ {
			u := float64(i) / 50
			if got := s.CDF(s.Quantile(u)); math.Abs(got-u) > 1e-10 {
				t.Errorf("%s: CDF of the quantile of %v = %v", name, u, got)
			}
		}
	}
}
