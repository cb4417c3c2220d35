package sheet

import (
	"regexp"
	"strconv"
	"strings"
)

// The grid of the XLSX format (ISO/IEC 29500-1, 18.3.1.73 and practice of all
// spreadsheet programs): 16,384 columns, 1,048,576 rows.
const (
	maxColumn = 16_384
	maxRow    = 1_048_576
)

// Address is the place of a cell. Column 0 means a whole row, row 0 a whole
// sheet.
type Address struct {
	Sheet  string // empty in a CSV file
	Row    int    // from 1
	Column int    // from 1
}

// String writes Schedule!C7, 'Member list'!C7, or C7 in a CSV file; a whole row
// is Schedule!7.
func (a Address) String() string {
	cell := Letters(a.Column)
	if a.Row > 0 {
		cell += strconv.Itoa(a.Row)
	}
	switch {
	case a.Sheet == "":
		return cell
	case cell == "":
		return quoteSheet(a.Sheet)
	}
	return quoteSheet(a.Sheet) + "!" + cell
}

// quoteSheet puts a sheet's name between quotes where a formula needs them.
func quoteSheet(name string) string {
	if !plainName.MatchString(name) || referenceLike.MatchString(name) {
		return "'" + strings.ReplaceAll(name, "'", "''") + "'"
	}
	return name
}

// A name that could be a reference, in A1 or R1C1 style, needs quotes as well.
var (
	plainName     = regexp.MustCompile(`^[A-Za-z_][A-Za-z0-9_]*$`)
	referenceLike = regexp.MustCompile(`^(?i:[a-z]{1,3}[0-9]+|r[0-9]*(c[0-9]*)?|c[0-9]*)$`)
)

// Letters is a column's name: 1 is A, 27 is AA. It is empty below 1.
func Letters(column int) string {
	var buf [16]byte
	i := len(buf)
	for column > 0 {
		column--
		i--
		buf[i] = byte('A' + column%26)
		column /= 26
	}
	return string(buf[i:])
}

// parseReference reads "C7" and "$C$7"; ok is false outside the grid.
func parseReference[T string | []byte](ref T) (column, row int, ok bool) {
	i := 0
	for ; i < len(ref); i++ {
		switch c := ref[i]; {
		case c >= 'A' && c <= 'Z':
			column = column*26 + int(c-'A') + 1
		case c >= 'a' && c <= 'z':
			column = column*26 + int(c-'a') + 1
		case c == '$':
		default:
			row, ok = parseRow(ref[i:])
			return column, row, ok && column >= 1 && column <= maxColumn
		}
		if column > maxColumn {
			return 0, 0, false
		}
	}
	return 0, 0, false
}

// parseRow reads a row number within the grid.
func parseRow[T string | []byte](text T) (int, bool) {
	if len(text) == 0 || len(text) > 7 {
		return 0, false
	}
	row := 0
	for i := 0; i < len(text); i++ {
		if text[i] < '0' || text[i] > '9' {
			return 0, false
		}
		row = row*10 + int(text[i]-'0')
	}
	return row, row >= 1 && row <= maxRow
}
