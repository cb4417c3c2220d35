package pricing

import (
	"slices"

	"spanwright/estimate/ratebook"
)

// spot is what prices the items of one place: by category the rates, and the
// list of multipliers.
type spot struct {
	rates       map[string][]int // indices in Rates.Rates, by rate id
	multipliers map[string]int32 // pool number of indices in Rates.Multipliers
}

// atlas finds the spot of a place. Places that no rate and no multiplier tells
// apart share one.
type atlas struct {
	rates       []ratebook.Rate
	multipliers []ratebook.Multiplier
	categories  []string
	byRate      subjects
	byFactor    subjects
	selected    [6]map[string]bool // values that a selection names, by field
	lists       *pool
	spots       map[ratebook.Place]*spot
}

func newAtlas(rates []ratebook.Rate, multipliers []ratebook.Multiplier, categories []string, lists *pool) *atlas {
	a := &atlas{rates: rates, multipliers: multipliers, categories: categories, lists: lists, spots: map[ratebook.Place]*spot{}}
	for i := range a.selected {
		a.selected[i] = map[string]bool{}
	}
	for i, r := range rates {
		a.byRate.add(i, r.Scope, r.Subject)
		s := r.Select
		for field, values := range [][]string{s.Treatments, s.Families, s.Connections, s.Wastes, s.Coatings, s.Executions} {
			for _, v := range values {
				a.selected[field][v] = true
			}
		}
	}
	for i, m := range multipliers {
		a.byFactor.add(i, m.Scope, m.Subject)
	}
	return a
}

// at returns the spot of a place.
func (a *atlas) at(p ratebook.Place) *spot {
	p = a.essential(p)
	if known, ok := a.spots[p]; ok {
		return known
	}
	s := &spot{rates: map[string][]int{}, multipliers: map[string]int32{}}
	candidates := a.byRate.at(p)
	few := make([]ratebook.Rate, len(candidates))
	for i, c := range candidates {
		few[i] = a.rates[c]
	}
	for _, i := range ratebook.ResolveRates(few, p) {
		category := few[i].Category
		s.rates[category] = append(s.rates[category], candidates[i])
	}
	a.addMultipliers(s, p)
	a.spots[p] = s
	return s
}

func (a *atlas) addMultipliers(s *spot, p ratebook.Place) {
	candidates := a.byFactor.at(p)
	few := make([]ratebook.Multiplier, len(candidates))
	for i, c := range candidates {
		few[i] = a.multipliers[c]
	}
	for _, category := range a.categories {
		var won []int32
		for _, i := range ratebook.Resolve(few, category, p) {
			won = append(won, int32(candidates[i]))
		}
		s.multipliers[category] = a.lists.of(won...)
	}
}

// unnamed stands for every value that no rate and no multiplier names. It differs
// from the blank one, which a selection may name.
const unnamed = "\x00"

// essential blurs what no rate or multiplier asks of the place.
func (a *atlas) essential(p ratebook.Place) ratebook.Place {
	named := func(s ratebook.Scope, name string) bool {
		key := subject{s, name}
		return a.byRate.named[key] != nil || a.byFactor.named[key] != nil
	}
	keep := func(field int, value *string, scope ratebook.Scope) {
		if *value == "" {
			return
		}
		if !(field >= 0 && a.selected[field][*value]) && !(scope != "" && named(scope, *value)) {
			*value = unnamed
		}
	}
	keep(-1, &p.Mark, ratebook.MemberScope)
	keep(-1, &p.Group, ratebook.GroupScope)
	keep(0, &p.Treatment, "")
	keep(1, &p.Family, ratebook.FamilyScope)
	keep(2, &p.Connection, "")
	keep(3, &p.Waste, "")
	keep(4, &p.Coating, "")
	keep(5, &p.Execution, "")
	return p
}

// subjects finds what may apply at a place without a search through all.
type subjects struct {
	general []int
	named   map[subject][]int
}

type subject struct {
	scope ratebook.Scope
	name  string
}

func (s *subjects) add(i int, scope ratebook.Scope, name string) {
	switch scope {
	case ratebook.MemberScope, ratebook.GroupScope, ratebook.FamilyScope:
		if s.named == nil {
			s.named = map[subject][]int{}
		}
		key := subject{scope, name}
		s.named[key] = append(s.named[key], i)
	default:
		s.general = append(s.general, i)
	}
}

// at returns those that may apply at p. Those of one scope and subject, of which
// the later wins, keep their order.
func (s *subjects) at(p ratebook.Place) []int {
	out := slices.Clone(s.general)
	out = append(out, s.named[subject{ratebook.MemberScope, p.Mark}]...)
	out = append(out, s.named[subject{ratebook.GroupScope, p.Group}]...)
	out = append(out, s.named[subject{ratebook.FamilyScope, p.Family}]...)
	return out
}
