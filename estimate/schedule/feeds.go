package schedule

import (
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// register joins the entries with the figures that each feeds, over the members
// that took it.
func (d *defaults) register(members []Member, job *jobSettings) ([]assumption.Entry, error) {
	var reg assumption.Register
	for _, e := range d.entries {
		if err := reg.Add(e); err != nil {
			return nil, err
		}
	}
	shapes := map[string]form{}
	for i := range members {
		a := acting(&members[i], shapes, job.DesignBasis)
		for field, id := range members[i].Defaults {
			if err := reg.Feed(id, a.fedBy(field)...); err != nil {
				return nil, err
			}
		}
		if _, taken := d.entries[factorEntry]; taken {
			if err := reg.Feed(factorEntry, a.fedBy("factor")...); err != nil {
				return nil, err
			}
		}
	}
	return reg.Entries(), nil
}

// checks tells which effects act on a member, and so which checks vary with what.
type checks struct {
	member     *Member
	prefix     string // member/{mark}/check/
	sized      bool
	bent       bool // bending about the strong axis: all but a standing strut without loads
	side       bool // bending about the weak axis
	axial      bool
	compressed bool
	sideways   bool // lateral-torsional buckling applies: open shapes
	lone       bool // open shapes of at most one axis of symmetry, which twist in compression
}

func acting(m *Member, shapes map[string]form, basis string) checks {
	c := checks{
		member:     m,
		prefix:     "member/" + assumption.Segment(m.Mark) + "/check/",
		sized:      m.Treatment != ByMass,
		bent:       !m.Upright,
		axial:      m.Axial != 0 || m.Upright,
		compressed: m.Axial > 0 || m.Upright,
	}
	for _, l := range m.Loads {
		c.bent, c.side = c.bent || !l.Sideways, c.side || l.Sideways
	}
	f := formOf(m, shapes)
	switch f.shape {
	case section.RectangularTube, section.WeldedBox:
		c.sideways = f.deep && basis != defaultBasis // allowable takes closed shapes as stiff enough
	case section.ISection, section.Flat:
		c.sideways = true
	case section.Channel, section.Tee, section.UnequalI:
		c.sideways, c.lone = true, true
	}
	return c
}

// form is what decides whether a family can buckle sideways.
type form struct {
	shape section.Shape
	deep  bool // one of its sections is deeper than wide
}

// formOf is the form of the member's family or section.
func formOf(m *Member, forms map[string]form) form {
	key := m.Family + "/" + m.Section
	f, ok := forms[key]
	if ok {
		return f
	}
	list, err := section.Series(m.Family)
	if s, found := section.Find(m.Section); m.Section != "" && found == nil {
		list, err = []section.Section{s}, nil
	}
	if err == nil {
		f = form{list[0].Shape, slices.ContainsFunc(list, func(s section.Section) bool { return s.H > s.B })}
	}
	forms[key] = f
	return f
}

// together tells whether two of axial force and both moments act, so that the
// interaction is checked.
func (c checks) together() bool {
	n := 0
	for _, acts := range []bool{c.bent, c.side, c.axial} {
		if acts {
			n++
		}
	}
	return n > 1
}

// fedBy returns the figures that change with a default by one per cent. Names of
// kinds, grades and classes are no numbers and feed none.
func (c checks) fedBy(field string) []string {
	if !c.sized {
		return nil
	}
	var ids []string
	add := func(applies bool, check string) {
		if applies {
			ids = append(ids, c.prefix+check)
		}
	}
	if label, ok := strings.CutPrefix(field, readyField); ok {
		return c.fedByLoad(label)
	}
	switch field {
	case "deflection_limit":
		add(c.bent || c.side, resistance.Deflecting)
	case "factor":
		add(c.bent, resistance.Bending)
		add(c.side, resistance.BendingZ)
		add(c.bent && c.sideways, resistance.LateralBuckling)
		add(c.bent, resistance.Shear)
		add(c.side, resistance.ShearY)
		add(c.axial, resistance.Axial)
		add(c.together(), resistance.Interaction)
	case "restraint_m":
		add(c.bent && c.sideways, resistance.LateralBuckling)
		add(c.compressed && c.lone, resistance.Axial)
		add(c.bent && c.sideways && c.together(), resistance.Interaction)
	case "length_factor":
		add(c.compressed, resistance.Axial)
		add(c.compressed && c.together(), resistance.Interaction)
	}
	return ids
}

// readyField leads the name of a ready load in the defaults of a row.
const readyField = "load "

// fedByLoad returns the figures that change with a ready load of the member.
func (c checks) fedByLoad(label string) []string {
	m := c.member
	l := m.Loads[slices.IndexFunc(m.Loads, func(l Load) bool { return l.Label == label })]
	names := []string{resistance.Bending, resistance.Shear}
	if c.sideways {
		names = append(names, resistance.LateralBuckling)
	}
	if l.Sideways {
		names = []string{resistance.BendingZ, resistance.ShearY}
	}
	if c.together() {
		names = append(names, resistance.Interaction)
	}
	if m.DeflectionLimit > 0 {
		names = append(names, resistance.Deflecting)
	}
	if m.FrequencyFloor > 0 && l.Nature == "permanent" {
		names = append(names, resistance.Vibrating)
	}
	for i, n := range names {
		names[i] = c.prefix + n
	}
	return names
}
