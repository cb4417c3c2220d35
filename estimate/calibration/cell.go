package calibration

import (
	"fmt"
	"slices"
	"strings"
	"time"
	"unicode"

	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// Bounds beyond which a figure is a slip of the pen.
const (
	greatestMass   = 1e8 // kg
	greatestHours  = 1e7
	longestText    = 200
	longestRemark  = 2000
	greatestDigits = 15 // before the point of an amount
	mostPlaces     = 6
	earliestYear   = 1950
	latestYear     = 2199
)

// take reads a cell into its column's place of o; blank tells that there was
// nothing to read.
func (d definition) take(o *Outturn, c sheet.Cell, u unit.Unit, opt options) (blank bool, wrong *complaint) {
	if wrong := unreadable(c, d); wrong != nil {
		return false, wrong
	}
	text := strings.Join(strings.Fields(c.Text), " ")
	if text == "" {
		return true, nil
	}
	switch d.kind {
	case massKind, hoursKind:
		*d.float(o), wrong = readNumber(text, d, u, opt.comma && c.Kind == sheet.Text)
	case moneyKind:
		var amount money.Decimal
		if amount, wrong = readAmount(text, opt.comma && c.Kind == sheet.Text); wrong == nil {
			d.money(o, amount)
		}
	default:
		*d.text(o), wrong = readWord(text, d, opt)
	}
	return false, wrong
}

// unreadable is the complaint about a cell that holds no single value of the kind
// wanted.
func unreadable(c sheet.Cell, d definition) *complaint {
	bad := func(problem string) *complaint { return &complaint{shorten(c.Text), problem, "enter " + d.Accepts} }
	switch c.Kind {
	case sheet.Empty, sheet.Text, sheet.Number:
		return nil
	case sheet.Date:
		if d.kind == dateKind {
			return nil
		}
		return bad("is a date")
	case sheet.Boolean:
		return bad("is a truth value")
	case sheet.ErrorValue:
		return bad("is an error of the spreadsheet")
	case sheet.FormulaWithoutValue:
		return bad("is a formula that was never calculated")
	case sheet.Merged:
		return bad("is covered by the merged cells " + c.Range)
	}
	return bad("is no single value")
}

func readNumber(text string, d definition, u unit.Unit, comma bool) (float64, *complaint) {
	dimension, most := unit.Number, float64(greatestHours)
	if d.kind == massKind {
		dimension, most = unit.Mass, greatestMass
	}
	parse := unit.Parse
	if comma {
		parse = unit.ParseDecimalComma
	}
	v, err := parse(text, dimension, u)
	switch {
	case err != nil:
		return 0, fromUnit(text, err, "enter "+d.Accepts)
	case v == 0 && d.kind == massKind:
		return 0, &complaint{shorten(text), "is a job without tonnage", "enter " + d.Accepts + "; leave the job out where it has none"}
	case v < 0 && d.kind == massKind:
		return 0, &complaint{shorten(text), "is a negative tonnage", "enter " + d.Accepts}
	case !(v > 0 && v <= most):
		return 0, &complaint{shorten(text), "is out of range", fmt.Sprintf("enter %s, up to %.0f", d.Accepts, most)}
	}
	return v, nil
}

// readAmount reads a decimal with an optional grouping of thousands, without
// passing through a float.
func readAmount(text string, comma bool) (money.Decimal, *complaint) {
	point, group := ".", ","
	if comma {
		point, group = ",", "."
	}
	bad := func(problem string) (money.Decimal, *complaint) {
		return money.Zero, &complaint{shorten(text), problem, "enter an amount of 0 or more, such as 12500" + point + "50"}
	}
	plain := strings.ReplaceAll(text, "\u2212", "-")
	whole, fraction, hasPoint := strings.Cut(plain, point)
	digits, ok := joinThousands(whole, group)
	if !ok || hasPoint && fraction == "" {
		return bad("is no amount")
	}
	if len(fraction) > mostPlaces || len(strings.TrimLeft(strings.TrimLeft(digits, "-+"), "0")) > greatestDigits {
		return bad(fmt.Sprintf("has more than %d digits before or %d after the point", greatestDigits, mostPlaces))
	}
	if fraction != "" {
		digits += "." + fraction
	}
	amount, err := money.Parse(digits)
	if err != nil {
		return bad("is no amount")
	}
	if amount.Sign() < 0 {
		return bad("is a negative cost")
	}
	return amount, nil
}

// joinThousands takes the marks out of 1,234,567 or 1 234 567; ok is false where
// they do not part threes.
func joinThousands(whole, mark string) (string, bool) {
	for _, m := range []string{mark, " "} {
		parts := strings.Split(whole, m)
		if len(parts) == 1 {
			continue
		}
		if n := len(strings.TrimLeft(parts[0], "-+")); n < 1 || n > 3 {
			return "", false
		}
		for _, p := range parts[1:] {
			if len(p) != 3 {
				return "", false
			}
		}
		return strings.Join(parts, ""), true
	}
	return whole, true
}

func readWord(text string, d definition, opt options) (string, *complaint) {
	switch d.kind {
	case dateKind:
		return readDate(text)
	case currencyKind:
		if _, err := money.FindCurrency(text); err != nil {
			_, accepted, _ := strings.Cut(err.Error(), "accepted: ")
			return "", &complaint{shorten(text), "is no currency", "enter " + accepted}
		}
	case classKind:
		if !slices.Contains([]string{"1", "2", "3", "4", "5"}, text) {
			return "", &complaint{shorten(text), "is no estimate class", "enter " + d.Accepts}
		}
	case structureKind:
		i := slices.IndexFunc(opt.kinds, func(k string) bool { return fold(k) == fold(text) })
		if i < 0 {
			return "", &complaint{shorten(text), "is no kind of structure of the rate book", didYouMean(nearMisses(text, opt.kinds), "accepted are "+strings.Join(opt.kinds, ", "))}
		}
		return opt.kinds[i], nil
	default:
		most := longestText
		if d.Field == "remarks" {
			most = longestRemark
		}
		if n := len([]rune(text)); n > most {
			return "", &complaint{shorten(text), fmt.Sprintf("has %d characters", n), fmt.Sprintf("at most %d", most)}
		}
		if strings.ContainsFunc(text, func(r rune) bool { return !unicode.IsPrint(r) }) {
			return "", &complaint{"", "has a character that does not print", "type it anew"}
		}
	}
	return text, nil
}

func readDate(text string) (string, *complaint) {
	day, _, _ := strings.Cut(text, "T") // a cell with a time of day
	t, err := time.Parse(time.DateOnly, day)
	if err != nil || t.Year() < earliestYear || t.Year() > latestYear {
		return "", &complaint{shorten(text), fmt.Sprintf("is no date from %d to %d", earliestYear, latestYear), "enter " + words[dateKind]}
	}
	return day, nil
}
