package sheet

import "strings"

// Kind is what a cell holds.
type Kind uint8

// The kinds, with what Cell.Text is for each.
const (
	Empty               Kind = iota // never handed out
	Text                            // the text; in a CSV file every field is Text
	Number                          // shortest decimal text to 15 digits, with % where the cell shows it
	Date                            // 2026-05-01, 2026-05-01T10:30:00 or 10:30:00
	Boolean                         // TRUE or FALSE
	ErrorValue                      // #N/A, #REF! and the like
	FormulaWithoutValue             // the formula with its "=", never calculated by the program that wrote it
	Merged                          // empty: a cell covered by a merged range
)

var kindNames = [...]string{"empty cell", "text", "number", "date", "boolean", "error value", "formula without a value", "merged cell"}

// String is the kind in plain words, as fault texts use it.
func (k Kind) String() string {
	if int(k) >= len(kindNames) {
		return "unknown kind"
	}
	return kindNames[k]
}

// Cell is one cell with content, or one that a merged range covers.
type Cell struct {
	Column int    // from 1
	Kind   Kind   // what it holds
	Text   string // as listed at Kind
	Range  string // the merged range, "C7:D9", of its first and of its covered cells; else empty
}

// errorValues are the error texts of ISO/IEC 29500-1, 18.17.3, and the newer
// ones of spreadsheet programs (from memory).
const errorValues = "|#NULL!|#DIV/0!|#VALUE!|#REF!|#NAME?|#NUM!|#N/A|#GETTING_DATA|#SPILL!|#CALC!|"

func isErrorValue(text string) bool {
	return strings.HasPrefix(text, "#") && strings.Contains(errorValues, "|"+text+"|")
}

// textCell makes the cell of a text; a text of spaces alone is Empty.
func textCell(column int, text string) Cell {
	text = restore(text)
	switch {
	case strings.TrimSpace(text) == "":
		return Cell{Column: column}
	case isErrorValue(text):
		return Cell{Column: column, Kind: ErrorValue, Text: text}
	}
	return Cell{Column: column, Kind: Text, Text: text}
}
