package ratebook

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestEveryDriverHasItsUnit(t *testing.T) {
	units := map[Driver]string{
		NetTonnes: "t", Metres: "m", Pieces: "pcs", SquareMetres: "m²", CubicMetres: "m³", ZincKilograms: "kg",
		ShopHours: "h", Truckloads: "loads", TonneKilometres: "t·km", CraneDays: "days", Weeks: "weeks", Lump: "sum", CostOf: "",
	}
	for d, want := range units {
		if got := d.Unit(); got != want {
			t.Errorf("%s: unit %q, want %q", d, got, want)
		}
	}
	seen := map[Driver]bool{}
	for _, d := range Drivers() {
		if seen[d] || d == "" || d.Unit() == "" && d != CostOf || d.Places() < 0 || d.Places() > 3 {
			t.Errorf("%q: unit %q, %d places", d, d.Unit(), d.Places())
		}
		seen[d] = true
	}
	if d := Driver("furlongs"); d.Unit() != "" || d.Places() != 3 {
		t.Errorf("an unknown driver: %q, %d", d.Unit(), d.Places())
	}
}

// A ratio book prices as it always did: steel by purchased, the rest by delivered
// tonnes as multiples of the reference price.
func TestPricedRatesOfARatioBook(t *testing.T) {
	b := Ratio()
	rates := b.PricedRates()
	if len(rates) != 1+len(b.Ratios) || rates[0].Category != Material || rates[0].Driver != PurchasedTonnes || rates[0].OfReference {
		t.Fatalf("got %+v", rates)
	}
	for _, r := range rates[1:] {
		if f := b.Ratios[r.Category]; r.ID != r.Category || r.Driver != DeliveredTonnes || !r.OfReference || r.Figure != f {
			t.Errorf("%+v, want the ratio %+v", r, f)
		}
	}
	if got := UnitRate(); len(got.PricedRates()) != len(got.Rates) {
		t.Error("a unit-rate book prices with its rates")
	}
}

// Reference: the brief (bath 12.5 × 1.8 × 2.8 m; permits over 2.55 m, 4.0 m,
// 25 t, in the United States 8.5 ft, 13.5 ft, 48,000 lb); 1 ft = 0.3048 m, 1 lb =
// 0.45359237 kg (NIST SP 811, appendix B).
func TestLimits(t *testing.T) {
	l, a := DefaultLimits(), AmericanLimits()
	if want := (Envelope{Length: 12.5, Width: 1.8, Height: 2.8}); l.Bath != want {
		t.Errorf("bath %+v", l.Bath)
	}
	if l.Permit.Width != 2.55 || l.Permit.Height != 4 || l.Permit.Mass != 25_000 {
		t.Errorf("permit %+v", l.Permit)
	}
	for _, c := range []struct{ got, want float64 }{{a.Permit.Width, 2.5908}, {a.Permit.Height, 4.1148}, {a.Permit.Mass, 21_772.43376}} {
		if math.Abs(c.got-c.want) > 1e-9*c.want {
			t.Errorf("American permit: %v, want %v", c.got, c.want)
		}
	}
	for _, limits := range []Limits{l, a} {
		b := UnitRate()
		b.Limits = &limits
		if err := b.Validate(); err != nil {
			t.Error(err)
		}
		if !strings.Contains(limits.Permit.Source, "rules govern") || limits.Vehicle.Height >= limits.Permit.Height {
			t.Errorf("%+v", limits)
		}
	}
}

func TestMultiplierValidateKnowsNoGroups(t *testing.T) {
	m := UnitRate().Site[0].Multiplier
	m.Group = "of another book"
	if err := m.Validate(); err != nil {
		t.Errorf("groups are the book's to know, got %v", err)
	}
	m.Spread.Low = -1
	var bad *InvalidError
	if err := m.Validate(); !errors.As(err, &bad) || bad.Faults[0].Field != "/spread" || !strings.Contains(err.Error(), "/spread: found") {
		t.Errorf("got %v", err)
	}
}
