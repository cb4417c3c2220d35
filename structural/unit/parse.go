package unit

import (
	"errors"
	"math"
	"strings"
	"unicode/utf8"
)

// Digits is the number of significant digits that Parse keeps, so that 6 m and
// 19.68503937 ft are the same member.
const Digits = 10

// Largest and smallest magnitude, other than zero, that Parse answers, in SI.
// No structure comes near them; they keep sums and products finite.
const (
	largest  = 1e30
	smallest = 1e-30
)

const (
	longestText = 200 // bytes
	noise       = 15  // significant digits that every float64 holds
)

// Parse reads a quantity of dimension d and returns it in SI, rounded to Digits
// significant digits.
//
// The text may carry its own unit ("12 kN/m", "12'-6 1/2\"", "6 1/2 in"); a bare
// number takes implied, and where implied is the zero Unit that is an error
// (except for Number, which has no unit). The decimal sign is the point;
// commas or spaces may group thousands, in threes only. Exponents, a leading
// plus, the typographic minus and non-breaking and thin spaces are read; NaN,
// infinities, hexadecimals and underscores are not. The error is an *Error;
// without one the result is finite.
func Parse(text string, d Dimension, implied Unit) (float64, error) {
	return parse(text, d, implied, pointNotation)
}

// ParseDecimalComma is Parse where the comma is the decimal sign and points
// group thousands: "1.234,5" and "1,5". "1.5" is refused as ambiguous.
func ParseDecimalComma(text string, d Dimension, implied Unit) (float64, error) {
	return parse(text, d, implied, commaNotation)
}

func parse(text string, d Dimension, implied Unit, n notation) (float64, error) {
	if len(text) > longestText || !utf8.ValidString(text) {
		return 0, refuse(strings.ToValidUTF8(text, "?"), "is no quantity", wanted(d, n))
	}
	s := tidy(text)
	if s == "" {
		return 0, refuse(text, "nothing is written here", wanted(d, n))
	}
	sign, s := cutSign(s)
	if value, is, problem := feetAndInches(s, n); is {
		if problem != "" {
			return 0, refuse(text, problem, `feet and inches such as 12'-6 1/2"`)
		}
		return settle(text, sign*value, d, Unit{"in", Length, inch}, n)
	}
	value, rest, ok := cutFraction(s)
	if !ok {
		var problem string
		if value, rest, problem = cutDecimal(s, n); problem != "" {
			return 0, refuse(text, problem, wanted(d, n))
		}
	}
	u, err := ownUnit(text, strings.TrimSpace(rest), d, implied)
	if err != nil {
		return 0, err
	}
	if ok && !d.fractions(u) {
		return 0, refuse(text, "fractions are read in inches and feet only", wanted(d, n))
	}
	return settle(text, sign*value, d, u, n)
}

// fractions tells whether "6 1/2" is customary in unit u of dimension d.
func (d Dimension) fractions(u Unit) bool {
	return d == Length && (u.Factor == inch || u.Factor == foot)
}

// ownUnit is the unit written after the number, or the implied one.
func ownUnit(text, symbol string, d Dimension, implied Unit) (Unit, error) {
	if symbol != "" {
		u, err := Lookup(symbol)
		var e *Error
		if errors.As(err, &e) {
			problem := e.Problem
			if e.Problem == unknown {
				problem, e.Accepted = "has an unknown unit", wanted(d, pointNotation)
			}
			return Unit{}, refuse(text, problem, e.Accepted)
		}
		return u, nil
	}
	if d == Number {
		return Unit{"", Number, 1}, nil
	}
	if implied.IsZero() {
		return Unit{}, refuse(text, "has no unit, and none is implied here", "a "+d.String()+" with its unit: "+Symbols(d))
	}
	return implied, nil
}

// settle checks dimension and magnitude and rounds.
func settle(text string, value float64, d Dimension, u Unit, n notation) (float64, error) {
	if !d.Accepts(u.Dimension) {
		return 0, refuse(text, mismatch(u, d), wanted(d, n))
	}
	if value == 0 {
		return 0, nil // never -0
	}
	si := Round(Round(value*u.Factor, noise), Digits) // noise first: 0.5 less a float's error still rounds up
	if !(math.Abs(si) >= smallest && math.Abs(si) <= largest) {
		return 0, refuse(text, "is too large or too small a number", wanted(d, n))
	}
	return si, nil
}

func mismatch(u Unit, d Dimension) string {
	problem := u.Symbol + " is a " + u.Dimension.String() + ", not a " + d.String()
	if mass := u.Dimension; mass == Mass || mass == LineMass || mass == AreaMass {
		if d == Force || d == LineLoad || d == AreaLoad {
			problem += " (a mass is not turned into its weight unasked)"
		}
	}
	return problem
}

// wanted describes a readable text of dimension d.
func wanted(d Dimension, n notation) string {
	example := "12" + string(n.decimal) + "5"
	switch d {
	case Number:
		return "a plain number such as " + example
	case Percent:
		return "a percentage such as " + example + " %"
	}
	return "a " + d.String() + " such as " + example + " " + siUnit(d).Symbol + ", in " + Symbols(d)
}

// siUnit is the SI unit of a dimension, the first of the table.
func siUnit(d Dimension) Unit {
	for _, row := range table {
		if row.Dimension == d {
			return row.Unit
		}
	}
	return Unit{}
}
