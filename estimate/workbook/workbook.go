// Package workbook writes an estimate document for people who work in
// spreadsheets or on a terminal.
//
//	Document → book: every input once (allowances, prices, multipliers, carbon
//	    factors), its cell and its name; where each quantity and line will stand
//	         → verified: each formula gives the document's figure
//	         → sheets → XLSX bytes, live from the inputs to the base
//	Document → CSV (the lines), Table (plain text)
//
// A document whose lines do not compute to its own amounts is refused, because
// the recalculated workbook would show another total than the estimate.
//
// # Names of cells
//
// Formulas and other workbooks may rely on these: base, base_as_priced,
// base_difference, at_confidence, contingency, percentile_10 (P10 itself is the
// address of a cell), and for each input its id in the register in small letters,
// with _ for whatever is no letter or digit: allowance_…, multiplier_…, carbon_….
// A price is named by its part and its rate (price_shop_labour), what several
// rates share by its part and register entry (exchange_usd), the price that a
// line takes by its rate (rate_shop_labour). Two that would have one name are
// told apart by _2, _3 in the order of their ids.
package workbook

import (
	"fmt"
	"strconv"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// Names of single cells.
const (
	NameBase           = "base"
	NameBaseAsPriced   = "base_as_priced"
	NameBaseDifference = "base_difference"
	NameContingency    = "contingency"
	NameAtConfidence   = "at_confidence"
	namePercentile     = "percentile_"
)

// Names of the sheets, in their order. Those of a part that a document lacks are
// left out.
const (
	summarySheet     = "Summary"
	scheduleSheet    = "Schedule"
	itemsSheet       = "Items"
	takeoffSheet     = "Take-off"
	allowancesSheet  = "Allowances"
	ratesSheet       = "Rates"
	conversionsSheet = "Conversions"
	multipliersSheet = "Multipliers"
	linesSheet       = "Lines"
	partSumsSheet    = "Part sums"
	categoriesSheet  = "Categories"
	groupsSheet      = "Groups"
	rangeSheet       = "Range"
	classSheet       = "Class"
	carbonSheet      = "Carbon"
	factorsSheet     = "Carbon factors"
	shippingSheet    = "Shipping"
	cuttingSheet     = "Cutting"
	assumptionsSheet = "Assumptions"
	findingsSheet    = "Findings"
	scopeSheet       = "Scope"
	traceSheet       = "Trace"
)

// book is a workbook on its way: the document with what several sheets must
// know of each other.
type book struct {
	*sheet.Builder
	doc      document.Document
	sha256   string // of the document's canonical bytes
	currency money.Currency
	money    sheet.NumberFormat
	inputs
	quantities map[string]int // row on Take-off, by quantityKey
	counted    []counted      // the rows of Take-off
	factors    int            // most factors of a quantity
	shapes     []lineShape    // the document's lines: how each is rounded and where its quantity comes from
	lineRows   map[string]int // row on Lines, by id of the line
	partSums   []partSum      // of sums too long for one formula
	carbonAt   []int          // per carbon line: decimals of the inner rounding
}

// XLSX returns the workbook of a document. The bytes depend on the document
// alone. It refuses a document in an unknown currency, with a figure that is no
// number or an amount that needs more than 15 significant digits, or whose
// quantities, lines, categories and base do not agree.
func XLSX(d document.Document) ([]byte, error) {
	b, err := newBook(d)
	if err != nil {
		return nil, fmt.Errorf("writing the workbook: %w", err)
	}
	b.Builder = sheet.NewBuilder()
	for _, write := range []func(){
		b.summary, b.schedule, b.items, b.takeoff, b.allowances, b.rates, b.conversions, b.multipliers,
		b.lines, b.sums, b.categories, b.groups, b.ranges, b.class, b.carbon, b.carbonFactors, b.shipping,
		b.cutting, b.assumptions, b.findings, b.scope, b.trace,
	} {
		write()
	}
	return b.Bytes()
}

// firstLive is the engine version from which on documents state what live formulas
// need.
const firstLive = 2

func newBook(d document.Document) (*book, error) {
	if d.EngineVersion < firstLive {
		return nil, document.ErrEarlier
	}
	_, sum, err := d.Canonical()
	if err != nil {
		return nil, err
	}
	currency, err := money.FindCurrency(d.Job.Currency)
	if err != nil {
		return nil, err
	}
	b := &book{doc: d, sha256: sum, currency: currency, money: moneyFormat(currency.MinorDigits), inputs: gather(d)}
	for _, step := range []func() error{b.countAll, b.priceAll, b.checkTotals, b.checkCarbon} {
		if err := step(); err != nil {
			return nil, err
		}
	}
	return b, nil
}

// Formats of this workbook: each ends with a space as wide as a bracket, so that
// a figure does not touch the text in the next column.
const (
	gap      sheet.NumberFormat = "_)"
	mass                        = sheet.Mass + gap
	factor                      = sheet.Factor + gap
	oneDigit                    = sheet.OneDigit + gap
	length   sheet.NumberFormat = "#,##0.00" + gap
	count                       = sheet.Whole + gap
	free     sheet.NumberFormat = "#,##0.######" + gap // a price or a quantity of any driver
	percent                     = sheet.Percent + gap
)

// moneyFormat shows an amount with a number of decimals.
func moneyFormat(places int) sheet.NumberFormat { return digits(places) + gap }

func digits(places int) sheet.NumberFormat {
	f := sheet.Whole
	for i := range places {
		if i == 0 {
			f += "."
		}
		f += "0"
	}
	return f
}

// number is a figure of the document as a workbook cell.
func number(n document.Number, format sheet.NumberFormat) sheet.Value {
	return sheet.NumberOf(plainNumber(n), format)
}

// plainNumber is a figure as it is printed, without an exponent.
func plainNumber(n document.Number) string { return strconv.FormatFloat(n.Rounded(), 'f', -1, 64) }

// given is a figure that 0 means the absence of.
func given(n document.Number, format sheet.NumberFormat) sheet.Value {
	if n == 0 {
		return sheet.Blank()
	}
	return number(n, format)
}

// whole is a count as a workbook cell.
func whole(n int) sheet.Value { return sheet.NumberOf(strconv.Itoa(n), count) }

// exactly is a decimal as a workbook cell.
func exactly(d money.Decimal, format sheet.NumberFormat) sheet.Value {
	return sheet.NumberOf(d.String(), format)
}

// amount is a sum of money as a workbook cell.
func (b *book) amount(d money.Decimal) sheet.Value { return exactly(d, b.money) }

// rounded wraps a formula in a rounding to the minor unit, which takes off the
// noise of binary addition.
func (b *book) rounded(expr string) string { return round(expr, b.currency.MinorDigits) }

func round(expr string, places int) string { return fmt.Sprintf("ROUND(%s,%d)", expr, places) }

// wrapped is a text that breaks into lines within its column.
func wrapped(s string) sheet.Value { return text(s).Wrap() }

// text is a text cell, cut where it is longer than a cell may be.
func text(s string) sheet.Value {
	const longest = 32_000
	if len(s) > longest {
		cut := longest
		for s[cut]&0xC0 == 0x80 { // never inside a character
			cut--
		}
		s = s[:cut] + " …"
	}
	return sheet.TextOf(s)
}
