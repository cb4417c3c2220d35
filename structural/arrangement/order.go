package arrangement

import (
	"cmp"
	"slices"

	"spanwright/structural/section"
)

// ordered returns a copy of sections, lightest first, equal masses by designation.
func ordered(sections []section.Section) []section.Section {
	return sortedBy(sections, func(a, b section.Section) int { return compare(a.Mass, b.Mass, a.Designation, b.Designation) })
}

// sortedBy returns a stably sorted copy.
func sortedBy[T any](in []T, order func(a, b T) int) []T {
	out := slices.Clone(in)
	slices.SortStableFunc(out, order)
	return out
}

// compare orders by mass, then by name.
func compare(massA, massB float64, nameA, nameB string) int {
	if c := cmp.Compare(massA, massB); c != 0 {
		return c
	}
	return cmp.Compare(nameA, nameB)
}
