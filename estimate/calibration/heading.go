package calibration

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode"

	"spanwright/structural/spelling"
	"spanwright/structural/unit"
)

// complaint is what is wrong with one text: a fault that has no place yet.
type complaint struct {
	found, problem, remedy string
}

// heading is one header, understood.
type heading struct {
	column int       // index into definitions; -1 where it is not known
	unit   unit.Unit // of a mass
	wrong  *complaint
}

// massUnits are those that a mass may be given in.
var massUnits = []string{"kg", "t", "lb"}

var kilogram = unit.Must("kg")

// readHeading finds the column that a header names, and the unit of a mass:
// "Weighed mass (t)".
func readHeading(text string) heading {
	name, inner := cutBrackets(text)
	i := slices.IndexFunc(definitions, func(d definition) bool { return fold(d.name()) == fold(name) })
	if i < 0 {
		return heading{-1, unit.Unit{}, unknown(text, name)}
	}
	d := definitions[i]
	h := heading{column: i, unit: kilogram}
	switch {
	case inner == "":
	case d.kind != massKind:
		h.wrong = &complaint{shorten(text), "is a column without a unit", "write " + d.Header}
	default:
		u, err := unit.Lookup(inner)
		if err != nil || !slices.Contains(massUnits, u.Symbol) {
			h.wrong = &complaint{shorten(text), fmt.Sprintf("names the unit %q, which is not read here", shorten(inner)), "write " + d.Header + ", or t or lb in the brackets"}
		}
		h.unit = u
	}
	if d.kind == massKind && inner == "" {
		h.wrong = &complaint{shorten(text), "is a mass without a unit", "write " + d.Header + ", or t or lb in the brackets"}
	}
	return h
}

// unknown names near misses of a header: other words in use first, then spelling.
func unknown(text, name string) *complaint {
	var near []string
	for _, d := range definitions {
		if slices.ContainsFunc(d.hints, func(h string) bool { return fold(h) == fold(name) }) {
			near = append(near, d.Header)
		}
	}
	if len(near) == 0 {
		headers := make([]string, len(definitions))
		for i, d := range definitions {
			headers[i] = d.Header
		}
		near = nearMisses(name, headers)
	}
	return &complaint{shorten(text), "is not known here", didYouMean(near, "accepted are the heads of the template")}
}

// cutBrackets parts "name (inner)"; without brackets at the end inner is empty.
func cutBrackets(text string) (name, inner string) {
	text = strings.Join(strings.Fields(text), " ")
	if open := strings.LastIndexByte(text, '('); open > 0 && strings.HasSuffix(text, ")") {
		return strings.TrimSpace(text[:open]), strings.TrimSpace(text[open+1 : len(text)-1])
	}
	return text, ""
}

// fold reduces a word to its letters and digits in lower case.
func fold(text string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return unicode.ToLower(r)
		}
		return -1
	}, text)
}

// nearMisses returns up to three accepted words within a third of their letters,
// the nearest first; what stands in brackets does not count.
func nearMisses(text string, accepted []string) []string {
	return spelling.Near(text, accepted, func(word string) string {
		name, _ := cutBrackets(word)
		return fold(name)
	})
}

// shorten cuts a text that a message repeats.
func shorten(text string) string {
	const shown = 60
	if runes := []rune(text); len(runes) > shown {
		return string(runes[:shown]) + "…"
	}
	return text
}

// fromUnit turns the refusal of a quantity into a complaint.
func fromUnit(found string, err error, wanted string) *complaint {
	var e *unit.Error
	if !errors.As(err, &e) {
		return &complaint{shorten(found), "is not read", wanted}
	}
	if e.Accepted != "" {
		wanted = e.Accepted
	}
	return &complaint{e.Text, e.Problem, wanted}
}

// didYouMean is the remedy that names near misses, else the fallback.
func didYouMean(near []string, fallback string) string { return spelling.DidYouMean(near, fallback) }
