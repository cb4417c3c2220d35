package pricing

import (
	"fmt"
	"sort"
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// compiler merges the products of lines into a Model.
type compiler struct {
	inputs   map[string]Input
	products map[string]*product
	systemic takeoff.Allowance
}

// product is a term whose factors are still named by id.
type product struct {
	category    string
	coefficient float64
	factors     []named
}

type named struct {
	id     string
	offset float64
}

func newCompiler(r Rates) *compiler {
	c := &compiler{inputs: map[string]Input{}, products: map[string]*product{}, systemic: r.Systemic}
	if r.Systemic.ID != "" {
		c.inputs[r.Systemic.ID] = Input{ID: r.Systemic.ID, Spread: r.Systemic.Spread}
	}
	return c
}

// add compiles one line. The coefficient is chosen so that at base values the
// product is the line's own unrounded decimal product: the rounded quantity,
// divided by its allowances at base, by the reference price.
func (c *compiler) add(item takeoff.Item, line *Line, r Rates) error {
	allowances := item.ToDelivered
	coefficient := line.Quantity.Float64()
	rate := named{id: line.RateID}
	if line.Category == ratebook.Material {
		allowances = item.ToPurchased
		c.input(rate.id, r.Book.MaterialPrice.Spread, r.Book.MaterialPrice.Group)
	} else {
		coefficient *= r.Book.ReferencePrice.Float64()
		f := r.Book.Ratios[line.Category]
		c.input(rate.id, f.Spread, f.Group)
	}
	p := product{category: line.Category, factors: []named{rate}}
	for _, a := range allowances {
		if !(a.Value() > 0) {
			return fmt.Errorf("%s: allowance %s makes a mass of zero", line.ID, a.ID)
		}
		coefficient /= a.Value()
		c.input(a.ID, a.Spread, "")
		p.factors = append(p.factors, named{id: a.ID, offset: a.Offset})
	}
	place := ratebook.Place{Mark: item.Marks[0], Group: item.Group, Family: item.Family}
	for _, i := range ratebook.Resolve(r.Multipliers, line.Category, place) {
		m := r.Multipliers[i]
		c.input(MultiplierID(m), m.Spread, m.Group)
		p.factors = append(p.factors, named{id: MultiplierID(m)})
	}
	sort.Slice(p.factors, func(i, j int) bool { return p.factors[i].id < p.factors[j].id })
	key := p.key()
	if merged, ok := c.products[key]; ok {
		merged.coefficient += coefficient
		return nil
	}
	p.coefficient = coefficient
	c.products[key] = &p
	return nil
}

func (c *compiler) input(id string, s spread.Spread, group string) {
	c.inputs[id] = Input{ID: id, Spread: s, Group: group}
}

func (p product) key() string {
	var b strings.Builder
	b.WriteString(p.category)
	for _, f := range p.factors {
		fmt.Fprintf(&b, "\x00%s\x00%g", f.id, f.offset)
	}
	return b.String()
}

// model numbers the inputs and sorts the terms by key, so that the same job
// gives the same model whatever the order of its rows.
func (c *compiler) model() Model {
	var m Model
	number := map[string]int{}
	ids := make([]string, 0, len(c.inputs))
	for id := range c.inputs {
		ids = append(ids, id)
	}
	sort.Strings(ids)
	for i, id := range ids {
		number[id] = i
		m.Inputs = append(m.Inputs, c.inputs[id])
	}
	keys := make([]string, 0, len(c.products))
	for k := range c.products {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	for _, k := range keys {
		p := c.products[k]
		t := Term{Category: p.category, Coefficient: p.coefficient}
		for _, f := range p.factors {
			t.Factors = append(t.Factors, Factor{Input: number[f.id], Offset: f.offset})
		}
		m.Terms = append(m.Terms, t)
	}
	if c.systemic.ID != "" {
		m.Overall = []Factor{{Input: number[c.systemic.ID], Offset: c.systemic.Offset}}
	}
	return m
}

// Base returns the model's total at the base values of its inputs, without the
// factors on the whole.
func (m Model) Base() float64 {
	total := 0.0
	for _, t := range m.Terms {
		v := t.Coefficient
		for _, f := range t.Factors {
			v *= f.Offset + m.Inputs[f.Input].Spread.Base()
		}
		total += v
	}
	return total
}
