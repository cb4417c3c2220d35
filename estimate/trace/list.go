package trace

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/spelling"
)

// Figures lists the figures that can be asked for, by rising id: those that the
// register's feeds name, and totals beside them. Entries of the register can be
// asked for by their ids too.
func Figures(d document.Document) []Summary { return New(d).Figures() }

// Figures lists the figures that can be asked for, by rising id.
func (t *Tracer) Figures() []Summary {
	all := t.doc.Figures()
	out := make([]Summary, 0, len(all)+5)
	for id, v := range all {
		out = append(out, Summary{Figure: id, Value: plain(v), Unit: t.unit(id)})
	}
	for _, id := range []string{atConfidence, reserve, "total/net", "total/delivered", "total/purchased"} {
		if d, ok := t.total(id); ok {
			out = append(out, Summary{Figure: id, Value: d.Value, Unit: d.Unit})
		}
	}
	slices.SortFunc(out, func(a, b Summary) int { return strings.Compare(a.Figure, b.Figure) })
	return out
}

// plain writes the numbers of a figure as the document prints them, not with the
// exponents of a debugging aid.
func plain(figure string) string {
	words := strings.Fields(figure)
	for i, w := range words {
		if x, err := strconv.ParseFloat(w, 64); err == nil && strings.Contains(w, "e") {
			words[i] = text(document.Number(x))
		}
	}
	return strings.Join(words, " ")
}

// unit is the unit of a figure of the document.
func (t *Tracer) unit(id string) string {
	head, rest, _ := strings.Cut(id, "/")
	last := rest[strings.LastIndex(rest, "/")+1:]
	switch head {
	case "carbon":
		return carbonUnit
	case "member":
		if last == "net" {
			return "kg"
		}
		return ""
	case "group":
		if last != "amount" {
			return "t"
		}
	case "item":
		if it, ok := t.items[strings.TrimSuffix(rest, "/"+last)]; ok {
			for _, q := range it.Quantities {
				if quantityID(it.ID, q.Driver) == id {
					return q.Unit
				}
			}
		}
		return "t"
	}
	return t.doc.Job.Currency
}

// UnknownError reports a figure that the document does not have.
type UnknownError struct {
	Found string
	Near  []string // figures with nearly that id, the nearest first
}

// Error says what was found, what would be accepted and what is near.
func (e *UnknownError) Error() string {
	s := fmt.Sprintf("figure: found %s; accepted: an id of the list of figures, such as base, range, category/material, line/{item}/{rate}, item/{item}/delivered, member/{mark}/net, or of an assumption", quote(e.Found))
	if len(e.Near) > 0 {
		s += "; near: " + strings.Join(e.Near, ", ")
	}
	return s
}

// quote quotes the start of a text.
func quote(s string) string {
	if r := []rune(s); len(r) > 80 {
		s = string(r[:80]) + "…"
	}
	return fmt.Sprintf("%q", s)
}

const (
	mostNear = 4
	longest  = 120 // letters of an id that near misses are sought for
)

// unknown is the error of a figure that is not there, with near misses by letters,
// then those that hold the text asked for.
func (t *Tracer) unknown(figure string) error {
	e := &UnknownError{Found: figure}
	if figure == "" || len(figure) > longest {
		return e
	}
	type miss struct {
		id string
		at int
	}
	asked := strings.ToLower(figure)
	var list []miss
	for _, s := range t.ids() {
		id := strings.ToLower(s)
		switch far := max(2, len(asked)/4); {
		case strings.Contains(id, asked):
			list = append(list, miss{s, far})
		case len(id) <= len(asked)+far && len(asked) <= len(id)+far:
			if n := spelling.Distance(asked, id); n <= far {
				list = append(list, miss{s, n})
			}
		}
	}
	slices.SortFunc(list, func(a, b miss) int {
		if a.at != b.at {
			return a.at - b.at
		}
		return strings.Compare(a.id, b.id)
	})
	for _, m := range list[:min(mostNear, len(list))] {
		e.Near = append(e.Near, m.id)
	}
	return e
}

// ids are all that can be asked for: figures and entries.
func (t *Tracer) ids() []string {
	var out []string
	for _, s := range t.Figures() {
		out = append(out, s.Figure)
	}
	for _, e := range t.doc.Assumptions {
		out = append(out, e.ID)
	}
	return out
}
