package money

import (
	"fmt"
	"sort"
	"strings"
)

// Currency is an ISO 4217 currency.
type Currency struct {
	Code        string `json:"code"`         // three capital letters
	MinorDigits int    `json:"minor_digits"` // decimal places of its minor unit
}

// Round returns d rounded to the currency's minor unit, half away from zero.
func (c Currency) Round(d Decimal) Decimal { return d.Round(c.MinorDigits) }

// Codes by number of minor digits; funds codes, precious metals and codes for
// testing are left out. Source: ISO 4217:2015, list one, from memory.
const (
	noMinorUnit = "BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX VND VUV XAF XOF XPF"
	thousandths = "BHD IQD JOD KWD LYD OMR TND"
	hundredths  = "AED AFN ALL AMD ANG AOA ARS AUD AWG AZN BAM BBD BDT BGN BMD BND BOB BRL BSD BTN BWP BYN BZD " +
		"CAD CDF CHF CNY COP CRC CUP CVE CZK DKK DOP DZD EGP ERN ETB EUR FJD FKP GBP GEL GHS GIP GMD GTQ GYD " +
		"HKD HNL HTG HUF IDR ILS INR IRR JMD KES KGS KHR KPW KYD KZT LAK LBP LKR LRD LSL MAD MDL MGA MKD MMK " +
		"MNT MOP MRU MUR MVR MWK MXN MYR MZN NAD NGN NIO NOK NPR NZD PAB PEN PGK PHP PKR PLN QAR RON RSD RUB " +
		"SAR SBD SCR SDG SEK SGD SHP SLE SOS SRD SSP STN SVC SYP SZL THB TJS TMT TOP TRY TTD TWD TZS UAH USD " +
		"UYU UZS VES WST XCD XCG YER ZAR ZMW"
)

var currencies = indexCurrencies()

// indexCurrencies maps each code of the lists to its minor digits.
func indexCurrencies() map[string]int {
	index := make(map[string]int, 170)
	for digits, list := range map[int]string{0: noMinorUnit, 2: hundredths, 3: thousandths} {
		for _, code := range strings.Fields(list) {
			index[code] = digits
		}
	}
	return index
}

// FindCurrency returns the currency of an ISO 4217 code in capital letters. An
// unknown code is an error that lists near misses.
func FindCurrency(code string) (Currency, error) {
	if digits, ok := currencies[code]; ok {
		return Currency{Code: code, MinorDigits: digits}, nil
	}
	accepted := "an ISO 4217 code such as EUR"
	if near := nearCodes(code); len(near) > 0 {
		accepted = strings.Join(near, ", ")
	}
	return Currency{}, fmt.Errorf("money: found currency %.20q; accepted: %s", code, accepted)
}

// nearCodes returns, sorted, the code that differs in letter case or spaces
// alone, else up to six codes at one changed, missing, extra or swapped letter.
func nearCodes(code string) []string {
	folded := strings.ToUpper(strings.TrimSpace(code))
	if _, ok := currencies[folded]; ok {
		return []string{folded}
	}
	var near []string
	for known := range currencies {
		if oneEdit(folded, known) {
			near = append(near, known)
		}
	}
	sort.Strings(near)
	return near[:min(len(near), 6)]
}

// oneEdit reports whether one substitution, insertion, deletion or swap of
// neighbours turns a into b.
func oneEdit(a, b string) bool {
	i := 0
	for i < len(a) && i < len(b) && a[i] == b[i] {
		i++
	}
	a, b = a[i:], b[i:]
	switch {
	case len(a) == len(b):
		swapped := len(a) >= 2 && a[0] == b[1] && a[1] == b[0] && a[2:] == b[2:]
		return len(a) > 0 && (a[1:] == b[1:] || swapped)
	case len(a) == len(b)+1:
		return a[1:] == b
	case len(b) == len(a)+1:
		return a == b[1:]
	}
	return false
}
