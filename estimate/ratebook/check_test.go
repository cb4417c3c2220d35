package ratebook

import (
	"encoding/json"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

func dec(t testing.TB, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// rateAt returns the place of a rate of the starting book, which the pointers of the
// tests below count on.
func rateAt(t testing.TB, b *Book, id string) *Rate {
	t.Helper()
	i := slices.IndexFunc(b.Rates, func(r Rate) bool { return r.ID == id })
	if i < 0 {
		t.Fatalf("no rate %q", id)
	}
	return &b.Rates[i]
}

// faults returns those of a book.
func faults(t *testing.T, b Book) []Fault {
	t.Helper()
	err := b.Validate()
	var bad *InvalidError
	if err != nil && !errors.As(err, &bad) {
		t.Fatalf("got %v, want an *InvalidError", err)
	}
	if bad == nil {
		return nil
	}
	return bad.Faults
}

// Each change makes exactly one fault, at the field that was changed. In the
// pointers {id} stands for the place of the rate.
func TestValidateNamesTheFieldOfARate(t *testing.T) {
	cases := []struct {
		id, field string
		change    func(*Rate)
	}{
		{"bolts", "/id", func(r *Rate) { r.ID = "" }},
		{"bolts", "/id", func(r *Rate) { r.ID = " bolts" }},
		{"bolts", "/id", func(r *Rate) { r.ID = strings.Repeat("b", 81) }},
		{"bolts", "/category", func(r *Rate) { r.Category = "nuts" }},
		{"bolts", "/driver", func(r *Rate) { r.Driver = "tonnes" }},
		{"bolts", "/spread", func(r *Rate) { r.Spread.Low = -1 }},
		{"bolts", "/spread", func(r *Rate) { r.Spread.Likely = 70.12345 }},
		{"bolts", "/spread", func(r *Rate) { r.Spread.High = 60 }},
		{"bolts", "/spread", func(r *Rate) { r.Spread.High = math.NaN() }},
		{"bolts", "/spread", func(r *Rate) { r.Spread.High = 1e10 }},
		{"bolts", "/spread", func(r *Rate) { r.Spread = spread.Spread{Distribution: "normal", Likely: 1} }},
		{"bolts", "/spread", func(r *Rate) { // percentiles that lie above zero, of a spread that does not
			r.Spread = spread.Spread{Distribution: spread.Triangular, Low: 1, Likely: 50, High: 100, Bounds: spread.BoundsPercentiles}
		}},
		{"bolts", "/source", func(r *Rate) { r.Source = "" }},
		{"bolts", "/confidence", func(r *Rate) { r.Confidence = "sure" }},
		{"bolts", "/valid_until", func(r *Rate) { r.ValidUntil = "31.12.2026" }},
		{"bolts", "/group", func(r *Rate) { r.Group = "weather" }},
		{"bolts", "/currency", func(r *Rate) { r.Currency = "EUX" }},
		{"bolts", "/currency", func(r *Rate) { r.Currency = "SEK" }},
		{"margin", "/currency", func(r *Rate) { r.Currency = "USD" }},
		{"bolts", "/of_reference", func(r *Rate) { r.OfReference = true }},
		{"bolts", "/scope", func(r *Rate) { r.Scope = ProjectScope }},
		{"bolts", "/subject", func(r *Rate) { r.Scope = GroupScope }},
		{"bolts", "/subject", func(r *Rate) { r.Subject = "Boom" }},
		{"bolts", "/subject", func(r *Rate) { r.Scope, r.Subject = MemberScope, strings.Repeat("m", 201) }},
		{"bolts", "/select/treatments/0", func(r *Rate) { r.Select.Treatments = []string{"sized"} }},
		{"bolts", "/select/treatments/1", func(r *Rate) { r.Select.Treatments = []string{"size", "size"} }},
		{"bolts", "/select/families/0", func(r *Rate) { r.Select.Families = []string{""} }},
		{"bolts", "/select/connections/0", func(r *Rate) { r.Select.Connections = []string{"glued"} }},
		{"bolts", "/select/wastes/0", func(r *Rate) { r.Select.Wastes = []string{"tubes"} }},
		{"bolts", "/select/coatings/1", func(r *Rate) { r.Select.Coatings = []string{"", ""} }},
		{"bolts", "/select/executions/0", func(r *Rate) { r.Select.Executions = []string{"EXC5"} }},
		{"bolts", "/of", func(r *Rate) { r.Of = []string{Fabrication} }},
		{"inspection EXC2", "/of", func(r *Rate) { r.Of = nil }},
		{"inspection EXC2", "/of/0", func(r *Rate) { r.Of = []string{"welds"} }},
		{"inspection EXC2", "/of/1", func(r *Rate) { r.Of = []string{Fabrication, Fabrication} }},
		{"inspection EXC2", "/of/1", func(r *Rate) { r.Of = []string{Fabrication, Inspection} }},
		{"inspection EXC2", "/spread", func(r *Rate) { r.Spread = spread.NewPERT(2, 4, 6) }}, // per cent, not a fraction
		{"bolts", "/trigger", func(r *Rate) { r.Trigger.Permits = true }},
		{"load test", "/trigger/kinds/0", func(r *Rate) { r.Trigger.Kinds[0] = "" }},
		{"trial assembly", "/trigger/executions/0", func(r *Rate) { r.Trigger.Executions[0] = "EXC5" }},
		{"survey", "/trigger/site_conditions/0", func(r *Rate) { r.Trigger.SiteConditions[0] = "dust" }},
		{"site set-up", "/trigger/delivered_above_t", func(r *Rate) { r.Trigger.DeliveredAbove = r.Trigger.DeliveredAbove.Neg() }},
		{"survey", "/scope", func(r *Rate) { r.Scope, r.Subject = GroupScope, "Boom" }},
		{"survey", "/select", func(r *Rate) { r.Select.Wastes = []string{"tube"} }},
		{"survey", "/breaks", func(r *Rate) { r.Breaks = []Break{{Factor: money.FromInt(1)}} }},
		{"survey", "/minimum_order", func(r *Rate) { r.MinimumOrder = money.FromInt(1) }},
		{"steel tube", "/minimum_order", func(r *Rate) { r.MinimumOrder = money.FromInt(-1) }},
		{"steel tube", "/breaks/2/from", func(r *Rate) { r.Breaks[2].From = r.Breaks[1].From }},
		{"steel tube", "/breaks/0/from", func(r *Rate) { r.Breaks[0].From = money.FromInt(-1) }},
		{"steel tube", "/breaks/1/factor", func(r *Rate) { r.Breaks[1].Factor = money.Zero }},
		{"galvanising", "/minimum_charge", func(r *Rate) { r.MinimumCharge = r.MinimumCharge.Neg() }},
	}
	for _, c := range cases {
		b := UnitRate()
		i := slices.IndexFunc(b.Rates, func(r Rate) bool { return r.ID == c.id })
		r := &b.Rates[i]
		want := "/rates/" + number(float64(i)) + c.field
		c.change(r)
		got := faults(t, b)
		if len(got) != 1 || got[0].Field != want || got[0].Accepted == "" {
			t.Errorf("%s: got %+v", want, got)
		}
	}
}

func TestValidateNamesTheFieldOfAUnitRateBook(t *testing.T) {
	cases := map[string]func(*Book){
		"/material_price":         func(b *Book) { b.MaterialPrice = &Figure{} },
		"/ratios":                 func(b *Book) { b.Ratios = Ratio().Ratios },
		"/rates":                  func(b *Book) { b.Rates = nil },
		"/norms/shop_hours/glued": func(b *Book) { b.Norms.ShopHours["glued"] = b.Norms.ShopHours["none"] },
		"/norms/joints/riveted":   func(b *Book) { b.Norms.Joints["riveted"] = b.Norms.Joints["moment"] },
		"/norms/joints/moment/mass_kg/spread": func(b *Book) {
			j := b.Norms.Joints["moment"]
			j.Mass.Spread.Low = -1
			b.Norms.Joints["moment"] = j
		},
		"/norms/surface/group":             func(b *Book) { b.Norms.Surface.Group = "paint" },
		"/norms/surface_by_mass/spread":    func(b *Book) { b.Norms.SurfaceByMass.Spread.High = 1001 },
		"/norms/zinc/1/up_to_mm":           func(b *Book) { b.Norms.Zinc[1].UpTo = 1.5 },
		"/norms/zinc/3/up_to_mm":           func(b *Book) { b.Norms.Zinc[3].UpTo = 20 },
		"/norms/zinc/0/g_m2":               func(b *Book) { b.Norms.Zinc[0].Mass = math.NaN() },
		"/norms/zinc/0/source":             func(b *Book) { b.Norms.Zinc[0].Source = "" },
		"/norms/load_use/spread":           func(b *Book) { b.Norms.LoadUse.Spread.Low = 0.9 },
		"/norms/lift_days/spread":          func(b *Book) { b.Norms.LiftDays.Spread.Low = -0.1 },
		"/norms/crew/spread":               func(b *Book) { b.Norms.Crew.Spread.Low = 0 },
		"/norms/week_hours/spread":         func(b *Book) { b.Norms.WeekHours.Spread.High = 200 },
		"/norms/haul_distance_km/spread":   func(b *Book) { b.Norms.HaulDistance.Spread.High = 1e5 },
		"/limits/shop_crane_kg":            func(b *Book) { l := DefaultLimits(); l.ShopCrane = -1; b.Limits = &l },
		"/limits/galvanising_bath/width_m": func(b *Book) { l := DefaultLimits(); l.Bath.Width = math.NaN(); b.Limits = &l },
		"/limits/permit/source":            func(b *Book) { l := DefaultLimits(); l.Permit.Source = ""; b.Limits = &l },
		"/carbon/0/module":                 func(b *Book) { b.Carbon[0].Module = "B1" },
		"/carbon/6/id":                     func(b *Book) { b.Carbon[6].ID = b.Carbon[0].ID }, // of another module
		"/carbon/1/id":                     func(b *Book) { b.Carbon[1].ID = b.Carbon[0].ID },
		"/carbon/0/driver":                 func(b *Book) { b.Carbon[0].Driver = CostOf },
		"/carbon/2/driver":                 func(b *Book) { b.Carbon[2].Driver = Lump },
		"/carbon/0/spread":                 func(b *Book) { b.Carbon[0].Spread.Low = -1 },
		"/carbon/0/select/wastes/0":        func(b *Book) { b.Carbon[0].Select.Wastes[0] = "bars" },
		"/exchange/0/currency":             func(b *Book) { b.Exchange[0].Currency = "EUR" },
		"/exchange/1/currency":             func(b *Book) { b.Exchange[1].Currency = "USD" },
		"/exchange/2/currency":             func(b *Book) { b.Exchange[2].Currency = "KWX" },
		"/exchange/3/date":                 func(b *Book) { b.Exchange[3].Date = "June" },
		"/exchange/3/spread":               func(b *Book) { b.Exchange[3].Spread.Low = 0 },
		"/exchange/0/spread":               func(b *Book) { b.Exchange[0].Spread.Likely = 0.9212345 },
		"/indices/0/name":                  func(b *Book) { b.Indices[0].Name = "" },
		"/indices/1/name":                  func(b *Book) { b.Indices[1].Name = b.Indices[0].Name },
		"/indices/0/categories":            func(b *Book) { b.Indices[0].Categories = nil },
		"/indices/0/categories/0":          func(b *Book) { b.Indices[0].Categories[0] = "steel" },
		"/indices/1/categories/0":          func(b *Book) { b.Indices[1].Categories[0] = Material },
		"/indices/0/values":                func(b *Book) { b.Indices[0].Values = nil },
		"/indices/0/values/1/date":         func(b *Book) { b.Indices[0].Values[1].Date = b.Indices[0].Values[0].Date },
		"/indices/0/values/2/date":         func(b *Book) { b.Indices[0].Values[2].Date = "2025-13-01" },
		"/indices/0/values/0/value":        func(b *Book) { b.Indices[0].Values[0].Value = money.Zero },
		"/indices/0/growth/spread":         func(b *Book) { b.Indices[0].Growth.Spread.Low = -0.95 },
		"/indices/0/source":                func(b *Book) { b.Indices[0].Source = "" },
		"/spend_months/roof":               func(b *Book) { b.SpendMonths["roof"] = 1 },
		"/spend_months/material":           func(b *Book) { b.SpendMonths["material"] = 1000 },
		"/site_multipliers/0/condition":    func(b *Book) { b.Site[0].Condition = "dust" },
		"/site_multipliers/0/scope":        func(b *Book) { b.Site[0].Scope = ProjectScope },
		"/site_multipliers/1/name":         func(b *Book) { b.Site[1].Name = b.Site[0].Name },
		"/site_multipliers/2/reason":       func(b *Book) { b.Site[2].Reason = "" },
		"/bands/0/measure":                 func(b *Book) { b.Bands[0].Measure = "h" },
		"/bands/0/class":                   func(b *Book) { b.Bands[0].Class = "glued" },
		"/growth/4/group":                  func(b *Book) { f := b.Growth["4"]; f.Group = "x"; b.Growth["4"] = f },
		"/systemic/6":                      func(b *Book) { b.Systemic["6"] = 0.1 },
		"/multipliers/0/group":             func(b *Book) { b.Multipliers[0].Group = "x" },
		"/correlation/labour":              func(b *Book) { b.Correlation["labour"] = math.NaN() },
	}
	for field, change := range cases {
		b := UnitRate()
		change(&b)
		if got := faults(t, b); len(got) != 1 || got[0].Field != field || got[0].Accepted == "" {
			t.Errorf("%s: got %+v", field, got)
		}
	}
}

// A rate for a driver that the take-off cannot make, once for each driver, at the
// first rate that is per unit of it.
func TestValidateMissesNorms(t *testing.T) {
	at := func(b Book, id string) string {
		return "/rates/" + number(float64(slices.IndexFunc(b.Rates, func(r Rate) bool { return r.ID == id }))) + "/driver"
	}
	for name, c := range map[string]struct {
		change func(*Book)
		rates  []string
		lacks  string
	}{
		"shop hours of a class": {func(b *Book) { delete(b.Norms.ShopHours, "lattice") }, []string{"shop labour"}, "/norms/shop_hours/lattice"},
		"site hours of a class": {func(b *Book) { delete(b.Norms.SiteHours, "none") }, []string{"site labour", "site week"}, "/norms/site_hours/none"},
		"a kind of joints":      {func(b *Book) { delete(b.Norms.Joints, "pinned") }, []string{"shop labour", "site labour", "site week"}, "/norms/joints/pinned"},
		"zinc":                  {func(b *Book) { b.Norms.Zinc = nil }, []string{"zinc"}, "/norms/zinc"},
		"everything": {func(b *Book) { b.Norms = nil },
			[]string{"shop labour", "paint C2 low", "zinc", "haulage", "loading", "site labour", "crane", "site week"}, "/norms"},
	} {
		b := UnitRate()
		c.change(&b)
		want := map[string]bool{}
		for _, id := range c.rates {
			want[at(b, id)] = true
		}
		got := faults(t, b)
		for _, f := range got {
			if !want[f.Field] || !strings.Contains(f.Accepted, c.lacks) {
				t.Errorf("%s: %+v; want it to name %s", name, f, c.lacks)
			}
		}
		if len(got) != len(want) {
			t.Errorf("%s: %d faults, want %d", name, len(got), len(want))
		}
	}
	b := UnitRate()
	b.Norms = nil
	b.Rates = []Rate{*rateAt(t, &b, "steel plate")}
	b.Carbon = b.Carbon[:3]
	if got := faults(t, b); len(got) != 0 {
		t.Errorf("a book of material prices alone needs no norms, got %+v", got)
	}
}

func TestValidateRefusesARatioBookWithRates(t *testing.T) {
	b := Ratio()
	b.Rates = UnitRate().Rates[:1]
	if got := faults(t, b); len(got) != 1 || got[0].Field != "/rates" {
		t.Errorf("got %+v", got)
	}
	b = Ratio()
	b.MaterialPrice = nil
	if got := faults(t, b); len(got) != 1 || got[0].Field != "/material_price" {
		t.Errorf("got %+v", got)
	}
}

func TestIdsRepeatOnlyAtOtherScopes(t *testing.T) {
	b := UnitRate()
	r := *rateAt(t, &b, "bolts")
	n := number(float64(len(b.Rates)))
	for _, c := range []struct {
		change func(*Rate)
		field  string
	}{
		{func(r *Rate) {}, "/id"},
		{func(r *Rate) { r.Scope = BookScope }, "/id"}, // what a blank scope is
		{func(r *Rate) { r.Scope, r.Subject = GroupScope, "Boom" }, ""},
		{func(r *Rate) { r.Scope, r.Subject, r.Category = GroupScope, "Boom", Fabrication }, "/category"},
		{func(r *Rate) { r.Scope, r.Subject, r.Driver = GroupScope, "Boom", NetTonnes }, "/driver"},
	} {
		again, other := b, r
		c.change(&other)
		again.Rates = append(slices.Clone(b.Rates), other)
		got := faults(t, again)
		if c.field == "" {
			if len(got) > 0 {
				t.Errorf("another scope: %+v", got)
			}
			continue
		}
		if len(got) != 1 || got[0].Field != "/rates/"+n+c.field {
			t.Errorf("%s: %+v", c.field, got)
		}
	}
}

func TestValidateGathersAllFaults(t *testing.T) {
	b := UnitRate()
	rateAt(t, &b, "bolts").Spread.Low = -1
	rateAt(t, &b, "margin").Of = nil
	b.Norms.Zinc[0].Mass = -1
	b.Exchange[0].Date = ""
	b.Indices[0].Values = nil
	got := faults(t, b)
	if len(got) != 5 || !slices.IsSortedFunc(got, func(a, b Fault) int { return strings.Compare(a.Field, b.Field) }) {
		t.Errorf("got %+v, want five faults in the order of their fields", got)
	}
}

// JSON pointers escape "/" and "~" (RFC 6901).
func TestPointersAreEscaped(t *testing.T) {
	b := Ratio()
	b.Connections["a/b~c"] = Figure{}
	for _, f := range faults(t, b) {
		if !strings.HasPrefix(f.Field, "/connections/a~1b~0c/") {
			t.Errorf("field %s", f.Field)
		}
	}
}

// A price has as many decimals as its currency for its minimum charge.
func TestMinimumChargeHasTheMinorUnit(t *testing.T) {
	b := UnitRate()
	r := rateAt(t, &b, "galvanising")
	for currency, c := range map[string]struct{ good, bad string }{"": {"450.25", "450.255"}, "JPY": {"45000", "450.5"}, "KWD": {"140.125", "140.1255"}} {
		r.Currency = currency
		if r.MinimumCharge = dec(t, c.good); len(faults(t, b)) != 0 {
			t.Errorf("%s %s is refused", currency, c.good)
		}
		if r.MinimumCharge = dec(t, c.bad); len(faults(t, b)) != 1 {
			t.Errorf("%s %s is accepted", currency, c.bad)
		}
	}
}

// small is a valid book with little of everything, for mutations that hit.
func small(b Book) Book {
	b.Rates = slices.DeleteFunc(b.Rates, func(r Rate) bool {
		return !slices.Contains([]string{"steel tube", "shop labour", "zinc", "survey", "margin"}, r.ID)
	})
	b.Bands, b.Multipliers, b.Site = b.Bands[:1], b.Multipliers[:1], b.Site[:min(1, len(b.Site))]
	b.Carbon, b.Exchange, b.Indices = b.Carbon[:min(1, len(b.Carbon))], b.Exchange[:min(1, len(b.Exchange))], b.Indices[:min(1, len(b.Indices))]
	keep := func(m map[string]Figure) {
		for class := range m {
			if class != "simple beams" {
				delete(m, class)
			}
		}
	}
	keep(b.Connections)
	if b.Norms != nil {
		keep(b.Norms.ShopHours)
		keep(b.Norms.SiteHours)
	}
	return b
}

func TestTheSmallBooksAreValid(t *testing.T) {
	for _, b := range []Book{Ratio(), UnitRate()} {
		if got := faults(t, small(b)); len(got) > 0 {
			t.Errorf("%s: %+v", b.Name, got)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, b := range []Book{Ratio(), UnitRate()} {
		data, err := json.Marshal(small(b))
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
	f.Add([]byte(`{"kind":"unit-rate","rates":[{"driver":"cost of categories","category":"margin","of":["margin","x"]}],"norms":{"zinc":[{}]},"indices":[{"values":[{}]}]}`))
	f.Fuzz(func(t *testing.T, data []byte) {
		b, err := Parse(data)
		if err != nil {
			return
		}
		if _, err := CategoryOrder(b.Rates); err != nil {
			t.Errorf("a valid book: %v", err)
		}
		if _, err := b.ExchangeTo("USD"); err != nil && err.Error() == "" {
			t.Error("an error without words")
		}
		for _, c := range Categories() {
			if e, err := b.Escalation(c, b.BaseDate, "2030-01-01"); err == nil && e.OK && e.Spread.Validate() != nil {
				t.Errorf("escalation of %s: %+v", c, e)
			}
		}
		if again, _, err := b.Canonical(); err != nil {
			t.Error(err)
		} else if _, err := Parse(again); err != nil {
			t.Errorf("canonical bytes are refused: %v", err)
		}
	})
}
