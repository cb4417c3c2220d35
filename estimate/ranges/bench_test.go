package ranges

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"slices"
	"testing"
	"time"

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

// realistic returns a model of the shape of a whole job's: terms products of three
// to six of the inputs, some with a minimum charge, and two risks.
func realistic(inputs, terms int) pricing.Model {
	m := job(inputs-2, "g")
	m.Terms = nil
	for i := range terms {
		t := pricing.Term{Category: fmt.Sprintf("category %d", i%10), Coefficient: 1000 + 10*float64(i%37), Factors: []pricing.Factor{{Input: 0, Offset: 1}}}
		for k := range 2 + i%4 {
			t.Factors = append(t.Factors, pricing.Factor{Input: 2 + (i*7+k*13)%(inputs-2)})
		}
		if i%25 == 0 {
			t.Least, t.After = 1100, []pricing.Factor{{Input: 2 + (i*7+5)%(inputs-2)}}
		}
		m.Terms = append(m.Terms, t)
	}
	m.Risks = []pricing.Risk{{ID: "flood", Probability: 0.1, Impact: 5}, {ID: "strike", Probability: 0.25, Impact: 6}}
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

// 80 inputs, 150 terms, 32 × 4,096 trials, without and with sensitivities.
func BenchmarkSensitivities(b *testing.B) {
	m := realistic(80, 150)
	for _, on := range []bool{false, true} {
		b.Run(fmt.Sprint(on), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Simulate(context.Background(), m, Settings{Seed: 1, Correlation: map[string]float64{"g": 0.3}, Sensitivities: on}, nil); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// 80 inputs and 300 terms: preparing; then one rate, the growth that every term
// holds, and ten rates changed.
func BenchmarkPreview(b *testing.B) {
	m, s := realistic(80, 300), Settings{Seed: 1, Correlation: map[string]float64{"g": 0.3}}
	b.Run("prepare", func(b *testing.B) {
		for b.Loop() {
			if _, err := Prepare(context.Background(), m, s); err != nil {
				b.Fatal(err)
			}
		}
	})
	r, err := Prepare(context.Background(), m, s)
	if err != nil {
		b.Fatal(err)
	}
	var ten []Change
	for i := range 10 {
		ten = append(ten, Change{m.Inputs[7*i+2].ID, spread.NewPERT(0.7, 1, 1.4+float64(i)/10)})
	}
	for name, changes := range map[string][]Change{"one": ten[:1], "growth": {{"a growth", spread.NewTriangular(0, 0.1, 0.3)}}, "ten": ten} {
		b.Run(name, func(b *testing.B) {
			var times []time.Duration
			for b.Loop() {
				start := time.Now()
				if _, err := r.Preview(changes); err != nil {
					b.Fatal(err)
				}
				times = append(times, time.Since(start))
			}
			slices.Sort(times)
			b.ReportMetric(float64(times[len(times)*95/100].Microseconds())/1000, "p95-ms")
		})
	}
}

// peerModel is the case of a general numerical program that the project is
// measured beside: 200 lines, bases 10,000 to 170,000, triangular, PERT,
// lognormal (20 % of its mean) and uniform in turn.
func peerModel(group string) pricing.Model {
	var m pricing.Model
	sigma := math.Sqrt(math.Log(1.04))
	for k := range 200 {
		base := 1e4 * float64(1+k%17)
		a, b := 0.85*base, base*(1.2+0.02*float64(k%10))
		s := []spread.Spread{
			spread.NewTriangular(a, base, b), spread.NewPERT(a, base, b),
			spread.LogDeviation(sigma).Scale(base * math.Exp(-sigma*sigma/2)), spread.NewUniform(a, b),
		}[k%4]
		m.Inputs = append(m.Inputs, pricing.Input{ID: fmt.Sprintf("line %03d", k), Spread: s, Group: group})
		m.Terms = append(m.Terms, pricing.Term{Category: "lines", Coefficient: 1, Factors: []pricing.Factor{{Input: k}}})
	}
	return m
}

// peerSettings gives a million trials and the correlation 0.3 of the normals:
// Spearman's ρ = 6/π·asin(0.3/2).
func peerSettings(dense bool) Settings {
	rho := 6 / math.Pi * math.Asin(0.15)
	s := Settings{Seed: 1, Replicates: 250, Trials: 4000, Correlation: map[string]float64{"g": rho}}
	if dense {
		s.Correlation, s.Matrix = nil, equalMatrix(peerModel(""), rho)
	}
	return s
}

// equalMatrix correlates all inputs of a model alike.
func equalMatrix(m pricing.Model, rho float64) *Matrix {
	out := &Matrix{Rho: matrix(len(m.Inputs), len(m.Inputs))}
	for i, in := range m.Inputs {
		out.IDs = append(out.IDs, in.ID)
		for j := range m.Inputs {
			out.Rho[i][j] = rho
		}
		out.Rho[i][i] = 1
	}
	return out
}

// 200 lines × 1,000,000 trials; prints what the peer prints. Run it beside the
// peer: go test ./estimate/ranges -run xxx -bench PeerCase -benchtime 5x -v
func BenchmarkPeerCase(b *testing.B) {
	for _, dense := range []bool{false, true} {
		b.Run(map[bool]string{false: "common", true: "dense"}[dense], func(b *testing.B) {
			m, s := peerModel("g"), peerSettings(dense)
			if dense {
				m = peerModel("")
			}
			var times []time.Duration
			var r Result
			var err error
			b.ReportAllocs()
			for b.Loop() {
				start := time.Now()
				if r, err = Simulate(context.Background(), m, s, nil); err != nil {
					b.Fatal(err)
				}
				times = append(times, time.Since(start))
			}
			slices.Sort(times)
			var mem runtime.MemStats
			runtime.ReadMemStats(&mem)
			b.ReportMetric(times[len(times)/2].Seconds(), "median-s")
			b.ReportMetric(float64(mem.Sys)/(1<<20), "sys-MiB")
			text := fmt.Sprintf("mean %.1f ± %.1f, sd %.1f", r.Mean, r.MeanSE, r.SD)
			for _, p := range r.Percentiles {
				text += fmt.Sprintf(", P%.0f %.1f ± %.1f", 100*p.P, p.Value, p.SE)
			}
			b.Log(text)
		})
	}
}
