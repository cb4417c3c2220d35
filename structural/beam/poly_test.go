package beam

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// Products of known factors: the roots inside (0, 1) come back in order.
func TestRoots(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		deg := rapid.IntRange(1, 5).Draw(t, "degree")
		p, want := poly{rapid.Float64Range(0.1, 1e6).Draw(t, "scale")}, []float64(nil)
		for k := range deg {
			slot := rapid.Float64Range(0.1, 0.9).Draw(t, "root")
			root := (float64(k)+slot)/3 - 0.4 // apart from each other, some outside
			for i := k + 1; i > 0; i-- {
				p[i] = p[i-1] - root*p[i]
			}
			p[0] *= -root
			if root > 1e-6 && root < 1-1e-6 {
				want = append(want, root)
			}
		}
		var got [5]float64
		n := p.roots(deg, 0, 1, &got)
		found := slices.DeleteFunc(got[:n], func(r float64) bool { return r <= 1e-6 || r >= 1-1e-6 })
		if len(found) != len(want) {
			t.Fatalf("roots %v, want %v", found, want)
		}
		for i := range want {
			if !(math.Abs(found[i]-want[i]) <= 1e-9) {
				t.Fatalf("roots %v, want %v", found, want)
			}
		}
	})
}

func TestRootsOfSpecialForms(t *testing.T) {
	for _, row := range []struct {
		name string
		p    poly
		deg  int
		want []float64
	}{
		{"constant", poly{3}, 0, nil},
		{"nothing", poly{}, 5, nil},
		{"line", poly{-1, 4}, 1, []float64{0.25}},
		{"flat line", poly{-1, 0}, 1, nil},
		{"line as a square", poly{-1, 4}, 2, []float64{0.25}},
		{"line as a cube", poly{-1, 4}, 3, []float64{0.25}},
		{"no middle term", poly{-0.25, 0, 1}, 2, []float64{0.5}},
		{"touching", poly{0.25, -1, 1}, 2, nil},
		{"touching twice", poly{1. / 16, -0.5, 1.5, -2, 1}, 4, nil},               // (t - 1/2)⁴
		{"through a triple root", poly{-0.125, 0.75, -1.5, 1}, 3, []float64{0.5}}, // (t - 1/2)³
		{"root at the start", poly{0, -0.5, 1}, 2, []float64{0.5}},
		{"cubic from zero", poly{0, 0.1875, -1, 1}, 3, []float64{0.25, 0.75}},
	} {
		var out [5]float64
		got := slices.Clone(out[:row.p.roots(row.deg, 0, 1, &out)])
		got = slices.Clone(out[:len(got)])
		if len(got) != len(row.want) {
			t.Errorf("%s: %v, want %v", row.name, got, row.want)
			continue
		}
		for i := range got {
			if !(math.Abs(got[i]-row.want[i]) <= 1e-9) {
				t.Errorf("%s: %v, want %v", row.name, got, row.want)
			}
		}
	}
}
