package unit

import "fmt"

// Error is the refusal of one text.
type Error struct {
	Text     string // what was found, shortened to 60 characters
	Problem  string // why it was refused
	Accepted string // what would do instead; empty when Problem says it
}

// Error gives found text, problem and remedy on one line.
func (e *Error) Error() string {
	if e.Accepted == "" {
		return fmt.Sprintf("%q: %s", e.Text, e.Problem)
	}
	return fmt.Sprintf("%q: %s; accepted: %s", e.Text, e.Problem, e.Accepted)
}

const shownText = 60

func refuse(text, problem, accepted string) *Error {
	if runes := []rune(text); len(runes) > shownText {
		text = string(runes[:shownText]) + "…"
	}
	return &Error{Text: text, Problem: problem, Accepted: accepted}
}
