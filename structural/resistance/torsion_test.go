package resistance

import (
	"math"
	"testing"

	"spanwright/structural/section"
)

// UPN 200, 3 m, table values of EN 10365 (from memory): flexural-torsional load by
// EN 1993-1-1:2005 6.3.1.4 in the closed form of Timoshenko and Gere, Theory of
// Elastic Stability, 5.6, computed apart from the project.
func TestCriticalTwistOfAChannel(t *testing.T) {
	s := section.Section{Shape: section.Channel, A: 32.2e-4, Iy: 1910e-8, Iz: 148e-8, J: 11.9e-8, Iw: 9.07e-9, Y0: -0.0394}
	if got := criticalTwist(&s, s235, 3, 3, 3); !near(got, 340830.3386509525, 1e-9) {
		t.Errorf("least critical force %v N, want that about z, 340830 N", got)
	}
	s.Iz = 1910e-8 // held about z, so that the coupled mode governs
	i2 := (1910e-8+1910e-8)/32.2e-4 + 0.0394*0.0394
	y := math.Pi * math.Pi * 210e9 * 1910e-8 / 9
	twist := (81e9*11.9e-8 + math.Pi*math.Pi*210e9*9.07e-9/9) / i2
	beta := 1 - 0.0394*0.0394/i2
	want := y / (2 * beta) * (1 + twist/y - math.Sqrt((1-twist/y)*(1-twist/y)+4*(1-beta)*twist/y))
	if got := criticalTwist(&s, s235, 3, 3, 3); !near(got, want, 1e-9) {
		t.Errorf("flexural-torsional force %v N, want %v N", got, want)
	}
}

// Least roots of the cubic by a bisection of its own, in another program.
func TestCoupledBuckling(t *testing.T) {
	for _, tc := range []struct{ y, z, twist, a, b, want float64 }{
		{3e6, 1e6, 2e6, 0.3, 0.1, 913623.0852350702},
		{5e5, 4e5, 9e6, 0.2, 0.35, 393483.46329263627},
		{3e6, 1e6, 2e6, 0, 0, 1e6},
	} {
		if got := coupled(tc.y, tc.z, tc.twist, tc.a, tc.b); !near(got, tc.want, 1e-9) {
			t.Errorf("%+v: %v", tc, got)
		}
	}
}

// A flat twists as a long plate with free edges: σ = 4·G·(t/h)² (Timoshenko and
// Gere, Theory of Elastic Stability, chapter 5, thin strip: J = h·t³/3).
func TestCriticalTwistOfAFlat(t *testing.T) {
	h, w := 0.3, 0.006
	s := section.Section{Shape: section.Flat, A: h * w, Iy: w * h * h * h / 12, J: h * w * w * w / 3}
	if got, want := criticalTwist(&s, s235, 1, 1, 1)/s.A, 4*81e9*w*w/(h*h); !near(got, want, 1e-12) {
		t.Errorf("σ = %v Pa, want %v Pa", got, want)
	}
	for _, shape := range []section.Shape{section.RoundTube, section.RectangularTube, section.WeldedBox, section.SolidRound} {
		s.Shape = shape
		if got := criticalTwist(&s, s235, 1, 1, 1); got != 0 {
			t.Errorf("%v: %v N, want 0", shape, got)
		}
	}
}

// Uniform moment on a singly symmetric beam: the roots of M² − Nz·β·M − Nz·(G·J +
// π²·E·Iw/L²) = 0, Timoshenko and Gere, Theory of Elastic Stability, 6.1, computed
// apart; the lesser magnitude is the worse side.
func TestCriticalMomentOfOneAxisOfSymmetry(t *testing.T) {
	for _, beta := range []float64{0.12, -0.12} {
		s := section.Section{Shape: section.UnequalI, Iz: 1e-5, Iw: 2e-8, J: 5e-7, Wagner: beta}
		if got := criticalMoment(&s, s235, 4); !near(got, 170993.67045363534, 1e-9) {
			t.Errorf("β = %v: Mcr %v N·m, want 170993.67 N·m", beta, got)
		}
	}
}
