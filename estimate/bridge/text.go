package bridge

import (
	"fmt"
	"strings"
	"text/tabwriter"
)

// Text writes a bridge for a terminal: the causes with their groups, then a sentence
// for each cause that moved.
func Text(b Bridge) string {
	var out strings.Builder
	fmt.Fprintf(&out, "From %s, %s (%s) to %s, %s (%s), %s\n\n", b.From.Project, b.From.Scheme, b.From.BaseDate, b.To.Project, b.To.Scheme, b.To.BaseDate, b.Currency)
	w := tabwriter.NewWriter(&out, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintln(w, "cause\tbase\tcontingency\tamount\tstandard error\t")
	for _, s := range b.Shares {
		if s.Amount.Sign() == 0 && len(s.Groups) == 0 {
			continue
		}
		fmt.Fprintf(w, "%s\t%s\t%s\t%s\t%.3g\t\n", s.Cause, s.Amount.Sub(s.Contingency), s.Contingency, s.Amount, float64(s.SE))
	}
	fmt.Fprintf(w, "change\t%s\t%s\t%s\t\t\n", b.To.Base.Sub(b.From.Base), b.To.Contingency.Sub(b.From.Contingency), b.Change)
	fmt.Fprintf(w, "from\t%s\t%s\t%s\t\t\nto\t%s\t%s\t%s\t\t\n\n", b.From.Base, b.From.Contingency, b.From.Total, b.To.Base, b.To.Contingency, b.To.Total)
	fmt.Fprintln(w, "group\tof the base\t")
	for _, g := range b.Groups {
		fmt.Fprintf(w, "%s\t%s\t\n", g.Group, g.Amount)
	}
	_ = w.Flush() // a strings.Builder does not fail
	out.WriteByte('\n')
	for _, s := range b.Shares {
		if s.Amount.Sign() != 0 || len(s.Moved) > 0 {
			fmt.Fprintln(&out, s.Sentence)
		}
	}
	for _, n := range b.Notes {
		fmt.Fprintln(&out, n)
	}
	fmt.Fprintln(&out, b.Method+".")
	return out.String()
}
