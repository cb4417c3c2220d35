package unit

import (
	"math"
	"strconv"
	"strings"
)

// notation says which sign parts the decimals and which groups the thousands.
type notation struct{ decimal, group byte }

var (
	pointNotation = notation{'.', ','}
	commaNotation = notation{',', '.'}
)

var signs = strings.NewReplacer(
	"\u00a0", " ", "\u2007", " ", "\u2009", " ", "\u202f", " ", "\t", " ",
	"\u2212", "-", "′", "'", "’", "'", "″", `"`, "”", `"`, "''", `"`,
	"¼", " 1/4", "½", " 1/2", "¾", " 3/4", "⅛", " 1/8", "⅜", " 3/8", "⅝", " 5/8", "⅞", " 7/8")

// tidy maps typographic spaces, minus, primes and fractions to plain signs.
func tidy(text string) string { return strings.TrimSpace(signs.Replace(text)) }

// cutSign parts a leading plus or minus from s; the factor is 1 or -1.
func cutSign(s string) (float64, string) {
	switch {
	case strings.HasPrefix(s, "-"):
		return -1, strings.TrimLeft(s[1:], " ")
	case strings.HasPrefix(s, "+"):
		return 1, strings.TrimLeft(s[1:], " ")
	}
	return 1, s
}

// cutDigits parts the leading ASCII digits from s.
func cutDigits(s string) (digits, rest string) {
	n := 0
	for n < len(s) && s[n] >= '0' && s[n] <= '9' {
		n++
	}
	return s[:n], s[n:]
}

// cutFraction reads "n/d" or "w n/d" or "w-n/d" at the head of s, unsigned.
// Value, remainder, and whether: it answers false where there is no such fraction or it is not a proper one.
func cutFraction(s string) (float64, string, bool) {
	whole, after := cutDigits(s)
	num := whole
	if len(after) > 0 && after[0] != '/' {
		if after[0] != ' ' && after[0] != '-' {
			return 0, s, false
		}
		num, after = cutDigits(strings.TrimLeft(after[1:], " "))
	} else {
		whole = "0"
	}
	if whole == "" || num == "" || len(whole) > 9 || len(num) > 4 || !strings.HasPrefix(after, "/") {
		return 0, s, false
	}
	den, after := cutDigits(after[1:])
	if den == "" || len(den) > 4 {
		return 0, s, false
	}
	w, _ := strconv.ParseFloat(whole, 64)
	n, _ := strconv.ParseFloat(num, 64)
	d, _ := strconv.ParseFloat(den, 64)
	if !(n < d) {
		return 0, s, false
	}
	return w + n/d, after, true
}

// cutDecimal reads an unsigned decimal number at the head of s. problem is
// empty on success, else it says what is wrong with the number.
func cutDecimal(s string, n notation) (value float64, rest, problem string) {
	whole, rest, problem := cutGroups(s, n)
	if problem != "" {
		return 0, s, problem
	}
	text := whole
	if len(rest) > 0 && rest[0] == n.decimal {
		var decimals string
		decimals, rest = cutDigits(rest[1:])
		if whole == "" && decimals == "" {
			return 0, s, "is not a number"
		}
		text = whole + "." + decimals
	} else if whole == "" {
		return 0, s, "is not a number"
	}
	if len(rest) > 0 && (rest[0] == n.decimal || rest[0] == n.group) {
		return 0, s, "has more decimal signs than one number can have"
	}
	exponent, rest := cutExponent(rest)
	value, err := strconv.ParseFloat(text+exponent, 64)
	if err != nil || value == 0 && strings.ContainsAny(text, "123456789") {
		return 0, s, "is too large or too small a number"
	}
	return value, rest, ""
}

// cutExponent reads "e3", "E-3" at the head of s; "" where there is none.
func cutExponent(s string) (exponent, rest string) {
	if s == "" || s[0] != 'e' && s[0] != 'E' {
		return "", s
	}
	sign, tail := "", s[1:]
	if tail != "" && (tail[0] == '-' || tail[0] == '+') {
		sign, tail = tail[:1], tail[1:]
	}
	digits, rest := cutDigits(tail)
	if digits == "" {
		return "", s
	}
	return "e" + sign + digits, rest
}

// cutGroups reads the whole part, whose thousands may be grouped by the
// notation's sign or by spaces, in threes after a first group of one to three.
func cutGroups(s string, n notation) (digits, rest, problem string) {
	digits, rest = cutDigits(s)
	if digits == "" || len(rest) == 0 || rest[0] != n.group && rest[0] != ' ' {
		return digits, rest, ""
	}
	sep, first := rest[0], digits
	for len(rest) > 0 && rest[0] == sep {
		group, tail := cutDigits(rest[1:])
		if sep == ' ' && group == "" { // a space before the unit
			break
		}
		if len(group) != 3 || len(first) > 3 || first[0] == '0' {
			return "", s, ambiguity(sep, n)
		}
		digits, rest = digits+group, tail
	}
	return digits, rest, ""
}

func ambiguity(sep byte, n notation) string {
	if sep == ' ' {
		return "has a space inside that does not part groups of three digits"
	}
	return "is ambiguous: " + strconv.QuoteRune(rune(sep)) + " parts groups of three digits here and the decimal sign is " +
		strconv.QuoteRune(rune(n.decimal))
}

// Round rounds x to that many significant digits (at least 1), half away from
// zero. It works on the shortest decimal text that stands for x, so that 2.675
// rounds to 2.68. NaN and infinities stay what they are.
func Round(x float64, digits int) float64 {
	if x == 0 || math.IsNaN(x) || math.IsInf(x, 0) {
		return x
	}
	var buf [32]byte
	text := strconv.AppendFloat(buf[:0], math.Abs(x), 'e', -1, 64) // d.ddde±xx
	e := len(text) - 1
	for text[e] != 'e' {
		e--
	}
	keep := max(digits, 1) + 1 // with the point
	if e <= keep {
		return x
	}
	if digits <= 1 {
		keep = 1
	}
	up := text[max(keep, 2)] >= '5'
	exponent := string(text[e:])
	text = text[:keep]
	if up {
		text = increment(text)
	}
	value, err := strconv.ParseFloat(string(text)+exponent, 64)
	if err != nil { // rounded beyond the largest float
		return x
	}
	return math.Copysign(value, x)
}

// increment adds one to the last digit of an unsigned decimal text.
func increment(text []byte) []byte {
	for i := len(text) - 1; i >= 0; i-- {
		switch text[i] {
		case '.':
		case '9':
			text[i] = '0'
		default:
			text[i]++
			return text
		}
	}
	return append([]byte{'1'}, text...)
}
