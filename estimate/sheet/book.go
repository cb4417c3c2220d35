package sheet

import (
	"bytes"
	"context"
	"errors"
	"fmt"
)

// Book is an opened file. It keeps the posted bytes, which must not change, and
// may be read by several goroutines at once.
type Book struct {
	file   string
	limits Limits
	csv    *csvBook
	xlsx   *xlsxBook
}

// Open recognises the file by its content and reads all but the rows.
//
// name is that under which it was posted, for messages; contentType is the
// declared media type, which is refused where the content contradicts it, and
// may be empty. CSV is read in UTF-8 and UTF-16, separated by comma, semicolon
// or tab. Every error is an *OpenError.
func Open(data []byte, name, contentType string, l Limits) (*Book, error) {
	b := &Book{file: name, limits: l}
	if err := b.open(data, contentType); err != nil {
		return nil, b.explain(err, "")
	}
	return b, nil
}

func (b *Book) open(data []byte, contentType string) error {
	if int64(len(data)) > b.limits.Bytes {
		return &OpenError{Kind: SizeLimit, Problem: fmt.Sprintf("has %d bytes, more than the limit of %d", len(data), b.limits.Bytes), Remedy: "split it"}
	}
	f, err := sniff(data)
	if err != nil {
		return err
	}
	if err := f.checkDeclared(contentType); err != nil {
		return err
	}
	if f == formatXLSX {
		b.xlsx, err = openXLSX(data, b.limits)
	} else {
		b.csv, err = openCSV(data)
	}
	return err
}

// explain makes every error of the reader an *OpenError with the file's name.
func (b *Book) explain(err error, sheet string) error {
	var e *OpenError
	if !errors.As(err, &e) {
		e = malformed("cannot be read: "+err.Error(), saveAgain)
		e.cause = err
	}
	c := *e
	c.File = b.file
	if c.Address.Sheet == "" {
		c.Address.Sheet = sheet
	}
	return &c
}

// Sheets names the worksheets in their order; a CSV file has one, named "".
func (b *Book) Sheets() []string {
	if b.csv != nil {
		return []string{""}
	}
	names := make([]string, len(b.xlsx.sheets))
	for i, s := range b.xlsx.sheets {
		names[i] = s.name
	}
	return names
}

// DecimalComma tells whether texts are to be read with the comma as decimal
// sign. It is always false for XLSX, whose numbers are stored without signs of
// any country.
func (b *Book) DecimalComma() bool { return b.csv != nil && b.csv.decimalComma }

// Rows calls fn for every row that has content, in order, with its number from
// 1 and its cells from left to right; empty rows and empty
// cells are left out but numbers are kept. The slice is reused for the next
// row, its texts may be kept. It ends at the first error: fn's own, the
// context's, or an *OpenError where the file is damaged or passes a limit.
func (b *Book) Rows(ctx context.Context, sheet string, fn func(row int, cells []Cell) error) error {
	g := &gate{ctx: ctx, limits: b.limits, fn: fn}
	var err error
	switch {
	case b.csv != nil && sheet == "":
		err = b.csv.rows(g)
	case b.xlsx != nil:
		err = b.xlsx.rows(sheet, g)
	default:
		err = malformed(fmt.Sprintf("has no sheet %q", sheet), "a CSV file has one sheet without a name")
	}
	if err == nil || g.callers {
		return err
	}
	return b.explain(err, sheet)
}

// gate counts rows and cells against the limits before it hands them on.
type gate struct {
	ctx     context.Context
	limits  Limits
	fn      func(row int, cells []Cell) error
	rows    int
	cells   int
	callers bool // the error is the caller's own or the context's
}

// contextEvery is the number of rows between two looks at the context.
const contextEvery = 64

// pass hands a row on, unless it has no content or passes a limit.
func (g *gate) pass(row int, cells []Cell) error {
	content := 0
	for _, c := range cells {
		if c.Kind != Merged {
			content++
		}
		if c.Column > g.limits.Columns && c.Kind != Merged {
			return tooMany("columns", g.limits.Columns).at("", row, c.Column)
		}
	}
	if content == 0 {
		return nil
	}
	g.rows++
	g.cells += content
	if g.rows > g.limits.Rows {
		return tooMany("rows with content", g.limits.Rows).at("", row, 0)
	}
	if g.cells > g.limits.Cells {
		return tooMany("cells with content", g.limits.Cells).at("", row, 0)
	}
	if g.rows%contextEvery == 0 || g.rows == 1 {
		if err := g.ctx.Err(); err != nil {
			g.callers = true
			return err
		}
	}
	err := g.fn(row, cells)
	g.callers = err != nil
	return err
}

// checkText refuses a text over the limit.
func (g *gate) checkText(text []byte, row, column int) error {
	if err := checkLength(text, g.limits.TextLength); err != nil {
		return err.at("", row, column)
	}
	return nil
}

func checkLength(text []byte, limit int) *OpenError {
	if len(text) > limit && len(bytes.Runes(text)) > limit {
		return &OpenError{Kind: SizeLimit, Problem: fmt.Sprintf("has a text of more than %d characters in one cell", limit), Remedy: "shorten it"}
	}
	return nil
}
