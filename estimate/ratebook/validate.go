package ratebook

import (
	"fmt"
	"maps"
	"slices"
	"sort"
	"strconv"
	"strings"

	"spanwright/estimate/money"
)

// Fault is one thing wrong with a book or a multiplier.
type Fault struct {
	Field    string `json:"field"` // JSON pointer within the book or multiplier
	Found    string `json:"found"`
	Accepted string `json:"accepted"`
}

// String writes the fault on one line.
func (f Fault) String() string {
	return fmt.Sprintf("%s: found %s; accepted: %s", f.Field, f.Found, f.Accepted)
}

// InvalidError lists every fault of a book or multiplier.
type InvalidError struct {
	Faults []Fault
}

// Error lists every fault.
func (e *InvalidError) Error() string {
	s := make([]string, len(e.Faults))
	for i, f := range e.Faults {
		s[i] = f.String()
	}
	return "rate book: " + strings.Join(s, "; ")
}

// Validate reports everything wrong with the book as an *InvalidError, by JSON
// pointer.
func (b Book) Validate() error {
	c := &checker{groups: b.Correlation, grouped: true}
	c.text("/name", b.Name)
	_, err := money.FindCurrency(b.Currency)
	c.want(err == nil, "/currency", b.Currency, "an ISO 4217 code such as EUR, USD, JPY or KWD")
	c.date("/base_date", b.BaseDate)
	switch b.Kind {
	case KindRatio:
		c.ratioBook(b)
	case KindUnitRate:
		c.unitRateBook(b)
	default:
		c.want(false, "/kind", b.Kind, KindRatio+" or "+KindUnitRate)
	}
	c.allowances(b)
	c.correlation(b)
	c.multipliers(b)
	c.bands(b)
	c.norms(b)
	c.limits(b.Limits)
	c.carbon(b)
	c.exchange(b)
	c.indices(b.Indices)
	c.spendMonths(b.SpendMonths)
	return c.err()
}

// The limits beyond which a figure is taken for a slip of the hand.
const (
	maxPrice     = 1e9  // of one unit of a driver
	maxRatio     = 1000 // times the reference price
	maxAllowance = 5    // 500 % of what is below it
	maxFactor    = 100  // of a multiplier
)

// ratioBook checks what a book of the kind ratio prices with.
func (c *checker) ratioBook(b Book) {
	c.want(b.ReferencePrice.Sign() > 0, "/reference_price", b.ReferencePrice.String(), "a price above zero per tonne")
	if c.want(b.MaterialPrice != nil, "/material_price", "", "the price of steel per purchased tonne"); b.MaterialPrice != nil {
		c.figure("/material_price", *b.MaterialPrice, 0, maxPrice)
	}
	c.figures("/ratios", b.Ratios, 0, maxRatio, ratioCategories())
	c.want(len(b.Rates) == 0, "/rates", fmt.Sprintf("%d rates", len(b.Rates)), "nothing: a book of the kind ratio has none")
}

// unitRateBook checks what a book of the kind unit-rate prices with.
func (c *checker) unitRateBook(b Book) {
	c.want(b.ReferencePrice.Sign() >= 0, "/reference_price", b.ReferencePrice.String(), "a price above zero per tonne, or nothing")
	c.want(b.MaterialPrice == nil, "/material_price", "a figure", "nothing: a book of the kind unit-rate has rates of the category material")
	c.want(len(b.Ratios) == 0, "/ratios", fmt.Sprintf("%d ratios", len(b.Ratios)), "nothing: a book of the kind unit-rate has rates")
	c.rates(b)
}

func classes() []string { return []string{"1", "2", "3", "4", "5"} }

// ratioCategories are the categories that a ratio book must price: all but
// material, which has a price of its own, and those it leaves out.
func ratioCategories() []string {
	return []string{Fabrication, Coating, Inspection, Shipping, Erection, Engineering, Indirects}
}

func (c *checker) allowances(b Book) {
	c.figures("/connections", b.Connections, 0, maxAllowance, nil)
	c.want(len(b.Connections) > 0, "/connections", "", "at least one connection class")
	c.figure("/bolts", b.Bolts, 0, maxAllowance)
	c.figures("/waste", b.Waste, 0, maxAllowance, wastes())
	c.figures("/growth", b.Growth, 0, maxAllowance, classes())
	for _, class := range classes() {
		v, ok := b.Systemic[class]
		c.want(ok && v >= 0 && v <= 2, at("/systemic", class), number(v), "a standard deviation of the logarithm from 0 to 2")
	}
	for _, class := range slices.Sorted(maps.Keys(b.Systemic)) {
		c.oneOf(at("/systemic", class), class, classes())
	}
	c.figure("/sizing_bias", b.SizingBias, 0.1, 10)
	c.want(b.SizingBias.Spread.Base() == 1, "/sizing_bias/spread/likely", number(b.SizingBias.Spread.Base()), "1: the bias acts in the range, never in the base")
}

func (c *checker) correlation(b Book) {
	for _, g := range slices.Sorted(maps.Keys(b.Correlation)) {
		rho := b.Correlation[g]
		c.want(rho >= 0 && rho < 1, at("/correlation", g), number(rho), "a rank correlation from 0 to below 1")
	}
}

func (c *checker) bands(b Book) {
	for i, band := range b.Bands {
		p := fmt.Sprintf("/bands/%d", i)
		c.oneOf(p+"/measure", band.Measure, []string{"kg/m", "price/t", "shop h/t"})
		_, ok := b.Connections[band.Class]
		c.want(ok, p+"/class", band.Class, "a class that /connections names")
		c.want(band.Low >= 0 && band.Low < band.High && band.High < 1e12, p, number(band.Low)+" to "+number(band.High), "low below high, both finite")
		c.text(p+"/source", band.Source)
	}
}

// checker gathers faults.
type checker struct {
	faults  []Fault
	groups  map[string]float64 // correlation groups that figures may name
	grouped bool               // whether groups are known
}

// want notes a fault unless ok.
func (c *checker) want(ok bool, field, found, accepted string) {
	if !ok {
		c.faults = append(c.faults, Fault{Field: field, Found: strconv.Quote(short(found)), Accepted: accepted})
	}
}

// oneOf notes a fault unless found is one of the words.
func (c *checker) oneOf(field, found string, words []string) {
	c.want(slices.Contains(words, found), field, found, strings.Join(words, ", "))
}

// err returns the faults by field, nil for none.
func (c *checker) err() error {
	if len(c.faults) == 0 {
		return nil
	}
	sort.SliceStable(c.faults, func(i, j int) bool { return c.faults[i].Field < c.faults[j].Field })
	return &InvalidError{Faults: c.faults}
}
