package ranges

import (
	"context"
	"fmt"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// job returns a model of n lines in ten categories, each line a coefficient times
// a rate of its own, times a mass allowance and the systemic factor shared by all.
// The rates are triangular, PERT, lognormal and uniform in turn. Invented values.
func job(n int, group string) pricing.Model {
	m := pricing.Model{Inputs: []pricing.Input{
		{ID: "a growth", Spread: spread.NewTriangular(0.01, 0.06, 0.12)},
		{ID: "b systemic", Spread: spread.LogDeviation(0.11)},
	}, Overall: []pricing.Factor{{Input: 1}}}
	for i := range n {
		s := []spread.Spread{spread.NewTriangular(0.8, 1, 1.5), spread.NewPERT(18, 28, 42).Scale(1.0 / 28), spread.NewLognormal(0.7, 1.6), spread.NewUniform(0.9, 1.2)}[i%4]
		m.Inputs = append(m.Inputs, pricing.Input{ID: fmt.Sprintf("rate %05d", i), Spread: s, Group: group})
		m.Terms = append(m.Terms, pricing.Term{
			Category: fmt.Sprintf("category %d", i%10), Coefficient: 1000 + 10*float64(i%37),
			Factors: []pricing.Factor{{Input: 0, Offset: 1}, {Input: i + 2}},
		})
	}
	return m
}

// 200 lines and 102,400 trials.
func BenchmarkSimulate200(b *testing.B) {
	for _, group := range []string{"", "g"} {
		b.Run("group="+group, func(b *testing.B) {
			m := job(200, group)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Simulate(context.Background(), m, Settings{Seed: 1, Trials: 3200, Correlation: map[string]float64{"g": 0.3}}, nil); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
