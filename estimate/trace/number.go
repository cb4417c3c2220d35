package trace

import (
	"fmt"
	"math"
	"math/big"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// printedDigits and measuredDigits are the significant digits to which the
// document prints a Number, and one that document.Measured rounded.
const (
	printedDigits  = 12
	measuredDigits = 8
)

// value is a number as the document prints it. A decimal is exact; of a printed
// float the digits leave half a unit of the last one open.
type value struct {
	text string
	rat  *big.Rat
	open *big.Rat
}

func exact(d money.Decimal) value { return value{d.String(), d.Rat(), new(big.Rat)} }

func whole(n int) value { return exact(money.FromInt(int64(n))) }

func printed(n document.Number) value { return digits(n, printedDigits) }

func measured(n document.Number) value { return digits(n, measuredDigits) }

// digits is a Number printed to so many significant digits.
func digits(n document.Number, places int) value {
	v := value{text: text(n), rat: new(big.Rat), open: new(big.Rat)}
	if _, ok := v.rat.SetString(v.text); !ok || v.rat.Sign() == 0 {
		return v
	}
	last := int(math.Floor(math.Log10(math.Abs(n.Rounded())))) - places + 1
	v.open.Mul(power(last), oneHalf)
	return v
}

// power returns 10ⁿ.
func power(n int) *big.Rat {
	if p, ok := powers[n]; ok {
		return p
	}
	return powerOf(n)
}

func powerOf(n int) *big.Rat {
	p := new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(max(n, -n))), nil))
	if n < 0 {
		p.Inv(p)
	}
	return p
}

// powers are those that ordinary figures need; they are read, never changed.
var powers = func() map[int]*big.Rat {
	out := map[int]*big.Rat{}
	for n := -30; n <= 30; n++ {
		out[n] = powerOf(n)
	}
	return out
}()

var oneHalf = big.NewRat(1, 2)

// text is a Number as the document prints it.
func text(n document.Number) string {
	b, err := n.MarshalJSON()
	if err != nil {
		return fmt.Sprint(float64(n)) // only a document that was never stored holds one
	}
	return string(b)
}

// places is the number of decimals of a decimal.
func places(d money.Decimal) int {
	_, after, _ := strings.Cut(d.String(), ".")
	return len(after)
}

// placed says to how many decimals a value is rounded.
func placed(n int) string {
	if n == 1 {
		return "1 place"
	}
	return fmt.Sprintf("%d places", n)
}

// noBreak stands between the thousands, so that a line never ends within a number.
const noBreak = "\u00a0"

// grouped writes a number with its thousands apart, from five digits on.
func grouped(text string) string {
	sign := ""
	if rest, ok := strings.CutPrefix(text, "-"); ok {
		sign, text = "−", rest
	}
	front, after, point := strings.Cut(text, ".")
	if len(front) > 4 && !strings.ContainsAny(text, "eE") {
		for i := len(front) - 3; i > 0; i -= 3 {
			front = front[:i] + noBreak + front[i:]
		}
	}
	if point {
		front += "." + after
	}
	return sign + front
}

// with writes a number with its unit.
func with(text, unit string) string { return strings.TrimSpace(grouped(text) + " " + unit) }
