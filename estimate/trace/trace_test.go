package trace_test

import (
	"errors"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/trace"
	"spanwright/structural/section"
)

// small is an estimate of one line, worked by hand: 20 t of net mass with a
// connection allowance of 5 % are 21.000 t; the reference price 900 times the ratio
// 2.4 is 2160 EUR/t, times the multiplier 1.05 is 2268 EUR/t; 21 × 2268 = 47 628.
func small(t testing.TB) document.Document {
	d := document.Document{EngineVersion: 2, Job: document.Job{Currency: "EUR", Source: "quay.csv", RateBook: "ratio"}}
	d.Members = []document.Member{{Mark: "B1", Group: "Quay", Item: "Quay/ladder", Quantity: 4, Length: 50, LineMass: 100, Net: 20000, Treatment: "not sized", Passes: true}}
	d.Items = []document.Item{{ID: "Quay/ladder", Group: "Quay", Family: "ladder", Treatment: "not sized", Marks: []string{"B1"}, Net: parse(t, "20.000"), Delivered: parse(t, "21.000"),
		Quantities: []document.Quantity{{Driver: "delivered tonnes", Value: parse(t, "21.000"), Unit: "t", Measured: 20, Formula: "net mass × (connections)",
			Factors: []document.Factor{{Assumption: "allowance/connections", Value: 1.05}}}}}}
	d.Lines = []document.Line{{ID: "line/Quay/ladder/fabrication", Item: "Quay/ladder", Group: "Quay", Category: "fabrication", Driver: "delivered tonnes", Quantity: parse(t, "21.000"),
		Unit: "t", RateID: "rate/fabrication", RateFormula: "reference price × ratio", UnitPrice: parse(t, "2268.0000"), Amount: parse(t, "47628.00"),
		RateParts:   []document.Part{{Name: "reference price", Value: parse(t, "900")}, {Name: "ratio", Value: parse(t, "2.4"), Assumption: "rate/fabrication"}},
		Multipliers: []document.Multiplier{{Name: "tides", Scope: "group", Subject: "Quay", Value: parse(t, "1.05"), Assumption: "multiplier/tides/group/Quay"}}}}
	d.Categories = []document.Category{{Category: "fabrication", Amount: parse(t, "47628.00")}}
	d.Totals.Base = parse(t, "47628.00")
	return d
}

// spaces are ordinary ones between thousands.
func spaces(text string) string { return strings.ReplaceAll(text, "\u00a0", " ") }

// A reviewer asks why five times.
func TestFiveWhys(t *testing.T) {
	node, err := trace.Build(small(t), "base", 0)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []struct {
		child            int
		kind             trace.Kind
		figure, numbers  string
		rounding, formed string
	}{
		{0, trace.Sum, "category/fabrication", "47 628.00 = 47 628.00 EUR", "none", "Σ lines of the category"},
		{0, trace.Product, "line/Quay/ladder/fabrication", "21.000 t × 2268.0000 EUR/t = 47 628.00 EUR", "to 2 places", "quantity × unit price"},
		{0, trace.Quantity, "item/Quay/ladder/delivered", "20 × 1.05 = 21.000 t", "once, to 3 places", "net mass × (connections)"},
		{0, trace.Sum, "item/Quay/ladder/delivered#measured", "20 000 ÷ 1000 = 20 t", "none", "Σ net mass of the members ÷ 1000"},
		{0, trace.Product, "member/B1/net", "4 × 50 m × 100 kg/m = 20 000 kg", "none", "pieces × length × nominal kg/m"},
		{1, trace.Input, "member/B1/net#length", "", "", ""},
	} {
		node = node.Children[want.child]
		node.Arithmetic = spaces(node.Arithmetic)
		if node.Figure != want.figure || node.Kind != want.kind || node.Arithmetic != want.numbers || node.Formula != want.formed || !strings.HasPrefix(node.Rounding, want.rounding) {
			t.Fatalf("got %+v, want %+v", node, want)
		}
	}
	if node.Value != "50" || node.Unit != "m" || node.Source != "schedule quay.csv, row B1" || len(node.Children) != 0 {
		t.Errorf("the end of the chain is %+v", node)
	}
}

func TestUnitPriceNamesScopeAndParts(t *testing.T) {
	node, err := trace.Build(small(t), "line/Quay/ladder/fabrication#unit price", 0)
	if err != nil {
		t.Fatal(err)
	}
	if node.Arithmetic != "900 × 2.4 × 1.05 = 2268.0000 EUR/t" || node.Formula != "reference price × ratio × tides" || node.Rounding != "to 8 places and then to 4, half away from zero" {
		t.Errorf("got %+v", node)
	}
	if tides := node.Children[2]; tides.Scope != "group Quay" || tides.Value != "1.05" || tides.Kind != trace.Assumed {
		t.Errorf("the multiplier is %+v", tides)
	}
}

func TestUnknownFigures(t *testing.T) {
	d := small(t)
	for _, c := range []struct{ asked, near string }{
		{"category/fabricaton", "category/fabrication"},
		{"Base", "base"},
		{"member/b1/net", "member/B1/net"},
		{"ladder/fabrication", "line/Quay/ladder/fabrication"},
		{"member/B1/check/bending", ""},
		{"", ""},
		{"item/Quay/ladder/kg of zinc", ""},
		{"base#", "base"},
		{"#", ""},
		{strings.Repeat("x", 5000), ""},
		{"tax", ""},
		{"carbon/total", ""},
	} {
		_, err := trace.Build(d, c.asked, 0)
		var unknown *trace.UnknownError
		if !errors.As(err, &unknown) {
			t.Errorf("%.40q: got %v", c.asked, err)
			continue
		}
		if c.near != "" && (len(unknown.Near) == 0 || unknown.Near[0] != c.near) {
			t.Errorf("%q: near are %q, want %q first", c.asked, unknown.Near, c.near)
		}
		if len(err.Error()) > 600 || !strings.Contains(err.Error(), "accepted: ") {
			t.Errorf("%.40q: the error is %q", c.asked, err)
		}
	}
}

// What a limit leaves out is counted, with figures to ask for next; asked for, they
// answer.
func TestLimitsSayWhatIsLeftOut(t *testing.T) {
	tracer := trace.New(estimates()["brackwater, unit-rate"](t))
	for _, l := range []trace.Limits{{Depth: 1}, {Depth: 3}, {Nodes: 1}, {Nodes: 7}, {Nodes: 300}, {Depth: 4, Nodes: 200}} {
		tree, err := tracer.Tree("base", l)
		if err != nil {
			t.Fatal(err)
		}
		nodes, cut := 0, 0
		walk(tree, func(n trace.Node) {
			nodes++
			cut += n.Cut
			if n.Cut > 0 && n.Kind.Leaf() {
				t.Errorf("%+v: the leaf %s is cut", l, n.Figure)
			}
			for _, id := range n.Next {
				if _, err := tracer.Tree(id, trace.Limits{Depth: 1}); err != nil {
					t.Errorf("%+v: %s says to ask for %s: %v", l, n.Figure, id, err)
				}
			}
		})
		if cut == 0 || l.Nodes > 0 && nodes > l.Nodes || l.Nodes == 7 && nodes != 7 {
			t.Errorf("%+v: %d nodes, %d cut", l, nodes, cut)
		}
	}
}

// The standards that trees cite are those of the catalogue's own data.
func TestStandardsAreThoseOfTheCatalogue(t *testing.T) {
	for _, f := range section.Families() {
		if f.Standard == "by dimensions" {
			continue
		}
		if got := trace.StandardOf(f.Name+" 1", f.Name); got != f.Standard {
			t.Errorf("%s: got %s, the catalogue has %s", f.Name, got, f.Standard)
		}
	}
}

func TestText(t *testing.T) {
	node, err := trace.Build(small(t), "category/fabrication", 2)
	if err != nil {
		t.Fatal(err)
	}
	got := spaces(trace.Text(node))
	const want = `category/fabrication = 47 628.00 EUR [sum]
  Cost of fabrication at likely values.
  how: Σ lines of the category
  numbers: 47 628.00 = 47 628.00 EUR
  rounding: none: every line was rounded before
  line/Quay/ladder/fabrication = 47 628.00 EUR [product]
    Cost of fabrication for ladder, of the group Quay, by delivered tonnes.
    how: quantity × unit price
    numbers: 21.000 t × 2268.0000 EUR/t = 47 628.00 EUR
    rounding: to 2 places, the minor unit of EUR, half away from zero
    item/Quay/ladder/delivered = 21.000 t [quantity]
      Delivered tonnes of ladder, of the group Quay: what the schedule and the sections give, times
        allowances at likely values.
      how: net mass × (connections)
      numbers: 20 × 1.05 = 21.000 t
      rounding: once, to 3 places, half away from zero
      … 2 more; ask for item/Quay/ladder/delivered#measured, allowance/connections
    line/Quay/ladder/fabrication#unit price = 2268.0000 EUR/t [product]
      Unit price of the line: the rate, brought to the money of the estimate, times the multipliers
        in force.
      how: reference price × ratio × tides
      numbers: 900 × 2.4 × 1.05 = 2268.0000 EUR/t
      rounding: to 8 places and then to 4, half away from zero
      … 3 more; ask for rate/fabrication, multiplier/tides/group/Quay
`
	if got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
	for _, l := range strings.Split(got, "\n") {
		if len([]rune(l)) > 100 {
			t.Errorf("a line of %d letters: %s", len([]rune(l)), l)
		}
	}
}
