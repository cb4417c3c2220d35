package sheet

import (
	"bytes"
	"math"

	"spanwright/structural/unit"
)

// Records looked at: by the separator, and by the decimal sign.
const (
	separatorSample = 50
	decimalSample   = 5000
)

// cutSeparatorLine reads the line "sep=;" that spreadsheet programs understand:
// separator, remainder, and whether there is such a line.
func cutSeparatorLine(text []byte) (byte, []byte, bool) {
	if len(text) < 5 || !bytes.EqualFold(text[:4], []byte("sep=")) || bytes.IndexByte([]byte(",;\t"), text[4]) < 0 {
		return 0, text, false
	}
	rest := text[5:]
	if len(rest) > 0 && rest[0] != '\r' && rest[0] != '\n' {
		return 0, text, false
	}
	return text[4], cutLineEnd(rest), true
}

// detectSeparator takes the sign that parts every record, the more fields the
// better. The semicolon wins a tie, since beside it commas are decimal signs.
func detectSeparator(text []byte) byte {
	best, bestLeast, bestTotal := byte(','), 0, 0
	for _, sep := range []byte{';', '\t', ','} {
		least, total := countSeparators(text, sep)
		if least > bestLeast || least == bestLeast && total > bestTotal {
			best, bestLeast, bestTotal = sep, least, total
		}
	}
	return best
}

// countSeparators answers the fewest in any record and the sum over the sample;
// nothing where the text cannot be parted by sep.
func countSeparators(text []byte, sep byte) (least, total int) {
	least = math.MaxInt
	r := &records{rest: text, separator: sep}
	for r.row < separatorSample && r.next() {
		count, content := 0, false
		for {
			field, last, err := r.field(1)
			if err != nil {
				return 0, 0
			}
			content = content || len(bytes.TrimSpace(field)) > 0
			if last {
				break
			}
			count++
		}
		if content {
			least, total = min(least, count), total+count
		}
	}
	if least == math.MaxInt {
		least = 0
	}
	return least, total
}

// evidence counts the numbers that show a decimal sign beyond doubt, and those
// with one sign before exactly three digits, which could group thousands.
type evidence struct{ comma, point, doubtfulComma, doubtfulPoint int }

// detectDecimalComma: commas between fields exclude decimal commas (quoted ones
// are refused later, cell by cell); semicolons imply them unless numbers show
// points; tabs allow them where numbers show them. Where all numbers could be
// read both ways, thousandfold apart, the file is refused.
func detectDecimalComma(b *csvBook) (bool, error) {
	if b.separator == ',' {
		return false, nil
	}
	e := collect(b)
	switch {
	case e.comma > 0 && (b.separator == ';' || e.point == 0):
		return true, nil
	case e.point > 0:
		return false, nil
	case b.separator == ';' && e.doubtfulPoint > 0:
		return false, doubtful("1.234")
	case b.separator == '\t' && e.doubtfulComma > 0:
		return false, doubtful("1,234")
	}
	return b.separator == ';', nil
}

func doubtful(number string) error {
	return malformed("has numbers such as "+number+" that may be thousands or decimals, and nothing in it tells which",
		"leave out signs that group thousands, write decimals to another number of places (1,50 or 1.2340), or post .xlsx")
}

func collect(b *csvBook) evidence {
	var e evidence
	r := b.records()
	for r.row < decimalSample && r.next() {
		for {
			field, last, err := r.field(1)
			if err != nil {
				return e // told by rows, with its address
			}
			e.weigh(bytes.TrimSpace(field))
			if last {
				break
			}
		}
	}
	return e
}

// weigh looks at a number, alone or before a known unit.
func (e *evidence) weigh(field []byte) {
	field = bytes.TrimLeft(field, "+-")
	n := 0
	for n < len(field) && (field[n] >= '0' && field[n] <= '9' || field[n] == '.' || field[n] == ',') {
		n++
	}
	number, rest := field[:n], bytes.TrimSpace(field[n:])
	if n == 0 || len(rest) > 0 && !isUnit(rest) {
		return
	}
	commas, points := bytes.Count(number, []byte(",")), bytes.Count(number, []byte("."))
	first, last := bytes.IndexAny(number, ",."), bytes.LastIndexAny(number, ",.")
	decimals := len(number) - 1 - last
	switch {
	case commas > 0 && points > 0:
		e.show(number[last] == ',')
	case commas+points == 1 && (decimals != 3 || first == 0 || first > 3 || number[0] == '0'):
		e.show(commas == 1)
	case commas == 1:
		e.doubtfulComma++
	case points == 1:
		e.doubtfulPoint++
	case commas+points > 1 && grouped(number):
		e.show(points > 0) // what groups is not the decimal sign
	}
}

func (e *evidence) show(comma bool) {
	if comma {
		e.comma++
	} else {
		e.point++
	}
}

// grouped tells whether signs part the number in groups of three digits.
func grouped(number []byte) bool {
	groups := bytes.FieldsFunc(number, func(r rune) bool { return r == ',' || r == '.' })
	for i, g := range groups {
		if i > 0 && len(g) != 3 || len(g) > 3 {
			return false
		}
	}
	return true
}

func isUnit(text []byte) bool {
	if len(text) > 20 {
		return false
	}
	_, err := unit.Lookup(string(text))
	return err == nil
}
