package workbook

import (
	"fmt"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
)

// summary writes the first sheet: the caution, the figures of the first line,
// and what they stand on.
func (b *book) summary() {
	b.Sheet(summarySheet, sheet.Column{Width: 30}, sheet.Column{Width: 22}, sheet.Column{Width: 2}, sheet.Column{Width: 84})
	b.banner(b.doc.Caution)
	if n := b.doc.Totals.Unsafe; n > 0 {
		b.banner(unsafeBanner(n) + "; see the sheet " + findingsSheet + " before you use a figure.")
	}
	b.Row()
	b.summaryJob()
	b.Row()
	b.summaryMoney()
	b.Row()
	b.summaryMass()
	b.Row()
	b.summaryOrigin()
}

// banner writes a bold sentence across the sheet.
func (b *book) banner(s string) {
	rule := sheet.Blank().Total()
	b.Row(text(s).Total(), rule, rule, rule)
}

// part writes the head of a part of the sheet.
func (b *book) part(s string) {
	fill := sheet.Blank().Head()
	b.Row(text(s).Head(), fill, fill, fill)
}

// pair writes a label, its value and an explanation.
func (b *book) pair(label string, v sheet.Value, note string) int {
	if note == "" {
		return b.Row(text(label), v)
	}
	return b.Row(text(label), v, sheet.Blank(), text(note))
}

func (b *book) summaryJob() {
	j := b.doc.Job
	b.part("estimate")
	b.pair("project", text(j.Project), "")
	b.pair("scheme", text(j.Scheme), "")
	b.pair("estimate class", whole(j.EstimateClass), "5 to 1, by maturity of definition (ASTM E2516)")
	b.pair("design basis", text(j.DesignBasis), "factor on yield "+strconv.FormatFloat(j.Factor.Rounded(), 'f', -1, 64))
	b.pair("currency", text(j.Currency), "")
	b.pair("base date", day(j.BaseDate), "")
	b.pair("money", text(j.Money), "")
	b.pair("unsafe findings", whole(b.doc.Totals.Unsafe), "")
	b.pair("findings in all", whole(len(b.doc.Findings)), "")
}

// day is a date cell, or the text where it is none.
func day(s string) sheet.Value {
	if t, err := time.Parse(time.DateOnly, s); err == nil && t.Year() >= 1900 {
		return sheet.DateOf(t)
	}
	return text(s)
}

// summaryMoney writes the totals with the names that other workbooks use.
func (b *book) summaryMoney() {
	t, r := b.doc.Totals, b.doc.Range
	b.part("cost, " + b.currency.Code)
	expr := fmt.Sprintf("%s!%s%d", linesSheet, b.amountColumn(), b.lastRow()+1)
	base := b.pair("base estimate", sheet.Formula(expr, t.Base.String(), b.money).Total(), "sum of the lines at likely values, without contingency")
	at := b.pair("at the chosen confidence", b.amount(t.AtConfidence), "not exceeded with that probability; from the simulation, it does not recalculate")
	expr = b.rounded(fmt.Sprintf("B%d-B%d", at, base))
	contingency := b.pair("contingency", sheet.Formula(expr, t.Contingency.String(), b.money).Total(), "at the chosen confidence minus base; may be negative")
	b.pair("chosen confidence", number(t.Confidence, sheet.Percent), "")
	b.pair("the base lies at", number(r.BaseAt, sheet.Percent), "probability that the base is not exceeded")
	b.Name(NameBase, summarySheet, fmt.Sprint("B", base))
	b.Name(NameAtConfidence, summarySheet, fmt.Sprint("B", at))
	b.Name(NameContingency, summarySheet, fmt.Sprint("B", contingency))
	for _, p := range r.Percentiles {
		row := b.pair(percentileLabel(p.P), number(p.Value, b.money), "standard error "+strconv.FormatFloat(p.SE.Rounded(), 'f', b.currency.MinorDigits, 64))
		b.Name(percentileName(p.P), summarySheet, fmt.Sprint("B", row))
	}
	b.pair("mean", number(r.Mean, b.money), "standard error "+strconv.FormatFloat(r.MeanSE.Rounded(), 'f', b.currency.MinorDigits, 64))
	b.pair("standard deviation", number(r.SD, b.money), "")
	for _, w := range r.Warnings {
		b.pair("warning", sheet.Blank(), w)
	}
}

// percentileLabel is P80 for 0.8.
func percentileLabel(p document.Number) string {
	return "P" + strconv.FormatFloat(document.Number(100*p).Rounded(), 'f', -1, 64)
}

// percentileName is percentile_80 for 0.8, percentile_97_5 for 0.975.
func percentileName(p document.Number) string {
	return namePercentile + strings.ReplaceAll(strings.TrimPrefix(percentileLabel(p), "P"), ".", "_")
}

func (b *book) summaryMass() {
	t := b.doc.Totals
	b.part("tonnage")
	b.pair("net, t", sheet.NumberOf(t.Net.String(), mass), "drawn mass at nominal kg/m")
	b.pair("delivered, t", sheet.NumberOf(t.Delivered.String(), mass), "net with connections, bolts and growth")
	b.pair("purchased, t", sheet.NumberOf(t.Purchased.String(), mass), "delivered less bolts, with waste")
	b.pair("members", whole(t.Members), "")
	b.pair("pieces", whole(t.Pieces), "")
}

func (b *book) summaryOrigin() {
	j := b.doc.Job
	b.part("where it comes from")
	b.pair("schedule", text(j.Source), "SHA-256 "+j.SourceSHA256)
	b.pair("rate book", text(j.RateBook), "SHA-256 "+j.RateBookSHA256)
	b.pair("", sheet.Blank(), j.RateBookNote)
	b.pair("reference price", text(j.ReferencePrice), b.currency.Code+" per delivered tonne, frozen")
	b.pair("engine version", whole(b.doc.EngineVersion), "")
	b.pair("replicates × trials", text(fmt.Sprintf("%d × %d", j.Replicates, j.Trials)), "seed "+strconv.FormatUint(j.Seed, 10))
	b.pair("estimate document", text("SHA-256"), b.sha256)
	b.pair("frozen job", text("SHA-256"), j.JobSHA256)
	b.pair("catalogue", text("SHA-256"), j.CatalogueSHA256)
	b.pair("grades", text("SHA-256"), j.GradesSHA256)
}
