package beam

import (
	"math"
	"testing"
)

// Closed forms as in the beam tables of handbooks (AISC Steel Construction
// Manual, Table 3-23, and Roark's Formulas for Stress and Strain, from memory,
// each re-derived by hand). w N/m, P N, L m, EI N.m².
const (
	hbL  = 7.3
	hbEI = 3.1e7
	hbW  = 4.7e3
	hbP  = 2.9e4
)

// expect is one closed form; zero fields are not looked at unless named in has.
type expect struct {
	name                     string
	beam                     Beam
	loads                    Case
	momentMax, momentMin     float64
	shearMax, shearMin       float64
	deflection, deflectionAt float64
	reactions                []float64
}

func handbook() []expect {
	L, EI, w, P := hbL, hbEI, hbW, hbP
	pin := func(x float64) Support { return Support{X: x, Kind: Pinned} }
	fix := func(x float64) Support { return Support{X: x, Kind: Fixed} }
	udl := func(a, b float64) Load { return Load{Kind: Uniform, From: a, To: b, Start: w} }
	point := func(x float64) Load { return Load{Kind: Point, From: x, Start: P} }
	a, b := 0.7*L, 0.3*L
	o := 0.4 * L // overhang
	x33 := L * (1 + math.Sqrt(33)) / 16
	propped := w * x33 / (48 * EI) * (L*L*L - 3*L*x33*x33 + 2*x33*x33*x33)
	W := w * L / 2 // triangle
	return []expect{
		{"simple, uniform", Prismatic(L, EI, pin(0), pin(L)), Case{udl(0, L)}, w * L * L / 8, 0, w * L / 2, -w * L / 2,
			5 * w * math.Pow(L, 4) / (384 * EI), L / 2, []float64{w * L / 2, w * L / 2}},
		{"simple, point at centre", Prismatic(L, EI, pin(0), pin(L)), Case{point(L / 2)}, P * L / 4, 0, P / 2, -P / 2,
			P * cube(L) / (48 * EI), L / 2, []float64{P / 2, P / 2}},
		{"simple, point anywhere", Prismatic(L, EI, pin(0), pin(L)), Case{point(a)}, P * a * b / L, 0, P * b / L, -P * a / L,
			P * a * b * (a + 2*b) * math.Sqrt(3*a*(a+2*b)) / (27 * EI * L), math.Sqrt(a * (a + 2*b) / 3), []float64{P * b / L, P * a / L}},
		{"simple, end couple", Prismatic(L, EI, pin(0), pin(L)), Case{{Kind: Moment, From: 0, Start: P}}, P, 0, -P / L, -P / L,
			P * L * L / (9 * math.Sqrt(3) * EI), L * (1 - 1/math.Sqrt(3)), []float64{-P / L, P / L}},
		{"simple, triangle", Prismatic(L, EI, pin(0), pin(L)), Case{{Kind: Linear, To: L, End: w}}, 2 * W * L / (9 * math.Sqrt(3)), 0, W / 3, -2 * W / 3,
			W * cube(L) / (180 * EI) * triangleFactor(), L * triangleAt(), []float64{W / 3, 2 * W / 3}},
		{"cantilever, uniform", Prismatic(L, EI, fix(0)), Case{udl(0, L)}, 0, -w * L * L / 2, w * L, 0,
			w * math.Pow(L, 4) / (8 * EI), L, []float64{w * L}},
		{"cantilever, point at tip", Prismatic(L, EI, fix(L)), Case{point(0)}, 0, -P * L, -P, -P,
			P * cube(L) / (3 * EI), 0, []float64{P}},
		{"propped, uniform", Prismatic(L, EI, pin(0), fix(L)), Case{udl(0, L)}, 9 * w * L * L / 128, -w * L * L / 8, 3 * w * L / 8, -5 * w * L / 8,
			propped, x33, []float64{3 * w * L / 8, 5 * w * L / 8}},
		{"propped, point at centre", Prismatic(L, EI, pin(0), fix(L)), Case{point(L / 2)}, 5 * P * L / 32, -3 * P * L / 16, 5 * P / 16, -11 * P / 16,
			P * cube(L) / (48 * math.Sqrt(5) * EI), L / math.Sqrt(5), []float64{5 * P / 16, 11 * P / 16}},
		{"fixed, uniform", Prismatic(L, EI, fix(0), fix(L)), Case{udl(0, L)}, w * L * L / 24, -w * L * L / 12, w * L / 2, -w * L / 2,
			w * math.Pow(L, 4) / (384 * EI), L / 2, []float64{w * L / 2, w * L / 2}},
		{"fixed, point at centre", Prismatic(L, EI, fix(0), fix(L)), Case{point(L / 2)}, P * L / 8, -P * L / 8, P / 2, -P / 2,
			P * cube(L) / (192 * EI), L / 2, []float64{P / 2, P / 2}},
		{"overhanging, uniform", Prismatic(L+o, EI, pin(0), pin(L)), Case{udl(0, L+o)},
			w * (L + o) * (L + o) * (L - o) * (L - o) / (8 * L * L), -w * o * o / 2,
			w * (L*L - o*o) / (2 * L), -w * (L*L + o*o) / (2 * L), math.NaN(), 0,
			[]float64{w * (L*L - o*o) / (2 * L), w * (L + o) * (L + o) / (2 * L)}},
		{"overhanging, point at tip", Prismatic(L+o, EI, pin(0), pin(L)), Case{point(L + o)}, 0, -P * o, P, -P * o / L,
			P * o * o * (L + o) / (3 * EI), L + o, []float64{-P * o / L, P * (L + o) / L}},
		{"two spans, uniform", Prismatic(2*L, EI, pin(0), pin(L), pin(2*L)), Case{udl(0, 2*L)}, 9 * w * L * L / 128, -w * L * L / 8,
			5 * w * L / 8, -5 * w * L / 8, propped, x33, []float64{3 * w * L / 8, 10 * w * L / 8, 3 * w * L / 8}},
		{"two spans, one loaded", Prismatic(2*L, EI, pin(0), pin(L), pin(2*L)), Case{udl(0, L)}, 49 * w * L * L / 512, -w * L * L / 16,
			7 * w * L / 16, -9 * w * L / 16, math.NaN(), 0, []float64{7 * w * L / 16, 5 * w * L / 8, -w * L / 16}},
		{"two spans, point in one", Prismatic(2*L, EI, pin(0), pin(L), pin(2*L)), Case{point(L / 2)}, 13 * P * L / 64, -3 * P * L / 32,
			13 * P / 32, -19 * P / 32, math.NaN(), 0, []float64{13 * P / 32, 11 * P / 16, -3 * P / 32}},
		{"three spans, uniform", Prismatic(3*L, EI, pin(0), pin(L), pin(2*L), pin(3*L)), Case{udl(0, 3*L)}, 0.08 * w * L * L, -0.1 * w * L * L,
			0.6 * w * L, -0.6 * w * L, math.NaN(), 0, []float64{0.4 * w * L, 1.1 * w * L, 1.1 * w * L, 0.4 * w * L}},
		{"three spans, ends loaded", Prismatic(3*L, EI, pin(0), pin(L), pin(2*L), pin(3*L)), Case{udl(0, L), udl(2*L, 3*L)},
			0.45 * 0.45 / 2 * w * L * L, -0.05 * w * L * L, 0.55 * w * L, -0.55 * w * L, math.NaN(), 0,
			[]float64{0.45 * w * L, 0.55 * w * L, 0.55 * w * L, 0.45 * w * L}},
		{"three spans, middle loaded", Prismatic(3*L, EI, pin(0), pin(L), pin(2*L), pin(3*L)), Case{udl(L, 2*L)},
			0.075 * w * L * L, -0.05 * w * L * L, 0.5 * w * L, -0.5 * w * L, math.NaN(), 0,
			[]float64{-0.05 * w * L, 0.55 * w * L, 0.55 * w * L, -0.05 * w * L}},
	}
}

// The simple span under a triangle: EI v = W x (3x⁴ - 10L²x² + 7L⁴) / (180 L²),
// stationary where 15t⁴ - 30t² + 7 = 0, t = x/L.
func triangleAt() float64 { return math.Sqrt(1 - math.Sqrt(8.0/15)) }

func triangleFactor() float64 {
	t := triangleAt()
	return t * (3*math.Pow(t, 4) - 10*t*t + 7)
}

func TestHandbook(t *testing.T) {
	const tol = 1e-9
	for _, h := range handbook() {
		t.Run(h.name, func(t *testing.T) {
			e := envelopeOf(t, h.beam, h.loads)
			M := math.Max(h.momentMax, -h.momentMin)
			V := math.Max(math.Abs(h.shearMax), math.Abs(h.shearMin))
			closer(t, "M max", e.MomentMax.Value, h.momentMax, M, tol)
			closer(t, "M min", e.MomentMin.Value, h.momentMin, M, tol)
			closer(t, "V max", e.ShearMax.Value, h.shearMax, V, tol)
			closer(t, "V min", e.ShearMin.Value, h.shearMin, V, tol)
			if !math.IsNaN(h.deflection) {
				closer(t, "deflection", e.DeflectionMax.Value, h.deflection, h.deflection, tol)
				closer(t, "place of deflection", e.DeflectionMax.X, h.deflectionAt, h.beam.Length, tol)
			}
			for i, F := range h.reactions {
				closer(t, "reaction", e.Reactions[i].FMax, F, V, tol)
			}
		})
	}
}

func envelopeOf(t testing.TB, b Beam, c Case) Envelope {
	t.Helper()
	r, err := Analyse(b, []Case{c})
	if err != nil {
		t.Fatal(err)
	}
	return r.Envelope([]Term{{Case: 0, Factor: 1}})
}

// Tips and three equal spans: overhanging beam tip (w o/24EI)(4o²L - L³ + 3o³),
// upward bow P o L²/(9√3 EI) under a force at the tip; three equal spans
// 0.0069 w L⁴/EI, printed to four decimals (AISC Table 3-23, from memory).
func TestHandbookDeflections(t *testing.T) {
	L, EI, w, P, o := hbL, hbEI, hbW, hbP, 0.4*hbL
	over := Prismatic(L+o, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned})
	r, err := Analyse(over, []Case{{{Kind: Uniform, To: L + o, Start: w}}, {{Kind: Point, From: L + o, Start: P}}})
	if err != nil {
		t.Fatal(err)
	}
	_, _, _, tip := r.At(0, L+o, Left)
	closer(t, "tip", tip, w*o/(24*EI)*(4*o*o*L-cube(L)+3*cube(o)), w*math.Pow(L, 4)/(100*EI), 1e-9)
	bow := r.Envelope([]Term{{Case: 1, Factor: 1}}).Spans[0].DeflectionMin
	want := -P * o * L * L / (9 * math.Sqrt(3) * EI)
	closer(t, "bow", bow.Value, want, -want, 1e-9)
	closer(t, "place of bow", bow.X, L/math.Sqrt(3), L, 1e-9)

	three := Prismatic(3*L, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned}, Support{X: 2 * L, Kind: Pinned}, Support{X: 3 * L, Kind: Pinned})
	e := envelopeOf(t, three, Case{{Kind: Uniform, To: 3 * L, Start: w}})
	closer(t, "three spans", e.DeflectionMax.Value*EI/(w*math.Pow(L, 4)), 0.0069, 1, 5e-5)
	if e.DeflectionMax.X > L {
		t.Errorf("deflection of equal end spans at %g m, want the first of the two", e.DeflectionMax.X)
	}
}
