package workbook

import (
	"fmt"
	"slices"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// lineShape is what a line's formulas need beside its figures.
type lineShape struct {
	quantity    string // formula; empty for a figure that stands here
	unitPlaces  int    // decimals of the unit price
	unitInner   int    // decimals to which its product is rounded first
	amountInner int    // the same for quantity × unit price
}

// ofCategories is the driver of a percentage of other lines.
const ofCategories = "cost of categories"

// Decimals of a unit price: two beyond the minor unit, and six of a percentage.
const (
	beyondMinor   = 2
	percentPlaces = 6
)

func (b *book) unitPlaces(l document.Line) int {
	if l.Driver == ofCategories {
		return percentPlaces
	}
	return b.currency.MinorDigits + beyondMinor
}

// priceAll lays out the lines, proves that their formulas will give the document's
// amounts, and finds the rounding that each needs.
func (b *book) priceAll() error {
	b.lineRows = make(map[string]int, len(b.doc.Lines))
	for i, l := range b.doc.Lines {
		if _, twice := b.lineRows[l.ID]; twice {
			return fmt.Errorf("%s: the document has two lines of this id", l.ID)
		}
		b.lineRows[l.ID] = firstRow + i
	}
	for _, l := range b.doc.Lines {
		s, err := b.shape(l)
		if err != nil {
			return fmt.Errorf("%s: %w", l.ID, err)
		}
		b.shapes = append(b.shapes, s)
	}
	return nil
}

func (b *book) shape(l document.Line) (lineShape, error) {
	s := lineShape{unitPlaces: b.unitPlaces(l)}
	factors := b.rateOf(l).factors()
	for _, m := range l.Multipliers {
		factors = append(factors, m.Value)
	}
	var ok bool
	if s.unitInner, ok = innerPlaces(factors, s.unitPlaces, l.UnitPrice); !ok {
		return s, fmt.Errorf("parts × multipliers, rounded to %d places, are not the unit price %s", s.unitPlaces, l.UnitPrice)
	}
	exact, err := money.Product(l.Quantity, l.UnitPrice)
	if err != nil {
		return s, err
	}
	if s.amountInner, ok = innerPlaces([]money.Decimal{l.Quantity, l.UnitPrice}, b.currency.MinorDigits, l.Amount); !ok {
		return s, fmt.Errorf("quantity × unit price is %s, the document says %s", exact, l.Amount)
	}
	s.quantity, err = b.quantityOf(l)
	return s, err
}

// quantityOf is the formula of a line's quantity: the sum of the lines that it is
// a percentage of, or a cell of the take-off.
func (b *book) quantityOf(l document.Line) (string, error) {
	if len(l.Of) > 0 {
		return b.sumOf(l)
	}
	expr, _ := b.quantityCell(l.Item, l.Driver, l.Quantity)
	return expr, nil
}

// sumOf adds up the amounts of the lines that a percentage is taken of.
func (b *book) sumOf(l document.Line) (string, error) {
	rows := make([]int, 0, len(l.Of))
	sum := money.Zero
	for _, id := range l.Of {
		row, ok := b.lineRows[id]
		if !ok || id == l.ID {
			return "", fmt.Errorf("it is a percentage of %q, which is no other line", id)
		}
		rows = append(rows, row)
		sum = sum.Add(b.doc.Lines[row-firstRow].Amount)
	}
	if !sum.Equal(l.Quantity) {
		return "", fmt.Errorf("the lines that it is a percentage of add up to %s, the document says %s", sum, l.Quantity)
	}
	slices.Sort(rows)
	if len(slices.Compact(slices.Clone(rows))) != len(rows) {
		return "", fmt.Errorf("it is a percentage of one line twice")
	}
	return b.rounded(b.sumFormula(l, rows)), nil
}

// rangesOf joins neighbouring rows of a column to ranges.
func rangesOf(column string, rows []int) []string {
	var out []string
	for i := 0; i < len(rows); {
		j := i
		for j+1 < len(rows) && rows[j+1] == rows[j]+1 {
			j++
		}
		cell := fmt.Sprint(column, rows[i])
		if j > i {
			cell += fmt.Sprint(":", column, rows[j])
		}
		out = append(out, cell)
		i = j + 1
	}
	return out
}

// mostArguments is how many ranges one SUM may have here; a spreadsheet takes 255.
const mostArguments = 200

// partSum is a part of a long sum.
type partSum struct {
	expr string
	sum  money.Decimal
	line string // whose quantity it is part of
}

// sumFormula is the sum of amounts on the sheet Lines. Where they are more ranges
// than one formula takes, parts of the sum stand on a sheet of their own.
func (b *book) sumFormula(l document.Line, rows []int) string {
	if ranges := rangesOf(b.amountColumn(), rows); len(ranges) <= mostArguments {
		return sumText("", ranges)
	}
	from := len(b.partSums)
	for chunk := range slices.Chunk(rows, mostArguments) {
		sum := money.Zero
		for _, row := range chunk {
			sum = sum.Add(b.doc.Lines[row-firstRow].Amount)
		}
		b.partSums = append(b.partSums, partSum{b.rounded(sumText(linesSheet+"!", rangesOf(b.amountColumn(), chunk))), sum, l.ID})
	}
	return fmt.Sprintf("SUM('%s'!A%d:A%d)", partSumsSheet, firstRow+from, firstRow+len(b.partSums)-1)
}

func sumText(sheetName string, ranges []string) string {
	expr := "SUM("
	for i, r := range ranges {
		if i > 0 {
			expr += ","
		}
		expr += sheetName + r
	}
	return expr + ")"
}

// sums writes the parts of long sums, where there are any.
func (b *book) sums() {
	if len(b.partSums) == 0 {
		return
	}
	b.Sheet(partSumsSheet, sheet.Column{Head: "sum of lines", Width: 20}, sheet.Column{Head: "part of the quantity of", Width: 60})
	for _, p := range b.partSums {
		b.Row(sheet.Formula(p.expr, p.sum.String(), b.money), text(p.line))
	}
}

// checkTotals proves that lines, categories and base agree.
func (b *book) checkTotals() error {
	total := money.Zero
	byCategory := map[string]money.Decimal{}
	for _, l := range b.doc.Lines {
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
