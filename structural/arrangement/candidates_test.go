package arrangement

import (
	"context"
	"errors"
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// The demo's boom under every kind: the cantilever needs most, shorter spans weigh less.
func TestDemoBoomUnderAllCandidates(t *testing.T) {
	all := candidates(t, study(t, 42))
	var names []string
	by := map[Kind]Candidate{}
	for _, c := range all {
		names = append(names, c.Name)
		if have, seen := by[c.Kind]; !seen || c.Mass.Steel < have.Mass.Steel {
			by[c.Kind] = c
		}
	}
	if len(all) != 10 || len(by) != len(Kinds()) {
		t.Fatalf("candidates %q, want one of each kind and two of equal spans", names)
	}
	if last := all[len(all)-1]; last.Kind != Cantilever || last.Feasible {
		t.Errorf("last is %s, feasible %v; want the cantilever, which nothing in CHS carries with factor 3", last.Name, last.Feasible)
	}
	if !(by[EqualSpans].Mass.Member < by[InnerLeastMoment].Mass.Member && by[InnerLeastMoment].Mass.Member < by[EndTower].Mass.Member) {
		t.Errorf("more supports do not save steel: %v", names)
	}
	for i, c := range all {
		if c.Feasible != (c.Reason == "") || c.Feasible != (len(c.WaysOut) == 0) || c.Feasible != resistance.Passes(c.Utilisation) {
			t.Errorf("%s: feasible %v, reason %q, ways out %q, utilisation %v", c.Name, c.Feasible, c.Reason, c.WaysOut, c.Utilisation)
		}
		if i > 0 && c.Feasible == all[i-1].Feasible && c.Mass.Steel < all[i-1].Mass.Steel {
			t.Errorf("%s stands after %s", c.Name, all[i-1].Name)
		}
		if c.Governing == "" || len(c.Footings) != len(c.Supports) {
			t.Errorf("%s: governing %q, %d footings for %d supports", c.Name, c.Governing, len(c.Footings), len(c.Supports))
		}
		notesAreWhole(t, c)
	}
}

func notesAreWhole(t *testing.T, c Candidate) {
	t.Helper()
	seen := map[string]bool{}
	for _, n := range c.Notes {
		if n.ID == "" || n.Clause == "" || n.Statement == "" {
			t.Errorf("%s: note %+v has a blank", c.Name, n)
		}
		if seen[n.ID] && n.ID != "arrangement/uplift" {
			t.Errorf("%s: note %s twice", c.Name, n.ID)
		}
		seen[n.ID] = true
		for _, q := range n.Values {
			if !(math.Abs(q.Value) <= math.MaxFloat64) {
				t.Errorf("%s: note %s: %s is %v", c.Name, n.ID, q.Symbol, q.Value)
			}
		}
	}
}

// The same study gives the same candidates, whatever the order of kinds and sections,
// and leaves the caller's slices alone.
func TestSameStudySameCandidates(t *testing.T) {
	s := study(t, 42)
	first := candidates(t, s)
	s.Kinds, s.Sections = Kinds(), series(t, "CHS")
	slices.Reverse(s.Kinds)
	slices.Reverse(s.Sections)
	heaviest := s.Sections[0].Designation
	second := candidates(t, s)
	if !reflect.DeepEqual(first, second) {
		t.Error("another order gives other candidates")
	}
	if s.Sections[0].Designation != heaviest || s.Kinds[0] != Lattice {
		t.Error("the caller's slices are changed")
	}
}

// More load never makes a candidate lighter, nor its ballast or footings smaller.
func TestMonotoneInLoad(t *testing.T) {
	s := study(t, 24)
	s.Lattice.Depths = 1
	var before map[string]Candidate
	for _, load := range []float64{0, 60, 130, 400, 410, 700, 1500, 4000} {
		more := s
		more.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 900 + load}, {Value: 1200 + load/2}}
		now := map[string]Candidate{}
		for _, c := range candidates(t, more) {
			now[c.Name] = c
			b, seen := before[c.Name]
			if !seen {
				continue
			}
			if b.Feasible && c.Feasible && c.Mass.Steel < b.Mass.Steel*(1-1e-9) {
				t.Errorf("%s: %v kg under more load, %v kg before", c.Name, c.Mass.Steel, b.Mass.Steel)
			}
			if b.Feasible && (c.Mass.Ballast < b.Mass.Ballast*(1-1e-9) || c.Volume() < b.Volume()*(1-1e-9)) {
				t.Errorf("%s: ballast %v kg, footings %v m³ under more load", c.Name, c.Mass.Ballast, c.Volume())
			}
			if !b.Feasible && c.Feasible {
				t.Errorf("%s: feasible under more load", c.Name)
			}
		}
		if before != nil && len(now) != len(before) {
			t.Errorf("%d candidates, %d before", len(now), len(before))
		}
		before = now
	}
}

// Uplift, ballast and footings of one section rise with the load on it, for any load.
func TestBallastIsMonotoneInAnyLoad(t *testing.T) {
	s := study(t, 18, Cantilever)
	s.Sections = s.Sections[len(s.Sections)-1:]
	rapid.Check(t, func(rt *rapid.T) {
		loads := []float64{rapid.Float64Range(0, 2000).Draw(rt, "load"), rapid.Float64Range(0, 2000).Draw(rt, "more")}
		tail := rapid.Float64Range(2, 30).Draw(rt, "tail")
		var last Candidate
		for i, q := range []float64{loads[0], loads[0] + loads[1]} {
			one := s
			one.Tail, one.Member.Actions = tail, []action.Action{{Value: q}}
			all, err := Candidates(context.Background(), one)
			if err != nil {
				rt.Fatal(err)
			}
			c := all[0]
			if i == 1 && (c.Ballast.Mass < last.Ballast.Mass*(1-1e-9) || c.Volume() < last.Volume()*(1-1e-9)) {
				rt.Errorf("ballast %v kg, footings %v m³ after %v, %v", c.Ballast.Mass, c.Volume(), last.Ballast.Mass, last.Volume())
			}
			last = c
		}
	})
}

// Horizontal wind of 0.4 kN/m bends the member about its weak axis by w·L²/8.
func TestWindBendsTheMember(t *testing.T) {
	s := study(t, 20, EndTower)
	for _, w := range []float64{400, -400} {
		s.Member.Actions = append(s.Member.Actions[:2:2], action.Action{Direction: action.Horizontal, Value: w})
		c := only(t, s)
		same(t, "weak axis", checkOf(t, c.Result, resistance.BendingZ).Demand, 400*400/8, 1e-9)
		same(t, "side", c.Supports[0].Side, 4000, 1e-9)
	}
}

// A dynamic factor counts in the reactions as it does in the checks.
func TestDynamicFactorReachesTheReactions(t *testing.T) {
	s := study(t, 20, EndTower)
	s.Member.Actions[1].Dynamic = 1.5
	c := only(t, s)
	same(t, "reaction", c.Supports[0].Max, (900+1.5*1200+c.Result.Section.Mass*gravity)*10, 1e-9)
}

// A wheel on the tip of an overhang pulls the root up by P·b/a, and in the middle of
// the tower's reach presses it by the whole P.
func TestMovingLoadOnAnInnerSupport(t *testing.T) {
	s := study(t, 30, InnerSupport)
	s.Fractions = []float64{0.6}
	s.Member.Actions = []action.Action{
		{Nature: action.Permanent, Value: 900},
		{Kind: action.MovingTrain, Dynamic: 1.1, Train: action.Train{Loads: []float64{20000}}},
	}
	c := only(t, s)
	g := 900 + c.Result.Section.Mass*gravity
	const a, b = 18.0, 12.0
	same(t, "root, least", c.Supports[0].Min, g*(a/2-b*b/(2*a))-1.1*20000*b/a, 1e-6)
	same(t, "root, most", c.Supports[0].Max, g*(a/2-b*b/(2*a))+1.1*20000, 1e-6)
	same(t, "tower, most", c.Supports[1].Max, g*30*15/a+1.1*20000*30/a, 1e-6)
}

// The boom in all four design bases: each answers, the first pass with factor 3 is the
// heaviest.
func TestBoomInAllBases(t *testing.T) {
	first := only(t, study(t, 42, InnerLeastMoment))
	en, err := resistance.EN1993(resistance.Partial{})
	if err != nil {
		t.Fatal(err)
	}
	bases := []resistance.Basis{en}
	for _, method := range []string{resistance.ASD, resistance.LRFD} {
		b, err := resistance.AISC(method)
		if err != nil {
			t.Fatal(err)
		}
		bases = append(bases, b)
	}
	for _, b := range bases {
		s := study(t, 42, InnerLeastMoment)
		s.Setup.Basis = b
		if s.Setup.Strength, s.Setup.Service, err = action.Sets(b.Name()); err != nil {
			t.Fatal(err)
		}
		if c := only(t, s); !c.Feasible || !(c.Mass.Steel < first.Mass.Steel) {
			t.Errorf("%s: feasible %v (%s), %v kg; with factor 3 %v kg", b.Name(), c.Feasible, c.Reason, c.Mass.Steel, first.Mass.Steel)
		}
	}
}

func TestBadStudies(t *testing.T) {
	for _, tc := range []struct {
		name string
		bad  func(*Study)
		want string
	}{
		{"length", func(s *Study) { s.Member.Length = math.NaN() }, "length NaN m; accepted is a length above 0"},
		{"no sections", func(s *Study) { s.Sections = nil }, "no sections for the main member"},
		{"massless leg", func(s *Study) { s.Towers.Sections = make([]section.Section, 1) }, "section 1 of the tower leg"},
		{"supports", func(s *Study) { s.Member.Supports = []beam.Support{pinned(3)} }, "the member has 1 supports"},
		{"axial", func(s *Study) { s.Member.Axial = 5 }, "axial forces 5 and 0 N"},
		{"action off", func(s *Study) { s.Member.Actions[0].To = 99 }, "runs from 0 m to 99 m"},
		{"limit", func(s *Study) { s.Member.DeflectionLimit = -1 }, "deflection limit"},
		{"kind", func(s *Study) { s.Kinds = []Kind{"balloon"} }, `kind "balloon"`},
		{"fraction", func(s *Study) { s.Fractions = []float64{math.NaN()} }, "inner support at NaN of the length"},
		{"spans", func(s *Study) { s.Spans = []int{1} }, "1 equal spans; accepted is 2 to 20"},
		{"tail", func(s *Study) { s.Tail = -1 }, "tail (m) is -1"},
		{"legs", func(s *Study) { s.Towers.Legs = 5 }, "number of legs is 5; accepted is 0 to 4"},
		{"bearing", func(s *Study) { s.Footings.Bearing = math.Inf(1) }, "bearing pressure (Pa) is +Inf"},
		{"depths crossed", func(s *Study) { s.Lattice.MinDepth, s.Lattice.MaxDepth = 4, 2 }, "least lattice depth (m) is 4"},
		{"ballast", func(s *Study) { s.BallastDensity = math.NaN() }, "ballast density (kg/m³) is NaN"},
		{"stability", func(s *Study) { s.Stability = SafetyFactor(0.5) }, "stability"},
		{"holding", func(s *Study) { s.Stability = SafetyFactor(2); s.Stability.PermanentFavourable = 1.2 }, "factor on holding effects 1.2"},
		{"basis", func(s *Study) { s.Setup.Basis = nil }, "no design basis"},
	} {
		s := study(t, 42)
		tc.bad(&s)
		_, err := Candidates(context.Background(), s)
		if err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%s: error %v, want %q in it", tc.name, err, tc.want)
		}
	}
}

// All faults come at once.
func TestEveryFaultIsReported(t *testing.T) {
	s := study(t, 42)
	s.Tail, s.Towers.Height, s.Spans = -1, -2, []int{0}
	err := s.Validate()
	if err == nil {
		t.Fatal("no error")
	}
	for _, want := range []string{"tail (m) is -1", "tower height (m) is -2", "0 equal spans"} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("%v lacks %q", err, want)
		}
	}
}

// Faults of the beam keep their type; a context that is done ends the study.
func TestErrorsOfTheEngine(t *testing.T) {
	s := study(t, 42, EndTower)
	s.Member.Actions = []action.Action{{Kind: action.MovingTrain, Train: action.Train{Loads: make([]float64, 100_000), Spacings: slices.Repeat([]float64{1}, 99_999)}}}
	var fault *beam.Fault
	if _, err := Candidates(context.Background(), s); !errors.As(err, &fault) {
		t.Errorf("error %v, want a *beam.Fault", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	for _, kinds := range [][]Kind{{EndTower}, {Lattice}} {
		if _, err := Candidates(ctx, study(t, 42, kinds...)); !errors.Is(err, context.Canceled) {
			t.Errorf("%v: error %v, want context.Canceled", kinds, err)
		}
	}
}
