package schedule

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/material"
)

// Options are choices of the caller.
type Options struct {
	MaxMembers int    // rows accepted; 0 is DefaultMaxMembers
	Project    string // overrides the Job sheet where not empty
	Scheme     string // overrides the Job sheet where not empty

	// Overrides lays values over the Job sheet, by its keys. Decimal sign is the point.
	Overrides map[string]string
	// JobTable is a CSV of Key,Value for a posting that has no Job sheet.
	JobTable []byte
	// DefinitionTable and RiskTable are CSV of the columns of DefinitionColumns and
	// RiskColumns for a posting that has no sheet Definition or Risks.
	DefinitionTable, RiskTable []byte
	// ConnectionClasses are those of the rate book; nil stands for the starting book's.
	ConnectionClasses []string
}

// DefaultMaxMembers is the number of rows read where Options name none.
const DefaultMaxMembers = 100_000

// reader gathers what is read.
type reader struct {
	comma      bool
	jsonKeys   bool // columns have names and no letters
	address    func(row, column int) sheet.Address
	faults     sheet.Faults
	headerFrom int  // faults before the header was read
	hopeless   bool // there is no header: rows mean nothing

	layout   layout
	job      jobSettings
	classes  []string
	defaults *defaults

	definition []DefinitionEntry
	risks      []Risk

	members    []Member
	rows       int
	maxMembers int
	marks      map[string]int  // row by mark
	sizes      map[string]tied // by mark
	unmarked   bool            // a mark is faulty, so that one may seem missing
	ties       []tie
	siteLacks  map[string]bool // what the Job sheet does not say for load sets and is reported
	headless   map[int]bool    // columns without a header whose content is reported
	ranges     map[string]bool
	products   memory[string, product]
	grades     memory[string, grade]
	verdicts   memory[[2]string, material.Verdict]
	unsuited   map[string][]int // rows whose family does not take the job's grade, by family
	texts      memory[string, string]
}

func newReader(o Options) *reader {
	r := &reader{
		classes: o.ConnectionClasses, maxMembers: o.MaxMembers, defaults: newDefaults(),
		marks: map[string]int{}, sizes: map[string]tied{}, siteLacks: map[string]bool{}, headless: map[int]bool{}, ranges: map[string]bool{},
		products: memory[string, product]{}, grades: memory[string, grade]{}, verdicts: memory[[2]string, material.Verdict]{},
		unsuited: map[string][]int{}, texts: memory[string, string]{},
	}
	if r.classes == nil {
		r.classes = connectionClasses()
	}
	if r.maxMembers <= 0 {
		r.maxMembers = DefaultMaxMembers
	}
	return r
}

// Read reads a schedule, its Job sheet, its definition checklist and its risks. The
// schedule is the sheet named Schedule, else the only one besides Job, Definition and
// Risks. What is wrong with it comes as sheet.Faults, all at once, sorted by cell;
// other errors are those of the file (*sheet.OpenError) and of the context.
func Read(ctx context.Context, book *sheet.Book, o Options) (Schedule, error) {
	r := newReader(o)
	r.comma = book.DecimalComma()
	at, found := pickSheets(book.Sheets())
	if found != nil {
		return Schedule{}, sheet.Faults{*found}
	}
	r.faults = append(r.faults, misnamed(book.Sheets(), at)...)
	var parts [len(besides)]annexSource
	for i, table := range [len(besides)][]byte{o.JobTable, o.DefinitionTable, o.RiskTable} {
		var err error
		if parts[i], err = openBeside(book, at.beside[i], besides[i], table); err != nil {
			return Schedule{}, err
		}
	}
	if err := r.readBeside(ctx, parts, o); err != nil {
		return Schedule{}, err
	}
	r.address = placeOn(at.schedule)
	err := book.Rows(ctx, at.schedule, r.readRow)
	return r.finish(err)
}

// readBeside reads what stands beside the rows: the checklist first, because the
// estimate class may follow from it.
func (r *reader) readBeside(ctx context.Context, parts [len(besides)]annexSource, o Options) error {
	if err := r.readDefinition(ctx, parts[besideDefinition]); err != nil {
		return fmt.Errorf("reading the sheet Definition: %w", err)
	}
	job := parts[besideJob]
	if err := r.readJob(ctx, job.rows, job.comma, job.place, o); err != nil {
		return err
	}
	if err := r.readRisks(ctx, parts[besideRisks]); err != nil {
		return fmt.Errorf("reading the sheet Risks: %w", err)
	}
	return nil
}

func placeOn(name string) func(row, column int) sheet.Address {
	return func(row, column int) sheet.Address { return sheet.Address{Sheet: name, Row: row, Column: column} }
}

func (r *reader) report(at sheet.Address, header, found, problem, remedy string) {
	r.faults = append(r.faults, sheet.Fault{Address: at, Header: header, Found: found, Problem: problem, Remedy: remedy})
}

// seenRange tells whether a merged range is reported already, and notes it.
func (r *reader) seenRange(name string) bool {
	seen := r.ranges[name]
	r.ranges[name] = true
	return seen
}

// intern returns the same text for equal texts, so that a group named in each row
// is held once.
func (r *reader) intern(s string) string { return r.texts.find(s, strings.Clone) }

// errEnough ends the reading early; the faults say why.
var errEnough = errors.New("enough read")

// readRow takes one row of the schedule, the first as its header.
func (r *reader) readRow(number int, cells []sheet.Cell) error {
	if !slices.ContainsFunc(cells, hasContent) {
		return nil
	}
	if r.layout.row == 0 {
		r.headerFrom = len(r.faults)
		r.readHeader(number, cells)
		if r.hopeless {
			return errEnough
		}
		return nil
	}
	if r.rows++; r.rows > r.maxMembers {
		r.report(r.address(number, 0), "", "", fmt.Sprintf("there are more than %d rows", r.maxMembers), "split the schedule, or join pieces alike in one row with their quantity")
		return errEnough
	}
	w := row{reader: r, number: number}
	w.fill(cells)
	if w.lonely() {
		return nil
	}
	m := w.build()
	if len(r.faults) > 0 {
		r.members = nil
		return nil
	}
	r.members = append(r.members, m)
	return nil
}

func hasContent(c sheet.Cell) bool { return c.Kind != sheet.Empty && c.Kind != sheet.Merged }

// lonely reports a row with a single cell once, and not for all that it lacks: it
// is a note or a total.
func (r *row) lonely() bool {
	if r.count > 1 {
		return false
	}
	for id, c := range r.cells {
		if hasContent(c) {
			r.fault(columnID(id), c.Text, "stands alone in its row", "a row names at least "+strings.Join(obligatory(), ", ")+"; leave notes and totals out")
		}
	}
	return true
}

// finish closes the reading: err is what ended the rows.
func (r *reader) finish(err error) (Schedule, error) {
	if err != nil && !errors.Is(err, errEnough) {
		return Schedule{}, fmt.Errorf("reading the schedule: %w", err)
	}
	r.reportUnsuited()
	r.reportTies()
	if r.layout.row == 0 {
		r.report(r.address(0, 0), "", "", "the schedule is empty", "a header row with at least "+strings.Join(obligatory(), ", ")+", and rows under it")
	} else if r.rows == 0 && !r.hopeless {
		r.report(r.address(r.layout.row, 0), "", "", "there is no row under the header", "at least one row")
	}
	if err := r.faults.Err(); err != nil {
		return Schedule{}, err
	}
	slices.SortFunc(r.members, func(a, b Member) int { return naturalCompare(a.Mark, b.Mark) })
	entries, err := r.defaults.register(r.members, &r.job)
	if err != nil {
		return Schedule{}, fmt.Errorf("entering the defaults of the schedule: %w", err)
	}
	return Schedule{
		Settings: r.job.Settings, Members: r.members, Risks: r.risks, Defaults: entries,
		Omissions: omissions(r.members), Echo: echo(r.members),
	}, nil
}

// reportUnsuited reports a grade of the job that families cannot have, once for
// each family.
func (r *reader) reportUnsuited() {
	families := make([]string, 0, len(r.unsuited))
	for f := range r.unsuited {
		families = append(families, f)
	}
	slices.Sort(families)
	for _, f := range families {
		rows := r.unsuited[f]
		which := fmt.Sprintf("row %d", rows[0])
		if len(rows) > 1 {
			which += fmt.Sprintf(" and %d more", len(rows)-1)
		}
		v := material.Suits(f, r.job.Grade)
		r.jobFault(jobGrade, &complaint{
			r.job.Grade, fmt.Sprintf("does not suit %s of %s, where no grade is named: %s", f, which, v.Reason),
			"name a grade in the row: " + v.Remedy,
		})
	}
}
