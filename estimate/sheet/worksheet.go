package sheet

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strconv"
)

// rows streams the rows of a sheet through the gate.
func (b *xlsxBook) rows(sheet string, g *gate) error {
	i := slices.IndexFunc(b.sheets, func(w worksheet) bool { return w.name == sheet })
	if i < 0 {
		return malformed(fmt.Sprintf("has no sheet %q", sheet), "name one that it has")
	}
	part := b.sheets[i].part
	merges, err := b.readMerges(part)
	if err != nil {
		return inPart(part, err)
	}
	s, c, err := b.parts.scan(part)
	if err != nil {
		return err
	}
	defer c.Close()
	if err := s.root("worksheet"); err != nil {
		return inPart(part, err)
	}
	r := &rowReader{book: b, s: s, g: g, merges: mergeCursor{rest: merges}}
	err = s.all(func() error {
		if string(s.name) == "sheetData" {
			return s.each(r.readRow)
		}
		return s.skip()
	})
	if err != nil && !g.callers {
		return inPart(part, err)
	}
	return err
}

// rowReader reads the rows of one sheet one after the other.
type rowReader struct {
	book   *xlsxBook
	s      *xmlScanner
	g      *gate
	merges mergeCursor
	row    int
	column int
	cells  []Cell
	value  []byte // scratch of readCell
	text   []byte
}

// readRow reads the row element that the scanner is at (18.3.1.73).
func (r *rowReader) readRow() error {
	if string(r.s.name) != "row" {
		return r.s.skip()
	}
	row := r.row + 1
	if ref := r.s.attr("r"); ref != nil {
		var ok bool
		if row, ok = parseRow(ref); !ok || row <= r.row {
			return fmt.Errorf("row %.20q follows row %d", ref, r.row)
		}
	}
	r.row, r.column, r.cells = row, 0, r.cells[:0]
	if err := r.s.each(r.readCell); err != nil {
		return err
	}
	cells, err := r.merges.apply(row, r.cells, r.book.limits.Columns)
	if err != nil {
		return err
	}
	return r.g.pass(row, cells)
}

// stored is a cell as the file has it (18.3.1.4).
type stored struct {
	kind       string // its t: "" or n, s, str, inlineStr, b, e, d
	show       showing
	formula    bool
	hasValue   bool
	inlineText bool
}

func (r *rowReader) readCell() error {
	if string(r.s.name) != "c" {
		return r.s.skip()
	}
	column := r.column + 1
	if ref := r.s.attr("r"); ref != nil {
		var row int
		var ok bool
		if column, row, ok = parseReference(ref); !ok || row != r.row || column <= r.column {
			return fmt.Errorf("cell %.20q stands in row %d behind column %s", ref, r.row, Letters(r.column))
		}
	}
	r.column = column
	c := stored{kind: cellKind(r.s.attr("t")), show: r.book.showing(r.s.attr("s"))}
	if err := r.readParts(&c); err != nil {
		return err
	}
	cell, err := r.cell(c)
	if err != nil {
		var e *OpenError
		if errors.As(err, &e) {
			return e.at("", r.row, column)
		}
		return malformed(err.Error(), saveAgain).at("", r.row, column)
	}
	if cell.Kind != Empty {
		r.cells = append(r.cells, cell)
	}
	return nil
}

// cellKind spares the allocation for the kinds that exist.
func cellKind(t []byte) string {
	for _, kind := range [...]string{"n", "s", "str", "inlineStr", "b", "e", "d"} {
		if string(t) == kind {
			return kind
		}
	}
	return string(t)
}

func (b *xlsxBook) showing(style []byte) showing {
	if len(style) == 0 {
		return asNumber
	}
	i, err := strconv.Atoi(string(style))
	if err != nil || i < 0 || i >= len(b.formats) {
		return asNumber
	}
	return b.formats[i]
}

// readParts reads formula, value and inline text into the scratch buffers.
func (r *rowReader) readParts(c *stored) error {
	r.value, r.text = r.value[:0], r.text[:0]
	return r.s.each(func() error {
		var err error
		switch string(r.s.name) {
		case "v":
			c.hasValue = true
			r.value, err = r.s.content(r.value[:0])
		case "f":
			c.formula = true
			r.text, err = r.s.content(append(r.text[:0], '='))
		case "is":
			c.inlineText = true
			r.value, err = richText(r.s, r.value[:0])
		default:
			err = r.s.skip()
		}
		return err
	})
}

// cell turns what was read into what is handed out.
func (r *rowReader) cell(c stored) (Cell, error) {
	if c.formula && !c.inlineText && (!c.hasValue || len(r.value) == 0 && c.kind != "str") {
		if err := r.g.checkText(r.text, r.row, r.column); err != nil {
			return Cell{}, err
		}
		return Cell{Column: r.column, Kind: FormulaWithoutValue, Text: string(r.text)}, nil
	}
	if len(r.value) == 0 {
		return Cell{}, nil
	}
	switch c.kind {
	case "s":
		i, err := strconv.Atoi(string(bytes.TrimSpace(r.value)))
		text, ok := r.book.strings.get(i)
		if err != nil || !ok {
			return Cell{}, fmt.Errorf("refers to the shared text %.20q, which is not there", r.value)
		}
		return textCell(r.column, string(text)), nil
	case "str", "inlineStr":
		if c.kind == "str" {
			r.value = unescape(r.value, 0)
		}
		if err := r.g.checkText(r.value, r.row, r.column); err != nil {
			return Cell{}, err
		}
		return textCell(r.column, string(r.value)), nil
	}
	return r.plain(c, string(bytes.TrimSpace(r.value)))
}

// plain reads the kinds without free text.
func (r *rowReader) plain(c stored, value string) (Cell, error) {
	cell := Cell{Column: r.column, Kind: Number}
	ok := false
	switch c.kind {
	case "", "n":
		if c.show == asDate {
			if cell.Text, ok = dateText(value, r.book.from1904); ok {
				cell.Kind = Date
				return cell, nil
			}
			if _, ok = numberText(value, false); ok { // shown as a row of hashes
				cell.Kind, cell.Text = ErrorValue, "#######"
			}
		} else {
			cell.Text, ok = numberText(value, c.show == asPercent)
		}
	case "b":
		cell.Kind = Boolean
		cell.Text, ok = "FALSE", value == "0" || value == "false"
		if value == "1" || value == "true" {
			cell.Text, ok = "TRUE", true
		}
	case "e":
		cell.Kind, cell.Text, ok = ErrorValue, value, len(value) <= 40
	case "d":
		cell.Kind = Date
		cell.Text, ok = isoDate(value)
	}
	if !ok {
		return Cell{}, fmt.Errorf("holds %.40q, which is no value of type %.10q", value, c.kind)
	}
	return cell, nil
}
