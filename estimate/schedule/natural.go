package schedule

import "strings"

// naturalCompare orders marks as people read them: runs of digits by their
// number, so that B2 comes before B10. Texts that differ in leading zeros alone
// are ordered as plain texts; only equal texts compare as equal.
func naturalCompare(a, b string) int {
	x, y := a, b
	for x != "" && y != "" {
		dx, dy := digitRun(x), digitRun(y)
		if dx > 0 && dy > 0 {
			if c := compareDigits(x[:dx], y[:dy]); c != 0 {
				return c
			}
			x, y = x[dx:], y[dy:]
			continue
		}
		if x[0] != y[0] {
			return int(x[0]) - int(y[0])
		}
		x, y = x[1:], y[1:]
	}
	if len(x) != len(y) {
		return len(x) - len(y)
	}
	return strings.Compare(a, b)
}

func digitRun(s string) int {
	n := 0
	for n < len(s) && s[n] >= '0' && s[n] <= '9' {
		n++
	}
	return n
}

func compareDigits(a, b string) int {
	a, b = strings.TrimLeft(a, "0"), strings.TrimLeft(b, "0")
	if len(a) != len(b) {
		return len(a) - len(b)
	}
	return strings.Compare(a, b)
}
