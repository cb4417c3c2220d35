package schedule

import (
	"slices"
	"strings"
	"unicode"
)

// fold reduces a header, a key or a word to its letters and digits in lower case.
func fold(text string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return unicode.ToLower(r)
		}
		return -1
	}, text)
}

// nearest is how many near misses are named at the most.
const nearest = 3

// near returns the accepted words within a third of their letters of text, the
// nearest first.
func near(text string, accepted []string) []string {
	type candidate struct {
		word     string
		distance int
	}
	var list []candidate
	found := []rune(fold(text))
	if len(found) > 60 {
		return nil
	}
	for _, word := range accepted {
		letters := []rune(fold(word))
		if d := editDistance(found, letters); d <= max(2, len(letters)/3) && d < len(letters) && d < len(found) {
			list = append(list, candidate{word, d})
		}
	}
	slices.SortStableFunc(list, func(a, b candidate) int { return a.distance - b.distance })
	var words []string
	for _, c := range list[:min(nearest, len(list))] {
		words = append(words, c.word)
	}
	return words
}

// editDistance is the least number of letters inserted, deleted, replaced or
// swapped with their neighbour that turns a into b (optimal string alignment;
// Levenshtein 1966, Damerau 1964).
func editDistance(a, b []rune) int {
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

// didYouMean is the remedy that names near misses, else the fallback.
func didYouMean(words []string, fallback string) string {
	if len(words) == 0 {
		return fallback
	}
	return "did you mean " + strings.Join(words, " or ") + "?"
}
