package arrangement

import (
	"math"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

func checkOf(t *testing.T, r sizing.Result, id string) resistance.Check {
	t.Helper()
	for _, c := range r.Checks {
		if c.ID == id {
			return c
		}
	}
	t.Fatalf("no %s among %v", id, r.Checks)
	return resistance.Check{}
}

// Legs share the exact reaction; each carries its own weight besides. Euler and Johnson
// by hand for the leg: σ = fy·(1 − λ²/(2·Cc²)) up to Cc = √(2π²E/fy), else π²E/λ².
func TestLegsAreColumnsFromTheExactReaction(t *testing.T) {
	for _, n := range []int{1, 2, 3, 4} {
		s := study(t, 30, EndTower)
		s.Towers.Legs, s.Towers.Factor = n, 1
		c := only(t, s)
		tower, leg := c.Towers[0], c.Towers[0].Leg
		w := 2100 + c.Result.Section.Mass*gravity
		same(t, "compression", tower.Compression, w*15/float64(n), 1e-9)
		same(t, "mass", tower.LegMass, float64(n)*8*leg.Section.Mass, 1e-12)
		same(t, "bracing", tower.BracingMass, 0.25*tower.LegMass, 1e-12)
		same(t, "steel", c.Mass.Steel, 30*c.Result.Section.Mass+1.25*tower.LegMass, 1e-12)
		demand := w*15/float64(n) + 8*leg.Section.Mass*gravity
		axial := checkOf(t, leg, resistance.Axial)
		same(t, "demand", axial.Demand, demand, 1e-9)
		slender, limit := 8/leg.Section.Ry, math.Sqrt(2*math.Pi*math.Pi*s355E/355e6)
		stress := math.Pi * math.Pi * s355E / (slender * slender)
		if slender <= limit {
			stress = 355e6 * (1 - slender*slender/(2*limit*limit))
		}
		same(t, "resistance", axial.Resistance, leg.Section.A*stress/3, 1e-9)
	}
}

// In en1993 a leg takes 1.35 of the permanent and 1.5 of the variable part (EN
// 1990:2002 Table A1.2(B)), not 1.5 of all.
func TestLegsTakeTheFactorsOfTheBasis(t *testing.T) {
	s := study(t, 30, EndTower)
	basis, err := resistance.EN1993(resistance.Partial{})
	if err != nil {
		t.Fatal(err)
	}
	s.Setup.Basis = basis
	if s.Setup.Strength, s.Setup.Service, err = action.Sets("en1993"); err != nil {
		t.Fatal(err)
	}
	c := only(t, s)
	leg := c.Towers[0].Leg
	g := 900 + c.Result.Section.Mass*gravity
	demand := (1.35*g*15+1.5*1200*15)/2 + 1.35*8*leg.Section.Mass*gravity
	same(t, "demand", checkOf(t, leg, resistance.Axial).Demand, demand, 1e-9)
	same(t, "characteristic reaction", c.Supports[1].Max, (g+1200)*15, 1e-9)
}

// Wind of 0.5 kN/m along a 30 m member puts 7.5 kN on the head of each end; at 8 m with
// 0.3 kN/m on the tower M = 60 + 9.6 kN·m about the foot. By statics: two legs 2 m apart
// take M/2, four at the corners of a square M/4, three of a triangle M/(2·√3/2).
func TestWindCoupleInTheLegs(t *testing.T) {
	const moment = 7500*8 + 300*8*8/2.0
	for _, tc := range []struct {
		legs int
		arm  float64
	}{{2, 2}, {3, math.Sqrt(3)}, {4, 4}} {
		s := study(t, 30, EndTower)
		s.Member.Actions = append(s.Member.Actions, action.Action{Direction: action.Horizontal, Value: 500, Label: "wind"})
		s.Towers.Legs, s.Towers.Spread, s.Towers.Wind = tc.legs, 2, 300
		c := only(t, s)
		n := float64(tc.legs)
		w := c.Result.Section.Mass * gravity
		same(t, "side", c.Supports[1].Side, 7500, 1e-9)
		same(t, "moment", c.Towers[0].Overturning, moment, 1e-9)
		same(t, "compression", c.Towers[0].Compression, (2100+w)*15/n+moment/tc.arm, 1e-9)
		same(t, "tension", c.Towers[0].Tension, math.Max(0, moment/tc.arm-(900+w)*15/n), 1e-9)
		if tc.legs == 2 && !(c.Footings[1].Uplift > 0) {
			t.Errorf("%d legs: no uplift under a couple of %v N", tc.legs, moment/tc.arm)
		}
	}
}

// A single leg bends as a cantilever, its footing takes the moment.
func TestSingleLegBends(t *testing.T) {
	s := study(t, 30, EndTower)
	s.Member.Actions = append(s.Member.Actions, action.Action{Direction: action.Horizontal, Value: 500})
	s.Towers.Legs, s.Towers.Wind = 1, 300
	c := only(t, s)
	const moment = 7500*8 + 300*8*8/2.0
	same(t, "bending", checkOf(t, c.Towers[0].Leg, resistance.Bending).Demand, moment, 1e-9)
	same(t, "footing", c.Footings[1].Moment, moment, 1e-9)
	if c.Footings[1].Count != 1 {
		t.Errorf("%d footings", c.Footings[1].Count)
	}
}

// Without height there are no towers, and supports stand on their footings; with a
// height at the root the root has one too.
func TestTowerHeights(t *testing.T) {
	s := study(t, 20, EndTower)
	s.Towers.Height = 0
	if c := only(t, s); len(c.Towers) != 0 || len(c.Footings) != 2 {
		t.Errorf("no height: %d towers, %d footings", len(c.Towers), len(c.Footings))
	}
	s.Towers.RootHeight = 5
	if c := only(t, s); len(c.Towers) != 1 || c.Towers[0].X != 0 || c.Towers[0].Height != 5 {
		t.Errorf("root height: %+v", c.Towers)
	}
}

// A leg that no size of the family makes is said so, with the part's name.
func TestLegsThatDoNotPass(t *testing.T) {
	s := study(t, 30, EndTower)
	s.Towers.Sections = series(t, "CHS")[:3]
	c := only(t, s)
	if c.Feasible || c.Reason == "" || len(c.WaysOut) == 0 {
		t.Fatalf("feasible %v, reason %q, ways out %q", c.Feasible, c.Reason, c.WaysOut)
	}
	if want := "tower leg at 30.00 m: no section passes; the nearest, "; len(c.Reason) < len(want) || c.Reason[:len(want)] != want {
		t.Errorf("reason %q, want %q…", c.Reason, want)
	}
}

// A bar in several states takes the lightest section that passes all of them: sizes
// against every section of the series tried by itself.
func TestColumnAgainstTryingEverySection(t *testing.T) {
	s := study(t, 30)
	all := ordered(series(t, "CHS"))
	m := sizing.Member{Length: 5, Upright: true, LengthFactor: 1}
	states := []axial{{40e3, 30e3}, {-20e3, -900e3}, {10e3, -300e3}}
	got, err := column(m, s.Setup, all, states...)
	if err != nil {
		t.Fatal(err)
	}
	passes := func(x *section.Section) bool {
		for _, n := range states {
			m.PermanentAxial, m.Axial = n.permanent, n.variable
			p, err := sizing.Prepare(m, s.Setup)
			if err != nil {
				t.Fatal(err)
			}
			if u, _, err := p.Utilisation(x); err != nil || !resistance.Passes(u) {
				return false
			}
		}
		return true
	}
	for i := range all {
		if passes(&all[i]) {
			if got.Section.Designation != all[i].Designation || !got.Passes {
				t.Errorf("chose %s, want %s", got.Section.Designation, all[i].Designation)
			}
			return
		}
	}
	t.Fatal("no section passes: the test says nothing")
}

// A fixed root on a tower is refused by name: its legs would have to hold the couple.
func TestFixedRootNeedsMoreThanATower(t *testing.T) {
	s := study(t, 20, Propped)
	if c := only(t, s); !c.Feasible {
		t.Fatalf("not feasible on a footing: %s", c.Reason)
	}
	s.Towers.RootHeight = 6
	if c := only(t, s); c.Feasible || len(c.Reason) < 5 || c.Reason[:5] != "root:" || len(c.WaysOut) == 0 {
		t.Errorf("feasible %v, reason %q", c.Feasible, c.Reason)
	}
}
