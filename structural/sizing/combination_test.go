package sizing

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
)

// A 6 m span by hand. With G = 20 and Q = 1 kN/m 1.4D governs under ASCE 7-22 2.3.1:
// 28 against 25.6 kN/m; with G = 1 and Q = 20 it is 1.2D + 1.6L: 33.2 against 1.4.
func TestEitherCombinationGovernsWhereItIsWorse(t *testing.T) {
	for _, tc := range []struct {
		dead, live float64
		want       string
		load       func(own float64) float64
	}{
		{20e3, 1e3, "1.4D", func(own float64) float64 { return 1.4 * (20e3 + own) }},
		{1e3, 20e3, "1.2D + 1.6L", func(own float64) float64 { return 1.2*(1e3+own) + 1.6*20e3 }},
	} {
		m := Member{Length: 6, Supports: pinned(0, 6), RestraintSpacing: 0.5, Actions: []action.Action{{Nature: action.Permanent, Value: tc.dead}, {Value: tc.live}}}
		r, err := prepare(t, m, setupOf(t, resistance.LRFD, "A992")).Explain(named(t, "W18x50"))
		if err != nil {
			t.Fatal(err)
		}
		want := tc.load(r.SelfWeight/6) * 36 / 8
		if c := check(t, r, resistance.Bending); math.Abs(c.Demand-want) > 1e-9*want {
			t.Errorf("D = %v, L = %v: moment %v N·m, want %v", tc.dead, tc.live, c.Demand, want)
		}
		if r.Combination != tc.want {
			t.Errorf("D = %v, L = %v: %q governs, want %q", tc.dead, tc.live, r.Combination, tc.want)
		}
		if len(r.Combinations) != len(r.Checks) {
			t.Errorf("%d combinations for %d checks", len(r.Combinations), len(r.Checks))
		}
	}
}

// A light roof beam under uplift: G = 0.5, Q = −4 kN/m over 10 m. By hand, with the
// own weight g: the greatest upward load is 1.5·4 − 1.0·(0.5 + g) under EN 1990 (6.10),
// 1.6·4 − 0.9·(0.5 + g) under 2.3.1 and 4 − 0.6·(0.5 + g) under 2.4.1. With the
// unfavourable factor instead the uplift would come out too small.
func TestUpliftTakesTheFavourableFactor(t *testing.T) {
	m := Member{Length: 10, Supports: pinned(0, 10), RestraintSpacing: 1, Actions: []action.Action{{Nature: action.Permanent, Value: 500}, {Value: -4000}}}
	for basis, up := range map[string]func(g float64) float64{
		"en1993":        func(g float64) float64 { return 1.5*4000 - 1.0*(500+g) },
		resistance.LRFD: func(g float64) float64 { return 1.6*4000 - 0.9*(500+g) },
		resistance.ASD:  func(g float64) float64 { return 4000 - 0.6*(500+g) },
		"allowable":     func(g float64) float64 { return 4000 - (500 + g) },
	} {
		r, err := prepare(t, m, setupOf(t, basis, "S355")).Explain(named(t, "IPE 240"))
		if err != nil {
			t.Fatal(err)
		}
		want := up(r.SelfWeight/10) * 100 / 8
		c := check(t, r, resistance.Bending)
		if math.Abs(c.Demand-want) > 1e-9*want {
			t.Errorf("%s: moment %v N·m, want %v", basis, c.Demand, want)
		}
		if basis == "en1993" && (!strings.Contains(r.Combination, "favourable") || !strings.Contains(c.Note, "favourable")) {
			t.Errorf("governing %q, note %q: want the favourable factor named", r.Combination, c.Note)
		}
	}
}

// An overhang of 4 m behind a span of 6 m, G = 3 kN/m all over, Q = 5 kN/m on the
// overhang: over the inner support the permanent load adds; the far support is
// lifted by (1.5·5 + γ·g)·4²/2/6 less γ·g·3, so the favourable factor is worse there.
func TestOverhangReactionsTakeTheWorseFactor(t *testing.T) {
	m := Member{Length: 10, Supports: pinned(0, 6), Actions: []action.Action{{Nature: action.Permanent, Value: 3000}, {Value: 5000, From: 6, To: 10}}}
	p, s := prepare(t, m, enSetup(t, "S355")), named(t, "IPE 300")
	g := 3000 + s.Mass*gravity
	far := func(gamma, q float64) float64 { return gamma*g*(3-16.0/12) - q*5000*16/12 }
	for _, tc := range []struct {
		c           action.Combination
		least, most float64
	}{
		{action.EN1990Strength(), far(1, 1.5), far(1.35, 0)},
		{action.EN1990Equilibrium(), far(0.9, 1.5), far(1.1, 0)},
		{action.Characteristic(), far(1, 1), far(1, 0)},
	} {
		r, err := p.Reactions(s, tc.c)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(r[0].FMin-tc.least) > 1e-6 || math.Abs(r[0].FMax-tc.most) > 1e-6 {
			t.Errorf("%s: far support %v to %v N, want %v to %v", tc.c.Name, r[0].FMin, r[0].FMax, tc.least, tc.most)
		}
	}
	if _, err := p.Reactions(s, action.Combination{}); err == nil {
		t.Error("reactions under no factors are accepted")
	}
}

// Two variable actions, 10 and 4 kN/m over 8 m, ψ0 = 0.7: with the first leading
// 10 + 0.7·4 = 12.8, with the second 4 + 7 = 11 kN/m, times 1.5.
func TestEachVariableActionLeadsInTurn(t *testing.T) {
	s := enSetup(t, "S355")
	s.Strength[0].Accompanying = 0.7
	m := Member{Length: 8, Supports: pinned(0, 8), RestraintSpacing: 1, Actions: []action.Action{{Value: 4000, Label: "snow"}, {Value: 10000, Label: "people"}}}
	r, err := prepare(t, m, s).Explain(named(t, "IPE 400"))
	if err != nil {
		t.Fatal(err)
	}
	want := (1.5*12800 + 1.35*r.SelfWeight/8) * 8
	if c := check(t, r, resistance.Bending); math.Abs(c.Demand-want) > 1e-9*want {
		t.Errorf("moment %v N·m, want %v", c.Demand, want)
	}
	if !strings.Contains(r.Combination, "people leading") {
		t.Errorf("governing %q, want people leading", r.Combination)
	}
	m.Axial = 5e5
	r, err = prepare(t, m, s).Explain(named(t, "IPE 400"))
	if err != nil {
		t.Fatal(err)
	}
	if c := check(t, r, resistance.Axial); math.Abs(c.Demand-7.5e5) > 1e-3 {
		t.Errorf("compression %v N, want it leading: 1.5 × 500 kN", c.Demand)
	}
}

// Wind of 3 kN/m sideways on a vertical 5 kN/m, both over 8 m: by hand wL²/8 and wL/2
// about each axis, 5wL⁴/384EI with Iz, all times 1.5 for strength, 1 for deflection.
func TestHorizontalActionsBendAboutTheWeakAxis(t *testing.T) {
	m := Member{
		Length: 8, Supports: pinned(0, 8), RestraintSpacing: 1, DeflectionLimit: 200,
		Actions: []action.Action{{Value: 5000}, {Value: 3000, Direction: action.Horizontal}, {Value: -400, Direction: action.Horizontal}},
	}
	p, s := prepare(t, m, enSetup(t, "S355")), named(t, "HE 200 B")
	r, err := p.Explain(s)
	if err != nil {
		t.Fatal(err)
	}
	for _, tc := range []struct {
		id   string
		want float64
	}{
		{resistance.Bending, (1.5*5000 + 1.35*r.SelfWeight/8) * 8},
		{resistance.BendingZ, 1.5 * 3000 * 8},
		{resistance.ShearY, 1.5 * 3000 * 4},
	} {
		if c := check(t, r, tc.id); math.Abs(c.Demand-tc.want) > 1e-9*tc.want {
			t.Errorf("%s: %v, want %v", tc.id, c.Demand, tc.want)
		}
	}
	want := 5 * 3000 * math.Pow(8, 4) / (384 * 210e9 * s.Iz)
	if d := p.deflections[1]; d.Where != "span 1, sideways" || math.Abs(d.Value-want) > 1e-9*want {
		t.Errorf("%+v, want %v m sideways", d, want)
	}
	m.Actions = m.Actions[:1]
	calm, err := prepare(t, m, enSetup(t, "S355")).Explain(s)
	if err != nil || calm.Utilisation >= r.Utilisation {
		t.Errorf("without wind %v, with wind %v, %v", calm.Utilisation, r.Utilisation, err)
	}
}

// Two wheels of 40 and 20 kN, 2 m apart, on 10 m. The greatest moment stands under the
// heavy wheel with the midspan halfway between it and the resultant (any handbook):
// R = 60 kN at 2/3 m from the heavy wheel, M = R/L·(L/2 − 1/3)² = 60/10·(14/3)² kN·m;
// the greatest shear with the heavy wheel at the support: 40 + 20·8/10 = 56 kN.
func TestTrainIsPlacedWorstAndTakesItsDynamicFactor(t *testing.T) {
	train := action.Action{Kind: action.MovingTrain, Dynamic: 1.25, Train: action.Train{Loads: []float64{40e3, 20e3}, Spacings: []float64{2}}}
	m := Member{Length: 10, Supports: pinned(0, 10), RestraintSpacing: 1, Actions: []action.Action{train}}
	r, err := prepare(t, m, setup(t, 1.5, "S355")).Explain(named(t, "HE 300 B"))
	if err != nil {
		t.Fatal(err)
	}
	own := r.SelfWeight / 10
	at := 10.0/2 - 1.0/3
	moment := 1.25*60e3/10*at*at + own*at*(10-at)/2
	if c := check(t, r, resistance.Bending); !(c.Demand >= moment*(1-1e-9) && c.Demand <= moment*1.003) {
		t.Errorf("moment %v N·m, want at least %v under the wheel and little more", c.Demand, moment)
	}
	shear := 1.25*56e3 + own*5
	if c := check(t, r, resistance.Shear); math.Abs(c.Demand-shear) > 1e-6*shear {
		t.Errorf("shear %v N, want %v", c.Demand, shear)
	}
	if want := 1.25*60e3 + r.SelfWeight; math.Abs(r.TotalLoad-want) > 1e-6 {
		t.Errorf("total %v N, want %v", r.TotalLoad, want)
	}
	m.Supports = pinned(0, 5, 10)
	if r, err = prepare(t, m, setup(t, 1.5, "S355")).Explain(named(t, "HE 300 B")); err != nil || len(r.Ratios) == 0 {
		t.Errorf("train over two spans: %d ratios, %v", len(r.Ratios), err)
	}
}

func TestDynamicFactorRaisesItsActionAlone(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6), RestraintSpacing: 1, Actions: []action.Action{
		{Nature: action.Permanent, Value: 2000, Dynamic: 1.1}, {Value: 3000, Dynamic: 1.4}, {Kind: action.Point, From: 3, Value: 6000},
	}}
	r, err := prepare(t, m, setup(t, 1.5, "S235")).Explain(named(t, "IPE 300"))
	if err != nil {
		t.Fatal(err)
	}
	want := (1.1*2000+1.4*3000+r.SelfWeight/6)*36/8 + 6000*6/4
	if c := check(t, r, resistance.Bending); math.Abs(c.Demand-want) > 1e-9*want {
		t.Errorf("moment %v N·m, want %v", c.Demand, want)
	}
}

// Linear load 0 to w over L: the greatest moment is wL²/(9√3), a couple in the middle
// of a span gives M/2 on either side (any handbook).
func TestLinearActionsAndCouples(t *testing.T) {
	for _, tc := range []struct {
		a    action.Action
		want float64
	}{
		{action.Action{Kind: action.Linear, End: 9000}, 9000 * 36 / (9 * math.Sqrt(3))},
		{action.Action{Kind: action.Linear, Value: 9000, Free: true}, 9000 * 36 / (9 * math.Sqrt(3))},
		{action.Action{Kind: action.Moment, From: 3, Value: 20e3}, 10e3},
	} {
		s := setup(t, 1.5, "S235")
		s.Strength[0].Permanent, s.Strength[0].Name = 0, "Q"
		r, err := prepare(t, Member{Length: 6, Supports: pinned(0, 6), RestraintSpacing: 1, Actions: []action.Action{tc.a}}, s).Explain(named(t, "IPE 300"))
		if err != nil {
			t.Fatal(err)
		}
		if c := check(t, r, resistance.Bending); math.Abs(c.Demand-tc.want) > 1e-9*tc.want {
			t.Errorf("%v: moment %v N·m, want %v", tc.a.Kind, c.Demand, tc.want)
		}
	}
}

// A column with 200 kN permanent compression and 300 kN of variable tension: pushed by
// 1.35·200 kN where the variable force is away, pulled by 1.5·300 − 200 kN where it
// is there. Own weight adds to both.
func TestAxialForcesThatPullAgainstEachOther(t *testing.T) {
	m := Member{Length: 6, PermanentAxial: 200e3, Axial: -300e3, Upright: true}
	p, s := prepare(t, m, enSetup(t, "S355")), named(t, "HE 200 A")
	least, most := math.Inf(1), math.Inf(-1)
	for i := range p.strength {
		n := p.axial(s, &p.strength[i])
		least, most = min(least, n), max(most, n)
	}
	own := s.Mass * gravity * 6
	if want := []float64{200e3 - 450e3 - own, 270e3 + 1.35*own}; math.Abs(least-want[0]) > 1e-6 || math.Abs(most-want[1]) > 1e-6 {
		t.Errorf("axial %v to %v N, want %v", least, most, want)
	}
}

func TestPruningDropsNothingThatGoverns(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6), Actions: []action.Action{{Nature: action.Permanent, Value: 1e3}, {Value: 5e3}}}
	p := prepare(t, m, setupOf(t, resistance.LRFD, "A992"))
	var names []string
	for i := range p.strength {
		names = append(names, p.strength[i].name(&m))
	}
	// 1.4D stays: under the heaviest section the own weight alone outweighs the load
	if diff := cmp.Diff([]string{"1.4D", "1.2D + 1.6L"}, names); diff != "" {
		t.Errorf("variants (-want +got):\n%s", diff)
	}
	m.Supports = []beam.Support{{X: 0, Kind: beam.Pinned}, {X: 4, Kind: beam.Pinned}}
	if p = prepare(t, m, setupOf(t, resistance.LRFD, "A992")); len(p.strength) < 2 {
		t.Errorf("%d variants with an overhang", len(p.strength))
	}
}

// Leaving dominated variants out changes no utilisation.
func TestPrunedVariantsNeverGovern(t *testing.T) {
	g := rand.New(rand.NewPCG(2, 9))
	list := series(t, "IPE", "SHS")
	dropped := 0
	for n := range 300 {
		m, kind := randomMember(g)
		m.MaxDepth, m.MaxWidth = 0, 0
		p := prepare(t, m, setupOf(t, bases[n%4], "S355"))
		kept := len(p.strength)
		full := prepare(t, m, setupOf(t, bases[n%4], "S355"))
		full.expand()
		if err := full.analyse(); err != nil {
			t.Fatal(err)
		}
		full.follow()
		dropped += len(full.strength) - kept
		for range 5 {
			s := &list[g.IntN(len(list))]
			got, _, err := p.Utilisation(s)
			want, _, other := full.Utilisation(s)
			if err != nil || other != nil || math.Abs(got-want) > 1e-9*want {
				t.Errorf("member %d, %s, %s: %v with %d variants, %v with all %d", n, kind, s.Designation, got, kept, want, len(full.strength))
			}
		}
	}
	if dropped < 50 {
		t.Errorf("%d variants dropped in 300 members", dropped)
	}
}

// EN 1993-1-1:2005 6.2.3 (6.6), (6.7): a hanger with 80 % of its area at the holes, S235
// with fu = 360 MPa: 0.9·0.8·A·360/1.25 = 207.4·A against 235·A.
func TestNetAreaFactorWeakensAHanger(t *testing.T) {
	s := named(t, "HE 100 A")
	for factor, stress := range map[float64]float64{0: 235e6, 0.8: 0.9 * 0.8 * 360e6 / 1.25} {
		m := Member{Length: 4, Supports: pinned(0, 4), Axial: -100e3, NetAreaFactor: factor}
		r, err := prepare(t, m, enSetup(t, "S235")).Explain(s)
		if err != nil {
			t.Fatal(err)
		}
		c := check(t, r, resistance.Axial)
		if math.Abs(c.Demand-150e3) > 1e-6 || math.Abs(c.Resistance-s.A*stress) > 1e-9*c.Resistance {
			t.Errorf("net factor %v: %v of %v N, want 150 kN of %v N", factor, c.Demand, c.Resistance, s.A*stress)
		}
	}
}

// AISC 360-22 B4.2: a tube is checked with 0.93 of its nominal wall, deflections too:
// 5wL⁴/384EI with the I of the design wall, under D + L.
func TestTubesUnderAISCSagWithTheirDesignWall(t *testing.T) {
	s := named(t, "HSS8x8x1/2")
	m := Member{Length: 6, Supports: pinned(0, 6), DeflectionLimit: 360, Actions: []action.Action{{Value: 10e3}}}
	r, err := prepare(t, m, setupOf(t, resistance.LRFD, "A500 C")).Explain(s)
	if err != nil {
		t.Fatal(err)
	}
	g, err := material.Find("A500 C")
	if err != nil {
		t.Fatal(err)
	}
	want := 5 * (10e3 + s.Mass*gravity) * math.Pow(6, 4) / (384 * g.E * s.Design().Iy)
	if c := check(t, r, resistance.Deflecting); math.Abs(c.Demand-want) > 1e-9*want || !(s.Design().Iy < 0.95*s.Iy) {
		t.Errorf("sags %v m, want %v m", c.Demand, want)
	}
	if r.Section.Tw != s.Tw || r.Section.Mass != s.Mass {
		t.Errorf("the result has a wall of %v m and %v kg/m, want the nominal ones", r.Section.Tw, r.Section.Mass)
	}
}
