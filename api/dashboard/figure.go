package dashboard

import (
	"math"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/chart"
	"spanwright/estimate/money"
)

// space is the no-break space between digits, units and codes.
const space = "\u00a0"

// dash stands where there is nothing to show.
const dash = "–"

// exact writes a decimal with all its digits, thousands parted: "766 439.82".
func exact(d money.Decimal) string { return parted(d.String()) }

// parted parts the thousands of a plain decimal text and gives it a true minus.
func parted(text string) string {
	digits, negative := strings.CutPrefix(text, "-")
	whole, fraction, found := strings.Cut(digits, ".")
	var b strings.Builder
	if negative {
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

func count(n int) string { return parted(strconv.Itoa(n)) }

// places writes x with a fixed number of decimals; a zero has no sign, and what
// is no number is a dash.
func places(x float64, decimals int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return dash
	}
	text := strconv.FormatFloat(x, 'f', decimals, 64)
	if strings.Trim(text, "-0.") == "" {
		text = strings.TrimPrefix(text, "-")
	}
	return parted(text)
}

// rounding keeps twelve-digit prints of round numbers, 0.799999999999, on the
// side that they are meant to be.
const rounding = 1e-9

// utilisation writes demand over resistance with two decimals. One that fails is
// rounded up, so that it never reads 1.00.
func utilisation(u float64) string {
	if u > 1+rounding {
		u = math.Ceil((u-rounding)*100) / 100
	}
	return places(u, 2)
}

// ratio writes split / exact with two decimals. One just below 1 is rounded
// down, so that an unsafe one never reads 1.00.
func ratio(r float64) string {
	if r < 1-rounding && r > 0.9 {
		r = math.Floor((r+rounding)*100) / 100
	}
	return places(r, 2)
}

// percentile writes a probability as "P80" or "P97.5".
func percentile(p float64) string {
	if !(p >= 0 && p <= 1) {
		return dash
	}
	return "P" + strconv.FormatFloat(math.Round(p*1000)/10, 'f', -1, 64)
}

// lies says at which percentile a value lies, to a whole percent: more digits
// than a simulation gives would be false.
func lies(p float64) string {
	switch {
	case !(p >= 0 && p <= 1):
		return "at an unknown percentile"
	case p < 0.005:
		return "below P1"
	case p >= 0.995:
		return "above P99"
	}
	return "at" + space + "P" + strconv.Itoa(int(math.Round(p*100)))
}

// interval writes two amounts to three figures: "591 k – 1.06 M EUR".
func interval(low, high float64, currency string) string {
	return chart.Money(low, "") + " – " + chart.Money(high, currency)
}

// plain writes a number to six significant digits without an exponent where it
// can be read so, and without trailing zeros.
func plain(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return dash
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 6, 64), 64)
	if err != nil {
		return dash
	}
	if a := math.Abs(r); a != 0 && (a < 1e-6 || a >= 1e15) {
		return strings.ReplaceAll(strconv.FormatFloat(r, 'g', -1, 64), "-", "−")
	}
	return parted(strconv.FormatFloat(r, 'f', -1, 64))
}

// entered writes a number as somebody would have entered it, and one with more
// digits than that, which a computation has made, to three figures.
func entered(x float64) string {
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 6, 64), 64)
	if err == nil && math.Abs(r-x) <= rounding*math.Abs(x) {
		return plain(x)
	}
	return chart.ThreeFigures(x)
}

// moment is a time for people and for machines.
type moment struct{ Text, ISO string }

func momentOf(t time.Time) moment {
	t = t.UTC()
	return moment{Text: t.Format("2006-01-02 15:04") + space + "UTC", ISO: t.Format(time.RFC3339)}
}
