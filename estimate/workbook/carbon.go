package workbook

import (
	"fmt"

	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// Columns of the sheet Carbon.
const (
	carbonModule   = "C"
	carbonQuantity = "E"
	carbonFactor   = "G"
	carbonAmount   = "H"
)

// checkCarbon proves that the formulas will give the document's carbon.
func (b *book) checkCarbon() error {
	c := b.doc.Carbon
	if c == nil {
		return nil
	}
	total, modules := money.Zero, map[string]money.Decimal{}
	for _, l := range c.Lines {
		inner, ok := innerPlaces([]money.Decimal{l.Quantity, l.Factor}, 0, l.Amount)
		if !ok {
			return fmt.Errorf("%s: quantity × factor is %s kg, the document says %s", l.ID, l.Quantity.Mul(l.Factor), l.Amount)
		}
		b.carbonAt = append(b.carbonAt, inner)
		total = total.Add(l.Amount)
		modules[l.Module] = modules[l.Module].Add(l.Amount)
	}
	if !total.Equal(c.Total) {
		return fmt.Errorf("the carbon lines add up to %s kg, the document says %s", total, c.Total)
	}
	for _, m := range c.Modules {
		if !modules[m.Module].Equal(m.Amount) {
			return fmt.Errorf("the carbon lines of module %s add up to %s kg, the document says %s", m.Module, modules[m.Module], m.Amount)
		}
	}
	return nil
}

// carbon writes embodied carbon on the quantities of the take-off, live.
func (b *book) carbon() {
	c := b.doc.Carbon
	if c == nil {
		return
	}
	b.Sheet(carbonSheet, sheet.Column{Head: "line", Width: 42}, sheet.Column{Head: "group", Width: 18}, sheet.Column{Head: "module", Width: 10},
		sheet.Column{Head: "driver", Width: 18}, sheet.Column{Head: "quantity", Width: 13}, sheet.Column{Head: "unit", Width: 7},
		sheet.Column{Head: "kg CO₂e per unit", Width: 17}, sheet.Column{Head: "kg CO₂e", Width: 13}, sheet.Column{Head: "factor", Width: 34})
	for i, l := range c.Lines {
		row := firstRow + i
		format := digits(min(6, places(l.Quantity))) + gap
		quantity := exactly(l.Quantity, format)
		if expr, ok := b.quantityCell(l.Item, l.Driver, l.Quantity); ok {
			quantity = sheet.Formula(expr, l.Quantity.String(), format)
		}
		expr := round(round(fmt.Sprintf("%s%d*%s%d", carbonQuantity, row, carbonFactor, row), b.carbonAt[i]), 0)
		b.Row(wrapped(l.ID), wrapped(l.Group), text(l.Module), text(l.Driver), quantity, text(l.Unit),
			sheet.Formula(b.emission[b.emissionAt[emissionKey(l)]].name, shown(l.Factor), general),
			sheet.Formula(expr, l.Amount.String(), count), wrapped(l.FactorID))
	}
	b.carbonTotals()
}

func (b *book) carbonTotals() {
	c := b.doc.Carbon
	last := firstRow + len(c.Lines) - 1
	column := func(letter string) string { return fmt.Sprintf("%s$%d:%s$%d", letter, firstRow, letter, last) }
	rule := sheet.Blank().Total()
	sum := func(label, expr string, cached money.Decimal) {
		if len(c.Lines) == 0 {
			expr = "0"
		}
		b.Row(text(label).Total(), rule, rule, rule, rule, rule, rule, sheet.Formula(expr, cached.String(), count).Total())
	}
	sum("total", "SUM("+column(carbonAmount)+")", c.Total)
	for i, m := range c.Modules {
		sum(m.Module, fmt.Sprintf("SUMIF(%s,A%d,%s)", column(carbonModule), last+2+i, column(carbonAmount)), m.Amount)
	}
	b.heading("from the simulation; it does not follow a change", "", "", "", "", "", "standard error", "kg CO₂e")
	blank := make([]sheet.Value, 5)
	line := func(label string, se, v sheet.Value) {
		b.Row(append(append([]sheet.Value{text(label)}, blank...), se, v)...)
	}
	line("mean", sheet.Blank(), number(c.Mean, count))
	for _, p := range c.Percentiles {
		line(percentileLabel(p.P), number(p.SE, count), number(p.Value, count))
	}
	line("per delivered tonne", sheet.Blank(), number(c.PerTonne, count))
	b.hint(c.Method)
	for _, s := range c.Exclusions {
		b.say("excluded: " + s)
	}
}
