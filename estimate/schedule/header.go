package schedule

import (
	"errors"
	"fmt"
	"strings"

	"spanwright/structural/unit"
)

// complaint is what is wrong with one text: a fault that has no place yet.
type complaint struct {
	found, problem, remedy string
}

// heading is one header or key, understood.
type heading struct {
	id    int        // index into the definitions
	unit  unit.Unit  // named in the header; zero where none or two are named
	named bool       // the header names a unit, or two
	lost  []int      // on a complaint: definitions that may have been meant
	wrong *complaint // nil where the header is in order
}

// cutBrackets parts "name (inner)" or "name [inner]"; without brackets at the
// end inner is empty.
func cutBrackets(text string) (name, inner string) {
	text = strings.Join(strings.Fields(text), " ")
	for _, pair := range []string{"()", "[]"} {
		open := strings.LastIndexByte(text, pair[0])
		if open > 0 && text[len(text)-1] == pair[1] {
			return strings.TrimSpace(text[:open]), strings.TrimSpace(text[open+1 : len(text)-1])
		}
	}
	return text, ""
}

// readHeading finds the definition that a header names and the unit that it
// gives: "Length (ft)", "length [mm]", "Length, m", "Axial load (kip, compression +)".
func readHeading(text string, list []definition) heading {
	name, inner := cutBrackets(text)
	id := find(name, list)
	if id < 0 && inner == "" {
		if head, tail, ok := cutLast(name, ","); ok {
			if id = find(head, list); id >= 0 {
				inner = tail
			}
		}
	}
	if id < 0 {
		return unknownHeading(text, name, list)
	}
	h := heading{id: id}
	if inner != "" {
		h.readUnits(text, inner, list[id])
	}
	return h
}

func find(name string, list []definition) int {
	key := fold(name)
	for i, d := range list {
		if fold(d.name()) == key {
			return i
		}
	}
	return -1
}

func cutLast(text, sep string) (head, tail string, ok bool) {
	i := strings.LastIndex(text, sep)
	if i < 0 {
		return text, "", false
	}
	return strings.TrimSpace(text[:i]), strings.TrimSpace(text[i+len(sep):]), true
}

// unknownHeading names near misses: other words in use first, then spelling.
func unknownHeading(text, name string, list []definition) heading {
	key := fold(name)
	var names, suggested []string
	var lost []int
	for i, d := range list {
		names = append(names, d.name())
		for _, hint := range d.hints {
			if fold(hint) == key {
				suggested, lost = append(suggested, d.Header), append(lost, i)
			}
		}
	}
	if len(suggested) == 0 {
		for _, n := range near(name, names) {
			i := find(n, list)
			suggested, lost = append(suggested, list[i].Header), append(lost, i)
		}
	}
	remedy := didYouMean(suggested, "accepted are "+strings.Join(names, ", "))
	return heading{lost: lost, wrong: &complaint{shorten(text), "is not known here", remedy}}
}

// readUnits reads what stands in a header's brackets.
func (h *heading) readUnits(text, inner string, d definition) {
	remedy := "write " + d.Header
	if d.Unit != "" {
		remedy += " or another unit of " + d.accepts()
	}
	parts := strings.FieldsFunc(strings.ReplaceAll(inner, " or ", ","), func(r rune) bool { return r == ',' || r == ';' })
	for _, part := range parts {
		if d.noted(part) {
			continue
		}
		u, err := unit.Lookup(strings.TrimSpace(part))
		var refused *unit.Error
		switch {
		case len(d.dimensions) == 0:
			h.complain(text, "is a column without a unit", remedy)
		case errors.As(err, &refused):
			h.complain(text, fmt.Sprintf("names a unit that is not read: %q %s", refused.Text, refused.Problem), remedy)
		case !d.takes(u):
			h.complain(text, fmt.Sprintf("is in the wrong unit: %s is a %s", u.Symbol, u.Dimension), remedy)
		case h.named && u != h.unit && len(d.dimensions) < 2:
			h.complain(text, "names two units", remedy)
		case h.named && u != h.unit:
			h.unit = unit.Unit{}
		default:
			h.unit, h.named = u, true
		}
		if h.wrong != nil {
			return
		}
	}
}

func (d definition) noted(part string) bool {
	key := fold(part)
	if key == "" {
		_, err := unit.Lookup(strings.TrimSpace(part))
		return err != nil // signs alone say nothing, but for % and the marks of feet and inches
	}
	for _, n := range d.notes {
		if n == key || fold(n) == key {
			return true
		}
	}
	return false
}

func (h *heading) complain(text, problem, remedy string) {
	h.lost = []int{h.id}
	h.wrong = &complaint{shorten(text), problem, remedy}
}

// shorten cuts a text that a message repeats.
func shorten(text string) string {
	const shown = 60
	if len(text) <= shown {
		return text
	}
	if runes := []rune(text); len(runes) > shown {
		return string(runes[:shown]) + "…"
	}
	return text
}
