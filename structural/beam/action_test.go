package beam

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Settlement, springs, hinges, steps and imposed curvature against closed
// forms of the force method, by hand.
func TestSettlement(t *testing.T) {
	L, EI, s := 5.0, 2e7, 0.012
	b := Prismatic(2*L, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned, Settlement: s}, Support{X: 2 * L, Kind: Pinned})
	r, err := Analyse(b, []Case{{{Kind: Uniform, To: L, Start: 1e3}}})
	if err != nil {
		t.Fatal(err)
	}
	if r.SettlementCase() != 1 || r.Cases() != 2 {
		t.Fatalf("settlement case %d of %d, want 1 of 2", r.SettlementCase(), r.Cases())
	}
	_, M, _, v := r.At(1, L, Left)
	closer(t, "moment", M, 3*EI*s/(L*L), 3*EI*s/(L*L), 1e-12)
	closer(t, "deflection", v, s, s, 1e-12)
	R := r.Reactions(1)
	closer(t, "inner reaction", R[1].F, -6*EI*s/cube(L), 6*EI*s/cube(L), 1e-12)
	_, _, _, still := r.At(0, L, Left)
	closer(t, "deflection of the load case", still, 0, s, 1e-12)

	fixed := Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Fixed, Settlement: s})
	r, err = Analyse(fixed, nil)
	if err != nil {
		t.Fatal(err)
	}
	V, M, _, _ := r.At(0, 0, Right)
	closer(t, "fixed: shear", V, 12*EI*s/cube(L), 12*EI*s/cube(L), 1e-12)
	closer(t, "fixed: moment", M, -6*EI*s/(L*L), 6*EI*s/(L*L), 1e-12)
}

func TestSettledSpring(t *testing.T) {
	L, EI, k, s := 4.0, 1e6, 3e5, 0.02
	b := Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Spring, Stiffness: k, Settlement: s})
	r, err := Analyse(b, nil)
	if err != nil {
		t.Fatal(err)
	}
	want := -s / (cube(L)/(3*EI) + 1/k)
	closer(t, "spring force", r.Reactions(0)[1].F, want, -want, 1e-12)
}

func TestSprings(t *testing.T) {
	L, EI, w, k := 4.0, 1e6, 2e3, 3e5
	b := Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Spring, Stiffness: k})
	r, err := Analyse(b, []Case{{{Kind: Uniform, To: L, Start: w}}})
	if err != nil {
		t.Fatal(err)
	}
	want := w * math.Pow(L, 4) / (8 * EI) / (cube(L)/(3*EI) + 1/k)
	R := r.Reactions(0)
	closer(t, "spring force", R[1].F, want, want, 1e-12)
	_, _, _, v := r.At(0, L, Left)
	closer(t, "spring shortening", v, want/k, want/k, 1e-12)

	// Equal rotational springs at both ends: M = (w L²/12) / (1 + 2EI/(k L)).
	turn := 7e5
	b = Prismatic(L, EI, Support{Kind: Pinned, RotationalStiffness: turn}, Support{X: L, Kind: Pinned, RotationalStiffness: turn})
	r, err = Analyse(b, []Case{{{Kind: Uniform, To: L, Start: w}}})
	if err != nil {
		t.Fatal(err)
	}
	M := w * L * L / 12 / (1 + 2*EI/(turn*L))
	R = r.Reactions(0)
	closer(t, "left couple", R[0].M, -M, M, 1e-12)
	closer(t, "right couple", R[1].M, M, M, 1e-12)
}

func TestHinge(t *testing.T) {
	L, a, EI, w := 9.0, 3.5, 1e6, 2e3
	b := Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Pinned})
	b.Hinges = []float64{a}
	r, err := Analyse(b, []Case{{{Kind: Uniform, To: L, Start: w}}})
	if err != nil {
		t.Fatal(err)
	}
	H := w * (L - a) / 2
	_, M, _, _ := r.At(0, 0, Right)
	closer(t, "root moment", M, -H*a-w*a*a/2, H*a+w*a*a/2, 1e-12)
	_, M, left, v := r.At(0, a, Left)
	_, _, right, _ := r.At(0, a, Right)
	closer(t, "hinge moment", M, 0, H*a, 1e-12)
	down := H*cube(a)/(3*EI) + w*math.Pow(a, 4)/(8*EI)
	closer(t, "hinge deflection", v, down, down, 1e-12)
	closer(t, "slope on the left", left, H*a*a/(2*EI)+w*cube(a)/(6*EI), left, 1e-12)
	closer(t, "slope on the right", right, w*cube(L-a)/(24*EI)-down/(L-a), math.Abs(right), 1e-12)
}

func TestSteps(t *testing.T) {
	L, EI, P := 6.0, 4e6, 5e3
	b := Beam{Length: L, Segments: []Segment{{L / 2, EI}, {L, EI / 5}}, Supports: []Support{{Kind: Fixed}}}
	r, err := Analyse(b, []Case{{{Kind: Point, From: L, Start: P}}})
	if err != nil {
		t.Fatal(err)
	}
	h := cube(L / 2)
	want := P / 3 * ((cube(L)-h)/EI + 5*h/EI)
	_, _, _, v := r.At(0, L, Left)
	closer(t, "tip", v, want, want, 1e-12)
}

func TestCurvature(t *testing.T) {
	L, EI, k := 8.0, 3e6, 2e-4
	warm := []Case{{{Kind: Curvature, To: L, Start: k, End: k}}}
	for _, row := range []struct {
		name        string
		left, right SupportKind
		root, mid   float64 // moment at the left end, deflection at midspan
	}{
		{"simple", Pinned, Pinned, 0, k * L * L / 8},
		{"propped", Fixed, Pinned, -1.5 * EI * k, k * L * L / 32},
		{"fixed", Fixed, Fixed, -EI * k, 0},
	} {
		r, err := Analyse(Prismatic(L, EI, Support{Kind: row.left}, Support{X: L, Kind: row.right}), warm)
		if err != nil {
			t.Fatal(err)
		}
		_, M, _, _ := r.At(0, 0, Right)
		_, _, _, v := r.At(0, L/2, Left)
		closer(t, row.name+": moment", M, row.root, EI*k, 1e-12)
		closer(t, row.name+": deflection", v, row.mid, k*L*L, 1e-12)
	}
}

func TestMomentJumps(t *testing.T) {
	L, M0 := 8.0, 5e3
	b := Prismatic(L, 1, Support{Kind: Pinned}, Support{X: L, Kind: Pinned})
	r, err := Analyse(b, []Case{{{Kind: Moment, From: 2, Start: M0}}})
	if err != nil {
		t.Fatal(err)
	}
	_, left, _, _ := r.At(0, 2, Left)
	_, right, _, _ := r.At(0, 2, Right)
	closer(t, "left of the couple", left, -M0*2/L, M0, 1e-12)
	closer(t, "right of the couple", right, M0*6/L, M0, 1e-12)
	e := r.Envelope([]Term{{Case: 0, Factor: 1}})
	if e.MomentMax.X != 2 || e.MomentMin.X != 2 {
		t.Errorf("extremes at %g and %g m, want both sides of 2 m", e.MomentMax.X, e.MomentMin.X)
	}
}

func TestAtRefusals(t *testing.T) {
	r, _ := spanned(t, 1)
	for _, row := range []struct {
		c int
		x float64
	}{{-1, 1}, {3, 1}, {0, -0.1}, {0, 6.1}, {0, math.NaN()}} {
		if V, M, slope, v := r.At(row.c, row.x, Left); !(math.IsNaN(V) && math.IsNaN(M) && math.IsNaN(slope) && math.IsNaN(v)) {
			t.Errorf("At(%d, %g) = %g, %g, %g, %g, want NaN", row.c, row.x, V, M, slope, v)
		}
	}
	if got := r.Reactions(99); got != nil {
		t.Errorf("Reactions(99) = %v, want nil", got)
	}
}

func TestInputsUntouched(t *testing.T) {
	b := Prismatic(9, 2, Support{X: 9, Kind: Pinned}, Support{X: 0, Kind: Fixed})
	c := []Case{{{Kind: Uniform, To: 9, Start: 1}}}
	r, err := Analyse(b, c)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Split(b, c, []Term{{Case: 0, Factor: 1, Free: true}}); err != nil {
		t.Fatal(err)
	}
	same := Prismatic(9, 2, Support{X: 9, Kind: Pinned}, Support{X: 0, Kind: Fixed})
	if diff := cmp.Diff(same, b); diff != "" {
		t.Errorf("the beam was changed:\n%s", diff)
	}
	r.Reactions(0)[0].F, r.Stations()[0] = 99, 99
	if R := r.Reactions(0); R[0].F == 99 || R[0].X != 0 || R[1].X != 9 || r.Stations()[0] != 0 {
		t.Errorf("reactions %v, stations %v: changed from outside, or not left to right", R, r.Stations())
	}
}
