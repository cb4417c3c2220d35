package workbook

import (
	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// heading writes the heads of a further table on a sheet.
func (b *book) heading(texts ...string) {
	cells := make([]sheet.Value, len(texts))
	for i, s := range texts {
		cells[i] = text(s).Head()
	}
	b.Row()
	b.Row(cells...)
}

// ranges writes the percentiles, the sensitivities, the discrete risks and the
// cumulative curve: values of the simulation, none of them live.
func (b *book) ranges() {
	r := b.doc.Range
	b.Sheet(rangeSheet, sheet.Column{Head: "probability", Width: 34}, sheet.Column{Head: "total, " + b.currency.Code, Width: 18},
		sheet.Column{Head: "standard error", Width: 16}, sheet.Column{Head: "contingency, " + b.currency.Code, Width: 18},
		sheet.Column{Width: 13}, sheet.Column{Width: 28})
	for _, p := range r.Percentiles {
		b.Row(number(p.P, sheet.Percent), number(p.Value, b.money), number(p.SE, b.money), b.amount(p.Contingency))
	}
	b.Row(text("mean"), number(r.Mean, b.money), number(r.MeanSE, b.money))
	b.Row(text("standard deviation"), number(r.SD, b.money))
	b.hint(fromSimulation)
	b.say("On the sheet " + summarySheet + " stands whether the base has moved.")
	b.say(r.Method)
	for _, w := range r.Warnings {
		b.say("warning: " + w)
	}
	b.sensitivities()
	b.risks()
	b.heading("cumulative curve", "total, "+b.currency.Code)
	for i, v := range r.Curve {
		p := document.Number(float64(i) / float64(max(1, len(r.Curve)-1)))
		b.Row(number(p, sheet.Percent), number(v, b.money))
	}
}

func (b *book) sensitivities() {
	if len(b.doc.Range.Sensitivities) == 0 {
		return
	}
	b.heading("sensitivity to", "narrowing", "share of variance", "swing of the mean")
	for _, s := range b.doc.Range.Sensitivities {
		b.Row(wrapped(s.Assumption), number(s.Narrowing, b.money), number(s.Share, percent), number(s.Swing, b.money))
	}
	b.say(b.doc.Range.SensitivityMethod)
}

func (b *book) risks() {
	if len(b.doc.Range.Risks) == 0 {
		return
	}
	b.heading("discrete risk", "mean cost", "share of variance", "contingency, "+b.currency.Code, "probability", "register entry")
	for _, r := range b.doc.Range.Risks {
		b.Row(wrapped(r.Name), number(r.Mean, b.money), number(r.Share, percent), b.amount(r.Contingency), number(r.Probability, sheet.Percent), text(r.Assumption))
	}
}

// class writes the estimate class, what it rests on, and how the band compares
// with published ones.
func (b *book) class() {
	c := b.doc.Class
	if c.Stated == 0 {
		return
	}
	b.Sheet(classSheet, sheet.Column{Head: "estimate class", Width: 34}, sheet.Column{Head: "", Width: 16}, sheet.Column{Head: "", Width: 14},
		sheet.Column{Head: "", Width: 14}, sheet.Column{Head: "", Width: 14}, sheet.Column{Head: "", Width: 44})
	b.Row(text("stated"), whole(c.Stated))
	if c.Suggested != 0 {
		b.Row(text("suggested by the checklist"), whole(c.Suggested))
	}
	b.Row(text("P10 over P50, minus 1"), number(c.Low, percent))
	b.Row(text("P90 over P50, minus 1"), number(c.High, percent))
	b.say(c.Why)
	b.say("The class never follows from the band. The band is from the simulation; it does not follow a change in this workbook.")
	if len(c.Definition) > 0 {
		b.heading("what is defined", "state")
		for _, d := range c.Definition {
			b.Row(wrapped(d.Item), text(d.State))
		}
	}
	if len(c.Typical) > 0 {
		b.heading("typical of the class", "low from", "low to", "high from", "high to", "source")
		for _, t := range c.Typical {
			b.Row(text(t.Industry), number(t.LowFrom, percent), number(t.LowTo, percent), number(t.HighFrom, percent), number(t.HighTo, percent), wrapped(t.Source))
		}
	}
}
