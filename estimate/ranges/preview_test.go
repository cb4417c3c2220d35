package ranges

import (
	"context"
	"errors"
	"math"
	"slices"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

func prepare(t testing.TB, m pricing.Model, s Settings) *Prepared {
	t.Helper()
	r, err := Prepare(context.Background(), m, s)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func preview(t testing.TB, r *Prepared, changes ...Change) Preview {
	t.Helper()
	v, err := r.Preview(changes)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// near compares previews up to the rounding of sums.
func near(a, b Preview) bool {
	close := func(x, y float64) bool { return math.Abs(x-y) <= 1e-11*(math.Abs(a.Mean)+math.Abs(x)) }
	for i := range a.Percentiles {
		if !close(a.Percentiles[i].Value, b.Percentiles[i].Value) || !close(a.Percentiles[i].SE, b.Percentiles[i].SE) {
			return false
		}
	}
	return close(a.Base, b.Base) && close(a.Mean, b.Mean) && close(a.SD, b.SD) && close(a.MeanSE, b.MeanSE) && math.Abs(a.BasePercentile-b.BasePercentile) < 1e-3
}

var previewSettings = Settings{Seed: 9, Correlation: map[string]float64{"g": 0.3, "h": 0.5}, Percentiles: []float64{0.1, 0.5, 0.7, 0.9}}

// Reference: the changed model prepared afresh has the same draws, so the same
// range. Changes: rates, the factor that all terms have, the overall factor, a
// risk's impact, one to a known number, all at once; and from a known number.
func TestPreviewAgainstFreshModel(t *testing.T) {
	m := tangled()
	r := prepare(t, m, previewSettings)
	id := func(i int) string { return m.Inputs[i].ID }
	var all []Change
	for i := range m.Inputs {
		all = append(all, Change{id(i), spread.NewPERT(0.7, 1, 1.5+float64(i)/10)})
	}
	for name, changes := range map[string][]Change{
		"none": nil, "rate": {{id(7), spread.NewUniform(0.5, 2)}}, "growth": {{id(0), spread.NewTriangular(0, 0.1, 0.4)}},
		"systemic": {{id(1), spread.LogDeviation(0.25)}}, "impact": {{id(11), spread.NewUniform(0, 20000)}}, "known": {{id(3), spread.NewFixed(1.1)}},
		"no longer known": {{id(9), spread.NewTriangular(1, 2, 5)}}, "all": all, "backwards": {all[5], all[2]},
	} {
		changed := m
		changed.Inputs = slices.Clone(m.Inputs)
		for _, c := range changes {
			for i := range changed.Inputs {
				if changed.Inputs[i].ID == c.ID {
					changed.Inputs[i].Spread = c.Spread
				}
			}
		}
		got, want := preview(t, r, changes...), preview(t, prepare(t, changed, previewSettings))
		if !near(want, got) {
			t.Errorf("%s (-fresh +preview):\n%s", name, cmp.Diff(want, got))
		}
		if moved := got.Mean != preview(t, r).Mean; moved != (changes != nil) {
			t.Errorf("%s: moved %v", name, moved)
		}
	}
}

// The preview estimates what Simulate does, within four combined standard errors.
func TestPreviewAgainstSimulate(t *testing.T) {
	m := realistic(30, 60)
	change := Change{"rate 00003", spread.NewPERT(0.9, 1.4, 2)}
	got := preview(t, prepare(t, m, previewSettings), change)
	m.Inputs = slices.Clone(m.Inputs)
	m.Inputs[5].Spread = change.Spread
	want := simulate(t, m, previewSettings)
	if got.Base != want.Base {
		t.Errorf("base %v, want %v", got.Base, want.Base)
	}
	within(t, "mean", got.Mean, math.Hypot(got.MeanSE, want.MeanSE), want.Mean, 0)
	within(t, "sd", got.SD, want.SD/math.Sqrt(2*8192), want.SD, 0)
	within(t, "base percentile", got.BasePercentile, 0.5/math.Sqrt(8192), want.BasePercentile, 0)
	for i, p := range got.Percentiles {
		if p.P != want.Percentiles[i].P {
			t.Errorf("percentile %v, want %v", p.P, want.Percentiles[i].P)
		}
		within(t, "percentile", p.Value, math.Hypot(p.SE, want.Percentiles[i].SE), want.Percentiles[i].Value, 0)
	}
}

// Under the race detector: previews from many goroutines, each with the answer of
// one alone.
func TestPreviewsAtOnce(t *testing.T) {
	r := prepare(t, realistic(20, 60), previewSettings)
	changes := make([]Change, 6)
	want := make([]Preview, len(changes))
	for i := range changes {
		changes[i] = Change{r.p.inputs[2+i].id, spread.NewTriangular(0.5, 1, 2+float64(i))}
		want[i] = preview(t, r, changes[i])
	}
	var finished sync.WaitGroup
	for i := range changes {
		finished.Go(func() {
			if d := cmp.Diff(want[i], preview(t, r, changes[i])); d != "" {
				t.Errorf("change %d (-alone +at once):\n%s", i, d)
			}
		})
	}
	finished.Wait()
	s := previewSettings
	s.Workers = 1
	if d := cmp.Diff(want[0], preview(t, prepare(t, realistic(20, 60), s), changes[0])); d != "" {
		t.Errorf("one worker:\n%s", d)
	}
}

func TestPreviewWithMatrix(t *testing.T) {
	s := previewSettings
	s.Matrix = symmetric([]string{"rate 00003", "a growth"}, nil, []float64{0.6})
	m := job(5, "g")
	change := Change{"a growth", spread.NewUniform(0, 1)}
	got := preview(t, prepare(t, m, s), change)
	m.Inputs = slices.Clone(m.Inputs)
	m.Inputs[0].Spread = change.Spread
	if want := preview(t, prepare(t, m, s)); !near(want, got) {
		t.Error(cmp.Diff(want, got))
	}
}

func TestPreviewRefuses(t *testing.T) {
	r := prepare(t, job(5, "g"), previewSettings)
	fine := spread.NewUniform(1, 2)
	for name, c := range map[string]struct {
		changes []Change
		part    string
	}{
		"unknown":  {[]Change{{"rate 00001", fine}, {"zinc", fine}}, `changes[1] "zinc": found an unknown id`},
		"twice":    {[]Change{{"rate 00001", fine}, {"rate 00001", fine}}, `changes[1] "rate 00001": found the id twice`},
		"spread":   {[]Change{{"rate 00001", spread.NewUniform(2, 1)}}, `changes[0] "rate 00001": spread: high`},
		"overflow": {[]Change{{"rate 00001", spread.NewFixed(1e100)}, {"rate 00002", fine}, {"a growth", spread.NewFixed(1e100)}, {"b systemic", spread.NewFixed(1e100)}, {"rate 00003", spread.NewFixed(-1e100)}}, "finite"},
	} {
		if _, err := r.Preview(c.changes); err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.part)
		}
	}
	var e *spread.Error
	if _, err := r.Preview([]Change{{"rate 00001", spread.NewUniform(2, 1)}}); !errors.As(err, &e) {
		t.Errorf("error %v does not wrap the spread's", err)
	}
	if _, err := Prepare(t.Context(), pricing.Model{}, Settings{}); err == nil || !strings.Contains(err.Error(), "model.terms") {
		t.Errorf("empty model: error %v", err)
	}
	if _, err := Prepare(t.Context(), pricing.Model{Inputs: make([]pricing.Input, maxPrepared+1)}, Settings{}); err == nil || !strings.Contains(err.Error(), "for a preview") {
		t.Errorf("large model: error %v", err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := Prepare(ctx, job(2, ""), Settings{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: error %v", err)
	}
}
