package schedule

import "spanwright/structural/unit"

// loads gathers the actions of a row. Zero loads are left out.
func (r *row) loads(m *Member, f *fields, d *taken) []Load {
	list := r.ready(m, f, d)
	r.needLoads(m.Arrangement, f)
	add := func(l Load) {
		if l.Value != 0 || len(l.Wheels) > 0 {
			list = append(list, l)
		}
	}
	add(Load{Nature: "permanent", Kind: "uniform", Value: f.permanent.value, Label: permanentLoad})
	add(Load{Nature: "variable", Kind: "uniform", Value: f.variable.value, Free: true, Label: variableLoad})
	add(Load{Nature: "variable", Kind: "uniform", Value: r.tributary(f), Free: true, Label: areaLoad})
	add(Load{Nature: "variable", Kind: "uniform", Value: f.horizontal.value, Free: true, Sideways: true, Label: horizontalLoad})
	if r.paired(colPoint, colPointAt, f.point, f.pointAt, "a point load", "its position") {
		add(Load{Nature: "variable", Kind: "point", Value: f.point.value, Position: f.pointAt.value, Free: true, Label: pointLoad})
		if f.length.state == given && !(f.pointAt.value <= f.length.value) {
			r.fault(colPointAt, r.cells[colPointAt].Text, "is outside the member, "+metres(f.length.value), "a position from 0 to the length")
		}
	}
	add(Load{Nature: "variable", Kind: "train", Free: true, Wheels: f.moving.wheels, Spacings: f.moving.spacings, Label: movingLoad})
	r.strike(list, f)
	return list
}

// needLoads refuses blank loads: a blank never means zero.
func (r *row) needLoads(word string, f *fields) {
	if word == strut {
		if f.axial.state == blank {
			r.missing(colAxial, "a strut needs its axial load", "enter it, compression positive; 0 if there is none")
		}
		return
	}
	if r.setFaulty || f.loadSet.state == bad {
		return // the set would have filled them
	}
	if f.permanent.state == blank {
		r.missing(colPermanent, "the permanent load is blank", "enter 0 if there is none")
	}
	if f.variable.state == blank && f.areaLoad.state == blank && (f.width.state == blank || f.loadSet.state == given) {
		r.missing(colVariable, "the variable load is blank", "enter 0 if there is none, or an area load with its tributary width")
	}
}

// tributary is the area load over its width, N/m.
func (r *row) tributary(f *fields) float64 {
	if f.areaLoad.state == blank && f.loadSet.state != blank {
		return 0 // the width is the load set's
	}
	if !r.paired(colAreaLoad, colWidth, f.areaLoad, f.width, "an area load", "its tributary width") {
		return 0
	}
	q := unit.Round(f.areaLoad.value*f.width.value, unit.Digits)
	if !loads.holds(q) {
		r.fault(colAreaLoad, r.cells[colAreaLoad].Text, "is out of bounds over its tributary width", loads.words)
	}
	return q
}

// paired tells whether both of two cells are given that mean nothing alone. A
// load of 0 needs no partner.
func (r *row) paired(load, partner columnID, l, p number, loadWords, partnerWords string) bool {
	switch {
	case l.state == bad || p.state == bad:
	case l.state == given && p.state == given:
		return true
	case l.state == given && l.value != 0:
		r.missing(partner, loadWords+" needs "+partnerWords, "enter it, or clear "+columns[load].name())
	case l.state == blank && p.state == given:
		r.missing(load, columns[partner].name()+" is given without "+loadWords, "enter the load, 0 if there is none")
	}
	return false
}
