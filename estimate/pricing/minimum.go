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

// minimumOrder replaces the drafts by one for the least quantity that can be
// bought, where the job needs less.
func (p *pricer) minimumOrder(c *charge) {
	least := p.rates[c.lead].MinimumOrder
	if c.total.Cmp(least) >= 0 {
		return
	}
	text := fmt.Sprintf("minimum order: %s %s, of which the job needs %s", least, c.unit, c.total)
	p.note("minimum-order", c.category, c.entry, text)
	var terms []term
	for _, d := range c.drafts {
		terms = append(terms, d.terms...)
	}
	common := p.compiler.common(terms)
	t := term{monomial: common, coefficient: p.compiler.firstOrder(terms, common), least: least.Float64()}
	c.drafts = []draft{{place: len(p.items), rate: c.lead, quantity: least, terms: []term{t}, note: text}}
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

// raised is the line of a minimum charge.
type raised struct {
	Line
	detail
}

// minimumCharge returns the line that replaces those of a charge whose sum is
// below its minimum, nil where it is not.
//
// In the model the line is the greater of the minimum and of what the lines cost,
// as a product of the factors that all of them have, the others held at base: so
// that in a trial it can exceed the minimum. The conversions act on both.
func (p *pricer) minimumCharge(c *charge, sum money.Decimal, details []detail) (*raised, error) {
	r := p.rates[c.lead]
	if r.MinimumCharge.IsZero() {
		return nil, nil
	}
	b := &builder{compiler: p.compiler, unitPrice: unitPrice{constant: 1, rate: one}}
	if err := p.addConversions(b, r); err != nil {
		return nil, err
	}
	conversions, entered := b.inputs, b.constant
	b.parts = slices.Insert(b.parts, 0, Part{Name: "minimum charge", Value: r.MinimumCharge, Assumption: p.entry(r)})
	b.names = slices.Insert(b.names, 0, "minimum charge")
	b.rate = b.rate.Mul(r.MinimumCharge)
	b.entered = append(b.entered, p.compiler.entries.of(p.entry(r)))
	b.unitPrice.entry = p.entry(r)
	made, err := b.finish(p.places)
	if err != nil {
		return nil, fmt.Errorf("minimum charge of %s: %w", p.entry(r), err)
	}
	if sum.Cmp(made.unit.Round(p.minor)) >= 0 {
		return nil, nil
	}
	text := fmt.Sprintf("minimum charge: the lines would be %s %s", sum, p.currency)
	p.note("minimum-charge", c.category, p.entry(r), text)
	d := draft{place: len(p.items), rate: c.lead, quantity: one, note: text}
	line, err := p.makeLine(c, &d, made)
	if err != nil {
		return nil, err
	}
	line.Driver, line.Unit = ratebook.Lump, ratebook.Lump.Unit()
	line.Assumptions = p.compiler.dependsOn(made.entries)
	t := p.compiler.atLeast(details, r.MinimumCharge.Float64()*entered, conversions)
	return &raised{line, detail{[]term{t}, made.entries}}, nil
}

// atLeast returns the term max(first-order product of the details, least) · Π
// conversions.
func (c *compiler) atLeast(details []detail, least float64, conversions []int32) term {
	var terms []term
	for _, d := range details {
		terms = append(terms, d.terms...)
	}
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
	return term{monomial: c.monomials.of(factors...), after: c.monomials.of(conversions...), coefficient: coefficient, least: least}
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
