package arrangement

import (
	"math"
	"testing"

	"spanwright/structural/action"
)

// A 12 m boom on a 4 m tail, by statics about the root: w of the boom lifts at
// 12²/2, the tail's own weight holds at 4²/2.
func TestCounterweightByHand(t *testing.T) {
	for _, tc := range []struct {
		name string
		rule action.Combination
		mass func(g, q, own, hold float64) float64 // kg from moments, N·m
	}{
		{"safety 1.5", action.Combination{}, func(g, q, own, hold float64) float64 {
			return (1.5*(g+q+own) - hold) / (gravity * 4)
		}},
		{"safety 2", SafetyFactor(2), func(g, q, own, hold float64) float64 {
			return (2*(g+q+own) - hold) / (gravity * 4)
		}},
		{"EQU", action.EN1990Equilibrium(), func(g, q, own, hold float64) float64 { // EN 1990:2002 Table A1.2(A)
			return (1.1*(g+own) + 1.5*q - 0.9*hold) / (0.9 * gravity * 4)
		}},
	} {
		s := study(t, 12, Cantilever)
		s.Tail, s.Stability = 4, tc.rule
		c := only(t, s)
		if !c.Feasible {
			t.Fatalf("%s: %s", tc.name, c.Reason)
		}
		w := c.Result.Section.Mass * gravity
		g, q, own, hold := 900*72.0, 1200*72.0, w*72, w*8
		want := tc.mass(g, q, own, hold)
		same(t, tc.name+": mass", c.Ballast.Mass, want, 1e-9)
		same(t, tc.name+": mass of the candidate", c.Mass.Ballast, want, 1e-9)
		same(t, tc.name+": volume", c.Ballast.Volume, want/2400, 1e-9)
		same(t, tc.name+": overturning", c.Ballast.Overturning, g+q+own, 1e-9)
		same(t, tc.name+": holding", c.Ballast.Holding, hold, 1e-12)
		same(t, tc.name+": safety", c.Ballast.Safety, (hold+want*gravity*4)/(g+q+own), 1e-9)
		same(t, tc.name+": boom and tail", c.Mass.Member, 16*c.Result.Section.Mass, 1e-12)
	}
}

// With safety n the counterweight and the tail hold n times what overturns.
func TestCounterweightReachesItsSafety(t *testing.T) {
	for _, n := range []float64{1.2, 1.5, 3} {
		s := study(t, 15, Cantilever)
		s.Stability = SafetyFactor(n)
		same(t, "safety", only(t, s).Ballast.Safety, n, 1e-9)
	}
}

// A boom held only at its root needs many times its own mass in ballast (common
// practice, no source): the demo's boom of 42 m on a tail of a sixth of its length.
func TestRootHeldBoomNeedsManyTimesItsMass(t *testing.T) {
	s := study(t, 42, Cantilever)
	s.Tail = 7
	c := only(t, s)
	boom := 42 * c.Result.Section.Mass
	// at the least, from its own weight alone: 1.5·42²/2/(42·7) less the tail's part
	if least := 1.5*42/(2*7) - 7.0/(2*42); !(c.Ballast.Mass > least*boom) || least < 4 {
		t.Errorf("ballast %v kg for a boom of %v kg, want over %v times", c.Ballast.Mass, boom, least)
	}
	if c.Feasible || c.Reason == "" || len(c.WaysOut) == 0 {
		t.Errorf("feasible %v, reason %q, ways out %q: no tube of the series carries it with factor 3", c.Feasible, c.Reason, c.WaysOut)
	}
}

// The tip of an overhang a beyond a back span b, by superposition of a cantilever and
// the turn of its root (any handbook): w on a alone sinks it by w·a³·(3a + 4b)/(24·E·I),
// w on b alone lifts it by w·b³·a/(24·E·I).
func TestTipDeflectionTurnsWithTheTail(t *testing.T) {
	s := study(t, 12, Cantilever)
	s.Tail = 4
	c := only(t, s)
	own := c.Result.Section.Mass * gravity
	const a, b = 12.0, 4.0
	ei := s.Setup.Grade.E * c.Result.Section.Iy
	want := ((2100+own)*a*a*a*(3*a+4*b) - own*b*b*b*a) / (24 * ei)
	same(t, "tip", c.Deflection.Value, want, 1e-9)
	same(t, "place", c.Deflection.X, 12, 1e-12)
}

// A train may stand on the tail, but there it never counts as ballast; on the tip it
// overturns with its dynamic factor.
func TestTrainOverturnsAtTheTip(t *testing.T) {
	s := study(t, 12, Cantilever)
	s.Tail = 4
	s.Member.Actions = append(s.Member.Actions,
		action.Action{Kind: action.MovingTrain, Dynamic: 1.2, Train: action.Train{Loads: []float64{5000}}})
	c := only(t, s)
	w := c.Result.Section.Mass * gravity
	same(t, "overturning", c.Ballast.Overturning, (2100+w)*72+1.2*5000*12, 1e-6)
	if last := c.Supports[1]; math.Abs(last.Max-((2100+w)*12*(4+6)/4+w*2+1.2*5000*16/4)) > 1 {
		t.Errorf("root carries %v N", last.Max)
	}
}

// A stub on a long tail needs no counterweight.
func TestNoBallastWhereNothingLifts(t *testing.T) {
	s := study(t, 2, Cantilever)
	s.Member.Actions, s.Tail = nil, 12
	if b := only(t, s).Ballast; b.Mass != 0 || b.Volume != 0 || !(b.Overturning > 0) {
		t.Errorf("a 2 m stub on a 12 m tail: %+v", b)
	}
}
