package calculator

import (
	"context"
	"errors"
	"testing"
)

func boomStudy() ArrangementsRequest {
	return ArrangementsRequest{Length: 50, Loads: []BeamLoad{{Label: "belt", Kind: "uniform", Load: 1.5}}, Towers: ArrangementTowers{Height: 10},
		MemberLimits: MemberLimits{DeflectionLimit: 200}, Steel: Steel{Candidates: []string{"CHS"}, Grade: "S355", Basis: Basis{DesignBasis: "en1993"}}}
}

// Each candidate tells its mass, reactions, deflection and governing check. The inner
// support at two thirds takes 3/4 of all that acts (moments about the root: w·L·L/2 over
// 2L/3), the ends of a simple span half.
func TestArrangements(t *testing.T) {
	a, err := Arrangements(context.Background(), boomStudy())
	if err != nil {
		t.Fatal(err)
	}
	kinds := map[string]Arrangement{}
	for i, c := range a.Candidates {
		kinds[c.Kind] = c
		if c.Governing == "" || !(c.Utilisation > 0) || len(c.Supports) == 0 || !(c.Mass.Steel > 0) || c.Member.Section == "" || len(c.Notes) == 0 {
			t.Errorf("%s: incomplete: %+v", c.Name, c)
		}
		if i > 0 && c.Feasible && !a.Candidates[i-1].Feasible {
			t.Errorf("%s is feasible after one that is not", c.Name)
		}
		if !c.Feasible && (c.Reason == "" || len(c.WaysOut) == 0) {
			t.Errorf("%s: not feasible without a reason or ways out", c.Name)
		}
	}
	if len(kinds) != len(kindNames()) {
		t.Errorf("%d kinds among the candidates, want %d", len(kinds), len(kindNames()))
	}
	inner := kinds["inner support"]
	w := 1.5 + float64(inner.Member.LineMass)*gravity/1e3
	closer(t, "inner support", inner.Supports[1].Max, 0.75*w*50, w*50, 1e-6)
	end := kinds["tower at the end"]
	w = 1.5 + float64(end.Member.LineMass)*gravity/1e3
	closer(t, "tower at the end", end.Supports[1].Max, w*25, w*50, 1e-6)
	if b := kinds["cantilever with counterweight"].Ballast; b == nil || !(b.Mass > 0) || !(b.Arm > 0) {
		t.Errorf("counterweight %+v", b)
	}
	if l := kinds["lattice"]; l.Truss == nil || l.Diagonal == nil || !(l.Truss.Shear > 0) {
		t.Errorf("lattice %+v", l.Truss)
	}
}

func TestArrangementsGivenUp(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Arrangements(ctx, boomStudy()); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want that of the context", err)
	}
}
