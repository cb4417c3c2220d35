// Package money holds exact decimal amounts and the currencies they are in.
//
//	text, integer or float → Parse, FromInt, FromFloat → Decimal
//	Decimal → Add, Sub, Mul, Product (all exact) → Decimal
//	Decimal → Currency.Round, Decimal.Round (half away from zero) → an amount
//	Decimal → String, MarshalJSON → plain text, never an exponent
//
// A float becomes a decimal once, at the edge; after that nothing is inexact.
package money

import (
	"errors"
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"

	"github.com/cockroachdb/apd/v3"
)

// MaxDigits is the most digits, before and after the point together, that
// Parse and FromFloat accept.
const MaxDigits = 30

// Decimal is an immutable exact decimal number. The zero value is 0. Values are
// copied freely; two are compared by Cmp or Equal, never by ==, because 1.5 and
// 1.50 are the same amount in two forms. The number of places is kept: Parse
// of "1.50" prints as "1.50".
type Decimal struct{ d apd.Decimal }

// Zero is 0 without places.
var Zero Decimal

// exact has a digit limit far above anything that Parse's limit and a chain of
// products reach, so that only Quantize ever rounds.
var exact = apd.Context{
	Precision:   100_000,
	MaxExponent: apd.MaxExponent,
	MinExponent: apd.MinExponent,
	Rounding:    apd.RoundHalfUp, // apd's "half up" takes ties away from zero
}

// Parse reads a plain decimal number: an optional sign, digits, and optionally a
// point with digits on at least one side. Exponents, separators, spaces, NaN and
// infinities are refused, and so are more than MaxDigits digits as String writes
// them.
func Parse(text string) (Decimal, error) {
	body := text
	if body != "" && (body[0] == '-' || body[0] == '+') {
		body = body[1:]
	}
	digits, points := 0, 0
	for i := 0; i < len(body); i++ {
		switch c := body[i]; {
		case '0' <= c && c <= '9':
			digits++
		case c == '.':
			points++
		default:
			return Zero, parseError(text)
		}
	}
	if digits == 0 || points > 1 {
		return Zero, parseError(text)
	}
	if body[0] == '.' {
		digits++ // it is written with a zero before the point
	}
	if digits > MaxDigits {
		return Zero, fmt.Errorf("money: found a number of %d digits; accepted: at most %d digits", digits, MaxDigits)
	}
	var r Decimal
	if _, _, err := r.d.SetString(text); err != nil {
		return Zero, fmt.Errorf("money: reading %q: %w", text, err)
	}
	return r.plain(), nil
}

// parseError says what Parse accepts, quoting no more than the start of text.
func parseError(text string) error {
	if len(text) > 40 {
		text = text[:40] + "…"
	}
	return fmt.Errorf("money: found %q; accepted: a plain decimal number such as 1234.50 (no exponent, no separator)", text)
}

// FromInt returns n.
func FromInt(n int64) Decimal {
	var r Decimal
	r.d.SetInt64(n)
	return r
}

// FromFloat returns x rounded to places decimal places (0 to MaxDigits), half
// away from zero, starting from the shortest text that reads back as x: 1.005
// becomes 1.01 although the float lies below 1.005. NaN, infinities, magnitudes
// of 1e20 and more and results of more than MaxDigits digits are errors.
func FromFloat(x float64, places int) (Decimal, error) {
	if !(math.Abs(x) < 1e20) {
		return Zero, fmt.Errorf("money: found %v; accepted: a finite number below 1e20 in magnitude", x)
	}
	if !(0 <= places && places <= MaxDigits) {
		return Zero, fmt.Errorf("money: found %d decimal places; accepted: 0 to %d", places, MaxDigits)
	}
	var r Decimal
	if _, _, err := r.d.SetString(strconv.FormatFloat(x, 'e', -1, 64)); err != nil {
		return Zero, fmt.Errorf("money: converting %v: %w", x, err)
	}
	r = r.Round(places)
	if r.d.NumDigits() > MaxDigits {
		return Zero, fmt.Errorf("money: found %v with %d places, which needs %d digits; accepted: at most %d digits", x, places, r.d.NumDigits(), MaxDigits)
	}
	return r, nil
}

// Add returns a + b, exact, with the larger number of places.
func (a Decimal) Add(b Decimal) Decimal {
	var r Decimal
	_, _ = exact.Add(&r.d, &a.d, &b.d) // cannot fail: finite operands, digits far below the limit
	return r.plain()
}

// Sub returns a − b, exact, with the larger number of places.
func (a Decimal) Sub(b Decimal) Decimal {
	var r Decimal
	_, _ = exact.Sub(&r.d, &a.d, &b.d) // cannot fail: finite operands, digits far below the limit
	return r.plain()
}

// Mul returns a · b, exact: the places add up.
func (a Decimal) Mul(b Decimal) Decimal {
	var r Decimal
	r.d.Coeff.Mul(&a.d.Coeff, &b.d.Coeff)
	r.d.Exponent = a.d.Exponent + b.d.Exponent
	r.d.Negative = a.d.Negative != b.d.Negative
	return r.plain()
}

// Neg returns −a.
func (a Decimal) Neg() Decimal {
	a.d.Negative = !a.d.Negative
	return a.plain()
}

// plain removes the sign of a negative zero, which an amount does not have.
func (a Decimal) plain() Decimal {
	if a.d.Negative && a.d.Coeff.Sign() == 0 {
		a.d.Negative = false
	}
	return a
}

// Cmp returns −1, 0 or +1 as a is below, equal to or above b.
func (a Decimal) Cmp(b Decimal) int { return a.d.Cmp(&b.d) }

// Equal reports whether a and b are the same number, whatever their places.
func (a Decimal) Equal(b Decimal) bool { return a.Cmp(b) == 0 }

// Sign returns −1, 0 or +1 as a is negative, zero or positive.
func (a Decimal) Sign() int { return a.d.Sign() }

// IsZero reports whether a is 0; encoding/json's omitzero uses it.
func (a Decimal) IsZero() bool { return a.d.Sign() == 0 }

// Round returns a with exactly the given number of decimal places, ties away
// from zero. Negative places round before the point: −3 to thousands. The
// places are kept within ±1000.
func (a Decimal) Round(places int) Decimal {
	places = min(max(places, -1000), 1000)
	var r Decimal
	_, _ = exact.Quantize(&r.d, &a.d, int32(-places)) // cannot fail: finite operand, digits far below the limit
	return r.plain()
}

// String returns a in plain notation with all its places, never an exponent.
func (a Decimal) String() string { return a.d.Text('f') }

// Float64 returns the nearest float, ties to even; ±Inf beyond its range.
func (a Decimal) Float64() float64 {
	x, _ := strconv.ParseFloat(a.d.Text('e'), 64) // the only possible error is range, with ±Inf as value
	return x
}

// Rat returns a as an exact fraction.
func (a Decimal) Rat() *big.Rat {
	r, _ := new(big.Rat).SetString(a.String())
	return r
}

// MarshalText writes a as String does.
func (a Decimal) MarshalText() ([]byte, error) { return a.d.Append(nil, 'f'), nil }

// UnmarshalText reads what Parse accepts.
func (a *Decimal) UnmarshalText(text []byte) error {
	r, err := Parse(string(text))
	if err != nil {
		return err
	}
	*a = r
	return nil
}

// MarshalJSON writes a as a JSON string, because a JSON number passes through
// floats in most readers.
func (a Decimal) MarshalJSON() ([]byte, error) {
	return append(a.d.Append([]byte{'"'}, 'f'), '"'), nil
}

// UnmarshalJSON reads a JSON string that Parse accepts; JSON numbers and null
// are refused.
func (a *Decimal) UnmarshalJSON(data []byte) error {
	text := string(data)
	if len(text) < 2 || text[0] != '"' || text[len(text)-1] != '"' {
		return fmt.Errorf("money: found %.40s; accepted: an amount as a JSON string such as \"1234.50\"", text)
	}
	return a.UnmarshalText(data[1 : len(data)-1])
}

// WorkbookDigits is the number of significant decimal digits that a workbook's
// binary floats hold without loss (IEEE 754 double: 15).
const WorkbookDigits = 15

// ErrDigits is wrapped by the error of a Product that a workbook could not hold.
var ErrDigits = errors.New("too many significant digits")

// Product returns the exact product of the factors, 1 for none. A product that
// needs more than WorkbookDigits significant digits, trailing zeros aside, is an
// error that names it and wraps ErrDigits: a workbook could not agree with it.
func Product(factors ...Decimal) (Decimal, error) {
	r := FromInt(1)
	for _, f := range factors {
		r = r.Mul(f)
	}
	if r.d.NumDigits() <= WorkbookDigits {
		return r, nil
	}
	var short apd.Decimal
	short.Reduce(&r.d)
	if n := short.NumDigits(); n > WorkbookDigits {
		return Zero, fmt.Errorf("money: found the product %s = %s of %d significant digits; accepted: at most %d, round a factor: %w",
			formula(factors), short.Text('f'), n, WorkbookDigits, ErrDigits)
	}
	return r, nil
}

// statedPlaces is what a workbook rounds a product to before it rounds it to the
// places that are shown: it takes off the noise of binary arithmetic.
const statedPlaces = 8

// RoundedProduct returns the exact product of the factors, 1 for none, rounded to
// 8 places and then to places, both half away from zero: what a workbook states
// as ROUND(ROUND(product, 8), places). Where the exact product has more than
// WorkbookDigits significant digits the workbook holds it only to within some
// roundings of 2⁻⁵³, at least to 2⁻⁵⁰ of itself; when not every number that near
// rounds to the same result, the error names the product and wraps ErrDigits.
func RoundedProduct(places int, factors ...Decimal) (Decimal, error) {
	x := FromInt(1)
	for _, f := range factors {
		x = x.Mul(f)
	}
	r := stated(x, places)
	if x.digits() <= WorkbookDigits {
		return r, nil
	}
	doubt := x.Mul(halves50)
	if n := len(factors); n > 4 { // n factors and n − 1 products are rounded, each by 2⁻⁵³ of itself
		doubt = doubt.Mul(FromInt(int64(n+3) / 4))
	}
	if !stated(x.Sub(doubt), places).Equal(r) || !stated(x.Add(doubt), places).Equal(r) {
		return Zero, fmt.Errorf("money: found the product %s = %s, which binary arithmetic cannot surely round to %d places; accepted: at most %d significant digits, round a factor: %w",
			formula(factors), x, places, WorkbookDigits, ErrDigits)
	}
	return r, nil
}

// stated rounds x as a workbook does.
func stated(x Decimal, places int) Decimal { return x.Round(statedPlaces).Round(places) }

// halves50 is 2⁻⁵⁰ = 5⁵⁰·10⁻⁵⁰.
var halves50 = func() Decimal {
	var r Decimal
	r.d.Coeff.Exp(apd.NewBigInt(5), apd.NewBigInt(50), nil)
	r.d.Exponent = -50
	return r
}()

// digits returns the significant digits of a, trailing zeros aside.
func (a Decimal) digits() int {
	n := a.d.NumDigits()
	if n <= WorkbookDigits {
		return int(n)
	}
	var short apd.Decimal
	short.Reduce(&a.d)
	return int(short.NumDigits())
}

// formula writes factors as a product for an error message.
func formula(factors []Decimal) string {
	texts := make([]string, len(factors))
	for i, f := range factors {
		texts[i] = f.String()
	}
	return strings.Join(texts, " × ")
}
