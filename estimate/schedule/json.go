package schedule

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"

	"spanwright/estimate/sheet"
)

// Names of the parts of a JSON schedule; faults bear them as their sheet.
const (
	jsonRows       = "rows"
	jsonJob        = "job"
	jsonDefinition = "definition"
	jsonRisks      = "risks"
)

// mostKeys bounds the different keys of the rows: far more than there are columns.
const mostKeys = 200

// nestedKind marks a JSON array or object; most cells want a single value.
const nestedKind sheet.Kind = 254

// longestNested is how many bytes of an array or object are kept.
const longestNested = 10_000

// ReadJSON reads a schedule posted as JSON:
//
//	{"rows": [{"Mark": "B1", "Quantity": 2, "Length (m)": 6, …}], "job": {"Grade": "S355"},
//	 "definition": [{"Item": "member sizes", "State": "preliminary"}],
//	 "risks": [{"Risk": "piles meet rock", "Probability (%)": 20, "Likely": 45000}]}
//
// Keys are the headers of the columns and the keys of the Job sheet, each spelled
// alike in all rows of a list. Joints may also be a list of objects of kind and count.
// The rules are those of Read; a key that is unknown or stands twice in one object is
// a fault. A fault's address has the name of the part as its sheet, the row counted
// from 1, and the key as its header. Text that is no JSON of this form is another error
// that says where.
func ReadJSON(ctx context.Context, data []byte, o Options) (Schedule, error) {
	r := newReader(o)
	r.jsonKeys = true
	t := table{reader: r, columns: map[string]int{}}
	if err := t.survey(ctx, data); err != nil {
		return Schedule{}, fmt.Errorf("reading the schedule as JSON: %w", err)
	}
	parts, err := t.beside(o)
	if err != nil {
		return Schedule{}, err
	}
	if err := r.readBeside(ctx, parts, o); err != nil {
		return Schedule{}, err
	}
	r.address = func(row, _ int) sheet.Address { return sheet.Address{Sheet: jsonRows, Row: row} }
	return r.finish(t.rows(ctx, data))
}

// beside finds where each part beside the rows comes from.
func (t *table) beside(o Options) ([len(besides)]annexSource, error) {
	inJob := func(int, int) sheet.Address { return sheet.Address{Sheet: jsonJob} }
	parts := [len(besides)]annexSource{besideJob: {rows: t.jobRows, place: inJob}}
	for i, l := range []*jsonList{besideDefinition: t.definition, besideRisks: t.risks} {
		if l != nil {
			parts[i] = annexSource{rows: l.each, place: l.place}
		}
	}
	for i, given := range [len(besides)]bool{t.job, t.definition != nil, t.risks != nil} {
		data := [len(besides)][]byte{o.JobTable, o.DefinitionTable, o.RiskTable}[i]
		switch {
		case data == nil:
			continue
		case given:
			return parts, errBoth(besides[i])
		}
		s, err := openTable(data, besides[i])
		if err != nil {
			return parts, err
		}
		if i == besideJob {
			s.place = inJob
		}
		parts[i] = s
	}
	return parts, nil
}

// table turns JSON objects into rows of cells: one column for each key.
type table struct {
	*reader
	columns  map[string]int // by key, from 1
	keys     []sheet.Cell   // the header row
	first    []int          // row in which each key stands first
	settings [][]sheet.Cell // of the job object
	job      bool

	definition, risks *jsonList // nil where the posting has none
}

// survey checks the form of the whole text, collects the keys and the job.
func (t *table) survey(ctx context.Context, data []byte) error {
	d := newDecoder(data)
	seen := map[string]bool{}
	err := sheet.EachKey(d, func(key string) error {
		if seen[key] {
			return fmt.Errorf("the key %q stands twice", shorten(key))
		}
		seen[key] = true
		switch key {
		case jsonRows:
			return sheet.EachItem(d, func(i int) error {
				if err := ctx.Err(); err != nil {
					return err
				}
				return t.surveyRow(d, i+1)
			})
		case jsonJob:
			t.job = true
			return sheet.EachKey(d, func(key string) error {
				c, err := readValue(d)
				c.Column = 2
				t.settings = append(t.settings, []sheet.Cell{{Column: 1, Kind: sheet.Text, Text: key}, c})
				return err
			})
		case jsonDefinition:
			t.definition = newJSONList(jsonDefinition)
			return t.definition.survey(ctx, t.reader, d)
		case jsonRisks:
			t.risks = newJSONList(jsonRisks)
			return t.risks.survey(ctx, t.reader, d)
		}
		return fmt.Errorf("the key %q is not known; accepted are %q, %q, %q and %q", shorten(key), jsonRows, jsonJob, jsonDefinition, jsonRisks)
	})
	if err != nil {
		return fmt.Errorf("at byte %d: %w", d.InputOffset(), err)
	}
	if _, err := d.Token(); !errors.Is(err, io.EOF) {
		return fmt.Errorf("at byte %d: something follows the end", d.InputOffset())
	}
	return nil
}

func (t *table) surveyRow(d *json.Decoder, row int) error {
	seen := map[string]bool{}
	return sheet.EachKey(d, func(key string) error {
		if seen[key] {
			t.report(sheet.Address{Sheet: jsonRows, Row: row}, shorten(key), shorten(key), "is a key that stands twice in the row", "leave one of them out")
		}
		seen[key] = true
		if _, known := t.columns[key]; !known {
			if len(t.keys) == mostKeys {
				return fmt.Errorf("row %d: there are more than %d different keys; accepted are the headers of the columns", row, mostKeys)
			}
			t.columns[key] = len(t.keys) + 1
			t.keys = append(t.keys, sheet.Cell{Column: len(t.keys) + 1, Kind: sheet.Text, Text: key})
			t.first = append(t.first, row)
		}
		_, err := readValue(d)
		return err
	})
}

func (t *table) jobRows(_ context.Context, fn func(int, []sheet.Cell) error) error {
	for i, cells := range t.settings {
		if err := fn(i+1, cells); err != nil {
			return err
		}
	}
	return nil
}

// rows hands out the header and then row by row, as a sheet does.
func (t *table) rows(ctx context.Context, data []byte) error {
	if len(t.keys) == 0 {
		return nil
	}
	rowAddress := t.address
	t.address = func(row, column int) sheet.Address {
		switch {
		case row != headerRow:
			return rowAddress(row, column)
		case column == 0:
			return sheet.Address{Sheet: jsonRows}
		}
		return rowAddress(t.first[column-1], column)
	}
	if err := t.readRow(headerRow, t.keys); err != nil {
		return err
	}
	d := newDecoder(data)
	return sheet.EachKey(d, func(key string) error {
		if key != jsonRows {
			_, err := readValue(d)
			return err
		}
		return sheet.EachItem(d, func(i int) error {
			if err := ctx.Err(); err != nil {
				return err
			}
			cells := make([]sheet.Cell, 0, len(t.keys))
			err := sheet.EachKey(d, func(key string) error {
				c, err := readValue(d)
				c.Column = t.columns[key]
				cells = append(cells, c)
				return err
			})
			if err != nil {
				return err
			}
			return t.readRow(i+1, cells)
		})
	})
}

// headerRow is the number of the header, which JSON does not have as a row.
const headerRow = -1

func newDecoder(data []byte) *json.Decoder {
	d := json.NewDecoder(bytes.NewReader(data))
	d.UseNumber()
	return d
}

// readValue reads one value as a cell.
func readValue(d *json.Decoder) (sheet.Cell, error) {
	var raw json.RawMessage
	if err := d.Decode(&raw); err != nil {
		return sheet.Cell{}, err
	}
	switch raw[0] {
	case '"':
		var s string
		if err := json.Unmarshal(raw, &s); err != nil {
			return sheet.Cell{}, err
		}
		return sheet.Cell{Kind: sheet.Text, Text: s}, nil
	case '{', '[':
		return sheet.Cell{Kind: nestedKind, Text: string(raw[:min(len(raw), longestNested)])}, nil
	case 'n':
		return sheet.Cell{}, nil
	case 't', 'f':
		return sheet.Cell{Kind: sheet.Boolean, Text: strings.ToUpper(string(raw))}, nil
	}
	return sheet.Cell{Kind: sheet.Number, Text: string(raw)}, nil
}
