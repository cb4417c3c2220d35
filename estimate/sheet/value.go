package sheet

import (
	"fmt"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"
)

// NumberFormat is a spreadsheet's number format code (ISO/IEC 29500-1, 18.8.31).
type NumberFormat string

// The formats in use. Any other code works as well.
const (
	General  NumberFormat = ""
	Whole    NumberFormat = "#,##0"
	OneDigit NumberFormat = "#,##0.0"
	Money    NumberFormat = "#,##0.00"
	Mass     NumberFormat = "#,##0.000" // t, to the kilogram
	Factor   NumberFormat = "0.000"
	Percent  NumberFormat = "0.0%"
	Day      NumberFormat = "yyyy-mm-dd"
)

type valueKind uint8

const (
	blankValue valueKind = iota
	textValue
	numberValue
	formulaValue
	dateValue
)

// look is how a cell is drawn.
type look struct {
	format                   NumberFormat
	head, total, note, input bool
	wrap                     bool
}

// Value is one cell to write. The zero Value is blank.
type Value struct {
	kind  valueKind
	text  string // text, decimal text of a number, or cached result
	expr  string // formula without "="
	day   time.Time
	drawn look
}

// Blank is an empty cell.
func Blank() Value { return Value{} }

// TextOf is a text; it is neutralised when it is written.
func TextOf(text string) Value { return Value{kind: textValue, text: text} }

// NumberOf is a number given as decimal text, which stays exact: more than the
// 15 significant digits that a workbook holds are an error of Bytes.
func NumberOf(decimal string, format NumberFormat) Value {
	return Value{kind: numberValue, text: decimal, drawn: look{format: format}}
}

// Formula is a formula without its "=", with the result that a reader finds who
// does not calculate: a decimal text is written as number, else as text.
func Formula(expr, cached string, format NumberFormat) Value {
	return Value{kind: formulaValue, expr: expr, text: cached, drawn: look{format: format}}
}

// DateOf is a calendar day; the time of day is dropped.
func DateOf(day time.Time) Value {
	return Value{kind: dateValue, day: day, drawn: look{format: Day}}
}

// Head draws the cell as the head of a column.
func (v Value) Head() Value { v.drawn.head = true; return v }

// Total draws the cell as a total: bold under a rule.
func (v Value) Total() Value { v.drawn.total = true; return v }

// Note draws the cell as a note: grey, wrapped.
func (v Value) Note() Value { v.drawn.note = true; return v }

// Wrap breaks a long text into lines within its column.
func (v Value) Wrap() Value { v.drawn.wrap = true; return v }

// Input draws the cell as one that is meant to be changed.
func (v Value) Input() Value { v.drawn.input = true; return v }

// Bounds of the format (ISO/IEC 29500-1, 18.18.95 and 18.17, from memory).
const (
	longestCell    = 32_767
	longestFormula = 8_192
)

// check refuses what a workbook or a CSV file cannot hold faithfully.
func (v Value) check() error {
	switch v.kind {
	case textValue, formulaValue:
		if utf8.RuneCountInString(v.text) > longestCell {
			return fmt.Errorf("a text of more than %d characters: %.20q…", longestCell, v.text)
		}
		if v.kind == formulaValue && (v.expr == "" || v.expr[0] == '=' || len(v.expr) > longestFormula) {
			return fmt.Errorf("the formula %.40q must have 1 to %d characters and no = before it", v.expr, longestFormula)
		}
	case numberValue:
		_, err := exactFloat(v.text)
		return err
	case dateValue:
		if y := v.day.Year(); !(y >= 1900 && y <= 9999) {
			return fmt.Errorf("the date %v is outside the years 1900 to 9999", v.day)
		}
	}
	return nil
}

// exactFloat reads decimal text that a workbook can hold exactly: at most
// storedDigits significant digits, so that the shortest text of the float is
// the decimal again.
func exactFloat(decimal string) (float64, error) {
	mantissa, _, _ := strings.Cut(strings.ToLower(decimal), "e")
	digits := strings.TrimLeft(strings.Replace(strings.TrimLeft(mantissa, "+-"), ".", "", 1), "0")
	if strings.Trim(digits, "0123456789") != "" {
		return 0, fmt.Errorf("%.40q is no decimal number", decimal)
	}
	if n := len(strings.TrimRight(digits, "0")); n > storedDigits {
		return 0, fmt.Errorf("%.40q has %d significant digits, more than the %d that a workbook holds", decimal, n, storedDigits)
	}
	x, err := strconv.ParseFloat(decimal, 64)
	if err != nil {
		return 0, fmt.Errorf("%.40q is no decimal number: %w", decimal, err)
	}
	return x, nil
}
