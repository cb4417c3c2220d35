package schedule

import (
	"context"
	"fmt"
	"slices"
	"strings"

	"spanwright/structural/unit"
)

// DefinitionEntry says how well one item of the definition checklist is defined.
type DefinitionEntry struct {
	Item   string `json:"item"` // of DefinitionItems
	State  string `json:"state" enum:"none,preliminary,defined"`
	Remark string `json:"remark,omitempty"`
}

// The states of definition, as they stand in DefinitionEntry.State.
const (
	StateNone        = "none"
	StatePreliminary = "preliminary"
	StateDefined     = "defined"
)

func definitionStates() []string { return []string{StateNone, StatePreliminary, StateDefined} }

// preliminaryPart is what a preliminary item counts of its weight, in per cent: a
// job all of whose items are preliminary reaches just the end of class 4. Common
// practice, no source.
const preliminaryPart = 15

// checklist are the items of the definition checklist with their weights in per
// cent, which sum to 100: what moves tonnes and hours most weighs most. Common
// practice, no source.
var checklist = []struct {
	item   string
	weight int
}{
	{"loads and actions", 15},
	{"layout and spans", 15},
	{"support arrangement", 10},
	{"member sizes", 15},
	{"site and ground", 10},
	{"access and erection method", 10},
	{"coating and corrosivity", 5},
	{"execution class", 5},
	{"quantities source", 10},
	{"prices and quotations", 5},
}

// DefinitionItems returns the items of the definition checklist, in their order.
func DefinitionItems() []string {
	items := make([]string, len(checklist))
	for i, c := range checklist {
		items[i] = c.item
	}
	return items
}

// maturity are the bands of maturity of definition by estimate class, in per cent
// (ASTM E2516 and AACE 17R-97: 0 to 2, 1 to 15, 10 to 40, 30 to 70, 50 to 100;
// from memory). Where two overlap, the less defined class is taken.
var maturity = []struct{ class, from, to int }{{5, 0, 2}, {4, 1, 15}, {3, 10, 40}, {2, 30, 70}, {1, 50, 100}}

// ClassFromDefinition returns the estimate class, 5 to 1, that follows from a
// checklist; its score, the weighted part of the items that is defined, 0 to 1; and
// one sentence that says why. An item that is missing, unknown or in no known state
// counts as none, the first of two entries of an item counts. The class is that of
// the lowest band of maturity that holds the score, but no better than 4 while an
// item is not defined at all, and no better than 3 while one is preliminary: a score
// that some items earn says nothing about the others (common practice, no source).
func ClassFromDefinition(entries []DefinitionEntry) (class int, score float64, why string) {
	points := 0 // of 10,000
	best := 1
	var lacking []string
	for _, c := range checklist {
		i := slices.IndexFunc(entries, func(e DefinitionEntry) bool { return e.Item == c.item })
		switch {
		case i >= 0 && entries[i].State == StateDefined:
			points += c.weight * 100
			continue
		case i >= 0 && entries[i].State == StatePreliminary:
			points += c.weight * preliminaryPart
			best = max(best, 3)
		default:
			best = 4
		}
		lacking = append(lacking, c.item)
	}
	score = float64(points) / 10_000
	k := slices.IndexFunc(maturity, func(m struct{ class, from, to int }) bool { return points <= m.to*100 })
	m := maturity[k]
	why = fmt.Sprintf("The checklist scores %s %% of a full definition, and class %d covers %d to %d %%", unit.FormatNumber(score*100, unit.Unit{}, 4), m.class, m.from, m.to)
	if class = max(m.class, best); class > m.class {
		why += fmt.Sprintf(", but class %d is the best while items are open", class)
	}
	if len(lacking) > 0 {
		why += "; not yet defined: " + strings.Join(lacking, ", ")
	}
	return class, score, why + "."
}

// The columns of the sheet Definition.
const (
	definitionItem = iota
	definitionState
	definitionRemark
	definitionCount
)

// definitionHeads is indexed by the columns of the sheet Definition.
var definitionHeads = [definitionCount]definition{
	definitionItem: {Column: Column{Header: "Item", Obligatory: true, Accepts: strings.Join(DefinitionItems(), ", "), Meaning: "what may be defined; an item that is not listed counts as none", Example: "loads and actions"},
		hints: []string{"name", "deliverable", "subject"}, choices: DefinitionItems},
	definitionState: {Column: Column{Header: "State", Obligatory: true, Accepts: strings.Join(definitionStates(), ", "), Meaning: "how well it is defined", Example: StatePreliminary},
		hints: []string{"status", "maturity", "level"}, choices: definitionStates},
	definitionRemark: {Column: Column{Header: "Remark", Meaning: "free text", Example: "wind and wave actions still assumed"},
		hints: []string{"remarks", "note", "comment"}},
}

// DefinitionColumns returns the columns of the sheet Definition, in the order of the
// template.
func DefinitionColumns() []Column { return described(definitionHeads[:]) }

// readDefinition reads the checklist, in the order of its items.
func (r *reader) readDefinition(ctx context.Context, s annexSource) error {
	items := DefinitionItems()
	err := r.readAnnex(ctx, s, definitionHeads[:], func(w *annexRow) {
		e := DefinitionEntry{Remark: w.text(definitionRemark, longestText).value}
		if e.Item = w.word(definitionItem, items, "is no item of the checklist"); e.Item != "" {
			w.once(definitionItem, e.Item)
		}
		e.State = w.word(definitionState, definitionStates(), "is no state of definition")
		r.definition = append(r.definition, e)
	})
	slices.SortStableFunc(r.definition, func(a, b DefinitionEntry) int { return slices.Index(items, a.Item) - slices.Index(items, b.Item) })
	return err
}

// word reads one of the words, whatever its letter case; empty where it is faulty.
func (w *annexRow) word(id int, words []string, problem string) string {
	t := w.needed(id, "one of "+strings.Join(words, ", "))
	if t.state != given {
		return ""
	}
	i := slices.IndexFunc(words, func(x string) bool { return fold(x) == fold(t.value) })
	if i < 0 {
		w.judge(id, &complaint{t.value, problem, didYouMean(near(t.value, words), "one of "+strings.Join(words, ", "))})
		return ""
	}
	return words[i]
}
