package sheet

import (
	"cmp"
	"encoding/json"
	"fmt"
	"slices"
	"strings"
)

// Fault is one thing wrong in one cell, with its remedy.
type Fault struct {
	Address Address // where
	Header  string  // the column's head, or the name of a setting; may be empty
	Found   string  // what the cell holds
	Problem string  // what is wrong with it
	Remedy  string  // what would be accepted
}

// faultJSON is the flat form of a Fault: the column by its letters.
type faultJSON struct {
	Sheet   string `json:"sheet,omitempty"`
	Row     int    `json:"row,omitempty"`
	Column  string `json:"column,omitempty"`
	Header  string `json:"header,omitempty"`
	Found   string `json:"found"`
	Problem string `json:"problem"`
	Remedy  string `json:"remedy"`
}

// Error writes the fault on one line: Schedule!C7 (Length): "1,5": problem; remedy.
func (f Fault) Error() string {
	var parts []string
	if where := f.Address.String(); where != "" {
		parts = append(parts, where)
	}
	if f.Header != "" {
		parts = append(parts, "("+f.Header+")")
	}
	text := strings.Join(parts, " ")
	if text != "" {
		text += ": "
	}
	if f.Found != "" {
		text += fmt.Sprintf("%q ", f.Found)
	}
	text += f.Problem
	if f.Remedy != "" {
		text += "; " + f.Remedy
	}
	return text
}

// MarshalJSON writes sheet, row, column (letters), header, found, problem and
// remedy side by side.
func (f Fault) MarshalJSON() ([]byte, error) {
	a := f.Address
	return json.Marshal(faultJSON{a.Sheet, a.Row, Letters(a.Column), f.Header, f.Found, f.Problem, f.Remedy})
}

// UnmarshalJSON reads what MarshalJSON writes.
func (f *Fault) UnmarshalJSON(data []byte) error {
	var j faultJSON
	if err := json.Unmarshal(data, &j); err != nil {
		return fmt.Errorf("reading a fault: %w", err)
	}
	column := 0
	if j.Column != "" {
		var ok bool
		if column, _, ok = parseReference(j.Column + "1"); !ok {
			return fmt.Errorf("reading a fault: %q is no column", j.Column)
		}
	}
	*f = Fault{Address{j.Sheet, j.Row, column}, j.Header, j.Found, j.Problem, j.Remedy}
	return nil
}

// Faults is the list of all faults of a file. It is never shortened.
type Faults []Fault

// shownFaults is how many faults the error text spells out; the list has all.
const shownFaults = 5

// Error counts the faults and spells out the first few.
func (f Faults) Error() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%d faults", len(f))
	if len(f) == 1 {
		b.Reset()
		b.WriteString("1 fault")
	}
	for i, fault := range f {
		if i == shownFaults {
			fmt.Fprintf(&b, "\nand %d more", len(f)-i)
			break
		}
		b.WriteString("\n" + fault.Error())
	}
	return b.String()
}

// Sort orders by sheet, row, column; faults of one cell stay in their order.
func (f Faults) Sort() {
	slices.SortStableFunc(f, func(a, b Fault) int {
		return cmp.Or(cmp.Compare(a.Address.Sheet, b.Address.Sheet), cmp.Compare(a.Address.Row, b.Address.Row),
			cmp.Compare(a.Address.Column, b.Address.Column))
	})
}

// Err sorts the list and returns it as an error, nil where it is empty.
func (f Faults) Err() error {
	if len(f) == 0 {
		return nil
	}
	f.Sort()
	return f
}
