package chart

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestNiceStep(t *testing.T) {
	for _, c := range []struct{ x, want float64 }{{1, 1}, {1.1, 2}, {2, 2}, {3, 5}, {5, 5}, {7, 10}, {0.03, 0.05}, {12345, 20000}} {
		if got := niceStep(c.x); math.Abs(got/c.want-1) > 1e-12 {
			t.Errorf("niceStep(%v) = %v, want %v", c.x, got, c.want)
		}
	}
}

func TestRulerKeepsToItsAxis(t *testing.T) {
	r := newRuler(10, 20, 100, 300)
	for _, c := range []struct{ x, want float64 }{{10, 100}, {15, 200}, {20, 300}, {-1e9, 100}, {1e300, 300}} {
		if got := r.at(c.x); got != c.want {
			t.Errorf("at(%v) = %v, want %v", c.x, got, c.want)
		}
	}
	if r := newRuler(5, 5, 0, 1); !(r.low < 5 && 5 < r.high) {
		t.Errorf("an empty span gives %v", r)
	}
}

func TestSpreadOut(t *testing.T) {
	for _, c := range []struct{ in, want []float64 }{
		{[]float64{10, 50}, []float64{10, 50}},
		{[]float64{10, 12, 14}, []float64{10, 20, 30}},
		{[]float64{94, 95, 96}, []float64{80, 90, 100}},
	} {
		got := append([]float64{}, c.in...)
		spreadOut(got, 10, 0, 100)
		if d := cmp.Diff(c.want, got); d != "" {
			t.Errorf("spreadOut(%v): %s", c.in, d)
		}
	}
}

// Flags at one place, at both ends and far apart: always without a clash and
// within the drawing, and in one row where there is room.
func TestPlaceFlags(t *testing.T) {
	for _, c := range []struct {
		xs   []float64
		rows int
	}{
		{[]float64{380, 380, 380}, 2}, {[]float64{70, 70, 740}, 2}, {[]float64{70, 740, 740}, 2},
		{[]float64{70, 400, 740}, 1}, {[]float64{380, 390, 400}, 2}, {[]float64{64, 64, 64}, 3}, {[]float64{740, 740, 740}, 3},
	} {
		flags := make([]flag, len(c.xs))
		for i, x := range c.xs {
			flags[i] = flag{x: x, text: "base 1.05 M EUR, P37"}
		}
		rows := placeFlags(flags, margin, width-margin)
		if rows != c.rows || clashes(flags) != 0 {
			t.Errorf("flags at %v: %d rows, %d clashes, want %d rows, none", c.xs, rows, clashes(flags), c.rows)
		}
		for _, f := range flags {
			if a, b := f.span(); a < margin || b > width-margin {
				t.Errorf("flags at %v: text from %v to %v", c.xs, a, b)
			}
		}
	}
}
