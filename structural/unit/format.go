package unit

import (
	"math"
	"strconv"
)

// Format writes an SI value in unit u with at most that many significant
// digits, no trailing zeros, and the symbol: "12.5 kN/m", "5 %". Twelve digits
// are enough for Parse to read every value back that Parse has given. NaN and
// infinities come out as "NaN" and "+Inf", which Parse refuses.
func Format(si float64, u Unit, significant int) string {
	text := FormatNumber(si, u, significant)
	if u.Symbol == "" {
		return text
	}
	return text + " " + u.Symbol
}

// FormatNumber is Format without the symbol, for columns whose head has it.
// Magnitudes below 1e-6 or from 1e15 on are written with an exponent.
func FormatNumber(si float64, u Unit, significant int) string {
	if !u.IsZero() {
		si /= u.Factor
	}
	x := Round(si, significant)
	if x == 0 {
		return "0" // never "-0"
	}
	if a := math.Abs(x); a < 1e-6 || a >= 1e15 {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}
