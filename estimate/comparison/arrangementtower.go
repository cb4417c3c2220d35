package comparison

import (
	"fmt"
	"math"
	"slices"

	"spanwright/estimate/schedule"
	"spanwright/structural/action"
	"spanwright/structural/arrangement"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

// tower are the rows of one tower: its legs as struts, its bracing, head and feet by
// their mass. Of a single leg, which is fixed at its foot, the wind bends it.
func (s *ArrangementStudy) tower(c *arrangement.Candidate, i int) []schedule.Member {
	t := &c.Towers[i]
	var u arrangement.Support
	if at := slices.IndexFunc(c.Supports, func(u arrangement.Support) bool { return u.X == t.X }); at >= 0 {
		u = c.Supports[at]
	}
	mark := fmt.Sprintf("TOWER-%d", i+1)
	leg := s.given(mark+"-LEG", towerGroup, towerClass, t.Leg.Section, t.Height)
	leg.Kind, leg.Quantity, leg.Upright = "tower leg", t.Legs, true
	leg.Description = fmt.Sprintf("leg of the tower at %.2f m", t.X)
	leg.Arrangement, leg.Supports, leg.LengthFactor = aStrut, supportsAt(t.Height), s.legFactor(t.Legs)
	m := sizing.Member{Length: t.Height, Upright: true, LengthFactor: leg.LengthFactor}
	if t.Legs == 1 {
		leg.Arrangement, leg.Supports = aCantilever, []schedule.Support{{Position: 0, Kind: fixed}}
		m.Supports = []beam.Support{{X: 0, Kind: beam.Fixed}}
		if u.Side > 0 {
			leg.Loads = append(leg.Loads, schedule.Load{Nature: "variable", Kind: "point", Value: rounded(u.Side), Position: leg.Length, Label: "wind on the member"})
			m.Actions = append(m.Actions, action.Action{Kind: action.Point, From: t.Height, Value: u.Side, Label: "wind"})
		}
		if w := s.Study.Towers.Wind; w > 0 {
			leg.Loads = append(leg.Loads, schedule.Load{Nature: "variable", Kind: "uniform", Value: rounded(w), Label: "wind on the tower"})
			m.Actions = append(m.Actions, action.Action{Kind: action.Uniform, Value: w, Label: "wind"})
		}
	}
	permanent := u.Permanent / float64(t.Legs)
	var states []float64
	if t.Compression > 0 || t.Tension == 0 {
		states = append(states, s.equivalent(permanent, t.Compression-permanent))
	}
	if t.Tension > 0 {
		states = append(states, s.equivalent(permanent, -t.Tension-permanent))
	}
	leg.Axial = rounded(s.nearest(&t.Leg, m, states...))
	out := []schedule.Member{leg}
	if t.BracingMass > 0 {
		out = append(out, byMass(mark+"-BRACING", towerGroup, "bracing", towerClass, "bracing, head and base plates of the tower", t.Height, t.BracingMass))
	}
	return out
}

// legFactor is the effective length factor of a leg, by the study's own rule.
func (s *ArrangementStudy) legFactor(legs int) float64 {
	switch k := s.Study.Towers.Factor; {
	case k > 0:
		return k
	case legs == 1:
		return 2
	}
	return 1
}

// equivalent is the variable force (N) with the same factored effect as a permanent and
// a variable one: a row of the schedule has one axial force, which counts as variable.
//
//	N = max over the combinations of (γG·P + γQ·V) / max γQ, by size
func (s *ArrangementStudy) equivalent(permanent, variable float64) float64 {
	worst, top := 0.0, 0.0
	for _, c := range s.Study.Setup.Strength {
		factor := c.Permanent
		if permanent*(permanent+variable) < 0 {
			factor = c.Favourable()
		}
		n := float64(factor*permanent) + float64(c.Variable*variable)
		if math.Abs(n) > math.Abs(worst) {
			worst = n
		}
		top = max(top, c.Variable)
	}
	if !(top > 0) {
		return permanent + variable
	}
	return worst / top
}

// latticeAxial is the equivalent force (N, compression +) of a lattice's bar: of its
// axial check the factored force by the greatest factor on variable actions.
func (s *ArrangementStudy) latticeAxial(r *sizing.Result, m sizing.Member) float64 {
	demand, top := 0.0, 0.0
	for _, c := range r.Checks {
		if c.ID == axialCheck {
			demand = math.Abs(c.Demand)
		}
	}
	for _, c := range s.Study.Setup.Strength {
		top = max(top, c.Variable)
	}
	if !(top > 0) {
		return demand
	}
	return math.Abs(s.nearest(r, m, demand/top, -demand/top))
}

// nearest returns the axial force under which the section comes nearest to the
// utilisation of its axial check in the study; of equal ones the first.
func (s *ArrangementStudy) nearest(r *sizing.Result, m sizing.Member, forces ...float64) float64 {
	want := axialUtilisation(r)
	best, least := forces[0], math.Inf(1)
	for _, n := range forces {
		m.Axial = n
		p, err := sizing.Prepare(m, s.Study.Setup)
		if err != nil {
			continue
		}
		got, err := p.Explain(&r.Section)
		if err != nil {
			continue
		}
		if d := math.Abs(axialUtilisation(&got) - want); d < least-1e-9 {
			best, least = n, d
		}
	}
	return best
}

func axialUtilisation(r *sizing.Result) float64 {
	for _, c := range r.Checks {
		if c.ID == axialCheck {
			return c.Utilisation
		}
	}
	return 0
}
