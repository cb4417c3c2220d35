package sheet

import (
	"bytes"
	"fmt"
)

// csvBook is a decoded CSV text with what was found out about it.
type csvBook struct {
	text         []byte // UTF-8
	separator    byte
	firstRow     int // 2 where a "sep=" line precedes the records
	decimalComma bool
}

func openCSV(data []byte) (*csvBook, error) {
	text, err := decodeText(data)
	if err != nil {
		return nil, err
	}
	if len(bytes.TrimSpace(text)) == 0 {
		return nil, malformed("is empty", wanted)
	}
	b := &csvBook{text: text, firstRow: 1}
	if sep, rest, ok := cutSeparatorLine(text); ok {
		b.text, b.separator, b.firstRow = rest, sep, 2
	} else {
		b.separator = detectSeparator(text)
	}
	b.decimalComma, err = detectDecimalComma(b)
	return b, err
}

func (b *csvBook) records() *records {
	return &records{rest: b.text, separator: b.separator, row: b.firstRow - 1}
}

func (b *csvBook) rows(g *gate) error {
	r := b.records()
	var cells []Cell
	for r.next() {
		cells = cells[:0]
		for column := 1; ; column++ {
			field, last, err := r.field(column)
			if err != nil {
				return err
			}
			if err := g.checkText(field, r.row, column); err != nil {
				return err
			}
			if c := textCell(column, string(field)); c.Kind != Empty {
				cells = append(cells, c)
			}
			if last {
				break
			}
		}
		if err := g.pass(r.row, cells); err != nil {
			return err
		}
	}
	return nil
}

// records reads RFC 4180 text with the usual leniences: any line end, and a
// quote inside a field that does not begin with one stands for itself, as in
// 12'-6 1/2". A record is a row whatever line ends its fields hold, as in
// spreadsheet programs, and an empty line is an empty row.
type records struct {
	rest      []byte
	separator byte
	row       int
	unquoted  []byte // scratch of field
}

// next moves to the next row; field must have been called up to its last.
func (r *records) next() bool {
	r.row++
	return len(r.rest) > 0
}

// field reads the next field of the row, whose bytes are valid until the next
// call, and tells whether the row ends with it.
func (r *records) field(column int) ([]byte, bool, error) {
	var field []byte
	if len(r.rest) > 0 && r.rest[0] == '"' {
		var err error
		if field, err = r.quoted(column); err != nil {
			return nil, true, err
		}
	} else {
		n := 0
		for n < len(r.rest) && r.rest[n] != r.separator && r.rest[n] != '\n' && r.rest[n] != '\r' {
			n++
		}
		field, r.rest = r.rest[:n], r.rest[n:]
	}
	if len(r.rest) > 0 && r.rest[0] == r.separator {
		r.rest = r.rest[1:]
		return field, false, nil
	}
	r.rest = cutLineEnd(r.rest)
	return field, true, nil
}

func (r *records) quoted(column int) ([]byte, error) {
	r.unquoted = r.unquoted[:0]
	for rest := r.rest[1:]; ; {
		n := bytes.IndexByte(rest, '"')
		if n < 0 {
			return nil, malformed("has a quoted field that never ends", `close it with a quote, and write a quote inside it twice: ""`).at("", r.row, column)
		}
		r.unquoted = append(r.unquoted, rest[:n]...)
		rest = rest[n+1:]
		if len(rest) > 0 && rest[0] == '"' {
			r.unquoted, rest = append(r.unquoted, '"'), rest[1:]
			continue
		}
		if len(rest) > 0 && rest[0] != r.separator && rest[0] != '\n' && rest[0] != '\r' {
			problem := fmt.Sprintf("has text behind the closing quote of a field: %q", rest[:min(len(rest), 10)])
			return nil, malformed(problem, `write a quote inside a quoted field twice: ""`).at("", r.row, column)
		}
		r.rest = rest
		return r.unquoted, nil
	}
}

func cutLineEnd(text []byte) []byte {
	if len(text) > 1 && text[0] == '\r' && text[1] == '\n' {
		return text[2:]
	}
	return text[min(len(text), 1):]
}
