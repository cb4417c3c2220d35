package schedule

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"unicode"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"

	"golang.org/x/text/unicode/norm"
)

// state tells what became of a cell.
type state uint8

const (
	blank state = iota
	given
	bad // its fault is reported; nothing that depends on it is judged
)

// text is a cell read as text.
type text struct {
	state state
	value string
}

// number is a cell read as a quantity, in SI.
type number struct {
	state state
	value float64
}

// wrongKind is the complaint about a cell that holds neither text nor number.
func wrongKind(c sheet.Cell, wanted string) *complaint {
	p := &complaint{found: shorten(c.Text)}
	switch c.Kind {
	case sheet.Date:
		p.problem = "is a date; spreadsheet programs turn entries such as 6/12 into dates"
		p.remedy = "format the cell as a number or as text and enter " + wanted
	case sheet.Boolean:
		p.problem = "is a truth value"
		p.remedy = "enter " + wanted
	case sheet.ErrorValue:
		p.problem = "is an error of the spreadsheet"
		p.remedy = "mend the formula, or enter " + wanted
	case sheet.FormulaWithoutValue:
		p.problem = "is a formula that was never calculated"
		p.remedy = "calculate and save the file in a spreadsheet program, or enter " + wanted
	case sheet.Merged:
		p.problem = "the cell is covered by the merged cells " + c.Range
		p.remedy = "unmerge them and write the value into every cell"
	default:
		p.problem = "is no single value"
		p.remedy = "enter " + wanted
	}
	return p
}

// readText reads a cell as one line of text with single spaces. Numbers are taken
// as they are written.
func readText(c sheet.Cell, longest int, wanted string) (text, *complaint) {
	switch c.Kind {
	case sheet.Empty:
		return text{}, nil
	case sheet.Text, sheet.Number:
	default:
		return text{state: bad}, wrongKind(c, wanted)
	}
	line := norm.NFC.String(strings.Join(strings.Fields(c.Text), " ")) // one form of accented letters
	if line == "" {
		return text{}, nil
	}
	if n := len([]rune(line)); n > longest {
		return text{state: bad}, &complaint{shorten(line), fmt.Sprintf("has %d characters", n), fmt.Sprintf("at most %d", longest)}
	}
	if i := strings.IndexFunc(line, func(r rune) bool { return !unicode.IsPrint(r) }); i >= 0 {
		return text{state: bad}, &complaint{shorten(strings.Map(visible, line)), "has a character that does not print", "type it anew"}
	}
	return text{given, line}, nil
}

func visible(r rune) rune {
	if unicode.IsPrint(r) {
		return r
	}
	return unicode.ReplacementChar
}

// parse reads a quantity; a text cell of a file with decimal commas has them too.
func parse(c sheet.Cell, comma bool, d unit.Dimension, implied unit.Unit) (float64, error) {
	if comma && c.Kind == sheet.Text {
		return unit.ParseDecimalComma(c.Text, d, implied)
	}
	return unit.Parse(c.Text, d, implied)
}

// readQuantity reads a cell as a quantity of dimension d. wanted is an example.
func readQuantity(c sheet.Cell, comma bool, d unit.Dimension, implied unit.Unit, wanted string) (number, *complaint) {
	switch c.Kind {
	case sheet.Empty:
		return number{}, nil
	case sheet.Text, sheet.Number:
	default:
		return number{state: bad}, wrongKind(c, wanted)
	}
	if strings.TrimSpace(c.Text) == "" {
		return number{}, nil
	}
	v, err := parse(c, comma, d, implied)
	if err != nil {
		return number{state: bad}, fromUnit(c.Text, err, wanted)
	}
	return number{given, v}, nil
}

// fromUnit turns the refusal of a quantity into a complaint.
func fromUnit(found string, err error, wanted string) *complaint {
	var e *unit.Error
	if !errors.As(err, &e) {
		return &complaint{shorten(found), err.Error(), "enter " + wanted}
	}
	remedy := e.Accepted
	if remedy == "" {
		remedy = "enter " + wanted
	}
	return &complaint{e.Text, e.Problem, remedy}
}

// span is the range of values that a quantity may have, in SI.
type span struct {
	low, high  float64
	includeLow bool
	words      string // what is accepted
}

// holds is written so that NaN is outside.
func (s span) holds(v float64) bool {
	return (v > s.low || s.includeLow && v == s.low) && v <= s.high
}

// Bounds beyond which a figure is a slip of the pen, whatever the structure.
var (
	lengths       = span{0, 1000, false, "a length above 0, up to 1000 m"}
	noLengths     = span{0, 1000, true, "a length from 0 to 1000 m"}
	positions     = span{0, 1000, true, "a position from 0 to 1000 m"}
	loads         = span{-1e9, 1e9, true, "a load between -1e9 and 1e9 N, N/m or N/m²"}
	factors       = span{0.5, 10, true, "a factor from 0.5 to 10"}
	limits        = span{10, 10000, true, "n from 10 to 10000, such as L/250, or none"}
	lineMasses    = span{0, 1e5, false, "a mass above 0, up to 100,000 kg/m"}
	areaMasses    = span{0, 1e4, false, "a mass above 0, up to 10,000 kg/m²"}
	momentFactors = span{1, 3, true, "a factor from 1 to 3"}
	netFactors    = span{0, 1, false, "a factor above 0, up to 1"}
	depths        = span{0, 10, false, "a depth above 0, up to 10 m"}
	frequencies   = span{0, 1000, false, "a frequency above 0, up to 1000 Hz, or none"}
	wheelLoads    = span{0, 1e9, false, "a wheel load above 0, up to 1e9 N"}
	speeds        = span{0, 250, false, "a speed above 0, up to 250"}
	snows         = span{0, 50_000, false, "a load above 0, up to 50 kN/m²"}
	spacings      = span{0, 1000, false, "a distance above 0, up to 1000 m"}
	dynamic       = span{1, 10, true, "a factor from 1 to 10"}
	hauls         = span{0, 5e7, true, "a distance from 0 to 50,000 km"} // m
	concretes     = span{0, 1e5, true, "a volume from 0 to 100,000 m³"}
	areas         = span{0, 1e6, false, "an area above 0, up to 1,000,000 m²"}
	yieldFactor   = span{1.5, 10, true, "a factor from 1.5 to 10: 1.5 to 1.67 for known loads, 3 to 4 for a first pass"}
)

// greatestQuantity is the number of pieces that one row may stand for.
const greatestQuantity = 1_000_000

// readCount reads a whole number from 1 to most.
func readCount(c sheet.Cell, comma bool, most int, wanted string) (int, state, *complaint) {
	n, wrong := readQuantity(c, comma, unit.Number, unit.Unit{}, wanted)
	if wrong != nil || n.state == blank {
		return 0, n.state, wrong
	}
	if !(n.value >= 1 && n.value <= float64(most)) || n.value != math.Trunc(n.value) {
		return 0, bad, &complaint{shorten(c.Text), "is not a whole number from 1 to " + fmt.Sprint(most), "enter " + wanted}
	}
	return int(n.value), given, nil
}

// readLimit reads a deflection limit "250", "L/250" or "1/250" as n; "none" is 0.
func readLimit(c sheet.Cell, comma bool) (number, *complaint) {
	const wanted = "a limit such as L/250"
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		return readQuantity(c, comma, unit.Number, unit.Unit{}, wanted)
	}
	word := strings.ToLower(strings.Join(strings.Fields(c.Text), ""))
	if word == "none" {
		return number{state: given}, nil
	}
	plain := c
	for _, prefix := range []string{"l/", "1/", "span/"} {
		if rest, ok := strings.CutPrefix(word, prefix); ok {
			plain.Text = rest
		}
	}
	n, wrong := readQuantity(plain, comma, unit.Number, unit.Unit{}, wanted)
	if wrong != nil {
		wrong.found = shorten(c.Text)
		return n, wrong
	}
	if n.state == given && !limits.holds(n.value) {
		return number{state: bad}, &complaint{shorten(c.Text), "is no sensible deflection limit", limits.words}
	}
	return n, nil
}
