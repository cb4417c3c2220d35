package beam

import (
	"encoding/json"
	"errors"
	"math"
	"os"
	"testing"

	"pgregory.net/rapid"
)

func frequency(t testing.TB, b Beam, masses ...Mass) float64 {
	t.Helper()
	f, err := Frequency(b, masses)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// closedForm returns (βL)² √(EI/m) / (2π L²), Hz.
func closedForm(betaL, length, ei, mass float64) float64 {
	return betaL * betaL * math.Sqrt(ei/mass) / (2 * math.Pi * length * length)
}

// βL of uniform beams: handbooks of vibration print 4.7300, π, 1.8751, 3.9266
// (from memory); the roots to more digits by Newton's method on
// cosh x cos x = ±1 and tan x = tanh x. A guided end stands for symmetry.
func TestFrequencyClosedForms(t *testing.T) {
	const L, EI, m = 7.3, 3.1e7, 91.0
	pin := func(x float64) Support { return Support{X: x, Kind: Pinned} }
	fix := func(x float64) Support { return Support{X: x, Kind: Fixed} }
	guide := func(x float64) Support { return Support{X: x, Kind: Guided} }
	for _, row := range []struct {
		name  string
		beam  Beam
		betaL float64
	}{
		{"simple", Prismatic(L, EI, pin(0), pin(L)), math.Pi},
		{"fixed both ends", Prismatic(L, EI, fix(0), fix(L)), 4.730040744862704},
		{"cantilever", Prismatic(L, EI, fix(0)), 1.8751040687119611},
		{"cantilever to the left", Prismatic(L, EI, fix(L)), 1.8751040687119611},
		{"propped", Prismatic(L, EI, fix(0), pin(L)), 3.9266023120479185},
		{"two spans", Prismatic(2*L, EI, pin(0), pin(L), pin(2*L)), 2 * math.Pi},
		{"five spans", Prismatic(5*L, EI, pin(0), pin(L), pin(2*L), pin(3*L), pin(4*L), pin(5*L)), 5 * math.Pi},
		{"pinned and guided: half a simple beam", Prismatic(L, EI, pin(0), guide(L)), math.Pi / 2},
		{"fixed and guided: half a fixed beam", Prismatic(L, EI, fix(0), guide(L)), 4.730040744862704 / 2},
		{"hinge of two cantilevers", Beam{2 * L, []Segment{{2 * L, EI}}, []Support{fix(0), fix(2 * L)}, []float64{L}}, 2 * 1.8751040687119611},
	} {
		want := closedForm(row.betaL, row.beam.Length, EI, m)
		closer(t, row.name, frequency(t, row.beam, Mass{0, row.beam.Length, m}), want, want, 1e-8)
	}
}

// First frequencies of beams.json (finite elements with consistent mass; the
// bare member of 7850 kg/m³; halving the mesh there changes up to 1.6e-5).
func TestFrequencyFile(t *testing.T) {
	data, err := os.ReadFile("testdata/beams.json")
	if err != nil {
		t.Fatal(err)
	}
	var f struct {
		Cases []struct {
			ID       string
			Density  float64
			Segments []struct{ X0, X1, A float64 }
			Out      struct {
				F1 float64 `json:"f1_hz_bare"`
			}
		}
	}
	if err := json.Unmarshal(data, &f); err != nil {
		t.Fatal(err)
	}
	for i, b := range readBeams(t) {
		model, _ := b.model(t)
		var masses []Mass
		for _, s := range f.Cases[i].Segments {
			masses = append(masses, Mass{s.X0, s.X1, s.A * 7850})
		}
		want := f.Cases[i].Out.F1
		closer(t, b.ID, frequency(t, model, masses...), want, want, 1e-5)
	}
}

// Limits by hand: a light member on soft springs is a mass on springs,
// f = √(Σk / mL) / 2π; a mass on the light half of a beam in two pieces adds up.
func TestFrequencySprings(t *testing.T) {
	const L, m = 6.0, 80.0
	soft := Prismatic(L, 1e9, Support{Kind: Spring, Stiffness: 500}, Support{X: L, Kind: Spring, Stiffness: 500})
	want := math.Sqrt(1000/(m*L)) / (2 * math.Pi)
	closer(t, "on springs", frequency(t, soft, Mass{0, L, m}), want, want, 1e-5)
	twist := Prismatic(L, 1e9, Support{Kind: Pinned, RotationalStiffness: 1e3})
	want = math.Sqrt(1e3/(m*L*L*L/3)) / (2 * math.Pi) // a rigid rod about its end
	closer(t, "on a rotational spring", frequency(t, twist, Mass{0, L, m}), want, want, 1e-5)
	b := Prismatic(L, 1e7, Support{Kind: Pinned}, Support{X: L, Kind: Pinned})
	one := frequency(t, b, Mass{0, L, m})
	closer(t, "in parts", frequency(t, b, Mass{0, L, m / 4}, Mass{0, 2, 3 * m / 4}, Mass{2, L, 3 * m / 4}), one, one, 1e-9)
}

// Rayleigh's quotient with the shape under own weight is never below the exact
// frequency, and close to it for a simple beam: (g ∫mv / ∫mv²)^½ / 2π.
func rayleigh(t testing.TB, b Beam, mass float64) float64 {
	t.Helper()
	const g, n = 9.80665, 4000
	r, err := Analyse(b, []Case{{{Kind: Uniform, To: b.Length, Start: mass * g}}})
	if err != nil {
		t.Fatal(err)
	}
	work, energy := 0.0, 0.0
	for i := range n {
		_, _, _, v := r.At(0, b.Length*(float64(i)+0.5)/n, Left)
		work, energy = work+g*v, energy+v*v
	}
	return math.Sqrt(work/energy) / (2 * math.Pi)
}

// A stretch of 1e-6 of the length between two ends of masses changes nothing.
func TestFrequencyShortStretch(t *testing.T) {
	const L, EI, m = 9.0, 3e7, 75.0
	b := Prismatic(L, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned})
	want := closedForm(math.Pi, L, EI, m)
	for _, h := range []float64{1e-1, 1e-3, 1e-5, 1e-6, 1e-8} {
		got := frequency(t, b, Mass{0, 0.4 * L, m}, Mass{0.4 * L, (0.4 + h) * L, m}, Mass{(0.4 + h) * L, L, m})
		closer(t, "frequency", got, want, want, 1e-9)
	}
}

// The dynamic stiffness of two stretches by transfer matrices is that of one.
func TestTransferStiffness(t *testing.T) {
	for _, l := range []float64{0, 0.01, 0.7, 1.4, 1.6, 3, 5} {
		one := dynamic(l, 2, 1)
		first := stretchTransfer(0.3*l, 2, 0.3)
		two := stretchTransfer(0.7*l, 2, 0.7).times(&first)
		got := two.stiffness()
		size := 0.0
		for i := range 4 {
			for j := range 4 {
				size = math.Max(size, math.Abs(one[i][j]))
			}
		}
		for i := range 4 {
			for j := range 4 {
				closer(t, "stiffness", got[i][j], one[i][j], size, 1e-12)
			}
		}
	}
}

// cosh λ cos λ = 1 at 4.7300, 7.8532, 10.9956, 14.1372 (handbooks of vibration, from
// memory).
func TestClamped(t *testing.T) {
	for i, root := range []float64{4.7300, 7.8532, 10.9956, 14.1372} {
		if below, above := clamped(root-0.001), clamped(root+0.001); below != i || above != i+1 {
			t.Errorf("about %g: %d and %d, want %d and %d", root, below, above, i, i+1)
		}
	}
}

// The functions by series and in closed form meet, and tend to the static ones.
func TestStiffnessFunctions(t *testing.T) {
	a, b := seriesFunctions(math.Pow(1.5, 4)), stiffnessFunctions(1.5)
	zero := seriesFunctions(0)
	for i, want := range [6]float64{12, -12, 6, 6, 4, 2} {
		closer(t, "series and closed form", a[i], b[i], 12, 1e-14)
		closer(t, "static", zero[i], want, 12, 1e-15)
	}
}

func TestFrequencyFloor(t *testing.T) {
	const floor, m = 5.0, 120.0
	// Two spans: the static shape is symmetrical, the first mode is not.
	b := Prismatic(20, 9.2e6, Support{Kind: Pinned}, Support{X: 10, Kind: Pinned}, Support{X: 20, Kind: Pinned})
	quotient, exact := rayleigh(t, b, m), frequency(t, b, Mass{0, 20, m})
	if !(quotient >= floor) {
		t.Errorf("Rayleigh's quotient %.3f Hz does not pass the floor of %g Hz: the example shows nothing", quotient, floor)
	}
	if !(exact < floor) {
		t.Errorf("a floor of %g Hz is passed by %.3f Hz; the quotient is %.3f Hz", floor, exact, quotient)
	}
	want := closedForm(2*math.Pi, 20, 9.2e6, m)
	closer(t, "exact", exact, want, want, 1e-9)
}

func TestFrequencyBounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		f, err := Frequency(b, []Mass{{0, b.Length, 100}})
		if err != nil {
			t.Fatal(err)
		}
		m, err := Frequency(mirrored(b), []Mass{{0, b.Length, 100}})
		if err != nil || !(math.Abs(m-f) <= 1e-8*f) {
			t.Fatalf("mirrored %g Hz, %v, want %g Hz", m, err, f)
		}
		x := rapid.Float64Range(0.1, 0.9).Draw(t, "cut") * b.Length
		parts, err := Frequency(b, []Mass{{0, x, 100}, {x, b.Length, 100}})
		if err != nil || !(math.Abs(parts-f) <= 1e-8*f) {
			t.Fatalf("in two stretches %g Hz, %v, want %g Hz", parts, err, f)
		}
		heavier, err := Frequency(b, []Mass{{0, b.Length, 100}, {0, x, 50}})
		if err != nil || !(heavier <= f*(1+1e-9) && heavier >= f/math.Sqrt(1.5)*(1-1e-9)) {
			t.Fatalf("with half more on a part %g Hz, %v; without %g Hz", heavier, err, f)
		}
	})
}

func TestFrequencyFaults(t *testing.T) {
	b := Prismatic(10, 1e7, Support{Kind: Pinned}, Support{X: 10, Kind: Pinned})
	for _, row := range []struct {
		name   string
		beam   Beam
		masses []Mass
		kind   FaultKind
	}{
		{"no mass", b, nil, FaultMass},
		{"zero mass", b, []Mass{{0, 10, 0}}, FaultMass},
		{"NaN", b, []Mass{{0, 10, math.NaN()}}, FaultMass},
		{"off the member", b, []Mass{{0, 11, 5}}, FaultOutside},
		{"no extent", b, []Mass{{4, 4, 5}}, FaultLoad},
		{"mechanism", Prismatic(10, 1e7, Support{Kind: Pinned}), []Mass{{0, 10, 5}}, FaultMechanism},
		{"stiffness", Prismatic(10, 0, Support{Kind: Fixed}), []Mass{{0, 10, 5}}, FaultStiffness},
	} {
		_, err := Frequency(row.beam, row.masses)
		var fault *Fault
		if !errors.As(err, &fault) || fault.Kind != row.kind {
			t.Errorf("%s: %v, want a fault of kind %q", row.name, err, row.kind)
		}
	}
}
