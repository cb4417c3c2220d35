package pricing

import (
	"fmt"
	"slices"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

// noteNothing notes why a rate has no line.
func (p *pricer) noteNothing(c *charge) error {
	switch {
	case c.idle:
		p.note("not-triggered", c.category, c.entry, "nothing in the job asks for it")
	case c.driver == ratebook.CostOf:
		p.note("no-quantity", c.category, c.entry, "there is no cost for it to be a fraction of")
	default:
		if err := p.checkLacking(c); err != nil {
			return err
		}
		p.note("no-quantity", c.category, c.entry, fmt.Sprintf("no item that it is for has %s", c.driver))
	}
	return nil
}

// Ends of the ids of the lines that make up a minimum.
const (
	orderShortfall  = "/minimum order"
	chargeShortfall = "/minimum charge"
)

// minimumOrder adds a draft of the whole structure for what the job needs less than
// the least quantity that can be bought. The drafts of the items stay as they are,
// with the multipliers of their own places.
func (p *pricer) minimumOrder(c *charge) {
	least := p.rates[c.lead].MinimumOrder
	if c.total.Cmp(least) >= 0 {
		return
	}
	text := fmt.Sprintf("minimum order: %s %s, of which the job needs %s", least, c.unit, c.total)
	p.note("minimum-order", c.category, c.entry, text)
	short := draft{place: len(p.items), rate: c.lead, quantity: least.Sub(c.total), end: orderShortfall, note: text}
	var terms []term
	for _, d := range c.drafts {
		terms = append(terms, d.terms...)
		short.entries = p.compiler.sets.join(short.entries, d.entries)
	}
	short.terms = p.compiler.shortfall(terms, short.quantity.Float64(), nil)
	c.drafts = append(c.drafts, short)
	c.total = least
}

// breakOf returns the factor of the price break that holds for a rate of the
// charge, nil for none, and what the note says of it. It is noted once a rate.
func (p *pricer) breakOf(c *charge, rate int, noted map[int]string) (*money.Decimal, string) {
	breaks := p.rates[rate].Breaks
	for i := len(breaks) - 1; i >= 0; i-- {
		if c.total.Cmp(breaks[i].From) < 0 {
			continue
		}
		if noted[rate] == "" {
			noted[rate] = fmt.Sprintf("price break: factor %s from %s %s on; the job has %s", breaks[i].Factor, breaks[i].From, c.unit, c.total)
			p.note("price-break", c.category, p.entry(p.rates[rate]), noted[rate])
		}
		return &breaks[i].Factor, noted[rate]
	}
	return nil, ""
}

// noteExpired notes prices that ended before the base date.
func (p *pricer) noteExpired(c *charge) {
	noted := map[int]bool{}
	for _, d := range c.drafts {
		r := p.rates[d.rate]
		if noted[d.rate] || r.ValidUntil == "" || r.ValidUntil >= p.baseDate {
			continue
		}
		noted[d.rate] = true
		text := fmt.Sprintf("the price was valid until %s, before the base date %s; it is ", r.ValidUntil, p.baseDate)
		toBase := func(c Conversion) bool { return c.Name == EscalationToBase }
		if slices.ContainsFunc(p.escalation[c.category], toBase) && r.Driver != ratebook.CostOf {
			text += "escalated by index"
		} else {
			text += "taken as it stands"
		}
		p.note("expired", c.category, p.entry(r), text)
	}
}

// addMinimumCharge adds to the lines of a charge, whose sum is below its minimum, a
// line of the whole structure for the rest; the lines themselves stay as they are.
// It depends on all that the lines depend on: where they rise, it falls.
func (p *pricer) addMinimumCharge(c *charge, lines []Line, details []detail) ([]Line, []detail, error) {
	r := p.rates[c.lead]
	if r.MinimumCharge.IsZero() {
		return lines, details, nil
	}
	least, conversions, entries, err := p.leastAmount(r)
	if err != nil {
		return nil, nil, fmt.Errorf("minimum charge of %s: %w", p.entry(r), err)
	}
	sum := money.Zero
	var terms []term
	for i := range lines {
		sum = sum.Add(lines[i].Amount)
		terms = append(terms, details[i].terms...)
		entries = p.compiler.sets.join(entries, details[i].entries)
	}
	if sum.Cmp(least) >= 0 {
		return lines, details, nil
	}
	short, err := money.RoundedProduct(p.places, least.Sub(sum))
	if err != nil {
		return nil, nil, fmt.Errorf("minimum charge of %s: %w", p.entry(r), err)
	}
	text := fmt.Sprintf("minimum charge: %s %s, of which the lines make %s", least, p.currency, sum)
	p.note("minimum-charge", c.category, p.entry(r), text)
	d := draft{place: len(p.items), rate: c.lead, quantity: one, end: chargeShortfall, note: text}
	line, err := p.makeLine(c, &d, &unitPrice{
		entry: p.entry(r), formula: MinimumShortfall, rate: short, unit: short,
		parts: []Part{{Name: MinimumShortfall, Value: short, Assumption: p.entry(r)}},
	})
	if err != nil {
		return nil, nil, err
	}
	line.Driver, line.Unit = ratebook.Lump, ratebook.Lump.Unit()
	line.Assumptions = p.compiler.dependsOn(entries)
	c.drafts = append(c.drafts, d)
	return append(lines, line), append(details, detail{p.compiler.shortfall(terms, short.Float64(), conversions), entries}), nil
}

// leastAmount returns a minimum charge in the money of the job, rounded to its minor
// unit, the conversions that bring it there, and what it depends on.
func (p *pricer) leastAmount(r ratebook.Rate) (least money.Decimal, conversions []int32, entries int32, err error) {
	b := &builder{compiler: p.compiler, unitPrice: unitPrice{constant: 1, rate: one}}
	b.part(Part{Name: "minimum charge", Value: r.MinimumCharge, Assumption: p.entry(r)})
	if err := p.addConversions(b, r); err != nil {
		return money.Zero, nil, 0, err
	}
	made, err := b.finish(p.places)
	if err != nil {
		return money.Zero, nil, 0, err
	}
	return made.unit.Round(p.minor), b.inputs, made.entries, nil
}

// shortfall returns terms which at base values are short, what is lacking to a
// minimum that is brought into the money of the job by conversions:
//
//	max(c · Π common, least) · Π conversions − c · Π common · Π conversions
//
// The product stands for the sum of the given terms: of their factors it has those
// that all of them have, the others held at base. So the shortfall falls to zero as
// the common factors rise, is never negative, and is exact where the terms differ in
// no factor; what else moves the terms moves the total by as much, also within the
// minimum. The conversions act on both.
func (c *compiler) shortfall(terms []term, short float64, conversions []int32) []term {
	common := c.common(terms)
	coefficient := c.firstOrder(terms, common)
	factors := slices.Clone(c.monomials.lists[common])
	for _, n := range conversions {
		if i := slices.Index(factors, n); i >= 0 {
			factors = slices.Delete(factors, i, i+1)
		} else {
			coefficient /= c.values[n]
		}
	}
	within, after := c.monomials.of(factors...), c.monomials.of(conversions...)
	least := coefficient*c.valueOf(within) + short/c.valueOf(after)
	return []term{
		{monomial: within, after: after, coefficient: coefficient, least: least},
		{monomial: c.monomials.join(within, after), coefficient: -coefficient},
	}
}

// shared returns the factors by which a term as a whole is multiplied.
func (t term) shared() int32 {
	if t.least > 0 {
		return t.after
	}
	return t.monomial
}

// common returns the factors that all terms have.
func (c *compiler) common(terms []term) int32 {
	out := c.monomials.lists[terms[0].shared()]
	for _, t := range terms[1:] {
		var kept []int32
		rest := slices.Clone(c.monomials.lists[t.shared()])
		for _, n := range out {
			if i := slices.Index(rest, n); i >= 0 {
				kept = append(kept, n)
				rest = slices.Delete(rest, i, i+1)
			}
		}
		out = kept
	}
	return c.monomials.of(out...)
}

// firstOrder returns Σ terms at base values without the common factors.
func (c *compiler) firstOrder(terms []term, common int32) float64 {
	var total sum
	for _, t := range terms {
		v := t.coefficient
		if t.least > 0 {
			v = t.least // it binds at base values
		}
		rest := slices.Clone(c.monomials.lists[t.shared()])
		for _, n := range c.monomials.lists[common] {
			i := slices.Index(rest, n)
			rest = slices.Delete(rest, i, i+1)
		}
		total.add(v * c.valueOf(c.monomials.of(rest...)))
	}
	return total.value()
}

func joinNotes(a, b string) string {
	if a == "" || b == "" {
		return a + b
	}
	return a + "; " + b
}
