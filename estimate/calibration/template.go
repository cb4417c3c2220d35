package calibration

import (
	"fmt"
	"strconv"

	"spanwright/estimate/sheet"
)

// Template returns a workbook (XLSX) to be filled in: a sheet Outturns with every
// column and one example row, to be written over, and a sheet Help from Columns.
// Read reads it without a fault.
func Template() ([]byte, error) {
	b := sheet.NewBuilder()
	heads, row := make([]sheet.Column, len(definitions)), make([]sheet.Value, len(definitions))
	for i, d := range definitions {
		heads[i] = sheet.Column{Head: d.Header, Width: float64(len(d.Header) + 2)}
		row[i] = sheet.TextOf(d.Example)
		if _, err := strconv.ParseFloat(d.Example, 64); err == nil {
			row[i] = sheet.NumberOf(d.Example, sheet.General)
		}
	}
	b.Sheet(outturnsSheet, heads...)
	b.Row(row...)
	b.Sheet("Help", sheet.Column{Head: "Head", Width: 30}, sheet.Column{Head: "Needed", Width: 10},
		sheet.Column{Head: "Meaning", Width: 70}, sheet.Column{Head: "Accepted", Width: 40})
	for _, d := range definitions {
		need := ""
		if d.Obligatory {
			need = "always"
		}
		b.Row(sheet.TextOf(d.Header), sheet.TextOf(need), sheet.TextOf(d.Meaning), sheet.TextOf(d.Accepts))
	}
	data, err := b.Bytes()
	if err != nil {
		return nil, fmt.Errorf("template of outturns: %w", err)
	}
	return data, nil
}
