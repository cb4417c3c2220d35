package money

import (
	"strings"
	"testing"

	"golang.org/x/text/currency"
)

// Source: ISO 4217:2015, list one, from memory; existence of every code against
// the Unicode locale data in golang.org/x/text.
func TestMinorDigits(t *testing.T) {
	for code, want := range map[string]int{
		"EUR": 2, "USD": 2, "GBP": 2, "CHF": 2, "SEK": 2, "NOK": 2, "AUD": 2, "HUF": 2, "INR": 2,
		"JPY": 0, "KRW": 0, "CLP": 0, "ISK": 0, "VND": 0, "KWD": 3, "BHD": 3, "OMR": 3, "TND": 3, "JOD": 3,
	} {
		got, err := FindCurrency(code)
		if want := (Currency{Code: code, MinorDigits: want}); err != nil || got != want {
			t.Errorf("FindCurrency(%s) = %v, %v, want %v", code, got, err, want)
		}
	}
}

// Codes younger than the list in x/text, from memory of ISO 4217's amendments.
var newCodes = map[string]bool{"MRU": true, "VES": true, "SLE": true, "XCG": true}

func TestEveryCodeExists(t *testing.T) {
	for code := range currencies {
		if _, err := currency.ParseISO(code); err != nil && !newCodes[code] {
			t.Errorf("%s: %v", code, err)
		}
	}
	if n := len(strings.Fields(noMinorUnit + " " + thousandths + " " + hundredths)); n != len(currencies) {
		t.Errorf("%d codes listed, %d different", n, len(currencies))
	}
}

func TestNearMisses(t *testing.T) {
	for in, want := range map[string]string{
		"eur": "EUR", " USD ": "USD", "ERU": "ERN EUR MRU", "EURO": "EUR", "UDS": "USD UZS", "JP": "JPY", "": "", "€": "", "ZZZZZ": "",
	} {
		if got := strings.Join(nearCodes(in), " "); got != want {
			t.Errorf("near %q: %q, want %q", in, got, want)
		}
	}
}

func TestFindCurrencyRefuses(t *testing.T) {
	for in, part := range map[string]string{"EURO": "accepted: EUR", "€": "an ISO 4217 code", strings.Repeat("Q", 5000): "an ISO 4217 code"} {
		_, err := FindCurrency(in)
		if err == nil || !strings.Contains(err.Error(), part) || len(err.Error()) > 200 {
			t.Errorf("FindCurrency(%.10q): error %v, want %q in it", in, err, part)
		}
	}
}

func TestCurrencyRound(t *testing.T) {
	for _, c := range []struct{ code, in, want string }{
		{"EUR", "10.005", "10.01"}, {"JPY", "10.5", "11"}, {"KWD", "-10.0005", "-10.001"}, {"USD", "3", "3.00"},
	} {
		cur, err := FindCurrency(c.code)
		if err != nil {
			t.Fatal(err)
		}
		if got := cur.Round(mustParse(t, c.in)).String(); got != c.want {
			t.Errorf("%s %s rounds to %s, want %s", c.code, c.in, got, c.want)
		}
	}
}
