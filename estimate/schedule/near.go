package schedule

import (
	"slices"
	"strings"
	"unicode"

	"spanwright/structural/spelling"
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
	found := fold(text)
	if len(found) > 60 {
		return nil
	}
	for _, word := range accepted {
		letters := fold(word)
		if d := spelling.Distance(found, letters); d <= max(2, len(letters)/3) && d < len(letters) && d < len(found) {
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

// didYouMean is the remedy that names near misses, else the fallback.
func didYouMean(words []string, fallback string) string {
	if len(words) == 0 {
		return fallback
	}
	return "did you mean " + strings.Join(words, " or ") + "?"
}
