package schedule

import (
	"fmt"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// layout is what the header row says.
type layout struct {
	row     int                    // of the header
	at      [columnCount]int       // column of the file, from 1; 0 where there is none
	heads   [columnCount]string    // header as written
	units   [columnCount]unit.Unit // implied for bare numbers; zero where none is
	named   [columnCount]bool      // the header names a unit
	lost    [columnCount]bool      // its header is faulty: its cells are not judged
	meant   [columnCount]bool      // a faulty header may mean it
	meaning []int                  // columnID of each column of the file; −1 unknown, −2 no header
}

// Meanings of file columns that are no column of the schedule.
const (
	unknownColumn = -1
	noHeader      = -2
)

// readHeader fills the layout from the first row with content.
func (r *reader) readHeader(row int, cells []sheet.Cell) {
	l := &r.layout
	l.row = row
	for _, c := range cells {
		for len(l.meaning) <= c.Column {
			l.meaning = append(l.meaning, noHeader)
		}
		if c.Kind == sheet.Empty {
			continue
		}
		l.meaning[c.Column] = unknownColumn
		r.readHeaderCell(c)
	}
	if !r.knownHeader() {
		r.faults = r.faults[:r.headerFrom]
		r.report(r.address(row, 0), "", shorten(firstText(cells)), "is no header row: it names none of the columns",
			"the first row with content names the columns, at least "+strings.Join(obligatory(), ", "))
		r.hopeless = true
		return
	}
	for id, d := range columns {
		l.lost[id] = l.lost[id] || l.meant[id] && l.at[id] == 0
		if d.Obligatory && l.at[id] == 0 && !l.lost[id] {
			r.report(r.address(row, 0), d.Header, "", "the column is missing", "add a column "+d.Header)
			l.lost[id] = true
		}
	}
	for _, id := range alongMember {
		if l.at[id] > 0 && !l.named[id] {
			l.units[id], l.named[id] = l.units[colLength], l.named[colLength]
		}
	}
}

// alongMember are the columns that take the unit of Length where their header
// names none: all are measured on the same member.
var alongMember = []columnID{colPointAt, colWidth, colOverhang, colPositions, colRestraint}

func (r *reader) readHeaderCell(c sheet.Cell) {
	l := &r.layout
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		if c.Kind == sheet.Merged && r.seenRange(c.Range) {
			return
		}
		p := wrongKind(c, "the column's name as text")
		r.report(r.address(l.row, c.Column), "", p.found, p.problem, p.remedy)
		return
	}
	h := readHeading(c.Text, columns[:])
	if h.wrong != nil {
		for _, id := range h.lost {
			l.meant[id] = true
		}
		r.report(r.address(l.row, c.Column), "", h.wrong.found, h.wrong.problem, h.wrong.remedy)
		return
	}
	if first := l.at[h.id]; first > 0 {
		l.lost[h.id] = true
		r.report(r.address(l.row, c.Column), columns[h.id].Header, shorten(c.Text),
			fmt.Sprintf("is the second column %s; the first is %s", columns[h.id].name(), r.columnName(first, l.heads[h.id])), "leave one of them out")
		return
	}
	l.meaning[c.Column] = h.id
	l.at[h.id], l.heads[h.id], l.units[h.id], l.named[h.id] = c.Column, c.Text, h.unit, h.named
}

// columnName names a column of the file: by its letters, or in JSON by its key.
func (r *reader) columnName(column int, head string) string {
	if name := sheet.Letters(r.address(0, column).Column); name != "" {
		return "column " + name
	}
	return fmt.Sprintf("%q", head)
}

func (r *reader) knownHeader() bool {
	for id := range columns {
		if r.layout.at[id] > 0 || r.layout.meant[id] {
			return true
		}
	}
	return false
}

func firstText(cells []sheet.Cell) string {
	for _, c := range cells {
		if c.Text != "" {
			return c.Text
		}
	}
	return ""
}

func obligatory() []string {
	var names []string
	for _, d := range columns {
		if d.Obligatory {
			names = append(names, d.Header)
		}
	}
	return names
}
