package trace

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/document"
)

// quantityID is the id of the figure of an item's quantity, as document.Figures
// has it.
func quantityID(item, driver string) string {
	return "item/" + item + "/" + strings.TrimSuffix(driver, " tonnes")
}

func quantityOf(it *document.Item, driver string) (*document.Quantity, bool) {
	i := slices.IndexFunc(it.Quantities, func(q document.Quantity) bool { return q.Driver == driver })
	if i < 0 {
		return nil, false
	}
	return &it.Quantities[i], true
}

// itemWords names an item to a reader.
func itemWords(it *document.Item) string {
	words := it.Family
	if it.Connection != "" {
		words += ", " + it.Connection
	}
	return words + ", of the group " + it.Group
}

// massID is the figure of an item's mass. The net mass of an item is that of the
// drawing; where the net quantity that rates ask carries a factor, the drawing's
// has an id of its own.
func (t *Tracer) massID(it *document.Item, what string) string {
	id := quantityID(it.ID, what)
	if q, ok := quantityOf(it, what+" tonnes"); ok && !q.Value.Equal(massOf(it, what)) {
		return id + "#drawn"
	}
	return id
}

// quantity is the figure of an item by the last segment of its id.
func (t *Tracer) quantity(it *document.Item, last string) (draft, bool) {
	id := "item/" + it.ID + "/" + last
	for i := range it.Quantities {
		if q := &it.Quantities[i]; quantityID(it.ID, q.Driver) == id {
			return t.counted(it, q), true
		}
	}
	switch last {
	case "net", "delivered", "purchased":
		return t.noMass(it, last), true
	}
	return draft{}, false
}

// noMass is a mass of an item that has none, such as concrete.
func (t *Tracer) noMass(it *document.Item, what string) draft {
	shown := massOf(it, what)
	d := draft{Node: Node{Figure: "item/" + it.ID + "/" + what, What: massWords[what] + " of " + itemWords(it) + ": what is counted here is " + it.Treatment + ", which has none.",
		Value: shown.String(), Unit: "t", Kind: Quantity, Formula: "none is counted", Rounding: "to 3 places"}}
	if shown.Sign() != 0 {
		d.Notes = append(d.Notes, "does not recompute: the document holds no such quantity")
	}
	for _, m := range t.holds[it.ID] {
		d.kids = append(d.kids, t.pieces(m))
	}
	return d
}

// counted is a measured quantity times its factors.
func (t *Tracer) counted(it *document.Item, q *document.Quantity) draft {
	id := quantityID(it.ID, q.Driver)
	var moved []string
	if len(q.Depends) > 0 {
		moved = []string{"moves with what the schedule states of " + strings.Join(q.Depends, ", ")}
	}
	rule := fmt.Sprintf("once, to %s, %s", placed(places(q.Value)), halfAway)
	if len(q.Factors) == 0 {
		d := t.measure(it, q, exact(q.Value), id)
		d.What, d.Rounding, d.Notes = fmt.Sprintf("%s of %s.", capital(q.Driver), itemWords(it)), rule, append(d.Notes, moved...)
		return t.withDrawn(d, it, q)
	}
	d := draft{Node: Node{Figure: id, What: fmt.Sprintf("%s of %s: what the schedule and the sections give, times allowances at likely values.", capital(q.Driver), itemWords(it)),
		Value: q.Value.String(), Unit: q.Unit, Kind: Quantity, Formula: q.Formula, Rounding: rule, Notes: moved}}
	values := []value{printed(q.Measured)}
	words := []string{grouped(text(q.Measured))}
	d.kids = []kid{{id + "#measured", func() draft { return t.measure(it, q, printed(q.Measured), id+"#measured") }}}
	for _, f := range q.Factors {
		values, words = append(values, printed(f.Value)), append(words, text(f.Value))
		d.kids = append(d.kids, t.known(f.Assumption, text(f.Value)))
	}
	d.Arithmetic = strings.Join(words, " × ") + " = " + with(d.Value, q.Unit)
	d.recheck(product(values...).rounded(places(q.Value)), exact(q.Value))
	return t.withDrawn(d, it, q)
}

// withDrawn adds to the net quantity the net mass of the drawing, where they
// differ.
func (t *Tracer) withDrawn(d draft, it *document.Item, q *document.Quantity) draft {
	id := quantityID(it.ID, q.Driver)
	if q.Driver == "net tonnes" && t.massID(it, "net") != id {
		d.Notes = append(d.Notes, "groups sum the net mass of the drawing, "+with(it.Net.String(), "t")+", without these factors")
		d.kids = append(d.kids, kid{id + "#drawn", func() draft {
			k := t.measure(it, q, exact(it.Net), id+"#drawn")
			k.What, k.Rounding = "Net mass of "+itemWords(it)+" as drawn.", "to 3 places, "+halfAway
			return k
		}})
	}
	return d
}

func capital(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

// measure is what is counted before any factor, shown as the value given: the
// members' masses, lengths or pieces where those make it, else what the document
// states as a whole, with all that it depends on.
func (t *Tracer) measure(it *document.Item, q *document.Quantity, shown value, id string) draft {
	d := draft{Node: Node{Figure: id, What: fmt.Sprintf("What is measured for the %s of %s, before any factor.", q.Driver, itemWords(it)), Value: shown.text, Unit: t.measuredUnit(it, q),
		Kind: Quantity, Formula: q.Formula, Rounding: "none: 12 significant digits are printed"}}
	exactly := shown.open.Sign() == 0
	fits := func(b between) bool {
		if exactly {
			_, after, _ := strings.Cut(shown.text, ".")
			b = b.rounded(len(after))
		}
		return b.holds(shown)
	}
	if way := t.way(it, q); len(way.terms) > 0 && (way.certain || fits(way.total)) {
		d.Kind, d.Formula = way.kind, way.formula
		if way.text != "" {
			d.Arithmetic = way.text + " = " + with(shown.text, d.Unit)
		}
		if !fits(way.total) {
			d.recheck(way.total, shown)
		}
		d.kids = append(slices.Clip(way.kids), t.plans(it, q)...)
		return t.rests(d, it, q)
	}
	d.Notes = append(d.Notes, "stated by the take-off as a whole; its formula is in words")
	d.kids = append(slices.Clip(t.brought(it, q)), t.plans(it, q)...)
	return t.rests(d, it, q)
}

// measuredUnit is the unit of a quantity before its factors, which may be norms with
// units of their own. It is empty where no unit in use says it.
func (t *Tracer) measuredUnit(it *document.Item, q *document.Quantity) string {
	for _, f := range q.Factors {
		e, ok := t.entries[f.Assumption]
		if !ok || e.Unit == "" || e.Unit == "fraction" {
			continue
		}
		_, per, found := strings.Cut(e.Unit, "/")
		switch {
		case q.Driver == "weeks", q.Driver == "truckloads":
			return ""
		case found:
			return per
		case q.Driver == "crane days":
			return "lifts"
		case e.Unit == "km":
			return "t"
		case it.Treatment == "joint" && e.Unit == "kg":
			return "thousand joints"
		case it.Treatment == "joint":
			return "joints"
		}
		return ""
	}
	return q.Unit
}

// rests adds the entries that a measured quantity depends on.
func (t *Tracer) rests(d draft, it *document.Item, q *document.Quantity) draft {
	for _, id := range q.Assumptions {
		if !slices.ContainsFunc(d.kids, func(k kid) bool { return k.figure == id }) {
			d.kids = append(d.kids, t.known(id, ""))
		}
	}
	if len(d.kids) == 0 {
		d.kids = append(d.kids, constant("The take-off counts no row for this.", "", "", "definition of the item "+it.ID, "take-off", fmt.Sprintf("engine version %d", t.doc.EngineVersion)))
	}
	return d
}
