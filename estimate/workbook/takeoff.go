package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// counted is one row of the sheet Take-off.
type counted struct {
	item   document.Item
	of     document.Quantity
	wrap   string // the rounding, %s for the product
	detail []string
}

func quantityKey(item, driver string) string { return key(item, driver) }

// countAll lays out the take-off and finds the rounding of each quantity.
func (b *book) countAll() error {
	b.quantities = map[string]int{}
	for _, it := range b.doc.Items {
		for _, q := range it.Quantities {
			floats := []float64{q.Measured.Rounded()}
			var exprs []string
			for _, f := range q.Factors {
				expr, value := b.factor(f)
				floats, exprs = append(floats, value), append(exprs, expr)
			}
			wrap, ok := quantityRounding(floats, q.Value)
			if !ok {
				return fmt.Errorf("take-off of %s: %s: measured × factors is %v, the document says %s", it.ID, q.Driver, product(floats), q.Value)
			}
			b.factors = max(b.factors, len(exprs))
			b.counted = append(b.counted, counted{it, q, wrap, exprs})
			b.quantities[quantityKey(it.ID, q.Driver)] = firstRow + len(b.counted) - 1
		}
	}
	return nil
}

func product(floats []float64) float64 {
	x := 1.0
	for _, f := range floats {
		x *= f
	}
	return x
}

// quantityRounding returns the formula that rounds a product of floats to the
// decimals of a quantity and gives its value: a plain rounding unless the product
// lies so close to a tie that its last bits decide; then it is rounded twice, and
// where the take-off saw those bits otherwise, set off the tie by one unit of the
// inner rounding: a millionth of the last decimal, or where the quantity is large,
// what its twelve printed digits leave in doubt.
func quantityRounding(floats []float64, want money.Decimal) (string, bool) {
	outer := places(want)
	low, high := band(floats)
	plain := func(x float64) bool {
		d, err := money.FromFloat(x, outer)
		return err == nil && d.Equal(want)
	}
	if plain(low) && plain(high) {
		return round("%s", outer), true
	}
	finest := min(outer+6, 12)
	for inner := finest; inner > outer; inner-- {
		unit := unitOf(inner)
		if inner < finest && !(unit.Float64() <= doubt*math.Abs(high)) {
			break
		}
		for _, off := range []money.Decimal{money.Zero, unit.Neg(), unit} {
			if !reaches(low, inner, off, want) || !reaches(high, inner, off, want) {
				continue
			}
			expr := round("%s", inner)
			if off.Sign() > 0 {
				expr += "+"
			}
			if off.Sign() != 0 {
				expr += off.String()
			}
			return round(expr, outer), true
		}
	}
	return "", false
}

// doubt is what twelve printed digits of the measured quantity and of each factor
// leave open of their product, at most.
const doubt = 1e-10

// unitOf is one unit of the last of a number of decimals.
func unitOf(places int) money.Decimal {
	d, _ := money.Parse("0." + strings.Repeat("0", places-1) + "1") // cannot fail: at most 12 places
	return d
}

func reaches(x float64, inner int, off, want money.Decimal) bool {
	d, err := money.FromFloat(x, inner)
	return err == nil && d.Add(off).Round(places(want)).Equal(want)
}

// Columns of the sheet Take-off before those of the factors.
const (
	measuredColumn = "C"
	firstFactor    = 4
)

// quantityColumn is the column of the quantities on the sheet Take-off.
func (b *book) quantityColumn() string { return sheet.Letters(firstFactor + b.factors) }

// takeoff writes each quantity of each item: measured × factors, rounded once.
func (b *book) takeoff() {
	columns := []sheet.Column{{Head: "item", Width: 34}, {Head: "driver", Width: 18}, {Head: "measured", Width: 12}}
	for i := range b.factors {
		columns = append(columns, sheet.Column{Head: fmt.Sprintf("f%d", i+1), Width: 8})
	}
	columns = append(columns, sheet.Column{Head: "quantity", Width: 12}, sheet.Column{Head: "unit", Width: 6},
		sheet.Column{Head: "factors f1, f2 …", Width: 36}, sheet.Column{Head: "how it is made", Width: 40}, sheet.Column{Head: "measured depends on", Width: 28})
	b.Sheet(takeoffSheet, columns...)
	for i, c := range b.counted {
		b.countedRow(firstRow+i, c)
	}
	if len(b.counted) == 0 {
		b.Row(text("none"))
	}
}

func (b *book) countedRow(row int, c counted) {
	head := []sheet.Value{wrapped(c.item.ID), text(c.of.Driver), number(c.of.Measured, "#,##0.000###"+gap).Input()}
	factors := make([]sheet.Value, b.factors)
	terms := []string{fmt.Sprint(measuredColumn, row)}
	var names []string
	for j, expr := range c.detail {
		f := c.of.Factors[j]
		factors[j] = sheet.Formula(expr, plainNumber(f.Value), general)
		terms = append(terms, fmt.Sprint(sheet.Letters(firstFactor+j), row))
		names = append(names, f.Assumption[strings.Index(f.Assumption, "/")+1:])
	}
	expr := fmt.Sprintf(c.wrap, strings.Join(terms, "*"))
	b.Row(slices.Concat(head, factors, []sheet.Value{sheet.Formula(expr, c.of.Value.String(), digits(places(c.of.Value))+gap), text(c.of.Unit),
		wrapped(strings.Join(names, " × ")), wrapped(c.of.Formula), wrapped(strings.Join(c.of.Assumptions, "; "))})...)
}

// quantityCell is a reference to an item's quantity of a driver, where the
// take-off holds the value.
func (b *book) quantityCell(item, driver string, value money.Decimal) (string, bool) {
	row, ok := b.quantities[quantityKey(item, driver)]
	if !ok || !b.counted[row-firstRow].of.Value.Equal(value) {
		return "", false
	}
	return fmt.Sprintf("'%s'!%s%d", takeoffSheet, b.quantityColumn(), row), true
}

// massDrivers are the drivers of the masses of an item. Its net mass is that of
// the drawing, which no factor moves; the driver net tonnes has the sizing bias.
var massDrivers = [3]string{"", "delivered tonnes", "purchased tonnes"}

// items writes the counted items; delivered and purchased masses are those of the
// take-off.
func (b *book) items() {
	b.Sheet(itemsSheet, sheet.Column{Head: "item", Width: 34}, sheet.Column{Head: "net, t", Width: 12},
		sheet.Column{Head: "delivered, t", Width: 12}, sheet.Column{Head: "purchased, t", Width: 13}, sheet.Column{Head: "pieces", Width: 9},
		sheet.Column{Head: "length, m", Width: 11}, sheet.Column{Head: "surface, m²", Width: 11}, sheet.Column{Head: "group", Width: 18},
		sheet.Column{Head: "family", Width: 11}, sheet.Column{Head: "treatment", Width: 11}, sheet.Column{Head: "connection class", Width: 17},
		sheet.Column{Head: "coating", Width: 13}, sheet.Column{Head: "execution class", Width: 15}, sheet.Column{Head: "marks", Width: 28})
	var sums [3]money.Decimal
	for _, it := range b.doc.Items {
		cells := []sheet.Value{wrapped(it.ID)}
		for i, m := range []money.Decimal{it.Net, it.Delivered, it.Purchased} {
			sums[i] = sums[i].Add(m)
			if expr, ok := b.quantityCell(it.ID, massDrivers[i], m); ok {
				cells = append(cells, sheet.Formula(expr, m.String(), mass))
			} else {
				cells = append(cells, exactly(m, mass))
			}
		}
		b.Row(append(cells, whole(it.Pieces), number(it.Length, oneDigit), number(it.Surface, oneDigit), wrapped(it.Group), text(it.Family),
			text(it.Treatment), text(it.Connection), text(it.Coating), text(it.Execution), wrapped(strings.Join(it.Marks, ", ")))...)
	}
	b.total("total", len(b.doc.Items), tonnes(sums[0]), tonnes(sums[1]), tonnes(sums[2]))
}
