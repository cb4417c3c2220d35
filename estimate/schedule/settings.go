package schedule

import (
	"context"
	"fmt"
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// jobSettings are the settings with what the reading of rows has to know.
type jobSettings struct {
	Settings
	given   [jobCount]bool // named by the job, rightly or not
	entries [jobCount]jobEntry
}

// lost tells whether a fault of the key or its value is reported.
func (j *jobSettings) lost(id jobID) bool { return j.entries[id].cell.Kind == lostKind }

// jobEntry is the value of one key.
type jobEntry struct {
	cell    sheet.Cell
	comma   bool          // its file has decimal commas
	unit    unit.Unit     // named in the key
	header  string        // the key as written
	address sheet.Address // of the value
}

// jobRows hands out the rows of a Job sheet: a key in column 1, a value in 2.
type jobRows func(ctx context.Context, fn func(row int, cells []sheet.Cell) error) error

// readJob reads the Job sheet and the overrides, and fills in what is blank.
func (r *reader) readJob(ctx context.Context, rows jobRows, comma bool, address func(row, column int) sheet.Address, o Options) error {
	if rows != nil {
		first := true
		err := rows(ctx, func(row int, cells []sheet.Cell) error {
			if !(first && isTableHead(cells)) {
				r.readKey(row, cells, comma, address)
			}
			first = false
			return nil
		})
		if err != nil {
			return fmt.Errorf("reading the Job sheet: %w", err)
		}
	}
	r.override(o)
	for id := range jobKeys {
		r.job.given[id] = r.job.entries[id].cell.Kind != sheet.Empty
	}
	r.settle()
	return nil
}

func isTableHead(cells []sheet.Cell) bool {
	return len(cells) > 1 && fold(cells[0].Text) == "key" && fold(cells[1].Text) == "value"
}

// readKey takes one row. What stands right of the value is a remark.
func (r *reader) readKey(row int, cells []sheet.Cell, comma bool, address func(row, column int) sheet.Address) {
	var key, value sheet.Cell
	for _, c := range cells {
		switch c.Column {
		case 1:
			key = c
		case 2:
			value = c
		}
	}
	if key.Kind == sheet.Empty && value.Kind == sheet.Empty {
		return
	}
	if key.Kind != sheet.Text && key.Kind != sheet.Number {
		p := &complaint{shorten(value.Text), "is a value without a key", "name it in the first column: " + jobNames()}
		if key.Kind != sheet.Empty {
			p = wrongKind(key, "a key such as Grade")
		}
		r.report(address(row, 1), "", p.found, p.problem, p.remedy)
		return
	}
	h := readHeading(key.Text, jobKeys[:])
	for _, id := range h.lost {
		r.job.entries[id].cell.Kind = lostKind
	}
	if h.wrong != nil {
		r.report(address(row, 1), r.keyHeader(key.Text), h.wrong.found, h.wrong.problem, h.wrong.remedy)
		return
	}
	if e := r.job.entries[h.id]; e.header != "" {
		r.job.entries[h.id].cell.Kind = lostKind
		r.report(address(row, 1), r.keyHeader(key.Text), shorten(key.Text), "is given twice", "leave one of them out")
		return
	}
	r.job.entries[h.id] = jobEntry{value, comma, h.unit, key.Text, address(row, 2)}
}

// keyHeader names a key beside an address that cannot: in JSON.
func (r *reader) keyHeader(key string) string {
	if r.jsonKeys {
		return key
	}
	return ""
}

// lostKind marks a setting whose fault is reported: its value is not judged.
const lostKind sheet.Kind = 255

func jobNames() string {
	var names []string
	for _, d := range jobKeys {
		names = append(names, d.name())
	}
	return strings.Join(names, ", ")
}

// override lays the options over the Job sheet.
func (r *reader) override(o Options) {
	set := maps.Clone(o.Overrides)
	if set == nil {
		set = map[string]string{}
	}
	if o.Project != "" {
		set["Project"] = o.Project
	}
	if o.Scheme != "" {
		set["Scheme"] = o.Scheme
	}
	place := sheet.Address{Sheet: "overrides"}
	for _, key := range slices.Sorted(maps.Keys(set)) {
		h := readHeading(key, jobKeys[:])
		if h.wrong != nil {
			r.report(place, key, h.wrong.found, h.wrong.problem, h.wrong.remedy)
			continue
		}
		r.job.entries[h.id] = jobEntry{sheet.Cell{Column: 2, Kind: sheet.Text, Text: set[key]}, false, h.unit, key, place}
	}
}
