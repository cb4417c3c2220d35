package ranges

import (
	"math"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// byID returns the sensitivity of an id.
func byID(t *testing.T, r Result, id string) Sensitivity {
	t.Helper()
	for _, s := range r.Sensitivities {
		if s.ID == id {
			return s
		}
	}
	t.Fatalf("no sensitivity of %q in %v", id, r.Sensitivities)
	return Sensitivity{}
}

// within tests a value by its standard error and a slack.
func within(t *testing.T, what string, got, se, want, slack float64) {
	t.Helper()
	if !(math.Abs(got-want) <= 4*se+slack) {
		t.Errorf("%s: %v ± %v, want %v", what, got, se, want)
	}
}

// Closed forms of a sum of independent lines: the share is the line's variance over
// the sum's, the swing its P90 − P10; the narrowing by convolution of the other
// lines, since a fixed one only shifts the sum.
func TestSensitivitiesOfSums(t *testing.T) {
	r := simulate(t, sumModel(threeLines, ""), Settings{Seed: 31, Sensitivities: true})
	width := func(lines []spread.Spread) float64 {
		d := sumOf(lines, 0, 0.25)
		return d.quantile(0.9) - d.quantile(0.1)
	}
	var variance float64
	for _, s := range threeLines {
		variance += s.Variance()
	}
	whole := width(threeLines)
	for i, s := range threeLines {
		got := byID(t, r, []string{"line 000", "line 001", "line 002"}[i])
		within(t, got.ID+" share", got.Share, got.ShareSE, s.Variance()/variance, 0.002)
		within(t, got.ID+" swing", got.Swing, got.SwingSE, s.Quantile(0.9)-s.Quantile(0.1), 1e-6)
		others := slices.Delete(slices.Clone(threeLines), i, i+1)
		within(t, got.ID+" narrowing", got.Narrowing, got.NarrowingSE, whole-width(others), 4e-3)
		if !(got.ShareSE < 0.01 && got.NarrowingSE < 0.3 && got.NarrowingSE > 0) || got.Risk {
			t.Errorf("errors of %+v", got)
		}
	}
	if !slices.IsSortedFunc(r.Sensitivities, func(a, b Sensitivity) int {
		if a.Narrowing > b.Narrowing {
			return -1
		}
		return 1
	}) {
		t.Errorf("out of order: %v", r.Sensitivities)
	}
}

// Closed form: near-normal lines a·X of one deviation with latent correlation r:
// E[total | X₁] moves by a₁ + a₂·r for each X₁, so that the share is
// (a₁ + a₂r)²/(a₁² + a₂² + 2a₁a₂r): correlated assumptions move along. The
// narrowing leaves the other as drawn: 2·1.28155·σ·(√(a₁² + a₂² + 2a₁a₂r) − a₂).
func TestSensitivitiesOfCorrelatedNormals(t *testing.T) {
	const sigma, rho, a, b = 0.01, 0.5, 300, 200
	line := spread.LogDeviation(sigma)
	m := sumModel([]spread.Spread{line, line}, "g")
	m.Terms[0].Coefficient, m.Terms[1].Coefficient = a, b
	r := simulate(t, m, Settings{Seed: 1, Sensitivities: true, Correlation: map[string]float64{"g": rho}})
	latent := LatentCorrelation(rho)
	variance := a*a + b*b + 2*a*b*latent
	for i, c := range [][2]float64{{a, b}, {b, a}} {
		got := byID(t, r, []string{"line 000", "line 001"}[i])
		within(t, got.ID+" share", got.Share, got.ShareSE, (c[0]+c[1]*latent)*(c[0]+c[1]*latent)/variance, 0.002)
		within(t, got.ID+" narrowing", got.Narrowing, got.NarrowingSE, 2*1.2815515655*sigma*(math.Sqrt(variance)-c[1]), 1e-3)
		within(t, got.ID+" swing", got.Swing, got.SwingSE, 2*c[0]*math.Sinh(1.2815515655*sigma), 1e-6)
	}
}

// Closed form of a risk of known cost c beside a line: share p(1 − p)c² over the
// variance, swing c, narrowing by the exact mixture. An uncertain impact is an
// assumption too.
func TestSensitivitiesOfRisks(t *testing.T) {
	line := spread.NewTriangular(80, 100, 150)
	m := withRisks(line, spread.NewFixed(60))
	r := simulate(t, m, Settings{Seed: 2, Sensitivities: true})
	if len(r.Sensitivities) != 2 {
		t.Fatalf("sensitivities %v: want the line and the risk, not the fixed impact", r.Sensitivities)
	}
	got := byID(t, r, "risk f")
	F := func(x float64) float64 { return 0.7*line.CDF(x) + 0.3*line.CDF(x-60) }
	narrowing := quantileOf(F, 0, 300, 0.9) - quantileOf(F, 0, 300, 0.1) - (line.Quantile(0.9) - line.Quantile(0.1))
	within(t, "share", got.Share, got.ShareSE, 0.21*3600/(0.21*3600+line.Variance()), 0.002)
	within(t, "swing", got.Swing, got.SwingSE, 60, 1e-9)
	within(t, "narrowing", got.Narrowing, got.NarrowingSE, narrowing, 0.02)
	if !got.Risk || byID(t, r, "a line").Risk {
		t.Errorf("which is the risk? %v", r.Sensitivities)
	}
	impact := spread.NewUniform(20, 100)
	r = simulate(t, withRisks(line, impact), Settings{Seed: 2, Sensitivities: true})
	got = byID(t, r, "f")
	within(t, "swing of an impact", got.Swing, got.SwingSE, 0.3*64, 0.01) // p·(P90 − P10)
	variance := line.Variance() + 0.3*(impact.Variance()+3600) - 0.09*3600
	within(t, "share of an impact", got.Share, got.ShareSE, 0.09*impact.Variance()/variance, 0.002)
}

// tangled is a model with all that is not linear: an input twice in a term, before
// and after a minimum, twice and once among the overall factors, in a risk.
func tangled() pricing.Model {
	m := job(10, "g")
	F := func(offset float64, inputs ...int) []pricing.Factor {
		var out []pricing.Factor
		for _, i := range inputs {
			out = append(out, pricing.Factor{Input: i, Offset: offset})
		}
		return out
	}
	m.Terms = append(m.Terms,
		pricing.Term{Category: "a", Coefficient: 500, Factors: F(0, 2, 3, 3, 4), Least: 520, After: F(1, 5)},
		pricing.Term{Category: "a", Coefficient: 700, Factors: F(0, 6, 6)},
		pricing.Term{Category: "b", Coefficient: 900, Factors: F(0, 4, 7), Least: 950, After: F(1, 7, 8)},
		pricing.Term{Category: "b", Coefficient: 300},
		pricing.Term{Category: "b", Coefficient: -40, Factors: F(-1, 8), Least: 0, After: F(0, 9, 9)},
		pricing.Term{Category: "b", Coefficient: 90, Factors: F(0, 2), Least: 100})
	m.Overall = append(m.Overall, F(0.5, 3, 10, 10)...)
	m.Risks = []pricing.Risk{{ID: "r", Probability: 0.4, Impact: 4}, {ID: "s", Probability: 0.2, Impact: 4}, {ID: "t", Probability: 0.2, Impact: 11}}
	m.Inputs[11].Spread = spread.NewUniform(-4000, 9000)
	m.Inputs[9].Spread = spread.NewFixed(2)
	return m
}

// Reference: the model evaluated again with the input's column replaced.
func TestRespondersAgainstEvaluation(t *testing.T) { checkResponders(t, tangled(), 11) }

// checkResponders compares the levers of a model, of the given number, with its
// evaluation.
func checkResponders(t *testing.T, m pricing.Model, levers int) {
	t.Helper()
	s, err := Settings{Seed: 4, Trials: 200, Correlation: map[string]float64{"g": 0.3}}.withDefaults()
	if err != nil {
		t.Fatal(err)
	}
	p, err := compile(m, s, purpose{})
	if err != nil {
		t.Fatal(err)
	}
	base, _ := p.base()
	d, r := newDrawer(p, s.Trials), newResponder(p, s, base)
	d.begin(0)
	d.draw(0, 200)
	p.evaluate(d.columns, 200)
	c := d.columns
	r.block(c, 0, 200)
	if len(r.levers) != levers {
		t.Fatalf("%d levers, want %d of 12 inputs", len(r.levers), levers)
	}
	again := p.newColumns(200)
	for i := range r.levers {
		l := &r.levers[i]
		fixed := func(a int) []float64 {
			copy(again.values, c.values)
			copy(again.occurs, c.occurs)
			for _, m := range l.members {
				again.values[m.input] = slices.Repeat([]float64{m.fixed[a]}, 200)
			}
			p.evaluate(again, 200)
			return again.total
		}
		for k, want := range fixed(at50) {
			if got := l.narrowed[k]; math.Abs(got-want) > 1e-9*math.Abs(want) {
				t.Fatalf("%s at its median, trial %d: %v, want %v", p.inputs[l.members[0].input].id, k, got, want)
			}
		}
		swing := sum(fixed(at90), 0)
		swing -= sum(fixed(at10), 0)
		if math.Abs(l.swing-swing) > 1e-8*math.Abs(swing)+1e-6 {
			t.Errorf("%s: swing %v, want %v", p.inputs[l.members[0].input].id, l.swing, swing)
		}
	}
}

func TestSensitivitiesAreOnlyMadeWhenAsked(t *testing.T) {
	m, s := job(12, "g"), Settings{Trials: 300, Correlation: map[string]float64{"g": 0.3}}
	without := simulate(t, m, s)
	s.Sensitivities = true
	with := simulate(t, m, s)
	if without.Sensitivities != nil || len(with.Sensitivities) != 14 {
		t.Errorf("%d and %d sensitivities, want none and 14", len(without.Sensitivities), len(with.Sensitivities))
	}
	if without.Mean != with.Mean || without.Percentiles[2] != with.Percentiles[2] {
		t.Error("asking for sensitivities changes the range")
	}
	for _, part := range []string{"first-order index", "P90", "median", "move along", "32 replicates", "4096 trials"} {
		if !strings.Contains(SensitivityMethod, part) {
			t.Errorf("the method does not say %q", part)
		}
	}
	if r := simulate(t, sumModel([]spread.Spread{spread.NewFixed(3)}, ""), Settings{Trials: 16, Sensitivities: true}); len(r.Sensitivities) != 0 {
		t.Errorf("sensitivities of known numbers: %v", r.Sensitivities)
	}
}

// Property: the few trials of a small run give finite, bounded measures.
func TestSensitivitiesOfFewTrials(t *testing.T) {
	for _, trials := range []int{16, 17, 64, 257} {
		r := simulate(t, tangled(), Settings{Seed: 5, Trials: trials, Sensitivities: true, Correlation: map[string]float64{"g": 0.3}})
		for _, s := range r.Sensitivities {
			if !(0 <= s.Share && s.Share <= 1) || !isFinite(s.Swing) || !isFinite(s.Narrowing) || !(s.ShareSE >= 0) || !isFinite(s.NarrowingSE) {
				t.Errorf("%d trials: %+v", trials, s)
			}
		}
	}
}
