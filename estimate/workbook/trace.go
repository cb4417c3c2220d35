package workbook

import (
	"fmt"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// step is one figure of the trace: how it is made, of what, and on whose word.
// What it depends on are ids of other steps, of register entries, or marks.
type step struct {
	figure string
	value  sheet.Value
	unit   string
	how    string
	on     []string
	source string
}

// mostListed is how many ids one cell of the trace lists.
const mostListed = 12

// trace writes for each figure the next link of its chain: reading from a figure
// to what it depends on, again and again, ends at an input with its source, or at
// the clause of a check.
func (b *book) trace() {
	b.Sheet(traceSheet, sheet.Column{Head: "figure", Width: 38}, sheet.Column{Head: "value", Width: 15}, sheet.Column{Head: "unit", Width: 8},
		sheet.Column{Head: "how it is made", Width: 42}, sheet.Column{Head: "depends on", Width: 54}, sheet.Column{Head: "source, owner", Width: 30})
	b.traceTotals()
	b.traceGroups()
	for i := range b.doc.Lines {
		b.step(b.traceLine(i))
	}
	b.traceItems()
	for i := range b.counted {
		b.step(b.traceQuantity(i))
	}
	b.traceCarbon()
	for i, m := range b.doc.Members {
		b.traceMember(firstRow+1+i, m)
	}
	b.traceInputs()
}

func (b *book) step(s step) {
	b.Row(wrapped(s.figure), s.value, text(s.unit), wrapped(s.how), wrapped(listed(s.on)), wrapped(s.source))
}

// listed joins ids, the first of them where they are many.
func listed(ids []string) string {
	if len(ids) > mostListed {
		return strings.Join(ids[:mostListed], "; ") + fmt.Sprintf("; and %d more", len(ids)-mostListed)
	}
	return strings.Join(ids, "; ")
}

func (b *book) traceTotals() {
	t, code := b.doc.Totals, b.currency.Code
	live := func(name string, cached string) sheet.Value { return sheet.Formula(name, cached, b.money) }
	b.step(step{"contingency", live(NameContingency, t.Contingency.String()), code, "cost at the chosen confidence − base as priced",
		[]string{"range", "base", "setting/confidence"}, b.doc.Range.Method})
	var spreads []string
	for _, e := range b.doc.Assumptions {
		for _, f := range e.Feeds {
			if f == "range" {
				spreads = append(spreads, e.ID)
				break
			}
		}
	}
	b.step(step{"range", number(b.doc.Range.Mean, b.money), code, "mean of the simulation; percentiles on the sheet " + rangeSheet, spreads, b.doc.Range.Method})
	var categories []string
	for _, c := range b.doc.Categories {
		categories = append(categories, "category/"+c.Category)
	}
	b.step(step{"base", live(NameBase, t.Base.String()), code, "sum of the categories", categories, ""})
	if !t.Tax.IsZero() {
		b.step(step{"tax", b.amount(t.Tax), code, "on the cost at the chosen confidence", []string{"contingency", "base"}, ""})
	}
	byCategory := map[string][]string{}
	for _, l := range b.doc.Lines {
		byCategory[l.Category] = append(byCategory[l.Category], l.ID)
	}
	for i, c := range b.doc.Categories {
		b.step(step{"category/" + c.Category, sheet.Formula(fmt.Sprintf("%s!B%d", categoriesSheet, firstRow+i), c.Amount.String(), b.money), code,
			"sum of the lines of the category", byCategory[c.Category], ""})
	}
}

// quantityID names a quantity of an item as the figures are named; but net tonnes,
// which have the sizing bias, are told from the net mass of the drawing.
func quantityID(item, driver string) string {
	if driver == "net tonnes" {
		return "item/" + item + "/" + driver
	}
	return document.QuantityID(item, driver)
}

func (b *book) traceLine(i int) step {
	l := b.doc.Lines[i]
	s := step{figure: l.ID, unit: b.currency.Code, value: sheet.Formula(fmt.Sprintf("%s!%s%d", linesSheet, b.amountColumn(), firstRow+i), l.Amount.String(), b.money)}
	what := l.Driver
	switch {
	case len(l.Of) > 0:
		what = "sum of other lines"
		s.on = append(s.on, l.Of...)
	case b.shapes[i].quantity != "":
		s.on = append(s.on, quantityID(l.Item, l.Driver))
	default:
		what += " (" + l.Quantity.String() + " " + l.Unit + " as priced)"
	}
	s.how = strings.TrimSuffix(what+" × rate ("+l.RateFormula+") × multipliers; "+l.Note, "; ")
	r := b.rateOf(l)
	if len(s.on) > mostListed/2 {
		s.on = append(s.on[:mostListed/2:mostListed/2], fmt.Sprintf("and %d more lines", len(l.Of)-mostListed/2))
	}
	for _, c := range r.cells {
		s.on = append(s.on, c.name)
	}
	for _, m := range l.Multipliers {
		s.on = append(s.on, b.cellOf(m))
	}
	return s
}

func (b *book) traceQuantity(i int) step {
	c := b.counted[i]
	on := []string{}
	for _, f := range c.of.Factors {
		on = append(on, b.allowance[b.factorAt[factorKey(f)]].name)
	}
	on = append(append(on, c.of.Assumptions...), c.of.Depends...)
	for _, m := range c.item.Marks {
		on = append(on, "member/"+assumption.Segment(m)+"/net")
	}
	return step{quantityID(c.item.ID, c.of.Driver), sheet.Formula(fmt.Sprintf("'%s'!%s%d", takeoffSheet, b.quantityColumn(), firstRow+i), c.of.Value.String(), digits(places(c.of.Value))+gap),
		c.of.Unit, c.of.Formula, on, ""}
}

// mostChecked is how many members a document may have for all of their checks to
// be traced; of more, the governing ones are.
const mostChecked = 1000

// traceMember writes a member's mass and its checks.
func (b *book) traceMember(row int, m document.Member) {
	id := "member/" + assumption.Segment(m.Mark)
	net := step{figure: id + "/net", value: sheet.Formula(fmt.Sprintf("%s!J%d", scheduleSheet, row), plainNumber(m.Net), oneDigit), unit: "kg",
		how: "number × length × nominal kg/m", source: "row of the schedule " + b.doc.Job.Source}
	if m.Section == "" {
		net.how = "as the row states it"
	} else {
		net.how += ", " + strings.TrimSpace(m.Section+" "+m.Grade)
	}
	if c, ok := governing(m); ok {
		net.on = append(net.on, id+"/check/"+assumption.Segment(c.ID))
	}
	for _, x := range m.Inputs {
		net.on = append(net.on, measures([]document.Measure{x}))
	}
	b.step(net)
	for _, c := range m.Checks {
		if c.ID == m.Governing || len(b.doc.Members) <= mostChecked {
			b.traceCheck(id, c)
		}
	}
}

func (b *book) traceCheck(id string, c document.Check) {
	var on []string
	for _, x := range c.Inputs {
		on = append(on, measures([]document.Measure{x}))
	}
	b.step(step{id + "/check/" + assumption.Segment(c.ID), number(c.Utilisation, factor), "", strings.TrimPrefix(c.Formula+"; "+plainNumber(c.Demand)+" / "+
		plainNumber(c.Resistance)+" "+c.Unit, "; "), on, strings.TrimSpace(b.doc.Job.DesignBasis + " " + c.Clause)})
}
