package sheet

import (
	"strings"
	"unicode/utf8"
)

// Heights of a row in points: of one line of the font in use, and the most that
// the format allows (ISO/IEC 29500-1, 18.3.1.73, and practice of all programs).
const (
	lineHeight    = 15
	highestRow    = 409
	narrowestLine = 4 // characters
	// A column is as wide as so many digits; letters are narrower on average.
	textPerWidth = 1.15
)

// height is the height of a row whose wrapped texts need several lines, 0 for one
// that is left to the program: not every program finds heights when it opens a
// file.
func (b *Builder) height(values []Value) float64 {
	most := 1
	for i, v := range values {
		if v.drawn.wrap && i < len(b.widths) && b.widths[i] > 0 {
			most = max(most, lines(v.text, int(textPerWidth*b.widths[i])))
		}
	}
	if most == 1 {
		return 0
	}
	return float64(min(most*lineHeight, highestRow))
}

// lines counts the lines of a text broken at spaces into a width in characters.
func lines(text string, width int) int {
	width = max(width, narrowestLine)
	n, used := 1, 0
	for _, word := range strings.Fields(text) {
		size := utf8.RuneCountInString(word)
		if used > 0 && used+1+size <= width {
			used += 1 + size
			continue
		}
		if used > 0 {
			n++
		}
		n += (size - 1) / width
		used = (size-1)%width + 1
	}
	return n
}
