package schedule

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// mostAnnexRows is the number of rows of an annex.
const mostAnnexRows = 1000

// annex is a small table beside the schedule: the sheet Definition or Risks, or the
// JSON list of that name.
type annex struct {
	*reader
	place func(row, column int) sheet.Address
	comma bool // its file has decimal commas
	heads []definition

	header   int           // row of the header, 0 before it is read
	columns  []annexColumn // as heads
	meaning  map[int]int   // index of heads by column of the file; −1 a faulty header
	headless map[int]bool  // columns without a header whose content is reported
	names    map[string]int
	rows     int
}

// annexColumn is what the header says of one of the heads.
type annexColumn struct {
	at   int
	head string
	unit unit.Unit
	lost bool // its header is faulty or missing: its cells are not judged
}

// annexSource is where an annex comes from.
type annexSource struct {
	rows  jobRows // nil where there is none
	comma bool
	place func(row, column int) sheet.Address
}

// annexRow is one row under the eyes of the reader, its cells as heads.
type annexRow struct {
	*annex
	number int
	cells  []sheet.Cell
}

// readAnnex hands every row of an annex to take. Its faults are reported.
func (r *reader) readAnnex(ctx context.Context, s annexSource, heads []definition, take func(*annexRow)) error {
	if s.rows == nil {
		return nil
	}
	a := &annex{reader: r, place: s.place, comma: s.comma, heads: heads,
		columns: make([]annexColumn, len(heads)), meaning: map[int]int{}, headless: map[int]bool{}, names: map[string]int{}}
	err := s.rows(ctx, func(number int, cells []sheet.Cell) error {
		if !hasAny(cells) {
			return nil
		}
		if a.header == 0 {
			return a.readHeader(number, cells)
		}
		if a.rows++; a.rows > mostAnnexRows {
			a.report(a.place(number, 0), "", "", fmt.Sprintf("there are more than %d rows", mostAnnexRows), "join what belongs together")
			return errEnough
		}
		if w := (annexRow{a, number, a.sort(number, cells)}); hasAny(w.cells) {
			take(&w)
		}
		return nil
	})
	if err != nil && !errors.Is(err, errEnough) {
		return err
	}
	return nil
}

func hasAny(cells []sheet.Cell) bool {
	for _, c := range cells {
		if hasContent(c) && (c.Kind != sheet.Text || strings.TrimSpace(c.Text) != "") {
			return true
		}
	}
	return false
}

func (a *annex) readHeader(number int, cells []sheet.Cell) error {
	a.header = number
	known := false
	before := len(a.faults)
	for _, c := range cells {
		if c.Kind == sheet.Empty {
			continue
		}
		a.meaning[c.Column] = -1
		known = a.readHeaderCell(c) || known
	}
	if !known {
		a.faults = a.faults[:before]
		a.report(a.place(number, 0), "", shorten(firstText(cells)), "is no header row: it names none of the columns", "the first row with content names the columns "+a.accepted())
		return errEnough
	}
	for id, d := range a.heads {
		if col := &a.columns[id]; d.Obligatory && col.at == 0 && !col.lost {
			col.lost = true
			a.report(a.place(number, 0), d.Header, "", "the column is missing", "add a column "+d.Header)
		}
	}
	return nil
}

func (a *annex) accepted() string {
	names := make([]string, len(a.heads))
	for i, d := range a.heads {
		names[i] = d.Header
	}
	return strings.Join(names, ", ")
}

// readHeaderCell tells whether the header names a column, or may mean one.
func (a *annex) readHeaderCell(c sheet.Cell) bool {
	at := a.place(a.header, c.Column)
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		p := wrongKind(c, "the column's name as text")
		a.report(at, "", p.found, p.problem, p.remedy)
		return false
	}
	h := readHeading(c.Text, a.heads)
	if h.wrong != nil {
		for _, id := range h.lost {
			a.columns[id].lost = a.columns[id].at == 0
		}
		a.report(at, "", h.wrong.found, h.wrong.problem, h.wrong.remedy)
		return len(h.lost) > 0
	}
	col := &a.columns[h.id]
	if col.at > 0 {
		col.lost = true
		a.report(at, a.heads[h.id].Header, shorten(c.Text), "is a second column "+a.heads[h.id].name(), "leave one of them out")
		return true
	}
	a.meaning[c.Column] = h.id
	col.at, col.head, col.unit, col.lost = c.Column, c.Text, h.unit, false
	return true
}

// sort lays the cells of a row under their heads. Content under no header is
// reported at its first cell.
func (a *annex) sort(number int, cells []sheet.Cell) []sheet.Cell {
	sorted := make([]sheet.Cell, len(a.heads))
	for _, c := range cells {
		id, known := a.meaning[c.Column]
		switch {
		case known && id >= 0:
			sorted[id] = c
		case !known && hasContent(c) && !a.headless[c.Column]:
			a.headless[c.Column] = true
			a.report(a.place(number, c.Column), "", shorten(c.Text), "stands in a column without a header", "name the column in the header row, or clear it")
		}
	}
	return sorted
}

// judge reports a complaint about a cell, if there is one.
func (w *annexRow) judge(id int, wrong *complaint) {
	if cell := w.cells[id]; wrong == nil || cell.Kind == sheet.Merged && w.seenRange(w.place(0, 0).Sheet+"!"+cell.Range) {
		return
	}
	c := w.columns[id]
	at, head := w.place(w.number, c.at), c.head
	if c.at == 0 {
		at, head = w.place(w.number, 0), w.heads[id].Header
	}
	w.report(at, head, shorten(wrong.found), wrong.problem, wrong.remedy)
}

func (w *annexRow) text(id, longest int) text {
	if w.columns[id].lost {
		return text{state: bad}
	}
	t, wrong := readText(w.cells[id], longest, "text such as "+w.heads[id].Example)
	w.judge(id, wrong)
	return t
}

// needed reads a text that may not be blank.
func (w *annexRow) needed(id int, remedy string) text {
	t := w.text(id, longestName)
	if t.state == blank {
		w.judge(id, &complaint{"", w.heads[id].name() + " is blank", remedy})
		t.state = bad
	}
	return t
}

// once reports a name that stands in an earlier row, whatever its letter case.
func (w *annexRow) once(id int, name string) {
	first, twice := w.names[strings.ToLower(name)]
	if twice {
		w.judge(id, &complaint{name, fmt.Sprintf("stands in row %d already", first), "each in one row"})
		return
	}
	w.names[strings.ToLower(name)] = w.number
}

func (w *annexRow) quantity(id int, d unit.Dimension, s span) number {
	if w.columns[id].lost {
		return number{state: bad}
	}
	c := w.cells[id]
	n, wrong := readQuantity(c, w.comma, d, w.columns[id].unit, w.heads[id].Example)
	if wrong == nil && n.state == given && !s.holds(n.value) {
		wrong = &complaint{c.Text, "is out of bounds", s.words}
		n.state = bad
	}
	w.judge(id, wrong)
	return n
}
