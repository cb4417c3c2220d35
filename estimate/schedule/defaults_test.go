package schedule

import (
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/assumption"
	"spanwright/structural/resistance"
)

func entriesByID(s Schedule) map[string]assumption.Entry {
	list := map[string]assumption.Entry{}
	for _, e := range s.Defaults {
		list[e.ID] = e
	}
	return list
}

func TestDefaultsEnterTheRegister(t *testing.T) {
	s := mustRead(t, csvOf(everyColumn...), Options{})
	entries := entriesByID(s)
	var ids []string
	for _, e := range s.Defaults {
		ids = append(ids, e.ID)
		if e.Statement == "" || e.Source == "" || e.Owner != "Spanwright" || e.Feeds == nil || e.Confidence == assumption.High {
			t.Errorf("%s is incomplete: %+v", e.ID, e)
		}
		fromStandard := strings.HasPrefix(e.ID, "default/load/") && strings.HasPrefix(e.Source, "EN 1991")
		if e.Kind != assumption.Default || !strings.HasPrefix(e.Source, "common practice, no source") && !fromStandard {
			t.Errorf("%s is of kind %s, source %s", e.ID, e.Kind, e.Source)
		}
	}
	want := []string{
		"default/confidence", "default/connection class/simple beams", "default/connection class/trestles", "default/connection class/tube booms",
		"default/currency", "default/deflection limit/100", "default/deflection limit/250", "default/design basis", "default/estimate class",
		"default/factor", "default/grade/A53 B", "default/grade/S235", "default/group/ungrouped", "default/kind/beam", "default/kind/cantilever",
		"default/length factor/1 for spans, 2 for free ends", "default/load/walkway deck/0.48", "default/load/walkway people/3.6", "default/money", "default/owner costs", "default/purchase", "default/restraint/full span", "default/support/not sized",
	}
	if diff := cmp.Diff(want, ids); diff != "" {
		t.Errorf("ids (-want +got):\n%s", diff)
	}
	for _, m := range s.Members {
		for field, id := range m.Defaults {
			if _, ok := entries[id]; !ok {
				t.Errorf("%s: %s takes %s, which is not in the register", m.Mark, field, id)
			}
		}
	}
	if diff := cmp.Diff(map[string]string{
		"deflection_limit": "default/deflection limit/250", "kind": "default/kind/cantilever", "grade": "default/grade/S235",
		"restraint_m": "default/restraint/full span", "length_factor": "default/length factor/1 for spans, 2 for free ends", "connection_class": "default/connection class/simple beams",
	}, s.Members[0].Defaults); diff != "" {
		t.Errorf("defaults of B2 (-want +got):\n%s", diff)
	}
}

func TestBlankSupportIsADefault(t *testing.T) {
	s := mustRead(t, oneBeam, Options{})
	if got := s.Members[0].Defaults["arrangement"]; got != "default/support/simple" || s.Members[0].Arrangement != "simple" {
		t.Errorf("arrangement %s by %q", s.Members[0].Arrangement, got)
	}
	if _, ok := entriesByID(s)["default/support/simple"]; !ok {
		t.Error("the default support is not in the register")
	}
}

func TestFeedsOfDefaults(t *testing.T) {
	s := mustRead(t, csvOf(everyColumn...), Options{})
	entries := entriesByID(s)
	ids := func(mark string, checks ...string) []string {
		var list []string
		for _, c := range checks {
			list = append(list, "member/"+mark+"/check/"+c)
		}
		return list
	}
	join := func(lists ...[]string) []string {
		all := slices.Concat(lists...)
		slices.Sort(all)
		return all
	}
	const ltb = "lateral-torsional buckling"
	for id, want := range map[string][]string{
		// BM1 is a boom; B10 has a limit, B3 has none; C1 stands and is not bent.
		"default/deflection limit/100": ids("BM1", "deflection"),
		"default/deflection limit/250": join(ids("B2", "deflection"), ids("B4", "deflection"), ids("B5", "deflection"), ids("B6", "deflection"), ids("B7", "deflection"), ids("B8", "deflection")),
		// Open shapes without a restraint: B2, B6, B7 and B8; B3 says full span itself.
		"default/restraint/full span": join(ids("B2", ltb), ids("B6", ltb), ids("B7", ltb), ids("B8", ltb)),
		// C1 is compressed and takes K = 1; BM1 names its K.
		"default/length factor/1 for spans, 2 for free ends": ids("C1", "axial"),
		"default/factor": join(ids("B2", "bending", ltb, "shear"), ids("B3", "bending", ltb, "shear"), ids("B4", "bending", "shear"), ids("B5", "bending", "shear"),
			ids("B6", "bending", ltb, "shear"), ids("B7", "bending", ltb, "shear"), ids("B8", "bending", ltb, "shear"),
			ids("B10", "bending", ltb, "shear", "bending about the weak axis", "shear along the width", "interaction"), ids("BM1", "bending", "shear", "axial", "interaction"), ids("C1", "axial")),
		"default/load/walkway deck/0.48":      ids("B8", "bending", "deflection", ltb, "shear"),
		"default/grade/S235":                  {},
		"default/connection class/tube booms": {},
		"default/confidence":                  {"contingency"},
	} {
		if diff := cmp.Diff(want, entries[id].Feeds); diff != "" {
			t.Errorf("%s feeds (-want +got):\n%s", id, diff)
		}
	}
}

// A mark with signs that patterns use is made safe in the ids.
func TestFeedsOfOddMarks(t *testing.T) {
	s := mustRead(t, strings.Replace(oneBeam, "B1,", "B/1*,", 1), Options{})
	for _, id := range entriesByID(s)["default/factor"].Feeds {
		if !strings.HasPrefix(id, "member/B%2F1%2A/check/") {
			t.Errorf("figure %s", id)
		}
	}
}

func TestDoubtfulGradeIsNoted(t *testing.T) {
	s := mustRead(t, strings.Replace(oneBeam, ",IPE,", ",PIPE,", 1), Options{JobTable: []byte("Grade,S355\n")})
	e, ok := entriesByID(s)["structural/grade/PIPE/S355"]
	if !ok || e.Kind != assumption.Structural || !strings.Contains(e.Statement, "A53 B") {
		t.Errorf("PIPE in S355 is noted as %+v", e)
	}
}

// The names of the checks in the feeds are those of the resistances.
func TestFeedsNameChecks(t *testing.T) {
	known := []string{resistance.Bending, resistance.BendingZ, resistance.LateralBuckling, resistance.Shear, resistance.ShearY, resistance.WebBuckling,
		resistance.Axial, resistance.Interaction, resistance.Deflecting, resistance.Vibrating}
	s := mustRead(t, csvOf(everyColumn...), Options{})
	for _, e := range append(InputFeeds(), s.Defaults...) {
		for _, id := range e.Feeds {
			if _, check, ok := strings.Cut(id, "/check/"); ok && !slices.Contains(known, check) {
				t.Errorf("%s feeds %s, which is no check", e.ID, id)
			}
		}
	}
}

func TestKindsDecide(t *testing.T) {
	for kind, want := range map[string]struct {
		class   string
		limit   float64
		upright bool
	}{
		"boom":          {"tube booms", 100, false},
		"Loading Booms": {"tube booms", 100, false},
		"boomerang":     {"simple beams", 250, false},
		"column":        {"trestles", 250, true},
		"tower leg":     {"trestles", 250, true},
		"Posts":         {"trestles", 250, true},
		"trestle":       {"trestles", 250, false},
		"diagonal":      {"lattice", 250, false},
		"top chord":     {"lattice", 250, false},
		"gallery":       {"simple beams", 250, false},
	} {
		if got := classOf(kind, connectionClasses()); got != want.class {
			t.Errorf("%s: class %s, want %s", kind, got, want.class)
		}
		if got := limitOf(kind); got != want.limit {
			t.Errorf("%s: limit %v, want %v", kind, got, want.limit)
		}
		if got := isUpright(kind); got != want.upright {
			t.Errorf("%s: upright %v, want %v", kind, got, want.upright)
		}
	}
}

func TestInputFeeds(t *testing.T) {
	// They bound a choice, move it in steps, or stand outside base and range.
	noFigure := map[string]bool{
		"input/max depth": true, "input/same size as": true, "input/stock lengths": true, "input/kerf": true,
		"input/spend date": true, "input/management reserve": true,
	}
	byID := map[string][]string{}
	for _, e := range InputFeeds() {
		if e.Kind != assumption.Input || e.Statement == "" || e.Source == "" || len(e.Feeds) == 0 != noFigure[e.ID] {
			t.Errorf("%s is incomplete: %+v", e.ID, e)
		}
		byID[e.ID] = e.Feeds
	}
	hasCheck := func(id string) bool {
		return slices.ContainsFunc(byID[id], func(f string) bool { return strings.Contains(f, "/check/") })
	}
	for id, want := range map[string][2]bool{ // checks, base
		"input/length": {true, true}, "input/quantity": {false, true}, "input/variable load": {true, false},
		"input/axial load": {true, false}, "input/mass if not sized": {false, true}, "input/confidence": {false, false},
		"input/joints": {false, true}, "input/concrete": {false, true}, "input/haul distance": {false, true}, "input/risk amount": {false, false},
	} {
		if got := [2]bool{hasCheck(id), slices.ContainsFunc(byID[id], func(f string) bool { return f == "base" || strings.HasPrefix(f, "quantities[") })}; got != want {
			t.Errorf("%s feeds checks and base: %v, want %v", id, got, want)
		}
	}
}

func TestDefaultsAreShared(t *testing.T) {
	s := mustRead(t, oneBeam+"B2,1,6,IPE,1,1\n", Options{})
	s.Members[0].Defaults["probe"] = "x"
	if s.Members[1].Defaults["probe"] != "x" {
		t.Error("equal defaults are held twice")
	}
}

// Secondary steel has classes of its own where the rate book knows them.
func TestClassesOfSecondarySteel(t *testing.T) {
	wide := append(connectionClasses(), platforms, stairs)
	for kind, want := range map[string][2]string{"handrail": {simpleBeams, stairs}, "stair": {simpleBeams, stairs}, "grating": {simpleBeams, platforms}, "boom": {tubeBooms, tubeBooms}, "beam": {simpleBeams, simpleBeams}} {
		if got := [2]string{classOf(kind, connectionClasses()), classOf(kind, wide)}; got != want {
			t.Errorf("%s: got %v, want %v", kind, got, want)
		}
	}
}
