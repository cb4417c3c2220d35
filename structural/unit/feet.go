package unit

import (
	"math"
	"strconv"
	"strings"
)

// feetAndInches reads an unsigned compound length, in inches: 12'-6 1/2", 3' 4",
// 12'6, 12 ft 6 in. The second result tells whether s is such a text at all (a
// lone "12 ft" is not), the third what is wrong with it. After words the inches need their own mark, so that 12 ft2 stays an area.
func feetAndInches(s string, n notation) (float64, bool, string) {
	whole, rest := cutDigits(s)
	mark, rest := cutMark(strings.TrimLeft(rest, " "), "feet", "foot", "ft.", "ft", "'")
	if whole == "" || mark == "" {
		return 0, false, ""
	}
	tail := strings.TrimLeft(rest, " ")
	parted := tail != rest
	if strings.HasPrefix(tail, "-") {
		tail, parted = strings.TrimLeft(tail[1:], " "), true
	}
	if digits, _ := cutDigits(tail); digits == "" || mark != "'" && !parted {
		return 0, false, ""
	}
	inches, rest, ok := cutFraction(tail)
	if !ok {
		var problem string
		if inches, rest, problem = cutDecimal(tail, n); problem != "" {
			return 0, true, "has inches that cannot be read"
		}
	}
	inchMark, rest := cutMark(strings.TrimLeft(rest, " "), "inches", "inch", "in.", "in", `"`)
	if rest != "" || inchMark == "" && mark != "'" {
		return 0, true, "is no length in feet and inches"
	}
	if !(inches < 12) {
		return 0, true, "has 12 inches or more beside its feet"
	}
	f, err := strconv.ParseFloat(whole, 64)
	if err != nil {
		return 0, true, "is too large a number"
	}
	return 12*f + inches, true, ""
}

// cutMark parts the first of marks that begins s.
func cutMark(s string, marks ...string) (mark, rest string) {
	for _, m := range marks {
		if strings.HasPrefix(s, m) {
			return m, s[len(m):]
		}
	}
	return "", s
}

// FormatFeetInches writes a length in m as 12'-6 1/2", rounded to the nearest
// 1/denominator inch (1 to 64, a power of two as rulers have it; others are
// taken as 16). What is not finite, or is beyond 1e9 m, is written by Format.
func FormatFeetInches(m float64, denominator int) string {
	if denominator < 1 || denominator > 64 || denominator&(denominator-1) != 0 {
		denominator = 16
	}
	if !(math.Abs(m) <= 1e9) {
		return Format(m, Unit{"ft", Length, foot}, Digits)
	}
	parts := int64(math.Round(math.Abs(m) / inch * float64(denominator)))
	sign := ""
	if m < 0 && parts > 0 {
		sign = "-"
	}
	d := int64(denominator)
	whole, num := parts/d, parts%d
	text := sign + strconv.FormatInt(whole/12, 10) + "'-" + strconv.FormatInt(whole%12, 10)
	if num > 0 {
		for num%2 == 0 {
			num, d = num/2, d/2
		}
		text += " " + strconv.FormatInt(num, 10) + "/" + strconv.FormatInt(d, 10)
	}
	return text + `"`
}
