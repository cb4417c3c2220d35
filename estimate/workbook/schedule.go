package workbook

import (
	"slices"
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
		if !slices.Contains(reasons[mark], reason) {
			reasons[mark] = append(reasons[mark], reason)
		}
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

// governing is the check with the highest utilisation.
func governing(m document.Member) (document.Check, bool) {
	for _, c := range m.Checks {
		if c.ID == m.Governing {
			return c, true
		}
	}
	return document.Check{}, false
}

// measures writes named values in one text.
func measures(list []document.Measure) string {
	texts := make([]string, len(list))
	for i, m := range list {
		texts[i] = strings.TrimSpace(m.Symbol + " = " + plainNumber(m.Value) + " " + m.Unit)
	}
	return strings.Join(texts, "; ")
}

// schedule writes the members with what their rows state and their sizing, under
// the caution. Net mass is that of the row, load that of one piece; the split
// method is compared with the exact envelope by its lowest ratio.
func (b *book) schedule() {
	b.Sheet(scheduleSheet, sheet.Column{Head: "mark", Width: 9}, sheet.Column{Head: "group", Width: 13}, sheet.Column{Head: "kind", Width: 9},
		sheet.Column{Head: "no.", Width: 5}, sheet.Column{Head: "length, m", Width: 10}, sheet.Column{Head: "arrangement", Width: 13},
		sheet.Column{Head: "section", Width: 14}, sheet.Column{Head: "grade", Width: 7}, sheet.Column{Head: "kg/m", Width: 8},
		sheet.Column{Head: "net, kg", Width: 10}, sheet.Column{Head: "governing check", Width: 16},
		sheet.Column{Head: "utilisation", Width: 11}, sheet.Column{Head: "unsafe", Width: 16},
		sheet.Column{Head: "what the row states", Width: 30}, sheet.Column{Head: "clause of the check", Width: 34},
		sheet.Column{Head: "split/exact", Width: 11}, sheet.Column{Head: "lowest for", Width: 16},
		sheet.Column{Head: "load, kN", Width: 9}, sheet.Column{Head: "treatment", Width: 10},
		sheet.Column{Head: "description", Width: 16})
	b.Row(text(b.doc.Caution).Total())
	marks := unsafeMembers(b.doc)
	for _, m := range b.doc.Members {
		b.member(m, marks[m.Mark])
	}
}

func (b *book) member(m document.Member, mark string) {
	ratio, where := sheet.Blank(), ""
	if r, ok := worstRatio(m); ok {
		ratio, where = number(r.Ratio, factor), strings.Trim(r.Effect+", "+r.Where, ", ")
	}
	utilisation, load := sheet.Blank(), sheet.Blank()
	if m.Section != "" {
		utilisation, load = number(m.Utilisation, factor), number(m.TotalLoad, oneDigit)
	}
	clause := ""
	if c, ok := governing(m); ok {
		clause = c.Clause
	}
	b.Row(text(m.Mark), wrapped(m.Group), text(m.Kind), whole(m.Quantity), number(m.Length, length), wrapped(m.Arrangement),
		wrapped(m.Section), text(m.Grade), given(m.LineMass, oneDigit), number(m.Net, oneDigit), wrapped(m.Governing),
		utilisation, wrapped(mark), wrapped(measures(m.Inputs)), wrapped(clause), ratio, wrapped(where), load, text(m.Treatment), wrapped(m.Description))
}
