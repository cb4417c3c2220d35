package dashboard

import (
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/spread"
)

const mostAssumptions = 500

// assumptions are the register, by kind.
type assumptions struct {
	Total int
	Kinds []assumptionKind
	More  int // left out of the table
}

type assumptionKind struct {
	Kind string
	Rows []assumptionRow
}

// assumptionRow is one entry of the register.
type assumptionRow struct {
	ID, Statement string
	Value         string // the value, or low / likely / high
	Shape         string // of a spread
	Scope         string
	Source        string
	Owner         string
	Confidence    string
	Feeds         string // how many figures
}

// kinds is the order in which the page shows them: what was believed without
// being asked first.
var kinds = []assumption.Kind{assumption.Default, assumption.Allowance, assumption.Rate, assumption.Multiplier,
	assumption.Systemic, assumption.Structural, assumption.Setting, assumption.Input}

// newAssumptions groups the entries by kind and keeps the first mostAssumptions.
func newAssumptions(all []assumption.Entry) assumptions {
	sorted := slices.Clone(all)
	slices.SortStableFunc(sorted, func(a, b assumption.Entry) int {
		return slices.Index(kinds, a.Kind) - slices.Index(kinds, b.Kind)
	})
	out := assumptions{Total: len(all)}
	for i, e := range sorted {
		if i == mostAssumptions {
			out.More = len(sorted) - i
			break
		}
		if n := len(out.Kinds); n == 0 || out.Kinds[n-1].Kind != string(e.Kind) {
			out.Kinds = append(out.Kinds, assumptionKind{Kind: string(e.Kind)})
		}
		last := &out.Kinds[len(out.Kinds)-1]
		last.Rows = append(last.Rows, newAssumptionRow(e))
	}
	return out
}

func newAssumptionRow(e assumption.Entry) assumptionRow {
	r := assumptionRow{ID: e.ID, Statement: e.Statement, Value: e.Value, Scope: strings.TrimSpace(e.Scope + " " + e.Subject),
		Source: e.Source, Owner: e.Owner, Confidence: string(e.Confidence), Feeds: count(len(e.Feeds))}
	if e.Clause != "" && e.Clause != e.Source {
		r.Source = strings.TrimPrefix(e.Source+"; "+e.Clause, "; ")
	}
	unit := e.Unit
	if e.Spread != nil {
		factor := 1.0
		if unit == "fraction" {
			factor, unit = 100, "%"
		}
		r.Value, r.Shape = believed(*e.Spread, factor)
	}
	switch {
	case r.Value == "":
		r.Value = dash
	case unit != "":
		r.Value += space + unit
	}
	return r
}

// believed writes a spread's numbers, times a factor, and its shape. What the
// distribution does not use is left out.
func believed(s spread.Spread, factor float64) (numbers, shape string) {
	n := func(x float64) string { return entered(x * factor) }
	if s.Distribution == spread.Fixed {
		return n(s.Likely), string(s.Distribution)
	}
	parts := []string{n(s.Low), n(s.High)}
	if s.Likely != 0 || s.Distribution != spread.Uniform && s.Distribution != spread.Lognormal {
		parts = []string{n(s.Low), n(s.Likely), n(s.High)}
	}
	shape = string(s.Distribution)
	if s.Distribution == spread.PERT {
		shape = "beta-PERT"
	}
	if s.Distribution == spread.Lognormal || s.Bounds == spread.BoundsPercentiles {
		shape += ", ends are P10 and P90"
	}
	return strings.Join(parts, space+"/ "), shape
}
