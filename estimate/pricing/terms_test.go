package pricing

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

const (
	tonnes = string(ratebook.DeliveredTonnes)
	hours  = string(ratebook.ShopHours)
	cubic  = string(ratebook.CubicMetres)
)

func near(got, want float64) bool { return math.Abs(got-want) <= 1e-12*math.Abs(want) }

// trial evaluates a model with the values of some inputs by id, the others at base.
// It is written apart from Model.Base.
func trial(m Model, values map[string]float64) float64 {
	x := make([]float64, len(m.Inputs))
	for i, in := range m.Inputs {
		v, ok := values[in.ID]
		if !ok {
			v = in.Spread.Base()
		}
		x[i] = v
	}
	var total, lost float64 // Kahan's sum
	for _, t := range m.Terms {
		v := t.Coefficient
		for _, f := range t.Factors {
			v *= f.Offset + x[f.Input]
		}
		if t.Least > 0 && v < t.Least {
			v = t.Least
		}
		for _, f := range t.After {
			v *= f.Offset + x[f.Input]
		}
		y := v - lost
		sum := total + y
		lost = (sum - total) - y
		total = sum
	}
	return total
}

// The break goes by the whole job: 60 + 50 t reach the break from 100 t.
func TestPriceBreakOverTheWholeJob(t *testing.T) {
	steel := rate("steel", ratebook.Material, ratebook.DeliveredTonnes, 900)
	steel.Breaks = []ratebook.Break{{From: decimal(t, "0"), Factor: decimal(t, "1.08")}, {From: decimal(t, "100"), Factor: decimal(t, "0.97")}}
	for _, c := range []struct{ second, want string }{
		{"50.000", "line/B/steel: 50.000 × 873.0000 = 43650.00"}, // 900 × 0.97
		{"40.000", "line/B/steel: 40.000 × 873.0000 = 34920.00"}, // 100 t exactly
		{"39.999", "line/B/steel: 39.999 × 972.0000 = 38879.03"}, // 900 × 1.08; 38 879.028
	} {
		p := price(t, []takeoff.Item{item(t, "A", tonnes, "60.000"), item(t, "B", tonnes, c.second)}, euros(t, steel))
		if diff := cmp.Diff(c.want, amounts(p.Lines)[1]); diff != "" {
			t.Error(diff)
		}
		if l := p.Lines[0]; !strings.Contains(l.Note, "price break") || l.Parts[1].Name != "price break" || l.Parts[1].Assumption != "rate/steel" {
			t.Errorf("note %q, parts %v", l.Note, l.Parts)
		}
		if diff := cmp.Diff([]string{"price-break rate/steel"}, codes(p.Notes)); diff != "" {
			t.Error(diff)
		}
	}
}

// A lump counts once, with the multipliers of the whole structure, when its
// trigger holds.
func TestLumps(t *testing.T) {
	facts := Facts{Kinds: []string{"boom"}, Executions: []string{"EXC2", "EXC3"}, SiteConditions: []string{"tidal"}, Permits: 1, Delivered: decimal(t, "50.000")}
	for _, c := range []struct {
		name    string
		trigger ratebook.Trigger
		want    bool
	}{
		{"always", ratebook.Trigger{}, true},
		{"kind", ratebook.Trigger{Kinds: []string{"tower", "boom"}}, true},
		{"other kind", ratebook.Trigger{Kinds: []string{"tower"}}, false},
		{"execution", ratebook.Trigger{Executions: []string{"EXC3"}}, true},
		{"other execution", ratebook.Trigger{Executions: []string{"EXC4"}}, false},
		{"site", ratebook.Trigger{SiteConditions: []string{"tidal"}}, true},
		{"other site", ratebook.Trigger{SiteConditions: []string{"live plant"}}, false},
		{"permits", ratebook.Trigger{Permits: true}, true},
		{"heavier than 49.999 t", ratebook.Trigger{DeliveredAbove: decimal(t, "49.999")}, true},
		{"heavier than 50 t", ratebook.Trigger{DeliveredAbove: decimal(t, "50")}, false},
		{"both", ratebook.Trigger{Permits: true, Kinds: []string{"boom"}}, true},
		{"one of two", ratebook.Trigger{Permits: true, Kinds: []string{"tower"}}, false},
	} {
		test := rate("load test", ratebook.Engineering, ratebook.Lump, 4000)
		test.Trigger = c.trigger
		r := euros(t, test, rate("insurance", ratebook.Indirects, ratebook.Lump, 1))
		r.Facts = facts
		r.Multipliers = []ratebook.Multiplier{project("remote", 1.25, ratebook.Engineering)}
		p := price(t, []takeoff.Item{item(t, "A", tonnes, "30.000"), item(t, "B", tonnes, "20.000")}, r)
		insurance := "line/whole structure/insurance: 1 × 1.0000 = 1.00"
		lines, notes := []string{"line/whole structure/load test: 1 × 5000.0000 = 5000.00", insurance}, []string(nil)
		if !c.want {
			lines, notes = []string{insurance}, []string{"not-triggered rate/load test"}
		}
		if diff := cmp.Diff(lines, amounts(p.Lines)); diff != "" {
			t.Errorf("%s: %s", c.name, diff)
		}
		if diff := cmp.Diff(notes, codes(p.Notes)); diff != "" {
			t.Errorf("%s: %s", c.name, diff)
		}
		if c.want && !near(trial(p.Model, map[string]float64{"multiplier/remote/project": 2}), 8001) {
			t.Errorf("%s: the model does not follow the multiplier", c.name)
		}
	}
}

func TestNotes(t *testing.T) {
	old := rate("old", ratebook.Erection, ratebook.DeliveredTonnes, 5)
	old.ValidUntil = "2026-05-31"
	fresh := rate("fresh", ratebook.Shipping, ratebook.DeliveredTonnes, 5)
	fresh.ValidUntil = "2026-06-01"
	zinc := rate("zinc", ratebook.Coating, ratebook.ZincKilograms, 5)
	zinc.ValidUntil = "2020-01-01" // not used, so not noted
	r := euros(t, old, fresh, zinc, rate("fee", ratebook.Margin, ratebook.CostOf, 0.1, ratebook.Coating))
	items := []takeoff.Item{item(t, "A", tonnes, "40.000"), item(t, "B", tonnes, "10.000")}
	p := price(t, items, r)
	if diff := cmp.Diff([]string{"no-quantity rate/zinc", "expired rate/old", "no-quantity rate/fee"}, codes(p.Notes)); diff != "" {
		t.Error(diff)
	}
	message := func(p Priced) string {
		for _, n := range p.Notes {
			if n.Code == "expired" {
				return n.Message
			}
		}
		return ""
	}
	if m := message(p); !strings.Contains(m, "2026-05-31") || !strings.Contains(m, "as it stands") {
		t.Errorf("got %q", m)
	}
	r.Escalation = map[string][]Conversion{ratebook.Erection: {{Name: "escalation to base date", ID: "index/erection", Value: decimal(t, "1.1"), Spread: spread.NewFixed(1.1)}}}
	if m := message(price(t, items, r)); !strings.Contains(m, "escalated") {
		t.Errorf("got %q", m)
	}
	missing := 0
	for _, n := range p.Notes {
		if n.Code == "no-rate" {
			missing++
		}
	}
	if want := len(ratebook.Categories()) - 4; missing != want {
		t.Errorf("%d categories without a rate are noted, want %d", missing, want)
	}
}
