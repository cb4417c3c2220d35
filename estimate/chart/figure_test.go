package chart

import (
	"math"
	"strings"
	"testing"
)

// Expected texts are roundings by hand to three significant figures.
func TestMoney(t *testing.T) {
	for _, c := range []struct {
		x        float64
		currency string
		want     string
	}{
		{1234567, "EUR", "1.23 M EUR"}, {999499, "EUR", "999 k EUR"}, {999500.1, "EUR", "1.00 M EUR"},
		{85.4, "USD", "85.4 USD"}, {999.9, "USD", "1.00 k USD"}, {0, "JPY", "0 JPY"}, {-25300, "GBP", "−25.3 k GBP"},
		{2.5e9, "KWD", "2.50 bn KWD"}, {7.123e12, "JPY", "7.12 tn JPY"}, {1.5e15, "JPY", "1500 tn JPY"},
		{0.0456, "EUR", "0.0456 EUR"}, {1.23e-6, "EUR", "1.23e−06 EUR"}, {5e30, "EUR", "5.00e+18 tn EUR"},
		{math.NaN(), "EUR", "– EUR"}, {math.Inf(-1), "EUR", "– EUR"}, {12, "", "12.0"},
	} {
		got := Money(c.x, c.currency)
		if plain(got) != c.want || strings.Contains(got, " ") {
			t.Errorf("Money(%v, %s) = %q, want %q with no-break spaces", c.x, c.currency, got, c.want)
		}
	}
}

func TestThreeFigures(t *testing.T) {
	for _, c := range []struct {
		x    float64
		want string
	}{
		{1, "1.00"}, {9.999, "10.0"}, {99.96, "100"}, {12345, "12\u00a0300"}, {1234, "1230"}, {1234567, "1\u00a0230\u00a0000"},
		{0.01234, "0.0123"}, {0.0009996, "0.00100"}, {-4.5678, "−4.57"}, {0.1, "0.100"}, {1000, "1000"}, {math.Copysign(0, -1), "0"},
	} {
		if got := ThreeFigures(c.x); got != c.want {
			t.Errorf("ThreeFigures(%v) = %q, want %q", c.x, got, c.want)
		}
	}
}
