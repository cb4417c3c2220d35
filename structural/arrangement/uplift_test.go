package arrangement

import (
	"slices"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
)

// An inner support before the middle lifts the root: R = w·a/2 − w·b²/(2a), a the span
// and b the overhang. EN 1990:2002 Table A1.2(A) counts the overhang 1.1 times, the span
// 0.9 times.
func TestUpliftOfTheRoot(t *testing.T) {
	s := study(t, 30, InnerSupport)
	s.Fractions, s.Stability = []float64{0.4}, action.EN1990Equilibrium()
	c := only(t, s)
	g := 900 + c.Result.Section.Mass*gravity
	const a, b = 12.0, 18.0
	root := c.Supports[0]
	same(t, "least", root.Least, 0.9*g*a/2-1.1*g*b*b/(2*a)+1.5*1200*(a/2-b*b/(2*a)), 1e-9)
	same(t, "characteristic", root.Min, (g+1200)*(a/2-b*b/(2*a)), 1e-9)
	if !root.Lifted() || c.Supports[1].Lifted() {
		t.Errorf("lifted: root %v, tower %v; want the root alone", root.Lifted(), c.Supports[1].Lifted())
	}
	f := c.Footings[0]
	same(t, "footing against uplift", f.Volume, -root.Least/(0.9*2400*gravity), 1e-9)
	if f.Governs != "uplift" {
		t.Errorf("governs %q, want uplift", f.Governs)
	}
	if !slices.ContainsFunc(c.Notes, func(n Note) bool { return n.ID == "arrangement/uplift" && n.Values[0].Value == -root.Least }) {
		t.Errorf("no note of the uplift among %v", c.Notes)
	}
}

// A support that permanent load holds down may be lifted by a free variable load on the
// overhang alone.
func TestUpliftFromAFreeLoadAlone(t *testing.T) {
	s := study(t, 30, InnerSupport)
	s.Fractions = []float64{0.55}
	s.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 900}, {Value: 9000}}
	if c := only(t, s); c.Supports[0].Min < 0 {
		t.Fatalf("a load on the whole length lifts: %v", c.Supports[0].Min)
	}
	s.Member.Actions[1].Free = true
	c := only(t, s)
	g := 900 + c.Result.Section.Mass*gravity
	const a, b = 16.5, 13.5
	same(t, "least", c.Supports[0].Min, g*(a/2-b*b/(2*a))-9000*b*b/(2*a), 1e-9)
	if !c.Supports[0].Lifted() {
		t.Error("not lifted")
	}
}

// Wind that lifts the roof of a gallery pulls on the legs of its tower.
func TestUpliftPullsOnTowerLegs(t *testing.T) {
	s := study(t, 20, EndTower)
	s.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 900}, {Value: -6000, Label: "wind"}}
	c := only(t, s)
	g := 900 + c.Result.Section.Mass*gravity
	tower := c.Towers[0]
	same(t, "tension", tower.Tension, (6000-g)*10/2, 1e-9)
	same(t, "compression", tower.Compression, g*10/2, 1e-9)
	own := (tower.LegMass + tower.BracingMass) * gravity
	want := 1.5*6000*10/2 - g*10/2 - own/2
	same(t, "uplift of a footing", c.Footings[1].Uplift, want, 1e-9)
	if !(c.Deflection.Value < 0) {
		t.Errorf("deflection %v m, want up", c.Deflection.Value)
	}
}

// Where tension is the greater force it sizes the leg: T + own weight on A·fy/3.
func TestTensionSizesTheLeg(t *testing.T) {
	s := study(t, 20, EndTower)
	s.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 900}, {Value: -60000, Label: "wind"}}
	tower := only(t, s).Towers[0]
	if !(tower.Tension > 5*tower.Compression) {
		t.Fatalf("tension %v N, compression %v N: the test says nothing", tower.Tension, tower.Compression)
	}
	same(t, "utilisation", checkOf(t, tower.Leg, resistance.Axial).Resistance, tower.Leg.Section.A*355e6/3, 1e-9)
	if u := tower.Tension / (tower.Leg.Section.A * 355e6 / 3); !(u <= tower.Leg.Utilisation && tower.Leg.Utilisation <= 1) {
		t.Errorf("utilisation %v, tension alone %v", tower.Leg.Utilisation, u)
	}
}
