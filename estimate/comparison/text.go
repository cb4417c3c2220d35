package comparison

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"

	"spanwright/estimate/document"
)

// Text writes a comparison for a terminal. Percentiles are shown to three figures,
// base and premium to the minor unit.
func Text(c Comparison) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n\n%s, %s\n\n", c.Caution, c.Currency, c.Money)
	w := tabwriter.NewWriter(&b, 0, 0, 2, ' ', tabwriter.AlignRight)
	row := func(name string, cell func(Scheme) string) {
		fmt.Fprint(w, name, "\t")
		for _, s := range c.Schemes {
			fmt.Fprint(w, cell(s), "\t")
		}
		fmt.Fprintln(w)
	}
	row("", func(s Scheme) string { return s.Scheme })
	row("delivered, t", func(s Scheme) string { return s.Delivered.String() })
	row("base estimate", func(s Scheme) string { return s.Base.String() })
	row("contingency", func(s Scheme) string { return s.Contingency.String() })
	for _, p := range percentilesOf(c.Schemes) {
		row(fmt.Sprintf("P%.3g", 100*p), func(s Scheme) string { return percentile(s, p) })
	}
	row("cheapest, probability", func(s Scheme) string { return percent(float64(s.Cheapest.Value)) })
	row("split method would add", func(s Scheme) string {
		if s.Premium == nil {
			return "–"
		}
		return s.Premium.String()
	})
	row("of it by unsafe sections", func(s Scheme) string {
		if s.UnsafeCost == nil {
			return "–"
		}
		return s.UnsafeCost.String()
	})
	row("unsafe findings", func(s Scheme) string { return fmt.Sprint(s.Findings) })
	row("carbon, kg CO₂e", func(s Scheme) string {
		if s.Carbon.Sign() == 0 {
			return "–"
		}
		return s.Carbon.String()
	})
	_ = w.Flush() // a strings.Builder does not fail
	b.WriteByte('\n')
	for _, p := range c.Pairs {
		fmt.Fprintln(&b, p.Sentence)
		writeDifference(&b, p.Difference)
	}
	for _, s := range c.Schemes {
		if len(s.Unsafe) > 0 {
			fmt.Fprintf(&b, "UNSAFE by the split method in %s: %s.\n", s.Scheme, strings.Join(s.Unsafe, ", "))
		}
	}
	for _, n := range c.Notes {
		fmt.Fprintln(&b, n)
	}
	fmt.Fprintln(&b, c.Method)
	return b.String()
}

// percentilesOf are the probabilities that any of the schemes shows, ascending.
func percentilesOf(schemes []Scheme) []float64 {
	var out []float64
	for _, s := range schemes {
		for _, p := range s.Percentiles {
			out = append(out, float64(p.P))
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// percentile is the scheme's own, – where it does not show that one.
func percentile(s Scheme, p float64) string {
	for _, q := range s.Percentiles {
		if float64(q.P) == p {
			return figures(q.Value)
		}
	}
	return "–"
}

func writeDifference(b *strings.Builder, d Difference) {
	fmt.Fprintf(b, "  Difference of totals: mean %s", figures(d.Mean))
	for _, q := range d.Percentiles {
		fmt.Fprintf(b, ", P%.3g %s", 100*float64(q.P), figures(q.Value))
	}
	b.WriteString(".\n")
}

// figures writes a number to three figures, in full.
func figures(n document.Number) string {
	short, err := strconv.ParseFloat(strconv.FormatFloat(float64(n), 'g', 3, 64), 64)
	if err != nil {
		return "–"
	}
	return strconv.FormatFloat(short, 'f', -1, 64)
}
