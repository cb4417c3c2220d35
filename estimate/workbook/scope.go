package workbook

import (
	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// findings writes the doubts that travel with the figures.
func (b *book) findings() {
	b.Sheet(findingsSheet, sheet.Column{Head: "severity", Width: 11}, sheet.Column{Head: "code", Width: 20}, sheet.Column{Head: "subject", Width: 20},
		sheet.Column{Head: "figures in doubt", Width: 28}, sheet.Column{Head: "message", Width: 80})
	for _, f := range b.doc.Findings {
		severity := text(string(f.Severity))
		if f.Severity == document.Unsafe {
			severity = text(unsafeMark).Total()
		}
		b.Row(severity, text(f.Code), wrapped(f.Subject), wrapped(listed(f.Figures)), wrapped(f.Message))
	}
	if len(b.doc.Findings) == 0 {
		b.Row(text("none"))
	}
}

// scope writes what is in the price, what is not, and the notes.
func (b *book) scope() {
	b.Sheet(scopeSheet, sheet.Column{Head: "what", Width: 14}, sheet.Column{Head: "statement", Width: 110})
	for _, list := range []struct {
		what  string
		texts []string
	}{{"included", b.doc.Inclusions}, {"excluded", b.doc.Exclusions}, {"note", b.doc.Notes}} {
		for _, s := range list.texts {
			b.Row(text(list.what), wrapped(s))
		}
	}
}
