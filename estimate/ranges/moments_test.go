package ranges

import (
	"math"
	"strings"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// expected compiles m and returns the expectation of its total.
func expected(t *testing.T, m pricing.Model, s Settings) float64 {
	t.Helper()
	p, err := compile(m, s, purpose{})
	if err != nil {
		t.Fatal(err)
	}
	total, why := p.expectedTotal()
	if why != "" {
		t.Fatal(why)
	}
	return total
}

// Closed form: for lognormal X, Y with medians 1, deviations s, q of the
// logarithms and latent correlation r, E[X^a·Y^b] = exp((a²s² + b²q² + 2abrsq)/2).
func TestExpectationOfLognormalProducts(t *testing.T) {
	const s, q, rho = 0.25, 0.4, 0.8
	r := LatentCorrelation(rho)
	inputs := func(group string) []pricing.Input {
		return []pricing.Input{{ID: "x", Spread: spread.LogDeviation(s), Group: group}, {ID: "y", Spread: spread.LogDeviation(q), Group: group}}
	}
	X, Y := pricing.Factor{Input: 0}, pricing.Factor{Input: 1}
	for name, c := range map[string]struct {
		group          string
		terms, overall []pricing.Factor
		want           float64
	}{
		"independent":         {"", []pricing.Factor{X, Y}, nil, math.Exp((s*s + q*q) / 2)},
		"one group":           {"g", []pricing.Factor{X, Y}, nil, math.Exp((s*s + q*q + 2*r*s*q) / 2)},
		"group over all":      {"g", []pricing.Factor{X}, []pricing.Factor{Y}, math.Exp((s*s + q*q + 2*r*s*q) / 2)},
		"square":              {"", []pricing.Factor{X, X}, nil, math.Exp(2 * s * s)},
		"square in the group": {"g", []pricing.Factor{X, Y, X}, nil, math.Exp((4*s*s + q*q + 4*r*s*q) / 2)},
		"offset": {"g", []pricing.Factor{{Input: 0, Offset: 1}, Y}, nil,
			math.Exp(q*q/2) + math.Exp((s*s+q*q+2*r*s*q)/2)},
	} {
		m := pricing.Model{Inputs: inputs(c.group), Terms: []pricing.Term{{Coefficient: 3, Factors: c.terms}}, Overall: c.overall}
		got := expected(t, m, Settings{Correlation: map[string]float64{"g": rho}})
		if math.Abs(got/(3*c.want)-1) > 2e-9 {
			t.Errorf("%s: %v, want %v", name, got, 3*c.want)
		}
	}
}

// Closed forms: E[U²] = (a² + ab + b²)/3 of a uniform; for a triangle E[X²] =
// variance + mean². The triangle's kink limits the
// trapezoid rule to 1e-5 of the variance, a thousandth of the check's standard error.
func TestExpectationOfSquares(t *testing.T) {
	for _, s := range []spread.Spread{spread.NewUniform(1, 3), spread.NewTriangular(0.8, 1, 1.5), spread.NewPERT(18, 28, 42)} {
		m := pricing.Model{Inputs: []pricing.Input{{ID: "x", Spread: s}}, Terms: []pricing.Term{{Coefficient: 1, Factors: []pricing.Factor{{}, {}}}}}
		want := s.Variance() + s.Mean()*s.Mean()
		if got := expected(t, m, Settings{}); math.Abs(got-want) > 1e-5*s.Variance() {
			t.Errorf("%v: E[x²] = %v, want %v", s, got, want)
		}
	}
}

// The check itself passes on correlated products, where the product of the means
// would be some 19 standard errors off.
func TestMomentsOfCorrelatedProducts(t *testing.T) {
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "hours", Spread: spread.NewPERT(18, 28, 42), Group: "g"}, {ID: "rate", Spread: spread.NewTriangular(45, 60, 75), Group: "g"}},
		Terms:  []pricing.Term{{Coefficient: 10, Factors: []pricing.Factor{{Input: 0}, {Input: 1}}}},
	}
	r := simulate(t, m, Settings{Seed: 3, Correlation: map[string]float64{"g": 0.8}})
	if len(r.Moments) != 3 {
		t.Fatalf("moments %v, want two spreads and the total", r.Moments)
	}
	for _, c := range r.Moments {
		if !(math.Abs(c.Deviations) < 3) {
			t.Errorf("%s", c)
		}
	}
	total := r.Moments[2]
	naive := 10 * m.Inputs[0].Spread.Mean() * m.Inputs[1].Spread.Mean()
	if z := (total.Sample - naive) / total.SE; total.Input != "" || z < 10 {
		t.Errorf("the product of the means is %.1f standard errors off in %v", z, total)
	}
}

// A biased sampler is found: the recorded means are shifted by hand.
func TestMomentCheckFindsBias(t *testing.T) {
	for _, c := range []struct {
		shift     float64 // standard errors
		warnings  int
		wantError string
	}{{3, 0, ""}, {5, 1, ""}, {-5, 1, ""}, {7, 1, "moment check"}, {math.NaN(), 1, "moment check"}} {
		s, err := Settings{Trials: 64, Correlation: map[string]float64{"g": 0.3}}.withDefaults()
		if err != nil {
			t.Fatal(err)
		}
		p, err := compile(everySpread("g"), s, purpose{})
		if err != nil {
			t.Fatal(err)
		}
		sim := newSimulation(p, s)
		for r := range sim.deviations {
			sim.deviations[r][1] = c.shift * math.Sqrt(p.inputs[1].sampler.Variance()/(32*64))
		}
		expected, _ := p.expectedTotal()
		res := Result{Mean: expected}
		err = sim.check(&res)
		if (err != nil) != (c.wantError != "") || err != nil && !strings.Contains(err.Error(), "b triangular") {
			t.Errorf("shift %v: error %v, want %q", c.shift, err, c.wantError)
		}
		if len(res.Warnings) != c.warnings {
			t.Errorf("shift %v: warnings %v, want %d", c.shift, res.Warnings, c.warnings)
		}
	}
}
