package spelling

import "testing"

// Distances of the literature: kitten/sitting 3 (Levenshtein's usual example), CA/ABC
// 3 by optimal string alignment, a swap of neighbours 1 (Damerau 1964). From memory.
func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{
		{"kitten", "sitting", 3}, {"saturday", "sunday", 3}, {"ca", "abc", 3}, {"lenght", "length", 1}, {"", "abc", 3}, {"same", "same", 0},
	} {
		if got := Distance(c.a, c.b); got != c.want {
			t.Errorf("%s to %s: %d, want %d", c.a, c.b, got, c.want)
		}
		if got := Distance(c.b, c.a); got != c.want {
			t.Errorf("%s to %s: %d, want %d", c.b, c.a, got, c.want)
		}
	}
}
