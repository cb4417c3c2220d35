package schedule

import (
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

// near returns the accepted words within a third of their letters of text, the
// nearest first.
func near(text string, accepted []string) []string { return spelling.Near(text, accepted, fold) }

// didYouMean is the remedy that names near misses, else the fallback.
func didYouMean(near []string, fallback string) string { return spelling.DidYouMean(near, fallback) }
