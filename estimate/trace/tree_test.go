package trace_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/trace"
)

// walk visits every node.
func walk(n trace.Node, visit func(trace.Node)) {
	visit(n)
	for _, c := range n.Children {
		walk(c, visit)
	}
}

// everyEstimate runs a test on each of the estimates.
func everyEstimate(t *testing.T, test func(*testing.T, *trace.Tracer, []trace.Summary)) {
	for name, document := range estimates() {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			d := document(t)
			tracer := trace.New(d)
			figures := tracer.Figures()
			for id := range d.Figures() {
				if !slices.ContainsFunc(figures, func(s trace.Summary) bool { return s.Figure == id }) {
					t.Fatalf("%s is not listed", id)
				}
			}
			test(t, tracer, figures)
		})
	}
}

// Every figure of whole estimates ends in inputs, assumptions and constants of a
// cited clause; no arithmetic on the way fails; and no chain of questions comes
// back to where it was.
func TestEveryFigureEndsInLeaves(t *testing.T) {
	everyEstimate(t, func(t *testing.T, tracer *trace.Tracer, figures []trace.Summary) {
		if len(figures) < 50 {
			t.Fatalf("only %d figures", len(figures))
		}
		made := map[string][]string{} // of which figures one is made
		whole := func(id string) {
			tree, err := tracer.Tree(id, trace.Limits{})
			if err != nil {
				t.Fatalf("%s: %v", id, err)
			}
			explained := map[string]bool{}
			walk(tree, func(n trace.Node) {
				explained[n.Figure] = explained[n.Figure] || len(n.Children) > 0
				for _, c := range n.Children {
					made[n.Figure] = append(made[n.Figure], c.Figure)
				}
			})
			walk(tree, func(n trace.Node) { faults(t, id, n, explained) })
		}
		whole("contingency") // it explains most of the others
		for _, s := range figures {
			root, err := tracer.Tree(s.Figure, trace.Limits{Depth: 1})
			if err != nil || root.Value != s.Value || root.Unit != s.Unit || root.Figure != s.Figure {
				t.Errorf("%s: %v; the tree says %s = %q %s, the document %q %s", s.Figure, err, root.Figure, root.Value, root.Unit, s.Value, s.Unit)
			}
			if made[s.Figure] == nil {
				whole(s.Figure)
			}
		}
		if ring := circle(made); ring != nil {
			t.Errorf("a question comes back: %s", strings.Join(ring, " → "))
		}
	})
}

// faults reports what is wrong with one node of a whole tree.
func faults(t *testing.T, id string, n trace.Node, explained map[string]bool) {
	t.Helper()
	say := func(format string, args ...any) {
		t.Helper()
		t.Errorf("%s: node %s %q: %s", id, n.Figure, n.What, fmt.Sprintf(format, args...))
	}
	if n.What == "" || n.Cut != 0 {
		say("says nothing, or is cut: %+v", n)
	}
	for _, note := range n.Notes {
		if strings.Contains(note, "does not recompute") || strings.Contains(note, "no such") || note == "not found" {
			say("%s (%s)", note, n.Arithmetic)
		}
	}
	switch {
	case n.Repeated:
		if !explained[n.Figure] {
			say("is said to be explained elsewhere and is not")
		}
	case len(n.Children) > 0:
	case !n.Kind.Leaf():
		say("ends as %s", n.Kind)
	case n.Kind == trace.Constant && n.Clause == "":
		say("a constant without a clause")
	case n.Kind != trace.Constant && (n.Source == "" || n.Owner == ""):
		say("a leaf without source or owner: %+v", n)
	case n.Kind != trace.Constant && n.Version == "":
		say("a leaf without a version")
	}
}

// circle returns a chain that comes back to its start, nil where there is none.
func circle(made map[string][]string) []string {
	const open, done = 1, 2
	state := map[string]int{}
	var path []string
	var visit func(string) []string
	visit = func(id string) []string {
		if id == "" || state[id] == done {
			return nil
		}
		path = append(path, id)
		defer func() { path = path[:len(path)-1] }()
		if state[id] == open {
			return slices.Clone(path)
		}
		state[id] = open
		for _, c := range made[id] {
			if ring := visit(c); ring != nil {
				return ring
			}
		}
		state[id] = done
		return nil
	}
	for id := range made {
		if ring := visit(id); ring != nil {
			return ring
		}
	}
	return nil
}
