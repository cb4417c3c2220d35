// Package workbook writes an estimate document for people who work in
// spreadsheets or on a terminal.
//
//	Document → book (where each line and total will stand) → sheets → XLSX bytes
//	each line: quantity, rate, multipliers as numbers, amount as a live formula
//	    with the document's amount as its cached value
//	Document → CSV (the lines), Table (plain text)
//
// A document whose lines do not compute to its own amounts is refused, because
// the recalculated workbook would show another total than the estimate.
package workbook

import (
	"fmt"
	"strconv"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// Names of the cells that other workbooks and scripts may rely on. A percentile
// is named percentile_10 and so on, because P10 is the address of a cell.
const (
	NameBase         = "base"
	NameContingency  = "contingency"
	NameAtConfidence = "at_confidence"
	namePercentile   = "percentile_"
)

// Names of the sheets, in their order.
const (
	summarySheet     = "Summary"
	linesSheet       = "Lines"
	categoriesSheet  = "Categories"
	groupsSheet      = "Groups"
	takeoffSheet     = "Take-off"
	membersSheet     = "Members"
	rangeSheet       = "Range"
	assumptionsSheet = "Assumptions"
	findingsSheet    = "Findings"
	scopeSheet       = "Inclusions and exclusions"
)

// book is a workbook on its way: the document with what several sheets must
// know of each other.
type book struct {
	*sheet.Builder
	doc      document.Document
	sha256   string // of the document's canonical bytes
	currency money.Currency
	money    sheet.NumberFormat
	width    int   // number of multiplier columns on the sheet Lines
	inner    []int // per line: places of the inner rounding
}

// XLSX returns the workbook of a document. The bytes depend on the document
// alone. It refuses a document in an unknown currency, with a figure that is no
// number or has more than 15 significant digits, or whose lines, categories and
// base do not agree.
func XLSX(d document.Document) ([]byte, error) {
	b, err := newBook(d)
	if err != nil {
		return nil, fmt.Errorf("writing the workbook: %w", err)
	}
	b.Builder = sheet.NewBuilder()
	b.summary()
	b.lines()
	b.categories()
	b.groups()
	b.takeoff()
	b.members()
	b.ranges()
	b.assumptions()
	b.findings()
	b.scope()
	return b.Bytes()
}

func newBook(d document.Document) (*book, error) {
	_, sum, err := d.Canonical()
	if err != nil {
		return nil, err
	}
	currency, err := money.FindCurrency(d.Job.Currency)
	if err != nil {
		return nil, err
	}
	b := &book{doc: d, sha256: sum, currency: currency, money: moneyFormat(currency), width: mostMultipliers(d)}
	if err := b.check(); err != nil {
		return nil, err
	}
	return b, nil
}

// mostMultipliers is the largest number of multipliers on a line.
func mostMultipliers(d document.Document) int {
	most := 0
	for _, l := range d.Lines {
		most = max(most, len(l.Multipliers))
	}
	return most
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
)

// moneyFormat shows an amount with the decimals of the currency's minor unit.
func moneyFormat(c money.Currency) sheet.NumberFormat {
	f := "#,##0"
	for i := range c.MinorDigits {
		if i == 0 {
			f += "."
		}
		f += "0"
	}
	return sheet.NumberFormat(f) + gap
}

// check proves that the formulas will give the document's amounts, and finds the
// rounding that each line needs.
func (b *book) check() error {
	total := money.Zero
	byCategory := map[string]money.Decimal{}
	for _, l := range b.doc.Lines {
		places, err := innerPlaces(l, b.currency)
		if err != nil {
			return err
		}
		b.inner = append(b.inner, places)
		total = total.Add(l.Amount)
		byCategory[l.Category] = byCategory[l.Category].Add(l.Amount)
	}
	if !total.Equal(b.doc.Totals.Base) {
		return fmt.Errorf("the lines add up to %s, the document's base is %s", total, b.doc.Totals.Base)
	}
	sum := money.Zero
	for _, c := range b.doc.Categories {
		if !byCategory[c.Category].Equal(c.Amount) {
			return fmt.Errorf("the lines of category %q add up to %s, the document says %s", c.Category, byCategory[c.Category], c.Amount)
		}
		sum = sum.Add(c.Amount)
	}
	if !sum.Equal(total) {
		return fmt.Errorf("the categories add up to %s, the document's base is %s", sum, total)
	}
	return nil
}

// linePlaces is the usual rounding of a product before it is rounded to the
// minor unit. It takes off the noise of binary multiplication, which would turn
// a tie such as 1.005 into 1.00499999….
const linePlaces = 8

// innerPlaces returns the decimals to which the product of a line is rounded
// first: 8, fewer where a large product leaves no more within the 15 digits of a
// spreadsheet's numbers, and all of the product's own where its ninth decimal
// decides. It is an error when no rounding gives the document's amount.
func innerPlaces(l document.Line, c money.Currency) (int, error) {
	factors := []money.Decimal{l.Quantity, l.Rate}
	for _, m := range l.Multipliers {
		factors = append(factors, m.Value)
	}
	product, err := money.Product(factors...)
	if err != nil {
		return 0, fmt.Errorf("%s: %w", l.ID, err)
	}
	usual := max(0, min(linePlaces, money.WorkbookDigits-wholeDigits(product)))
	for _, places := range []int{usual, decimals(product)} {
		if c.Round(product.Round(places)).Equal(l.Amount) {
			return places, nil
		}
	}
	return 0, fmt.Errorf("%s: quantity × rate × multipliers is %s, the document says %s", l.ID, product, l.Amount)
}

// wholeDigits is the number of digits before the point.
func wholeDigits(d money.Decimal) int {
	if d.Sign() < 0 {
		d = d.Neg()
	}
	whole, _, _ := cutPoint(d)
	if whole == "0" {
		return 0
	}
	return len(whole)
}

// decimals is the number of decimals without trailing zeros.
func decimals(d money.Decimal) int {
	_, fraction, _ := cutPoint(d)
	return len(fraction)
}

// number is a figure of the document as a workbook cell.
func number(n document.Number, format sheet.NumberFormat) sheet.Value {
	return sheet.NumberOf(strconv.FormatFloat(n.Rounded(), 'f', -1, 64), format)
}

// whole is a count as a workbook cell.
func whole(n int) sheet.Value { return sheet.NumberOf(strconv.Itoa(n), count) }

// amount is a sum of money as a workbook cell.
func (b *book) amount(d money.Decimal) sheet.Value { return sheet.NumberOf(d.String(), b.money) }

// rounded wraps a formula in a rounding to the minor unit, which takes off the
// noise of binary addition.
func (b *book) rounded(expr string) string {
	return fmt.Sprintf("ROUND(%s,%d)", expr, b.currency.MinorDigits)
}

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
