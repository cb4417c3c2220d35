package pricing

import (
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// Every driver that a take-off counts, by hand: the arithmetic stands in the line.
func TestLinesOfEveryDriverByHand(t *testing.T) {
	for _, c := range []struct {
		driver   ratebook.Driver
		quantity string
		price    float64
		unit     string
		want     string
	}{
		{ratebook.NetTonnes, "18.250", 12.5, "t", "line/A/r: 18.250 × 12.5000 = 228.13"},           // 228.125, a tie
		{ratebook.DeliveredTonnes, "21.007", 2160, "t", "line/A/r: 21.007 × 2160.0000 = 45375.12"}, // 45 375.12
		{ratebook.PurchasedTonnes, "24.643", 900, "t", "line/A/r: 24.643 × 900.0000 = 22178.70"},   // 22 178.70
		{ratebook.Metres, "120.45", 3.1, "m", "line/A/r: 120.45 × 3.1000 = 373.40"},                // 373.395, a tie
		{ratebook.Pieces, "7", 45.335, "pcs", "line/A/r: 7 × 45.3350 = 317.35"},                    // 317.345, a tie
		{ratebook.SquareMetres, "310.11", 28.4, "m²", "line/A/r: 310.11 × 28.4000 = 8807.12"},      // 8 807.124
		{ratebook.CubicMetres, "12.50", 310, "m³", "line/A/r: 12.50 × 310.0000 = 3875.00"},         // 3 875
		{ratebook.ZincKilograms, "940.3", 4.25, "kg", "line/A/r: 940.3 × 4.2500 = 3996.28"},        // 3 996.275, a tie
		{ratebook.WeldKilograms, "61.7", 21.9, "kg", "line/A/r: 61.7 × 21.9000 = 1351.23"},         // 1 351.23
		{ratebook.ShopHours, "588.2", 60, "h", "line/A/r: 588.2 × 60.0000 = 35292.00"},             // 35 292
		{ratebook.SiteHours, "294.1", 64.5, "h", "line/A/r: 294.1 × 64.5000 = 18969.45"},           // 18 969.45
		{ratebook.Truckloads, "1.37", 950, "loads", "line/A/r: 1.37 × 950.0000 = 1301.50"},         // 1 301.50
		{ratebook.PermitLoads, "2", 1400, "loads", "line/A/r: 2 × 1400.0000 = 2800.00"},            // 2 800
		{ratebook.TonneKilometres, "6302.1", 0.0925, "t·km", "line/A/r: 6302.1 × 0.0925 = 582.94"}, // 582.944 25
		{ratebook.CraneDays, "3.25", 1780, "days", "line/A/r: 3.25 × 1780.0000 = 5785.00"},         // 5 785
		{ratebook.Weeks, "2.94", 2150.55, "weeks", "line/A/r: 2.94 × 2150.5500 = 6322.62"},         // 6 322.617
	} {
		p := price(t, []takeoff.Item{item(t, "A", string(c.driver), c.quantity)}, euros(t, rate("r", ratebook.Fabrication, c.driver, c.price)))
		if diff := cmp.Diff([]string{c.want}, amounts(p.Lines)); diff != "" {
			t.Errorf("%s: %s", c.driver, diff)
			continue
		}
		l := p.Lines[0]
		if l.Unit != c.unit || l.Driver != c.driver || l.Group != "Boom" || l.Item != "A" || l.RateScope != ratebook.BookScope || l.Formula != "price" {
			t.Errorf("%s: got unit %q, driver %q, group %q, item %q, scope %q, formula %q", c.driver, l.Unit, l.Driver, l.Group, l.Item, l.RateScope, l.Formula)
		}
		want := []string{"allowance/" + string(c.driver), "allowance/growth", "norm/crew", "rate/r"}
		slices.Sort(want)
		if diff := cmp.Diff(want, l.Assumptions); diff != "" {
			t.Errorf("%s: assumptions: %s", c.driver, diff)
		}
	}
}

// A ratio book keeps the line ids of categories. By hand: material 24.643 t × 900 =
// 22 178.70; fabrication 21.007 t × 900 × 2.4 = 45 375.12.
func TestRatioBook(t *testing.T) {
	b := ratebook.Ratio()
	r := euros(t, b.PricedRates()...)
	r.Reference, r.Multipliers = b.ReferencePrice, b.Multipliers
	items := []takeoff.Item{item(t, "Boom/CHS", string(ratebook.DeliveredTonnes), "21.007", string(ratebook.PurchasedTonnes), "24.643")}
	p := price(t, items, r)
	want := map[string]string{"line/Boom/CHS/material": "22178.70", "line/Boom/CHS/fabrication": "45375.12"}
	found := 0
	for _, l := range p.Lines {
		if w, ok := want[l.ID]; ok {
			found++
			if l.Amount.String() != w {
				t.Errorf("%s: got %s, want %s", l.ID, l.Amount, w)
			}
		}
		if l.Category == ratebook.Fabrication && (l.Formula != "reference price × ratio" || l.RateID != "rate/fabrication") {
			t.Errorf("fabrication: got formula %q and rate %q", l.Formula, l.RateID)
		}
	}
	if found != len(want) {
		t.Errorf("found %d of %d lines among %v", found, len(want), amounts(p.Lines))
	}
	dearer := r
	dearer.Rates = b.PricedRates()
	dearer.Rates[0].Spread = spread.NewPERT(1000, 1200, 1500) // the price of steel
	for c, a := range price(t, items, dearer).Categories {
		if same := a.Equal(p.Categories[c]); same == (c == ratebook.Material) {
			t.Errorf("with dearer steel %s costs %s, before %s; labour hangs on the frozen reference price", c, a, p.Categories[c])
		}
	}
}

// A unit price is the product of all parts and multipliers, rounded once: 12.3456
// USD/m² × 0.9 (break) × 0.912345 × 1.05 × 1.02 × 1.1 × 1.25 =
// 14.928 149 52… → 14.9281 EUR/m²; × 310.11 = 4 629.353 091 → 4 629.35.
func TestPartsOfAPrice(t *testing.T) {
	paint := rate("paint", ratebook.Coating, ratebook.SquareMetres, 12.3456)
	paint.Currency = "USD"
	paint.Breaks = []ratebook.Break{{From: decimal(t, "100"), Factor: decimal(t, "0.95")}, {From: decimal(t, "310.11"), Factor: decimal(t, "0.9")}, {From: decimal(t, "310.12"), Factor: decimal(t, "0.5")}}
	r := euros(t, paint)
	r.Exchange = map[string]Conversion{"USD": {Name: "exchange", ID: "exchange/USD", Value: decimal(t, "0.912345"), Spread: spread.NewTriangular(0.8, 0.912345, 1)}}
	r.Escalation = map[string][]Conversion{ratebook.Coating: {
		{Name: "escalation to base date", ID: "index/paint/base", Value: decimal(t, "1.05"), Spread: spread.NewFixed(1.05)},
		{Name: "escalation to spend date", ID: "index/paint/spend", Value: decimal(t, "1.02"), Spread: spread.NewTriangular(1, 1.02, 1.1)},
	}}
	r.Multipliers = []ratebook.Multiplier{project("over water", 1.1, ratebook.Coating), project("height", 1.25, ratebook.Coating)}
	p := price(t, []takeoff.Item{item(t, "A", string(ratebook.SquareMetres), "310.11")}, r)
	if diff := cmp.Diff([]string{"line/A/paint: 310.11 × 14.9281 = 4629.35"}, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	l := p.Lines[0]
	if want := "price × price break × exchange × escalation to base date × escalation to spend date"; l.Formula != want {
		t.Errorf("formula: got %q, want %q", l.Formula, want)
	}
	rest := money.FromInt(1)
	for _, part := range l.Parts {
		rest = rest.Mul(part.Value)
	}
	if !rest.Equal(l.Rate) || len(l.Parts) != 5 || len(l.Multipliers) != 2 || l.Multipliers[0].Name != "height" {
		t.Errorf("rate %s of the parts %v with %v", l.Rate, l.Parts, l.Multipliers)
	}
	want := []string{"allowance/growth", "allowance/square metres", "exchange/USD", "index/paint/base", "index/paint/spend", "multiplier/height/project", "multiplier/over water/project", "norm/crew", "rate/paint"}
	if diff := cmp.Diff(want, l.Assumptions); diff != "" {
		t.Errorf("assumptions: %s", diff)
	}
	if diff := cmp.Diff([]string{"price-break rate/paint"}, codes(p.Notes)); diff != "" {
		t.Errorf("notes: %s", diff)
	}
}

// Amounts in currencies of 0, 2 and 3 minor digits: 1.5 t × 333.337 = 500.0055,
// with the unit price rounded to two places more than the minor unit: 333.34,
// 333.337 and 333.337; 500.01, 500.0055 and 500.0055; 500, 500.01 and 500.006.
func TestCurrencies(t *testing.T) {
	for code, want := range map[string]string{
		"JPY": "line/A/r: 1.500 × 333.34 = 500", "EUR": "line/A/r: 1.500 × 333.3370 = 500.01", "KWD": "line/A/r: 1.500 × 333.33700 = 500.006",
	} {
		r := euros(t, rate("r", ratebook.Erection, ratebook.DeliveredTonnes, 333.337))
		r.Currency, r.Book = currency(t, code), code
		p := price(t, []takeoff.Item{item(t, "A", string(ratebook.DeliveredTonnes), "1.500")}, r)
		if diff := cmp.Diff([]string{want}, amounts(p.Lines)); diff != "" {
			t.Errorf("%s: %s", code, diff)
		}
	}
}

// Rates and multipliers are those of the item's place: the mark, the group and what
// it selects, the most specific first.
func TestThePlaceDecides(t *testing.T) {
	group := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 70)
	group.Scope, group.Subject = ratebook.GroupScope, "Tower"
	mark := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 80)
	mark.Scope, mark.Subject = ratebook.MemberScope, "mark C"
	paint := rate("paint", ratebook.Coating, ratebook.SquareMetres, 10)
	paint.Select = ratebook.Selection{Coatings: []string{"C5"}}
	bare := rate("bare", ratebook.Coating, ratebook.SquareMetres, 1)
	bare.Select = ratebook.Selection{Coatings: []string{""}}
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60), group, mark, paint, bare)
	m := project("narrow shop", 1.5, ratebook.Fabrication)
	m.Scope, m.Subject = ratebook.FamilyScope, "HEA"
	r.Multipliers = []ratebook.Multiplier{m}
	quantities := []string{string(ratebook.ShopHours), "10", string(ratebook.SquareMetres), "100"}
	a, b, c, d := item(t, "A", quantities...), item(t, "B", quantities...), item(t, "C", quantities...), item(t, "D", quantities...)
	a.Coating = "C5"
	b.Group, b.Coating = "Tower", "C3" // a coating that no rate names is not the blank one
	c.Group = "Tower"
	d.Family = "HEA"
	p := price(t, []takeoff.Item{a, b, c, d}, r)
	want := []string{
		"line/A/labour: 10 × 60.0000 = 600.00", "line/A/paint: 100 × 10.0000 = 1000.00",
		"line/B/labour: 10 × 70.0000 = 700.00",
		"line/C/labour: 10 × 80.0000 = 800.00", "line/C/bare: 100 × 1.0000 = 100.00",
		"line/D/labour: 10 × 90.0000 = 900.00", "line/D/bare: 100 × 1.0000 = 100.00",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Error(diff)
	}
	var ids []string
	for _, l := range p.Lines {
		if l.Category == ratebook.Fabrication {
			ids = append(ids, l.RateID+" "+string(l.RateScope))
		}
	}
	if diff := cmp.Diff([]string{"rate/labour rate book", "rate/labour/group/Tower group", "rate/labour/member/mark C member", "rate/labour rate book"}, ids); diff != "" {
		t.Error(diff)
	}
}

// Sums are exact: the categories are the sums of their lines, the base that of the
// categories.
func TestSumsAreExact(t *testing.T) {
	items := []takeoff.Item{}
	for _, id := range []string{"A", "B", "C"} {
		items = append(items, item(t, id, string(ratebook.DeliveredTonnes), "0.333", string(ratebook.Pieces), "3"))
	}
	p := price(t, items, euros(t, rate("a", ratebook.Fabrication, ratebook.DeliveredTonnes, 0.1), rate("b", ratebook.Fabrication, ratebook.Pieces, 0.015), rate("c", ratebook.Erection, ratebook.Pieces, 0.1)))
	// a: 0.0333 → 0.03; b: 0.045 → 0.05; c: 0.30; three times.
	if got := p.Categories[ratebook.Fabrication].String(); got != "0.24" {
		t.Errorf("fabrication: got %s, want 0.24", got)
	}
	if got := p.Base.String(); got != "1.14" {
		t.Errorf("base: got %s, want 1.14", got)
	}
	r := euros(t, rate("c", ratebook.Erection, ratebook.Pieces, 0.1))
	r.Categories = []string{ratebook.Erection, ratebook.Erection} // named twice, priced once
	if p := price(t, items, r); p.Base.String() != "0.90" || len(p.Lines) != 3 {
		t.Errorf("got %s in %d lines, want 0.90 in 3", p.Base, len(p.Lines))
	}
}
