package workbook

import (
	"strings"
	"unicode/utf8"

	"spanwright/estimate/sheet"
)

// noteWidth is the most characters of a row of running text: a longer one would
// make the sheet too wide to print.
const noteWidth = 110

// say writes a text below a table, in as many rows as it needs.
func (b *book) say(s string) {
	for _, line := range broken(s, noteWidth) {
		b.Row(text(line))
	}
}

// hint writes a text below a table and an empty row.
func (b *book) hint(s string) {
	b.Row()
	b.say(s)
}

// broken breaks a text at spaces into lines of a width.
func broken(s string, width int) []string {
	if s == "" {
		return nil
	}
	lines := []string{""}
	for _, word := range strings.Fields(s) {
		last := &lines[len(lines)-1]
		switch {
		case *last == "":
			*last = word
		case utf8.RuneCountInString(*last)+1+utf8.RuneCountInString(word) <= width:
			*last += " " + word
		default:
			lines = append(lines, word)
		}
	}
	return lines
}

// explain writes a label with a text in the column of explanations, in as many
// rows as it needs.
func (b *book) explain(label, s string) {
	for _, line := range broken(s, noteWidth) {
		b.Row(text(label), sheet.Blank(), sheet.Blank(), text(line))
		label = ""
	}
}
