package arrangement

import (
	"math"
	"testing"

	"spanwright/structural/action"
)

// Coefficients of equal spans under the same load everywhere: reactions over w·l and
// peak moment over w·l² (continuous-beam tables, AISC Manual Table 3-22c and Schneider,
// Bautabellen, from memory; 5 spans to the printed digits).
func TestEqualSpansAgreeWithBeamTables(t *testing.T) {
	for _, tc := range []struct {
		n         int
		reactions []float64
		moment    float64
		tolerance float64
	}{
		{2, []float64{3.0 / 8, 10.0 / 8, 3.0 / 8}, 1.0 / 8, 1e-9},
		{3, []float64{0.4, 1.1, 1.1, 0.4}, 0.1, 1e-9},
		{4, []float64{11.0 / 28, 32.0 / 28, 26.0 / 28, 32.0 / 28, 11.0 / 28}, 3.0 / 28, 1e-9},
		{5, []float64{0.395, 1.132, 0.974, 0.974, 1.132, 0.395}, 0.105, 3e-3},
	} {
		s := study(t, 42, EqualSpans)
		s.Spans = []int{tc.n}
		c := only(t, s)
		l := 42 / float64(tc.n)
		w := 2100 + c.Result.Section.Mass*gravity
		for i, k := range tc.reactions {
			same(t, c.Name+": reaction", c.Supports[i].Max, k*w*l, tc.tolerance)
			same(t, c.Name+": permanent", c.Supports[i].Permanent, k*(w-1200)*l, tc.tolerance)
			same(t, c.Name+": place", c.Supports[i].X+1, float64(i)*l+1, 1e-12)
		}
		same(t, c.Name+": moment", -c.Result.Envelope.MomentMin.Value, tc.moment*w*l*l, tc.tolerance)
		if len(c.Towers) != tc.n || len(c.Footings) != tc.n+1 {
			t.Errorf("%s: %d towers, %d footings", c.Name, len(c.Towers), len(c.Footings))
		}
	}
}

// Three equal spans with a variable load that may stand on any of them (Schneider,
// Bautabellen, from memory): inner reaction 1.200, end reaction 0.450 and −0.050 q·l.
func TestPatternsOfAFreeLoad(t *testing.T) {
	s := study(t, 30, EqualSpans)
	s.Spans = []int{3}
	s.Member.Actions[1].Free = true
	c := only(t, s)
	w := 900 + c.Result.Section.Mass*gravity
	same(t, "end, most", c.Supports[0].Max, (0.4*w+0.45*1200)*10, 1e-9)
	same(t, "end, least", c.Supports[0].Min, (0.4*w-0.05*1200)*10, 1e-9)
	same(t, "inner, most", c.Supports[1].Max, (1.1*w+1.2*1200)*10, 1e-9)
	// 0.4 = 0.45 − 0.05: of the end's permanent reaction the middle span takes 0.05 away;
	// safety 1.5 counts that part, and the variable one, one and a half times
	same(t, "end, stability", c.Supports[0].Least, (0.45*w-1.5*0.05*(w+1200))*10, 1e-9)
}

// Simple span and propped cantilever from any table: 1/2, 1/2; 5/8, 3/8 with w·L²/8.
func TestEndTowerAndPropped(t *testing.T) {
	c := only(t, study(t, 20, EndTower))
	w := 2100 + c.Result.Section.Mass*gravity
	same(t, "root", c.Supports[0].Max, w*10, 1e-9)
	same(t, "tower", c.Supports[1].Max, w*10, 1e-9)
	same(t, "sag", c.Deflection.Value, 5*w*math.Pow(20, 4)/(384*s355E*c.Result.Section.Iy), 1e-9)
	c = only(t, study(t, 20, Propped))
	w = 2100 + c.Result.Section.Mass*gravity
	same(t, "fixed root", c.Supports[0].Max, 5.0/8*w*20, 1e-9)
	same(t, "prop", c.Supports[1].Max, 3.0/8*w*20, 1e-9)
	same(t, "couple", c.Supports[0].Couple, w*400/8, 1e-9)
}

const s355E = 210e9 // Pa, EN 1993-1-1:2005 3.2.6

// Under one uniform load: one inner support at L/√2, two at 0.2071 L = (√2 − 1)/2 from
// the ends, where span and support moments are equal (by hand; BRIEF's own figures).
func TestBestPositions(t *testing.T) {
	s := study(t, 42, InnerLeastMoment)
	c := only(t, s)
	same(t, "L/√2", c.Supports[1].X, 42/math.Sqrt2, 1e-5)
	same(t, "moments", c.Result.Envelope.MomentMax.Value, -c.Result.Envelope.MomentMin.Value, 1e-4)
	s.Kinds = []Kind{TwoInner}
	c = only(t, s)
	inset := 42 * (math.Sqrt2 - 1) / 2
	same(t, "left", c.Supports[0].X, inset, 1e-5)
	same(t, "right", c.Supports[1].X, 42-inset, 1e-5)
	if len(c.Towers) != 2 {
		t.Errorf("%d towers, want 2: the root hangs free", len(c.Towers))
	}
}

// With a point load at the tip the best place depends on the member's own weight: it is
// found for the section chosen, so that span and support moments are equal under it.
func TestBestPositionIsForTheChosenSection(t *testing.T) {
	s := study(t, 42, InnerLeastMoment)
	s.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 900}, {Nature: action.Permanent, Kind: action.Point, From: 42, Value: 8000}}
	c := only(t, s)
	if x := c.Supports[1].X; math.Abs(x-42/math.Sqrt2) < 0.1 {
		t.Fatalf("support at %v m: the point load does not move it", x)
	}
	same(t, "moments", c.Result.Envelope.MomentMax.Value, -c.Result.Envelope.MomentMin.Value, 1e-4)
}

// Moving the support away from its best place makes the goal worse.
func TestLeastDeflectionIsLeast(t *testing.T) {
	s := study(t, 42, InnerLeastDeflection)
	s.Sections = s.Sections[len(s.Sections)-1:] // one tube, so that positions alone differ
	best := only(t, s)
	for _, step := range []float64{-0.02, -0.005, 0.005, 0.02} {
		s.Kinds, s.Fractions = []Kind{InnerSupport}, []float64{best.Supports[1].X/42 + step}
		if c := only(t, s); math.Abs(c.Deflection.Value) <= math.Abs(best.Deflection.Value) {
			t.Errorf("%v from the best place: %v m, best %v m", step, c.Deflection.Value, best.Deflection.Value)
		}
	}
}

// Reactions balance what acts: forces, and moments about the root.
func TestEquilibriumOfEveryCandidate(t *testing.T) {
	s := study(t, 30)
	s.Member.Actions = append(s.Member.Actions,
		action.Action{Nature: action.Permanent, Kind: action.Point, From: 11, Value: 7000},
		action.Action{Nature: action.Permanent, Kind: action.Linear, From: 3, To: 9, Value: 400, End: 1600},
		action.Action{Nature: action.Permanent, Kind: action.Moment, From: 20, Value: 5000})
	for _, c := range candidates(t, s) {
		own := c.Result.Section.Mass * gravity
		from := 0.0
		if c.Kind == Cantilever {
			from = -10
		}
		if c.Truss != nil {
			own = c.Truss.OwnWeight
		}
		force := 900*30 + 7000 + 1000*6 + own*(30-from)
		// the ramp: 400·6 at 6 m and 1200·6/2 at 7 m
		moment := 900*450.0 + 7000*11 + 2400*6 + 3600*7 + 5000 + own*(30*30-from*from)/2
		f, m := 0.0, 0.0
		for _, u := range c.Supports {
			f += u.Permanent
			m += u.Permanent * u.X
		}
		same(t, c.Name+": forces", f, force, 1e-9)
		if c.Kind != Propped { // its root takes a couple, of variable actions too
			same(t, c.Name+": moments", m, moment, 1e-9)
		}
	}
}
