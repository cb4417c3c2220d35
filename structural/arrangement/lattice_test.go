package arrangement

import (
	"context"
	"math"
	"strings"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
)

// The demo's boom as a lattice: forces from wL²/(8h) and the end panel's shear, the
// deflection by virtual work over every bar of the joints, separately.
func TestLatticeOfTheDemoBoom(t *testing.T) {
	s := study(t, 42, Lattice)
	c := only(t, s)
	tr := c.Truss
	if !c.Feasible || tr == nil {
		t.Fatalf("not feasible: %s", c.Reason)
	}
	w := 2100 + tr.OwnWeight
	shear := w * 42 / 2 * (1 - 1/float64(tr.Panels)) // the end panel: half a panel's load goes straight down
	same(t, "diagonal", tr.Force, shear*math.Hypot(tr.Panel/2, tr.Depth)/tr.Depth, 1e-9)
	mid := w * 42 * 42 / 8
	if tr.Panels%2 == 1 { // points beside the middle
		mid -= w * tr.Panel * tr.Panel / 8
	}
	same(t, "chord", tr.Compression, mid/tr.Depth, 1e-9)
	same(t, "mass", tr.Mass, tr.Chords*tr.Chord.Section.Mass+tr.Diagonals*tr.Diagonal.Section.Mass, 1e-12)
	same(t, "own weight", tr.OwnWeight, tr.Mass*1.15*gravity/42, 1e-9)
	same(t, "reactions", c.Supports[0].Max+c.Supports[1].Max, w*42, 1e-9)

	g := truss{tr.Panels, tr.Panel, tr.Depth}
	f := warren(g)
	down, unit := make([]float64, tr.Panels+1), make([]float64, tr.Panels+1)
	for i := range down {
		down[i] = w * tr.Panel
	}
	unit[int(math.Round(tr.Deflection.X/tr.Panel))] = 1
	real, virtual := f.forces(t, down), f.forces(t, unit)
	want, web := 0.0, 0.0
	for k, kind := range f.kind {
		area := tr.Chord.Section.A
		if kind == "diagonal" {
			area = tr.Diagonal.Section.A
			web += real[k] * virtual[k] * f.length(k) / (s355E * area)
		}
		want += real[k] * virtual[k] * f.length(k) / (s355E * area)
	}
	same(t, "deflection", c.Deflection.Value, want, 1e-9)
	same(t, "the diagonals' part", c.Deflection.Shear, web, 1e-9)
	if !(web > 0.02*want) {
		t.Errorf("the diagonals give %v of %v m: too little to show", web, want)
	}
}

// Every truss inside the bounds that the search may choose is no better than the choice.
func TestLatticeAgainstEveryProportion(t *testing.T) {
	s := study(t, 30, Lattice)
	s.Lattice.Depths = 4
	c := only(t, s)
	filled := s.filled()
	h := filled.holdings(Lattice)[0]
	tried := 0
	for _, g := range filled.proportions() {
		slope := math.Atan(2 * g.depth / g.panel)
		if g.depth < 30.0/18-1e-9 || g.depth > 3+1e-9 || slope < flattest-1e-9 || slope > steepest+1e-9 {
			t.Errorf("%+v lies outside the bounds", g)
		}
		one, err := filled.fit(&h, g)
		if err != nil {
			t.Fatal(err)
		}
		tried++
		if one.passes() && one.Mass < c.Truss.Mass {
			t.Errorf("%d panels at %v m weigh %v kg, the choice %v kg", g.panels, g.depth, one.Mass, c.Truss.Mass)
		}
	}
	if tried < 8 {
		t.Errorf("%d proportions tried", tried)
	}
}

// The chord of an own-weight-settled truss passes its checks under that weight.
func TestLatticeBarsPassUnderTheirOwnWeight(t *testing.T) {
	s := study(t, 36, Lattice)
	s = s.filled()
	h := s.holdings(Lattice)[0]
	c := only(t, s)
	g := truss{c.Truss.Panels, c.Truss.Panel, c.Truss.Depth}
	again := *c.Truss
	if err := s.bars(&h, h.loadTruss(g), &again, areas{}); err != nil {
		t.Fatal(err)
	}
	if again.Chord.Section.Designation != c.Result.Section.Designation || !again.Chord.Passes || !again.Diagonal.Passes {
		t.Errorf("again %s and %s, first %s", again.Chord.Section.Designation, again.Diagonal.Section.Designation, c.Result.Section.Designation)
	}
}

// A harder deflection limit is met with heavier bars, and says so where none is enough.
func TestLatticeStiffness(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinDepth, s.Lattice.MaxDepth = 2.5, 2.5
	soft := only(t, s)
	s.Member.DeflectionLimit = 900
	hard := only(t, s)
	if !hard.Feasible || !(hard.Deflection.Value <= 42.0/900*(1+1e-9)) || !(hard.Mass.Member > soft.Mass.Member) {
		t.Errorf("feasible %v, deflection %v m of %v m, mass %v kg after %v kg", hard.Feasible, hard.Deflection.Value, hard.Deflection.Limit, hard.Mass.Member, soft.Mass.Member)
	}
	s.Member.DeflectionLimit = 90000
	none := only(t, s)
	if none.Feasible || !strings.Contains(none.Reason, "deflection") || none.Governing != "lattice: "+resistance.Deflecting || len(none.WaysOut) == 0 {
		t.Errorf("feasible %v, reason %q, governing %q", none.Feasible, none.Reason, none.Governing)
	}
}

// Loads between panel points bend the chord by w·a²/8; with cross beams its own weight
// alone does.
func TestLoadsBetweenPanelPoints(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinDepth, s.Lattice.MaxDepth, s.Lattice.MinPanel, s.Lattice.MaxPanel = 2.5, 2.5, 3, 3
	c := only(t, s)
	own := c.Result.Section.Mass * gravity
	same(t, "bent", checkOf(t, c.Result, resistance.Bending).Demand, (2100+own)*9/8, 1e-9)
	s.Lattice.AtPanelPoints = true
	c = only(t, s)
	own = c.Result.Section.Mass * gravity
	same(t, "at the points", checkOf(t, c.Result, resistance.Bending).Demand, own*9/8, 1e-9)
}

// A lifting wind turns the forces about: the chord is checked in both senses.
func TestLatticeUnderUplift(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.AtPanelPoints = true
	s.Member.Actions = []action.Action{{Nature: action.Permanent, Value: 100}, {Value: -3000}}
	c := only(t, s)
	filled := s.filled()
	f := filled.holdings(Lattice)[0].forcesOf(c.Truss)
	same(t, "compression in the bottom chord", c.Truss.Compression, f, 1e-9)
	if n := checkOf(t, c.Result, resistance.Axial).Demand; !(n >= f*(1-1e-9)) {
		t.Errorf("the chord is checked for %v N, its compression is %v N", n, f)
	}
	if !c.Feasible || !c.Supports[0].Lifted() {
		t.Errorf("feasible %v, lifted %v", c.Feasible, c.Supports[0].Lifted())
	}
}

// forcesOf is the greatest compression in the bottom chord by hand, wL²/8h in the
// middle of the mid panel: with an even number of panels the one beside the middle.
func (h holding) forcesOf(tr *Truss) float64 {
	up := 3000 - 100 - tr.OwnWeight
	if tr.Panels%2 == 1 {
		return up * (42.0*42/8 - tr.Panel*tr.Panel/8) / tr.Depth
	}
	m := func(x float64) float64 { return up * x * (42 - x) / 2 }
	return (m(21) + m(21-tr.Panel)) / 2 / tr.Depth
}

// Bounds that leave no proportion are an error that names them.
func TestLatticeErrors(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinPanel, s.Lattice.MaxPanel = 9, 10
	if _, err := Candidates(context.Background(), s); err == nil || !strings.Contains(err.Error(), "no whole number of panels") {
		t.Errorf("error %v", err)
	}
}

// The first natural frequency against Dunkerley's sum by hand for an even mass:
// ω⁻² = m/(EI·k⁴) + m/(Sv·k²), k = π/L; and a floor above it fails by name.
func TestLatticeFrequency(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinDepth, s.Lattice.MaxDepth = 2.5, 2.5
	s.Member.FrequencyFloor, s.Member.MassShare = 0.5, 0.5
	tr := only(t, s).Truss
	m := (900 + 0.5*1200 + tr.OwnWeight) / gravity
	k := math.Pi / 42
	d := math.Hypot(tr.Panel/2, 2.5)
	ei := s355E * tr.Chord.Section.A * 2.5 * 2.5 / 2
	sv := s355E * tr.Diagonal.Section.A * tr.Panel * 2.5 * 2.5 / (2 * d * d * d)
	want := 1 / math.Sqrt(m/(ei*math.Pow(k, 4))+m/(sv*k*k)) / (2 * math.Pi)
	same(t, "frequency", tr.Frequency, want, 1e-6)
	s.Member.FrequencyFloor = 50
	c := only(t, s)
	if c.Feasible || !strings.Contains(c.Reason, "frequency") || c.Governing != "lattice: "+resistance.Vibrating {
		t.Errorf("feasible %v, reason %q, governing %q", c.Feasible, c.Reason, c.Governing)
	}
}

// Point loads between panel points stand in the middle of the worst panel: two of 3 and
// 4 kN in one panel of 3 m against one of 5 kN in another, M = 7 kN·3 m/4.
func TestPointLoadsBetweenPanelPoints(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinDepth, s.Lattice.MaxDepth, s.Lattice.MinPanel, s.Lattice.MaxPanel = 2.5, 2.5, 3, 3
	s.Member.Actions = []action.Action{
		{Kind: action.Point, From: 10, Value: 3000}, {Kind: action.Point, From: 11, Value: 4000}, {Kind: action.Point, From: 40, Value: 5000},
	}
	c := only(t, s)
	own := c.Result.Section.Mass * gravity
	same(t, "bent", checkOf(t, c.Result, resistance.Bending).Demand, 7000*3/4.0+own*9/8, 1e-9)
}

// A wheel on a lattice: the chord takes P·L/(4h) in the middle point of an even number of
// panels and P·a/4 between two, with the dynamic factor.
func TestWheelOnALattice(t *testing.T) {
	s := study(t, 42, Lattice)
	s.Lattice.MinDepth, s.Lattice.MaxDepth, s.Lattice.MinPanel, s.Lattice.MaxPanel = 2.5, 2.5, 3, 3
	s.Member.Actions = []action.Action{{Kind: action.MovingTrain, Dynamic: 1.2, Train: action.Train{Loads: []float64{10000}}}}
	c := only(t, s)
	same(t, "chord", c.Truss.Compression, (12000*42/4.0+c.Truss.OwnWeight*42*42/8)/2.5, 1e-9)
	own := c.Result.Section.Mass * gravity
	same(t, "between", checkOf(t, c.Result, resistance.Bending).Demand, 12000*3/4.0+own*9/8, 1e-6)
	same(t, "reaction", c.Supports[1].Max, 12000+c.Truss.OwnWeight*21, 1e-9)
}
