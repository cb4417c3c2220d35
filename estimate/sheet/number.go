package sheet

import (
	"math"
	"strconv"
	"strings"
	"time"

	"spanwright/structural/unit"
)

// storedDigits is the number of significant digits that spreadsheet programs
// keep; what follows in the file (0.30000000000000004) is the float's noise.
const storedDigits = 15

// numberText rounds a stored number to storedDigits and writes it shortest; ok
// is false for what is no finite decimal number.
func numberText(raw string, percent bool) (string, bool) {
	if !percent && isShort(raw) {
		return raw, true
	}
	if strings.ContainsAny(raw, "xXpP_iInN") { // hexadecimal, Inf, NaN
		return "", false
	}
	x, err := strconv.ParseFloat(raw, 64)
	if err != nil {
		return "", false
	}
	if percent {
		x = unit.Round(x, storedDigits) * 100
		return floatText(x) + "%", true
	}
	return floatText(x), true
}

func floatText(x float64) string {
	x = unit.Round(x, storedDigits)
	if a := math.Abs(x); x != 0 && (a < 1e-9 || a >= 1e21) {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x+0, 'f', -1, 64) // +0: never "-0"
}

// isShort tells whether raw is a decimal of at most 15 digits that is already
// in its shortest form, which spares most cells the conversion.
func isShort(raw string) bool {
	s := strings.TrimPrefix(raw, "-")
	if s == "" || len(s) > storedDigits || s[0] == '.' || s[0] == '0' && len(s) > 1 && s[1] != '.' || raw == "-0" {
		return false
	}
	point := false
	for i := 0; i < len(s); i++ {
		switch {
		case s[i] == '.' && !point:
			point = true
		case s[i] < '0' || s[i] > '9':
			return false
		}
	}
	last := s[len(s)-1]
	return !point || last != '0' && last != '.'
}

// Days of the two date systems (ISO/IEC 29500-1, 18.17.4.1): day 0 of the 1900
// system from March 1900 on is 30 December 1899, because its calendar has a
// 29 February 1900 that never was; before that day it is 31 December 1899.
var (
	epoch1900 = time.Date(1899, 12, 30, 0, 0, 0, 0, time.UTC)
	epoch1904 = time.Date(1904, 1, 1, 0, 0, 0, 0, time.UTC)
)

const (
	missingDay = 60      // 29 February 1900
	lastDay    = 2958465 // 31 December 9999 in the 1900 system
)

// dateText writes a serial day number as ISO 8601 date, date and time, or time;
// ok is false outside the calendar.
func dateText(raw string, from1904 bool) (string, bool) {
	x, err := strconv.ParseFloat(raw, 64)
	if err != nil || !(x >= 0 && x <= lastDay+1) {
		return "", false
	}
	days, fraction := math.Modf(x)
	seconds := int(math.Round(fraction * 86400))
	if seconds == 86400 {
		days, seconds = days+1, 0
	}
	if days == 0 {
		return epoch1904.Add(time.Duration(seconds) * time.Second).Format(time.TimeOnly), true
	}
	epoch := epoch1904
	if !from1904 {
		epoch = epoch1900
		if days < missingDay {
			epoch = epoch.AddDate(0, 0, 1)
		}
		if days == missingDay || days > lastDay {
			return "", false
		}
	}
	t := epoch.AddDate(0, 0, int(days)).Add(time.Duration(seconds) * time.Second)
	if t.Year() > 9999 {
		return "", false
	}
	if seconds == 0 {
		return t.Format(time.DateOnly), true
	}
	return t.Format("2006-01-02T15:04:05"), true
}

// isoDate reads a date stored as ISO 8601 text (cell type "d", 18.18.11).
func isoDate(raw string) (string, bool) {
	raw = strings.TrimSuffix(raw, "Z")
	for _, layout := range []string{time.DateOnly, "2006-01-02T15:04:05", "2006-01-02T15:04"} {
		t, err := time.Parse(layout, raw) // takes a fraction of seconds too
		switch {
		case err != nil:
		case t.Hour() == 0 && t.Minute() == 0 && t.Second() == 0:
			return t.Format(time.DateOnly), true
		default:
			return t.Format("2006-01-02T15:04:05"), true
		}
	}
	return "", false
}

// serialDay is the day number of t's date in the 1900 system.
func serialDay(t time.Time) int {
	day := time.Date(t.Year(), t.Month(), t.Day(), 0, 0, 0, 0, time.UTC)
	n := int((day.Unix() - epoch1900.Unix()) / 86400) // a Duration ends after 292 years
	if n <= missingDay {
		n--
	}
	return n
}
