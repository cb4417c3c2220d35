package schedule

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/spelling"
)

// Indexes of what may stand beside the schedule.
const (
	besideJob = iota
	besideDefinition
	besideRisks
)

// besides are the sheets that may stand beside the schedule; JSON has them as keys in
// small letters.
var besides = [3]string{"Job", "Definition", "Risks"}

// sheetNames are the sheets of a workbook, as they are written there.
type sheetNames struct {
	schedule string
	beside   [len(besides)]string // empty where there is none
}

// pickSheets finds the schedule, and what stands beside it, among the names.
func pickSheets(names []string) (sheetNames, *sheet.Fault) {
	var at sheetNames
	var others []string
	named := false
	for _, n := range names {
		k := slices.IndexFunc(besides[:], func(b string) bool { return fold(b) == fold(n) })
		switch {
		case k >= 0:
			at.beside[k] = n
		case fold(n) == "schedule":
			at.schedule, named = n, true
		default:
			others = append(others, n)
		}
	}
	if named {
		return at, nil
	}
	if len(others) == 1 {
		at.schedule = others[0]
		return at, nil
	}
	return sheetNames{}, &sheet.Fault{
		Found: shorten(strings.Join(names, ", ")), Problem: "the workbook does not say which sheet is the schedule",
		Remedy: "name it Schedule, and the sheet of settings Job",
	}
}

// misnamed reports sheets that are nearly named as one that may stand beside the
// schedule: they would be passed over without a word.
func misnamed(names []string, at sheetNames) sheet.Faults {
	var faults sheet.Faults
	for _, n := range names {
		for k, b := range besides {
			key := fold(n)
			if n == at.schedule || at.beside[k] != "" || len(b) < 4 || len(key) > 60 || spelling.Distance(key, fold(b)) > len(b)/4 {
				continue
			}
			faults = append(faults, sheet.Fault{
				Address: sheet.Address{Sheet: n}, Found: shorten(n), Problem: "is a sheet that is not read, and its name is nearly " + b,
				Remedy: "name it " + b + ", or something else where it is not meant",
			})
		}
	}
	return faults
}

// openBeside finds where one of besides comes from: the sheet of that name, or a
// table given beside the posting, but not both.
func openBeside(book *sheet.Book, name, which string, table []byte) (annexSource, error) {
	switch {
	case name != "" && table != nil:
		return annexSource{}, fmt.Errorf("the workbook has a %s sheet and a %s table is given as well; accepted is one of them", which, strings.ToLower(which))
	case name != "":
		rows := func(ctx context.Context, fn func(int, []sheet.Cell) error) error { return book.Rows(ctx, name, fn) }
		return annexSource{rows, book.DecimalComma(), placeOn(name)}, nil
	case table != nil:
		return openTable(table, which)
	}
	return annexSource{place: placeOn(which), comma: book.DecimalComma()}, nil
}

// openTable opens a table given beside the posting; which is one of besides.
func openTable(data []byte, which string) (annexSource, error) {
	title := strings.ToLower(which) + " table"
	b, err := sheet.Open(data, title, "", sheet.DefaultLimits())
	if err != nil {
		return annexSource{}, fmt.Errorf("the %s: %w", title, err)
	}
	name := b.Sheets()[0]
	rows := func(ctx context.Context, fn func(int, []sheet.Cell) error) error { return b.Rows(ctx, name, fn) }
	return annexSource{rows, b.DecimalComma(), placeOn(which)}, nil
}

// errBoth refuses a part of a JSON posting that comes twice.
func errBoth(which string) error {
	which = strings.ToLower(which)
	return errors.New("the posting has a " + which + " and a " + which + " table is given as well; accepted is one of them")
}
