package sizing

import (
	"math"
	"math/rand/v2"
	"testing"

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
		switch g.IntN(9) {
		case 0:
			a.Kind, a.From, a.Value = action.Point, g.Float64()*l, a.Value*3
		case 1:
			a.From = g.Float64() * l / 2
			a.To = between(a.From+0.1*l, l)
		case 2:
			a.Kind, a.End = action.Linear, between(-4e3, 2e4)
		case 3:
			a.Kind, a.From, a.Value = action.Moment, g.Float64()*l, a.Value*3
		case 4:
			a.Direction, a.Value = action.Horizontal, a.Value/10
		case 5:
			a = action.Action{Kind: action.MovingTrain, Dynamic: 1.1, Train: action.Train{Loads: []float64{9e3, 5e3}, Spacings: []float64{1.2}}}
		case 6:
			a.Dynamic = 1.25
		}
		m.Actions = append(m.Actions, a)
	}
	switch g.IntN(6) {
	case 0:
		m.FrequencyFloor, m.MassShare = between(2, 6), g.Float64()
	case 1:
		m.MaxDepth, m.MaxWidth = between(0.2, 0.6), between(0.1, 0.4)
	case 2:
		m.MomentFactor = between(1, 1.4)
	case 3:
		m.NetAreaFactor = between(0.7, 1)
	case 4:
		m.PermanentAxial = between(-2e5, 2e5)
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
			if _, _, other := p.Utilisation(&candidates[i]); other == nil {
				t.Fatalf("explanation refuses, the search does not: %v", err)
			}
			continue
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
	for i, list := range lists { // every fifth size: enough to tell one search from another
		var some []section.Section
		for k := i; k < len(list); k += 5 {
			some = append(some, list[k])
		}
		lists[i] = some
	}
	for _, basis := range bases {
		seen, passed := map[string]int{}, 0
		for n := range 500 {
			m, kind := randomMember(g)
			seen[kind]++
			p := prepare(t, m, setupOf(t, basis, []string{"S235", "S355"}[g.IntN(2)]))
			candidates := lists[g.IntN(len(lists))]
			want, u, passes := byExplanation(t, p, candidates)
			got, err := Lightest(p, candidates)
			if want == "" {
				if err == nil {
					t.Errorf("%s member %d: chose %s, brute force finds none to be had", basis, n, got.Section.Designation)
				}
				continue
			}
			if err != nil {
				t.Fatalf("%s member %d: %v", basis, n, err)
			}
			if got.Section.Designation != want || got.Passes != passes || math.Float64bits(got.Utilisation) != math.Float64bits(u) {
				t.Errorf("%s member %d, %s: %s at %v (%v), brute force %s at %v (%v)\n%+v",
					basis, n, kind, got.Section.Designation, got.Utilisation, got.Passes, want, u, passes, m)
			}
			if passes {
				passed++
			} else if len(got.WaysOut) == 0 {
				t.Errorf("%s member %d: nothing passes and there is no way out", basis, n)
			}
			for _, r := range got.LighterRejected {
				if resistance.Passes(r.Utilisation) || r.Check == "" {
					t.Errorf("%s member %d: rejected %+v passes", basis, n, r)
				}
			}
		}
		if len(seen) != 8 || passed < 150 || passed > 495 {
			t.Errorf("%s: kinds %v, %d passed: the sample is one-sided", basis, seen, passed)
		}
	}
}
