package pricing

import (
	"fmt"
	"testing"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

func currency(tb testing.TB, code string) money.Currency {
	tb.Helper()
	c, err := money.FindCurrency(code)
	if err != nil {
		tb.Fatal(err)
	}
	return c
}

func decimal(tb testing.TB, text string) money.Decimal {
	tb.Helper()
	d, err := money.Parse(text)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// around is a spread with the likely value v.
func around(v float64) ratebook.Figure {
	return ratebook.Figure{Spread: spread.NewTriangular(0.5*v, v, 2*v), Source: "invented", Author: "test", Confidence: "low"}
}

// allowance is the factor 1 + v with a spread.
func allowance(id string, v float64) takeoff.Allowance {
	return takeoff.Allowance{ID: id, Spread: spread.NewTriangular(0, v, 3*v), Offset: 1}
}

// measure is a quantity that depends on an allowance of its own kind and on growth.
func measure(tb testing.TB, d ratebook.Driver, value string) takeoff.Quantity {
	tb.Helper()
	factors := []takeoff.Allowance{allowance("allowance/growth", 0.12), allowance("allowance/"+string(d), 0.05)}
	return takeoff.Quantity{Driver: d, Value: decimal(tb, value), Factors: factors, Fixed: []string{"norm/crew"}}
}

// item is one item with the quantities given as driver, value, driver, value.
func item(tb testing.TB, id string, quantities ...string) takeoff.Item {
	tb.Helper()
	it := takeoff.Item{ID: id, Group: "Boom", Family: "CHS", Treatment: "size", Connection: "tube booms", Waste: ratebook.WasteTube, Marks: []string{"mark " + id}}
	for i := 0; i < len(quantities); i += 2 {
		d := ratebook.Driver(quantities[i])
		it.Quantities = append(it.Quantities, measure(tb, d, quantities[i+1]))
		if d == ratebook.DeliveredTonnes {
			it.Delivered = decimal(tb, quantities[i+1])
		}
	}
	return it
}

// rate is a rate of the book; a price v per unit of the driver.
func rate(id, category string, d ratebook.Driver, v float64, of ...string) ratebook.Rate {
	return ratebook.Rate{ID: id, Category: category, Driver: d, Figure: around(v), Of: of}
}

// euros prices with rates in euros, all categories.
func euros(tb testing.TB, rates ...ratebook.Rate) Rates {
	tb.Helper()
	return Rates{Rates: rates, Book: "EUR", Categories: ratebook.Categories(), Currency: currency(tb, "EUR"), BaseDate: "2026-06-01"}
}

// project is a multiplier on categories in the scope of the project.
func project(name string, v float64, categories ...string) ratebook.Multiplier {
	return ratebook.Multiplier{Name: name, Scope: ratebook.ProjectScope, Categories: categories, Spread: spread.NewTriangular(0.5*v, v, 2*v), Reason: "test", Author: "test"}
}

func price(tb testing.TB, items []takeoff.Item, r Rates) Priced {
	tb.Helper()
	p, err := Price(items, r)
	if err != nil {
		tb.Fatal(err)
	}
	return p
}

// amounts writes lines as id: quantity × unit price = amount.
func amounts(lines []Line) []string {
	var out []string
	for _, l := range lines {
		out = append(out, fmt.Sprintf("%s: %s × %s = %s", l.ID, l.Quantity, l.UnitPrice, l.Amount))
	}
	return out
}

func codes(notes []Note) []string {
	var out []string
	for _, n := range notes {
		if n.Code != "no-rate" {
			out = append(out, n.Code+" "+n.Subject)
		}
	}
	return out
}
