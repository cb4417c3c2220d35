package workbook

import (
	"fmt"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

func (b *book) traceGroups() {
	lines, items := map[string][]string{}, map[string][]string{}
	for _, l := range b.doc.Lines {
		lines[l.Group] = append(lines[l.Group], l.ID)
	}
	for _, it := range b.doc.Items {
		items[it.Group] = append(items[it.Group], it.ID)
	}
	for i, g := range b.allGroups() {
		id, row := "group/"+assumption.Segment(g.Group), firstRow+i
		b.step(step{id + "/amount", sheet.Formula(fmt.Sprintf("%s!B%d", groupsSheet, row), g.Amount.String(), b.money), b.currency.Code,
			"sum of the lines of the group", lines[g.Group], ""})
		for j, m := range []money.Decimal{g.Net, g.Delivered, g.Purchased} {
			var on []string
			for _, it := range items[g.Group] {
				on = append(on, "item/"+it+"/"+massNames[j])
			}
			b.step(step{id + "/" + massNames[j], sheet.Formula(fmt.Sprintf("%s!%s%d", groupsSheet, sheet.Letters(3+j), row), m.String(), mass), "t",
				"sum of the items of the group", on, ""})
		}
	}
}

// massNames end the ids of the three masses.
var massNames = [3]string{"net", "delivered", "purchased"}

// traceItems writes the masses of items that the take-off does not hold.
func (b *book) traceItems() {
	for i, it := range b.doc.Items {
		var marks []string
		for _, m := range it.Marks {
			marks = append(marks, "member/"+assumption.Segment(m)+"/net")
		}
		for j, m := range []money.Decimal{it.Net, it.Delivered, it.Purchased} {
			if _, counted := b.quantities[quantityKey(it.ID, massDrivers[j])]; counted {
				continue
			}
			b.step(step{"item/" + it.ID + "/" + massNames[j], sheet.Formula(fmt.Sprintf("%s!%s%d", itemsSheet, sheet.Letters(2+j), firstRow+i), m.String(), mass), "t",
				"of the item's members", marks, ""})
		}
	}
}

func (b *book) traceCarbon() {
	c := b.doc.Carbon
	if c == nil {
		return
	}
	cell := func(row int, v money.Decimal) sheet.Value {
		return sheet.Formula(fmt.Sprintf("%s!%s%d", carbonSheet, carbonAmount, row), v.String(), count)
	}
	const unit = "kg CO₂e"
	byModule := map[string][]string{}
	var modules []string
	for _, l := range c.Lines {
		byModule[l.Module] = append(byModule[l.Module], l.ID)
	}
	last := firstRow + len(c.Lines)
	for _, m := range c.Modules {
		modules = append(modules, "carbon/module/"+m.Module)
	}
	b.step(step{"carbon/total", cell(last, c.Total), unit, "sum of the modules", modules, c.Method})
	b.step(step{"carbon/range", number(c.Mean, count), unit, "mean of the simulation; percentiles on the sheet " + carbonSheet, []string{"carbon/total"}, c.Method})
	for i, m := range c.Modules {
		b.step(step{"carbon/module/" + m.Module, cell(last+1+i, m.Amount), unit, "sum of the lines of the module", byModule[m.Module], ""})
	}
	for i, l := range c.Lines {
		b.step(step{l.ID, cell(firstRow+i, l.Amount), unit, l.Driver + " × factor", []string{quantityID(l.Item, l.Driver), b.emission[b.emissionAt[emissionKey(l)]].name}, ""})
	}
}

// traceInputs writes the ends of the chains: the cells that are meant to be
// changed, by the names of their cells.
func (b *book) traceInputs() {
	end := func(name, id, unit, value, what string) {
		source, owner := b.sourceAndOwner(id)
		if s := b.statement(id); s != "" {
			what = s
		}
		var on []string
		if id != "" {
			on = []string{id}
		}
		b.step(step{name, sheet.Formula(name, value, general), unit, "input: " + what, on, strings.Trim(source+", "+owner, ", ")})
	}
	for _, a := range b.allowance {
		end(a.name, a.id, "", plainNumber(a.likely), "factor of quantities")
	}
	for _, c := range b.conversion {
		end(c.cell, c.Assumption, "", shown(c.Value), c.Name)
	}
	for _, r := range b.rate {
		for _, c := range r.cells {
			if c.own {
				end(c.name, c.Assumption, "", shown(c.Value), c.Name+" of "+r.id)
			}
		}
	}
	for _, m := range b.multiplier {
		end(m.cell, m.Assumption, "", shown(m.Value), "multiplier "+m.Name)
	}
	for _, e := range b.emission {
		end(e.name, e.id, "kg/"+e.unit, shown(e.value), "emission factor, "+e.module)
	}
}
