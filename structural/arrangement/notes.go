package arrangement

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
)

const practice = "common practice, no source"

// notes lists what the candidate rests on.
func (s *Study) notes(c *Candidate) []Note {
	notes := []Note{{
		ID: "arrangement/reactions", Clause: "linear-elastic beam theory",
		Statement: "reactions are exact, characteristic, with every variable action where it is worst; the supports stand still",
	}, {
		ID: "arrangement/stability", Clause: s.Stability.Clause,
		Statement: "against uplift and overturning: " + s.Stability.Name,
		Values: []resistance.Quantity{
			{Symbol: "γG,lifting", Value: s.Stability.Permanent}, {Symbol: "γG,holding", Value: s.Stability.Favourable()},
			{Symbol: "γQ,lifting", Value: s.Stability.Variable},
		},
	}}
	notes = append(notes, s.notesOfKind(c)...)
	notes = append(notes, s.notesOfTowers(c)...)
	notes = append(notes, s.notesOfFootings()...)
	return append(notes, s.notesOfUplift(c)...)
}

func (s *Study) notesOfKind(c *Candidate) []Note {
	switch c.Kind {
	case Cantilever:
		return []Note{{
			ID: "arrangement/ballast", Clause: "statics: mass = Σ(γ·M)/(γ_hold·g·arm)",
			Statement: "the counterweight holds the end of the tail down; the actions act on the held length alone, trains on the tail too; the tie to the counterweight is not sized",
			Values: []resistance.Quantity{
				{Symbol: "arm", Value: s.Tail, Unit: "m"}, {Symbol: "ρ", Value: s.BallastDensity, Unit: "kg/m³"},
				{Symbol: "Σ(γ·M)", Value: c.Ballast.Balance, Unit: "N·m"},
			},
		}}
	case InnerLeastMoment, InnerLeastDeflection, TwoInner:
		n := Note{
			ID: "arrangement/best-position", Clause: "search by exact analysis of each trial",
			Statement: "supports stand best for the characteristic actions and own weight",
		}
		for _, u := range c.Supports {
			n.Values = append(n.Values, resistance.Quantity{Symbol: "x", Value: u.X, Unit: "m"})
		}
		if s.has(func(a action.Action) bool { return a.Kind == action.MovingTrain }) {
			n.Statement += "; moving trains are left out of the search, not of the checks"
		}
		if s.has(func(a action.Action) bool { return a.Free }) {
			n.Statement += "; free actions act on the whole of their extent in the search, by span in the checks"
		}
		return []Note{n}
	case Propped:
		return []Note{{
			ID: "arrangement/fixed-root", Clause: practice,
			Statement: "the root takes the couple without turning; a footing that turns makes the member's own moments greater (unsafe)",
			Values:    []resistance.Quantity{{Symbol: "M", Value: c.Supports[0].Couple, Unit: "N·m"}},
		}}
	case Lattice:
		return s.notesOfLattice(c.Truss)
	}
	return nil
}

func (s *Study) notesOfLattice(t *Truss) []Note {
	local := "every distributed action also bends the chord between panel points, as on a simple beam"
	if s.Lattice.AtPanelPoints {
		local = "every action enters at a panel point by a cross beam"
	}
	notes := []Note{{
		ID: "lattice/model", Clause: "method of sections, pinned joints",
		Statement: "Warren truss without posts, buckling lengths of all bars 1.0 of their length; " + local,
		Values: []resistance.Quantity{
			{Symbol: "n", Value: float64(t.Panels)}, {Symbol: "a", Value: t.Panel, Unit: "m"}, {Symbol: "h", Value: t.Depth, Unit: "m"},
		},
	}, {
		ID: "lattice/deflection", Clause: "virtual work, Σ N·n·l/(E·A)",
		Statement: "the deflection includes the diagonals; slip in bolted joints is left out (unsafe)",
		Values:    []resistance.Quantity{{Symbol: "share of diagonals", Value: share(t.Deflection)}},
	}, {
		ID: "lattice/mass", Clause: practice,
		Statement: "the mass is that of chords and diagonals; the allowance is in the own weight alone: connections are the estimate's",
		Values:    []resistance.Quantity{{Symbol: "allowance", Value: s.Lattice.Allowance}},
	}, {
		ID: "lattice/plan-bracing", Clause: practice,
		Statement: "both chords are held sideways at every panel point by plan bracing, which is not sized here",
	}}
	if s.has(func(a action.Action) bool { return a.Direction == action.Horizontal }) {
		notes = append(notes, Note{
			ID: "lattice/wind", Clause: practice,
			Statement: "horizontal actions go into the plan bracing and the towers; the chords are not checked for them (unsafe)",
		})
	}
	if m := s.Member; m.MaxDepth > 0 || m.MaxWidth > 0 || m.StockLength > 0 {
		notes = append(notes, Note{
			ID: "lattice/limits", Clause: practice,
			Statement: "the member's limits of depth, width and stock length are not applied to a lattice",
		})
	}
	if s.has(func(a action.Action) bool { return a.Kind == action.Moment }) && !s.Lattice.AtPanelPoints {
		notes = append(notes, Note{
			ID: "lattice/couples", Clause: practice,
			Statement: "couples enter at panel points; the chord is not checked for them between (unsafe)",
		})
	}
	return notes
}

func share(d Deflection) float64 {
	if d.Value == 0 {
		return 0
	}
	return d.Shear / d.Value
}

func (s *Study) has(is func(action.Action) bool) bool {
	for _, a := range s.Member.Actions {
		if is(a) {
			return true
		}
	}
	return false
}

func (s *Study) notesOfTowers(c *Candidate) []Note {
	if len(c.Towers) == 0 {
		return nil
	}
	legs := "each leg is a column between its footing and the head, braced to the others; the head is held along the member by the root or by bracing that is not sized"
	if s.Towers.Legs == 1 {
		legs = "the single leg is fixed at its foot and free at the head"
	}
	return []Note{{
		ID: "towers/legs", Clause: practice,
		Statement: legs + "; the reaction is shared evenly, wind across the member goes into the legs by their spread",
		Values: []resistance.Quantity{
			{Symbol: "n", Value: float64(s.Towers.Legs)}, {Symbol: "K", Value: s.factor()},
			{Symbol: "spread", Value: s.spread(c.Towers[0].Height), Unit: "m"}, {Symbol: "wind on the tower", Value: s.Towers.Wind, Unit: "N/m"},
		},
	}, {
		ID: "towers/bracing", Clause: practice,
		Statement: "bracing, head and feet as a share of the legs' mass; they are not sized",
		Values:    []resistance.Quantity{{Symbol: "bracing", Value: s.Towers.Bracing}},
	}}
}

func (s *Study) notesOfFootings() []Note {
	return []Note{{
		ID: "footings/bearing", Clause: "EN 1997-1:2004 annex D (effective area) and 6.5.4 (eccentricity up to a third of the width)",
		Statement: "square footings under characteristic reactions, pressure allowed beyond the footing's own; sliding and settlement are not checked",
		Values: []resistance.Quantity{
			{Symbol: "p", Value: s.Footings.Bearing, Unit: "Pa"}, {Symbol: "d", Value: s.Footings.Depth, Unit: "m"},
			{Symbol: "least", Value: s.Footings.Least, Unit: "m³"}, {Symbol: "ρ", Value: s.BallastDensity, Unit: "kg/m³"},
		},
	}}
}

// notesOfUplift names the supports that are lifted: they need holding down.
func (s *Study) notesOfUplift(c *Candidate) []Note {
	var notes []Note
	for _, u := range c.Supports {
		if !u.Lifted() {
			continue
		}
		by := "its footing, through anchors"
		if u.Role == HoldDown {
			by = "the counterweight"
		}
		notes = append(notes, Note{
			ID: "arrangement/uplift", Clause: s.Stability.Clause,
			Statement: fmt.Sprintf("the %s at %.2f m is lifted and held down by %s", u.Role, u.X, by),
			Values:    []resistance.Quantity{{Symbol: "uplift", Value: math.Abs(u.Least), Unit: "N"}},
		})
	}
	return notes
}
