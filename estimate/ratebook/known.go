package ratebook

import "slices"

// Coatings returns the coatings that rates of the category coating price, sorted.
// Where one of them prices any coating, and in a ratio book, it returns nil: any
// will do.
func (b Book) Coatings() []string {
	var out []string
	for _, r := range b.PricedRates() {
		if r.Category != Coating {
			continue
		}
		if len(r.Select.Coatings) == 0 {
			return nil
		}
		out = append(out, r.Select.Coatings...)
	}
	slices.Sort(out)
	return slices.DeleteFunc(slices.Compact(out), func(c string) bool { return c == "" })
}
