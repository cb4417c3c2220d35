package pricing

import (
	"fmt"
	"slices"
	"sort"

	"spanwright/estimate/takeoff"
)

// compiler numbers inputs, factors and register entries, and merges the products
// of lines into a Model.
type compiler struct {
	inputs    map[string]Input
	numbers   map[named]int32
	factors   []named
	values    []float64 // of the factors at base
	given     []Input   // of the factors
	entry     []int32   // number of the factors' register entries
	monomials *pool     // products of factors
	entries   names     // ids of the register
	sets      *pool     // of entries
	texts     map[int32][]string
	merged    map[mergeKey]*sum
	charges   []chargeTerm // with a least charge
}

// named is a factor: an offset and the value of an input.
type named struct {
	id     string
	offset float64
}

// term is a product: max(coefficient · Π monomial, least) · Π after.
type term struct {
	monomial, after    int32
	coefficient, least float64
}

type mergeKey struct {
	category string
	monomial int32
}

type chargeTerm struct {
	category string
	term
}

func newCompiler() *compiler {
	return &compiler{inputs: map[string]Input{}, numbers: map[named]int32{}, monomials: newPool(false), sets: newPool(true),
		texts: map[int32][]string{}, merged: map[mergeKey]*sum{}}
}

// factor returns the number of a factor. An input that is stated twice with
// different spreads, groups or streams is an error.
func (c *compiler) factor(in Input, offset float64) (int32, error) {
	key := named{in.ID, offset}
	n, ok := c.numbers[key]
	if ok && c.given[n] == in {
		return n, nil
	}
	if known, ok := c.inputs[in.ID]; ok && known != in {
		return 0, fmt.Errorf("assumption %q is stated twice with different spreads, groups or streams; accepted: one, or two names", in.ID)
	}
	if err := in.Spread.Validate(); err != nil {
		return 0, fmt.Errorf("assumption %q: %w", in.ID, err)
	}
	c.inputs[in.ID] = in
	n = int32(len(c.factors))
	c.numbers[key] = n
	c.factors = append(c.factors, key)
	c.values = append(c.values, offset+in.Spread.Base())
	c.given = append(c.given, in)
	c.entry = append(c.entry, c.entries.of(in.ID))
	return n, nil
}

// allowance returns the number of the factor of a quantity.
func (c *compiler) allowance(a takeoff.Allowance) (int32, error) {
	return c.factor(Input{ID: a.ID, Spread: a.Spread, Group: a.Group}, a.Offset)
}

// dependsOn returns the ids of a set of entries, sorted. The slice is shared and
// must not be changed.
func (c *compiler) dependsOn(set int32) []string {
	if known, ok := c.texts[set]; ok {
		return known
	}
	out := make([]string, 0, len(c.sets.lists[set]))
	for _, n := range c.sets.lists[set] {
		out = append(out, c.entries.texts[n])
	}
	sort.Strings(out)
	c.texts[set] = slices.Clip(out)
	return c.texts[set]
}

// times returns the term multiplied by constant · Π monomial.
func (c *compiler) times(t term, constant float64, monomial int32) term {
	t.coefficient *= constant
	if t.least > 0 {
		t.least *= constant
		t.after = c.monomials.join(t.after, monomial)
	} else {
		t.monomial = c.monomials.join(t.monomial, monomial)
	}
	return t
}

// add adds a term to the cost of a category.
func (c *compiler) add(category string, t term) {
	if t.least > 0 {
		c.charges = append(c.charges, chargeTerm{category, t})
		return
	}
	key := mergeKey{category, t.monomial}
	s := c.merged[key]
	if s == nil {
		s = &sum{}
		c.merged[key] = s
	}
	s.add(t.coefficient)
}

// sum adds floats and keeps what each addition loses (Neumaier 1974, Zeitschrift
// für angewandte Mathematik und Mechanik 54), so that the model's base holds to
// 1e-12 over any number of lines.
type sum struct{ total, lost float64 }

func (s *sum) add(x float64) {
	x = float64(x) // a product is rounded before it is added, never fused
	t := s.total + x
	if max(s.total, -s.total) >= max(x, -x) {
		s.lost += (s.total - t) + x
	} else {
		s.lost += (x - t) + s.total
	}
	s.total = t
}

func (s *sum) value() float64 { return s.total + s.lost }

// sorted returns the factors of a monomial, sorted by id and offset.
func (c *compiler) sorted(monomial int32) []named {
	out := make([]named, 0, len(c.monomials.lists[monomial]))
	for _, n := range c.monomials.lists[monomial] {
		out = append(out, c.factors[n])
	}
	slices.SortFunc(out, compareNamed)
	return out
}

func compareNamed(a, b named) int {
	switch {
	case a.id < b.id:
		return -1
	case a.id > b.id:
		return 1
	case a.offset < b.offset:
		return -1
	case a.offset > b.offset:
		return 1
	}
	return 0
}

// valueOf returns a monomial at base values, multiplied in the order of ids.
func (c *compiler) valueOf(monomial int32) float64 {
	v := 1.0
	for _, f := range c.sorted(monomial) {
		v *= c.values[c.numbers[f]]
	}
	return v
}
