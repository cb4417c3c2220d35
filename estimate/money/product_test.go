package money

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// factorsOf reads factors parted by spaces.
func factorsOf(t *testing.T, text string) []Decimal {
	t.Helper()
	var factors []Decimal
	for _, f := range strings.Fields(text) {
		factors = append(factors, mustParse(t, f))
	}
	return factors
}

// The products behind the comments are those of Python's decimal module.
func TestRoundedProduct(t *testing.T) {
	for _, c := range []struct {
		factors string
		places  int
		want    string
	}{
		{"", 2, "1.00"},
		{"900 2.4 1.15", 4, "2484.0000"},
		{"1.005", 2, "1.01"}, // ties away from zero
		{"-1.005", 2, "-1.01"},
		{"0.0049999950", 2, "0.01"},                       // to 8 places 0.00500000, then a tie
		{"0.0049999949", 2, "0.00"},                       // to 8 places 0.00499999
		{"12.3456 0.9 0.912345", 4, "10.1371"},            // 10.13710178880
		{"1.2345 1.2347 1.2349 60.33", 4, "113.5580"},     // 17 digits, no tie near
		{"98765432.1234 1.23456789", 4, "121932631.1415"}, // 21 digits, no tie near
	} {
		got, err := RoundedProduct(c.places, factorsOf(t, c.factors)...)
		if err != nil || got.String() != c.want {
			t.Errorf("%s to %d places: got %s, %v, want %s", c.factors, c.places, got, err, c.want)
		}
	}
}

// Of more than 15 digits, a product so near a tie that a float may fall on its other
// side is refused by name; one a little further away is not. 2⁻⁵⁰ of 12 345 678 901
// is 0.000 010 97.
func TestRoundedProductRefusesDoubt(t *testing.T) {
	for _, c := range []struct {
		factors string
		refused bool
	}{
		{"12345678901.23455 1", true},             // the tie itself, 16 digits
		{"1234567890.12345 1.0", false},           // a tie too, but of 15 digits, which a float holds
		{"12345678901.234539 1", false},           // 0.000 011 below
		{"12345678901.234541 1", true},            // 0.000 009 below
		{"12345678901.234561 1", false},           // 0.000 011 above
		{"12345678901.234559 1", true},            // 0.000 009 above
		{"12345678901.234539 1 1 1", false},       // four factors: still 2⁻⁵⁰
		{"12345678901.234539 1 1 1 1", true},      // five: twice that
		{"-12345678901.234541 1", true},           // negative
		{"1234567890123456789.5 1234567.5", true}, // the float itself is coarser than the places
	} {
		_, err := RoundedProduct(4, factorsOf(t, c.factors)...)
		if got := errors.Is(err, ErrDigits); got != c.refused || (err != nil) != c.refused {
			t.Errorf("%s: got %v, want refused %t", c.factors, err, c.refused)
		}
		if err != nil && !strings.Contains(err.Error(), strings.Join(strings.Fields(c.factors), " × ")) {
			t.Errorf("%s: the error does not name the factors: %v", c.factors, err)
		}
	}
}

// What is accepted a workbook reaches with floats, multiplied in order and rounded
// through the 15 digits that it shows (ECMA-376 leaves ROUND open; calculating
// through 15 digits is common practice, no source).
func TestRoundedProductIsWhatFloatsReach(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	accepted := 0
	for range 20_000 {
		factors := make([]Decimal, 2+r.IntN(6))
		product := 1.0
		for i := range factors {
			d, err := FromFloat(math.Exp(4*r.Float64()-1), 1+r.IntN(4))
			if err != nil {
				t.Fatal(err)
			}
			factors[i] = d
			product *= d.Float64()
		}
		places := 2 + r.IntN(4)
		got, err := RoundedProduct(places, factors...)
		if err != nil {
			continue
		}
		accepted++
		x, err := FromFloat(product, 18)
		if err != nil {
			t.Fatal(err)
		}
		whole := len(x.Round(0).String())
		if want := x.Round(min(WorkbookDigits-whole, 8)).Round(places); !want.Equal(got) {
			t.Errorf("%v to %d places: got %s, floats reach %s", factors, places, got, want)
		}
	}
	if accepted < 19_900 {
		t.Errorf("%d of 20000 products are accepted", accepted)
	}
}
