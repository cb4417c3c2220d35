package pricing

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// Percentages take rounded lines, item by item and for the whole structure, each
// after what it is taken of, in whatever order the rates stand.
//
//	A: fabrication 10.5 × 60.33 = 633.465 → 633.47; inspection 0.065 × 633.47 =
//	41.175 55 → 41.18; margin 0.08 × 1.25 × (633.47 + 41.18) = 67.465 → 67.47
//	whole: engineering 1 000.05 once, of which margin is 100.005 → 100.01
func TestPercentages(t *testing.T) {
	r := euros(t,
		rate("margin", ratebook.Margin, ratebook.CostOf, 0.08, ratebook.Inspection, ratebook.Fabrication, ratebook.Engineering),
		rate("inspection", ratebook.Inspection, ratebook.CostOf, 0.065, ratebook.Fabrication),
		rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60.33),
		rate("survey", ratebook.Engineering, ratebook.Lump, 1000.05))
	r.Multipliers = []ratebook.Multiplier{project("scarce work", 1.25, ratebook.Margin)}
	p := price(t, []takeoff.Item{item(t, "A", hours, "10.5")}, r)
	want := []string{
		"line/A/labour: 10.5 × 60.3300 = 633.47",
		"line/A/inspection: 633.47 × 0.065000 = 41.18",
		"line/A/margin: 674.65 × 0.100000 = 67.47",
		"line/whole structure/survey: 1 × 1000.0500 = 1000.05",
		"line/whole structure/margin: 1000.05 × 0.100000 = 100.01",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	m := p.Lines[2]
	if diff := cmp.Diff([]string{"line/A/inspection", "line/A/labour"}, m.Of); diff != "" || m.Unit != "EUR" || m.Formula != "fraction" {
		t.Errorf("%s unit %q, formula %q", diff, m.Unit, m.Formula)
	}
	ids := []string{"allowance/growth", "allowance/shop hours", "multiplier/scarce work/project", "norm/crew", "rate/inspection", "rate/labour", "rate/margin"}
	if diff := cmp.Diff(ids, m.Assumptions); diff != "" {
		t.Error(diff)
	}
	// The model: hours · rate · (1 + i)(1 + m·s) + survey · (1 + m·s).
	values := map[string]float64{"rate/labour": 70, "rate/inspection": 0.1, "rate/margin": 0.2, "multiplier/scarce work/project": 1.5, "rate/survey": 2000}
	if got, want := trial(p.Model, values), 10.5*70*1.1*1.3+2000*1.3; !near(got, want) {
		t.Errorf("the model gives %.15g, want %.15g", got, want)
	}
}

// A percentage selects items as any rate does; the whole structure of a
// job without an execution class is of none, so a percentage for a class leaves its lines out.
func TestAPercentageWithASelection(t *testing.T) {
	exc3 := rate("exc3", ratebook.Inspection, ratebook.CostOf, 0.1, ratebook.Fabrication)
	exc3.Select = ratebook.Selection{Executions: []string{"EXC3"}}
	r := euros(t, exc3, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 50), rate("jig", ratebook.Fabrication, ratebook.Lump, 900))
	a, b := item(t, "A", hours, "10"), item(t, "B", hours, "10")
	a.Execution, b.Execution = "EXC2", "EXC3"
	want := []string{
		"line/A/labour: 10 × 50.0000 = 500.00", "line/B/labour: 10 × 50.0000 = 500.00",
		"line/B/exc3: 500.00 × 0.100000 = 50.00", "line/whole structure/jig: 1 × 900.0000 = 900.00",
	}
	if diff := cmp.Diff(want, amounts(price(t, []takeoff.Item{a, b}, r).Lines)); diff != "" {
		t.Error(diff)
	}
}

// In a job of EXC3 the lumps are inspected as EXC3, and by the same law coated as the
// job is; in one that states no class by the rate for the blank one.
func TestTheWholeStructureIsOfTheJobsClass(t *testing.T) {
	percentage := func(id string, v float64, executions ...string) ratebook.Rate {
		r := rate(id, ratebook.Inspection, ratebook.CostOf, v, ratebook.Fabrication)
		r.Select.Executions = executions
		return r
	}
	paint := rate("paint", ratebook.Coating, ratebook.CostOf, 0.5, ratebook.Fabrication)
	paint.Select.Coatings = []string{"C5 high"}
	r := euros(t, percentage("exc2", 0.04, "", "EXC2"), percentage("exc3", 0.07, "EXC3"), paint, rate("jig", ratebook.Fabrication, ratebook.Lump, 900))
	jig := "line/whole structure/jig: 1 × 900.0000 = 900.00"
	for _, c := range []struct {
		whole ratebook.Place
		want  []string
	}{
		{ratebook.Place{}, []string{jig, "line/whole structure/exc2: 900.00 × 0.040000 = 36.00"}},
		{ratebook.Place{Execution: "EXC2"}, []string{jig, "line/whole structure/exc2: 900.00 × 0.040000 = 36.00"}},
		{ratebook.Place{Execution: "EXC3"}, []string{jig, "line/whole structure/exc3: 900.00 × 0.070000 = 63.00"}},
		{ratebook.Place{Execution: "EXC3", Coating: "C5 high"}, []string{jig, "line/whole structure/paint: 900.00 × 0.500000 = 450.00", "line/whole structure/exc3: 900.00 × 0.070000 = 63.00"}},
	} {
		r.Whole = c.whole
		if diff := cmp.Diff(c.want, amounts(price(t, nil, r).Lines)); diff != "" {
			t.Errorf("%+v: %s", c.whole, diff)
		}
	}
	// Only these two fields count: a rate of a group is not that of the whole.
	tower := percentage("exc3", 0.9, "EXC3")
	tower.Scope, tower.Subject = ratebook.GroupScope, "Tower"
	r.Rates, r.Whole = append(r.Rates, tower), ratebook.Place{Execution: "EXC3", Group: "Tower"}
	if diff := cmp.Diff([]string{jig, "line/whole structure/exc3: 900.00 × 0.070000 = 63.00"}, amounts(price(t, nil, r).Lines)); diff != "" {
		t.Error(diff)
	}
}

// A percentage may have a minimum charge: 10 % of 500 + 300 is below 200, by 120.
func TestAPercentageWithAMinimumCharge(t *testing.T) {
	fee := rate("fee", ratebook.Inspection, ratebook.CostOf, 0.1, ratebook.Fabrication)
	fee.MinimumCharge = decimal(t, "200")
	r := euros(t, fee, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 50))
	p := price(t, []takeoff.Item{item(t, "A", hours, "10"), item(t, "B", hours, "6")}, r)
	want := []string{
		"line/A/labour: 10 × 50.0000 = 500.00", "line/A/fee: 500.00 × 0.100000 = 50.00", "line/B/labour: 6 × 50.0000 = 300.00",
		"line/B/fee: 300.00 × 0.100000 = 30.00", "line/whole structure/fee/minimum charge: 1 × 120.0000 = 120.00",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Error(diff)
	}
	for fraction, want := range map[float64]float64{0.1: 1000, 0.2: 1000, 0.5: 1200} {
		if got := trial(p.Model, map[string]float64{"rate/fee": fraction}); !near(got, want) {
			t.Errorf("fraction %g: the model gives %.15g, want %.15g", fraction, got, want)
		}
	}
}

// A category that is named twice counts once.
func TestAPercentageOfACategoryNamedTwice(t *testing.T) {
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 50), rate("fee", ratebook.Margin, ratebook.CostOf, 0.1, ratebook.Fabrication, ratebook.Fabrication))
	p := price(t, []takeoff.Item{item(t, "A", hours, "10")}, r)
	if diff := cmp.Diff("line/A/fee: 500.00 × 0.100000 = 50.00", amounts(p.Lines)[1]); diff != "" {
		t.Error(diff)
	}
}

func TestACycleNamesItself(t *testing.T) {
	r := euros(t,
		rate("i", ratebook.Inspection, ratebook.CostOf, 0.1, ratebook.Margin),
		rate("m", ratebook.Margin, ratebook.CostOf, 0.1, ratebook.Fabrication, ratebook.Inspection))
	_, err := Price([]takeoff.Item{item(t, "A", hours, "10")}, r)
	if err == nil || !strings.Contains(err.Error(), "inspection → margin → inspection") {
		t.Errorf("got %v, want an error that names inspection → margin → inspection", err)
	}
	r.Rates = append(r.Rates, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 50))
	r.Categories = []string{ratebook.Fabrication, ratebook.Inspection} // without margin there is no circle
	if _, err := Price([]takeoff.Item{item(t, "A", hours, "10")}, r); err != nil {
		t.Errorf("without margin: %v", err)
	}
}
