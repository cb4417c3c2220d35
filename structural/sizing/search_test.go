package sizing

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

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
		got, err := Best(p, shuffled, massOf)
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
	m := Member{
		Length: 20, Supports: pinned(0, 8, 17), DeflectionLimit: 300, Axial: 1e4, FrequencyFloor: 2,
		Actions: []action.Action{{Value: 5e3, Free: true}, {Value: 1e3, Direction: action.Horizontal}},
	}
	list := series(t, "IPE", "CHS", "RHS")
	for _, basis := range bases {
		p := prepare(t, m, setupOf(t, basis, "S355"))
		pass := func() {
			for i := range list {
				if _, _, err := p.Utilisation(&list[i]); err != nil {
					t.Error(err)
				}
			}
		}
		pass()
		if got := testing.AllocsPerRun(5, pass); got != 0 {
			t.Errorf("%s: %v allocations over %d sections, want 0", basis, got, len(list))
		}
	}
}

// The bound that the search gives candidates up by must lie below the exact effects
// for every weight beyond the lightest candidate's, and effects taken as straight must
// be what the envelope gives.
func TestLowerBoundLiesBelowTheExactEffects(t *testing.T) {
	g := rand.New(rand.NewPCG(17, 19))
	candidates := series(t, "IPE", "HEA", "HEB")
	bent, straight := 0, 0
	for n := range 300 {
		m, kind := randomMember(g)
		p := prepare(t, m, enSetup(t, "S355"))
		if err := p.analyse(); err != nil {
			t.Fatal(err)
		}
		p.start(p.lightestOf(candidates))
		for range 5 {
			s := &candidates[g.IntN(len(candidates))]
			for i := range p.strength {
				v := &p.strength[i]
				weight := p.across(p.weight(s, v))
				exact := p.exactForces(v, weight)
				if v.line.straight {
					straight++
					if got := p.forces(v, weight); math.Abs(got.moment-exact.moment) > 1e-9*exact.moment || math.Abs(got.shear-exact.shear) > 1e-9*exact.shear {
						t.Errorf("member %d, %s: straight %+v, envelope %+v", n, kind, got, exact)
					}
					continue
				}
				bent++
				if low := v.line.beyond(weight); low.moment > exact.moment*(1+1e-9) || low.shear > exact.shear*(1+1e-9) {
					t.Errorf("member %d, %s: exact %+v, bound %+v", n, kind, exact, low)
				}
			}
			p.sag(s, true)
			low := slices.Clone(p.deflections)
			p.sag(s, false)
			for i, d := range p.deflections {
				if low[i].Value > d.Value*(1+1e-9) {
					t.Errorf("member %d, %s, %s: exact %v m, bound %v m", n, kind, d.Where, d.Value, low[i].Value)
				}
			}
		}
	}
	if bent < 100 || straight < 100 {
		t.Errorf("%d bent, %d straight: the sample is one-sided", bent, straight)
	}
}

func TestHarderTermsNeverGiveALighterSection(t *testing.T) {
	ipe := series(t, "IPE")
	setups := map[string]Setup{}
	for _, b := range bases {
		setups[b] = setupOf(t, b, "S355")
	}
	rapid.Check(t, func(r *rapid.T) {
		m := Member{
			Length: rapid.Float64Range(2, 15).Draw(r, "length"), DeflectionLimit: rapid.Float64Range(150, 500).Draw(r, "limit"),
			FrequencyFloor: rapid.Float64Range(0.5, 5).Draw(r, "floor"), MomentFactor: rapid.Float64Range(1, 1.5).Draw(r, "moment factor"),
			Actions: []action.Action{
				{Value: rapid.Float64Range(0, 3e4).Draw(r, "load")},
				{Value: rapid.Float64Range(0, 1e3).Draw(r, "wind"), Direction: action.Horizontal},
			},
		}
		m.Supports = pinned(0, m.Length)
		m.RestraintSpacing = rapid.Float64Range(0.5, 15).Draw(r, "spacing")
		s := setups[rapid.SampledFrom(bases).Draw(r, "basis")]
		base := lightest(t, m, s, ipe)
		harder, name := m, rapid.SampledFrom([]string{"load", "wind", "spacing", "limit", "floor", "dynamic", "factors", "moment factor"}).Draw(r, "harder")
		grow := rapid.Float64Range(1, 2).Draw(r, "growth")
		harder.Actions = slices.Clone(m.Actions)
		switch name {
		case "load":
			harder.Actions[0].Value *= grow
		case "wind":
			harder.Actions[1].Value *= grow
		case "spacing":
			harder.RestraintSpacing *= grow
		case "limit":
			harder.DeflectionLimit *= grow
		case "floor":
			harder.FrequencyFloor *= grow
		case "dynamic":
			harder.Actions[0].Dynamic = grow
		case "moment factor":
			harder.MomentFactor = max(1, m.MomentFactor/grow)
		case "factors":
			s.Strength = slices.Clone(s.Strength)
			for i := range s.Strength {
				s.Strength[i].Permanent *= grow
				s.Strength[i].Variable *= grow
			}
		}
		got := lightest(t, harder, s, ipe)
		if got.Passes && (!base.Passes || got.Section.Mass < base.Section.Mass) {
			r.Fatalf("more %s: %s after %s (passed: %v)", name, got.Section.Designation, base.Section.Designation, base.Passes)
		}
	})
}

// A section with a property that is not a number never passes and never yields a
// figure that is not one.
func TestSectionThatIsNoNumberFails(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6), DeflectionLimit: 300, FrequencyFloor: 1, Axial: 1e4, Actions: []action.Action{{Value: 1e3}, {Value: 100, Direction: action.Horizontal}}}
	for _, basis := range bases {
		p := prepare(t, m, setupOf(t, basis, "S355"))
		for name, spoil := range map[string]func(*section.Section){
			"A":    func(s *section.Section) { s.A = math.NaN() },
			"Iy":   func(s *section.Section) { s.Iy = math.NaN() },
			"Iz":   func(s *section.Section) { s.Iz = math.NaN() },
			"Mass": func(s *section.Section) { s.Mass = math.NaN() },
			"zero": func(s *section.Section) { s.Iy, s.Mass = 0, 0 },
		} {
			s := *named(t, "HE 300 B")
			spoil(&s)
			u, _, err := p.Utilisation(&s)
			if err != nil {
				t.Fatal(err)
			}
			if !(u > 1 && u <= 1e9) {
				t.Errorf("%s, %s: utilisation %v, want a finite one above 1", basis, name, u)
			}
			r, err := p.Explain(&s)
			if err != nil || r.Passes || math.Float64bits(r.Utilisation) != math.Float64bits(u) {
				t.Errorf("%s, %s: explained at %v, passes %v, search %v, %v", basis, name, r.Utilisation, r.Passes, u, err)
			}
		}
	}
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

func (f fixedBasis) Name() string { return "fixed" }

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
		p.start(p.lightestOf(ipe))
		m, err := p.steel(&ipe[5])
		if err != nil {
			t.Fatal(err)
		}
		if got := p.hopeless(&ipe[5], &ipe[5], m); got != tc.want {
			t.Errorf("%s at %v, N = %v: given up %v, want %v", tc.id, tc.utilisation, tc.axial, got, tc.want)
		}
	}
}
