package sizing

import (
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// forces are the greatest absolute moment and shear in the member's depth.
type forces struct {
	moment float64 // N·m
	shear  float64 // N
}

// line holds moment and shear over the own weight of the member. Each is the
// greatest of many that are linear in the weight, hence convex.
type line struct {
	straight bool    // up to the heaviest section
	none     forces  // under no weight
	slope    forces  // by N/m of weight, where straight
	light    float64 // N/m, weight of the lightest candidate, where not straight
	lighter  forces  // under it
}

// heaviest is the mass up to which effects are followed, kg/m; a heavier section is
// refused. A girder 6 m deep weighs about half of it.
const heaviest = 8000

// straightness is the relative distance from a chord within which three points of a
// convex curve show it to be straight: far above rounding, far below any tolerance.
const straightness = 1e-12

// weight returns the own weight of a section in a variant as a load, N/m.
func (p *Prepared) weight(s *section.Section, v *variant) float64 {
	return p.massOf(s) * p.setup.Gravity * v.permanent
}

// massOf returns the mass of a section in the grade, kg/m.
func (p *Prepared) massOf(s *section.Section) float64 {
	if d := p.setup.Grade.Density; d > 0 && d != 7850 {
		return s.MassAt(d)
	}
	return s.Mass
}

// across is the part of a weight that bends the member.
func (p *Prepared) across(weight float64) float64 {
	if p.member.Upright {
		return 0
	}
	return weight
}

// handbook fills the effects of a simple span under downward actions that are
// uniform over its whole length by wL²/8, wL/2 and 5wL⁴/384 (any handbook; AISC
// Manual table 3-23 case 1) and tells whether the member is one.
func (p *Prepared) handbook() bool {
	l, supports := p.member.Length, p.beam.Supports
	if len(p.side.actions) > 0 || len(supports) != 2 || p.member.Upright ||
		supports[0] != (beam.Support{X: 0, Kind: beam.Pinned}) || supports[1] != (beam.Support{X: l, Kind: beam.Pinned}) {
		return false
	}
	for _, i := range p.down.actions {
		a := &p.member.Actions[i]
		if from, to := a.Extent(l); a.Kind != action.Uniform || a.Value < 0 || from != 0 || to != l {
			return false
		}
	}
	p.spans = append(p.spans[:0], span{name: "span 1", length: l})
	p.sags = p.sags[:0]
	for i := range p.strength {
		v := &p.strength[i]
		w := p.uniform(v)
		v.line = line{
			straight: true,
			none:     forces{w * l * l / 8, w * l / 2}, slope: forces{l * l / 8, l / 2},
		}
	}
	for i := range p.service {
		v := &p.service[i]
		v.slope = append(v.slope[:0], 5*l*l*l*l/384)
		v.sagging = append(v.sagging[:0], p.uniform(v)*v.slope[0])
	}
	return true
}

// uniform returns the sum of the uniform actions in a variant, N/m.
func (p *Prepared) uniform(v *variant) float64 {
	sum := 0.0
	for _, i := range p.down.actions {
		a := &p.member.Actions[i]
		factor := v.permanent
		if a.Nature == action.Variable {
			factor = v.variable(i)
		}
		sum += factor * a.Factor() * a.Value
	}
	return sum
}

// follow finds from the analysis how the effects grow with the weight.
func (p *Prepared) follow() {
	for i := range p.strength {
		v := &p.strength[i]
		most := p.across(heaviest * p.setup.Gravity * v.permanent)
		low, mid, high := p.exactForces(v, 0), p.exactForces(v, most/2), p.exactForces(v, most)
		v.line = line{none: low}
		v.line.straight = onChord(low.moment, mid.moment, high.moment) && onChord(low.shear, mid.shear, high.shear)
		if most > 0 {
			v.line.slope = forces{(high.moment - low.moment) / most, (high.shear - low.shear) / most}
		}
		if len(v.aside) > 0 {
			env := &p.side.envelope
			p.side.response.EnvelopeForces(env, v.aside)
			v.momentZ, v.shearY = greater(env.MomentMax, env.MomentMin), greater(env.ShearMax, env.ShearMin)
		}
	}
	p.setSpans()
	p.sags = p.sags[:0]
	for i := range p.service {
		p.followSags(&p.service[i])
	}
}

func (p *Prepared) followSags(v *variant) {
	v.slope, v.sagging = v.slope[:0], v.sagging[:0]
	if p.member.DeflectionLimit == 0 {
		return
	}
	most := p.across(heaviest * p.setup.Gravity * v.permanent)
	v.sagging = p.exactSags(nil, v, 0)
	mid, high := p.exactSags(nil, v, most/2), p.exactSags(nil, v, most)
	straight := true
	for i, low := range v.sagging {
		straight = straight && onChord(low, mid[i], high[i])
		if most > 0 {
			high[i] = (high[i] - low) / most
		} else {
			high[i] = 0
		}
	}
	if straight {
		v.slope = high
	}
	if len(v.aside) == 0 {
		return
	}
	p.side.response.EnvelopeDeflections(&p.side.envelope, v.aside)
	for i, s := range p.side.envelope.Spans {
		sag := greater(s.DeflectionMax, s.DeflectionMin)
		if i == len(p.sags) {
			p.sags = append(p.sags, sag)
		}
		p.sags[i] = max(p.sags[i], sag)
	}
}

func onChord(low, mid, high float64) bool {
	return math.Abs(mid-(low+high)/2) <= straightness*max(math.Abs(low), math.Abs(high))
}

// exactForces takes moment and shear from the envelope under a weight across the
// member, N/m.
func (p *Prepared) exactForces(v *variant, weight float64) forces {
	v.terms[len(v.terms)-1].Factor = weight
	env := &p.down.envelope
	p.down.response.EnvelopeForces(env, v.terms)
	return forces{greater(env.MomentMax, env.MomentMin), greater(env.ShearMax, env.ShearMin)}
}

// exactSags appends the deflection of each span at EI = 1 under a weight to dst.
func (p *Prepared) exactSags(dst []float64, v *variant, weight float64) []float64 {
	v.terms[len(v.terms)-1].Factor = weight
	env := &p.down.envelope
	p.down.response.EnvelopeDeflections(env, v.terms)
	for i := range env.Spans {
		dst = append(dst, greater(env.Spans[i].DeflectionMax, env.Spans[i].DeflectionMin))
	}
	return dst
}

func greater(a, b beam.Extreme) float64 { return max(math.Abs(a.Value), math.Abs(b.Value)) }

// forces returns moment and shear under a weight: straight where they are.
func (p *Prepared) forces(v *variant, weight float64) forces {
	if v.line.straight {
		return forces{v.line.none.moment + weight*v.line.slope.moment, v.line.none.shear + weight*v.line.slope.shear}
	}
	return p.exactForces(v, weight)
}

// beyond returns a lower bound of moment and shear under a weight of at least that
// of the lightest candidate: a convex curve lies above the line through two of its
// points beyond the second.
func (l *line) beyond(weight float64) forces {
	if l.light == 0 {
		return l.none
	}
	t := weight / l.light
	return forces{
		max(0, l.none.moment+t*(l.lighter.moment-l.none.moment)),
		max(0, l.none.shear+t*(l.lighter.shear-l.none.shear)),
	}
}

// sag fills the deflections of the demand for a section, and where bound is set
// from a lower bound as in beyond.
func (p *Prepared) sag(s *section.Section, bound bool) {
	if len(p.deflections) == 0 {
		return
	}
	stiffness, spans := p.setup.Grade.E*s.Iy, len(p.spans)
	for i := range p.service {
		v := &p.service[i]
		weight := p.across(p.weight(s, v))
		exact := len(v.slope) == 0 && !bound
		if exact {
			v.terms[len(v.terms)-1].Factor = weight
			p.down.response.EnvelopeDeflections(&p.down.envelope, v.terms)
		}
		for k := range spans {
			var sag float64
			switch {
			case exact:
				e := &p.down.envelope.Spans[k]
				sag = greater(e.DeflectionMax, e.DeflectionMin)
			case len(v.slope) > 0:
				sag = v.sagging[k] + weight*v.slope[k]
			case v.line.light == 0:
				sag = v.sagging[k]
			default:
				sag = max(0, v.sagging[k]+weight/v.line.light*(v.lighter[k]-v.sagging[k]))
			}
			if d := &p.deflections[k]; i == 0 || !(sag/stiffness <= d.Value) {
				d.Value = sag / stiffness
			}
		}
	}
	for k, sag := range p.sags {
		p.deflections[spans+k].Value = sag / (p.setup.Grade.E * s.Iz)
	}
}

// ask turns forces in a variant into the demand on a section. Deflections and
// frequency, which no strength variant changes, are asked for with the first.
func (p *Prepared) ask(s *section.Section, v *variant, f forces, first bool) *resistance.Demand {
	d := &p.demand
	d.Moment, d.Shear, d.Axial, d.MomentZ, d.ShearY = f.moment, f.shear, p.axial(s, v), v.momentZ, v.shearY
	d.Deflections, d.Frequency, d.FrequencyFloor = nil, 0, 0
	if first {
		d.Deflections = p.deflections
		if floor := p.member.FrequencyFloor; floor > 0 {
			d.Frequency, d.FrequencyFloor = p.frequency(s), floor
		}
	}
	return d
}

// axial returns the factored axial force, N. The weight of an upright member adds
// to its compression at the foot; in tension the member is taken as hung up, so
// that the weight adds there too.
func (p *Prepared) axial(s *section.Section, v *variant) float64 {
	if !p.member.Upright {
		return v.axial
	}
	own := p.weight(s, v) * p.member.Length
	if v.axial < 0 {
		return v.axial - own
	}
	return v.axial + own
}

// TotalLoad returns the greatest sum of what acts down on the member with the
// section, N, with the factors of the service combination: permanent actions, those
// variable actions that act downwards, and self-weight; for an upright member its
// compression and self-weight.
func (p *Prepared) TotalLoad(s *section.Section) float64 {
	c := p.setup.Service
	total := p.massOf(s) * p.setup.Gravity * c.Permanent * p.member.Length
	if p.member.Upright {
		return total + max(0, p.member.Axial*c.Variable+p.member.PermanentAxial*c.Permanent)
	}
	for _, a := range p.member.Actions {
		load := a.Total(p.member.Length) * c.Factor(a.Nature)
		if a.Direction == action.Vertical && (a.Nature == action.Permanent || load > 0) {
			total += load
		}
	}
	return total
}

// prune drops strength variants that can never govern: those whose every effect
// another one has at least as large under any weight, with the same axial force.
func (p *Prepared) prune() {
	if len(p.strength) < 2 {
		return
	}
	kept := p.strength[:0]
	for i := range p.strength {
		if v := &p.strength[i]; !p.covered(v, kept, false) && !p.covered(v, p.strength[i+1:], true) {
			kept = append(kept, *v)
		}
	}
	p.strength = kept
}

// covered tells whether one of the others covers v; of two that cover each other
// only the one asked without strictly does.
func (p *Prepared) covered(v *variant, others []variant, strictly bool) bool {
	for i := range others {
		if p.covers(&others[i], v) && !(strictly && p.covers(v, &others[i])) {
			return true
		}
	}
	return false
}

// covers tells whether variant w is at least as bad as v for every section up to
// the heaviest looked at.
func (p *Prepared) covers(w, v *variant) bool {
	if !w.line.straight || !v.line.straight || w.axial != v.axial || p.member.Upright && w.permanent != v.permanent {
		return false
	}
	if w.momentZ < v.momentZ || w.shearY < v.shearY {
		return false
	}
	for _, mass := range [2]float64{0, heaviest} {
		f, g := p.forces(w, p.across(mass*p.setup.Gravity*w.permanent)), p.forces(v, p.across(mass*p.setup.Gravity*v.permanent))
		if f.moment < g.moment || f.shear < g.shear {
			return false
		}
	}
	return true
}
