package engine

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// shortcut is the section that a member would get by the split method.
type shortcut struct {
	section     section.Section
	passes      bool    // by the split method
	utilisation float64 // of the same section under the exact envelope
	check       string  // that governs there
}

// unsafe tells whether the section passes by the split method alone.
func (s *shortcut) unsafe() bool { return s.passes && !resistance.Passes(s.utilisation) }

// splitBasis is a design basis that answers under the demand of the split method
// instead of the one that it is handed: what a hand calculation would check.
// Axial force, lengths, limits and frequency stay those of the member. It keeps
// scratch space: one goroutine at a time.
type splitBasis struct {
	resistance.Basis
	member     sizing.Member
	setup      sizing.Setup
	beam       beam.Beam // EI = 1
	down, side splitPlane
	downwards  bool // no load pulls up: effects only grow with the weight

	last []splitEffects // under the weight tried last
	mass float64        // kg/m, of the section tried last; −1 before the first
}

// splitPlane is the bending in the depth or along the width.
type splitPlane struct {
	cases   []beam.Case
	trains  []beam.Train
	factors []splitFactor // of cases
	dynamic []float64     // of trains
}

// splitFactor says what a case is multiplied with.
type splitFactor struct {
	nature  action.Nature
	dynamic float64
	own     bool // 1 N/m of self-weight
}

// splitEffects are the greatest effects of one combination. Sags are at EI = 1.
type splitEffects struct {
	moment, shear, momentZ, shearY, axial, permanent float64
	sags, sagsAside                                  []float64
}

// newSplitBasis prepares the split method for one member. The error is that of
// the method, such as a hinge where it knows none.
func newSplitBasis(m sizing.Member, s sizing.Setup) (*splitBasis, error) {
	b := &splitBasis{Basis: s.Basis, member: m, setup: s, beam: beam.Prismatic(m.Length, 1, m.Supports...), downwards: true, mass: -1}
	for _, a := range m.Actions {
		pl := &b.down
		if a.Direction == action.Horizontal {
			pl = &b.side
		}
		pl.add(a, m.Length)
		b.downwards = b.downwards && a.Value >= 0
	}
	b.down.cases = append(b.down.cases, beam.Case{{Kind: beam.Uniform, From: 0, To: m.Length, Start: 1}})
	b.down.factors = append(b.down.factors, splitFactor{own: true})
	return b, b.find(0)
}

// add makes a case of an action, or a train. The schedule has no other kinds.
func (p *splitPlane) add(a action.Action, length float64) {
	from, to := a.Extent(length)
	load := beam.Load{Kind: beam.Uniform, From: from, To: to, Start: a.Value}
	switch a.Kind {
	case action.MovingTrain:
		p.trains = append(p.trains, beam.Train{Loads: a.Train.Loads, Spacings: a.Train.Spacings})
		p.dynamic = append(p.dynamic, a.Factor())
		return
	case action.Point:
		load = beam.Load{Kind: beam.Point, From: from, Start: a.Value}
	}
	p.cases = append(p.cases, beam.Case{load})
	p.factors = append(p.factors, splitFactor{nature: a.Nature, dynamic: a.Factor()})
}

// terms gives every case its factor: permanent on permanent actions and on the
// own weight (N/m), variable on the others.
func (p *splitPlane) terms(permanent, variable, weight float64) []beam.Term {
	terms := make([]beam.Term, 0, len(p.factors)+len(p.dynamic))
	for i, f := range p.factors {
		factor := variable * f.dynamic
		switch {
		case f.own:
			factor = permanent * weight
		case f.nature == action.Permanent:
			factor = permanent * f.dynamic
		}
		terms = append(terms, beam.Term{Case: i, Factor: factor})
	}
	for i, f := range p.dynamic {
		terms = append(terms, beam.Term{Case: len(p.factors) + i, Factor: variable * f})
	}
	return terms
}

// find fills the effects of every combination under a mass per metre, kg/m. The
// last one is that of service.
func (b *splitBasis) find(mass float64) error {
	b.last = b.last[:0]
	for _, c := range b.setup.Strength {
		for _, permanent := range []float64{c.Permanent, c.Favourable()} {
			if err := b.effects(permanent, c.Variable, mass); err != nil {
				return err
			}
			if c.Favourable() == c.Permanent {
				break
			}
		}
	}
	b.mass = mass
	return b.effects(b.setup.Service.Permanent, b.setup.Service.Variable, mass)
}

func (b *splitBasis) effects(permanent, variable, mass float64) error {
	weight := mass * b.setup.Gravity
	if b.member.Upright {
		weight = 0
	}
	e := splitEffects{permanent: permanent, axial: permanent*b.member.PermanentAxial + variable*b.member.Axial}
	split, err := beam.SplitTrains(b.beam, b.down.cases, b.down.trains, b.down.terms(permanent, variable, weight))
	if err != nil {
		return fmt.Errorf("split method: %w", err)
	}
	e.moment, e.shear, e.sags = greatest(split)
	if len(b.side.cases) > 0 {
		if split, err = beam.SplitTrains(b.beam, b.side.cases, nil, b.side.terms(permanent, variable, 0)); err != nil {
			return fmt.Errorf("split method, sideways: %w", err)
		}
		e.momentZ, e.shearY, e.sagsAside = greatest(split)
	}
	b.last = append(b.last, e)
	return nil
}

func greatest(s beam.SplitResult) (moment, shear float64, sags []float64) {
	for _, p := range s.Pieces {
		moment = max(moment, p.MomentMax.Value, -p.MomentMin.Value)
		shear = max(shear, p.ShearMax.Value, -p.ShearMin.Value)
		sags = append(sags, max(p.DeflectionMax.Value, -p.DeflectionMin.Value))
	}
	return moment, shear, sags
}

// massOf is the section's mass in the grade, kg/m.
func (b *splitBasis) massOf(s *section.Section) float64 {
	if d := b.setup.Grade.Density; d > 0 {
		return s.MassAt(d)
	}
	return s.Mass
}

// Utilisation answers under the split method's demand. A section that fails under
// the weight of a lighter one tried before is given up with that figure.
func (b *splitBasis) Utilisation(s *section.Section, m resistance.Material, d *resistance.Demand) (float64, string) {
	mass := b.massOf(s)
	if b.downwards && b.mass >= 0 && b.mass < mass {
		if u, id, _ := b.worst(s, m, d); u > 1+1e-6 {
			return u, id
		}
	}
	if b.mass != mass {
		if err := b.find(mass); err != nil {
			return math.Inf(1), resistance.NotCovered
		}
	}
	u, id, _ := b.worst(s, m, d)
	return u, id
}

// Explain returns the checks under the worst combination.
func (b *splitBasis) Explain(s *section.Section, m resistance.Material, d *resistance.Demand) []resistance.Check {
	if mass := b.massOf(s); b.mass != mass {
		if err := b.find(mass); err != nil {
			return []resistance.Check{{ID: resistance.NotCovered, PassFail: true, Demand: 1, Utilisation: 1e9, Note: err.Error()}}
		}
	}
	_, _, demand := b.worst(s, m, d)
	return b.Basis.Explain(s, m, &demand)
}

// worst holds the section against every strength combination, with the service
// deflections and the frequency beside the first.
func (b *splitBasis) worst(s *section.Section, m resistance.Material, given *resistance.Demand) (float64, string, resistance.Demand) {
	worst, governing, at := 0.0, "", *given
	for i, e := range b.last[:len(b.last)-1] {
		d := *given
		d.Moment, d.Shear, d.MomentZ, d.ShearY, d.Axial = e.moment, e.shear, e.momentZ, e.shearY, e.axial
		if b.member.Upright {
			own := e.permanent * b.massOf(s) * b.setup.Gravity * b.member.Length
			d.Axial += math.Copysign(own, e.axial)
		}
		d.Deflections = nil
		if i == 0 {
			d.Deflections = b.deflections(s, given.Deflections)
		}
		if u, id := b.Basis.Utilisation(s, m, &d); i == 0 || u > worst {
			worst, governing, at = u, id, d
		}
	}
	return worst, governing, at
}

// deflections puts the split method's sags beside the limits of the member, which
// stand in the same order: the spans downwards, then sideways.
func (b *splitBasis) deflections(s *section.Section, limits []resistance.Deflection) []resistance.Deflection {
	e := b.last[len(b.last)-1]
	list := make([]resistance.Deflection, len(limits))
	for i, l := range limits {
		switch k := i - len(e.sags); {
		case k < 0:
			l.Value = e.sags[i] / (b.setup.Grade.E * s.Iy)
		case k < len(e.sagsAside):
			l.Value = e.sagsAside[k] / (b.setup.Grade.E * s.Iz)
		}
		list[i] = l
	}
	return list
}
