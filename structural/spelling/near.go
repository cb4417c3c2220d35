package spelling

import (
	"slices"
	"strings"
)

// Nearest is how many near misses Near names at the most.
const Nearest = 3

// longest is the length in bytes beyond which a word has no near miss: it would be
// slow to measure and is no slip of the hand.
const longest = 60

// Near returns the accepted words within a third of their letters of text, the
// nearest first; fold makes the letters that are compared, of both.
func Near(text string, accepted []string, fold func(string) string) []string {
	type candidate struct {
		word     string
		distance int
	}
	found := fold(text)
	if len(found) > longest {
		return nil
	}
	var list []candidate
	for _, word := range accepted {
		letters := fold(word)
		if d := Distance(found, letters); d <= max(2, len(letters)/3) && d < len(letters) && d < len(found) {
			list = append(list, candidate{word, d})
		}
	}
	slices.SortStableFunc(list, func(a, b candidate) int { return a.distance - b.distance })
	var near []string
	for _, c := range list[:min(Nearest, len(list))] {
		near = append(near, c.word)
	}
	return near
}

// DidYouMean is the remedy that names near misses, else the fallback.
func DidYouMean(near []string, fallback string) string {
	if len(near) == 0 {
		return fallback
	}
	return "did you mean " + strings.Join(near, " or ") + "?"
}
