package schedule

import (
	"fmt"
)

// build turns a row into a member. Every fault of the row is reported; the member
// is of use only where there is none.
func (r *row) build() Member {
	f := r.readFields()
	m := Member{
		Mark: f.mark.value, Group: r.intern(f.group.value), Kind: r.intern(f.kind.value),
		Description: f.description.value, Remarks: f.remarks.value,
		Quantity: f.quantity, Length: f.length.value, Row: r.place(colMark),
	}
	d := taken{}
	r.checkMark(f.mark)
	if f.quantityState == blank {
		r.missing(colQuantity, "the quantity is blank", "enter the number of pieces")
	}
	if f.group.state == blank {
		m.Group = ungrouped
		d.take("group", r.defaults.group())
	}
	switch word, byDefault := r.arrangement(&f); {
	case word.state == bad:
		r.givenGrade(&f)
	case word.value == notSized:
		r.unsized(&m, &f, &d)
	default:
		m.Arrangement = word.value
		if byDefault {
			d.take("arrangement", r.defaults.simple())
		}
		r.sized(&m, &f, &d)
	}
	r.classify(&m, &f, &d)
	r.record(&m, &f)
	m.Defaults = r.defaults.share(d)
	if _, twice := r.sizes[m.Mark]; !twice && r.layout.at[colSameSize] > 0 {
		r.sizes[m.Mark] = tied{m.Family, m.Treatment, m.Treatment != ""}
	}
	return m
}

func (r *row) checkMark(mark text) {
	r.unmarked = r.unmarked || mark.state != given || r.layout.lost[colMark]
	if mark.state == blank {
		r.missing(colMark, "the mark is blank", "give the row a name of its own")
	}
	if mark.state != given {
		return
	}
	if first, twice := r.marks[mark.value]; twice {
		r.unmarked = true
		r.fault(colMark, mark.value, fmt.Sprintf("is the mark of row %d already", first), "a mark of its own for each row; pieces alike are one row with their quantity")
		return
	}
	r.marks[mark.value] = r.number
}

// unsized completes a row by mass.
func (r *row) unsized(m *Member, f *fields, d *taken) {
	m.Treatment = ByMass
	m.Grade = r.givenGrade(f)
	r.nameProduct(m, f)
	if f.isFoundation() {
		m.Kind = KindFoundation
	}
	if f.support.state == blank {
		d.take("arrangement", r.defaults.foundation())
	}
	for _, l := range []struct {
		id columnID
		n  number
	}{{colPermanent, f.permanent}, {colVariable, f.variable}, {colPoint, f.point}, {colAxial, f.axial}, {colHorizontal, f.horizontal}, {colAreaLoad, f.areaLoad},
		{colMoving, number{state: f.movingState, value: 1}}, {colLoadSet, number{state: f.loadSet.state, value: 1}}} {
		if l.n.state == given && l.n.value != 0 {
			r.fault(l.id, r.cells[l.id].Text, "is a load on a row that is not sized, which carries none", "leave it blank here and put it on the member that carries it")
		}
	}
	if f.sameSize.state == given {
		r.fault(colSameSize, f.sameSize.value, "stands in a row that is not sized", "leave it blank here")
	}
	r.strayOverhang(notSized, f)
	r.weigh(m, f)
}

// weigh settles the mass of a row that is not sized: by length, by area, or none
// where a foundation is of concrete alone.
func (r *row) weigh(m *Member, f *fields) {
	switch {
	case f.mass.state == bad:
		return
	case f.mass.state == blank && f.isFoundation() && f.concrete.state == bad:
	case f.mass.state == blank && f.concreteAlone(): // the length may be blank or 0
	case f.mass.state == blank && f.isFoundation():
		r.missing(colConcrete, "a foundation needs its concrete", "enter the volume of one piece, such as 2.4 m³, or a mass in "+columns[colMass].name())
	case f.mass.state == blank && f.concrete.state == given && f.concrete.value > 0:
		r.missing(colMass, "a row that is not sized needs its mass", "enter it with its unit, such as 30 kg/m, or "+KindFoundation+" in Kind for concrete alone")
	case f.mass.state == blank:
		r.missing(colMass, "a row that is not sized needs its mass", "enter it with its unit, such as 30 kg/m or 25 kg/m²")
	case f.massByArea:
		m.AreaMass, m.Area = f.mass.value, f.area.value
		if f.area.state == blank {
			r.missing(colArea, "a mass per area needs the area", "enter the area of one piece")
		}
	default:
		m.LineMass = f.mass.value
		if r.needLength(f) && f.length.value == 0 {
			r.fault(colLength, r.cells[colLength].Text, "gives a mass per length no mass", "a length above 0")
		}
	}
}

// nameProduct keeps what a row that is not sized calls itself: as its kind, else
// at the head of the description.
func (r *row) nameProduct(m *Member, f *fields) {
	product := f.product.value
	switch {
	case product == "":
	case m.Kind == "":
		m.Kind = r.intern(product)
	case fold(m.Kind) == fold(product):
	case m.Description == "":
		m.Description = product
	default:
		m.Description = product + ": " + m.Description
	}
}

func (r *row) needLength(f *fields) bool {
	if f.length.state == blank {
		r.missing(colLength, "the length is blank", "enter the whole length of one piece")
	}
	return f.length.state == given
}

func (r *row) strayOverhang(word string, f *fields) {
	if f.overhang.state == given && word != overhang {
		r.fault(colOverhang, r.cells[colOverhang].Text, "is an overhang, but Support says "+word, "overhang in Support, or a blank cell here")
	}
}

// sized completes a row that is held and loaded.
func (r *row) sized(m *Member, f *fields, d *taken) {
	hasLength := r.needLength(f)
	r.strayOverhang(m.Arrangement, f)
	if hasLength {
		m.Supports = r.hold(m.Arrangement, f)
	}
	m.Loads = r.loads(m, f, d)
	m.Axial = f.axial.value
	if m.Arrangement == strut {
		m.Upright = isUpright(m.Kind)
	}
	if f.product.state == blank {
		r.missing(colProduct, "no section and no family is named", "enter a family such as IPE, a section such as IPE 300, or not sized in Support")
	}
	if s := r.product(f); s.known {
		m.Treatment, m.Family, m.Section = s.treatment, s.family, s.designation
		r.steel(m, f, d)
	} else {
		r.givenGrade(f)
	}
	r.restrain(m, f, d)
	r.limitSize(m, f)
	m.LengthFactor = f.factor.value
	if f.factor.state == blank { // 0: sizing takes 1 for spans and 2 for free ends
		d.take("length_factor", r.defaults.lengthFactor())
	}
}

// restrain settles the restraint spacing: the row's, else the job's as far as it
// is below the length, else the full span.
func (r *row) restrain(m *Member, f *fields, d *taken) {
	switch {
	case f.restraint.state == given:
		m.Restraint = f.restraint.value
		if f.length.state == given && m.Restraint > m.Length {
			r.fault(colRestraint, r.cells[colRestraint].Text, "is longer than the member, "+metres(m.Length), "full span, or a spacing up to the length")
		}
	case f.restraint.state == blank && r.job.given[jobRestraint]:
		if s := r.job.Restraint; s < m.Length {
			m.Restraint = s
		}
	case f.restraint.state == blank:
		d.take("restraint_m", r.defaults.restraint())
	}
}

// classify fills what follows from the kind of the member: the kind itself where
// it is blank, the connection class, the deflection limit.
func (r *row) classify(m *Member, f *fields, d *taken) {
	if m.Kind == "" && f.kind.state != bad {
		m.Kind = kindOf(m)
		d.take("kind", r.defaults.kind(m.Kind, m.Arrangement))
	}
	switch {
	case f.connection.state == given:
		m.ConnectionClass = r.connectionClass(f)
	case r.job.given[jobConnection]:
		m.ConnectionClass = r.job.ConnectionClass
	default:
		m.ConnectionClass = classOf(m.Kind, r.classes)
		steel := m.Treatment != ByMass || m.LineMass+m.AreaMass > 0
		if steel && f.jointsState == blank { // counted joints replace the allowance
			d.take("connection_class", r.defaults.connection(m.ConnectionClass))
		}
	}
	switch {
	case m.Treatment == ByMass:
	case f.limit.state == given:
		m.DeflectionLimit = f.limit.value
	case r.job.given[jobLimit]:
		m.DeflectionLimit = r.job.DeflectionLimit
	default:
		m.DeflectionLimit = limitOf(m.Kind)
		d.take("deflection_limit", r.defaults.limit(m.DeflectionLimit))
	}
}

// limitSize takes over what bounds the choice of the section.
func (r *row) limitSize(m *Member, f *fields) {
	m.MaxDepth, m.MomentFactor, m.NetAreaFactor = f.depth.value, f.momentFactor.value, f.netArea.value
	if f.depth.state == given && m.Treatment == CheckSection {
		r.fault(colDepth, r.cells[colDepth].Text, "bounds a choice, and the section is given", "a family in Section or family, or a blank cell here")
	}
	m.FrequencyFloor = r.job.FrequencyFloor
	if f.frequency.state == given {
		m.FrequencyFloor = f.frequency.value
	}
	if f.sameSize.state == given {
		m.SameSizeAs = f.sameSize.value
		r.tie(m, f)
	}
}

// record takes over what neither bears nor bounds.
func (r *row) record(m *Member, f *fields) {
	m.Joints, m.Concrete, m.Coating = f.joints, f.concrete.value, r.intern(f.coating.value)
	if f.execution.state != given {
		return
	}
	class, wrong := executionClass(f.execution.value)
	if wrong != nil {
		r.judge(colExecution, wrong)
	}
	m.ExecutionClass = class
}

func (r *row) connectionClass(f *fields) string {
	class, ok := r.findClass(f.connection.value)
	if !ok {
		r.fault(colConnection, f.connection.value, "is no connection class", r.classRemedy(f.connection.value))
	}
	return class
}
