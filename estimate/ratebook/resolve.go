package ratebook

import (
	"slices"
	"sort"
)

// Scope says how widely a multiplier applies; the most specific wins.
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

// Place is where a multiplier may apply: one member with its group and family.
type Place struct {
	Mark, Group, Family string
}

func (m Multiplier) appliesTo(p Place) bool {
	switch m.Scope {
	case MemberScope:
		return m.Subject == p.Mark
	case GroupScope:
		return m.Subject == p.Group
	case FamilyScope:
		return m.Subject == p.Family
	}
	return true
}

// Resolve returns the indices in ms of the multipliers that act on a category at
// a place: of each name the most specific, names in alphabetical order. Of two
// with the same name, scope and subject the later one wins.
func Resolve(ms []Multiplier, category string, p Place) []int {
	won := map[string]int{}
	for i, m := range ms {
		if !slices.Contains(m.Categories, category) || !m.appliesTo(p) {
			continue
		}
		j, ok := won[m.Name]
		if !ok || slices.Index(specificity, m.Scope) <= slices.Index(specificity, ms[j].Scope) {
			won[m.Name] = i
		}
	}
	names := make([]string, 0, len(won))
	for n := range won {
		names = append(names, n)
	}
	sort.Strings(names)
	out := make([]int, len(names))
	for i, n := range names {
		out[i] = won[n]
	}
	return out
}
