package arrangement

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// pointStretch is the part of the length over which the mass of a point action is spread.
const pointStretch = 1e-3

// frequency returns the lattice's first natural frequency, Hz: that of the beam whose
// stiffness gives the sine wave of the first mode the same deflection as chords and
// diagonals together,
//
//	1/EI' = 1/EI + (π/L)²/Sv, EI = E·A·h²/2, Sv = E·Ad·a·h²/(2·d³)
//
// (EN 1993-1-1:2005 6.4.2.1 without the reduction, and Figure 6.9). By Dunkerley's sum it
// never lies above the exact one of a mass spread evenly.
func (s *Study) frequency(h *holding, t *Truss) (float64, error) {
	e, d := s.Setup.Grade.E, truss{t.Panels, t.Panel, t.Depth}.diagonal()
	ei := e * t.Chord.Section.A * t.Depth * t.Depth / 2
	sv := e * t.Diagonal.Section.A * t.Panel * t.Depth * t.Depth / (2 * d * d * d)
	k := math.Pi / h.length
	masses := []beam.Mass{{To: h.length, PerMetre: t.OwnWeight / s.Setup.Gravity}}
	for _, a := range h.actions {
		masses = append(masses, s.carried(a, h.length)...)
	}
	f, err := beam.Frequency(beam.Prismatic(h.length, 1/(1/ei+k*k/sv), h.supports...), masses)
	if err != nil {
		return 0, fmt.Errorf("frequency: %w", err)
	}
	return f, nil
}

// carried returns the mass of a downward action: of permanent ones all, of variable
// ones Member.MassShare. A linear action counts at its heavier end. Wheels and couples
// have none that stays.
func (s *Study) carried(a action.Action, length float64) []beam.Mass {
	share := 1.0
	if a.Nature == action.Variable {
		share = s.Member.MassShare
	}
	from, to := a.Extent(length)
	force := a.Value
	switch a.Kind {
	case action.Uniform:
	case action.Linear:
		force = max(a.Value, a.End)
	case action.Point:
		from, to = max(0, a.From-pointStretch/2*length), min(length, a.From+pointStretch/2*length)
		force /= to - from
	default:
		return nil
	}
	if a.Direction == action.Horizontal || !(force*share > 0) {
		return nil
	}
	return []beam.Mass{{From: from, To: to, PerMetre: force * share / s.Setup.Gravity}}
}
