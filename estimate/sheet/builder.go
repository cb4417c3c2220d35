package sheet

import (
	"bytes"
	"fmt"
	_ "image/png" // pictures are measured by the library
	"io"
	"strconv"
	"strings"
	"time"

	"github.com/xuri/excelize/v2"
)

// Column describes one column of a sheet to write.
type Column struct {
	Head  string  // text of its head; a sheet without heads has no head row
	Width float64 // in characters, 0 for the program's own
}

// Builder writes a workbook sheet by sheet, row by row. The first error stops
// it and is returned by Bytes. Equal calls give equal bytes: no clock, no
// chance order. A file in the system's temporary folder may hold a large sheet
// until Bytes removes it. Formulas recalculate when the workbook is opened. It is not for
// concurrent use, and every Builder must end in Bytes, which frees it.
type Builder struct {
	file    *excelize.File
	sheets  []string
	stream  *excelize.StreamWriter
	streams []*excelize.StreamWriter
	row     int
	widths  []float64 // of the current sheet's columns, in characters
	styles  map[look]int
	err     error
}

// NewBuilder starts an empty workbook.
func NewBuilder() *Builder {
	b := &Builder{file: excelize.NewFile(), styles: map[look]int{}}
	b.file.SetZipWriter(func(w io.Writer) excelize.ZipWriter {
		return &sortedArchive{w, map[string]*bytes.Buffer{}}
	})
	stamp := archiveTime.Format(time.RFC3339)
	yes := true
	b.do(b.file.SetDocProps(&excelize.DocProperties{Creator: "Spanwright", LastModifiedBy: "Spanwright", Created: stamp, Modified: stamp}))
	b.do(b.file.SetAppProps(&excelize.AppProperties{Application: "Spanwright"}))
	b.do(b.file.SetCalcProps(&excelize.CalcPropsOptions{FullCalcOnLoad: &yes}))
	return b
}

// do keeps the first error.
func (b *Builder) do(err error) {
	if b.err == nil && err != nil {
		b.err = err
	}
}

// Sheet starts a worksheet; rows go to it from now on. Where columns have heads,
// they are written as row 1, frozen, and repeated on every printed page. It
// prints landscape, fitted to the page's width, with sheet name and page number.
func (b *Builder) Sheet(name string, columns ...Column) {
	if b.err != nil {
		return
	}
	if len(b.sheets) == 0 {
		b.do(b.file.SetSheetName(b.file.GetSheetName(0), name))
	} else if i, err := b.file.GetSheetIndex(name); err == nil && i >= 0 {
		b.do(fmt.Errorf("sheet %q is there already", name))
	} else {
		_, err := b.file.NewSheet(name)
		b.do(err)
	}
	b.sheets, b.row = append(b.sheets, name), 0
	b.layOut(name)
	if b.err == nil {
		var err error
		b.stream, err = b.file.NewStreamWriter(name)
		b.do(err)
		b.streams = append(b.streams, b.stream)
	}
	b.addColumns(name, columns)
}

// layOut must precede the stream writer, which copies these settings.
func (b *Builder) layOut(name string) {
	if b.err != nil {
		return
	}
	yes, landscape, a4, wide, high := true, "landscape", 9, 1, 0
	b.do(b.file.SetSheetProps(name, &excelize.SheetPropsOptions{FitToPage: &yes}))
	b.do(b.file.SetPageLayout(name, &excelize.PageLayoutOptions{Orientation: &landscape, Size: &a4, FitToWidth: &wide, FitToHeight: &high}))
	b.do(b.file.SetHeaderFooter(name, &excelize.HeaderFooterOptions{OddFooter: "&L&A&R&P / &N"}))
}

func (b *Builder) addColumns(name string, columns []Column) {
	heads, headed := make([]Value, len(columns)), false
	b.widths = make([]float64, len(columns))
	for i, c := range columns {
		b.widths[i] = c.Width
		if c.Width > 0 && b.err == nil {
			b.do(b.stream.SetColWidth(i+1, i+1, c.Width))
		}
		heads[i], headed = TextOf(c.Head).Head(), headed || c.Head != ""
	}
	if !headed || b.err != nil {
		return
	}
	b.do(b.stream.SetPanes(&excelize.Panes{Freeze: true, YSplit: 1, TopLeftCell: "A2", ActivePane: "bottomLeft"}))
	b.do(b.file.SetDefinedName(&excelize.DefinedName{Name: "_xlnm.Print_Titles", RefersTo: quoteSheet(name) + "!$1:$1", Scope: name}))
	b.Row(heads...)
}

// Row writes the next row of the current sheet and returns its number, from 1.
func (b *Builder) Row(values ...Value) int {
	b.row++
	if b.err == nil && b.stream == nil {
		b.do(fmt.Errorf("a row before the first sheet"))
	}
	cells := make([]any, len(values))
	for i, v := range values {
		cell, err := b.cell(v)
		if err != nil {
			b.do(fmt.Errorf("cell %v: %w", Address{b.sheetName(), b.row, i + 1}, err))
		}
		cells[i] = cell
	}
	if b.err == nil {
		b.do(b.stream.SetRow("A"+strconv.Itoa(b.row), cells, excelize.RowOpts{Height: b.height(values)}))
	}
	return b.row
}

func (b *Builder) sheetName() string {
	if len(b.sheets) == 0 {
		return ""
	}
	return b.sheets[len(b.sheets)-1]
}

// cell is the library's form of a value, nil for nothing at all.
func (b *Builder) cell(v Value) (any, error) {
	if err := v.check(); err != nil {
		return nil, err
	}
	style, err := b.style(v.drawn)
	if err != nil {
		return nil, err
	}
	c := excelize.Cell{StyleID: style}
	switch v.kind {
	case textValue:
		c.Value = Neutralise(v.text)
	case numberValue:
		c.Value, _ = exactFloat(v.text) // checked above
	case dateValue:
		c.Value = serialDay(v.day)
	case formulaValue:
		c.Formula, c.Value = v.expr, v.text
		if x, err := exactFloat(v.text); err == nil {
			c.Value = x
		}
	default:
		if style == 0 {
			return nil, nil
		}
	}
	return c, nil
}

// Name gives a cell, "C7", a name that formulas of the whole workbook may use.
func (b *Builder) Name(name, sheet, cell string) {
	column, row, ok := parseReference(cell)
	if !ok {
		b.do(fmt.Errorf("%q, to be named %s, is no cell", cell, name))
	}
	if b.err != nil {
		return
	}
	to := fmt.Sprintf("%s!$%s$%d", quoteSheet(sheet), Letters(column), row)
	b.do(b.file.SetDefinedName(&excelize.DefinedName{Name: name, RefersTo: to}))
}

// Choices offers the values of a defined name or of a range, such as
// "Grades" or "Lists!$A$2:$A$9", in cells "E2:E200" of the current sheet.
func (b *Builder) Choices(cells, from string) {
	if b.err != nil {
		return
	}
	v := excelize.NewDataValidation(true)
	v.SetSqref(cells)
	v.SetSqrefDropList(strings.TrimPrefix(from, "="))
	b.do(b.file.AddDataValidation(b.sheetName(), v))
}

// Picture lays a PNG picture over the current sheet, its corner in the cell;
// description is read out to those who cannot see it.
func (b *Builder) Picture(cell string, png []byte, description string) {
	if b.err != nil {
		return
	}
	b.do(b.file.AddPictureFromBytes(b.sheetName(), cell, &excelize.Picture{
		Extension: ".png", File: png, Format: &excelize.GraphicOptions{AltText: description},
	}))
}

// Bytes ends the workbook and returns it, or the first error of all calls.
func (b *Builder) Bytes() ([]byte, error) {
	defer b.file.Close()
	if b.err == nil && len(b.sheets) == 0 {
		b.do(fmt.Errorf("it has no sheet"))
	}
	for _, s := range b.streams {
		if b.err == nil {
			b.do(s.Flush())
		}
	}
	if b.err != nil {
		return nil, fmt.Errorf("writing a workbook: %w", b.err)
	}
	b.err = fmt.Errorf("it is ended already")
	var out bytes.Buffer
	if err := b.file.Write(&out); err != nil {
		return nil, fmt.Errorf("writing a workbook: %w", err)
	}
	return out.Bytes(), nil
}
