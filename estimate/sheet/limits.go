package sheet

import "fmt"

// Limits bound what Open and Rows accept. One more than a limit is refused with
// an *OpenError of kind SizeLimit. A zero limit refuses everything.
type Limits struct {
	Bytes         int64 // size of the posted file
	UnzippedBytes int64 // size of all parts of a workbook together
	Sheets        int   // worksheets in a workbook
	Rows          int   // rows with content, per sheet
	Columns       int   // rightmost column with content
	Cells         int   // cells with content, per sheet
	SharedStrings int   // entries of a workbook's table of texts
	TextLength    int   // characters in one cell
}

// DefaultLimits are those of the service: a file of 20 MB, 20,000 rows. The
// text length is the spreadsheet programs' own limit.
func DefaultLimits() Limits {
	return Limits{
		Bytes:         20 << 20,
		UnzippedBytes: 100 << 20,
		Sheets:        50,
		Rows:          20_000,
		Columns:       200,
		Cells:         1_000_000,
		SharedStrings: 200_000,
		TextLength:    32_767,
	}
}

// tooMany is the refusal of something counted against a limit.
func tooMany(what string, limit int) *OpenError {
	return &OpenError{Kind: SizeLimit, Problem: fmt.Sprintf("has more than %d %s", limit, what), Remedy: "split it, or leave out what is not part of the schedule"}
}
