package sizing

import (
	"math"
	"slices"
	"strings"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/section"
)

func someGirder() Girder {
	return Girder{
		Depth: Steps{0.6, 1.2, 0.1}, Width: Steps{0.2, 0.4, 0.05},
		Webs: []float64{0.008, 0.010, 0.012}, Flanges: []float64{0.012, 0.015, 0.020, 0.025},
	}
}

func TestGirderCandidatesAreEveryPlateInsideTheBounds(t *testing.T) {
	all, err := someGirder().Candidates()
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != 7*5*3*4 {
		t.Errorf("%d candidates, want 7 depths × 5 widths × 3 webs × 4 flanges", len(all))
	}
	seen := map[string]bool{}
	for i, s := range all {
		if seen[s.Designation] {
			t.Errorf("%s stands twice", s.Designation)
		}
		seen[s.Designation] = true
		if i > 0 && s.Mass < all[i-1].Mass {
			t.Errorf("%s is lighter than %s before it", s.Designation, all[i-1].Designation)
		}
		// three plates at 7850 kg/m³, by hand
		if want := 7850 * (2*s.B*s.Tf + (s.H-2*s.Tf)*s.Tw); math.Abs(s.Mass-want) > 1e-9*want {
			t.Errorf("%s weighs %v kg/m, want %v", s.Designation, s.Mass, want)
		}
	}
	if !seen["WELDED-I 900x250x10x20"] {
		t.Errorf("no 900x250x10x20 among %v", all[0].Designation)
	}
	slim := someGirder()
	slim.MaxRatio = 3
	few, err := slim.Candidates()
	if err != nil || len(few) >= len(all) || slices.ContainsFunc(few, func(s section.Section) bool { return s.H > 3.0001*s.B }) {
		t.Errorf("depth over width 3 leaves %d of %d, %v", len(few), len(all), err)
	}
}

// A 20 m girder, 30 kN/m permanent and 20 kN/m variable, S355: the one chosen is the
// lightest that passes when every plate is tried, and lighter than a rolled HE B.
func TestGirderIsTheLightestInsideTheBounds(t *testing.T) {
	m := Member{
		Length: 20, Supports: pinned(0, 20), RestraintSpacing: 2.5, DeflectionLimit: 300,
		Actions: []action.Action{{Nature: action.Permanent, Value: 30e3}, {Value: 20e3}},
	}
	g := someGirder()
	for _, basis := range bases {
		p := prepare(t, m, setupOf(t, basis, "S355"))
		r, err := Proportion(p, g)
		if err != nil {
			t.Fatal(err)
		}
		all, err := g.Candidates()
		if err != nil {
			t.Fatal(err)
		}
		want, u, passes := byExplanation(t, p, all)
		if r.Section.Designation != want || r.Passes != passes || r.Utilisation != u || !passes {
			t.Errorf("%s: %s at %v, want %s at %v (%v)", basis, r.Section.Designation, r.Utilisation, want, u, passes)
		}
		if len(r.LighterRejected) != 3 {
			t.Errorf("%s: rejected %+v, want three", basis, r.LighterRejected)
		}
		rolled, err := Lightest(p, series(t, "HEB"))
		if err != nil || rolled.Passes && rolled.Section.Mass < r.Section.Mass {
			t.Errorf("%s: rolled %s is lighter than %s, %v", basis, rolled.Section.Designation, r.Section.Designation, err)
		}
	}
}

func TestGirderRefuses(t *testing.T) {
	for want, change := range map[string]func(*Girder){
		"depth from 0 m":        func(g *Girder) { g.Depth.From = 0 },
		"depth from NaN":        func(g *Girder) { g.Depth.From = math.NaN() },
		"width from 0.5 m to":   func(g *Girder) { g.Width.From = 0.5 },
		"steps of 0 m":          func(g *Girder) { g.Width.Step = 0 },
		"steps of NaN m":        func(g *Girder) { g.Depth.Step = math.NaN() },
		"no web plates":         func(g *Girder) { g.Webs = nil },
		"flange plate of -0.01": func(g *Girder) { g.Flanges = []float64{-0.01} },
		"candidates; accepted":  func(g *Girder) { g.Depth.Step = 0.001 },
		"fit together":          func(g *Girder) { g.Webs = []float64{0.5} },
		"depth over width of":   func(g *Girder) { g.MaxRatio = math.NaN() },
	} {
		g := someGirder()
		change(&g)
		if _, err := g.Candidates(); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
	if p := Plates(); !slices.IsSorted(p) || p[0] != 0.006 {
		t.Errorf("plates %v", p)
	}
}
