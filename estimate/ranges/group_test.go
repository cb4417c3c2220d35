package ranges

import (
	"context"
	"math"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// Two groups hang on one common factor: the variance of the sum of two like
// lognormals is that of the bivariate lognormal with latent correlation √(r·s)
// (closed form, any text on the lognormal distribution).
func TestCostsOfTwoGroupsAreCorrelated(t *testing.T) {
	const sigma = 0.3
	line := spread.LogDeviation(sigma)
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "a", Spread: line, Group: "labour"}, {ID: "b", Spread: line, Group: "supply"}},
		Terms: []pricing.Term{{Category: "x", Coefficient: 1, Factors: []pricing.Factor{{Input: 0}}},
			{Category: "x", Coefficient: 1, Factors: []pricing.Factor{{Input: 1}}}},
	}
	s := Settings{Seed: 3, Replicates: 64, Trials: 4096, Correlation: map[string]float64{"labour": 0.5, "supply": 0.2}}
	r, err := Simulate(context.Background(), m, s, nil)
	if err != nil {
		t.Fatal(err)
	}
	latent := math.Sqrt(LatentCorrelation(0.5) * LatentCorrelation(0.2))
	one := math.Exp(sigma*sigma) * (math.Exp(sigma*sigma) - 1)
	both := math.Exp(sigma*sigma) * (math.Exp(latent*sigma*sigma) - 1)
	want := math.Sqrt(2*one + 2*both)
	n := float64(s.Replicates * s.Trials)
	// Kurtosis of the sum is below 6 here, so that the standard error of SD stays
	// below sd·√(5/(4n)).
	if diff := math.Abs(r.SD - want); diff > 4*want*math.Sqrt(5/(4*n)) {
		t.Errorf("standard deviation %.6f, closed form %.6f", r.SD, want)
	}
	if apart := math.Sqrt(2 * one); math.Abs(r.SD-apart) < 0.05*apart {
		t.Errorf("the groups look independent: %.6f against %.6f", r.SD, apart)
	}
}

// A book without any spread gives its base and no warning about moments, also
// where its figures name a group.
func TestFixedInputsOfAGroup(t *testing.T) {
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "a", Spread: spread.NewFixed(1.6), Group: "labour"}, {ID: "b", Spread: spread.NewFixed(2.4), Group: "labour"}},
		Terms:  []pricing.Term{{Category: "x", Coefficient: 100, Factors: []pricing.Factor{{Input: 0}, {Input: 1}}}},
	}
	r, err := Simulate(context.Background(), m, Settings{Seed: 1, Replicates: 32, Trials: 64, Correlation: map[string]float64{"labour": 0.5}}, nil)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(r.Mean-384) > 1e-9 || r.SD > 1e-9 {
		t.Errorf("mean %v, deviation %v; want 384, 0", r.Mean, r.SD)
	}
}
