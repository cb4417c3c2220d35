package workbook

import (
	"bytes"
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// CSV returns the priced lines as CSV: one row a line with its rate (the product
// of its parts, to 15 significant digits), its multipliers in columns m1 to mk,
// unit price and amount, then one row a category and one for the base, whose ids
// are those of the document's figures. Quantities, unit prices and amounts are
// exact decimals. It refuses what XLSX refuses.
func CSV(d document.Document) ([]byte, error) {
	b, err := newBook(d)
	if err != nil {
		return nil, fmt.Errorf("writing the lines: %w", err)
	}
	head := []sheet.Value{}
	for _, h := range []string{"id", "group", "category", "driver", "quantity", "unit", "rate"} {
		head = append(head, sheet.TextOf(h))
	}
	for i := range b.width {
		head = append(head, sheet.TextOf(fmt.Sprintf("m%d", i+1)))
	}
	head = append(head, sheet.TextOf("unit price"), sheet.TextOf("amount"), sheet.TextOf("currency"), sheet.TextOf("multipliers"))
	rows := [][]sheet.Value{head}
	for _, l := range d.Lines {
		rows = append(rows, b.csvLine(l))
	}
	for _, c := range d.Categories {
		rows = append(rows, b.csvTotal("category/"+c.Category, c.Category, c.Amount.String()))
	}
	rows = append(rows, b.csvTotal("base", "", d.Totals.Base.String()))
	var out bytes.Buffer
	if err := sheet.WriteCSV(&out, rows); err != nil {
		return nil, fmt.Errorf("writing the lines: %w", err)
	}
	return out.Bytes(), nil
}

func (b *book) csvLine(l document.Line) []sheet.Value {
	row := []sheet.Value{
		sheet.TextOf(l.ID), sheet.TextOf(l.Group), sheet.TextOf(l.Category), sheet.TextOf(l.Driver),
		sheet.NumberOf(l.Quantity.String(), sheet.General), sheet.TextOf(l.Unit), sheet.NumberOf(shown(b.rateOf(l).product), sheet.General),
	}
	for i := range b.width {
		if i < len(l.Multipliers) {
			row = append(row, sheet.NumberOf(l.Multipliers[i].Value.String(), sheet.General))
		} else {
			row = append(row, sheet.Blank())
		}
	}
	return append(row, sheet.NumberOf(l.UnitPrice.String(), sheet.General), sheet.NumberOf(l.Amount.String(), sheet.General), sheet.TextOf(b.currency.Code), sheet.TextOf(multiplierNames(l)))
}

func (b *book) csvTotal(id, category, amount string) []sheet.Value {
	row := []sheet.Value{sheet.TextOf(id), sheet.Blank(), sheet.TextOf(category)}
	for range 5 + b.width {
		row = append(row, sheet.Blank())
	}
	return append(row, sheet.NumberOf(amount, sheet.General), sheet.TextOf(b.currency.Code), sheet.Blank())
}
