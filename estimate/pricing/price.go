package pricing

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// Places that the numbers of a price may carry.
const (
	ratePlaces       = 4 // prices, ratios, fractions, multipliers, breaks, escalations
	exchangePlaces   = 6
	percentagePlaces = 6 // to which the unit price of a percentage is rounded
	extraPlaces      = 2 // of a unit price, beyond the currency's minor unit
)

// unitPrice is the price of one unit of a driver: exact, rounded, and as factors of
// the model.
type unitPrice struct {
	entry       string // register entry of the rate
	parts       []Part
	multipliers []Applied
	formula     string
	rate        money.Decimal // Π parts
	unit        money.Decimal // Π parts · Π multipliers, rounded
	monomial    int32         // of the inputs among parts and multipliers
	constant    float64       // Π of the parts that are no inputs
	entries     int32         // what it depends on
}

// priceKey names a price: the rate and the list of multipliers.
type priceKey struct {
	rate        int
	multipliers int32
}

// price returns the price of a rate under a list of multipliers, with a break's
// factor where one holds.
func (p *pricer) price(key priceKey, factor *money.Decimal) (*unitPrice, error) {
	if known, ok := p.prices[key]; ok {
		return known, nil
	}
	r := p.rates[key.rate]
	b := &builder{compiler: p.compiler, unitPrice: unitPrice{entry: p.entry(r), constant: 1, rate: one}}
	if err := p.addRate(b, r, factor); err != nil {
		return nil, err
	}
	for _, i := range p.lists.lists[key.multipliers] {
		if err := b.multiply(p.multipliers[i]); err != nil {
			return nil, err
		}
	}
	places := p.places
	if r.Driver == ratebook.CostOf {
		places = percentagePlaces
	}
	made, err := b.finish(places)
	if err != nil {
		return nil, fmt.Errorf("unit price of %s: %w", p.entry(r), err)
	}
	p.prices[key] = made
	return made, nil
}

// addRate adds the parts of a rate's own price.
func (p *pricer) addRate(b *builder, r ratebook.Rate, factor *money.Decimal) error {
	name := "price"
	switch {
	case r.Driver == ratebook.CostOf:
		name = "fraction"
	case r.OfReference:
		name = "ratio"
		b.part(Part{Name: "reference price", Value: p.reference})
	}
	value, err := exact(r.Spread.Base())
	if err != nil {
		return fmt.Errorf("%s: %w", p.entry(r), err)
	}
	if err := b.input(Part{Name: name, Value: value, Assumption: p.entry(r)}, r.Spread, r.Figure.Group, ""); err != nil {
		return err
	}
	if factor != nil {
		b.part(Part{Name: "price break", Value: *factor, Assumption: p.entry(r)})
	}
	if r.Driver == ratebook.CostOf {
		return nil
	}
	return p.addConversions(b, r)
}

// addConversions adds what turns a price of the book into one of the job: the
// exchange into its currency, the escalation to its dates.
func (p *pricer) addConversions(b *builder, r ratebook.Rate) error {
	conversions, err := p.conversions(r)
	if err != nil {
		return err
	}
	for _, c := range conversions {
		if err := b.input(Part{Name: c.Name, Value: c.Value, Assumption: c.ID}, c.Spread, c.Group, c.Stream); err != nil {
			return err
		}
	}
	return nil
}

// conversions returns the exchange and the escalations of a rate's price.
func (p *pricer) conversions(r ratebook.Rate) ([]Conversion, error) {
	var out []Conversion
	from := r.Currency
	if from == "" {
		from = p.book
	}
	if from != "" && from != p.currency {
		c, ok := p.exchange[from]
		if !ok {
			return nil, fmt.Errorf("%s: found a price in %s, which has no rate of exchange into %s; accepted: an exchange rate of %s in the rate book, or a price in %s",
				p.entry(r), from, p.currency, from, strings.Join(append([]string{p.currency}, slices.Sorted(maps.Keys(p.exchange))...), ", "))
		}
		out = append(out, c)
	}
	return append(out, p.escalation[r.Category]...), nil
}

// builder gathers the factors of one price.
type builder struct {
	compiler *compiler
	unitPrice
	inputs  []int32
	entered []int32
	names   []string
}

// part adds a factor without a spread of its own.
func (b *builder) part(part Part) {
	b.parts = append(b.parts, part)
	b.rate = b.rate.Mul(part.Value)
	b.names = append(b.names, part.Name)
	b.constant *= part.Value.Float64()
	if part.Assumption != "" {
		b.entered = append(b.entered, b.compiler.entries.of(part.Assumption))
	}
}

// input adds a factor that is an input of the model.
func (b *builder) input(part Part, s spread.Spread, group, stream string) error {
	before := b.constant
	b.part(part)
	b.constant = before
	return b.factor(Input{ID: part.Assumption, Spread: s, Group: group, Stream: stream}, part.Value)
}

// factor enters an input; the constant takes up what its base value as a float
// lacks of its decimal.
func (b *builder) factor(in Input, value money.Decimal) error {
	n, err := b.compiler.factor(in, 0)
	if err != nil {
		return err
	}
	b.inputs = append(b.inputs, n)
	if base := b.compiler.values[n]; base != 0 {
		b.constant *= value.Float64() / base
	}
	return nil
}

// multiply adds a multiplier.
func (b *builder) multiply(m ratebook.Multiplier) error {
	id := MultiplierID(m)
	v, err := exact(m.Spread.Base())
	if err != nil {
		return fmt.Errorf("%s: %w", id, err)
	}
	if v.Sign() < 0 {
		return fmt.Errorf("%s: found the likely value %s; accepted: zero or more", id, v)
	}
	b.multipliers = append(b.multipliers, Applied{Name: m.Name, Scope: m.Scope, Subject: m.Subject, Value: v, Assumption: id})
	b.entered = append(b.entered, b.compiler.entries.of(id))
	return b.factor(Input{ID: id, Spread: m.Spread, Group: m.Group}, v)
}

// finish rounds the price.
func (b *builder) finish(places int) (*unitPrice, error) {
	factors := make([]money.Decimal, 0, len(b.parts)+len(b.multipliers))
	for _, part := range b.parts {
		factors = append(factors, part.Value)
	}
	for _, m := range b.multipliers {
		factors = append(factors, m.Value)
	}
	unit, err := money.RoundedProduct(places, factors...)
	if err != nil {
		return nil, err
	}
	b.unit = unit
	b.formula = strings.Join(b.names, " × ")
	b.monomial = b.compiler.monomials.of(b.inputs...)
	b.unitPrice.entries = b.compiler.sets.of(b.entered...)
	made := b.unitPrice
	return &made, nil
}

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
