package schedule

import (
	"context"
	"encoding/json"
	"fmt"

	"spanwright/estimate/sheet"
)

// jsonList is a list of JSON objects, kept as rows under a header: one column for
// each key.
type jsonList struct {
	name    string
	columns map[string]int // by key, from 1
	header  []sheet.Cell
	first   []int // row in which each key stands first
	rows    [][]sheet.Cell
}

func newJSONList(name string) *jsonList { return &jsonList{name: name, columns: map[string]int{}} }

// survey takes in the array that comes next; a key that stands twice is reported.
func (l *jsonList) survey(ctx context.Context, r *reader, d *json.Decoder) error {
	return sheet.EachItem(d, func(i int) error {
		if err := ctx.Err(); err != nil {
			return err
		}
		if i > mostAnnexRows {
			_, err := readValue(d) // one row too many is kept, and reported
			return err
		}
		row := i + 1
		var cells []sheet.Cell
		seen := map[string]bool{}
		err := sheet.EachKey(d, func(key string) error {
			c, err := readValue(d)
			if err != nil {
				return err
			}
			if seen[key] {
				r.report(sheet.Address{Sheet: l.name, Row: row}, shorten(key), shorten(key), "is a key that stands twice in the row", "leave one of them out")
				return nil
			}
			seen[key] = true
			if c.Column, err = l.column(key, row); err == nil {
				cells = append(cells, c)
			}
			return err
		})
		l.rows = append(l.rows, cells)
		return err
	})
}

func (l *jsonList) column(key string, row int) (int, error) {
	if at, known := l.columns[key]; known {
		return at, nil
	}
	if len(l.header) == mostKeys {
		return 0, fmt.Errorf("%s, row %d: there are more than %d different keys; accepted are the headers of the columns", l.name, row, mostKeys)
	}
	at := len(l.header) + 1
	l.columns[key] = at
	l.header = append(l.header, sheet.Cell{Column: at, Kind: sheet.Text, Text: key})
	l.first = append(l.first, row)
	return at, nil
}

// each hands out the header and then row by row, as a sheet does.
func (l *jsonList) each(_ context.Context, fn func(int, []sheet.Cell) error) error {
	if len(l.header) == 0 {
		return nil
	}
	if err := fn(headerRow, l.header); err != nil {
		return err
	}
	for i, cells := range l.rows {
		if err := fn(i+1, cells); err != nil {
			return err
		}
	}
	return nil
}

// place is the row of the list; a header is where its key stands first.
func (l *jsonList) place(row, column int) sheet.Address {
	switch {
	case row != headerRow:
		return sheet.Address{Sheet: l.name, Row: row}
	case column == 0:
		return sheet.Address{Sheet: l.name}
	}
	return sheet.Address{Sheet: l.name, Row: l.first[column-1]}
}
