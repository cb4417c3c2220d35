package calibration

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
)

// Options are choices of the caller of Read and ReadJSON.
type Options struct {
	// Kinds are the kinds of structure that are read: the connection classes of
	// the rate book. nil stands for Kinds().
	Kinds []string
}

// MostOutturns is the number of jobs that one table may hold: the back-test grows with
// its square, to a second or two here.
const MostOutturns = 2000

type options struct {
	kinds []string
	comma bool
}

func (o Options) resolved(comma bool) options {
	if o.Kinds == nil {
		return options{kinds, comma}
	}
	return options{o.Kinds, comma}
}

// outturnsSheet is the sheet's name in the template.
const outturnsSheet = "Outturns"

// reader gathers what is read of a table.
type reader struct {
	options
	sheet    string
	faults   sheet.Faults
	headings map[int]heading // by column, from 1
	header   int             // its row
	places   map[int]int     // column of the sheet by definition
	jobs     map[string]int  // row by name in lower case
	outturns []Outturn
	rows     int
	lost     bool // a head was not understood, so that what seems missing may be there
}

// errEnough ends the reading early; the faults say why.
var errEnough = errors.New("enough read")

// Read reads a table of outturns: the sheet named Outturns, else the only one; its
// first row with content is the header. The outturns come sorted by job. What is
// wrong comes as sheet.Faults, all at once, sorted by cell; other errors are those of
// the file (*sheet.OpenError) and of the context.
func Read(ctx context.Context, book *sheet.Book, o Options) ([]Outturn, error) {
	names := book.Sheets()
	i := slices.IndexFunc(names, func(n string) bool { return fold(n) == fold(outturnsSheet) })
	if i < 0 && len(names) == 1 {
		i = 0
	}
	if i < 0 {
		return nil, sheet.Faults{{Found: shorten(strings.Join(names, ", ")), Problem: "the workbook does not say which sheet holds the outturns", Remedy: "name it " + outturnsSheet}}
	}
	r := &reader{options: o.resolved(book.DecimalComma()), sheet: names[i], headings: map[int]heading{}, places: map[int]int{}, jobs: map[string]int{}}
	if err := book.Rows(ctx, r.sheet, r.readRow); err != nil && !errors.Is(err, errEnough) {
		return nil, fmt.Errorf("reading the outturns: %w", err)
	}
	switch {
	case r.header == 0:
		r.report(0, 0, "", complaint{"", "the table is empty", "a header row, and one row for each job"})
	case r.rows == 0 && len(r.faults) == 0:
		r.report(r.header, 0, "", complaint{"", "there is no row under the header", "one row for each job"})
	}
	if err := r.faults.Err(); err != nil {
		return nil, err
	}
	sortOutturns(r.outturns)
	return r.outturns, nil
}

func sortOutturns(list []Outturn) {
	slices.SortFunc(list, func(a, b Outturn) int { return strings.Compare(a.Job, b.Job) })
}

func (r *reader) report(row, column int, header string, c complaint) {
	r.faults = append(r.faults, sheet.Fault{Address: sheet.Address{Sheet: r.sheet, Row: row, Column: column}, Header: header,
		Found: c.found, Problem: c.problem, Remedy: c.remedy})
}

func (r *reader) readRow(number int, cells []sheet.Cell) error {
	if !slices.ContainsFunc(cells, func(c sheet.Cell) bool { return strings.TrimSpace(c.Text) != "" }) {
		return nil
	}
	if r.header == 0 {
		return r.readHeader(number, cells)
	}
	if r.rows++; r.rows > MostOutturns {
		r.report(number, 0, "", complaint{"", fmt.Sprintf("there are more than %d jobs", MostOutturns), "split the table"})
		return errEnough
	}
	r.readJob(number, cells)
	return nil
}

// readHeader places the columns. A header with faults still reads the rows under
// the columns that it does name, unless an obligatory one is missing.
func (r *reader) readHeader(number int, cells []sheet.Cell) error {
	r.header = number
	for _, c := range cells {
		if strings.TrimSpace(c.Text) == "" {
			continue
		}
		h := readHeading(c.Text)
		r.headings[c.Column] = heading{column: -1} // its cells are not judged
		if h.wrong != nil {
			r.report(number, c.Column, "", *h.wrong)
			r.lost = true
		}
		if h.column < 0 {
			continue
		}
		if first, twice := r.places[h.column]; twice {
			r.report(number, c.Column, "", complaint{shorten(c.Text), "names a column for the second time, after column " + sheet.Letters(first), "leave one of them out"})
			continue
		}
		r.places[h.column] = c.Column
		if h.wrong == nil {
			r.headings[c.Column] = h
		}
	}
	return r.missing(number)
}

// missing reports obligatory columns that the header does not have. Where a head
// was not understood it may have been meant, so the rows wait for its correction.
func (r *reader) missing(number int) error {
	var names []string
	for i, d := range definitions {
		if _, there := r.places[i]; d.Obligatory && !there {
			names = append(names, d.Header)
		}
	}
	if len(names) == 0 {
		return nil
	}
	remedy := "add it"
	if r.lost {
		remedy = "add it, or mend the head that was meant for it"
	}
	for _, n := range names {
		r.report(number, 0, n, complaint{"", "the column " + n + " is missing", remedy})
	}
	return errEnough
}

func (r *reader) readJob(number int, cells []sheet.Cell) {
	before := len(r.faults)
	o, given, bad := empty(), map[string]bool{}, map[string]bool{}
	for _, c := range cells {
		h, known := r.headings[c.Column]
		switch {
		case !known:
			if strings.TrimSpace(c.Text) != "" {
				r.report(number, c.Column, "", complaint{shorten(c.Text), "stands under no head that is read", "give the column a head, or empty it"})
			}
			continue
		case h.column < 0:
			continue
		}
		d := definitions[h.column]
		blank, wrong := d.take(&o, c, h.unit, r.options)
		if wrong != nil {
			r.report(number, c.Column, d.Header, *wrong)
			bad[d.Field] = true
		}
		given[d.Field] = !blank
	}
	for i, d := range definitions {
		if column := r.places[i]; d.Obligatory && !given[d.Field] && r.headings[column].column >= 0 {
			r.report(number, column, d.Header, complaint{"", "is blank", "enter " + d.Accepts})
			bad[d.Field] = true
		}
		bad[d.Field] = bad[d.Field] || r.lost
	}
	for _, t := range check(o, bad) {
		r.report(number, r.columnOf(t.field), r.headerOf(t.field), t.complaint)
	}
	r.once(number, o)
	if len(r.faults) == before {
		r.outturns = append(r.outturns, o)
	}
}

// columnOf is the place of a field in the sheet, 0 where it has none.
func (r *reader) columnOf(field string) int {
	if i := columnOf(field); i >= 0 {
		return r.places[i]
	}
	return 0
}

func (r *reader) headerOf(field string) string {
	if i := columnOf(field); i >= 0 {
		return definitions[i].Header
	}
	return ""
}

// once reports a job that stands in the table already.
func (r *reader) once(number int, o Outturn) {
	key := strings.ToLower(o.Job)
	if key == "" {
		return
	}
	if first, twice := r.jobs[key]; twice {
		r.report(number, r.columnOf("job"), "Job", complaint{shorten(o.Job), fmt.Sprintf("is a job that stands in row %d already", first), "leave one of them out, or name them apart"})
		return
	}
	r.jobs[key] = number
}
