package calculator

import (
	"slices"

	"spanwright/structural/beam"
)

var goals = map[string]struct {
	goal  beam.Goal
	scale float64
	unit  string
}{
	"least moment":     {beam.LeastMoment, 1e-3, "kNm"},
	"least deflection": {beam.LeastDeflection, 1e3, "mm"},
	"parallel ends":    {beam.ParallelEnds, 1e3, "mrad"},
	"least shortening": {beam.LeastShortening, 1e3, "mm"},
}

const (
	mostPlaced   = 8
	mostHeld     = 12 // with those to be placed
	mostPlacings = 80 // loads times supports to be placed: every trial analyses them all
)

// check refuses what cannot be placed; nil asks for nothing.
func (p *BeamPlace) check(list []BeamLoad, held int, f *Faults) {
	if p == nil {
		return
	}
	f.within("/place_supports/count", float64(p.Count), 1, mostPlaced, "")
	if p.Symmetric && p.Count%2 != 0 {
		f.add("/place_supports/count", number(float64(p.Count)), "symmetric supports come in pairs", "an even number")
	}
	f.oneOf("/place_supports/goal", p.Goal, "least moment", "least deflection", "parallel ends", "least shortening")
	f.few("/supports", held+p.Count, mostHeld, "supports with those to be placed")
	f.few("/loads", len(list)*p.Count, mostPlacings, "loads times supports to be placed")
	if slices.ContainsFunc(list, func(l BeamLoad) bool { return l.Kind == "train" }) {
		f.add("/place_supports", "a train among the loads", "supports are not placed under a moving load", "placement under the other loads, then the train on the positions found")
	}
}

// place finds the best positions and adds the supports there. Free loads are not cut
// by span meanwhile: where the spans are is what is sought.
func (m *member) place() (*BeamPlacement, error) {
	p := m.request.Place
	if p == nil {
		return nil, nil
	}
	if err := m.sort(false); err != nil {
		return nil, err
	}
	k := m.strength[0]
	if p.Goal != "least moment" {
		k = m.service
	}
	k.Accompanying, k.PermanentFavourable = 0, 0
	g := goals[p.Goal]
	sets := m.cases.terms(k, -1, nil)
	best, err := beam.PlaceSupports(m.beam, m.cases.list, sets[0], beam.Layout{Free: p.Count, Symmetric: p.Symmetric}, g.goal)
	if err != nil {
		return nil, m.faults(err)
	}
	out := &BeamPlacement{Goal: p.Goal, Value: Number(best.Value * g.scale), Unit: g.unit}
	m.beam.Supports = slices.Clone(m.beam.Supports)
	for _, x := range best.X {
		out.Positions = append(out.Positions, Number(x))
		m.beam.Supports = append(m.beam.Supports, beam.Support{X: x, Kind: beam.Pinned})
	}
	m.notes = append(m.notes, "supports placed under "+k.Name+" with unfavourable factors, free loads over their whole length and settlements left out; the answer is for the member on them")
	return out, nil
}
