package schedule

import (
	"spanwright/estimate/assumption"
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
	shapes := map[string]section.Shape{}
	for i := range members {
		a := acting(&members[i], shapes)
		for field, id := range members[i].Defaults {
			if err := reg.Feed(id, a.fedBy(field)...); err != nil {
				return nil, err
			}
		}
		if !job.given[jobFactor] {
			if err := reg.Feed(factorEntry, a.fedBy("factor")...); err != nil {
				return nil, err
			}
		}
	}
	return reg.Entries(), nil
}

// checks tells which effects act on a member, and so which checks vary with what.
type checks struct {
	prefix     string // member/{mark}/check/
	sized      bool
	bent       bool // bending about the strong axis: all but a standing strut without loads
	axial      bool
	compressed bool
	sideways   bool // lateral-torsional buckling applies: open shapes
}

func acting(m *Member, shapes map[string]section.Shape) checks {
	return checks{
		prefix:     "member/" + assumption.Segment(m.Mark) + "/check/",
		sized:      m.Treatment != ByMass,
		bent:       len(m.Loads) > 0 || !m.Upright,
		axial:      m.Axial != 0 || m.Upright,
		compressed: m.Axial > 0 || m.Upright,
		sideways:   bucklesSideways(m, shapes),
	}
}

// bucklesSideways follows the rule of the resistances: I sections and flats.
func bucklesSideways(m *Member, shapes map[string]section.Shape) bool {
	shape, ok := shapes[m.Family]
	if !ok {
		if s, err := section.Find(m.Section); err == nil && m.Section != "" {
			shape = s.Shape
		} else if list, err := section.Series(m.Family); err == nil {
			shape = list[0].Shape
		}
		shapes[m.Family] = shape
	}
	return shape == section.ISection || shape == section.Flat
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
	switch field {
	case "deflection_limit":
		add(c.bent, "deflection")
	case "factor":
		add(c.bent, "bending")
		add(c.bent && c.sideways, "lateral-torsional buckling")
		add(c.bent, "shear")
		add(c.axial, "axial")
		add(c.axial && c.bent, "interaction")
	case "restraint_m":
		add(c.bent && c.sideways, "lateral-torsional buckling")
		add(c.bent && c.sideways && c.axial, "interaction")
	case "length_factor":
		add(c.compressed, "axial")
		add(c.compressed && c.bent, "interaction")
	}
	return ids
}
