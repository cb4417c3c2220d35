package workbook

import (
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// fromSimulation stands beside every figure that a change in the workbook does
// not move.
const fromSimulation = "From the simulation of the base as priced by the service; it does not follow a change in this workbook."

// categories writes the categories with live sums over the lines.
func (b *book) categories() {
	b.Sheet(categoriesSheet, sheet.Column{Head: "category", Width: 18}, sheet.Column{Head: "base, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "as priced", Width: 16}, sheet.Column{Head: "mean", Width: 16}, sheet.Column{Head: "P10", Width: 16},
		sheet.Column{Head: "P90", Width: 16}, sheet.Column{Head: "share of variance", Width: 18}, sheet.Column{Head: "contingency", Width: 16})
	for i, c := range b.doc.Categories {
		expr := "0"
		if len(b.doc.Lines) > 0 {
			expr = b.rounded(fmt.Sprintf("SUMIF(%s,A%d,%s)", b.lineRange(lineCategoryColumn), firstRow+i, b.lineRange(b.amountColumn())))
		}
		b.Row(text(c.Category), sheet.Formula(expr, c.Amount.String(), b.money), b.amount(c.Amount),
			number(c.Mean, b.money), number(c.P10, b.money), number(c.P90, b.money), number(c.Share, percent), b.amount(c.Contingency))
	}
	base := columnSum{b.doc.Totals.Base.String(), b.money, b.currency.MinorDigits}
	b.total("base estimate", len(b.doc.Categories), base, base)
	b.hint("Percentiles of categories do not add up to those of the total.")
	b.say("From C on: " + fromSimulation)
}

// groups writes, live, what the groups weigh and cost.
func (b *book) groups() {
	b.Sheet(groupsSheet, sheet.Column{Head: "group", Width: 34}, sheet.Column{Head: "base, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "net, t", Width: 12}, sheet.Column{Head: "delivered, t", Width: 12}, sheet.Column{Head: "purchased, t", Width: 12},
		sheet.Column{Head: "members", Width: 10}, sheet.Column{Head: "pieces", Width: 10}, sheet.Column{Head: "length, m", Width: 12},
		sheet.Column{Head: "surface, m²", Width: 12})
	sum := document.Group{}
	groups := b.allGroups()
	weighed := b.massesOfGroups()
	for i, g := range groups {
		// EXACT, because a group's name may hold what SUMIF takes for a pattern.
		expr := "0"
		if len(b.doc.Lines) > 0 {
			expr = b.rounded(fmt.Sprintf("SUMPRODUCT(--EXACT(%s,A%d),%s)", b.lineRange(lineGroupColumn), firstRow+i, b.lineRange(b.amountColumn())))
		}
		cells := []sheet.Value{text(g.Group), sheet.Formula(expr, g.Amount.String(), b.money)}
		for j, m := range []money.Decimal{g.Net, g.Delivered, g.Purchased} {
			cells = append(cells, b.groupMass(firstRow+i, j, m, weighed[g.Group][j]))
		}
		b.Row(append(cells, whole(g.Members), whole(g.Pieces), number(g.Length, oneDigit), number(g.Surface, oneDigit))...)
		sum.Amount, sum.Net = sum.Amount.Add(g.Amount), sum.Net.Add(g.Net)
		sum.Delivered, sum.Purchased = sum.Delivered.Add(g.Delivered), sum.Purchased.Add(g.Purchased)
	}
	b.total("total", len(groups), columnSum{sum.Amount.String(), b.money, b.currency.MinorDigits},
		tonnes(sum.Net), tonnes(sum.Delivered), tonnes(sum.Purchased))
}

// allGroups are the document's groups, and what lines name beside them, such as
// the whole structure.
func (b *book) allGroups() []document.Group {
	groups := append([]document.Group{}, b.doc.Groups...)
	known := map[string]bool{}
	for _, g := range groups {
		known[g.Group] = true
	}
	further := map[string]money.Decimal{}
	for _, l := range b.doc.Lines {
		if !known[l.Group] {
			further[l.Group] = further[l.Group].Add(l.Amount)
		}
	}
	for _, name := range sortedKeys(further) {
		groups = append(groups, document.Group{Group: name, Amount: further[name]})
	}
	return groups
}

// massesOfGroups are the sums of the items by group.
func (b *book) massesOfGroups() map[string][3]money.Decimal {
	out := map[string][3]money.Decimal{}
	for _, it := range b.doc.Items {
		m := out[it.Group]
		for i, x := range []money.Decimal{it.Net, it.Delivered, it.Purchased} {
			m[i] = m[i].Add(x)
		}
		out[it.Group] = m
	}
	return out
}

// groupMass is a group's mass: the sum of its items where that is the document's.
func (b *book) groupMass(row, column int, m, items money.Decimal) sheet.Value {
	if !m.Equal(items) || len(b.doc.Items) == 0 {
		return exactly(m, mass)
	}
	last := firstRow + len(b.doc.Items) - 1
	c := sheet.Letters(2 + column)
	expr := fmt.Sprintf("SUMPRODUCT(--EXACT(%s!$H$%d:$H$%d,$A%d),%s!$%s$%d:$%s$%d)", itemsSheet, firstRow, last, row, itemsSheet, c, firstRow, c, last)
	return sheet.Formula(round(expr, 3), m.String(), mass)
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
			expr = round(fmt.Sprintf("SUM(%s%d:%s%d)", column, firstRow, column, firstRow+rows-1), s.places)
		}
		cells = append(cells, sheet.Formula(expr, s.cached, s.format).Total())
	}
	b.Row(cells...)
}
