package sizing

import (
	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// variant is a combination with one choice of what it leaves open: the factor on
// permanent actions, the variable action that leads, and whether a variable axial
// force is there that works against the permanent one.
type variant struct {
	combination *action.Combination
	favourable  bool
	permanent   float64 // factor on permanent actions and self-weight
	lead        int     // index of the leading action, everything, or axialGroup
	axial       float64 // N, factored, without self-weight

	terms, aside    []beam.Term // of both planes; the last of terms is the own weight
	momentZ, shearY float64     // N·m, N; strength alone

	line    line      // strength: moment and shear over the weight
	sagging []float64 // service: at EI = 1 under no weight …
	slope   []float64 // … and by N/m of weight, where straight
	lighter []float64 // … and under the weight of the lightest candidate, where not
}

// axialGroup stands for the variable axial force where it leads.
const axialGroup = 1 << 30

// expand writes out the variants of all combinations.
func (p *Prepared) expand() {
	p.strength = p.strength[:0]
	for i := range p.setup.Strength {
		p.strength = p.variants(p.strength, &p.setup.Strength[i])
	}
	p.service = p.variants(p.service[:0], &p.setup.Service)
}

func (p *Prepared) variants(list []variant, c *action.Combination) []variant {
	factors := [2]float64{c.Permanent, c.Favourable()}
	n := 1
	if factors[1] < factors[0] {
		n = 2
	}
	add := func(lead int) {
		for i, g := range factors[:n] {
			var v *variant
			list, v = another(list)
			v.combination, v.favourable, v.permanent, v.lead = c, i == 1, g, lead
			variable := v.variable(axialGroup) * p.member.Axial
			v.axial = g*p.member.PermanentAxial + variable
			if p.opposed(variable) {
				list, v = another(list)
				v.combination, v.favourable, v.permanent, v.lead = c, i == 1, g, lead
				v.axial = g * p.member.PermanentAxial
			}
		}
	}
	if c.Beside() == c.Variable {
		add(everything)
		return list
	}
	none := true
	for _, pl := range [...]*plane{&p.down, &p.side} {
		for _, i := range pl.actions {
			if p.member.Actions[i].Nature == action.Variable {
				add(i)
				none = false
			}
		}
	}
	if p.member.Axial != 0 || none {
		add(axialGroup)
	}
	return list
}

// another appends a variant in the memory that the list had there.
func another(list []variant) ([]variant, *variant) {
	if len(list) == cap(list) {
		list = append(list, variant{})
	} else {
		list = list[:len(list)+1]
		v := &list[len(list)-1]
		*v = variant{sagging: v.sagging[:0], slope: v.slope[:0], lighter: v.lighter[:0]}
	}
	return list, &list[len(list)-1]
}

// opposed tells whether a variable axial force works against the permanent one or
// the compression from an upright member's own weight.
func (p *Prepared) opposed(variable float64) bool {
	return variable*p.member.PermanentAxial < 0 || p.member.Upright && variable < 0
}

// variable returns the factor on the variable actions of a group.
func (v *variant) variable(group int) float64 {
	if v.lead == everything || v.lead == group {
		return v.combination.Variable
	}
	return v.combination.Beside()
}

// name says which combination this is, and which of its choices.
func (v *variant) name(m *Member) string {
	n := v.combination.Name
	if v.favourable {
		n += ", permanent actions favourable"
	}
	if v.lead >= 0 && v.lead < len(m.Actions) && v.combination.Beside() != v.combination.Variable {
		if label := m.Actions[v.lead].Label; label != "" {
			n += ", " + label + " leading"
		}
	}
	return n
}

// terms gives the cases of a plane their factors; the own weight's is set later.
func (p *Prepared) terms(pl *plane, v *variant) []beam.Term {
	var terms []beam.Term
	own := -1
	for c, l := range pl.loads {
		switch l.group {
		case ownWeight:
			own = c
		case permanents:
			terms = append(terms, beam.Term{Case: c, Factor: v.permanent})
		default:
			terms = append(terms, beam.Term{Case: c, Factor: v.variable(l.group) * l.factor, Free: true})
		}
	}
	if own >= 0 {
		terms = append(terms, beam.Term{Case: own})
	}
	return terms
}
