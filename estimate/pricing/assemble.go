package pricing

import (
	"cmp"
	"fmt"
	"slices"

	"spanwright/estimate/takeoff"
)

// flat is a term whose factors are named, before the inputs have their numbers.
type flat struct {
	category           string
	factors, after     []named
	coefficient, least float64
}

// model numbers the inputs that are used and sorts the terms, so that the same
// job gives the same model whatever the order of its rows and rates.
func (c *compiler) model(systemic takeoff.Allowance, risks []DiscreteRisk) (Model, error) {
	var m Model
	used := map[string]bool{}
	if systemic.ID != "" {
		if _, err := c.allowance(systemic); err != nil {
			return Model{}, err
		}
		used[systemic.ID] = true
	}
	for _, r := range risks {
		if !(0 <= r.Probability && r.Probability <= 1) {
			return Model{}, fmt.Errorf("risk %q: found the probability %v; accepted: 0 to 1", r.ID, r.Probability)
		}
		if used[r.ID] {
			return Model{}, fmt.Errorf("risk %q is stated twice; accepted: one of each name", r.ID)
		}
		if _, err := c.factor(Input{ID: r.ID, Spread: r.Impact}, 0); err != nil {
			return Model{}, err
		}
		used[r.ID] = true
	}
	terms := c.flatten()
	for _, t := range terms {
		for _, f := range slices.Concat(t.factors, t.after) {
			used[f.id] = true
		}
	}
	number := map[string]int{}
	for _, id := range sortedKeys(used) {
		number[id] = len(m.Inputs)
		m.Inputs = append(m.Inputs, c.inputs[id])
	}
	m.Terms = make([]Term, len(terms))
	for i, t := range terms {
		m.Terms[i] = Term{Category: t.category, Coefficient: t.coefficient, Factors: numbered(t.factors, number), Least: t.least, After: numbered(t.after, number)}
	}
	if systemic.ID != "" {
		m.Overall = []Factor{{Input: number[systemic.ID], Offset: systemic.Offset}}
	}
	for _, r := range risks {
		m.Risks = append(m.Risks, Risk{ID: r.ID, Probability: r.Probability, Impact: number[r.ID]})
	}
	slices.SortFunc(m.Risks, func(a, b Risk) int { return cmp.Compare(a.ID, b.ID) })
	return m, nil
}

// flatten returns the terms sorted.
func (c *compiler) flatten() []flat {
	out := make([]flat, 0, len(c.merged)+len(c.charges))
	for k, s := range c.merged {
		out = append(out, flat{category: k.category, factors: c.sorted(k.monomial), coefficient: s.value()})
	}
	for _, t := range c.charges {
		out = append(out, flat{t.category, c.sorted(t.monomial), c.sorted(t.after), t.coefficient, t.least})
	}
	slices.SortFunc(out, func(a, b flat) int {
		return cmp.Or(cmp.Compare(a.category, b.category), slices.CompareFunc(a.factors, b.factors, compareNamed),
			slices.CompareFunc(a.after, b.after, compareNamed), cmp.Compare(a.coefficient, b.coefficient), cmp.Compare(a.least, b.least))
	})
	return out
}

func numbered(factors []named, number map[string]int) []Factor {
	var out []Factor
	for _, f := range factors {
		out = append(out, Factor{Input: number[f.id], Offset: f.offset})
	}
	return out
}

// Base returns the model's total at the base values of its inputs, without the
// factors on the whole and without risks.
func (m Model) Base() float64 {
	var total sum
	for _, t := range m.Terms {
		v := m.product(t.Coefficient, t.Factors)
		if t.Least > 0 {
			v = max(v, t.Least)
		}
		total.add(m.product(v, t.After))
	}
	return total.value()
}

// product returns v times the factors at base values.
func (m Model) product(v float64, factors []Factor) float64 {
	for _, f := range factors {
		v *= f.Offset + m.Inputs[f.Input].Spread.Base()
	}
	return v
}
