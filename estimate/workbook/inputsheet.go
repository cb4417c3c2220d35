package workbook

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// inputColumn is the column of the cells that are meant to be changed, on every
// sheet that inputSheet begins.
const inputColumn = "D"

// inputSheet begins a sheet of inputs, one a row.
func (b *book) inputSheet(name, id, what, value string) {
	b.Sheet(name, sheet.Column{Head: id, Width: 30}, sheet.Column{Head: what, Width: 20}, sheet.Column{Head: "scope", Width: 15},
		sheet.Column{Head: value, Width: 11}, sheet.Column{Head: "name of the cell", Width: 32}, sheet.Column{Head: "low", Width: 9},
		sheet.Column{Head: "high", Width: 9}, sheet.Column{Head: "low, high", Width: 9}, sheet.Column{Head: "statement", Width: 44},
		sheet.Column{Head: "source", Width: 24}, sheet.Column{Head: "owner", Width: 14})
}

// inputRow writes an input with what the register says of it.
func (b *book) inputRow(on string, row int, name, id, what string, value sheet.Value) {
	e := b.entries[id]
	cells := []sheet.Value{wrapped(id), wrapped(what), wrapped(strings.TrimSpace(e.Scope + " " + e.Subject)), value.Input(), wrapped(name)}
	spread := spreadCells(e.Spread)
	cells = append(cells, spread[1], spread[3], spread[4], wrapped(e.Statement), wrapped(e.Source), wrapped(e.Owner))
	b.Row(cells...)
	b.Name(name, on, fmt.Sprint(inputColumn, row))
}

// allowances writes the factors of the take-off.
func (b *book) allowances() {
	if len(b.allowance) == 0 {
		return
	}
	b.inputSheet(allowancesSheet, "register entry", "acts on a quantity as", "likely")
	acts := map[string]string{}
	for _, it := range b.doc.Items {
		for _, q := range it.Quantities {
			for _, f := range q.Factors {
				how := "factor"
				if b.onOne(f) {
					how = "1 + likely"
				}
				name := b.allowance[b.factorAt[factorKey(f)]].name
				if old := acts[name]; old != "" && old != how {
					how = "1 + likely, factor"
				}
				acts[name] = how
			}
		}
	}
	for i, a := range b.allowance {
		b.inputRow(allowancesSheet, firstRow+i, a.name, a.id, acts[a.name], number(a.likely, general))
	}
}

// general shows as many decimals as a number has.
const general = "General" + gap

// multipliers writes each multiplier once.
func (b *book) multipliers() {
	b.inputSheet(multipliersSheet, "register entry", "multiplier", "value")
	for i, m := range b.multiplier {
		e := b.entries[m.Assumption]
		spread := spreadCells(e.Spread)
		b.Row(wrapped(m.Assumption), wrapped(m.Name), wrapped(strings.TrimSpace(m.Scope+" "+m.Subject)), sheet.NumberOf(shown(m.Value), general).Input(),
			wrapped(m.cell), spread[1], spread[3], spread[4], wrapped(e.Statement), wrapped(e.Source), wrapped(e.Owner))
		b.Name(m.cell, multipliersSheet, fmt.Sprint(inputColumn, firstRow+i))
	}
	if len(b.multiplier) == 0 {
		b.Row(text("none"))
	}
}

// carbonFactors writes each emission factor once.
func (b *book) carbonFactors() {
	if len(b.emission) == 0 {
		return
	}
	b.inputSheet(factorsSheet, "factor", "module, per", "kg CO₂e")
	for i, e := range b.emission {
		b.inputRow(factorsSheet, firstRow+i, e.name, e.id, e.module+", "+e.driver+" ("+e.unit+")", sheet.NumberOf(shown(e.value), general))
	}
}

// assumptions writes the register. A likely value that the base stands on is a
// reference to its input.
func (b *book) assumptions() {
	b.Sheet(assumptionsSheet, sheet.Column{Head: "id", Width: 26}, sheet.Column{Head: "kind", Width: 10}, sheet.Column{Head: "statement", Width: 38},
		sheet.Column{Head: "value", Width: 11}, sheet.Column{Head: "unit", Width: 8}, sheet.Column{Head: "distribution", Width: 12},
		sheet.Column{Head: "low", Width: 10}, sheet.Column{Head: "likely", Width: 10}, sheet.Column{Head: "high", Width: 10},
		sheet.Column{Head: "low, high", Width: 10}, sheet.Column{Head: "correlation", Width: 12},
		sheet.Column{Head: "scope", Width: 14}, sheet.Column{Head: "source", Width: 22}, sheet.Column{Head: "clause", Width: 14},
		sheet.Column{Head: "owner", Width: 12}, sheet.Column{Head: "confidence", Width: 11}, sheet.Column{Head: "feeds", Width: 40})
	for _, e := range b.doc.Assumptions {
		cells := []sheet.Value{wrapped(e.ID), text(string(e.Kind)), wrapped(e.Statement), wrapped(e.Value), text(e.Unit)}
		spread := spreadCells(e.Spread)
		if name := b.likely[e.ID]; name != "" {
			spread[2] = sheet.Formula(name, plainNumber(document.Number(e.Spread.Base())), general)
		}
		cells = append(cells, spread...)
		cells = append(cells, wrapped(e.Group), wrapped(strings.TrimSpace(e.Scope+" "+e.Subject)), wrapped(e.Source), wrapped(e.Clause),
			wrapped(e.Owner), text(string(e.Confidence)), wrapped(fed(e.Feeds)))
		b.Row(cells...)
	}
}

// fed lists what an entry feeds: the totals by name, the rest by number; the sheet
// Trace has the same links from the other end.
func fed(feeds []string) string {
	var totals []string
	for _, f := range feeds {
		switch kind, _, _ := strings.Cut(f, "/"); kind {
		case "line", "item", "member", "group", "carbon":
		default:
			totals = append(totals, f)
		}
	}
	if rest := len(feeds) - len(totals); rest > 0 {
		if len(totals)+rest <= mostListed/2 {
			return strings.Join(feeds, "; ")
		}
		return listed(append(totals, fmt.Sprintf("and %d lines, items, groups and members", rest)))
	}
	return listed(totals)
}
