package trace

import (
	"fmt"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// mostTerms is how many terms the arithmetic of a sum writes out.
const mostTerms = 12

const halfAway = "half away from zero"

// add is a draft of a sum of children that have exact values.
func (t *Tracer) add(n Node, shown money.Decimal, ids []string, values []value) draft {
	n.Kind, n.Value = Sum, shown.String()
	n.Arithmetic = sumText(values, "") + " = " + with(n.Value, n.Unit)
	d := draft{Node: n}
	for _, id := range ids {
		d.kids = append(d.kids, t.kid(id))
	}
	if len(ids) == 0 {
		d.kids = append(d.kids, constant("Nothing of the estimate belongs here.", "0", n.Unit, "definition: a sum of nothing is zero", "document", ""))
	}
	d.recheck(sum(values...), exact(shown))
	return d
}

// sumText writes terms, or how many they are.
func sumText(values []value, unit string) string {
	if len(values) > mostTerms {
		return fmt.Sprintf("sum of %d figures", len(values))
	}
	if len(values) == 0 {
		return "0"
	}
	words := make([]string, len(values))
	for i, v := range values {
		words[i] = with(v.text, unit)
	}
	return strings.Join(words, " + ")
}

// base is the sum of the categories.
func (t *Tracer) base() draft {
	var ids []string
	var values []value
	for _, c := range t.doc.Categories {
		ids, values = append(ids, "category/"+c.Category), append(values, exact(c.Amount))
	}
	d := t.add(Node{Figure: "base", What: "Base estimate: the categories at likely values, without padding and without contingency.", Unit: t.doc.Job.Currency,
		Formula: "Σ categories", Rounding: "none: every line was rounded before"}, t.doc.Totals.Base, ids, values)
	d.Notes = append(d.Notes, "stated in "+t.doc.Job.Money)
	return d
}

func (t *Tracer) categoryFigure(name string) (draft, bool) {
	for _, c := range t.doc.Categories {
		if c.Category == name {
			ids, values := amounts(t.category[name])
			return t.add(Node{Figure: "category/" + name, What: "Cost of " + name + " at likely values.", Unit: t.doc.Job.Currency,
				Formula: "Σ lines of the category", Rounding: "none: every line was rounded before"}, c.Amount, ids, values), true
		}
	}
	return draft{}, false
}

func amounts(lines []*document.Line) ([]string, []value) {
	ids, values := make([]string, len(lines)), make([]value, len(lines))
	for i, l := range lines {
		ids[i], values[i] = l.ID, exact(l.Amount)
	}
	return ids, values
}

// groupFigure is the cost or a mass of a group of members.
func (t *Tracer) groupFigure(segment, what string) (draft, bool) {
	for _, g := range t.doc.Groups {
		if assumption.Segment(g.Group) != segment {
			continue
		}
		id := "group/" + segment + "/" + what
		if what == "amount" {
			ids, values := amounts(t.group[g.Group])
			return t.add(Node{Figure: id, What: "Cost of the group " + g.Group + " at likely values.", Unit: t.doc.Job.Currency,
				Formula: "Σ lines of the group", Rounding: "none: every line was rounded before"}, g.Amount, ids, values), true
		}
		shown, ok := map[string]money.Decimal{"net": g.Net, "delivered": g.Delivered, "purchased": g.Purchased}[what]
		if !ok {
			return draft{}, false
		}
		var ids []string
		var values []value
		for _, it := range t.inGroup[g.Group] {
			ids, values = append(ids, t.massID(it, what)), append(values, exact(massOf(it, what)))
		}
		return t.add(Node{Figure: id, What: massWords[what] + " of the group " + g.Group + ".", Unit: "t", Formula: "Σ items of the group",
			Rounding: "none: the items were rounded to 3 places"}, shown, ids, values), true
	}
	return draft{}, false
}

var massWords = map[string]string{"net": "Net mass", "delivered": "Delivered mass", "purchased": "Purchased mass"}

func massOf(it *document.Item, what string) money.Decimal {
	switch what {
	case "net":
		return it.Net
	case "delivered":
		return it.Delivered
	}
	return it.Purchased
}

// totalMass is a mass of the whole structure.
func (t *Tracer) totalMass(what string) draft {
	var ids []string
	var values []value
	for _, g := range t.doc.Groups {
		ids = append(ids, "group/"+assumption.Segment(g.Group)+"/"+what)
		values = append(values, exact(map[string]money.Decimal{"net": g.Net, "delivered": g.Delivered, "purchased": g.Purchased}[what]))
	}
	shown := map[string]money.Decimal{"net": t.doc.Totals.Net, "delivered": t.doc.Totals.Delivered, "purchased": t.doc.Totals.Purchased}[what]
	return t.add(Node{Figure: "total/" + what, What: massWords[what] + " of the whole structure.", Unit: "t", Formula: "Σ groups"}, shown, ids, values)
}

// line is quantity × unit price.
func (t *Tracer) line(l *document.Line) draft {
	cur, where := t.doc.Job.Currency, "the whole structure"
	if it, ok := t.items[l.Item]; ok {
		where = itemWords(it)
	}
	d := draft{Node: Node{Figure: l.ID, What: fmt.Sprintf("Cost of %s for %s, by %s.", l.Category, where, l.Driver), Value: l.Amount.String(), Unit: cur,
		Kind: Product, Formula: "quantity × unit price", Rounding: fmt.Sprintf("to %s, the minor unit of %s, %s", placed(places(l.Amount)), cur, halfAway)}}
	d.Arithmetic = fmt.Sprintf("%s × %s = %s", with(l.Quantity.String(), l.Unit), with(l.UnitPrice.String(), t.perUnit(l)), with(d.Value, cur))
	d.recheck(product(exact(l.Quantity), exact(l.UnitPrice)).rounded(places(l.Amount)), exact(l.Amount))
	if l.Note != "" {
		d.Notes = append(d.Notes, l.Note)
	}
	d.kids = []kid{t.lineQuantity(l), {l.ID + "#unit price", func() draft { return t.unitPrice(l) }}}
	return d
}

// perUnit is the unit of a unit price; a percentage has none.
func (t *Tracer) perUnit(l *document.Line) string {
	if len(l.Of) > 0 || l.Unit == "" {
		return ""
	}
	unit := l.Unit
	if one, ok := singular[unit]; ok {
		unit = one
	}
	return t.doc.Job.Currency + "/" + unit
}

// singular are the units of quantities that are counted, as a price has them.
var singular = map[string]string{"days": "day", "weeks": "week", "loads": "load", "pcs": "piece"}

// lineQuantity is what a line multiplies: counted, the sum of other lines, or one
// lump.
func (t *Tracer) lineQuantity(l *document.Line) kid {
	id := l.ID + "#quantity"
	if len(l.Of) > 0 {
		return kid{id, func() draft {
			var values []value
			for _, of := range l.Of {
				if o, ok := t.lines[of]; ok {
					values = append(values, exact(o.Amount))
				}
			}
			return t.add(Node{Figure: id, What: "Cost of the lines that the fraction is taken of, as rounded.", Unit: l.Unit, Formula: "Σ rounded lines"}, l.Quantity, l.Of, values)
		}}
	}
	if it, ok := t.items[l.Item]; ok {
		if _, found := quantityOf(it, l.Driver); found {
			return t.kid(quantityID(it.ID, l.Driver))
		}
	}
	return kid{id, func() draft {
		k := t.known(l.RateID, l.Quantity.String()).make()
		k.What = "What the rate is paid for over the whole structure, by its own definition: " + k.What
		k.Figure, k.Unit, k.Spread = id, l.Unit, nil
		if l.Note != "" {
			k.Notes = append(k.Notes, l.Note)
		}
		return k
	}}
}

// unitPrice is the parts of a rate times the multipliers in force.
func (t *Tracer) unitPrice(l *document.Line) draft {
	n := places(l.UnitPrice)
	d := draft{Node: Node{Figure: l.ID + "#unit price", What: "Unit price of the line: the rate, brought to the money of the estimate, times the multipliers in force.",
		Value: l.UnitPrice.String(), Unit: t.perUnit(l), Kind: Product, Scope: l.RateScope, Rounding: fmt.Sprintf("to 8 places and then to %d, %s", n, halfAway)}}
	d.Formula = l.RateFormula
	var words []string
	var values []value
	for _, p := range l.RateParts {
		values, words = append(values, exact(p.Value)), append(words, grouped(p.Value.String()))
		d.kids = append(d.kids, t.ratePart(l, p))
	}
	for _, m := range l.Multipliers {
		d.Formula += " × " + m.Name
		values, words = append(values, exact(m.Value)), append(words, grouped(m.Value.String()))
		d.kids = append(d.kids, kid{m.Assumption, func() draft {
			k := t.known(m.Assumption, m.Value.String()).make()
			k.Scope = strings.TrimSpace(m.Scope + " " + m.Subject)
			return k
		}})
	}
	d.Arithmetic = strings.Join(words, " × ") + " = " + with(d.Value, d.Unit)
	d.recheck(product(values...).rounded(8, n), exact(l.UnitPrice))
	return d
}

// ratePart is one factor of a rate.
func (t *Tracer) ratePart(l *document.Line, p document.Part) kid {
	id := p.Assumption
	if id == "" {
		id = "setting/" + p.Name
	}
	if _, ok := t.entries[id]; ok || p.Assumption != "" {
		if p.Name == "price" || p.Name == "ratio" || p.Name == "fraction" {
			return t.known(id, p.Value.String())
		}
		own := l.ID + "#" + p.Name
		return kid{own, func() draft { // a break or a minimum of the same rate
			k := t.known(id, p.Value.String()).make()
			k.Figure, k.What, k.Spread = own, "The "+p.Name+" of: "+k.What, nil
			k.Value = p.Value.String()
			if k.Unit = ""; p.Name != "price break" {
				k.Unit = t.doc.Job.Currency
			}
			return k
		}}
	}
	return constant("The "+p.Name+" of the rate book.", p.Value.String(), "", "definition of the rate book "+t.doc.Job.RateBook,
		"rate book "+t.doc.Job.RateBook, hash(t.doc.Job.RateBookSHA256))
}
