package comparison

import (
	"fmt"
	"strings"
	"text/tabwriter"
)

// ArrangementText writes the ways to hold a length for a terminal: one line for each,
// the priced ones by the mean of their range, then how sure the order is.
func ArrangementText(a ArrangementComparison) string {
	var b strings.Builder
	c := a.Comparison
	fmt.Fprintf(&b, "%s\n\n%s, %s\n\n", c.Caution, c.Currency, c.Money)
	w := tabwriter.NewWriter(&b, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprint(w, "way to hold the length\tsection\tsteel, t\tballast, t\tfootings, m³\tdeflection, mm\tbase\tmean\tP10\tP50\tP80\tP90\tcheapest\t\n")
	for i, s := range c.Schemes {
		x := a.Arrangements[i]
		fmt.Fprintf(w, "%s\t%s\t%.1f\t%.1f\t%.1f\t%.0f\t%s\t%s\t", x.Name, x.Section, float64(x.Steel+x.PlanBracing)/1e3, float64(x.Ballast)/1e3, float64(x.Footings), float64(x.Deflection), s.Base, figures(s.Mean))
		for _, p := range []float64{0.1, 0.5, 0.8, 0.9} {
			fmt.Fprint(w, percentile(s, p), "\t")
		}
		fmt.Fprint(w, percent(float64(s.Cheapest.Value)), "\t\n")
	}
	_ = w.Flush() // a strings.Builder does not fail
	b.WriteByte('\n')
	if len(c.Schemes) > 0 {
		first := c.Schemes[0].ID
		for _, p := range c.Pairs {
			if p.First == first {
				fmt.Fprintln(&b, p.Sentence)
				writeDifference(&b, p.Difference)
			}
		}
	}
	for _, x := range a.Arrangements {
		if !x.Priced {
			fmt.Fprintf(&b, "Without a price: %s: %s.\n", x.Name, x.Reason)
		}
	}
	for _, x := range a.Notes {
		fmt.Fprintln(&b, x)
	}
	for _, x := range c.Notes {
		fmt.Fprintln(&b, x)
	}
	fmt.Fprintln(&b, c.Method)
	return b.String()
}

// percent writes a probability; what is nearly sure or nearly excluded is not rounded
// to certainty.
func percent(p float64) string {
	switch {
	case p > 0.995:
		return "> 99 %"
	case p > 0 && p < 0.005:
		return "< 1 %"
	}
	return fmt.Sprintf("%.0f %%", 100*p)
}
