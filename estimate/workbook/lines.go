package workbook

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// Columns of the sheet Lines. The multipliers follow the rate, then the unit
// price and the amount.
const (
	lineGroupColumn    = "B"
	lineCategoryColumn = "C"
	lineQuantityColumn = "E"
	lineRateColumn     = "G"
	firstMultiplier    = 8
	firstRow           = 2 // below the heads
)

// lastRow is the last row of the lines; the total stands in the next.
func (b *book) lastRow() int { return firstRow + len(b.doc.Lines) - 1 }

// unitColumn is the column of the unit prices on the sheet Lines.
func (b *book) unitColumn() string { return sheet.Letters(firstMultiplier + b.width) }

// amountColumn is the column of the amounts on the sheet Lines.
func (b *book) amountColumn() string { return sheet.Letters(firstMultiplier + b.width + 1) }

// lineRange is one column of all lines, absolute, for formulas on other sheets.
func (b *book) lineRange(column string) string {
	return fmt.Sprintf("%s!$%s$%d:$%s$%d", linesSheet, column, firstRow, column, b.lastRow())
}

// lines writes the priced lines, live, and their total.
func (b *book) lines() {
	columns := []sheet.Column{
		{Head: "line", Width: 44}, {Head: "group", Width: 16}, {Head: "category", Width: 12}, {Head: "driver", Width: 18},
		{Head: "quantity", Width: 13}, {Head: "unit", Width: 6}, {Head: "rate, " + b.currency.Code, Width: 13},
	}
	for i := range b.width {
		columns = append(columns, sheet.Column{Head: fmt.Sprintf("m%d", i+1), Width: 8})
	}
	columns = append(columns, sheet.Column{Head: "unit price", Width: 14}, sheet.Column{Head: "amount, " + b.currency.Code, Width: 15},
		sheet.Column{Head: "how the rate is made", Width: 24}, sheet.Column{Head: "multipliers, scope that won", Width: 30},
		sheet.Column{Head: "scope of rate", Width: 14}, sheet.Column{Head: "note", Width: 24})
	b.Sheet(linesSheet, columns...)
	for i, l := range b.doc.Lines {
		b.line(firstRow+i, l, b.shapes[i])
	}
	total := make([]sheet.Value, firstMultiplier+b.width+1)
	for i := range total {
		total[i] = sheet.Blank().Total()
	}
	total[0] = text("base estimate").Total()
	expr := "0"
	if len(b.doc.Lines) > 0 {
		expr = b.rounded(fmt.Sprintf("SUM(%s%d:%s%d)", b.amountColumn(), firstRow, b.amountColumn(), b.lastRow()))
	}
	total[len(total)-1] = sheet.Formula(expr, b.doc.Totals.Base.String(), b.money).Total()
	b.Row(total...)
}

func (b *book) line(row int, l document.Line, s lineShape) {
	r := b.rateOf(l)
	quantity := digits(min(6, places(l.Quantity))) + gap
	cells := []sheet.Value{wrapped(l.ID), wrapped(l.Group), text(l.Category), text(l.Driver), exactly(l.Quantity, quantity), text(l.Unit),
		sheet.Formula(r.name, shown(r.product), fitting(r.product, 2))}
	if s.quantity != "" {
		cells[4] = sheet.Formula(s.quantity, l.Quantity.String(), quantity)
	}
	factors := []string{fmt.Sprint(lineRateColumn, row)}
	for j := range b.width {
		if j >= len(l.Multipliers) {
			cells = append(cells, sheet.Blank())
			continue
		}
		m := l.Multipliers[j]
		cells = append(cells, sheet.Formula(b.cellOf(m), shown(m.Value), general))
		factors = append(factors, fmt.Sprint(sheet.Letters(firstMultiplier+j), row))
	}
	unit := round(round(strings.Join(factors, "*"), s.unitInner), s.unitPlaces)
	amount := b.rounded(round(fmt.Sprintf("%s%d*%s%d", lineQuantityColumn, row, b.unitColumn(), row), s.amountInner))
	b.Row(append(cells, sheet.Formula(unit, l.UnitPrice.String(), digits(s.unitPlaces)+gap), sheet.Formula(amount, l.Amount.String(), b.money),
		wrapped(l.RateFormula), wrapped(multiplierNames(l)), text(l.RateScope), wrapped(l.Note))...)
}

// multiplierNames says what m1, m2 … of a line are.
func multiplierNames(l document.Line) string {
	names := make([]string, len(l.Multipliers))
	for i, m := range l.Multipliers {
		names[i] = fmt.Sprintf("m%d %s (%s)", i+1, m.Name, strings.TrimSpace(m.Scope+" "+m.Subject))
	}
	return strings.Join(names, "; ")
}
