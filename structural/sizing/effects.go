package sizing

import (
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// effects are the greatest absolute effects across the member under a weight.
type effects struct {
	weight float64   // N/m, factored
	moment float64   // N·m
	shear  float64   // N
	sags   []float64 // m·N·m², deflection at EI = 1 of each span with a limit
}

// weight returns the section's own weight as a load, N/m, factored.
func (p *Prepared) weight(s *section.Section) float64 {
	return s.Mass * p.setup.Gravity * p.setup.Combination.Permanent
}

// across is the part of a weight that bends the member.
func (p *Prepared) across(weight float64) float64 {
	if p.member.Upright {
		return 0
	}
	return weight
}

// find fills e with the effects under a weight (N/m) across the member.
func (p *Prepared) find(e *effects, weight float64) {
	p.terms[len(p.terms)-1].Factor = weight
	p.response.EnvelopeInto(&p.envelope, p.terms)
	env := &p.envelope
	e.weight = weight
	e.moment = greater(env.MomentMax, env.MomentMin)
	e.shear = greater(env.ShearMax, env.ShearMin)
	e.sags = e.sags[:0]
	for i := range p.demand.Deflections {
		e.sags = append(e.sags, greater(env.Spans[i].DeflectionMax, env.Spans[i].DeflectionMin))
	}
}

func greater(a, b beam.Extreme) float64 { return max(math.Abs(a.Value), math.Abs(b.Value)) }

// beyond fills e with a lower bound of the effects under a weight of at least that
// of b. Each effect is the greatest of many that are linear in the weight, hence
// convex, and a convex curve lies above the line through two of its points beyond
// the second.
func (e *effects) beyond(a, b *effects, weight float64) {
	t := (weight - a.weight) / (b.weight - a.weight)
	line := func(x, y float64) float64 { return max(0, x+t*(y-x)) }
	e.weight, e.moment, e.shear = weight, line(a.moment, b.moment), line(a.shear, b.shear)
	e.sags = e.sags[:0]
	for i := range b.sags {
		e.sags = append(e.sags, line(a.sags[i], b.sags[i]))
	}
}

// ask turns effects into the demand on a section.
func (p *Prepared) ask(s *section.Section, e *effects) *resistance.Demand {
	d := &p.demand
	d.Moment, d.Shear, d.Axial = e.moment, e.shear, p.axial(s)
	stiffness := p.setup.Grade.E * s.Iy
	for i, sag := range e.sags {
		d.Deflections[i].Value = sag / stiffness
	}
	return d
}

// axial returns the factored axial force, N. The weight of an upright member adds
// to its compression at the foot; in tension the member is taken as hung up, so
// that the weight adds there too.
func (p *Prepared) axial(s *section.Section) float64 {
	n := p.member.Axial * p.setup.Combination.Variable
	if !p.member.Upright {
		return n
	}
	own := p.weight(s) * p.member.Length
	if n < 0 {
		return n - own
	}
	return n + own
}

// TotalLoad returns the greatest sum of what acts on the member with the section,
// N, with the combination's factors: permanent actions, those variable actions that
// act downwards, and self-weight; for an upright member its compression and
// self-weight.
func (p *Prepared) TotalLoad(s *section.Section) float64 {
	total := p.weight(s) * p.member.Length
	if p.member.Upright {
		return total + max(0, p.member.Axial)*p.setup.Combination.Variable
	}
	for _, a := range p.member.Actions {
		load := a.Total(p.member.Length) * p.setup.Combination.Factor(a.Nature)
		if a.Nature == action.Permanent || load > 0 {
			total += load
		}
	}
	return total
}
