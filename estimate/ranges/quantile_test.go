package ranges

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// Source: type 7 of Hyndman and Fan 1996 is the default of R's quantile();
// quantile(1:10, c(.1, .25, .5, .9)) = 1.9, 3.25, 5.5, 9.1.
func TestQuantileType7(t *testing.T) {
	x := []float64{1, 2, 3, 4, 5, 6, 7, 8, 9, 10}
	for p, want := range map[float64]float64{0: 1, 0.1: 1.9, 0.25: 3.25, 0.5: 5.5, 0.9: 9.1, 1: 10} {
		if got := quantile(x, p); math.Abs(got-want) > 1e-12 {
			t.Errorf("quantile %v = %v, want %v", p, got, want)
		}
	}
	if got := quantile([]float64{7}, 0.3); got != 7 {
		t.Errorf("quantile of one value = %v", got)
	}
}

// Reference: sorting.
func TestSelectQuantileAgainstSorting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.SliceOfN(rapid.Float64Range(-5, 5), 1, 300).Draw(t, "x")
		if rapid.Bool().Draw(t, "ties") {
			for i := range x {
				x[i] = math.Round(x[i])
			}
		}
		p := rapid.Float64Range(0, 1).Draw(t, "p")
		sorted := slices.Sorted(slices.Values(x))
		got := selectQuantile(x, p)
		if want := quantile(sorted, p); got != want {
			t.Errorf("quantile %v of %v = %v, want %v", p, sorted, got, want)
		}
		if !slices.Equal(sorted, slices.Sorted(slices.Values(x))) {
			t.Error("selection changed the values")
		}
	})
}

func TestMergeRunsAgainstSorting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		run := rapid.IntRange(1, 9).Draw(t, "run")
		runs := rapid.IntRange(1, 40).Draw(t, "runs")
		x := rapid.SliceOfN(rapid.Float64Range(-5, 5), run*runs, run*runs).Draw(t, "x")
		want := slices.Sorted(slices.Values(x))
		for i := 0; i < len(x); i += run {
			slices.Sort(x[i : i+run])
		}
		if got := mergeRuns(x, make([]float64, len(x)), run); !slices.Equal(got, want) {
			t.Errorf("got %v, want %v", got, want)
		}
	})
}
