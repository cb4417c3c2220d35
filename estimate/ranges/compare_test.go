package ranges

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// lines is a model whose total is the sum of named spreads.
func lines(ids []string, spreads ...spread.Spread) pricing.Model {
	m := sumModel(spreads, "")
	for i, id := range ids {
		m.Inputs[i].ID = id
	}
	return m
}

// compare runs Compare.
func compare(t *testing.T, s Settings, models ...pricing.Model) Comparison {
	t.Helper()
	c, err := Compare(t.Context(), models, s)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Quadrature: A = x + y and B = x + z share x, so that A − B = y − z, whose
// distribution is F(d) = ∫ F_y(d + Q_z(u)) du by the midpoint rule.
func TestCompareAgainstQuadrature(t *testing.T) {
	x, y, z := spread.NewUniform(0, 1000), spread.NewTriangular(80, 100, 150), spread.NewLognormal(70, 140)
	c := compare(t, Settings{Seed: 14}, lines([]string{"x", "y"}, x, y), lines([]string{"x", "z"}, x, z))
	const n = 20000
	var q [n]float64
	for i := range q {
		q[i] = z.Quantile((float64(i) + 0.5) / n)
	}
	F := func(d float64) float64 {
		var sum float64
		for _, v := range q {
			sum += y.CDF(d + v)
		}
		return sum / n
	}
	within(t, "P(A < B)", c.Less[0][1].Value, c.Less[0][1].SE, F(0), 1e-4)
	within(t, "P(B < A)", c.Less[1][0].Value, c.Less[1][0].SE, 1-F(0), 1e-4)
	d := c.Differences[0][1]
	within(t, "mean difference", d.Mean, d.MeanSE, y.Mean()-z.Mean(), 0)
	for _, p := range d.Percentiles {
		within(t, "difference", p.Value, p.SE, quantileOf(F, -400, 200, p.P), 1e-3)
	}
	if back := c.Differences[1][0]; back.Mean != -d.Mean || math.Abs(back.Percentiles[0].Value+d.Percentiles[3].Value) > 1e-9 {
		t.Errorf("difference %v, the other way %v", d, back)
	}
	// Drawn apart, x would spread the difference over hundreds.
	if d.Percentiles[3].Value-d.Percentiles[0].Value > 120 || c.Less[0][1].SE > 0.003 {
		t.Errorf("what the models share does not cancel: %v, %v", d, c.Less[0][1])
	}
	if c.Less[0][0] != (Probability{}) || c.Differences[1][1].Percentiles[2].Value != 0 {
		t.Errorf("a model against itself: %v, %v", c.Less[0][0], c.Differences[1][1])
	}
}

// The results are Simulate's; equal models share being the cheapest; three add to 1.
func TestCompareResultsAndTies(t *testing.T) {
	s := Settings{Seed: 6, Trials: 200, Correlation: map[string]float64{"g": 0.3}}
	m := job(9, "g")
	dear := job(9, "g")
	for i := range dear.Terms {
		dear.Terms[i].Coefficient *= 1.01
	}
	c := compare(t, s, m, m, dear)
	if got, want := c.Results[2].Percentiles[2], simulate(t, dear, s).Percentiles[2]; got != want {
		t.Errorf("P80 %v, want %v", got, want)
	}
	for i, want := range []float64{0.5, 0.5, 0} {
		if got := c.Cheapest[i]; got.Value != want || got.SE != 0 {
			t.Errorf("cheapest %d: %v, want %v", i, got, want)
		}
	}
	if c.Less[0][1].Value != 0 || c.Less[0][2].Value != 1 || c.Differences[0][1].Percentiles[0].Value != 0 {
		t.Errorf("less %v, differences %v", c.Less, c.Differences)
	}
}

// One matrix serves models of which each has a part of its assumptions; those in
// common keep their draws though a row before them is missing.
func TestCompareWithMatrix(t *testing.T) {
	mx := symmetric([]string{"y", "z", "x"}, nil, []float64{0.4}, []float64{0.5, 0.3})
	u := spread.NewUniform(0, 1)
	c := compare(t, Settings{Seed: 3, Trials: 256, Matrix: mx}, lines([]string{"x", "y"}, u, u), lines([]string{"x", "z"}, u, u), lines([]string{"x"}, u))
	// A − C = y and B − C = z exactly.
	for i := range 2 {
		d := c.Differences[i][2]
		if math.Abs(d.Percentiles[0].Value-0.1) > 0.01 || math.Abs(d.Percentiles[3].Value-0.9) > 0.01 {
			t.Errorf("difference %d: %v, want a uniform number from 0 to 1", i, d)
		}
	}
	_, err := Compare(t.Context(), []pricing.Model{lines([]string{"x"}, u), lines([]string{"y"}, u)}, Settings{Matrix: mx})
	if err == nil || !strings.Contains(err.Error(), `matrix.ids[1]: found "z"`) {
		t.Errorf("error %v", err)
	}
}

func TestCompareRefuses(t *testing.T) {
	m := lines([]string{"x"}, spread.NewUniform(0, 1))
	bad := lines([]string{"x"}, spread.NewUniform(2, 1))
	for name, c := range map[string]struct {
		models []pricing.Model
		s      Settings
		part   string
	}{
		"one":      {[]pricing.Model{m}, Settings{}, "models: found 1; accepted: 2 to 16"},
		"many":     {make([]pricing.Model, 17), Settings{}, "models: found 17"},
		"bad":      {[]pricing.Model{m, bad}, Settings{Trials: 16}, "models[1]"},
		"settings": {[]pricing.Model{m, m}, Settings{Trials: 1}, "trials"},
	} {
		if _, err := Compare(t.Context(), c.models, c.s); err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.part)
		}
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := Compare(ctx, []pricing.Model{m, m}, Settings{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: error %v", err)
	}
}
