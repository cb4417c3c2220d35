package workbook

import (
	"math"
	"strings"

	"spanwright/estimate/money"
)

// linePlaces is the usual rounding of a product before it is rounded to its
// places. It takes off the noise of binary multiplication, which would turn a tie
// such as 1.005 into 1.00499999….
const linePlaces = 8

// innerPlaces returns the decimals to which the product of the factors is rounded
// first, so that ROUND(ROUND(product, inner), outer) is want: 8, fewer where a
// large product leaves no more within the 15 digits of a spreadsheet's numbers or
// the noise of many factors reaches further, and all of the product's own where
// its ninth decimal decides. ok is false when no rounding gives want.
func innerPlaces(factors []money.Decimal, outer int, want money.Decimal) (int, bool) {
	product := money.FromInt(1)
	floats := make([]float64, len(factors))
	for i, f := range factors {
		product = product.Mul(f)
		floats[i] = f.Float64()
	}
	usual := max(0, min(linePlaces, money.WorkbookDigits-wholeDigits(product)))
	found, ok := 0, false
	for _, inner := range []int{usual, usual - 1, usual - 2, decimals(product)} {
		if inner < 0 || !product.Round(inner).Round(outer).Equal(want) {
			continue
		}
		if settles(floats, inner, outer, want) {
			return inner, true
		}
		if !ok {
			found, ok = inner, true
		}
	}
	return found, ok
}

// settles tells whether ROUND(ROUND(product, inner), outer) is want whatever the
// last bits of the product are: each multiplication may be wrong by half a unit in
// the last place, and each factor is the float nearest to its decimal.
func settles(factors []float64, inner, outer int, want money.Decimal) bool {
	low, high := band(factors)
	return roundsTo(low, inner, outer, want) && roundsTo(high, inner, outer, want)
}

// band is the product of floats, multiplied from the left, less and more its
// possible error.
func band(factors []float64) (low, high float64) {
	const unit = 0x1p-52
	x := 1.0
	for _, f := range factors {
		x *= f
	}
	slack := math.Abs(x) * unit * float64(len(factors)+1)
	return x - slack, x + slack
}

func roundsTo(x float64, inner, outer int, want money.Decimal) bool {
	d, err := money.FromFloat(x, inner)
	return err == nil && d.Round(outer).Equal(want)
}

// wholeDigits is the number of digits before the point.
func wholeDigits(d money.Decimal) int {
	if d.Sign() < 0 {
		d = d.Neg()
	}
	whole, _, _ := strings.Cut(d.String(), ".")
	if whole == "0" {
		return 0
	}
	return len(whole)
}

// decimals is the number of decimals without trailing zeros.
func decimals(d money.Decimal) int {
	_, fraction, _ := strings.Cut(d.String(), ".")
	return len(strings.TrimRight(fraction, "0"))
}

// places is the number of decimals that a decimal states.
func places(d money.Decimal) int {
	_, fraction, _ := strings.Cut(d.String(), ".")
	return len(fraction)
}

// shown is a decimal to the 15 significant digits that a workbook holds: itself
// unless it is a product of many factors.
func shown(d money.Decimal) string {
	return d.Round(min(decimals(d), max(0, money.WorkbookDigits-wholeDigits(d)))).String()
}
