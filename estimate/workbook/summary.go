package workbook

import (
	"fmt"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// summary writes the first sheet: the caution, the figures of the first line,
// and what they stand on.
func (b *book) summary() {
	b.Sheet(summarySheet, sheet.Column{Width: 30}, sheet.Column{Width: 22}, sheet.Column{Width: 2}, sheet.Column{Width: 92})
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
	basis := ""
	if j.Factor != 0 {
		basis = "factor on yield " + plainNumber(j.Factor)
	}
	b.pair("design basis", text(j.DesignBasis), basis)
	b.pair("currency", text(j.Currency), "")
	b.pair("base date", day(j.BaseDate), j.Money)
	if j.SpendDate != "" {
		b.pair("spend date", day(j.SpendDate), "")
	}
	for _, x := range [][2]string{{"coating", j.Coating}, {"execution class", j.ExecutionClass}, {"purchase", j.Purchase},
		{"stock lengths", j.StockLengths}, {"site conditions", strings.Join(j.SiteConditions, ", ")}} {
		if x[1] != "" {
			b.pair(x[0], text(x[1]), "")
		}
	}
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

// summaryMoney writes the totals with the names that other workbooks use. The base
// is live; the range and what follows from it stay those of the base as priced.
func (b *book) summaryMoney() {
	t, r := b.doc.Totals, b.doc.Range
	b.part("cost, " + b.currency.Code)
	expr := fmt.Sprintf("%s!%s%d", linesSheet, b.amountColumn(), b.lastRow()+1)
	base := b.pair("base estimate", sheet.Formula(expr, t.Base.String(), b.money).Total(), "live: sum of the lines at likely values, without contingency")
	priced := b.pair("base as priced by the service", b.amount(t.Base), "does not follow a change in this workbook")
	difference := b.pair("difference", sheet.Formula(b.rounded(fmt.Sprintf("B%d-B%d", base, priced)), "0", differenceFormat(b.currency.MinorDigits)).Total(),
		"where it is not 0, the figures below are those of another base: price the change by the service")
	at := b.pair("at the chosen confidence", b.amount(t.AtConfidence), "not exceeded with that probability; from the simulation, it does not follow a change")
	expr = b.rounded(fmt.Sprintf("B%d-B%d", at, priced))
	contingency := b.pair("contingency", sheet.Formula(expr, t.Contingency.String(), b.money).Total(), "at the chosen confidence minus the base as priced; may be negative")
	b.nameCells(map[string]int{NameBase: base, NameBaseAsPriced: priced, NameBaseDifference: difference, NameAtConfidence: at, NameContingency: contingency})
	b.pair("chosen confidence", number(t.Confidence, sheet.Percent), "")
	b.pair("the base lies at", number(r.BaseAt, sheet.Percent), "probability that the base as priced is not exceeded")
	if !t.Reserve.IsZero() {
		b.pair("management reserve", b.amount(t.Reserve), "outside the range, held by who approves")
	}
	if !t.Tax.IsZero() {
		b.pair("tax", b.amount(t.Tax), "on the cost at the confidence; in no other figure")
	}
	for _, p := range r.Percentiles {
		row := b.pair(percentileLabel(p.P), number(p.Value, b.money), "standard error "+strconv.FormatFloat(p.SE.Rounded(), 'f', b.currency.MinorDigits, 64))
		b.Name(percentileName(p.P), summarySheet, fmt.Sprint("B", row))
	}
	b.pair("mean", number(r.Mean, b.money), "standard error "+strconv.FormatFloat(r.MeanSE.Rounded(), 'f', b.currency.MinorDigits, 64))
	b.pair("standard deviation", number(r.SD, b.money), "")
	for _, w := range r.Warnings {
		b.explain("warning", w)
	}
	sheets := []string{allowancesSheet, takeoffSheet, ratesSheet, multipliersSheet}
	if len(b.conversion) > 0 {
		sheets = append(sheets, conversionsSheet)
	}
	if b.doc.Carbon != nil {
		sheets = append(sheets, factorsSheet)
	}
	b.explain("to change", "coloured cells on "+strings.Join(sheets, ", ")+"; each has a name, most are named there")
	b.explain("as priced", "sections, measured quantities, cutting plan, price breaks, minimum orders and charges: they are not chosen again here")
}

// nameCells names cells of column B of the sheet Summary.
func (b *book) nameCells(rows map[string]int) {
	for _, name := range sortedKeys(rows) {
		b.Name(name, summarySheet, fmt.Sprint("B", rows[name]))
	}
}

// differenceFormat says in words whether the base has moved.
func differenceFormat(minor int) sheet.NumberFormat {
	d := digits(minor)
	return `"CHANGED by +"` + d + gap + `;"CHANGED by -"` + d + gap + `;"none"` + gap
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
	var sums [3]money.Decimal
	for _, m := range b.massesOfGroups() {
		for i := range sums {
			sums[i] = sums[i].Add(m[i])
		}
	}
	tonnage := func(column int, m money.Decimal) sheet.Value {
		if !m.Equal(sums[column]) || len(b.doc.Items) == 0 {
			return exactly(m, mass)
		}
		return sheet.Formula(fmt.Sprintf("%s!%s%d", itemsSheet, sheet.Letters(2+column), firstRow+len(b.doc.Items)), m.String(), mass)
	}
	b.part("tonnage")
	b.pair("net, t", tonnage(0, t.Net), "drawn mass at nominal kg/m")
	b.pair("delivered, t", tonnage(1, t.Delivered), "net with connections, bolts and growth")
	b.pair("purchased, t", tonnage(2, t.Purchased), "delivered less bolts, with waste or from the cutting plan")
	b.pair("members", whole(t.Members), "")
	b.pair("pieces", whole(t.Pieces), "")
	if c := b.doc.Carbon; c != nil {
		b.pair("embodied carbon, kg CO₂e", sheet.Formula(fmt.Sprintf("%s!%s%d", carbonSheet, carbonAmount, firstRow+len(c.Lines)), c.Total.String(), count), "modules A1 to A5 as listed on the sheet "+carbonSheet)
	}
}

func (b *book) summaryOrigin() {
	j := b.doc.Job
	b.part("where it comes from")
	b.pair("schedule", text(j.Source), "SHA-256 "+j.SourceSHA256)
	b.pair("rate book", text(j.RateBook), "SHA-256 "+j.RateBookSHA256)
	b.explain("", j.RateBookNote)
	if j.ReferencePrice != "" {
		b.pair("reference price", text(j.ReferencePrice), b.currency.Code+" per delivered tonne, frozen")
	}
	b.pair("engine version", whole(b.doc.EngineVersion), "")
	b.pair("replicates × trials", text(fmt.Sprintf("%d × %d", j.Replicates, j.Trials)), "seed "+strconv.FormatUint(j.Seed, 10))
	b.pair("estimate document", text("SHA-256"), b.sha256)
	b.pair("frozen job", text("SHA-256"), j.JobSHA256)
	b.pair("catalogue", text("SHA-256"), j.CatalogueSHA256)
	b.pair("grades", text("SHA-256"), j.GradesSHA256)
}
