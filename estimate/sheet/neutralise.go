package sheet

import "strings"

// triggers begin a text that spreadsheet programs would take for a formula, or
// trim down to one.
const triggers = "=+-@\t\r\n"

// Neutralise puts an apostrophe before a text that a spreadsheet program would
// run as a formula: one that begins with = + - @, a tab or a line break, or with
// apostrophes and then one of these. Open takes exactly that apostrophe off
// again. Numbers never pass here: "-5" as a number stays "-5".
func Neutralise(text string) string {
	if runs(text) {
		return "'" + text
	}
	return text
}

// restore undoes Neutralise.
func restore(text string) string {
	if strings.HasPrefix(text, "'") && runs(text) {
		return text[1:]
	}
	return text
}

func runs(text string) bool {
	rest := strings.TrimLeft(text, "'")
	return rest != "" && strings.IndexByte(triggers, rest[0]) >= 0
}
