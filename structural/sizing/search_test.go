package sizing

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// randomMember draws simple, overhanging, two-span, fixed and cantilever members
// and struts.
func randomMember(g *rand.Rand) (Member, string) {
	between := func(lo, hi float64) float64 { return lo + (hi-lo)*g.Float64() }
	m := Member{Length: between(2, 20)}
	l := m.Length
	kind := []string{"simple", "overhang", "two spans", "fixed", "propped", "cantilever", "strut", "beam column"}[g.IntN(8)]
	switch kind {
	case "simple", "beam column":
		m.Supports = pinned(0, l)
	case "overhang":
		m.Supports = pinned(between(0, 0.4)*l, between(0.6, 1)*l)
	case "two spans":
		m.Supports = pinned(0, between(0.2, 0.8)*l, l)
	case "fixed":
		m.Supports = []beam.Support{{X: 0, Kind: beam.Fixed}, {X: l, Kind: beam.Fixed}}
	case "propped":
		m.Supports = []beam.Support{{X: 0, Kind: beam.Fixed}, {X: between(0.5, 1) * l, Kind: beam.Pinned}}
	case "cantilever":
		m.Length = between(1, 6)
		l = m.Length
		m.Supports = []beam.Support{{X: g.Float64() * 0, Kind: beam.Fixed}}
	case "strut":
		m.Upright, m.Axial = true, between(-5e5, 1e6)
		if g.IntN(2) == 0 {
			return m, kind
		}
		m.Supports = []beam.Support{{X: 0, Kind: beam.Fixed}}
	}
	if kind == "beam column" {
		m.Axial = between(-5e5, 1e6)
	}
	if g.IntN(2) == 0 {
		m.DeflectionLimit = between(150, 500)
	}
	if g.IntN(2) == 0 {
		m.RestraintSpacing = between(0.5, l)
	}
	for range 1 + g.IntN(4) {
		a := action.Action{Nature: action.Nature(g.IntN(2)), Value: between(-4e3, 2e4)}
		a.Free = a.Nature == action.Variable && g.IntN(2) == 0
		switch g.IntN(4) {
		case 0:
			a.Kind, a.From, a.Value = action.Point, g.Float64()*l, a.Value*3
		case 1:
			a.From = g.Float64() * l / 2
			a.To = between(a.From+0.1*l, l)
		}
		m.Actions = append(m.Actions, a)
	}
	return m, kind
}

// byExplanation is sizing by brute force: explain every candidate, take the
// lightest whose every check passes.
func byExplanation(t *testing.T, p *Prepared, candidates []section.Section) (string, float64, bool) {
	t.Helper()
	nearest, least := "", math.Inf(1)
	for i := range candidates {
		r, err := p.Explain(&candidates[i])
		if err != nil {
			t.Fatal(err)
		}
		passes := true
		for _, c := range r.Checks {
			passes = passes && c.Utilisation <= 1+1e-9
			if !(0 <= c.Utilisation && c.Utilisation <= 1e9) {
				t.Fatalf("%s: %s at %v", candidates[i].Designation, c.ID, c.Utilisation)
			}
		}
		u, id, err := p.Utilisation(&candidates[i])
		if err != nil || math.Float64bits(u) != math.Float64bits(r.Utilisation) || id != r.Governing || passes != r.Passes {
			t.Fatalf("%s: search %v by %s, explanation %v by %s, %v", candidates[i].Designation, u, id, r.Utilisation, r.Governing, err)
		}
		if passes {
			return candidates[i].Designation, u, true
		}
		if u < least {
			nearest, least = candidates[i].Designation, u
		}
	}
	return nearest, least, false
}

func TestLightestEqualsBruteForce(t *testing.T) {
	g := rand.New(rand.NewPCG(7, 11))
	lists := [][]section.Section{series(t, "IPE", "HEA", "HEB"), series(t, "CHS"), series(t, "SHS", "RHS")}
	seen, passed := map[string]int{}, 0
	for n := range 500 {
		m, kind := randomMember(g)
		seen[kind]++
		p := prepare(t, m, setup(t, 1.5+g.Float64(), []string{"S235", "S355"}[g.IntN(2)]))
		candidates := lists[g.IntN(len(lists))]
		got, err := Lightest(p, candidates)
		if err != nil {
			t.Fatalf("member %d: %v", n, err)
		}
		want, u, passes := byExplanation(t, p, candidates)
		if got.Section.Designation != want || got.Passes != passes || math.Float64bits(got.Utilisation) != math.Float64bits(u) {
			t.Errorf("member %d, %s: %s at %v (%v), brute force %s at %v (%v)\n%+v",
				n, kind, got.Section.Designation, got.Utilisation, got.Passes, want, u, passes, m)
		}
		if passes {
			passed++
		} else if len(got.WaysOut) == 0 {
			t.Errorf("member %d: nothing passes and there is no way out", n)
		}
		for _, r := range got.LighterRejected {
			if resistance.Passes(r.Utilisation) || r.Check == "" {
				t.Errorf("member %d: rejected %+v passes", n, r)
			}
		}
	}
	if len(seen) != 8 || passed < 200 || passed > 495 {
		t.Errorf("kinds %v, %d passed: the sample is one-sided", seen, passed)
	}
}

func TestBestByMassIsLightest(t *testing.T) {
	g := rand.New(rand.NewPCG(3, 5))
	candidates := series(t, "IPE", "HEA", "HEB")
	shuffled := slices.Clone(candidates)
	g.Shuffle(len(shuffled), func(i, j int) { shuffled[i], shuffled[j] = shuffled[j], shuffled[i] })
	for n := range 100 {
		m, _ := randomMember(g)
		p := prepare(t, m, setup(t, 1.67, "S355"))
		want, err := Lightest(p, candidates)
		if err != nil {
			t.Fatal(err)
		}
		got, err := Best(p, shuffled, mass)
		if err != nil {
			t.Fatal(err)
		}
		if got.Section.Designation != want.Section.Designation || got.Utilisation != want.Utilisation {
			t.Errorf("member %d: best %s, lightest %s", n, got.Section.Designation, want.Section.Designation)
		}
		if diff := cmp.Diff(want.LighterRejected, got.LighterRejected); diff != "" {
			t.Errorf("member %d: rejected (-lightest +best):\n%s", n, diff)
		}
	}
}

func TestBestFollowsTheObjective(t *testing.T) {
	// The shallowest of all that pass: found by trying them one by one.
	candidates := series(t, "IPE", "HEA", "HEB")
	m := Member{Length: 9, Supports: pinned(0, 9), Actions: []action.Action{{Value: 15e3}}}
	p := prepare(t, m, setup(t, 1.5, "S355"))
	depth := func(s *section.Section) float64 { return s.H }
	r, err := Best(p, candidates, depth)
	if err != nil {
		t.Fatal(err)
	}
	want := math.Inf(1)
	for i := range candidates {
		if u, _, err := p.Utilisation(&candidates[i]); err == nil && u <= 1+1e-9 {
			want = min(want, candidates[i].H)
		}
	}
	if !r.Passes || r.Section.H != want {
		t.Errorf("chose %s, %v m deep, want %v m", r.Section.Designation, r.Section.H, want)
	}
	for _, x := range r.LighterRejected {
		if named(t, x.Section).H > want {
			t.Errorf("%s is deeper than the choice", x.Section)
		}
	}
	if _, err := Best(p, candidates, func(*section.Section) float64 { return math.NaN() }); err == nil {
		t.Error("an objective that is not a number is accepted")
	}
}

func TestEqualMassIsBrokenByDesignation(t *testing.T) {
	a, b := *named(t, "IPE 400"), *named(t, "IPE 400")
	a.Designation, b.Designation = "IPE 400 a", "IPE 400 b"
	m := Member{Length: 5, Supports: pinned(0, 5), Actions: []action.Action{{Value: 5e3}}}
	for _, list := range [][]section.Section{{a, b}, {b, a}} {
		if r := lightest(t, m, setup(t, 1.5, "S235"), list); r.Section.Designation != "IPE 400 a" {
			t.Errorf("chose %s", r.Section.Designation)
		}
	}
}

func TestResultsDoNotShareScratch(t *testing.T) {
	m := Member{Length: 12, Supports: pinned(2, 9), Actions: []action.Action{{Value: 3000}}, DeflectionLimit: 300}
	p := prepare(t, m, setup(t, 1.5, "S355"))
	first, err := p.Explain(named(t, "IPE 300"))
	if err != nil {
		t.Fatal(err)
	}
	reaction, sag := first.Envelope.Reactions[0], first.Envelope.Spans[1].DeflectionMax
	if _, err := p.Explain(named(t, "HE 600 B")); err != nil {
		t.Fatal(err)
	}
	if first.Envelope.Reactions[0] != reaction || first.Envelope.Spans[1].DeflectionMax != sag {
		t.Error("the first result changed when another section was explained")
	}
}

func TestUtilisationAllocatesNothing(t *testing.T) {
	m := Member{Length: 20, Supports: pinned(0, 8, 17), Actions: []action.Action{{Value: 5e3, Free: true}}, DeflectionLimit: 300, Axial: 1e4}
	p := prepare(t, m, setup(t, 1.5, "S355"))
	ipe := series(t, "IPE")
	if _, _, err := p.Utilisation(&ipe[0]); err != nil {
		t.Fatal(err)
	}
	got := testing.AllocsPerRun(20, func() {
		for i := range ipe {
			if _, _, err := p.Utilisation(&ipe[i]); err != nil {
				t.Error(err)
			}
		}
	})
	if got != 0 {
		t.Errorf("%v allocations over %d sections, want 0", got, len(ipe))
	}
}

// The bound that the search gives candidates up by must lie below the exact effects
// for every weight beyond the lightest candidate's.
func TestLowerBoundLiesBelowTheExactEffects(t *testing.T) {
	g := rand.New(rand.NewPCG(17, 19))
	candidates := series(t, "IPE", "HEA", "HEB")
	for n := range 300 {
		m, kind := randomMember(g)
		p := prepare(t, m, setup(t, 1.5, "S355"))
		p.start(candidates)
		for range 5 {
			weight := p.across(p.weight(&candidates[g.IntN(len(candidates))]))
			if weight <= p.lighter.weight {
				continue
			}
			p.bound.beyond(&p.none, &p.lighter, weight)
			p.find(&p.exact, weight)
			low, exact := append([]float64{p.bound.moment, p.bound.shear}, p.bound.sags...), append([]float64{p.exact.moment, p.exact.shear}, p.exact.sags...)
			for i := range low {
				if low[i] > exact[i]*(1+1e-9) {
					t.Errorf("member %d, %s: effect %d is %v, bound %v", n, kind, i, exact[i], low[i])
				}
			}
		}
	}
}

func TestHarderTermsNeverGiveALighterSection(t *testing.T) {
	ipe := series(t, "IPE")
	rapid.Check(t, func(r *rapid.T) {
		m := Member{
			Length: rapid.Float64Range(2, 15).Draw(r, "length"), DeflectionLimit: rapid.Float64Range(150, 500).Draw(r, "limit"),
			Actions: []action.Action{{Value: rapid.Float64Range(0, 3e4).Draw(r, "load")}},
		}
		m.Supports = pinned(0, m.Length)
		m.RestraintSpacing = rapid.Float64Range(0.5, 15).Draw(r, "spacing")
		factor := rapid.Float64Range(1.5, 3).Draw(r, "factor")
		base := lightest(t, m, setup(t, factor, "S355"), ipe)
		harder, name := m, rapid.SampledFrom([]string{"load", "spacing", "limit", "factor"}).Draw(r, "harder")
		grow := rapid.Float64Range(1, 2).Draw(r, "growth")
		switch name {
		case "load":
			harder.Actions = []action.Action{{Value: m.Actions[0].Value * grow}}
		case "spacing":
			harder.RestraintSpacing *= grow
		case "limit":
			harder.DeflectionLimit *= grow
		case "factor":
			factor *= grow
		}
		got := lightest(t, harder, setup(t, factor, "S355"), ipe)
		if got.Passes && (!base.Passes || got.Section.Mass < base.Section.Mass) {
			r.Fatalf("more %s: %s after %s (passed: %v)", name, got.Section.Designation, base.Section.Designation, base.Passes)
		}
	})
}

// fixedBasis answers the same whatever it is asked.
type fixedBasis struct {
	resistance.Basis
	utilisation float64
	id          string
}

func (f fixedBasis) Utilisation(*section.Section, resistance.Material, *resistance.Demand) (float64, string) {
	return f.utilisation, f.id
}

// A web's limit eases as the moment grows (EN 1993-1-1:2005 Table 5.2, ψ), so under
// compression a lower bound of the moment proves nothing about it.
func TestLocalSlendernessUnderABoundGivesNobodyUpInCompression(t *testing.T) {
	s := setup(t, 1.5, "S355")
	ipe := series(t, "IPE")
	for _, tc := range []struct {
		axial, utilisation float64
		id                 string
		want               bool
	}{
		{1e5, 1.5, resistance.LocalBuckling, false},
		{0, 1.5, resistance.LocalBuckling, true},
		{-1e5, 1.5, resistance.LocalBuckling, true},
		{1e5, 1.5, resistance.Bending, true},
		{1e5, 1 + 1e-7, resistance.Bending, false},
	} {
		s.Basis = fixedBasis{utilisation: tc.utilisation, id: tc.id}
		p := prepare(t, Member{Length: 6, Supports: pinned(0, 6), Axial: tc.axial}, s)
		p.start(ipe)
		m, err := p.steel(&ipe[5])
		if err != nil {
			t.Fatal(err)
		}
		if got := p.hopeless(&ipe[5], m); got != tc.want {
			t.Errorf("%s at %v, N = %v: given up %v, want %v", tc.id, tc.utilisation, tc.axial, got, tc.want)
		}
	}
}
