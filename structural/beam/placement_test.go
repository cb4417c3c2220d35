package beam

import (
	"errors"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func placed(t testing.TB, b Beam, c Case, l Layout, g Goal) Placement {
	t.Helper()
	p, err := PlaceSupports(b, []Case{c}, []Term{{Case: 0, Factor: 1}}, l, g)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// Under a uniform load, in lengths of the member: equal moments 0.2071 from both
// ends, w L² × 0.0214; least deflection 0.2232 (0.22315); Airy points 0.2113,
// ends parallel; Bessel points 0.2203, least change of length; one inner support
// beside an end support at L/√2, w L² (3 - 2√2)/4 (handbooks of metrology and
// rigging, elementary statics; from memory).
func TestPlaceKnown(t *testing.T) {
	const L, EI, w = 13.0, 4.2e6, 900.0
	load := Case{{Kind: Uniform, To: L, Start: w}}
	free := Prismatic(L, EI)
	pair := Layout{Free: 2, Symmetric: true}
	for _, row := range []struct {
		name        string
		beam        Beam
		layout      Layout
		goal        Goal
		want        float64
		tolerance   float64
		value, unit float64
	}{
		{"equal moments", free, pair, LeastMoment, (math.Sqrt2 - 1) / 2, 1e-8, (3 - 2*math.Sqrt2) / 8, w * L * L},
		{"equal moments, positions apart", free, Layout{Free: 2}, LeastMoment, 0.2071, 5e-5, (3 - 2*math.Sqrt2) / 8, w * L * L},
		{"least deflection", free, pair, LeastDeflection, 0.22315, 5e-6, 0, 0},
		{"Airy", free, pair, ParallelEnds, (1 - 1/math.Sqrt(3)) / 2, 1e-8, 0, w * L * L * L / EI},
		{"Bessel", free, pair, LeastShortening, 0.2203, 5e-5, 0, 0},
		{"end and inner", Prismatic(L, EI, Support{Kind: Pinned}), Layout{Free: 1}, LeastMoment, 1 / math.Sqrt2, 1e-8, (3 - 2*math.Sqrt2) / 4, w * L * L},
	} {
		p := placed(t, row.beam, load, row.layout, row.goal)
		closer(t, row.name, p.X[0]/L, row.want, 1, row.tolerance)
		if row.layout.Free == 2 {
			closer(t, row.name+", right", p.X[1]/L, 1-row.want, 1, row.tolerance)
		}
		if row.unit > 0 {
			closer(t, row.name+", value", p.Value/row.unit, row.value, 1, 1e-8)
		}
	}
}

// Airy: the ends are level; Bessel against brute force over a fine grid.
func TestPlaceProperties(t *testing.T) {
	const L, EI, w = 13.0, 4.2e6, 900.0
	load := Case{{Kind: Uniform, To: L, Start: w}}
	at := func(a float64) *Response {
		r, err := Analyse(Prismatic(L, EI, Support{X: a * L, Kind: Pinned}, Support{X: (1 - a) * L, Kind: Pinned}), []Case{load})
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	_, _, slope, _ := at((1-1/math.Sqrt(3))/2).At(0, 0, Right)
	closer(t, "end slope", slope, 0, w*L*L*L/EI, 1e-12)
	best, where := math.Inf(1), 0.0
	for i := range 400 {
		a := 0.2 + 1e-4*float64(i)
		r, sum := at(a), 0.0
		for k := range 500 {
			_, _, s, _ := r.At(0, L*(float64(k)+0.5)/500, Left)
			sum += s * s / 2 * L / 500
		}
		if sum < best {
			best, where = sum, a
		}
	}
	p := placed(t, Prismatic(L, EI), load, Layout{Free: 2, Symmetric: true}, LeastShortening)
	closer(t, "Bessel by brute force", p.X[0]/L, where, 1, 2e-4)
	closer(t, "shortening by brute force", p.Value, best, best, 1e-4)
}

// Several free supports against a grid.
func TestPlaceSeveral(t *testing.T) {
	const L = 20.0
	b := Prismatic(L, 1e7, Support{Kind: Pinned})
	c := Case{{Kind: Uniform, To: L, Start: 1e3}, {Kind: Point, From: 13, Start: 2e4}}
	for _, g := range []Goal{LeastMoment, LeastDeflection} {
		p := placed(t, b, c, Layout{Free: 2}, g)
		best := math.Inf(1)
		for i := 1; i < 80; i++ {
			for j := i + 1; j <= 80; j++ {
				trial := b
				trial.Supports = append(trial.Supports[:1:1], Support{X: L * float64(i) / 80, Kind: Pinned}, Support{X: L * float64(j) / 80, Kind: Pinned})
				e := envelopeOf(t, trial, c)
				v := larger(e.MomentMax, e.MomentMin).Value
				if g == LeastDeflection {
					v = larger(e.DeflectionMax, e.DeflectionMin).Value
				}
				best = math.Min(best, math.Abs(v))
			}
		}
		if !(p.Value <= best) {
			t.Errorf("%v: %g at %v, a grid finds %g", g, p.Value, p.X, best)
		}
		if diff := cmp.Diff(p, placed(t, b, c, Layout{Free: 2}, g)); diff != "" {
			t.Errorf("%v: not the same twice: %s", g, diff)
		}
	}
	four := placed(t, Prismatic(L, 1e7), c[:1], Layout{Free: 4, Symmetric: true}, LeastMoment)
	loose := placed(t, Prismatic(L, 1e7), c[:1], Layout{Free: 4}, LeastMoment)
	closer(t, "four supports, in pairs and apart", loose.Value, four.Value, four.Value, 1e-2)
}

func TestPlaceFaults(t *testing.T) {
	b, c, terms := Prismatic(10, 1e7), []Case{{{Kind: Uniform, To: 10, Start: 1}}}, []Term{{Case: 0, Factor: 1}}
	bad := b
	bad.Segments = []Segment{{To: 10, EI: math.NaN()}}
	for _, row := range []struct {
		name   string
		beam   Beam
		layout Layout
		goal   Goal
		terms  []Term
		kind   FaultKind
	}{
		{"none", b, Layout{}, LeastMoment, terms, FaultLayout},
		{"odd pairs", b, Layout{Free: 3, Symmetric: true}, LeastMoment, terms, FaultLayout},
		{"goal", b, Layout{Free: 2}, 0, terms, FaultLayout},
		{"term", b, Layout{Free: 2}, LeastMoment, []Term{{Case: 1, Factor: 1}}, FaultTerm},
		{"mechanism", b, Layout{Free: 1}, LeastMoment, terms, FaultMechanism},
		{"stiffness", bad, Layout{Free: 2, Symmetric: true}, LeastMoment, terms, FaultStiffness},
		{"length", Prismatic(math.NaN(), 1), Layout{Free: 2}, LeastMoment, terms, FaultLength},
	} {
		_, err := PlaceSupports(row.beam, c, row.terms, row.layout, row.goal)
		var fault *Fault
		if !errors.As(err, &fault) || fault.Kind != row.kind {
			t.Errorf("%s: %v, want a fault of kind %q", row.name, err, row.kind)
		}
	}
}
