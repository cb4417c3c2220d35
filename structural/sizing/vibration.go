package sizing

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/section"
)

// vibration holds what the first natural frequency of the member needs: 1/ω² at
// EI = 1 over the mass per metre of its own. By Rayleigh's principle 1/ω² is the
// greatest of many that are linear in the mass, hence convex: between two exact
// values a straight line never takes it too small, and the frequency never too
// great.
type vibration struct {
	carried []beam.Mass // mass of actions
	nodes   [masses]float64
}

// The own masses at which 1/ω² is found exactly run from leastMass in steps of
// massStep, kg/m; a straight line between them is within 0.1 % of the frequency.
const (
	masses    = 31
	leastMass = 0.5
	massStep  = math.Sqrt2
)

// massPieces is the number of even stretches that a linear action's mass is cut
// into, each at its heavier end.
const massPieces = 16

// pointStretch is the part of the length over which a point action's mass is spread.
const pointStretch = 1e-3

// prepareVibration collects the mass that is present with the frequency: permanent
// downward actions and the stated share of variable ones.
func (p *Prepared) prepareVibration() error {
	v := &p.vibration
	v.carried, v.nodes = v.carried[:0], [masses]float64{}
	if p.member.FrequencyFloor == 0 {
		return nil
	}
	for _, i := range p.down.actions {
		a := p.member.Actions[i]
		share := 1.0
		if a.Nature == action.Variable {
			share = p.member.MassShare
		}
		if share > 0 {
			p.carry(a, share/p.setup.Gravity)
		}
	}
	if _, err := p.slowness(0); err != nil {
		return fmt.Errorf("frequency: %w", err)
	}
	return nil
}

// carry adds the mass of an action; byForce is kg/N. Wheels and couples have none
// that stays.
func (p *Prepared) carry(a action.Action, byForce float64) {
	from, to := a.Extent(p.member.Length)
	add := func(from, to, force float64) {
		if force > 0 {
			p.vibration.carried = append(p.vibration.carried, beam.Mass{From: from, To: to, PerMetre: force * byForce})
		}
	}
	switch a.Kind {
	case action.Uniform:
		add(from, to, a.Value)
	case action.Linear:
		step := (to - from) / massPieces
		at := func(i int) float64 { return a.Value + (a.End-a.Value)*float64(i)/massPieces }
		for i := range massPieces {
			end := from + float64(i+1)*step
			if i == massPieces-1 {
				end = to
			}
			add(from+float64(i)*step, end, max(at(i), at(i+1)))
		}
	case action.Point:
		half := pointStretch / 2 * p.member.Length
		left, right := max(0, from-half), min(p.member.Length, from+half)
		add(left, right, a.Value/(right-left))
	}
}

// slowness returns 1/ω² at EI = 1 at node i, s²·N·m².
func (p *Prepared) slowness(i int) (float64, error) {
	v := &p.vibration
	if v.nodes[i] > 0 {
		return v.nodes[i], nil
	}
	own := beam.Mass{From: 0, To: p.member.Length, PerMetre: leastMass * math.Pow(massStep, float64(i))}
	f, err := beam.Frequency(p.beam, append([]beam.Mass{own}, v.carried...))
	if err != nil {
		return math.NaN(), err
	}
	v.nodes[i] = 1 / (4 * math.Pi * math.Pi * f * f)
	return v.nodes[i], nil
}

// frequency returns the first natural frequency with the section, Hz: within 0.1 %,
// and never above the exact one. It allocates only where a neighbouring mass has not
// been asked for before. NaN, which fails, for a section beyond the heaviest node.
func (p *Prepared) frequency(s *section.Section) float64 {
	mass := p.massOf(s)
	at := math.Log(mass/leastMass) / math.Log(massStep)
	if !(at <= masses-1) {
		return math.NaN()
	}
	i := int(min(max(at, 0), masses-2))
	low, errLow := p.slowness(i)
	high, errHigh := p.slowness(i + 1)
	if errLow != nil || errHigh != nil {
		return math.NaN()
	}
	m0 := leastMass * math.Pow(massStep, float64(i))
	t := (mass - m0) / (m0*massStep - m0)
	slowness := low + t*(high-low)
	if t < 0 { // lighter than the lightest node: that of the node is on the safe side
		slowness = low
	}
	stiffness := p.setup.Grade.E * s.Iy
	if p.member.Upright {
		stiffness = p.setup.Grade.E * min(s.Iy, s.Iz) // it has no vertical plane
	}
	return math.Sqrt(stiffness*p.softening(s, stiffness)/slowness) / (2 * math.Pi)
}

// softening is what compression leaves of the stiffness against vibration: 1 − N/Ncr
// under service actions, at least 0; exact for the pinned span, whose buckling and
// vibrating shapes are one (Timoshenko & Young, Vibration Problems in Engineering).
func (p *Prepared) softening(s *section.Section, stiffness float64) float64 {
	n := p.setup.Service.Variable*p.member.Axial + p.setup.Service.Permanent*p.member.PermanentAxial
	if p.member.Upright {
		n += p.setup.Service.Permanent * p.massOf(s) * p.setup.Gravity * p.member.Length
	}
	length := p.demand.LengthY
	if !(n > 0 && length > 0) {
		return 1
	}
	return max(0, 1-n*length*length/(math.Pi*math.Pi*stiffness))
}
