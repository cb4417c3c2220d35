package ranges

import (
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// streamed puts inputs of a model into one stream.
func streamed(m pricing.Model, stream string, inputs ...int) pricing.Model {
	m.Inputs = slices.Clone(m.Inputs)
	for _, i := range inputs {
		m.Inputs[i].Stream = stream
	}
	return m
}

// z90 is the 90 % point of the standard normal distribution (any handbook of
// statistics).
const z90 = 1.2815515655446004

// ranksOf returns the rank of each value.
func ranksOf(x []float64) []int {
	order, ranks := make([]int, len(x)), make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int {
		if x[a] < x[b] {
			return -1
		}
		return 1
	})
	for r, i := range order {
		ranks[i] = r
	}
	return ranks
}

// Inputs of one stream have the same ranks in every trial, with a group, without and
// in a matrix; another stream has others, of the rank correlation asked (Spearman's
// 1 − 6 Σ d²/n³ without ties; its standard error is below 1/√8192).
func TestOneStreamIsOneDraw(t *testing.T) {
	spreads := []spread.Spread{spread.NewLognormal(50, 90), spread.NewTriangular(1, 2, 5), spread.NewPERT(-3, 0, 9), spread.NewUniform(0, 1)}
	for name, c := range map[string]struct {
		group string
		s     Settings
		rho   float64
	}{
		"alone":  {"", Settings{Seed: 5}, 0},
		"group":  {"g", Settings{Seed: 5, Correlation: map[string]float64{"g": 0.5}}, 0.5},
		"matrix": {"", Settings{Seed: 5, Matrix: symmetric([]string{"line 003", "growth"}, nil, []float64{0.6})}, 0.6},
	} {
		r := prepare(t, streamed(sumModel(spreads, c.group), "growth", 0, 1, 2), c.s)
		want := ranksOf(r.values[0])
		for i := 1; i < 4; i++ {
			if same := slices.Equal(want, ranksOf(r.values[i])); same != (i < 3) {
				t.Errorf("%s: input %d has the ranks of input 0: %v", name, i, same)
			}
		}
		var squares float64
		for k, rank := range ranksOf(r.values[3]) {
			squares += float64((rank - want[k]) * (rank - want[k]))
		}
		n := float64(len(want))
		within(t, name+": rank correlation with the other stream", 1-6*squares/(n*n*n-n), 1/math.Sqrt(n), c.rho, 0)
	}
}

// A stream that is named as the id says the same as none: no draw moves.
func TestAStreamOfItsOwnMovesNothing(t *testing.T) {
	m := tangled()
	s := Settings{Seed: 8, Trials: 64, Correlation: map[string]float64{"g": 0.4}, Sensitivities: true}
	want := simulate(t, m, s)
	for i := range m.Inputs {
		m = streamed(m, m.Inputs[i].ID, i)
	}
	if d := cmp.Diff(want, simulate(t, m, s)); d != "" {
		t.Error(d)
	}
}

// Closed form: the percentiles of comonotonic numbers add (Dhaene, Denuit, Goovaerts,
// Kaas, Vyncke 2002, Insurance: Mathematics and Economics 31, from memory): of a sum
// of lognormals Σ aᵢ·exp(σᵢ·z). Variance: Σ Σ aᵢaⱼ·exp((σᵢ² + σⱼ²)/2)·(exp(σᵢσⱼ) − 1).
func TestComonotonicLognormals(t *testing.T) {
	a, sigma := []float64{100, 250}, []float64{0.3, 0.12}
	m := sumModel([]spread.Spread{spread.LogDeviation(sigma[0]).Scale(a[0]), spread.LogDeviation(sigma[1]).Scale(a[1])}, "g")
	s := Settings{Seed: 21, Correlation: map[string]float64{"g": 0.3}, Sensitivities: true}
	r := simulate(t, streamed(m, "growth", 0, 1), s)
	at := func(z float64) float64 { return a[0]*math.Exp(sigma[0]*z) + a[1]*math.Exp(sigma[1]*z) }
	for i, z := range []float64{-z90, 0, 0.8416212335729143, z90} {
		within(t, "percentile", r.Percentiles[i].Value, r.Percentiles[i].SE, at(z), 1e-4)
	}
	var variance float64
	for i := range a {
		for j := range a {
			variance += a[i] * a[j] * math.Exp((sigma[i]*sigma[i]+sigma[j]*sigma[j])/2) * (math.Exp(sigma[i]*sigma[j]) - 1)
		}
	}
	within(t, "sd", r.SD, r.SD*math.Sqrt(5.0/(4*131072)), math.Sqrt(variance), 0)
	if apart := simulate(t, m, s); !(apart.SD < 0.95*r.SD) {
		t.Errorf("apart the deviation is %v, as one belief %v", apart.SD, r.SD)
	}
	if len(r.Sensitivities) != 1 {
		t.Fatalf("sensitivities %v: want the stream alone", r.Sensitivities)
	}
	got := byID(t, r, "growth")
	within(t, "swing", got.Swing, got.SwingSE, at(z90)-at(-z90), 1e-6)
	within(t, "share", got.Share, got.ShareSE, 1, 1e-3)
	within(t, "narrowing", got.Narrowing, got.NarrowingSE, at(z90)-at(-z90), 0.02)
	if len(r.Warnings) != 0 {
		t.Errorf("one belief is not uncorrelated with itself: %v", r.Warnings)
	}
}

// Beside an independent line the share of a stream is its variance over the sum's,
// and fixing it leaves that line: the narrowing by convolution.
func TestAStreamBesideALine(t *testing.T) {
	index, line := spread.NewTriangular(80, 100, 150), spread.NewPERT(40, 60, 110)
	r := simulate(t, streamed(sumModel([]spread.Spread{index, line, index.Scale(0.5)}, ""), "growth", 0, 2), Settings{Seed: 7, Sensitivities: true})
	both := index.Scale(1.5) // index and half of it, as one
	got := byID(t, r, "growth")
	within(t, "share", got.Share, got.ShareSE, both.Variance()/(both.Variance()+line.Variance()), 0.002)
	within(t, "swing", got.Swing, got.SwingSE, both.Quantile(0.9)-both.Quantile(0.1), 1e-6)
	whole := sumOf([]spread.Spread{both, line}, 0, 0.25)
	narrowing := whole.quantile(0.9) - whole.quantile(0.1) - (line.Quantile(0.9) - line.Quantile(0.1))
	within(t, "narrowing", got.Narrowing, got.NarrowingSE, narrowing, 4e-3)
	if len(r.Sensitivities) != 2 || len(r.Moments) != 4 {
		t.Errorf("%d sensitivities and %d moment checks, want 2 and 4", len(r.Sensitivities), len(r.Moments))
	}
}

// A group counts beliefs: two figures of one are not uncorrelated with each other, nor
// do they correlate the model.
func TestWarningsCountBeliefs(t *testing.T) {
	for _, c := range []struct {
		name     string
		rho      float64
		group    string // of the third line
		warnings int
	}{{"one belief, ρ = 0", 0, "fixed", 0}, {"beside a line of the group, ρ = 0", 0, "g", 1}, {"beside a line of none", 0.3, "", 1}, {"beside a line of the group", 0.3, "g", 0}} {
		m := streamed(sumModel(threeLines, "g"), "growth", 0, 1)
		if m.Inputs[2].Group = c.group; c.group == "fixed" {
			m.Inputs[2] = pricing.Input{ID: "line 002", Spread: spread.NewFixed(3)}
		}
		r := simulate(t, m, Settings{Trials: 64, Correlation: map[string]float64{"g": c.rho}})
		if len(r.Warnings) != c.warnings || c.warnings == 1 && !strings.Contains(r.Warnings[0].Message, " 2 spreads") {
			t.Errorf("%s: warnings %v, want %d", c.name, r.Warnings, c.warnings)
		}
	}
}

// Reference: the model evaluated again with all columns of the stream replaced; the
// stream stands twice in products, before and after minimums, among the overall
// factors and as two impacts.
func TestRespondersOfAStreamAgainstEvaluation(t *testing.T) {
	checkResponders(t, streamed(tangled(), "growth", 4, 5, 8, 11), 8)
	checkResponders(t, streamed(tangled(), "growth", 2, 3, 7, 9, 10), 8)
}

// Closed form: with one normal number z behind both, E[X^a·Y^b] = exp((as + bq)²/2).
func TestExpectationOfAStream(t *testing.T) {
	const s, q = 0.25, 0.4
	X, Y := pricing.Factor{Input: 0}, pricing.Factor{Input: 1}
	for name, c := range map[string]struct {
		factors []pricing.Factor
		want    float64
	}{
		"pair":    {[]pricing.Factor{X, Y}, math.Exp((s + q) * (s + q) / 2)},
		"square":  {[]pricing.Factor{X, Y, X}, math.Exp((2*s + q) * (2*s + q) / 2)},
		"offset":  {[]pricing.Factor{{Input: 0, Offset: 1}, Y}, math.Exp(q*q/2) + math.Exp((s+q)*(s+q)/2)},
		"outside": {[]pricing.Factor{X, {Input: 2}, Y}, 3 * math.Exp((s+q)*(s+q)/2)},
	} {
		for _, group := range []string{"", "g"} {
			for _, mx := range []*Matrix{nil, symmetric([]string{"growth", "z"}, nil, []float64{0.5})} {
				m := pricing.Model{Inputs: []pricing.Input{
					{ID: "x", Spread: spread.LogDeviation(s), Group: group, Stream: "growth"}, {ID: "y", Spread: spread.LogDeviation(q), Group: group, Stream: "growth"},
					{ID: "z", Spread: spread.NewFixed(3)},
				}, Terms: []pricing.Term{{Coefficient: 1, Factors: c.factors}}}
				got := expected(t, m, Settings{Correlation: map[string]float64{"g": 0.8}, Matrix: mx})
				if math.Abs(got/c.want-1) > 2e-9 {
					t.Errorf("%s, group %q, matrix %v: %v, want %v", name, group, mx != nil, got, c.want)
				}
			}
		}
	}
}

// Closed form: two streams of one group, X and Y of the first and W of the second:
// E[XYW] = exp(((s + q)² + w² + 2r(s + q)w)/2).
func TestExpectationOfTwoStreamsOfAGroup(t *testing.T) {
	const s, q, w, rho = 0.2, 0.3, 0.25, 0.6
	r := LatentCorrelation(rho)
	m := pricing.Model{Inputs: []pricing.Input{
		{ID: "w", Spread: spread.LogDeviation(w), Group: "g"},
		{ID: "x", Spread: spread.LogDeviation(s), Group: "g", Stream: "growth"}, {ID: "y", Spread: spread.LogDeviation(q), Group: "g", Stream: "growth"},
	}, Terms: []pricing.Term{{Coefficient: 1, Factors: []pricing.Factor{{Input: 1}, {Input: 0}, {Input: 2}}}}}
	got := expected(t, m, Settings{Correlation: map[string]float64{"g": rho}})
	if want := math.Exp(((s+q)*(s+q) + w*w + 2*r*(s+q)*w) / 2); math.Abs(got/want-1) > 2e-9 {
		t.Errorf("got %v, want %v", got, want)
	}
}

func TestAStreamIsOfOneGroup(t *testing.T) {
	m := streamed(sumModel(threeLines, "g"), "growth", 0, 2)
	m.Inputs[2].Group = ""
	_, err := Simulate(t.Context(), m, Settings{Correlation: map[string]float64{"g": 0.3}}, nil)
	if err == nil || !strings.Contains(err.Error(), `model.inputs[2] "line 002" group: found ""; accepted: "g"`) || !strings.Contains(err.Error(), `stream "growth"`) {
		t.Errorf("error %v", err)
	}
}

// A stream cancels between models though its inputs have other ids: other dates.
func TestCompareAcrossAStream(t *testing.T) {
	s := Settings{Seed: 3, Trials: 256, Matrix: symmetric([]string{"other", "growth"}, nil, []float64{0.4})}
	u := spread.NewUniform(0, 1)
	a, b := streamed(lines([]string{"2027", "other"}, u, u), "growth", 0), streamed(lines([]string{"2028", "other"}, u, u), "growth", 0)
	for _, s := range []Settings{{Seed: 3, Trials: 256}, s} {
		c := compare(t, s, a, b)
		if d := c.Differences[0][1]; d.Percentiles[0].Value != 0 || d.Percentiles[3].Value != 0 {
			t.Errorf("difference %v, want none", d)
		}
	}
}

// Reference: the changed model prepared afresh. The others of the stream stay.
func TestPreviewOfAStream(t *testing.T) {
	m := streamed(tangled(), "growth", 4, 5, 8)
	change := Change{m.Inputs[5].ID, spread.NewPERT(0.7, 1, 1.9)}
	got := preview(t, prepare(t, m, previewSettings), change)
	m.Inputs[5].Spread = change.Spread
	if want := preview(t, prepare(t, m, previewSettings)); !near(want, got) {
		t.Error(cmp.Diff(want, got))
	}
}
