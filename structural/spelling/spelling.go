// Package spelling measures how far a word is from another, so that designations,
// grades, heads and keys that are not known can be answered with those that are
// near.
//
//	a word that is not found → Distance to each known one → near misses
package spelling

// Distance is the least number of letters inserted, deleted, replaced or
// swapped with their neighbour that turns from into to (optimal string alignment;
// Levenshtein 1966, Damerau 1964).
func Distance(from, to string) int {
	a, b := []rune(from), []rune(to)
	before, last, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(b)]
}
