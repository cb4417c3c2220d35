package ratebook

import (
	"math"
	"strings"
	"testing"

	"spanwright/estimate/spread"
)

// Reference: Python with datetime and floats: level(to) / level(from), interpolated
// by days, growth −3, 2.5 and 8 % a year over days / 365.25.
func TestEscalation(t *testing.T) {
	b := UnitRate()
	for _, c := range []struct {
		category, from, to string
		value              string
		low, high          float64 // 0: no spread
	}{
		{Material, "2026-06-01", "2026-07-15", "1.0041", 0, 0}, // 104.2 + 0.9 · 44/92
		{Material, "2026-06-01", "2028-03-01", "1.0466", 0.963661011540, 1.131854390154},
		{Material, "2028-03-01", "2029-03-01", "1.0250", 0.970020222956, 1.079943110380},
		{Material, "2028-03-01", "2026-06-01", "0.9554", 0.883505872044, 1.037709306514}, // back in time
		{Erection, "2024-09-01", "2026-06-01", "1.0655", 0, 0},                           // 96.2 + 1.5 · 92/183 to 103.3
		{Material, "2025-06-01", "2026-06-01", "1.0420", 0, 0},                           // on the values
		{Material, "2020-01-01", "2020-01-01", "1", 0, 0},                                // no time passes
	} {
		e, err := b.Escalation(c.category, c.from, c.to)
		if err != nil || !e.OK {
			t.Errorf("%s %s %s: %+v, %v", c.category, c.from, c.to, e, err)
			continue
		}
		if e.Value.String() != c.value || e.Spread.Base() != e.Value.Float64() {
			t.Errorf("%s from %s to %s: %s, spread from %g; want %s", c.category, c.from, c.to, e.Value, e.Spread.Base(), c.value)
		}
		if c.low == 0 {
			if e.Spread.Distribution != spread.Fixed || e.Group != "" {
				t.Errorf("from %s to %s: %+v, group %q; want no spread", c.from, c.to, e.Spread, e.Group)
			}
			continue
		}
		s := e.Spread
		if math.Abs(s.Low-c.low) > 1e-8 || math.Abs(s.High-c.high) > 1e-8 || s.Distribution != spread.Triangular || e.Group != "supply" || s.Validate() != nil {
			t.Errorf("from %s to %s: %+v in %q; want triangular %g to %g in supply", c.from, c.to, s, e.Group, c.low, c.high)
		}
	}
}

func TestEscalationSaysWhatItUsed(t *testing.T) {
	e, err := UnitRate().Escalation(Material, "2026-07-15", "2027-06-01")
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"steel", "104.2 on 2026-06-01", "105.1 on 2026-09-01", "2026-07-15", "2.5 % a year to 2027-06-01"} {
		if !strings.Contains(e.Note, want) {
			t.Errorf("note %q lacks %q", e.Note, want)
		}
	}
	if e.ID != "escalation/steel/2026-07-15/2027-06-01" {
		t.Errorf("id %s", e.ID)
	}
}

func TestEscalationRefuses(t *testing.T) {
	b := UnitRate()
	e, err := b.Escalation(Margin, "2026-06-01", "2027-06-01")
	if err != nil || e.OK {
		t.Errorf("margin follows no index, got %+v, %v", e, err)
	}
	b.Indices[1].Growth = nil // labour
	for _, c := range []struct{ category, from, to, want string }{
		{Material, "2017-12-31", "2026-06-01", "2017-12-31"},
		{Erection, "2026-06-01", "2026-09-02", "2026-09-02"},
		{Erection, "2027-01-01", "2026-06-01", "2027-01-01"},
		{Material, "2026-06-01", "1.7.2027", "1.7.2027"},
		{Material, "2026-06-01", "9999-12-31", "9999-12-31"}, // a factor beyond all bounds
	} {
		_, err := b.Escalation(c.category, c.from, c.to)
		if err == nil || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), "index \"") {
			t.Errorf("%s from %s to %s: %v; want an error that names the index and %s", c.category, c.from, c.to, err, c.want)
		}
	}
}

// Each shape of growth carries over to a valid spread with the factor as base.
func TestEscalationKeepsTheShapeOfGrowth(t *testing.T) {
	shapes := []spread.Spread{
		spread.NewFixed(0.03), spread.NewUniform(0.01, 0.05), spread.NewTriangular(0.03, 0.03, 0.05), spread.NewPERT(-0.02, 0.03, 0.05),
		spread.NewLognormal(0.02, 0.05), {Distribution: spread.PERT, Low: 0.01, Likely: 0.03, High: 0.06, Bounds: spread.BoundsPercentiles},
	}
	for _, s := range shapes {
		b := UnitRate()
		b.Indices[0].Growth.Spread = s
		for _, to := range []string{"2026-09-02", "2027-09-01", "2046-09-01"} {
			e, err := b.Escalation(Material, "2026-09-01", to)
			if err != nil || e.Spread.Base() != e.Value.Float64() || e.Spread.Validate() != nil {
				t.Errorf("%+v to %s: %+v, %v", s, to, e.Spread, err)
				continue
			}
			if e.Spread.Distribution != s.Distribution || e.Spread.Bounds != s.Bounds {
				t.Errorf("%+v to %s became %+v", s, to, e.Spread)
			}
		}
	}
}

// Reference: Python: 1/rate; 1.17/0.92 with logarithmic deviations by the root of
// the sum of squares.
func TestExchange(t *testing.T) {
	b := UnitRate()
	b.Rates[0].Currency = "GBP"
	b.Exchange[3].Date, b.Exchange[3].ValidUntil = "2026-05-02", "2026-12-31"
	got, err := b.ExchangeTo("USD")
	if err != nil {
		t.Fatal(err)
	}
	if len(got) != 2 {
		t.Fatalf("%d rates, want those of EUR and GBP", len(got))
	}
	for from, want := range map[string]struct {
		value     string
		low, high float64
		date      string
	}{
		"EUR": {"1.086957", 1, 1.176470588235, "2026-06-01"},
		"GBP": {"1.271739", 1.146440286447, 1.402932723080, "2026-05-02"},
	} {
		x := got[from]
		if x.ID != "exchange/"+from+"/USD" || x.Value.String() != want.value || x.Date != want.date || x.Spread.Base() != x.Value.Float64() || x.Group != "other costs" {
			t.Errorf("%s: %+v, want %+v", from, x, want)
		}
		if math.Abs(x.Spread.Low-want.low) > 1e-9 || math.Abs(x.Spread.High-want.high) > 1e-9 || x.Spread.Validate() != nil {
			t.Errorf("%s: spread %+v, want %g to %g", from, x.Spread, want.low, want.high)
		}
	}
	x := got["GBP"]
	for _, part := range []string{"1 GBP = 1.17 EUR on 2026-05-02", "1 USD = 0.92 EUR on 2026-06-01"} {
		if !strings.Contains(x.Note, part) {
			t.Errorf("note %q lacks %q", x.Note, part)
		}
	}
	if x.ValidUntil != "2026-12-31" {
		t.Errorf("valid until %q", x.ValidUntil)
	}
}

// Going out and back by the rates gives 1, within their rounding.
func TestExchangeThereAndBack(t *testing.T) {
	b := UnitRate()
	b.Rates[0].Currency, b.Rates[1].Currency, b.Rates[2].Currency = "USD", "KWD", "GBP"
	currencies := []string{"EUR", "USD", "KWD", "GBP"}
	table := map[string]map[string]Exchanged{}
	for _, c := range currencies {
		m, err := b.ExchangeTo(c)
		if err != nil {
			t.Fatal(err)
		}
		table[c] = m
	}
	for _, from := range currencies {
		for _, to := range currencies {
			if from == to {
				continue
			}
			if p := table[to][from].Value.Float64() * table[from][to].Value.Float64(); math.Abs(p-1) > 1e-5 {
				t.Errorf("%s to %s and back: %g", from, to, p)
			}
		}
	}
}

func TestExchangeOfOneCurrencyIsEmpty(t *testing.T) {
	for _, b := range []Book{Ratio(), UnitRate()} {
		if got, err := b.ExchangeTo("EUR"); err != nil || len(got) != 0 {
			t.Errorf("%s: %+v, %v", b.Name, got, err)
		}
	}
}

func TestExchangeRefuses(t *testing.T) {
	b := UnitRate()
	b.Rates[0].Currency = "SEK"
	for job, want := range map[string]string{"NOK": "NOK", "USD": "SEK", "EUX": "EUX", "EUR": "SEK"} {
		if _, err := b.ExchangeTo(job); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("to %s: %v; want an error that names %s", job, err, want)
		}
	}
	if _, err := Ratio().ExchangeTo("JPY"); err == nil || !strings.Contains(err.Error(), "JPY") {
		t.Errorf("the ratio book has no rate for JPY, got %v", err)
	}
}
