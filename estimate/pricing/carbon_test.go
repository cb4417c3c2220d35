package pricing

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

func factor(id, module string, d ratebook.Driver, v float64) ratebook.CarbonFactor {
	return ratebook.CarbonFactor{ID: id, Module: module, Driver: d, Figure: around(v)}
}

// By hand: 24.643 t × 1 130.5 = 27 858.9 → 27 859 kg; 940.3 kg × 3.1 = 2 914.93 →
// 2 915; 6 302.1 t·km × 0.0625 = 393.88 → 394; 40 h × 0.0125 = 0.5 → 1, a tie.
func TestCarbonByHand(t *testing.T) {
	a := item(t, "A", string(ratebook.PurchasedTonnes), "24.643", string(ratebook.ZincKilograms), "940.3", string(ratebook.TonneKilometres), "6302.1")
	b := item(t, "B", string(ratebook.PurchasedTonnes), "10.000", string(ratebook.SiteHours), "40.0")
	b.Waste = ratebook.WastePlate
	tube := factor("steel/tube", "A1-A3", ratebook.PurchasedTonnes, 1130.5)
	tube.Select.Wastes = []string{ratebook.WasteTube}
	factors := []ratebook.CarbonFactor{factor("site", "A5", ratebook.SiteHours, 0.0125), tube, factor("zinc", "A1-A3", ratebook.ZincKilograms, 3.1), factor("road", "A4", ratebook.TonneKilometres, 0.0625)}
	p, err := PriceCarbon([]takeoff.Item{b, a}, factors)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		"carbon/A/steel%2Ftube: 24.643 × 1130.5000 = 27859", "carbon/A/zinc: 940.3 × 3.1000 = 2915",
		"carbon/A/road: 6302.1 × 0.0625 = 394", "carbon/B/site: 40.0 × 0.0125 = 1",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	l := p.Lines[0]
	if diff := cmp.Diff([]string{"allowance/growth", "allowance/purchased tonnes", "carbon/steel%2Ftube", "norm/crew"}, l.Assumptions); diff != "" || l.RateID != "carbon/steel%2Ftube" || l.Category != "A1-A3" {
		t.Errorf("%s factor %q, module %q", diff, l.RateID, l.Category)
	}
	if p.Modules["A1-A3"].String() != "30774" || p.Modules["A4"].String() != "394" || p.Modules["A5"].String() != "1" || p.Total.String() != "31169" {
		t.Errorf("got modules %v, total %s", p.Modules, p.Total)
	}
	if got, want := p.Model.Base(), 24.643*1130.5+940.3*3.1+6302.1*0.0625+0.5; !near(got, want) {
		t.Errorf("the model's base is %.15g, want %.15g", got, want)
	}
	if got, want := trial(p.Model, map[string]float64{"carbon/zinc": 6.2}), 24.643*1130.5+940.3*6.2+6302.1*0.0625+0.5; !near(got, want) {
		t.Errorf("with twice the zinc factor the model gives %.15g, want %.15g", got, want)
	}
}

func TestCarbonRefuses(t *testing.T) {
	for name, f := range map[string]ratebook.CarbonFactor{
		"a lump":              factor("x", "A5", ratebook.Lump, 1),
		"a fraction of money": factor("x", "A5", ratebook.CostOf, 1),
		"a negative factor":   factor("x", "A5", ratebook.SiteHours, -1),
	} {
		if _, err := PriceCarbon([]takeoff.Item{item(t, "A", hours, "1.0")}, []ratebook.CarbonFactor{f}); err == nil || !strings.Contains(err.Error(), "carbon/x") {
			t.Errorf("%s: got %v, want an error that names carbon/x", name, err)
		}
	}
}
