package ranges

import (
	"math"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// withRisks is one line and discrete risks of known or uncertain cost, which come
// after it among the inputs.
func withRisks(line spread.Spread, risks ...spread.Spread) pricing.Model {
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "a line", Spread: line}},
		Terms:  []pricing.Term{{Category: "erection", Coefficient: 1, Factors: []pricing.Factor{{}}}},
	}
	for i, s := range risks {
		id := string(rune('f' + i))
		m.Inputs = append(m.Inputs, pricing.Input{ID: id, Spread: s})
		m.Risks = append(m.Risks, pricing.Risk{ID: "risk " + id, Probability: 0.3 / float64(i+1), Impact: i + 1})
	}
	return m
}

// quantileOf solves F(x) = p by bisection.
func quantileOf(F func(float64) float64, low, high, p float64) float64 {
	for range 100 {
		if x := (low + high) / 2; F(x) < p {
			low = x
		} else {
			high = x
		}
	}
	return low
}

// Closed form: two risks of known cost beside a line make a mixture of four shifted
// distributions of the line.
func TestRisksAgainstMixture(t *testing.T) {
	line := spread.NewTriangular(80, 100, 150)
	m := withRisks(line, spread.NewFixed(60), spread.NewFixed(-25))
	F := func(x float64) float64 {
		const p, q = 0.3, 0.15
		return (1-p)*(1-q)*line.CDF(x) + p*(1-q)*line.CDF(x-60) + (1-p)*q*line.CDF(x+25) + p*q*line.CDF(x-35)
	}
	r := simulate(t, m, Settings{Seed: 21, Percentiles: []float64{0.05, 0.1, 0.5, 0.7, 0.8, 0.9, 0.95}})
	for _, p := range r.Percentiles {
		if want := quantileOf(F, 0, 300, p.P); math.Abs(p.Value-want) > 4*p.SE {
			t.Errorf("P%.0f = %v ± %v, want %v", 100*p.P, p.Value, p.SE, want)
		}
	}
	variance := line.Variance() + 0.21*60*60 + 0.1275*25*25
	if want := line.Mean() + 18 - 3.75; math.Abs(r.Mean-want) > 4*r.MeanSE || math.Abs(r.SD*r.SD/variance-1) > 0.01 {
		t.Errorf("mean %v ± %v, want %v; variance %v, want %v", r.Mean, r.MeanSE, want, r.SD*r.SD, variance)
	}
	if r.Base != 100 {
		t.Errorf("base %v: risks are no part of it", r.Base)
	}
	for i, want := range []float64{0.3, 0.15} { // one uniform in each of 4,096 strata
		if got := r.Risks[i].Frequency; math.Abs(got-want) > 1.0/4096 {
			t.Errorf("%s occurs in %v of the trials, want %v", r.Risks[i].ID, got, want)
		}
	}
	var share float64
	for i, c := range []float64{60, -25} {
		p := m.Risks[i].Probability
		if want := p * (1 - p) * c * c / variance; math.Abs(r.Risks[i].Share-want) > 0.005 {
			t.Errorf("%s: share %v, closed form %v", r.Risks[i].ID, r.Risks[i].Share, want)
		}
		share += r.Risks[i].Share
	}
	if math.Abs(share+r.Categories[0].Share-1) > 1e-12 {
		t.Errorf("shares add to %v", share+r.Categories[0].Share)
	}
}

// Reference: E[1·x] = p·E[x] and Var = p·E[x²] − p²·E[x]² of an independent
// occurrence. The total's expectation holds the risks at their sample means, outside
// of the overall factors.
func TestMomentsOfRisks(t *testing.T) {
	impact := spread.NewPERT(10, 30, 90)
	m := withRisks(spread.NewTriangular(80, 100, 150), impact)
	m.Overall = []pricing.Factor{{Input: 2}}
	m.Inputs = append(m.Inputs, pricing.Input{ID: "systemic", Spread: spread.LogDeviation(0.2)})
	r := simulate(t, m, Settings{Seed: 5})
	var found bool
	for _, c := range r.Moments {
		if !(math.Abs(c.Deviations) < 4) {
			t.Errorf("%s", c)
		}
		if c.Risk == "risk f" {
			found = true
			second := impact.Variance() + impact.Mean()*impact.Mean()
			se := math.Sqrt((0.3*second - 0.09*impact.Mean()*impact.Mean()) / 131072)
			if math.Abs(c.Expected-0.3*impact.Mean()) > 1e-9 || math.Abs(c.SE/se-1) > 1e-6 {
				t.Errorf("risk: expected %v ± %v, want %v ± %v", c.Expected, c.SE, 0.3*impact.Mean(), se)
			}
		}
	}
	total := r.Moments[len(r.Moments)-1]
	want := spread.NewTriangular(80, 100, 150).Mean()*math.Exp(0.02) + r.Risks[0].Mean
	if !found || total.Input != "" || total.Risk != "" || math.Abs(total.Expected-want) > 1e-6 {
		t.Errorf("moments %v, want the risk's and a total of %v", r.Moments, want)
	}
	if !strings.Contains(r.MomentMethod, "total with the expectation") {
		t.Errorf("method %q", r.MomentMethod)
	}
}

// A rare and dear risk, as often as it should or not at all, is no fault.
func TestRareRisksPassTheCheck(t *testing.T) {
	for _, p := range []float64{1e-7, 1e-6, 1e-5, 1e-4, 1 - 1e-5, 1 - 1e-7} {
		for seed := range 60 {
			m := withRisks(spread.NewTriangular(80, 100, 150), spread.NewFixed(1e6))
			m.Risks[0].Probability = p
			r := simulate(t, m, Settings{Seed: uint64(seed), Trials: 512})
			for _, c := range r.Moments {
				if !(math.Abs(c.Deviations) < 4) {
					t.Errorf("probability %v, seed %d: %s", p, seed, c)
				}
			}
		}
	}
}

// Closed form: for lognormal x with median 1 and least charge L of c·x,
// E[max(c·x, L)] = L·Φ(d) + c·exp(σ²/2)·Φ(σ − d) with d = ln(L/c)/σ; the part of
// the distribution below L stands at L. The factor after the minimum scales all.
func TestLeastAgainstClosedForm(t *testing.T) {
	const c, least, sigma, after = 100, 90, 0.3, 1.25
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "rate", Spread: spread.LogDeviation(sigma)}, {ID: "tax", Spread: spread.NewFixed(0.25)}},
		Terms: []pricing.Term{{Category: "coating", Coefficient: c, Factors: []pricing.Factor{{Input: 0}},
			Least: least, After: []pricing.Factor{{Input: 1, Offset: 1}}}},
	}
	Phi := func(z float64) float64 { return 0.5 * math.Erfc(-z/math.Sqrt2) }
	d := math.Log(least/float64(c)) / sigma
	want := after * (least*Phi(d) + c*math.Exp(sigma*sigma/2)*Phi(sigma-d))
	r := simulate(t, m, Settings{Seed: 8})
	if math.Abs(r.Mean-want) > 4*r.MeanSE {
		t.Errorf("mean %v ± %v, closed form %v", r.Mean, r.MeanSE, want)
	}
	if got := r.Percentiles[0].Value; got != after*least {
		t.Errorf("P10 = %v, want the minimum %v", got, after*least)
	}
	if p90 := after * c * math.Exp(sigma*1.2815515655446004); math.Abs(r.Percentiles[3].Value-p90) > 4*r.Percentiles[3].SE {
		t.Errorf("P90 = %v ± %v, want %v", r.Percentiles[3].Value, r.Percentiles[3].SE, p90)
	}
	if r.Base != after*c {
		t.Errorf("base %v, want %v", r.Base, after*c)
	}
	if len(r.Moments) != 1 || r.Moments[0].Input != "rate" || !strings.Contains(r.MomentMethod, "minimum charge") {
		t.Errorf("moments %v by %q: the total has no closed form", r.Moments, r.MomentMethod)
	}
	m.Terms[0].Coefficient = 50 // the base falls below the minimum
	if got := simulate(t, m, Settings{Trials: 64}).Base; got != after*least {
		t.Errorf("base %v, want %v", got, after*least)
	}
}

func TestRisksRefused(t *testing.T) {
	for name, c := range map[string]struct {
		change func(m *pricing.Model)
		part   string
	}{
		"probability above 1": {func(m *pricing.Model) { m.Risks[0].Probability = 1.1 }, `model.risks[0] "risk f" probability: found 1.1; accepted: 0 to 1`},
		"NaN":                 {func(m *pricing.Model) { m.Risks[1].Probability = math.NaN() }, `"risk g" probability`},
		"negative":            {func(m *pricing.Model) { m.Risks[1].Probability = -0.1 }, `"risk g" probability`},
		"impact":              {func(m *pricing.Model) { m.Risks[1].Impact = 3 }, `"risk g" impact: found 3; accepted: an input, 0 to 2`},
		"negative impact":     {func(m *pricing.Model) { m.Risks[1].Impact = -1 }, "impact"},
		"no id":               {func(m *pricing.Model) { m.Risks[0].ID = "" }, "model.risks[0]"},
		"twice":               {func(m *pricing.Model) { m.Risks[1].ID = "risk f" }, "model.risks[1]"},
		"too many":            {func(m *pricing.Model) { m.Risks = make([]pricing.Risk, MaxRisks+1) }, "model.risks"},
		"NaN least":           {func(m *pricing.Model) { m.Terms[0].Least = math.NaN() }, "model.terms[0] least"},
		"negative least":      {func(m *pricing.Model) { m.Terms[0].Least = -1 }, "model.terms[0] least"},
		"after":               {func(m *pricing.Model) { m.Terms[0].After = []pricing.Factor{{Input: 9}} }, "model.terms[0] after factor 0 input"},
	} {
		m := withRisks(spread.NewUniform(1, 2), spread.NewFixed(3), spread.NewFixed(4))
		c.change(&m)
		_, err := Simulate(t.Context(), m, Settings{Trials: 16}, nil)
		if err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.part)
		}
	}
}

func TestCertainAndImpossibleRisks(t *testing.T) {
	m := withRisks(spread.NewFixed(100), spread.NewFixed(7), spread.NewFixed(40))
	m.Risks[0].Probability, m.Risks[1].Probability = 1, 0
	r := simulate(t, m, Settings{Trials: 64})
	if r.Mean != 107 || r.Base != 100 || r.Risks[0].Frequency != 1 || r.Risks[1].Frequency != 0 || r.SD != 0 {
		t.Errorf("mean %v, base %v, risks %v", r.Mean, r.Base, r.Risks)
	}
	if r.Risks[0].Share != 0 || r.Categories[0].Share != 0 {
		t.Errorf("shares of a total without variance: %v, %v", r.Risks, r.Categories)
	}
}

// Property: another risk moves no draw of an assumption or risk.
func TestAddedRiskMovesNoDraw(t *testing.T) {
	two := withRisks(spread.NewUniform(1, 2), spread.NewUniform(3, 9), spread.NewUniform(4, 5))
	one := two
	one.Risks = two.Risks[1:]
	s := Settings{Seed: 3, Trials: 64}
	if a, b := values(t, one, s), values(t, two, s); !slices.Equal(a[0], b[0]) || !slices.Equal(a[2], b[2]) {
		t.Error("draws of the assumptions moved")
	}
	if a, b := simulate(t, one, s).Risks[0], simulate(t, two, s).Risks[1]; a.Mean != b.Mean || a.Frequency != b.Frequency {
		t.Errorf("the risk moved: %v and %v", a, b)
	}
}
