package arrangement

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

// Tower is the legs under one support, sized as columns from its exact reactions.
type Tower struct {
	X           float64 // m from the root
	Height      float64 // m
	Legs        int
	Leg         sizing.Result
	Compression float64 // N, greatest in a leg, characteristic, without its own weight
	Tension     float64 // N, greatest in a leg, characteristic
	Overturning float64 // N·m about the foot, from wind across the member and on the tower
	LegMass     float64 // kg, all legs
	BracingMass float64 // kg, TowerRule.Bracing of LegMass
}

// couple is the force in the worst leg for a moment of 1 N·m about the foot, 1/m, of n
// plumb legs with a spread (m): a single leg bends instead. Two legs stand across the
// member; three at the corners of an equilateral triangle, four of a square. By
// statics: 1/s, 1/(s·√3/2), 1/(2s).
func couple(n int, spread float64) float64 {
	switch n {
	case 2:
		return 1 / spread
	case 3:
		return 1 / (spread * math.Sqrt(3) / 2)
	case 4:
		return 1 / (2 * spread)
	}
	return 0
}

// heightAt returns the height of the tower under a support, 0 for none.
func (s *Study) heightAt(u Support) float64 {
	switch u.Role {
	case TowerTop:
		return s.Towers.Height
	case Root:
		return s.Towers.RootHeight
	}
	return 0
}

// tower sizes the legs under a support.
func (s *Study) tower(u Support, height float64) (Tower, error) {
	n := s.Towers.Legs
	t := Tower{X: u.X, Height: height, Legs: n, Overturning: u.Side*height + s.Towers.Wind*height*height/2}
	force := t.Overturning * couple(n, s.spread(height))
	t.Compression = max(0, u.Max/float64(n)+force)
	t.Tension = max(0, force-u.Min/float64(n))
	m := sizing.Member{Length: height, Upright: true, LengthFactor: s.factor()}
	if n == 1 {
		m.Supports = []beam.Support{{X: 0, Kind: beam.Fixed}}
		m.Actions = []action.Action{
			{Kind: action.Point, From: height, Value: u.Side, Label: "wind on the member"},
			{Kind: action.Uniform, Value: s.Towers.Wind, Label: "wind on the tower"},
		}
	}
	var err error
	pressed := axial{u.Permanent / float64(n), (u.Max-u.Permanent)/float64(n) + force}
	hung := axial{u.Permanent / float64(n), (u.Min-u.Permanent)/float64(n) - force}
	if t.Leg, err = column(m, s.Setup, s.Towers.Sections, pressed, hung); err != nil {
		return Tower{}, fmt.Errorf("arrangement: tower at %v m: %w", u.X, err)
	}
	t.LegMass = float64(n) * height * t.Leg.Section.Mass
	t.BracingMass = s.Towers.Bracing * t.LegMass
	return t, nil
}

// spread is the stated spread, or the default one where only the root has a tower.
func (s *Study) spread(height float64) float64 {
	if s.Towers.Spread > 0 {
		return s.Towers.Spread
	}
	return height * defaultSpread
}

func (s *Study) factor() float64 {
	switch {
	case s.Towers.Factor > 0:
		return s.Towers.Factor
	case s.Towers.Legs == 1:
		return 2
	}
	return 1
}
