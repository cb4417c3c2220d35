package workbook

import (
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// unsafeMark marks a member whose section fails, whose shortcut is unsafe, or
// that an unsafe finding names.
const unsafeMark = "UNSAFE"

// unsafeMembers are the marks that carry the mark UNSAFE, with the reasons.
func unsafeMembers(d document.Document) map[string]string {
	reasons := map[string][]string{}
	add := func(mark, reason string) {
		for _, r := range reasons[mark] {
			if r == reason {
				return
			}
		}
		reasons[mark] = append(reasons[mark], reason)
	}
	members := map[string]bool{}
	for _, m := range d.Members {
		members[m.Mark] = true
		if !m.Passes {
			add(m.Mark, "fails")
		}
		for _, r := range m.Ratios {
			if r.Unsafe {
				add(m.Mark, "shortcut")
			}
		}
	}
	for _, f := range d.Findings {
		if f.Severity != document.Unsafe || !members[f.Subject] {
			continue
		}
		switch f.Code {
		case "section-fails", "unsafe-shortcut": // seen above in the member itself
		default:
			add(f.Subject, f.Code)
		}
	}
	out := map[string]string{}
	for mark, r := range reasons {
		out[mark] = unsafeMark + ": " + strings.Join(r, ", ")
	}
	return out
}

// worstRatio is the lowest ratio split / exact of a member.
func worstRatio(m document.Member) (document.Ratio, bool) {
	var worst document.Ratio
	for i, r := range m.Ratios {
		if i == 0 || r.Ratio < worst.Ratio {
			worst = r
		}
	}
	return worst, len(m.Ratios) > 0
}

// takeoff writes the counted items.
func (b *book) takeoff() {
	b.Sheet(takeoffSheet, sheet.Column{Head: "item", Width: 44}, sheet.Column{Head: "net, t", Width: 12},
		sheet.Column{Head: "delivered, t", Width: 12}, sheet.Column{Head: "purchased, t", Width: 12}, sheet.Column{Head: "pieces", Width: 9},
		sheet.Column{Head: "length, m", Width: 11}, sheet.Column{Head: "surface, m²", Width: 11}, sheet.Column{Head: "group", Width: 22},
		sheet.Column{Head: "family", Width: 12}, sheet.Column{Head: "treatment", Width: 11}, sheet.Column{Head: "connection class", Width: 16},
		sheet.Column{Head: "marks", Width: 50})
	var sum document.Item
	for _, it := range b.doc.Items {
		b.Row(text(it.ID), sheet.NumberOf(it.Net.String(), mass), sheet.NumberOf(it.Delivered.String(), mass),
			sheet.NumberOf(it.Purchased.String(), mass), whole(it.Pieces), number(it.Length, oneDigit),
			number(it.Surface, oneDigit), text(it.Group), text(it.Family), text(it.Treatment), text(it.Connection),
			text(strings.Join(it.Marks, ", ")))
		sum.Net, sum.Delivered, sum.Purchased = sum.Net.Add(it.Net), sum.Delivered.Add(it.Delivered), sum.Purchased.Add(it.Purchased)
	}
	b.total("total", len(b.doc.Items), tonnes(sum.Net), tonnes(sum.Delivered), tonnes(sum.Purchased))
}

// members writes the members with their sizing, under the caution. Net mass is
// that of the row, load that of one piece; the split method is compared with the
// exact envelope by its lowest ratio.
func (b *book) members() {
	b.Sheet(membersSheet, sheet.Column{Head: "mark", Width: 9}, sheet.Column{Head: "group", Width: 16}, sheet.Column{Head: "kind", Width: 9},
		sheet.Column{Head: "no.", Width: 5}, sheet.Column{Head: "length, m", Width: 10}, sheet.Column{Head: "arrangement", Width: 15},
		sheet.Column{Head: "section", Width: 18}, sheet.Column{Head: "grade", Width: 7}, sheet.Column{Head: "kg/m", Width: 8},
		sheet.Column{Head: "net, kg", Width: 10}, sheet.Column{Head: "governing check", Width: 18},
		sheet.Column{Head: "utilisation", Width: 11}, sheet.Column{Head: "unsafe", Width: 22},
		sheet.Column{Head: "split/exact", Width: 11}, sheet.Column{Head: "lowest for", Width: 22},
		sheet.Column{Head: "load, kN", Width: 9}, sheet.Column{Head: "treatment", Width: 10},
		sheet.Column{Head: "description", Width: 22})
	b.Row(text(b.doc.Caution).Total())
	marks := unsafeMembers(b.doc)
	for _, m := range b.doc.Members {
		ratio, where := sheet.Blank(), ""
		if r, ok := worstRatio(m); ok {
			ratio, where = number(r.Ratio, factor), strings.TrimSpace(r.Effect+", "+r.Where)
		}
		utilisation, load, perMetre := sheet.Blank(), sheet.Blank(), sheet.Blank()
		if m.LineMass != 0 {
			perMetre = number(m.LineMass, oneDigit)
		}
		if m.Section != "" {
			utilisation, load = number(m.Utilisation, factor), number(m.TotalLoad, oneDigit)
		}
		b.Row(text(m.Mark), text(m.Group), text(m.Kind), whole(m.Quantity), number(m.Length, length), text(m.Arrangement),
			text(m.Section), text(m.Grade), perMetre, number(m.Net, oneDigit), text(m.Governing),
			utilisation, text(marks[m.Mark]), ratio, text(where), load, text(m.Treatment), text(m.Description))
	}
}
