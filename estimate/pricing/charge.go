package pricing

import (
	"fmt"
	"slices"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

// charge is one rate id over the whole job: what it will be charged for.
type charge struct {
	segment  string // of its lines' ids
	entry    string // register entry of the book's rate
	category string
	driver   ratebook.Driver
	unit     string
	lead     int  // the rate that holds for the whole structure, else that of the first line; −1 for none
	massive  bool // it selects an item that has mass
	idle     bool // a rate was resolved whose trigger does not hold
	failed   bool // its quantities are at fault
	drafts   []draft
	total    money.Decimal // quantity
}

// draft is a line before its price.
type draft struct {
	place    int // index of the item, or the number of items for the whole structure
	rate     int
	quantity money.Decimal
	terms    []term // that make the quantity
	entries  int32  // that the quantity depends on
	of       []string
	end      string // of the line's id
	note     string
}

// collect resolves the rates of a category at every place and gathers the
// quantities that they price, by rate id.
func (p *pricer) collect(category string) map[string]*charge {
	charges := map[string]*charge{}
	byRate := make([]*charge, len(p.rates))
	for i := range p.rates {
		r := &p.rates[i]
		if r.Category == category && charges[r.ID] == nil {
			charges[r.ID] = p.newCharge(r)
		}
		byRate[i] = charges[r.ID]
	}
	whole := len(p.items)
	for _, n := range p.spots[whole].rates[category] {
		byRate[n].lead = n
	}
	for place, s := range p.spots {
		for _, n := range s.rates[category] {
			c := byRate[n]
			if c.failed {
				continue
			}
			if err := p.gather(c, n, place); err != nil {
				c.failed = true
				p.fault(err)
			}
		}
	}
	for _, c := range charges {
		if c.driver == ratebook.Lump && c.lead >= 0 && !c.idle {
			c.drafts = []draft{{place: whole, rate: c.lead, quantity: one, terms: []term{{coefficient: 1}}}}
			c.total = one
		}
	}
	return charges
}

func (p *pricer) newCharge(r *ratebook.Rate) *charge {
	c := &charge{
		segment: assumption.Segment(r.ID), entry: p.entry(ratebook.Rate{ID: r.ID}), category: r.Category,
		driver: r.Driver, unit: r.Driver.Unit(), lead: -1,
	}
	if r.Driver == ratebook.CostOf {
		c.unit = p.currency
	}
	return c
}

// gather adds what a rate prices at a place. A lump is no more than noted: it is
// charged once.
func (p *pricer) gather(c *charge, rate, place int) error {
	r := &p.rates[rate]
	if c.lead < 0 {
		c.lead = rate
	}
	if !p.facts.triggered(r.Trigger) {
		c.idle = true
		return nil
	}
	var d draft
	var ok bool
	var err error
	switch r.Driver {
	case ratebook.Lump:
	case ratebook.CostOf:
		d, ok = p.costOf(r.Of, place)
	default:
		if place == len(p.items) {
			return nil
		}
		c.massive = c.massive || p.items[place].Delivered.Sign() > 0
		d, ok, err = p.quantity(place, r.Driver)
	}
	if err != nil || !ok {
		return err
	}
	d.place, d.rate = place, rate
	if n := len(p.drafts); c.drafts == nil && n > 0 {
		c.drafts, p.drafts = p.drafts[n-1], p.drafts[:n-1]
	}
	c.drafts = append(c.drafts, d)
	c.total = c.total.Add(d.quantity)
	return nil
}

// quantity returns the quantity of a driver at an item. The coefficient is chosen
// so that at base values the product is the rounded quantity.
func (p *pricer) quantity(place int, driver ratebook.Driver) (draft, bool, error) {
	q, ok := p.items[place].Quantity(driver)
	if !ok || q.Value.Sign() <= 0 {
		return draft{}, false, nil
	}
	d := draft{quantity: q.Value}
	t := term{coefficient: q.Value.Float64()}
	factors := make([]int32, 0, 8)
	entries := make([]int32, 0, 16)
	for _, a := range q.Factors {
		n, err := p.compiler.allowance(a)
		if err != nil {
			return draft{}, false, err
		}
		v := p.compiler.values[n]
		if !(v > 0) {
			return draft{}, false, fmt.Errorf("%s: found the allowance %s, which makes %s of zero; accepted: a factor above zero", p.items[place].ID, a.ID, driver)
		}
		t.coefficient /= v
		factors = append(factors, n)
		entries = append(entries, p.compiler.entry[n])
	}
	for _, id := range q.Fixed {
		entries = append(entries, p.compiler.entries.of(id))
	}
	t.monomial = p.compiler.monomials.of(factors...)
	d.entries = p.compiler.sets.of(entries...)
	d.terms = p.storage(1)
	d.terms[0] = t
	return d, true, nil
}

// costOf returns the sum of the rounded lines of categories at a place.
func (p *pricer) costOf(categories []string, place int) (draft, bool) {
	var d draft
	p.found = p.found[:0]
	terms := 0
	for i, c := range categories {
		if slices.Contains(categories[:i], c) {
			continue
		}
		for _, l := range p.at[c].of(place) {
			p.found = append(p.found, l)
			terms += len(l.terms)
		}
	}
	if len(p.found) == 0 {
		return d, false
	}
	d.of = make([]string, 0, len(p.found))
	d.terms = p.storage(terms)[:0]
	for _, l := range p.found {
		d.quantity = d.quantity.Add(l.line.Amount)
		d.of = append(d.of, l.line.ID)
		d.terms = append(d.terms, l.terms...)
		d.entries = p.compiler.sets.join(d.entries, l.entries)
	}
	return d, true
}

// settle makes the lines of a charge: what a minimum order lacks, the price break,
// the lines, what a minimum charge lacks.
func (p *pricer) settle(c *charge, s *shelf) error {
	if c.failed {
		return nil
	}
	if len(c.drafts) == 0 {
		return p.noteNothing(c)
	}
	p.minimumOrder(c)
	made := make([]Line, len(c.drafts))
	details := slices.Grow(p.details[:0], len(c.drafts))[:len(c.drafts)]
	p.details = details
	broken := map[int]string{}
	for i := range c.drafts {
		d := &c.drafts[i]
		key := priceKey{d.rate, p.spots[d.place].multipliers[c.category]}
		factor, text := p.breakOf(c, d.rate, broken)
		d.note = joinNotes(d.note, text)
		price, err := p.price(key, factor)
		if err != nil {
			return err
		}
		if made[i], err = p.makeLine(c, d, price); err != nil {
			return err
		}
		details[i] = detail{p.costTerms(d.terms, price), p.compiler.sets.join(d.entries, price.entries)}
		made[i].Assumptions = p.compiler.dependsOn(details[i].entries)
	}
	p.noteExpired(c)
	made, details, err := p.addMinimumCharge(c, made, details)
	if err != nil {
		return err
	}
	p.emit(c, s, made, details)
	return nil
}

// emit adds the lines of a charge to the shelf and to the model.
func (p *pricer) emit(c *charge, s *shelf, lines []Line, details []detail) {
	sum := p.sums[c.category]
	for i := range lines {
		s.add(c.drafts[i].place, detailed{&lines[i], details[i]})
		sum = sum.Add(lines[i].Amount)
		for _, t := range details[i].terms {
			p.compiler.add(c.category, t)
		}
	}
	p.sums[c.category] = sum
}

// storage returns n terms out of a larger piece of memory.
func (p *pricer) storage(n int) []term {
	if len(p.terms) < n {
		p.terms = make([]term, max(n, 4096))
	}
	out := p.terms[:n:n]
	p.terms = p.terms[n:]
	return out
}

// costTerms returns the terms of a quantity times those of its price.
func (p *pricer) costTerms(quantity []term, price *unitPrice) []term {
	out := p.storage(len(quantity))
	for i, t := range quantity {
		out[i] = p.compiler.times(t, price.constant, price.monomial)
	}
	return out
}

// makeLine prices a draft.
func (p *pricer) makeLine(c *charge, d *draft, price *unitPrice) (Line, error) {
	l := Line{
		Group: WholeStructure, Category: c.category, Driver: c.driver, Quantity: d.quantity, Unit: c.unit,
		RateID: price.entry, RateScope: p.rates[d.rate].Scope, Rate: price.rate, Parts: price.parts, Formula: price.formula,
		Multipliers: price.multipliers, UnitPrice: price.unit, Of: d.of, Note: d.note,
	}
	if l.RateScope == "" {
		l.RateScope = ratebook.BookScope
	}
	if d.place < len(p.items) {
		it := &p.items[d.place]
		l.Item, l.Group = it.ID, it.Group
	}
	if l.Item == "" {
		l.ID = p.line + WholeStructure + "/" + c.segment + d.end
	} else {
		l.ID = p.line + l.Item + "/" + c.segment
	}
	product, err := money.Product(d.quantity, price.unit)
	if err != nil {
		return Line{}, fmt.Errorf("%s, %s: quantity × unit price; accepted: a likely value of %s, or multipliers, of fewer decimals: %w", l.ID, l.RateID, l.RateID, err)
	}
	l.Amount = product.Round(p.minor)
	return l, nil
}
