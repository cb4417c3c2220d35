package arrangement

import (
	"context"
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// Truss is a sized lattice: one chord section above and below, one for all diagonals.
type Truss struct {
	Panels      int
	Panel       float64       // m, between panel points
	Depth       float64       // m, between chord axes
	Chord       sizing.Result // as a bar between panel points
	Diagonal    sizing.Result // as a bar between chord axes
	Compression float64       // N, greatest in a chord, characteristic
	Tension     float64       // N, greatest in a chord, characteristic
	Force       float64       // N, greatest in a diagonal, either sign, characteristic
	Chords      float64       // m, length of both chords
	Diagonals   float64       // m, length of all diagonals
	Mass        float64       // kg, without connections
	OwnWeight   float64       // N/m, with LatticeRule.Allowance
	Deflection  Deflection
	Frequency   float64 // Hz, where Member.FrequencyFloor asks for it; else 0
	Floor       float64 // Hz, of Frequency
}

// The slopes of diagonals to the chord that are tried, rad: EN 1993-1-8:2005 5.1.5
// keeps joints over 30°; flatter and steeper ones waste steel (common practice, no source).
const (
	flattest = 35 * math.Pi / 180
	steepest = 60 * math.Pi / 180
)

// utilisation returns the highest one of the truss and its part and check.
func (t *Truss) utilisation() (float64, string) {
	u, name := t.Chord.Utilisation, "chord: "+t.Chord.Governing
	if t.Diagonal.Utilisation > u {
		u, name = t.Diagonal.Utilisation, "diagonal: "+t.Diagonal.Governing
	}
	if t.Deflection.Limit > 0 {
		if v := math.Abs(t.Deflection.Value) / t.Deflection.Limit; v > u {
			u, name = v, "lattice: "+resistance.Deflecting
		}
	}
	if t.Floor > 0 {
		if v := t.Floor / t.Frequency; v > u {
			u, name = v, "lattice: "+resistance.Vibrating
		}
	}
	return u, name
}

func (t *Truss) passes() bool {
	u, _ := t.utilisation()
	return t.Chord.Passes && t.Diagonal.Passes && resistance.Passes(u)
}

// lattice returns the lightest truss inside the bounds that passes; of equal masses the
// shallower, then the one of fewer panels; if none passes, the one with the smallest
// utilisation.
func (s *Study) lattice(ctx context.Context, h *holding) (*Truss, error) {
	var best *Truss
	for _, t := range s.proportions() {
		if err := ctx.Err(); err != nil {
			return nil, fmt.Errorf("arrangement: lattice: %w", err)
		}
		trial, err := s.fit(h, t)
		if err != nil {
			return nil, fmt.Errorf("arrangement: lattice of %d panels, %.3f m deep: %w", t.panels, t.depth, err)
		}
		if best == nil || superior(trial, best) {
			best = trial
		}
	}
	if best == nil {
		l := s.Lattice
		return nil, fmt.Errorf("arrangement: lattice: no whole number of panels of %v to %v m at a depth of %v to %v m has diagonals at %.0f° to %.0f°; accepted are bounds that leave one, or 0 for the panel",
			l.MinPanel, l.MaxPanel, l.MinDepth, l.MaxDepth, flattest*180/math.Pi, steepest*180/math.Pi)
	}
	return best, nil
}

func superior(a, b *Truss) bool {
	if a.passes() != b.passes() {
		return a.passes()
	}
	if a.passes() {
		return a.Mass < b.Mass
	}
	u, _ := a.utilisation()
	v, _ := b.utilisation()
	return u < v
}

// proportions returns the trusses to be tried, shallowest and of fewest panels first.
func (s *Study) proportions() []truss {
	l := s.Lattice
	var all []truss
	for i := range l.Depths {
		depth := l.MinDepth
		if l.Depths > 1 {
			depth += (l.MaxDepth - l.MinDepth) * float64(i) / float64(l.Depths-1)
		}
		low, high := 2*depth/math.Tan(steepest), 2*depth/math.Tan(flattest)
		low = max(low, l.MinPanel)
		if l.MaxPanel > 0 {
			high = min(high, l.MaxPanel)
		}
		for n := max(2, int(math.Ceil(s.Member.Length/high-near))); float64(n) <= s.Member.Length/low+near; n++ {
			all = append(all, truss{panels: n, panel: s.Member.Length / float64(n), depth: depth})
		}
	}
	return all
}

// passesAtMost bounds how often a truss is sized again. Each pass takes heavier bars
// than the one before, so that the lists of sections end it long before.
const passesAtMost = 1000

// fit sizes one truss: for its own weight, until that stays the same, and with
// heavier bars until its deflection is met.
func (s *Study) fit(h *holding, t truss) (*Truss, error) {
	load := h.loadTruss(t)
	out := &Truss{Panels: t.panels, Panel: t.panel, Depth: t.depth}
	out.Chords, out.Diagonals = t.bars()
	floor := areas{}
	for range passesAtMost {
		if err := s.bars(h, load, out, floor); err != nil {
			return nil, err
		}
		out.Mass = out.Chords*out.Chord.Section.Mass + out.Diagonals*out.Diagonal.Section.Mass
		weight := out.Mass * (1 + s.Lattice.Allowance) * s.Setup.Gravity / s.Member.Length
		settled := weight <= out.OwnWeight
		out.OwnWeight = max(out.OwnWeight, weight)
		out.Deflection = load.sag(s.Setup.Service, out.OwnWeight, out.Chord.Section.A, out.Diagonal.Section.A, s.Setup.Grade.E)
		if s.Member.DeflectionLimit > 0 {
			out.Deflection.Limit = s.Member.Length / s.Member.DeflectionLimit
		}
		if !settled {
			continue
		}
		if !out.Chord.Passes || !out.Diagonal.Passes || !s.stiffen(out, &floor) {
			return out, s.vibrate(h, out)
		}
	}
	return nil, fmt.Errorf("own weight %v N/m does not settle in %d passes; accepted are sections of rising area with rising mass", out.OwnWeight, passesAtMost)
}

// vibrate fills the frequency where it has a floor.
func (s *Study) vibrate(h *holding, t *Truss) error {
	if s.Member.FrequencyFloor == 0 {
		return nil
	}
	t.Floor = s.Member.FrequencyFloor
	var err error
	t.Frequency, err = s.frequency(h, t)
	return err
}

// areas are the least areas that the deflection asks for, m².
type areas struct{ chord, diagonal float64 }

// stiffen raises the areas where the deflection asks for it and a heavier bar is
// there, and tells whether it did.
func (s *Study) stiffen(t *Truss, floor *areas) bool {
	d := t.Deflection
	if d.Limit == 0 || math.Abs(d.Value) <= d.Limit {
		return false
	}
	bend, shear := math.Abs(d.Value-d.Shear), math.Abs(d.Shear)
	was := *floor
	if shear > d.Limit/2 {
		floor.diagonal = max(floor.diagonal, t.Diagonal.Section.A*2*shear/d.Limit)
		floor.chord = max(floor.chord, t.Chord.Section.A*2*bend/d.Limit)
	} else {
		floor.chord = max(floor.chord, t.Chord.Section.A*bend/(d.Limit-shear))
	}
	floor.chord = min(floor.chord, largest(s.Lattice.Chords))
	floor.diagonal = min(floor.diagonal, largest(s.Lattice.Diagonals))
	return *floor != was
}

func largest(sections []section.Section) float64 {
	a := 0.0
	for i := range sections {
		a = max(a, sections[i].A)
	}
	return a
}

func atLeast(sections []section.Section, area float64) []section.Section {
	if area == 0 {
		return sections
	}
	var kept []section.Section
	for _, x := range sections {
		if x.A >= area {
			kept = append(kept, x)
		}
	}
	return kept
}

// bars sizes chord and diagonal for the forces under the truss's own weight so far.
// Both are simple beams between their ends under their own weight across.
func (s *Study) bars(h *holding, load *trussLoad, t *Truss, floor areas) error {
	f := load.under(t.OwnWeight)
	t.Compression, t.Tension, t.Force = f.compression, f.tension, f.diagonal
	chord := sizing.Member{Length: t.Panel, Actions: s.between(h, load.truss)}
	chord.Supports = append(chord.Supports, pinned(0), pinned(t.Panel))
	var err error
	if t.Chord, err = column(chord, s.Setup, atLeast(s.Lattice.Chords, floor.chord), f.chords...); err != nil {
		return fmt.Errorf("chord: %w", err)
	}
	d := load.diagonal()
	diagonal := sizing.Member{Length: d}
	diagonal.Supports = append(diagonal.Supports, pinned(0), pinned(d))
	if t.Diagonal, err = column(diagonal, s.Setup, atLeast(s.Lattice.Diagonals, floor.diagonal), f.diagonals...); err != nil {
		return fmt.Errorf("diagonal: %w", err)
	}
	return nil
}

// between returns the actions that bend the chord between two panel points: every
// distributed one at its greatest over the whole panel, the point loads of the worst
// panel in its middle, trains. Couples count at the panel points.
func (s *Study) between(h *holding, t truss) []action.Action {
	if s.Lattice.AtPanelPoints {
		return nil
	}
	var local []action.Action
	sums, points := make([]float64, t.panels), make([][]action.Action, t.panels)
	for _, a := range h.actions {
		switch {
		case a.Direction == action.Horizontal:
		case a.Kind == action.Uniform || a.Kind == action.Linear:
			if math.Abs(a.End) > math.Abs(a.Value) {
				a.Value = a.End
			}
			a.Kind, a.From, a.To, a.End = action.Uniform, 0, 0, 0
			local = append(local, a)
		case a.Kind == action.MovingTrain:
			local = append(local, a)
		case a.Kind == action.Point:
			i := min(int(a.From/t.panel), t.panels-1)
			a.From = t.panel / 2
			sums[i] += math.Abs(a.Value) * a.Factor()
			points[i] = append(points[i], a)
		}
	}
	worst := 0
	for i := range sums {
		if sums[i] > sums[worst] {
			worst = i
		}
	}
	return append(local, points[worst]...)
}
