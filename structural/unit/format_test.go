package unit

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Expected values are roundings done by hand.
func TestRound(t *testing.T) {
	cases := []struct {
		x      float64
		digits int
		want   float64
	}{
		{2.675, 3, 2.68}, {-2.675, 3, -2.68}, {1.005, 3, 1.01}, {123456, 3, 123000}, {999.96, 4, 1000}, {9.5, 1, 10}, {9.4, 1, 9},
		{0.00012345, 2, 0.00012}, {0.1 + 0.2, 15, 0.3}, {5, 1, 5}, {15, 0, 20}, {15, -3, 20}, {1234567890.4999, 10, 1234567890},
		{0, 3, 0}, {1e300, 1, 1e300}, {math.MaxFloat64, 1, math.MaxFloat64}, {4e-320, 1, 4e-320}, {math.Inf(1), 3, math.Inf(1)}, {1.0 / 3, 17, 1.0 / 3},
	}
	for _, c := range cases {
		if got := Round(c.x, c.digits); got != c.want {
			t.Errorf("Round(%v, %d) = %v, want %v", c.x, c.digits, got, c.want)
		}
	}
	if got := Round(math.NaN(), 3); !math.IsNaN(got) {
		t.Errorf("Round(NaN) = %v", got)
	}
}

func TestRoundAgainstStrconv(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x, digits := rapid.Float64Range(-1e12, 1e12).Draw(t, "x"), rapid.IntRange(1, 14).Draw(t, "digits")
		got := Round(x, digits)
		text := strconv.FormatFloat(got, 'e', -1, 64)
		mantissa, _, _ := strings.Cut(strings.TrimLeft(text, "-"), "e")
		if n := len(strings.Replace(mantissa, ".", "", 1)); n > digits {
			t.Fatalf("Round(%v, %d) = %s has %d digits", x, digits, text, n)
		}
		// strconv rounds the binary value, half to even: at most one unit of the last place apart.
		near, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'e', digits-1, 64), 64)
		place := math.Pow(10, math.Floor(math.Log10(math.Max(math.Abs(x), 1e-300)))-float64(digits-1))
		if !(math.Abs(got-near) <= place*1.01) || !(math.Abs(got-x) <= place*0.51) {
			t.Fatalf("Round(%v, %d) = %v, strconv has %v", x, digits, got, near)
		}
		if again := Round(got, digits); again != got {
			t.Fatalf("rounding %v again gives %v", got, again)
		}
	})
}

func TestFormat(t *testing.T) {
	cases := []struct {
		si     float64
		symbol string
		digits int
		want   string
	}{
		{12500, "kN/m", 3, "12.5 kN/m"}, {6, "ft", 10, "19.68503937 ft"}, {0.05, "%", 3, "5 %"}, {344737864.7, "ksi", 3, "50 ksi"},
		{1814.36948, "short ton", 6, "2 short ton"}, {-0.0001, "mm", 3, "-0.1 mm"}, {0, "m", 3, "0 m"}, {math.Copysign(0, -1), "m", 3, "0 m"},
		{123456, "m", 3, "123000 m"}, {1e-9, "m", 3, "1e-09 m"}, {1e20, "m", 3, "1e+20 m"}, {math.NaN(), "m", 3, "NaN m"}, {math.Inf(1), "m", 3, "+Inf m"},
	}
	for _, c := range cases {
		if got := Format(c.si, Must(c.symbol), c.digits); got != c.want {
			t.Errorf("Format(%v, %s, %d) = %q, want %q", c.si, c.symbol, c.digits, got, c.want)
		}
	}
	if got := Format(2.5, Unit{"", Number, 1}, 3); got != "2.5" {
		t.Errorf("a plain number is written %q", got)
	}
}

func TestParseReadsWhatFormatWrites(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		row := table[rapid.IntRange(0, len(table)-1).Draw(t, "unit")]
		x := Round(rapid.Float64Range(-1e9, 1e9).Draw(t, "x"), Digits)
		if math.Abs(x) < 1e-20 {
			return
		}
		text := Format(x, row.Unit, 12)
		if got, err := Parse(text, row.Dimension, none); err != nil || got != x {
			t.Fatalf("%v is written %q and read as %v, %v", x, text, got, err)
		}
	})
}

func TestFormatFeetInches(t *testing.T) {
	cases := []struct {
		m    float64
		den  int
		want string
	}{
		{3.8227, 16, `12'-6 1/2"`}, {1.016, 16, `3'-4"`}, {-3.8227, 2, `-12'-6 1/2"`}, {0.3047, 16, `1'-0"`}, {0, 16, `0'-0"`},
		{-0.0001, 16, `0'-0"`}, {0.1317625, 16, `0'-5 3/16"`}, {0.1317625, 4, `0'-5 1/4"`}, {0.1317625, 3, `0'-5 3/16"`}, {math.NaN(), 16, "NaN ft"},
	}
	for _, c := range cases {
		if got := FormatFeetInches(c.m, c.den); got != c.want {
			t.Errorf("FormatFeetInches(%v, %d) = %q, want %q", c.m, c.den, got, c.want)
		}
	}
}

func TestFeetInchesRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		parts := rapid.IntRange(-100000, 100000).Draw(t, "1/64 in")
		m := Round(Round(float64(parts)/64*0.0254, 15), Digits)
		text := FormatFeetInches(m, 64)
		if got, err := Parse(text, Length, none); err != nil || got != m {
			t.Fatalf("%v is written %q and read as %v, %v", m, text, got, err)
		}
	})
}
