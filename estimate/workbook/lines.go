package workbook

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// Columns of the sheet Lines. The multipliers follow the rate, then the amount.
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

// amountColumn is the column of the amounts on the sheet Lines.
func (b *book) amountColumn() string { return sheet.Letters(firstMultiplier + b.width) }

// lineRange is one column of all lines, absolute, for formulas on other sheets.
func (b *book) lineRange(column string) string {
	return fmt.Sprintf("%s!$%s$%d:$%s$%d", linesSheet, column, firstRow, column, b.lastRow())
}

// lines writes the priced lines with live amounts and their total.
func (b *book) lines() {
	columns := []sheet.Column{
		{Head: "line", Width: 40}, {Head: "group", Width: 18}, {Head: "category", Width: 12}, {Head: "driver", Width: 17},
		{Head: "quantity", Width: 11}, {Head: "unit", Width: 5}, {Head: "rate, " + b.currency.Code, Width: 11},
	}
	for i := range b.width {
		columns = append(columns, sheet.Column{Head: fmt.Sprintf("m%d", i+1), Width: 7})
	}
	columns = append(columns, sheet.Column{Head: "amount, " + b.currency.Code, Width: 15},
		sheet.Column{Head: "how the rate is made", Width: 23},
		sheet.Column{Head: "multipliers and the scope that won", Width: 40})
	b.Sheet(linesSheet, columns...)
	for i, l := range b.doc.Lines {
		b.line(i, l)
	}
	total := make([]sheet.Value, firstMultiplier+b.width)
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

func (b *book) line(i int, l document.Line) {
	row := firstRow + i
	factors := []string{fmt.Sprint(lineQuantityColumn, row), fmt.Sprint(lineRateColumn, row)}
	cells := []sheet.Value{
		text(l.ID), text(l.Group), text(l.Category), text(l.Driver),
		sheet.NumberOf(l.Quantity.String(), mass), text(l.Unit), sheet.NumberOf(l.Rate.String(), sheet.General).Input(),
	}
	for j := range b.width {
		if j >= len(l.Multipliers) {
			cells = append(cells, sheet.Blank())
			continue
		}
		cells = append(cells, sheet.NumberOf(l.Multipliers[j].Value.String(), sheet.General).Input())
		factors = append(factors, fmt.Sprint(sheet.Letters(firstMultiplier+j), row))
	}
	product := fmt.Sprintf("ROUND(%s,%d)", strings.Join(factors, "*"), b.inner[i])
	cells = append(cells, sheet.Formula(b.rounded(product), l.Amount.String(), b.money), text(l.RateFormula), text(multiplierNames(l)))
	b.Row(cells...)
}

// multiplierNames says what m1, m2 … of a line are.
func multiplierNames(l document.Line) string {
	names := make([]string, len(l.Multipliers))
	for i, m := range l.Multipliers {
		names[i] = fmt.Sprintf("m%d %s (%s)", i+1, m.Name, strings.TrimSpace(m.Scope+" "+m.Subject))
	}
	return strings.Join(names, "; ")
}

// categories writes the categories with live sums over the lines.
func (b *book) categories() {
	b.Sheet(categoriesSheet, sheet.Column{Head: "category", Width: 18}, sheet.Column{Head: "base, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "mean", Width: 16}, sheet.Column{Head: "P10", Width: 16}, sheet.Column{Head: "P90", Width: 16})
	for i, c := range b.doc.Categories {
		expr := "0"
		if len(b.doc.Lines) > 0 {
			expr = b.rounded(fmt.Sprintf("SUMIF(%s,A%d,%s)", b.lineRange(lineCategoryColumn), firstRow+i, b.lineRange(b.amountColumn())))
		}
		b.Row(text(c.Category), sheet.Formula(expr, c.Amount.String(), b.money),
			number(c.Mean, b.money), number(c.P10, b.money), number(c.P90, b.money))
	}
	b.total("base estimate", len(b.doc.Categories), columnSum{b.doc.Totals.Base.String(), b.money, b.currency.MinorDigits})
	b.Row()
	b.Row(text("Percentiles of categories do not add up to those of the total."))
}

// groups writes the tonnages of the groups and, live, what they cost.
func (b *book) groups() {
	b.Sheet(groupsSheet, sheet.Column{Head: "group", Width: 34}, sheet.Column{Head: "base, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "net, t", Width: 12}, sheet.Column{Head: "delivered, t", Width: 12}, sheet.Column{Head: "purchased, t", Width: 12},
		sheet.Column{Head: "members", Width: 10}, sheet.Column{Head: "pieces", Width: 10}, sheet.Column{Head: "length, m", Width: 12},
		sheet.Column{Head: "surface, m²", Width: 12})
	var sum document.Group
	for i, g := range b.doc.Groups {
		// EXACT, because a group's name may hold what SUMIF takes for a pattern.
		expr := "0"
		if len(b.doc.Lines) > 0 {
			expr = b.rounded(fmt.Sprintf("SUMPRODUCT(--EXACT(%s,A%d),%s)", b.lineRange(lineGroupColumn), firstRow+i, b.lineRange(b.amountColumn())))
		}
		b.Row(text(g.Group), sheet.Formula(expr, g.Amount.String(), b.money),
			sheet.NumberOf(g.Net.String(), mass), sheet.NumberOf(g.Delivered.String(), mass), sheet.NumberOf(g.Purchased.String(), mass),
			whole(g.Members), whole(g.Pieces), number(g.Length, oneDigit), number(g.Surface, oneDigit))
		sum.Amount, sum.Net = sum.Amount.Add(g.Amount), sum.Net.Add(g.Net)
		sum.Delivered, sum.Purchased = sum.Delivered.Add(g.Delivered), sum.Purchased.Add(g.Purchased)
	}
	b.total("total", len(b.doc.Groups), columnSum{sum.Amount.String(), b.money, b.currency.MinorDigits},
		tonnes(sum.Net), tonnes(sum.Delivered), tonnes(sum.Purchased))
}

// columnSum is the total of one column: its cached value, format and decimals.
type columnSum struct {
	cached string
	format sheet.NumberFormat
	places int
}

func tonnes(d money.Decimal) columnSum { return columnSum{d.String(), mass, 3} }

// total writes live sums of the columns from B on over the rows above.
func (b *book) total(label string, rows int, sums ...columnSum) {
	cells := []sheet.Value{text(label).Total()}
	for i, s := range sums {
		expr := "0"
		if rows > 0 {
			column := sheet.Letters(2 + i)
			expr = fmt.Sprintf("ROUND(SUM(%s%d:%s%d),%d)", column, firstRow, column, firstRow+rows-1, s.places)
		}
		cells = append(cells, sheet.Formula(expr, s.cached, s.format).Total())
	}
	b.Row(cells...)
}

// cutPoint splits a decimal's text at the point, without trailing zeros.
func cutPoint(d money.Decimal) (whole, fraction string, found bool) {
	whole, fraction, found = strings.Cut(d.String(), ".")
	return whole, strings.TrimRight(fraction, "0"), found
}
