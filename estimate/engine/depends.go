package engine

import (
	"slices"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/takeoff"
)

// dependsOn are the inputs of the schedule that move a quantity of an item.
func dependsOn(it takeoff.Item, q takeoff.Quantity, byArea bool) []string {
	out := []string{"quantity"}
	switch {
	case it.Treatment == takeoff.Joint:
		if !slices.Contains(q.Fixed, takeoff.SplicesID) {
			out = append(out, "joints")
		}
	case it.Treatment == takeoff.Concrete:
		out = append(out, "concrete")
	case q.Driver == ratebook.Pieces, q.Driver == ratebook.CraneDays, q.Driver == ratebook.PermitLoads:
	case byArea && (q.Driver == ratebook.SquareMetres || q.Driver == ratebook.ZincKilograms):
		out = append(out, "area")
	case byArea && q.Driver != ratebook.Metres:
		out = append(out, "area", "mass if not sized")
	case it.Treatment == string(schedule.ByMass) && q.Driver != ratebook.Metres:
		out = append(out, "length", "mass if not sized")
	default:
		out = append(out, "length")
	}
	if slices.Contains(q.Fixed, takeoff.HaulInputID) {
		out = append(out, "haul distance")
	}
	slices.Sort(out)
	return out
}

// byArea are the marks of rows that weigh by the square metre.
func (r *run) byArea() map[string]bool {
	out := map[string]bool{}
	for _, p := range r.pieces {
		out[p.Member.Mark] = p.Member.AreaMass > 0
	}
	return out
}
