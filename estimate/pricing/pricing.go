// Package pricing turns quantities into decimal lines, and compiles the same
// structure into a cost model for the range.
//
//	take-off items × categories → Line = quantity × rate × multipliers,
//	    exact decimals, each line rounded to the minor unit
//	lines → categories → base, sums that are exact
//	the same lines → Model, a sum of products over assumptions
package pricing

import (
	"fmt"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// The drivers of the ratio book.
const (
	DeliveredTonnes = "delivered tonnes"
	PurchasedTonnes = "purchased tonnes"
)

// Applied is one multiplier on a line, with the scope that won.
type Applied struct {
	Name       string
	Scope      ratebook.Scope
	Subject    string
	Value      money.Decimal
	Assumption string
}

// Line is one priced quantity: Amount = Quantity × Rate × Π Multipliers, rounded
// once, half away from zero, to the currency's minor unit.
type Line struct {
	ID          string
	Item        string
	Group       string
	Category    string
	Driver      string
	Quantity    money.Decimal // of the driver
	Rate        money.Decimal // per unit of the driver
	Formula     string        // how the rate is made
	RateID      string        // register entry of the rate or ratio
	Multipliers []Applied
	Amount      money.Decimal
	Assumptions []string // ids of every entry that it depends on
}

// Priced is a priced job.
type Priced struct {
	Lines      []Line // by item, then category in the order of ratebook.Categories
	Categories map[string]money.Decimal
	Base       money.Decimal
	Model      Model
}

// Rates is what a job prices with: a book and the multipliers in force, those of
// the book first.
type Rates struct {
	Book        ratebook.Book
	Multipliers []ratebook.Multiplier
	Currency    money.Currency
	Systemic    takeoff.Allowance // the factor on the whole base, in the range only
}

// MultiplierID is the id of the register entry of a multiplier.
func MultiplierID(m ratebook.Multiplier) string {
	id := "multiplier/" + assumption.Segment(m.Name) + "/" + assumption.Segment(string(m.Scope))
	if m.Subject != "" {
		id += "/" + assumption.Segment(m.Subject)
	}
	return id
}

// RateID is the id of the register entry of a category's rate.
func RateID(category string) string { return "rate/" + category }

// Price prices items. The first mark of an item stands for all of its marks in
// the search for multipliers, which holds because take-off splits items that
// multipliers treat differently.
func Price(items []takeoff.Item, r Rates) (Priced, error) {
	p := Priced{Categories: map[string]money.Decimal{}}
	c := newCompiler(r)
	for _, item := range items {
		for _, category := range ratebook.Categories() {
			if !priced(r.Book, category) {
				continue
			}
			line, err := priceLine(item, category, r)
			if err != nil {
				return Priced{}, err
			}
			if err := c.add(item, &line, r); err != nil {
				return Priced{}, err
			}
			p.Lines = append(p.Lines, line)
			p.Categories[category] = p.Categories[category].Add(line.Amount)
			p.Base = p.Base.Add(line.Amount)
		}
	}
	p.Model = c.model()
	return p, nil
}

func priced(b ratebook.Book, category string) bool {
	_, ok := b.Ratios[category]
	return ok || category == ratebook.Material
}

func priceLine(item takeoff.Item, category string, r Rates) (Line, error) {
	line := Line{
		ID: "line/" + item.ID + "/" + category, Item: item.ID, Group: item.Group, Category: category,
		Driver: DeliveredTonnes, Quantity: item.Delivered, RateID: RateID(category),
	}
	allowances := item.ToDelivered
	var err error
	if category == ratebook.Material {
		line.Driver, line.Quantity, allowances = PurchasedTonnes, item.Purchased, item.ToPurchased
		line.Formula = "price of steel"
		line.Rate, err = exact(r.Book.MaterialPrice.Spread.Base())
	} else {
		line.Formula = "reference price × ratio"
		var ratio money.Decimal
		if ratio, err = exact(r.Book.Ratios[category].Spread.Base()); err == nil {
			line.Rate, err = money.Product(r.Book.ReferencePrice, ratio)
		}
	}
	if err != nil {
		return Line{}, fmt.Errorf("rate of %s: %w", category, err)
	}
	factors := []money.Decimal{line.Quantity, line.Rate}
	for _, a := range allowances {
		line.Assumptions = append(line.Assumptions, a.ID)
	}
	line.Assumptions = append(line.Assumptions, line.RateID)
	place := ratebook.Place{Mark: item.Marks[0], Group: item.Group, Family: item.Family}
	for _, i := range ratebook.Resolve(r.Multipliers, category, place) {
		m := r.Multipliers[i]
		v, err := exact(m.Spread.Base())
		if err != nil {
			return Line{}, fmt.Errorf("multiplier %s: %w", m.Name, err)
		}
		a := Applied{Name: m.Name, Scope: m.Scope, Subject: m.Subject, Value: v, Assumption: MultiplierID(m)}
		line.Multipliers = append(line.Multipliers, a)
		line.Assumptions = append(line.Assumptions, a.Assumption)
		factors = append(factors, v)
	}
	product, err := money.Product(factors...)
	if err != nil {
		return Line{}, fmt.Errorf("%s: %w", line.ID, err)
	}
	line.Amount = r.Currency.Round(product)
	return line, nil
}

// ratePlaces is the number of decimals that a rate, ratio or multiplier may carry.
const ratePlaces = 4

// exact turns a rate or multiplier into a decimal through its shortest text of
// twelve digits, which takes off the noise of binary arithmetic.
func exact(x float64) (money.Decimal, error) {
	short, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 12, 64), 64)
	if err != nil {
		return money.Decimal{}, err
	}
	d, err := money.Parse(strconv.FormatFloat(short, 'f', -1, 64))
	if err != nil {
		return money.Decimal{}, err
	}
	if !d.Round(ratePlaces).Equal(d) {
		return money.Decimal{}, fmt.Errorf("%v has more than %d decimals; round it", x, ratePlaces)
	}
	return d, nil
}
