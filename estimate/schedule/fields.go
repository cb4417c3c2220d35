package schedule

import (
	"fmt"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// fields are the cells of one row, each read and judged by itself.
type fields struct {
	mark, group, kind, description, remarks text
	support, product, grade, connection     text
	coating, execution, loadSet, sameSize   text

	quantity      int
	quantityState state

	length, permanent, variable            number
	point, pointAt, axial, areaLoad, width number
	horizontal, overhang, restraint        number
	factor, limit, frequency, depth        number
	momentFactor, netArea                  number
	mass, area, concrete                   number
	massByArea                             bool // mass is per m²

	moving      train
	movingState state
	dynamic     dynamics

	joints      []Joint
	jointsState state

	supports      []Support // of Support positions
	supportsState state
}

// Greatest numbers of characters.
const (
	longestName = 60
	longestText = 500
)

// row is one row under the eyes of the reader.
type row struct {
	*reader
	number int // of the file
	cells  [columnCount]sheet.Cell
	count  int // cells with content

	setFaulty bool // a load set is faulty: what it would have filled is not missed
}

// fill sorts the cells of a row by what they mean. Content under no header is a
// fault of the file, reported at its first cell.
func (r *row) fill(cells []sheet.Cell) {
	l := &r.layout
	for _, c := range cells {
		if c.Kind == sheet.Empty {
			continue
		}
		if c.Kind != sheet.Merged {
			r.count++
		}
		id := noHeader
		if c.Column < len(l.meaning) {
			id = l.meaning[c.Column]
		}
		switch {
		case id >= 0:
			r.cells[id] = c
		case id == noHeader && c.Kind != sheet.Merged && !r.headless[c.Column]:
			r.headless[c.Column] = true
			r.report(r.address(r.number, c.Column), "", shorten(c.Text), "stands in a column without a header", "name the column in the header row, or clear it")
		}
	}
}

// place is where the cell of a column is; the whole header row where the column
// does not exist.
func (r *row) place(id columnID) sheet.Address {
	if r.layout.at[id] == 0 {
		return r.address(r.layout.row, 0)
	}
	return r.address(r.number, r.layout.at[id])
}

// header names a column as the file does.
func (r *row) header(id columnID) string {
	if h := r.layout.heads[id]; h != "" {
		return h
	}
	return columns[id].Header
}

// fault reports a cell.
func (r *row) fault(id columnID, found, problem, remedy string) {
	r.report(r.place(id), r.header(id), shorten(found), problem, remedy)
}

// missing reports a blank cell; a column that does not exist is reported once.
func (r *row) missing(id columnID, problem, remedy string) {
	if r.layout.lost[id] {
		return
	}
	if r.layout.at[id] == 0 {
		r.layout.lost[id] = true
		remedy = "add a column " + columns[id].Header + ": " + remedy
		problem = fmt.Sprintf("the column is missing, and row %d needs it: %s", r.number, problem)
	}
	r.fault(id, "", problem, remedy)
}

// judge reports a complaint about a cell, if there is one.
func (r *row) judge(id columnID, wrong *complaint) {
	if wrong == nil || r.cells[id].Kind == sheet.Merged && r.seenRange(r.cells[id].Range) {
		return
	}
	r.report(r.place(id), r.header(id), wrong.found, wrong.problem, wrong.remedy)
}

func (r *row) text(id columnID, longest int) text {
	if r.layout.lost[id] {
		return text{state: bad}
	}
	t, wrong := readText(r.cells[id], longest, "text such as "+columns[id].Example)
	r.judge(id, wrong)
	return t
}

func wanted(id columnID) string {
	d := columns[id]
	text := d.Example
	if len(d.dimensions) == 1 {
		text += " " + d.Unit
	}
	return text
}

// quantity reads a cell within bounds.
func (r *row) quantity(id columnID, d unit.Dimension, s span) number {
	if r.layout.lost[id] {
		return number{state: bad}
	}
	c := r.cells[id]
	n, wrong := readQuantity(c, r.comma, d, r.layout.units[id], wanted(id))
	if wrong != nil && r.bare(id, d, c) {
		return number{state: bad}
	}
	if wrong == nil && n.state == given && !s.holds(n.value) {
		wrong = &complaint{shorten(c.Text), "is out of bounds", s.words}
		n.state = bad
	}
	r.judge(id, wrong)
	return n
}

// bare tells whether nothing but a unit is wanting because the header names none;
// the header is then reported, once.
func (r *row) bare(id columnID, d unit.Dimension, c sheet.Cell) bool {
	if d == unit.Number || r.layout.named[id] || c.Kind != sheet.Text && c.Kind != sheet.Number {
		return false
	}
	if _, err := parse(c, r.comma, d, unit.Unit{Symbol: "SI", Dimension: d, Factor: 1}); err != nil {
		return false
	}
	r.layout.lost[id] = true
	r.report(r.address(r.layout.row, r.layout.at[id]), columns[id].Header, shorten(r.layout.heads[id]),
		fmt.Sprintf("names no unit, and row %d holds a bare number", r.number), "write "+columns[id].Header+" or another unit: "+unit.Symbols(d))
	return true
}

// readFields reads every cell of the row by itself.
func (r *row) readFields() fields {
	f := fields{
		mark: r.text(colMark, longestName), group: r.text(colGroup, longestName), kind: r.text(colKind, longestName),
		description: r.text(colDescription, longestText), remarks: r.text(colRemarks, longestText),
		support: r.text(colSupport, longestName), product: r.text(colProduct, longestName),
		grade: r.text(colGrade, longestName), connection: r.text(colConnection, longestName),
		coating:   r.text(colCoating, longestText),
		execution: r.text(colExecution, longestName), loadSet: r.text(colLoadSet, longestName), sameSize: r.text(colSameSize, longestName),
		permanent:    r.quantity(colPermanent, unit.LineLoad, loads),
		variable:     r.quantity(colVariable, unit.LineLoad, loads),
		point:        r.quantity(colPoint, unit.Force, loads),
		pointAt:      r.quantity(colPointAt, unit.Length, positions),
		axial:        r.quantity(colAxial, unit.Force, loads),
		areaLoad:     r.quantity(colAreaLoad, unit.AreaLoad, loads),
		width:        r.quantity(colWidth, unit.Length, lengths),
		horizontal:   r.quantity(colHorizontal, unit.LineLoad, loads),
		depth:        r.quantity(colDepth, unit.Length, depths),
		overhang:     r.quantity(colOverhang, unit.Length, lengths),
		factor:       r.quantity(colFactor, unit.Number, factors),
		momentFactor: r.quantity(colMoment, unit.Number, momentFactors),
		netArea:      r.quantity(colNet, unit.Number, netFactors),
		area:         r.quantity(colArea, unit.Area, areas),
		concrete:     r.quantity(colConcrete, unit.Volume, concretes),
	}
	f.length = r.quantity(colLength, unit.Length, f.lengthBounds())
	f.joints, f.jointsState = r.joints()
	f.quantity, f.quantityState = r.quantityOfPieces()
	f.restraint = r.restraint()
	f.limit = r.limit()
	f.frequency = r.frequency()
	f.moving, f.movingState = r.train()
	f.dynamic = r.dynamics()
	f.mass, f.massByArea = r.mass()
	f.supports, f.supportsState = r.positions()
	return f
}

func (r *row) quantityOfPieces() (int, state) {
	if r.layout.lost[colQuantity] {
		return 0, bad
	}
	n, s, wrong := readCount(r.cells[colQuantity], r.comma, greatestQuantity, "the number of pieces")
	r.judge(colQuantity, wrong)
	return n, s
}

func (r *row) limit() number {
	if r.layout.lost[colLimit] {
		return number{state: bad}
	}
	n, wrong := readLimit(r.cells[colLimit], r.comma)
	r.judge(colLimit, wrong)
	return n
}

// restraint reads a spacing; "full span" is given and zero.
func (r *row) restraint() number {
	if isFullSpan(r.cells[colRestraint]) && !r.layout.lost[colRestraint] {
		return number{state: given}
	}
	return r.quantity(colRestraint, unit.Length, lengths)
}

// frequency reads a floor; "none" is given and zero.
func (r *row) frequency() number {
	if isNone(r.cells[colFrequency]) && !r.layout.lost[colFrequency] {
		return number{state: given}
	}
	return r.quantity(colFrequency, unit.Frequency, frequencies)
}

func isNone(c sheet.Cell) bool { return c.Kind == sheet.Text && fold(c.Text) == "none" }

func isFullSpan(c sheet.Cell) bool { return c.Kind == sheet.Text && fold(c.Text) == "fullspan" }

// mass reads a mass per length or per area: the header or the value says which.
func (r *row) mass() (number, bool) {
	c := r.cells[colMass]
	d, s := unit.LineMass, lineMasses
	if r.layout.units[colMass].Dimension == unit.AreaMass {
		d, s = unit.AreaMass, areaMasses
	}
	if c.Kind == sheet.Text || c.Kind == sheet.Number {
		if _, err := parse(c, r.comma, unit.LineMass, unit.Unit{}); err == nil {
			d, s = unit.LineMass, lineMasses
		}
		if _, err := parse(c, r.comma, unit.AreaMass, unit.Unit{}); err == nil {
			d, s = unit.AreaMass, areaMasses
		}
	}
	return r.quantity(colMass, d, s), d == unit.AreaMass
}
