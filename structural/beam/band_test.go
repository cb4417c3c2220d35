package beam

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// Against gonum's dense product, norms and inverse.
func TestBandAgainstGonum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "n")
		dense, m := mat.NewSymDense(n, nil), newBand(n)
		for range 2 * n { // a sum of v vᵀ over windows of the band
			at := rapid.IntRange(0, n-1).Draw(t, "window")
			v := rapid.SliceOfN(rapid.Float64Range(-1, 1), half+1, half+1).Draw(t, "v")
			for i := at; i < min(n, at+half+1); i++ {
				for j := at; j <= i; j++ {
					m.add(i, j, v[i-at]*v[j-at])
					dense.SetSym(i, j, dense.At(i, j)+v[i-at]*v[j-at])
				}
			}
		}
		for i := range n {
			m.add(i, i, 0.05)
			dense.SetSym(i, i, dense.At(i, i)+0.05)
		}
		x := rapid.SliceOfN(rapid.Float64Range(-10, 10), n, n).Draw(t, "x")
		var b mat.VecDense
		b.MulVec(dense, mat.NewVecDense(n, x))
		scaled := mat.NewSymDense(n, nil)
		for i := range n {
			for j := range i + 1 {
				scaled.SetSym(i, j, dense.At(i, j)/math.Sqrt(dense.At(i, i)*dense.At(j, j)))
			}
		}
		norm := m.equilibrate()
		if row := m.factorise(smallestPivot); row >= 0 {
			t.Fatalf("pivot of row %d refused", row)
		}
		got := b.RawVector().Data
		m.solve(got)
		for i := range x {
			if !(math.Abs(got[i]-x[i]) <= 1e-9) {
				t.Fatalf("x[%d] = %.12g, want %.12g", i, got[i], x[i])
			}
		}
		if want := mat.Norm(scaled, 1); !(math.Abs(norm-want) <= 1e-12*want) {
			t.Fatalf("norm %g, want %g", norm, want)
		}
		var inverse mat.Dense // mat.Cond estimates, the inverse does not
		if err := inverse.Inverse(scaled); err != nil {
			t.Fatal(err)
		}
		condition := mat.Norm(scaled, 1) * mat.Norm(&inverse, 1)
		if got := norm * m.inverseNorm(); !(math.Abs(got-condition) <= 1e-9*condition) {
			t.Fatalf("condition %g, gonum %g", got, condition)
		}
	})
}

func TestBandRefusesSingular(t *testing.T) {
	m := newBand(3)
	for i := range 3 {
		m.add(i, i, 2)
	}
	m.add(1, 0, -2)
	m.equilibrate()
	if got := m.factorise(smallestPivot); got != 1 {
		t.Errorf("row %d refused, want 1", got)
	}
}
