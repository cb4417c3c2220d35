package sizing

import (
	"math"
	"slices"
	"strings"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/section"
)

func TestPrepareRefuses(t *testing.T) {
	good := Member{Length: 6, Supports: pinned(0, 6)}
	s := setup(t, 1.5, "S355")
	for _, tc := range []struct {
		want   string
		member func(*Member)
		setup  func(*Setup)
	}{
		{want: "length 0 m", member: func(m *Member) { m.Length = 0 }},
		{want: "length NaN m", member: func(m *Member) { m.Length = math.NaN() }},
		{want: "axial load +Inf", member: func(m *Member) { m.Axial = math.Inf(1) }},
		{want: "restraint spacing (m) is -1", member: func(m *Member) { m.RestraintSpacing = -1 }},
		{want: "effective length factor is NaN", member: func(m *Member) { m.LengthFactor = math.NaN() }},
		{want: "deflection limit n of span/n is -300", member: func(m *Member) { m.DeflectionLimit = -300 }},
		{want: "no supports", member: func(m *Member) { m.Supports = nil }},
		{want: "no supports", member: func(m *Member) { m.Supports, m.Upright, m.Actions = nil, true, []action.Action{{Value: 1}} }},
		{want: "settlement 0.01", member: func(m *Member) { m.Supports[0].Settlement = 0.01 }},
		{want: "is spring", member: func(m *Member) { m.Supports[0].Kind = beam.Spring }},
		{want: "action 1", member: func(m *Member) { m.Actions = []action.Action{{From: 5, To: 8, Value: 1}} }},
		{want: "mechanism", member: func(m *Member) { m.Supports = pinned(0) }},
		{want: "outside the member", member: func(m *Member) { m.Supports = pinned(0, 7) }},
		{want: "no design basis", setup: func(s *Setup) { s.Basis = nil }},
		{want: "0 strength bands", setup: func(s *Setup) { s.Grade = material.Grade{} }},
		{want: "no combination for strength", setup: func(s *Setup) { s.Strength = nil }},
		{want: "strength: combination", setup: func(s *Setup) { s.Strength = []action.Combination{{}} }},
		{want: "service: combination", setup: func(s *Setup) { s.Service = action.Combination{} }},
		{want: "moment factor C1 or Cb is 11", member: func(m *Member) { m.MomentFactor = 11 }},
		{want: "net area factor is 1.1", member: func(m *Member) { m.NetAreaFactor = 1.1 }},
		{want: "frequency floor (Hz) is NaN", member: func(m *Member) { m.FrequencyFloor = math.NaN() }},
		{want: "mass is 2", member: func(m *Member) { m.MassShare = 2 }},
		{want: "greatest depth (m) is -0.1", member: func(m *Member) { m.MaxDepth = -0.1 }},
		{want: "greatest width (m) is NaN", member: func(m *Member) { m.MaxWidth = math.NaN() }},
		{want: "stock length (m) is +Inf", member: func(m *Member) { m.StockLength = math.Inf(1) }},
		{want: "permanent NaN N", member: func(m *Member) { m.PermanentAxial = math.NaN() }},
		{want: "gravity 0", setup: func(s *Setup) { s.Gravity = 0 }},
	} {
		m, c := good, s
		m.Supports = slices.Clone(good.Supports)
		if tc.member != nil {
			tc.member(&m)
		}
		if tc.setup != nil {
			tc.setup(&c)
		}
		if _, err := Prepare(m, c); err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("error %v, want one with %q", err, tc.want)
		}
	}
}

func TestPrepareReportsEveryFault(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6), DeflectionLimit: -1, Axial: math.NaN(), Actions: []action.Action{{Value: math.NaN()}}}
	_, err := Prepare(m, setup(t, 1.5, "S355"))
	for _, want := range []string{"axial", "deflection", "action 1"} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v lacks %q", err, want)
		}
	}
}

func TestSearchRefuses(t *testing.T) {
	p := prepare(t, Member{Length: 6, Supports: pinned(0, 6)}, setup(t, 1.5, "S355"))
	light, heavy, none := *named(t, "IPE 100"), *named(t, "IPE 500"), *named(t, "IPE 200")
	none.Mass = math.NaN()
	for want, list := range map[string][]section.Section{
		"no candidates": nil, "lightest first": {heavy, light}, "mass of NaN": {light, none},
	} {
		if _, err := Lightest(p, list); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
	if _, err := Best(p, nil, massOf); err == nil {
		t.Error("Best without candidates is accepted")
	}
}
