package workbook

import (
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// shipping writes the vehicles of each group and the pieces that do not fit.
func (b *book) shipping() {
	s := b.doc.Shipping
	if len(s.Loads) == 0 && len(s.Breaches) == 0 && len(s.Limits) == 0 {
		return
	}
	b.Sheet(shippingSheet, sheet.Column{Head: "group", Width: 26}, sheet.Column{Head: "pieces", Width: 16}, sheet.Column{Head: "site splices", Width: 13},
		sheet.Column{Head: "vehicles by mass", Width: 17}, sheet.Column{Head: "by length", Width: 12}, sheet.Column{Head: "by volume", Width: 12},
		sheet.Column{Head: "vehicles", Width: 36}, sheet.Column{Head: "permit loads", Width: 13}, sheet.Column{Head: "governing", Width: 12})
	for _, l := range s.Loads {
		b.Row(text(l.Group), whole(l.Pieces), whole(l.Splices), number(l.ByMass, length), number(l.ByLength, length), number(l.ByVolume, length),
			whole(l.Vehicles), whole(l.Permits), text(l.Governing))
	}
	b.heading("pieces that do not fit", "envelope", "measure", "value", "limit", "unit", "needs")
	for _, x := range s.Breaches {
		b.Row(text(x.Mark), text(x.Envelope), text(x.Measure), number(x.Value, length), number(x.Limit, length), text(x.Unit), wrapped(x.Needs))
	}
	if len(s.Breaches) == 0 {
		b.Row(text("none"))
	}
	b.heading("envelopes")
	for _, l := range s.Limits {
		b.say(l)
	}
}

// cutting writes the cutting plans, a row for each pattern.
func (b *book) cutting() {
	if len(b.doc.Cutting) == 0 {
		return
	}
	b.Sheet(cuttingSheet, sheet.Column{Head: "section", Width: 22}, sheet.Column{Head: "grade", Width: 8}, sheet.Column{Head: "bars", Width: 8},
		sheet.Column{Head: "stock, m", Width: 10}, sheet.Column{Head: "cuts of one bar", Width: 36}, sheet.Column{Head: "bought, m", Width: 11},
		sheet.Column{Head: "used, m", Width: 11}, sheet.Column{Head: "yield", Width: 9}, sheet.Column{Head: "bound, m", Width: 11},
		sheet.Column{Head: "purchased, t", Width: 12}, sheet.Column{Head: "method", Width: 16}, sheet.Column{Head: "proven", Width: 8}, sheet.Column{Head: "hint", Width: 36})
	for _, p := range b.doc.Cutting {
		proven := "no"
		if p.Proven {
			proven = "yes"
		}
		bars := 0
		for _, x := range p.Bars {
			bars += x.Count
		}
		b.Row(text(p.Section), text(p.Grade), whole(bars), sheet.Blank(), text("all bars, kerf "+plainNumber(p.Kerf)+" m"),
			number(p.Stock, length), number(p.Used, length), number(p.Yield, percent), number(p.Bound, length),
			exactly(p.Purchased, mass), text(p.Method), text(proven), wrapped(p.Hint))
		for _, x := range p.Patterns {
			b.Row(text(p.Section), text(p.Grade), whole(x.Count), number(x.Stock, length), wrapped(cutsOf(x)))
		}
	}
}

// cutsOf says what is cut from one bar.
func cutsOf(p document.Pattern) string {
	texts := make([]string, len(p.Cuts))
	for i, c := range p.Cuts {
		texts[i] = strconv.Itoa(c.Count) + " × " + c.Mark + " of " + plainNumber(c.Length) + " m"
	}
	return strings.Join(texts, ", ")
}
