package takeoff

import (
	"fmt"
	"slices"
	"strconv"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

// settled are the significant digits to which a product of floats is rounded before
// it becomes a decimal: 6 joints · 5.5 h · 1.15 is 37.95 h and rounds to 38.0, though the
// product of the floats lies below it; spreadsheets round so too.
const settled = 14

func settle(x float64) float64 {
	y, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', settled-1, 64), 64)
	if err != nil {
		return x // NaN or beyond the range of floats: refused as a decimal
	}
	return y
}

// newQuantity returns measured · Π factors as a quantity of the driver.
func newQuantity(d ratebook.Driver, measured float64, factors []Allowance, formula string, fixed []string) (Quantity, error) {
	value, err := money.FromFloat(settle(product(measured, factors)), d.Places())
	if err != nil {
		return Quantity{}, fmt.Errorf("%s: %w", d, err)
	}
	return Quantity{Driver: d, Value: value, Measured: measured, Factors: factors, Fixed: fixed, Formula: formula}, nil
}

// with returns the factors with further ones, in a list of its own.
func with(factors []Allowance, more ...Allowance) []Allowance { return slices.Concat(factors, more) }

// value returns the item's quantity of a driver; zero with the driver's places
// where it has none.
func (b *builder) value(d ratebook.Driver) money.Decimal {
	for _, q := range b.list {
		if q.Driver == d {
			return q.Value
		}
	}
	return money.Zero.Round(d.Places())
}

// Used returns the ids of all register entries that the items' quantities depend
// on: factors and fixed ones.
func Used(items []Item) map[string]bool {
	used := map[string]bool{}
	for _, it := range items {
		for _, q := range it.Quantities {
			for _, f := range q.Factors {
				used[f.ID] = true
			}
			for _, id := range q.Fixed {
				used[id] = true
			}
		}
	}
	return used
}
