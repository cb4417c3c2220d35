package chart

import (
	"math"
	"strconv"
	"strings"
)

// space is the no-break space that stands between digits, units and codes.
const space = "\u00a0"

// scale is a power of a thousand with the sign that names it.
type scale struct {
	factor float64
	sign   string
}

var scales = []scale{{1e12, "tn"}, {1e9, "bn"}, {1e6, "M"}, {1e3, "k"}, {1, ""}}

// scaleOf returns the largest scale at which x, rounded to three figures, is 1
// or more; numbers below a thousand have scale 1.
func scaleOf(x float64) scale {
	x = math.Abs(round3(x))
	if math.IsInf(x, 0) {
		return scale{1, ""}
	}
	for _, s := range scales {
		if x >= s.factor {
			return s
		}
	}
	return scale{1, ""}
}

// round3 rounds x to three significant figures.
func round3(x float64) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', 2, 64), 64)
	if err != nil {
		return x
	}
	return r
}

// Money returns x to three significant figures with its scale and currency,
// "1.23 M EUR", the parts joined by no-break spaces. The scales are k (10³), M
// (10⁶), bn (10⁹) and tn (10¹²). NaN and infinity give a dash.
func Money(x float64, currency string) string {
	s := scaleOf(x)
	text := ThreeFigures(x / s.factor)
	if s.sign != "" {
		text += space + s.sign
	}
	return strings.TrimSuffix(text+space+currency, space)
}

// ThreeFigures returns x to three significant figures in plain notation, with
// no-break spaces between thousands and a true minus sign: "0.0123", "1.20",
// "123", "12 300". From 10¹⁵ up and below 10⁻⁴ it writes an exponent; zero is
// "0", NaN and infinity give a dash.
func ThreeFigures(x float64) string {
	switch {
	case math.IsNaN(x) || math.IsInf(x, 0):
		return "–"
	case x == 0:
		return "0"
	}
	r := round3(x)
	a := math.Abs(r)
	if a >= 1e15 || a < 1e-4 {
		return strings.ReplaceAll(strconv.FormatFloat(r, 'e', 2, 64), "-", "−")
	}
	places := max(0, 2-int(math.Floor(math.Log10(a)+1e-9)))
	return fixed(r, places)
}

// fixed writes x with a number of decimals, thousands parted and a true minus.
func fixed(x float64, places int) string {
	text := strconv.FormatFloat(math.Abs(x), 'f', places, 64)
	whole, fraction, found := strings.Cut(text, ".")
	var b strings.Builder
	if x < 0 && strings.Trim(text, "0.") != "" {
		b.WriteString("−")
	}
	for i, c := range whole {
		if i > 0 && (len(whole)-i)%3 == 0 && len(whole) > 4 {
			b.WriteString(space)
		}
		b.WriteRune(c)
	}
	if found {
		b.WriteString("." + fraction)
	}
	return b.String()
}

// percent writes a probability between 0 and 1 as "80", with decimals only where
// it has some; beyond one decimal it is rounded.
func percent(p float64) string {
	if math.IsNaN(p) || math.IsInf(p, 0) {
		return "–"
	}
	return strconv.FormatFloat(math.Round(p*1000)/10, 'f', -1, 64)
}

// finite reports whether x is a number that can be drawn.
func finite(x float64) bool { return math.Abs(x) <= math.MaxFloat64/4 }
