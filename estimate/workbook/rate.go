package workbook

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// rate is one row of the sheet Rates: what a unit costs before multipliers. Lines
// of one rate id and scope share it while their parts are the same.
type rate struct {
	id, scope, category, driver, unit, words string
	name                                     string // of the cell with the product
	cells                                    []partCell
	product                                  money.Decimal
	lines                                    int
}

// partCell is one part of a price in its column of the sheet Rates: an input of
// its own, or a reference to the cell that holds it.
type partCell struct {
	document.Part
	column int    // index in partColumns
	name   string // of the cell that is changed
	own    bool   // it stands here
}

// partsOf are the parts of a line's price; a price without parts is its own.
func partsOf(l document.Line) []document.Part {
	if len(l.RateParts) > 0 {
		return l.RateParts
	}
	return []document.Part{{Name: "price", Value: l.Rate, Assumption: l.RateID}}
}

func partKey(p document.Part) string { return key(p.Name, p.Assumption, shown(p.Value)) }

func rateKey(l document.Line) string {
	k := []string{l.RateID, l.RateScope, l.Category, l.Driver}
	for _, p := range partsOf(l) {
		k = append(k, partKey(p))
	}
	return key(k...)
}

// conversion is one factor that several rates share: an exchange rate, an
// escalation, the reference price.
type conversion struct {
	document.Part
	cell string
}

// shared tells the parts that stand on the sheet Conversions.
func shared(p document.Part) bool {
	for _, s := range []string{"exchange", "escalation", "reference price"} {
		if strings.HasPrefix(p.Name, s) {
			return true
		}
	}
	return false
}

func (in *inputs) gatherConversions(d document.Document) {
	found := map[string]document.Part{}
	for _, l := range d.Lines {
		for _, p := range partsOf(l) {
			if shared(p) {
				found[partKey(p)] = p
			}
		}
	}
	in.convertAt = map[string]int{}
	for i, k := range sortedKeys(found) {
		c := conversion{Part: found[k]}
		prefix, id := slug(c.Name), c.Assumption
		if first, _, more := strings.Cut(prefix, "_"); more && strings.HasPrefix(slug(id), first+"_") {
			prefix = first // escalation/fabrication needs no second escalation
		}
		if prefix == "reference_price" {
			id = ""
		}
		c.cell = in.namer.name(prefix, id)
		in.link(c.Assumption, c.cell, shown(c.Value))
		in.conversion = append(in.conversion, c)
		in.convertAt[k] = i
	}
}

func (in *inputs) gatherRates(d document.Document) {
	found, uses := map[string]document.Line{}, map[string]int{}
	for _, l := range d.Lines {
		k := rateKey(l)
		if _, ok := found[k]; !ok {
			found[k] = l
		}
		uses[k]++
	}
	in.rateAt = map[string]int{}
	held := map[string]string{} // name of the cell that holds a part, by partKey
	for i, k := range sortedKeys(found) {
		l := found[k]
		id := rateName(l)
		r := rate{id: l.RateID, scope: l.RateScope, category: l.Category, driver: l.Driver, unit: l.Unit, words: l.RateFormula,
			name: in.namer.name("rate", id), product: money.FromInt(1), lines: uses[k]}
		for _, p := range partsOf(l) {
			c := partCell{Part: p}
			in.place(&c, strings.TrimPrefix(id, "rate/"), held)
			r.cells = append(r.cells, c)
			r.product = r.product.Mul(p.Value)
		}
		in.rate = append(in.rate, r)
		in.rateAt[k] = i
	}
	in.sortColumns()
	for i := range in.rate {
		in.setColumns(&in.rate[i])
	}
}

// usualParts are the parts of a price in the order in which they are read.
var usualParts = []string{"reference price", "ratio", "price", "price break", "exchange", "escalation to base date", "escalation to spend date"}

// sortColumns puts the usual parts that occur first.
func (in *inputs) sortColumns() {
	for _, name := range usualParts {
		if slices.ContainsFunc(in.rate, func(r rate) bool {
			return slices.ContainsFunc(r.cells, func(c partCell) bool { return c.Name == name })
		}) {
			in.partColumns = append(in.partColumns, name)
		}
	}
}

// rateName is what a rate's cells are named by: its id, with the scope that is
// not the book's.
func rateName(l document.Line) string {
	id := l.RateID
	if id == "" {
		id = l.Category + " " + l.Driver
	}
	if l.RateScope != "" && l.RateScope != "rate book" {
		id += " " + l.RateScope
	}
	return id
}

// place finds the cell of a part: on the sheet Conversions, on the row of an
// earlier rate, or here.
func (in *inputs) place(c *partCell, id string, held map[string]string) {
	k := partKey(c.Part)
	if shared(c.Part) {
		c.name = in.conversion[in.convertAt[k]].cell
		return
	}
	if name, ok := held[k]; ok && c.Assumption != "" {
		c.name = name
		return
	}
	prefix := slug(c.Name)
	if prefix == "" {
		prefix = "price"
	}
	c.name, c.own = in.namer.name(prefix, id), true
	in.link(c.Assumption, c.name, shown(c.Value))
	held[k] = c.name
}

// setColumns gives each part a column of its name; a name that a price has twice
// has two columns.
func (in *inputs) setColumns(r *rate) {
	seen := map[string]int{}
	for i := range r.cells {
		name := r.cells[i].Name
		seen[name]++
		head := name
		if seen[name] > 1 {
			head = fmt.Sprintf("%s %d", name, seen[name])
		}
		at := slices.Index(in.partColumns, head)
		if at < 0 {
			at = len(in.partColumns)
			in.partColumns = append(in.partColumns, head)
		}
		r.cells[i].column = at
	}
	slices.SortStableFunc(r.cells, func(a, b partCell) int { return a.column - b.column })
}

// rateOf is the row of a line's rate.
func (in *inputs) rateOf(l document.Line) rate { return in.rate[in.rateAt[rateKey(l)]] }

// factors are the parts of a price in the order in which the sheet multiplies them.
func (r rate) factors() []money.Decimal {
	out := make([]money.Decimal, len(r.cells))
	for i, c := range r.cells {
		out[i] = c.Value
	}
	return out
}

// Columns of the sheet Rates before those of the parts.
const firstPart = 5

// rates writes each rate once: its parts and their product.
func (b *book) rates() {
	columns := []sheet.Column{{Head: "rate", Width: 26}, {Head: "category", Width: 12}, {Head: "driver", Width: 18}, {Head: "scope", Width: 11}}
	for _, head := range b.partColumns {
		columns = append(columns, sheet.Column{Head: head, Width: max(11, float64(len(head))*0.6)})
	}
	columns = append(columns, sheet.Column{Head: "rate, " + b.currency.Code, Width: 14}, sheet.Column{Head: "per", Width: 7},
		sheet.Column{Head: "name of the rate's cell", Width: 26}, sheet.Column{Head: "lines", Width: 7}, sheet.Column{Head: "how it is made", Width: 26},
		sheet.Column{Head: "source", Width: 24}, sheet.Column{Head: "owner", Width: 12})
	b.Sheet(ratesSheet, columns...)
	for i, r := range b.rate {
		b.rateRow(firstRow+i, r)
	}
	b.hint("Coloured cells are inputs. Parts that several rates share stand on the sheet " + conversionsSheet + ". A rate upon the cost of categories is a fraction of other lines.")
}

func (b *book) rateRow(row int, r rate) {
	parts := make([]sheet.Value, len(b.partColumns))
	var product []string
	id := r.id
	for _, c := range r.cells {
		at := sheet.Letters(firstPart + c.column)
		product = append(product, fmt.Sprint(at, row))
		if !c.own {
			parts[c.column] = sheet.Formula(c.name, shown(c.Value), fitting(c.Value, 2))
			continue
		}
		if c.Assumption != "" {
			id = c.Assumption
		}
		parts[c.column] = sheet.NumberOf(shown(c.Value), fitting(c.Value, 2)).Input()
		b.Name(c.name, ratesSheet, fmt.Sprint(at, row))
	}
	source, owner := b.sourceAndOwner(id)
	head := []sheet.Value{wrapped(r.id), text(r.category), text(r.driver), text(r.scope)}
	b.Row(slices.Concat(head, parts, []sheet.Value{sheet.Formula(strings.Join(product, "*"), shown(r.product), fitting(r.product, 2)), text(r.unit),
		wrapped(r.name), whole(r.lines), wrapped(r.words), wrapped(source), wrapped(owner)})...)
	b.Name(r.name, ratesSheet, fmt.Sprint(sheet.Letters(firstPart+len(b.partColumns)), row))
}

// conversions writes what several rates share.
func (b *book) conversions() {
	if len(b.conversion) == 0 {
		return
	}
	b.inputSheet(conversionsSheet, "register entry", "part of a price", "value")
	for i, c := range b.conversion {
		b.inputRow(conversionsSheet, firstRow+i, c.cell, c.Assumption, c.Name, sheet.NumberOf(shown(c.Value), fitting(c.Value, 2)))
	}
}

// fitting is a format with the decimals of a figure, at least a number of them.
func fitting(d money.Decimal, least int) sheet.NumberFormat {
	return digits(max(least, min(6, decimals(d)))) + gap
}
