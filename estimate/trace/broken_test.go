package trace_test

import (
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/trace"
)

// complaints are the figures of a whole tree whose numbers do not recompute.
func complaints(t *testing.T, d document.Document, figure string) []string {
	t.Helper()
	tree, err := trace.New(d).Tree(figure, trace.Limits{})
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	walk(tree, func(n trace.Node) {
		for _, note := range n.Notes {
			if strings.Contains(note, "does not recompute") {
				out = append(out, n.Figure)
			}
		}
	})
	slices.Sort(out)
	return slices.Compact(out)
}

// A number that was changed in a stored document is noted where it stands and in
// the sums and products that it is part of, and nowhere else.
func TestWhatDoesNotRecomputeIsNoted(t *testing.T) {
	cent, gram := parse(t, "0.01"), parse(t, "0.001")
	for _, c := range []struct {
		name, ask string
		spoil     func(*document.Document)
		want      func(document.Document) []string
	}{
		{"base", "base", func(d *document.Document) { d.Totals.Base = d.Totals.Base.Add(cent) }, func(document.Document) []string { return []string{"base"} }},
		{"contingency", "contingency", func(d *document.Document) { d.Totals.Contingency = d.Totals.Contingency.Add(cent) }, func(document.Document) []string { return []string{"contingency"} }},
		{"confidence", "at confidence", func(d *document.Document) { d.Totals.AtConfidence = d.Totals.AtConfidence.Add(cent) }, func(document.Document) []string { return []string{"at confidence"} }},
		{"line", "base", func(d *document.Document) { d.Lines[0].Amount = d.Lines[0].Amount.Add(cent) }, func(d document.Document) []string { return withPercentages(d, d.Lines[0]) }},
		{"unit price", "base", func(d *document.Document) { d.Lines[0].UnitPrice = d.Lines[0].UnitPrice.Add(cent) }, func(d document.Document) []string { return []string{d.Lines[0].ID, d.Lines[0].ID + "#unit price"} }},
		{"carbon", "carbon/total", func(d *document.Document) { d.Carbon.Total = d.Carbon.Total.Add(cent) }, func(document.Document) []string { return []string{"carbon/total"} }},
		{"utilisation", "member/LB1/check/bending", func(d *document.Document) { memberOf(d, "LB1").Checks[0].Utilisation *= 1.000001 }, func(document.Document) []string { return []string{"member/LB1/check/bending"} }},
		{"net mass", "member/LB1/net", func(d *document.Document) { memberOf(d, "LB1").Net += 0.000001 }, func(document.Document) []string { return []string{"member/LB1/net"} }},
		{"measured", "item/" + itemSpoiled + "/delivered", func(d *document.Document) { quantityOf(d, "delivered tonnes").Measured *= 1.01 }, func(document.Document) []string {
			return []string{"item/" + itemSpoiled + "/delivered", "item/" + itemSpoiled + "/delivered#measured"}
		}},
		{"metres", "item/" + itemSpoiled + "/metres", func(d *document.Document) { q := quantityOf(d, "metres"); q.Value = q.Value.Add(cent) }, func(document.Document) []string {
			return []string{"item/" + itemSpoiled + "/metres"}
		}},
		{"group", "group/Towers/delivered", func(d *document.Document) { g := groupOf(d, "Towers"); g.Delivered = g.Delivered.Add(gram) }, func(document.Document) []string { return []string{"group/Towers/delivered"} }},
	} {
		t.Run(c.name, func(t *testing.T) {
			d := stored(t, estimates()["brackwater, unit-rate"](t))
			if got := complaints(t, d, c.ask); got != nil {
				t.Fatalf("before: %q", got)
			}
			c.spoil(&d)
			want := c.want(d)
			slices.Sort(want)
			if got := complaints(t, d, c.ask); !slices.Equal(got, want) {
				t.Errorf("got %q, want %q", got, want)
			}
		})
	}
}

// withPercentages are a line and what sums it: its category, and the sums that
// percentages are taken of.
func withPercentages(d document.Document, l document.Line) []string {
	out := []string{l.ID, "category/" + l.Category}
	for _, o := range d.Lines {
		if slices.Contains(o.Of, l.ID) {
			out = append(out, o.ID+"#quantity")
		}
	}
	return out
}

func memberOf(d *document.Document, mark string) *document.Member {
	return &d.Members[slices.IndexFunc(d.Members, func(m document.Member) bool { return m.Mark == mark })]
}

// itemSpoiled is the item of the boom's tubes.
const itemSpoiled = "Loading boom/CHS/size/tube booms"

func quantityOf(d *document.Document, driver string) *document.Quantity {
	it := &d.Items[slices.IndexFunc(d.Items, func(it document.Item) bool { return it.ID == itemSpoiled })]
	return &it.Quantities[slices.IndexFunc(it.Quantities, func(q document.Quantity) bool { return q.Driver == driver })]
}

func groupOf(d *document.Document, name string) *document.Group {
	return &d.Groups[slices.IndexFunc(d.Groups, func(g document.Group) bool { return g.Group == name })]
}

func parse(tb testing.TB, text string) money.Decimal {
	tb.Helper()
	d, err := money.Parse(text)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// A document with holes is answered as far as it goes, and says what is missing.
func TestHolesAreSaid(t *testing.T) {
	whole := estimates()["extended, en1993"](t)
	for name, dig := range map[string]func(*document.Document){
		"everything":  func(d *document.Document) { *d = document.Document{} },
		"members":     func(d *document.Document) { d.Members = nil },
		"items":       func(d *document.Document) { d.Items = nil },
		"lines":       func(d *document.Document) { d.Lines = nil },
		"assumptions": func(d *document.Document) { d.Assumptions = nil },
		"groups":      func(d *document.Document) { d.Groups = nil },
		"cutting":     func(d *document.Document) { d.Cutting = nil },
		"percentiles": func(d *document.Document) { d.Range = document.Range{} },
		"inputs": func(d *document.Document) {
			for i := range d.Members {
				d.Members[i].Inputs, d.Members[i].LineMass = nil, 0
			}
		},
	} {
		t.Run(name, func(t *testing.T) {
			d := stored(t, whole)
			dig(&d)
			tracer := trace.New(d)
			for _, s := range tracer.Figures() {
				tree, err := tracer.Tree(s.Figure, trace.Limits{Nodes: 150})
				if err != nil || trace.Text(tree) == "" {
					t.Errorf("%s: %v", s.Figure, err)
				}
			}
			if got := complaints(t, d, "base"); name == "lines" && !slices.Contains(got, "category/material") {
				t.Errorf("without lines the categories still recompute: %q", got)
			}
		})
	}
}
