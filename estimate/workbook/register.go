package workbook

import (
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// ranges writes the percentiles and the cumulative curve: the probability that
// the total is not exceeded, and the total.
func (b *book) ranges() {
	b.Sheet(rangeSheet, sheet.Column{Head: "probability", Width: 20}, sheet.Column{Head: "total, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "standard error", Width: 16})
	for _, p := range b.doc.Range.Percentiles {
		b.Row(number(p.P, sheet.Percent), number(p.Value, b.money), number(p.SE, b.money))
	}
	b.Row(text("mean"), number(b.doc.Range.Mean, b.money), number(b.doc.Range.MeanSE, b.money))
	b.Row(text("standard deviation"), number(b.doc.Range.SD, b.money))
	b.Row()
	b.Row(text("cumulative curve").Head(), sheet.Blank().Head(), sheet.Blank().Head())
	for i, v := range b.doc.Range.Curve {
		p := document.Number(float64(i) / float64(max(1, len(b.doc.Range.Curve)-1)))
		b.Row(number(p, sheet.Percent), number(v, b.money))
	}
	b.Row()
	b.Row(text(b.doc.Range.Method))
	for _, w := range b.doc.Range.Warnings {
		b.Row(text("warning: " + w))
	}
}

// assumptions writes the register.
func (b *book) assumptions() {
	b.Sheet(assumptionsSheet, sheet.Column{Head: "id", Width: 30}, sheet.Column{Head: "kind", Width: 11}, sheet.Column{Head: "statement", Width: 66},
		sheet.Column{Head: "value", Width: 14}, sheet.Column{Head: "unit", Width: 9}, sheet.Column{Head: "distribution", Width: 12},
		sheet.Column{Head: "low", Width: 10}, sheet.Column{Head: "likely", Width: 10}, sheet.Column{Head: "high", Width: 10},
		sheet.Column{Head: "low, high", Width: 10}, sheet.Column{Head: "correlation", Width: 12},
		sheet.Column{Head: "scope", Width: 18}, sheet.Column{Head: "source", Width: 26}, sheet.Column{Head: "clause", Width: 15},
		sheet.Column{Head: "owner", Width: 14}, sheet.Column{Head: "confidence", Width: 11}, sheet.Column{Head: "feeds", Width: 26})
	for _, e := range b.doc.Assumptions {
		cells := []sheet.Value{text(e.ID), text(string(e.Kind)), text(e.Statement), text(e.Value), text(e.Unit)}
		cells = append(cells, spreadCells(e.Spread)...)
		cells = append(cells, text(e.Group), text(strings.TrimSpace(e.Scope+" "+e.Subject)), text(e.Source), text(e.Clause),
			text(e.Owner), text(string(e.Confidence)), text(strings.Join(e.Feeds, "; ")))
		b.Row(cells...)
	}
}

// spreadCells are distribution, low, likely, high, and what low and high are.
// What the distribution does not use stays blank.
func spreadCells(s *spread.Spread) []sheet.Value {
	cells := make([]sheet.Value, 5)
	if s == nil {
		return cells
	}
	cells[0] = text(string(s.Distribution))
	if s.Likely != 0 || s.Distribution != spread.Uniform && s.Distribution != spread.Lognormal {
		cells[2] = number(document.Number(s.Likely), sheet.General)
	}
	if s.Distribution == spread.Fixed {
		return cells
	}
	bounds := s.Bounds
	switch {
	case s.Distribution == spread.Lognormal:
		bounds = spread.BoundsPercentiles
	case bounds == "":
		bounds = spread.BoundsLimits
	}
	cells[1], cells[3], cells[4] = number(document.Number(s.Low), sheet.General), number(document.Number(s.High), sheet.General), text(bounds)
	return cells
}

// findings writes the doubts that travel with the figures.
func (b *book) findings() {
	b.Sheet(findingsSheet, sheet.Column{Head: "severity", Width: 11}, sheet.Column{Head: "code", Width: 20}, sheet.Column{Head: "subject", Width: 20},
		sheet.Column{Head: "figures in doubt", Width: 34}, sheet.Column{Head: "message", Width: 120})
	for _, f := range b.doc.Findings {
		severity := text(string(f.Severity))
		if f.Severity == document.Unsafe {
			severity = text(unsafeMark).Total()
		}
		b.Row(severity, text(f.Code), text(f.Subject), text(strings.Join(f.Figures, "; ")), text(f.Message))
	}
	if len(b.doc.Findings) == 0 {
		b.Row(text("none"))
	}
}

// scope writes what is in the price, what is not, and the notes.
func (b *book) scope() {
	b.Sheet(scopeSheet, sheet.Column{Head: "what", Width: 14}, sheet.Column{Head: "statement", Width: 130})
	for _, list := range []struct {
		what  string
		texts []string
	}{{"included", b.doc.Inclusions}, {"excluded", b.doc.Exclusions}, {"note", b.doc.Notes}} {
		for _, s := range list.texts {
			b.Row(text(list.what), text(s))
		}
	}
}
