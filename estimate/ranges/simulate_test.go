package ranges

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"runtime"
	"slices"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// sumModel is a model whose total is the sum of the spreads, one line each.
func sumModel(spreads []spread.Spread, group string) pricing.Model {
	var m pricing.Model
	for i, s := range spreads {
		m.Inputs = append(m.Inputs, pricing.Input{ID: fmt.Sprintf("line %03d", i), Spread: s, Group: group})
		m.Terms = append(m.Terms, pricing.Term{Category: fmt.Sprintf("category %d", i%3), Coefficient: 1, Factors: []pricing.Factor{{Input: i}}})
	}
	return m
}

func simulate(t testing.TB, m pricing.Model, s Settings) Result {
	t.Helper()
	r, err := Simulate(context.Background(), m, s, nil)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

var threeLines = []spread.Spread{spread.NewTriangular(80, 100, 150), spread.NewPERT(40, 60, 110), spread.NewLognormal(50, 90)}

// Reference: convolution on a lattice, conditional on the common factor.
func TestThreeLinesAgainstConvolution(t *testing.T) {
	for _, rho := range []float64{0, 0.8} {
		want := sumOf(threeLines, LatentCorrelation(rho), 0.25)
		s := Settings{Seed: 2026, Correlation: map[string]float64{"g": rho}, Percentiles: []float64{0.05, 0.1, 0.5, 0.8, 0.9, 0.95}}
		got := simulate(t, sumModel(threeLines, "g"), s)
		const slack = 2e-3 // of the lattice, in 230
		if math.Abs(got.Mean-want.mean) > 4*got.MeanSE+slack {
			t.Errorf("ρ = %v: mean %v ± %v, want %v", rho, got.Mean, got.MeanSE, want.mean)
		}
		if ratio := got.SD * got.SD / want.variance; math.Abs(ratio-1) > 4*math.Sqrt(3.0/131072) {
			t.Errorf("ρ = %v: variance %v, want %v", rho, got.SD*got.SD, want.variance)
		}
		for _, p := range got.Percentiles {
			if w := want.quantile(p.P); math.Abs(p.Value-w) > 4*p.SE+slack {
				t.Errorf("ρ = %v: P%.0f %v ± %v, want %v", rho, 100*p.P, p.Value, p.SE, w)
			}
		}
	}
}

// statsLine is a line of testdata/stats.json.
type statsLine struct {
	Dist                     string
	Min, Mode, Max, Mean, SD float64
}

// spread returns the line's spread; lognormal by P10 and P90 from mean and
// standard deviation: σ² = ln(1 + sd²/mean²), median = mean·exp(−σ²/2).
func (l statsLine) spread() spread.Spread {
	switch l.Dist {
	case "uniform":
		return spread.NewUniform(l.Min, l.Max)
	case "triangular":
		return spread.NewTriangular(l.Min, l.Mode, l.Max)
	case "pert":
		return spread.NewPERT(l.Min, l.Mode, l.Max)
	case "lognormal":
		variance := math.Log1p(l.SD * l.SD / l.Mean / l.Mean)
		return spread.LogDeviation(math.Sqrt(variance)).Scale(l.Mean * math.Exp(-variance/2))
	}
	return spread.Spread{}
}

// Source: testdata/stats.json, see testdata/README.md. Four combined standard errors.
func TestAgainstStats(t *testing.T) {
	text, err := os.ReadFile("testdata/stats.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Cases []struct {
			ID          string
			Lines       []statsLine
			Correlation struct {
				Kind string
				Rho  float64
			}
			Out map[string]float64
		}
	}
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Cases) != 10 {
		t.Fatalf("%d cases, want 10", len(file.Cases))
	}
	for _, c := range file.Cases {
		if c.Correlation.Rho != 0 && c.Correlation.Kind != "rank" {
			t.Fatalf("%s: correlation of kind %q", c.ID, c.Correlation.Kind)
		}
		var spreads []spread.Spread
		for _, l := range c.Lines {
			spreads = append(spreads, l.spread())
		}
		got := simulate(t, sumModel(spreads, "g"), Settings{Seed: 77, Correlation: map[string]float64{"g": c.Correlation.Rho}})
		compare := func(what string, value, se, want, wantSE float64) {
			if z := (value - want) / math.Hypot(se, wantSE); !(math.Abs(z) <= 4) {
				t.Errorf("%s %s: %v ± %v, want %v ± %v (%.1f)", c.ID, what, value, se, want, wantSE, z)
			}
		}
		compare("mean", got.Mean, got.MeanSE, c.Out["mean"], c.Out["mean_se"])
		// The error of a standard deviation falls as 1/√n; theirs is of 4,000,000 trials.
		compare("sd", got.SD, c.Out["sd_se"]*math.Sqrt(4e6/131072), c.Out["sd"], c.Out["sd_se"])
		for _, p := range got.Percentiles {
			name := fmt.Sprintf("P%.0f", 100*p.P)
			compare(name, p.Value, p.SE, c.Out[name], c.Out[name+"_se"])
		}
	}
}

// Source: ten lines of 100,000 with triangular factors 0.8/1/1.5. With one shared
// factor the percentiles are ten times the triangle's: 0.8 + √(0.14·P) below the
// mode and 1.5 − √(0.35·(1−P)) above. Independent: by convolution.
func TestTenLines(t *testing.T) {
	tri := spread.NewTriangular(0.8, 1, 1.5)
	var shared pricing.Model
	shared.Inputs = []pricing.Input{{ID: "all", Spread: tri}}
	var lines []spread.Spread
	for i := range 10 {
		shared.Terms = append(shared.Terms, pricing.Term{Category: fmt.Sprint(i), Coefficient: 100, Factors: []pricing.Factor{{}}})
		lines = append(lines, tri.Scale(100))
	}
	apart := sumModel(lines, "")
	exact := sumOf(lines, 0, 0.5)
	for _, c := range []struct {
		name string
		m    pricing.Model
		want [4]float64 // thousand, P10, P50, P80, P90
	}{
		{"shared", shared, [4]float64{918.3, 1081.7, 1235.4, 1312.9}},
		{"independent", apart, [4]float64{exact.quantile(0.1), exact.quantile(0.5), exact.quantile(0.8), exact.quantile(0.9)}},
	} {
		r := simulate(t, c.m, Settings{Seed: 4})
		for i, p := range r.Percentiles {
			if math.Abs(p.Value-c.want[i]) > 4*p.SE+0.05 {
				t.Errorf("%s: P%.0f = %.2f ± %.2f, want %.2f", c.name, 100*p.P, p.Value, p.SE, c.want[i])
			}
		}
		if r.Base != 1000 {
			t.Errorf("%s: base %v", c.name, r.Base)
		}
	}
	for i, want := range []float64{1041, 1099, 1139, 1161} { // rounded values, from the project's brief
		if got := []float64{0.1, 0.5, 0.8, 0.9}[i]; math.Abs(exact.quantile(got)-want) > 0.6 {
			t.Errorf("convolution: P%.0f = %.2f, want %v", 100*got, exact.quantile(got), want)
		}
	}
	// The base lies at the mode, (1 − 0.8)/(1.5 − 0.8) = 2/7 of the triangle.
	if r := simulate(t, shared, Settings{Seed: 4}); math.Abs(r.BasePercentile-2.0/7) > 0.002 {
		t.Errorf("base percentile %v, want 0.2857", r.BasePercentile)
	}
}

// Source: a program of NumPy's PCG64 and SciPy's distributions, seed 1, 1,000,000
// trials by plain sampling with a Gaussian copula; its standard errors are
// σ/√n for the mean, σ/√(2n) for the deviation of a near-normal sum, and
// √(p(1−p)/n)/f with the normal density f for percentiles. Ours at 131,072 trials.
func TestPeerCase(t *testing.T) {
	const n, mean, sd = 1e6, 18376419.3, 1217245.9
	density := func(z float64) float64 { return math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) / sd }
	for _, dense := range []bool{false, true} {
		m, s := peerModel("g"), peerSettings(dense)
		if dense {
			m = peerModel("")
		}
		s.Replicates, s.Trials = 32, 4096
		r := simulate(t, m, s)
		within(t, "mean", r.Mean, math.Hypot(r.MeanSE, sd/math.Sqrt(n)), mean, 0)
		within(t, "sd", r.SD, sd*math.Sqrt(1/(2*n)+1.0/(2*131072)), sd, 0)
		for i, c := range []struct{ z, want float64 }{{-1.28155, 16827053.4}, {0, 18336415.6}, {0.841621, 19411981.1}, {1.28155, 19980602.6}} {
			p := r.Percentiles[i]
			within(t, fmt.Sprintf("dense %v P%.0f", dense, 100*p.P), p.Value, math.Hypot(p.SE, math.Sqrt(p.P*(1-p.P)/n)/density(c.z)), c.want, 0)
		}
	}
}

func TestSameBitsOnAnyNumberOfCores(t *testing.T) {
	m := tangled()
	s := Settings{Seed: 8, Trials: 700, Correlation: map[string]float64{"g": 0.4}, Sensitivities: true,
		Matrix: symmetric([]string{m.Inputs[4].ID, m.Inputs[7].ID}, nil, []float64{-0.3})}
	old := runtime.GOMAXPROCS(1)
	defer runtime.GOMAXPROCS(old)
	want := simulate(t, m, s)
	for _, n := range []int{2, 7} {
		runtime.GOMAXPROCS(n)
		if d := cmp.Diff(want, simulate(t, m, s)); d != "" {
			t.Errorf("GOMAXPROCS %d (-1 +%d):\n%s", n, n, d)
		}
	}
	s.Workers = 3
	if d := cmp.Diff(want, simulate(t, m, s)); d != "" {
		t.Errorf("3 workers:\n%s", d)
	}
}

// The printed digits, recorded by this test on amd64 v1: another build that fuses
// multiplication and addition (GOAMD64=v3) must print the same.
func TestPrintedDigits(t *testing.T) {
	r := simulate(t, job(23, "g"), Settings{Seed: 8, Trials: 256, Correlation: map[string]float64{"g": 0.4}})
	got := fmt.Sprintf("%.12g %.12g %.12g %.12g %.12g %.12g", r.Mean, r.SD, r.Percentiles[0].Value, r.Percentiles[2].Value, r.Curve[50], r.Categories[3].P90)
	if want := "29308.0345458 4841.08570165 23439.7653662 33215.2942075 28909.2888962 2885.41701468"; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

// The same for what the first does not reach: a matrix, repaired, minimum charges,
// risks and sensitivities.
func TestPrintedDigitsOfTheRest(t *testing.T) {
	m := tangled()
	mx := symmetric([]string{m.Inputs[4].ID, m.Inputs[7].ID, m.Inputs[8].ID}, nil, []float64{0.9}, []float64{0.9, 0.58})
	r := simulate(t, m, Settings{Seed: 8, Trials: 256, Correlation: map[string]float64{"g": 0.4}, Matrix: mx, Sensitivities: true})
	s := r.Sensitivities[1]
	got := fmt.Sprintf("%.12g %.12g %.12g %.12g %.12g %s %.12g %.12g %.12g %.12g", r.Mean, r.SD, r.Percentiles[2].Value, r.Risks[2].Share, r.Categories[3].Share, s.ID, s.Share, s.Swing, s.Narrowing, s.NarrowingSE)
	if want := "13580859.5782 19720212.5683 31809150.4669 3.57433266549e-05 4.59628962287e-05 rate 00008 0.267822377219 6031985.36799 4770745.419 368629.951328"; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

// A standard error is honest when (value − truth)/SE, but for the widening, behaves
// like Student's t with 31 degrees of freedom: 95 % within 1.96, mean square 31/29
// of the unwidened. Truth by convolution. Over 200 seeds 93 to 97 % of the
// percentiles lie within 1.96 (the project's brief).
func TestStandardErrorsAreHonest(t *testing.T) {
	const seeds = 200
	truth := sumOf(threeLines, LatentCorrelation(0.5), 0.25)
	names := []string{"P10", "P50", "P80", "P90", "mean"}
	inside, squares := make([]int, len(names)), make([]float64, len(names))
	for seed := range seeds {
		r := simulate(t, sumModel(threeLines, "g"), Settings{Seed: uint64(1000 + seed), Trials: 1024, Correlation: map[string]float64{"g": 0.5}})
		z := []float64{0, 0, 0, 0, (r.Mean - truth.mean) / r.MeanSE}
		for i, p := range r.Percentiles {
			z[i] = (p.Value - truth.quantile(p.P)) / p.SE
		}
		for i, v := range z {
			squares[i] += v * v / seeds * 29 / 31 * widening(32) * widening(32)
			if math.Abs(v) < 1.96 {
				inside[i]++
			}
		}
	}
	percentiles := 0
	for i, name := range names {
		// 190 of 200 expected, standard deviation 3.1; mean square 1, deviation 0.1.
		if inside[i] < 176 || inside[i] == seeds {
			t.Errorf("%s: %d of %d within 1.96", name, inside[i], seeds)
		}
		if math.Abs(squares[i]-1) > 0.4 {
			t.Errorf("%s: mean square of the standardised error %.2f, want 1", name, squares[i])
		}
		if name != "mean" {
			percentiles += inside[i]
		}
	}
	t.Logf("percentiles within 1.96 standard errors: %.2f %%", float64(percentiles)/(4*seeds)*100)
	if share := float64(percentiles) / (4 * seeds); !(0.93 <= share && share <= 0.97) {
		t.Errorf("%.1f %% of the percentiles within 1.96 standard errors, want 93 to 97", 100*share)
	}
}

// Source: table of Student's t, two-sided 5 %: 12.706, 2.0930, 2.0395 for 1, 19, 31
// degrees of freedom (any handbook of statistics).
func TestWidening(t *testing.T) {
	for n, want := range map[int]float64{2: 12.706, 20: 2.0930, 32: 2.0395} {
		if got := widening(n) * 1.959964; math.Abs(got/want-1) > 5e-5 {
			t.Errorf("%d replicates: t = %v, want %v", n, got, want)
		}
	}
}

// The claim under which the sample is stratified: its standard errors are well
// below those of plain sampling, σ/√n for the mean.
func TestStratificationHelps(t *testing.T) {
	r := simulate(t, job(30, "g"), Settings{Seed: 1, Trials: 1024, Correlation: map[string]float64{"g": 0.3}})
	if plain := r.SD / math.Sqrt(32*1024); r.MeanSE > 0.3*plain {
		t.Errorf("standard error of the mean %v, plain sampling %v", r.MeanSE, plain)
	}
}

func TestCategoriesAddUp(t *testing.T) {
	r := simulate(t, job(40, ""), Settings{Seed: 6, Trials: 300})
	var base, mean float64
	for _, c := range r.Categories {
		base += c.Base
		mean += c.Mean
		if !(c.P10 < c.P50 && c.P50 < c.P90 && c.P10 < c.Mean && c.Mean < c.P90) {
			t.Errorf("%+v is out of order", c)
		}
	}
	if len(r.Categories) != 10 || math.Abs(base-r.Base) > 1e-9*base || math.Abs(mean-r.Mean) > 1e-9*mean {
		t.Errorf("%d categories, base %v of %v, mean %v of %v", len(r.Categories), base, r.Base, mean, r.Mean)
	}
	if !slices.IsSorted(r.Curve) || len(r.Curve) != 101 {
		t.Errorf("curve of %d points, sorted: %v", len(r.Curve), slices.IsSorted(r.Curve))
	}
	for _, p := range r.Percentiles {
		if got := r.Curve[int(math.Round(100*p.P))]; got != p.Value {
			t.Errorf("curve at P%.0f = %v, want %v", 100*p.P, got, p.Value)
		}
	}
}

// Reference: one category holds the whole total, whose percentiles are found by
// sorting instead of selection.
func TestOneCategoryIsTheTotal(t *testing.T) {
	m := job(12, "")
	for i := range m.Terms {
		m.Terms[i].Category = "fabrication"
	}
	r := simulate(t, m, Settings{Seed: 6, Trials: 300, Percentiles: []float64{0.1, 0.5, 0.9}})
	got := r.Categories[0]
	want := CategoryRange{"fabrication", r.Base, got.Mean, r.Percentiles[0].Value, r.Percentiles[1].Value, r.Percentiles[2].Value, 1}
	if got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
}

func TestEverythingKnown(t *testing.T) {
	r := simulate(t, sumModel([]spread.Spread{spread.NewFixed(0.1), spread.NewTriangular(0.2, 0.2, 0.2), spread.NewFixed(0.7)}, ""), Settings{Trials: 100})
	if r.SD > 1e-15 || r.BasePercentile != 1 || r.MeanSE > 1e-15 || r.Percentiles[2].Value != r.Base || r.Percentiles[2].SE != 0 {
		t.Errorf("range of known numbers: %+v", r)
	}
	if len(r.Warnings) != 0 {
		t.Errorf("warnings %v", r.Warnings)
	}
}

func TestProgressCountsTrials(t *testing.T) {
	var seen []int
	_, err := Simulate(context.Background(), job(3, ""), Settings{Trials: 50, Replicates: 40}, func(done, total int) {
		if total != 2000 {
			t.Errorf("total %d, want 2000", total)
		}
		seen = append(seen, done)
	})
	if err != nil || len(seen) != 40 || seen[0] != 50 || seen[39] != 2000 || !slices.IsSorted(seen) {
		t.Errorf("progress %v, error %v", seen, err)
	}
}

func TestCancelReturnsPromptly(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	var ended time.Time
	_, err := Simulate(ctx, job(200, "g"), Settings{Trials: 1 << 13, Replicates: 512, Correlation: map[string]float64{"g": 0.3}, Workers: 2}, func(int, int) {
		if ended.IsZero() {
			ended = time.Now()
			cancel()
		}
	})
	if !errors.Is(err, context.Canceled) {
		t.Fatalf("error %v, want context.Canceled", err)
	}
	if late := time.Since(ended); late > 2*time.Second {
		t.Errorf("returned %v after the cancel", late)
	}
	if _, err := Simulate(ctx, job(2, ""), Settings{}, nil); !errors.Is(err, context.Canceled) {
		t.Errorf("already cancelled: error %v", err)
	}
}
