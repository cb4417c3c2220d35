package ratebook

import (
	"maps"
	"slices"
	"strings"
)

// Scope says how widely a rate or multiplier applies; the most specific wins.
type Scope string

// The scopes, most specific first.
const (
	MemberScope  Scope = "member"
	GroupScope   Scope = "group"
	FamilyScope  Scope = "family"
	SchemeScope  Scope = "scheme"
	ProjectScope Scope = "project"
	BookScope    Scope = "rate book"
)

var specificity = []Scope{MemberScope, GroupScope, FamilyScope, SchemeScope, ProjectScope, BookScope}

func (s Scope) valid() bool { return slices.Contains(specificity, s) }

// named reports whether the scope needs a subject: a mark, a group or a family.
func (s Scope) named() bool { return s == MemberScope || s == GroupScope || s == FamilyScope }

// holds reports whether a scope with its subject covers a place.
func (s Scope) holds(subject string, p Place) bool {
	switch s {
	case MemberScope:
		return subject == p.Mark
	case GroupScope:
		return subject == p.Group
	case FamilyScope:
		return subject == p.Family
	}
	return true
}

// beats reports whether s is at least as specific as t.
func (s Scope) beats(t Scope) bool {
	return slices.Index(specificity, s) <= slices.Index(specificity, t)
}

// Resolve returns the indices in ms of the multipliers that act on a category at
// a place: of each name the most specific, names in alphabetical order. Of two
// with the same name, scope and subject the later one wins.
func Resolve(ms []Multiplier, category string, p Place) []int {
	won := map[string]int{}
	for i, m := range ms {
		if !slices.Contains(m.Categories, category) || !m.Scope.holds(m.Subject, p) {
			continue
		}
		j, ok := won[m.Name]
		if !ok || m.Scope.beats(ms[j].Scope) {
			won[m.Name] = i
		}
	}
	out := make([]int, 0, len(won))
	for _, name := range slices.Sorted(maps.Keys(won)) {
		out = append(out, won[name])
	}
	return out
}

// ResolveRates returns the indices of the rates that price an item at a place: of
// each id, among those whose selection matches and whose scope covers the place,
// the most specific one; ids in alphabetical order. Of two with the same scope the
// later one wins. Lumps are for the whole structure: they come with every place,
// Place{} included, and their triggers are not looked at.
func ResolveRates(rates []Rate, p Place) []int {
	won := make([]int, 0, len(rates)) // by id
	for i := range rates {
		r := &rates[i]
		if !r.Select.Matches(p) || !r.scope().holds(r.Subject, p) {
			continue
		}
		at, found := slices.BinarySearchFunc(won, r.ID, func(j int, id string) int { return strings.Compare(rates[j].ID, id) })
		switch {
		case !found:
			won = slices.Insert(won, at, i)
		case r.scope().beats(rates[won[at]].scope()):
			won[at] = i
		}
	}
	return won
}

// Matches reports whether every list that is not empty holds the place's value.
func (s Selection) Matches(p Place) bool {
	in := func(list []string, value string) bool { return len(list) == 0 || slices.Contains(list, value) }
	return in(s.Treatments, p.Treatment) && in(s.Families, p.Family) && in(s.Connections, p.Connection) &&
		in(s.Wastes, p.Waste) && in(s.Coatings, p.Coating) && in(s.Executions, p.Execution)
}
