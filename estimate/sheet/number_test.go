package sheet

import (
	"strconv"
	"testing"
	"time"

	"pgregory.net/rapid"
)

func TestNumberText(t *testing.T) {
	cases := []struct {
		raw     string
		percent bool
		want    string
	}{
		{"0.30000000000000004", false, "0.3"}, {"0.1", false, "0.1"}, {"6", false, "6"}, {"-6.50", false, "-6.5"}, {"007", false, "7"}, {".5", false, "0.5"},
		{"-0", false, "0"}, {"1e3", false, "1000"}, {"1E-3", false, "0.001"}, {"2.9999999999999996", false, "3"}, {"123456789012345678", false, "123456789012346000"},
		{"1e-12", false, "1e-12"}, {"1e21", false, "1e+21"}, {"1.7976931348623141e308", false, "1.79769313486231e+308"}, {"5.", false, "5"},
		{"0.07", true, "7%"}, {"0.125", true, "12.5%"}, {"1", true, "100%"}, {"-0.29", true, "-29%"}, {"0", true, "0%"},
	}
	for _, c := range cases {
		if got, ok := numberText(c.raw, c.percent); !ok || got != c.want {
			t.Errorf("numberText(%q, %v) = %q, %v; want %q", c.raw, c.percent, got, ok, c.want)
		}
	}
	for _, raw := range []string{"", "x", "NaN", "Inf", "-Infinity", "0x1p3", "1_000", "1,5", "1e400", "--1", "1.2.3"} {
		if got, ok := numberText(raw, false); ok {
			t.Errorf("numberText(%q) = %q", raw, got)
		}
	}
}

func TestNumberTextKeepsShortDecimals(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := float64(rapid.Int64Range(-1e14, 1e14).Draw(t, "n")) / float64(rapid.SampledFrom([]int{1, 10, 1000, 1e6}).Draw(t, "d"))
		shortest := strconv.FormatFloat(x, 'f', -1, 64)
		if got, ok := numberText(shortest, false); !ok || got != shortest {
			t.Fatalf("%s became %s", shortest, got)
		}
		long := strconv.FormatFloat(x, 'e', 16, 64) // 17 digits, as spreadsheet programs write
		if got, ok := numberText(long, false); !ok || got != shortest {
			t.Fatalf("%s became %s, want %s", long, got, shortest)
		}
	})
}

// Serial numbers from memory of spreadsheet programs: 1 is 1 January 1900, 59
// and 61 stand around the 29 February that never was, 36526 is 1 January 2000,
// 2958465 is 31 December 9999.
func TestDateText(t *testing.T) {
	cases := []struct {
		raw  string
		want string
	}{
		{"1", "1900-01-01"}, {"59", "1900-02-28"}, {"61", "1900-03-01"}, {"36526", "2000-01-01"}, {"2958465", "9999-12-31"},
		{"36526.25", "2000-01-01T06:00:00"}, {"36525.9999999", "2000-01-01"}, {"0.75", "18:00:00"}, {"0", "00:00:00"},
	}
	for _, c := range cases {
		if got, ok := dateText(c.raw, false); !ok || got != c.want {
			t.Errorf("dateText(%s) = %q, %v; want %q", c.raw, got, ok, c.want)
		}
	}
	for _, raw := range []string{"60", "-1", "2958466", "1e300", "NaN", "x"} {
		if got, ok := dateText(raw, false); ok {
			t.Errorf("dateText(%s) = %q", raw, got)
		}
	}
}

func TestSerialDayAndDateTextAgree(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		day := time.Date(1900, 1, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, rapid.IntRange(0, 2_958_000).Draw(t, "day"))
		got, ok := dateText(strconv.Itoa(serialDay(day)), false)
		if want := day.Format(time.DateOnly); !ok || got != want {
			t.Fatalf("%s is written %d and read as %q", want, serialDay(day), got)
		}
	})
}

func TestISODate(t *testing.T) {
	for raw, want := range map[string]string{"2026-05-01": "2026-05-01", "2026-05-01T00:00:00": "2026-05-01", "2026-05-01T10:30": "2026-05-01T10:30:00", "2026-05-01T10:30:00.25Z": "2026-05-01T10:30:00"} {
		if got, ok := isoDate(raw); !ok || got != want {
			t.Errorf("isoDate(%q) = %q, %v", raw, got, ok)
		}
	}
}

func TestShowingOf(t *testing.T) {
	cases := map[string]showing{
		"General": asNumber, "0.00": asNumber, "#,##0.00": asNumber, `0.0" d"`: asNumber, `0\d`: asNumber, "[Red]0.0": asNumber, "0_d": asNumber, "0*d": asNumber, "0.0 m": asNumber, "": asNumber,
		"yyyy-mm-dd": asDate, "d/m/yy": asDate, "mmm": asDate, "hh:mm:ss.0": asDate, "[h]:mm": asDate, "[$-409]d. mmm": asDate, "0;dd": asNumber, "mm:ss.0": asDate, "[mm]": asDate,
		"0%": asPercent, "0.0 %": asPercent, `0"%"`: asNumber, `0"`: asNumber, "[Red": asDate,
	}
	for code, want := range cases {
		if got := showingOf(code); got != want {
			t.Errorf("showingOf(%q) = %v, want %v", code, got, want)
		}
	}
	for id, want := range map[int]showing{0: asNumber, 2: asNumber, 9: asPercent, 10: asPercent, 14: asDate, 22: asDate, 23: asNumber, 45: asDate, 49: asNumber} {
		if got := builtin(id); got != want {
			t.Errorf("builtin(%d) = %v, want %v", id, got, want)
		}
	}
}
