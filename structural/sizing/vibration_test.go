package sizing

import (
	"math"
	"strings"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// A simple span: f = π/2·√(EI/(m·L⁴)) (any handbook on vibration), with its own mass
// and what is permanently on it; a share of the variable load where it is stated.
func TestFrequencyOfASimpleSpan(t *testing.T) {
	const l = 9.0
	s := named(t, "IPE 360")
	for _, tc := range []struct{ share, mass float64 }{
		{0, s.Mass + 2000/gravity},
		{0.3, s.Mass + 2000/gravity + 0.3*5000/gravity},
	} {
		m := Member{
			Length: l, Supports: pinned(0, l), FrequencyFloor: 1, MassShare: tc.share,
			Actions: []action.Action{{Nature: action.Permanent, Value: 2000}, {Value: 5000}, {Value: -3000}},
		}
		got := prepare(t, m, setup(t, 1.5, "S355")).frequency(s)
		want := math.Pi / 2 * math.Sqrt(210e9*s.Iy/(tc.mass*math.Pow(l, 4)))
		if !(got <= want*(1+1e-9) && got > want*0.999) {
			t.Errorf("share %v: %v Hz, want %v Hz or up to 0.1 %% less", tc.share, got, want)
		}
	}
}

// A point mass in the middle that outweighs the beam: f = 1/2π·√(48EI/(L³·(M +
// 17/35·m·L))) (Rayleigh with the static shape, any handbook), a little too high.
func TestFrequencyUnderAPointMass(t *testing.T) {
	const l = 6.0
	s := named(t, "IPE 300")
	m := Member{Length: l, Supports: pinned(0, l), FrequencyFloor: 1, Actions: []action.Action{{Nature: action.Permanent, Kind: action.Point, From: 3, Value: 20e3}}}
	got := prepare(t, m, setup(t, 1.5, "S355")).frequency(s)
	want := math.Sqrt(48*210e9*s.Iy/(l*l*l*(20e3/gravity+17.0/35*s.Mass*l))) / (2 * math.Pi)
	if !(got <= want && got > want*0.995) {
		t.Errorf("%v Hz, want a little below %v Hz", got, want)
	}
}

// The interpolation between exact masses keeps to 0.1 % and to the safe side.
func TestFrequencyIsWithinATenthOfAPercentOnTheSafeSide(t *testing.T) {
	m := Member{
		Length: 14, Supports: pinned(2, 9), FrequencyFloor: 1, MassShare: 1,
		Actions: []action.Action{
			{Nature: action.Permanent, Value: 3000, From: 9, To: 14}, {Kind: action.Linear, Value: 1000, End: 4000},
			{Nature: action.Permanent, Kind: action.Point, From: 0, Value: 4000},
		},
	}
	p := prepare(t, m, setup(t, 1.5, "S355"))
	for _, s := range series(t, "IPE", "HEM") {
		own := beam.Mass{To: 14, PerMetre: s.Mass}
		exact, err := beam.Frequency(beam.Prismatic(14, 210e9*s.Iy, m.Supports...), append([]beam.Mass{own}, p.vibration.carried...))
		if err != nil {
			t.Fatal(err)
		}
		if got := p.frequency(&s); !(got <= exact*(1+1e-9) && got >= exact*0.999) {
			t.Errorf("%s: %v Hz, exact %v Hz", s.Designation, got, exact)
		}
	}
}

// Two equal spans swing against each other first, each like a simple span. Rayleigh's
// quotient of the shape under own weight, y = 2ξ⁴ − 3ξ³ + ξ in each span (propped
// cantilever, any handbook), finds the next mode and passes a floor that the beam
// does not keep.
func TestFloorRefusesWhatRayleighWouldPass(t *testing.T) {
	const l = 7.0
	s := named(t, "IPE 270")
	var loaded, squared float64
	for i := range 1000 {
		x := (float64(i) + 0.5) / 1000
		y := 2*x*x*x*x - 3*x*x*x + x
		loaded += y / 1000
		squared += y * y / 1000
	}
	// EI·y⁗ = w gives y scaled by w·L⁴/48EI; ω² = ∫w·y/∫m·y²
	scale := s.Mass * gravity * math.Pow(l, 4) / (48 * 210e9 * s.Iy)
	rayleigh := math.Sqrt(gravity*loaded/(squared*scale)) / (2 * math.Pi)
	exact := math.Pi / 2 * math.Sqrt(210e9*s.Iy/(s.Mass*math.Pow(l, 4)))
	floor := 0.5 * (rayleigh + exact)
	if !(rayleigh > 1.4*exact) {
		t.Fatalf("Rayleigh %v Hz, exact %v Hz", rayleigh, exact)
	}
	m := Member{Length: 2 * l, Supports: pinned(0, l, 2*l), FrequencyFloor: floor}
	for _, basis := range bases {
		r, err := prepare(t, m, setupOf(t, basis, "S355")).Explain(s)
		if err != nil {
			t.Fatal(err)
		}
		c := check(t, r, resistance.Vibrating)
		if r.Passes || c.Passes() || math.Abs(c.Resistance-exact) > 1e-3*exact {
			t.Errorf("%s: passes %v at %v Hz, floor %v Hz, exact %v Hz", basis, r.Passes, c.Resistance, floor, exact)
		}
		got := lightest(t, m, setupOf(t, basis, "S355"), series(t, "IPE"))
		if got.Section.Iy/got.Section.Mass <= s.Iy/s.Mass {
			t.Errorf("%s: floor of %v Hz leaves %s", basis, floor, got.Section.Designation)
		}
	}
}

func TestFrequencyFloorNobodyKeepsNamesAWayOut(t *testing.T) {
	m := Member{Length: 12, Supports: pinned(0, 12), FrequencyFloor: 60}
	r := lightest(t, m, setup(t, 1.5, "S355"), series(t, "IPE"))
	if r.Passes || !strings.Contains(strings.Join(r.WaysOut, "\n"), "second moment Iy") {
		t.Errorf("passes %v, ways out %q", r.Passes, r.WaysOut)
	}
}

// Compression lowers the frequency of a pinned span by √(1 − N/Ncr), and an upright
// member swings about its weak axis. By hand: CHS 168.3x4, 12 m, 50 kN: Ncr = π²·E·I/L²,
// I = 697 cm⁴ (EN 10210-2 table, from memory), so that 3.28 Hz becomes 2.3 Hz.
func TestCompressionLowersTheFrequency(t *testing.T) {
	s, err := section.Find("CHS 168.3x4")
	if err != nil {
		t.Fatal(err)
	}
	m := Member{Length: 12, Upright: true, FrequencyFloor: 1, DeflectionLimit: 0}
	free := prepare(t, m, setup(t, 1.5, "S355")).frequency(&s)
	m.Axial = 50e3
	pressed := prepare(t, m, setup(t, 1.5, "S355")).frequency(&s)
	own := s.Mass * 9.80665 * m.Length
	ncr := math.Pi * math.Pi * 210e9 * s.Iy / (m.Length * m.Length)
	want := free * math.Sqrt((1-(50e3+own)/ncr)/(1-own/ncr))
	if math.Abs(pressed-want) > 1e-9*want {
		t.Errorf("%.4f Hz under 50 kN, want %.4f", pressed, want)
	}
	h, err := section.Find("HEA 260")
	if err != nil {
		t.Fatal(err)
	}
	m.Axial = 0
	upright := prepare(t, m, setup(t, 1.5, "S355")).frequency(&h)
	if bound := math.Pi / 2 / (12 * 12) * math.Sqrt(210e9*h.Iz/h.Mass); upright > bound {
		t.Errorf("HEA 260 upright: %.3f Hz, above %.3f of its weak axis", upright, bound)
	}
}
