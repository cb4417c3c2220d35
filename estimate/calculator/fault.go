package calculator

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Fault is one thing wrong with a request.
type Fault struct {
	Pointer string `json:"pointer"` // JSON pointer (RFC 6901) into the request
	Found   string `json:"found"`
	Problem string `json:"problem"`
	Remedy  string `json:"remedy"` // what would be accepted
}

// Faults are all the faults of a request, in the order of its fields.
type Faults []Fault

// Error returns one line for each fault.
func (f Faults) Error() string {
	lines := make([]string, len(f))
	for i, x := range f {
		lines[i] = fmt.Sprintf("%s: %s: found %s; accepted: %s", x.Pointer, x.Problem, x.Found, x.Remedy)
	}
	return strings.Join(lines, "\n")
}

// err returns the faults as an error, nil where there is none.
func (f Faults) err() error {
	if len(f) == 0 {
		return nil
	}
	return f
}

func (f *Faults) add(pointer, found, problem, remedy string) {
	*f = append(*f, Fault{pointer, found, problem, remedy})
}

// within refuses a number outside lo to hi; NaN is outside.
func (f *Faults) within(pointer string, v, lo, hi float64, unit string) bool {
	if lo <= v && v <= hi {
		return true
	}
	f.add(pointer, number(v)+space(unit), "out of range", number(lo)+" to "+number(hi)+space(unit))
	return false
}

// above refuses a number that is not above 0, or over hi.
func (f *Faults) above(pointer string, v, hi float64, unit string) bool {
	if v > 0 && v <= hi {
		return true
	}
	f.add(pointer, number(v)+space(unit), "out of range", "above 0, up to "+number(hi)+space(unit))
	return false
}

// signed refuses a number of a size over most.
func (f *Faults) signed(pointer string, v, most float64, unit string) bool {
	return f.within(pointer, v, -most, most, unit)
}

// few refuses a list that is longer than most.
func (f *Faults) few(pointer string, n, most int, what string) bool {
	if n <= most {
		return true
	}
	f.add(pointer, fmt.Sprintf("%d %s", n, what), "too many", fmt.Sprintf("at most %d %s", most, what))
	return false
}

// oneOf refuses a word that is not in the list.
func (f *Faults) oneOf(pointer, word string, words ...string) bool {
	if slices.Contains(words, word) {
		return true
	}
	f.add(pointer, quoted(word), "unknown word", strings.Join(words, ", "))
	return false
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

func space(unit string) string {
	if unit == "" {
		return ""
	}
	return " " + unit
}

// quoted is a text as a fault shows it: shortened, and named when empty.
func quoted(text string) string {
	const most = 80
	if text == "" {
		return "nothing"
	}
	if r := []rune(text); len(r) > most {
		text = string(r[:most]) + "…"
	}
	return strconv.Quote(text)
}

// item is the pointer of a list's entry.
func item(list string, i int) string { return list + "/" + strconv.Itoa(i) }

func finite(v float64) bool { return math.Abs(v) <= math.MaxFloat64 }
