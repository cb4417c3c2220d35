package unit

import (
	"errors"
	"math"
	"strings"
	"testing"
)

var none Unit

func TestParse(t *testing.T) {
	m, in, ft, kNm := Must("m"), Must("in"), Must("ft"), Must("kN/m")
	cases := []struct {
		text    string
		d       Dimension
		implied Unit
		want    float64 // SI, worked by hand from the exact definitions
	}{
		{"6", Length, m, 6}, {"6 m", Length, none, 6}, {"6000 mm", Length, m, 6}, {"6000mm", Length, m, 6},
		{"19.68503937 ft", Length, none, 6}, {"19.68503937", Length, ft, 6},
		{`12'-6 1/2"`, Length, m, 3.8227}, // 150.5 in × 0.0254
		{`12'6 1/2"`, Length, m, 3.8227}, {`12' 6½"`, Length, m, 3.8227}, {`12′-6 1/2″`, Length, m, 3.8227},
		{`12'-6.5"`, Length, m, 3.8227}, {`12'-6-1/2"`, Length, m, 3.8227}, {"12 ft 6 1/2 in", Length, m, 3.8227},
		{"12ft-6.5in", Length, none, 3.8227}, {`-12'-6 1/2"`, Length, m, -3.8227}, {`12' - 6 1/2''`, Length, m, 3.8227},
		{`3' 4"`, Length, none, 1.016}, {"3'4", Length, none, 1.016}, {"3'", Length, none, 0.9144}, {`0'-0"`, Length, none, 0},
		{"6 1/2 in", Length, none, 0.1651}, {`6 1/2"`, Length, none, 0.1651}, {"6-1/2 in", Length, none, 0.1651},
		{"6 1/2", Length, in, 0.1651}, {"1/2 in", Length, none, 0.0127}, {"½ in", Length, none, 0.0127}, {"5 3/16 in", Length, none, 0.1317625},
		{"12 kN/m", LineLoad, none, 12000}, {"12kN/m", LineLoad, kNm, 12000}, {"12", LineLoad, kNm, 12000}, {"1 klf", LineLoad, kNm, 14593.90294},
		{"50 psf", AreaLoad, none, 2394.012949}, {"2.5 kPa", AreaLoad, none, 2500}, {"0.01 kN/m²", Stress, none, 10},
		{"355", Stress, Must("MPa"), 355e6}, {"50 ksi", Stress, none, 344737864.7}, {"36 kip-ft", Moment, none, 48809.44614},
		{"2 short tons", Mass, none, 1814.36948}, {"1 long ton", Mass, none, 1016.046909}, {"1 t", Mass, none, 1000},
		{"5 %", Percent, none, 0.05}, {"5%", Percent, none, 0.05}, {"5", Percent, Must("%"), 0.05},
		{"3", Number, none, 3}, {"3", Number, m, 3}, {"1e3", Number, none, 1000}, {"1.5E-3 kN", Force, none, 1.5},
		{"+4.5", Number, none, 4.5}, {"\u22124.5", Number, none, -4.5}, {"- 4.5", Number, none, -4.5}, {".5", Number, none, 0.5}, {"5.", Number, none, 5},
		{"1,234.5", Number, none, 1234.5}, {"12,345,678", Number, none, 12345678}, {"1 234.5", Number, none, 1234.5},
		{"1\u202f234\u2009kN", Force, none, 1234000}, {"\u00a07\u00a0kN ", Force, none, 7000}, {"-0", Number, none, 0}, {"0e400", Number, none, 0},
		{"1e3 kN/m", LineLoad, none, 1e6}, {"100 ft2", Area, none, 9.290304},
	}
	for _, c := range cases {
		got, err := Parse(c.text, c.d, c.implied)
		if err != nil || got != c.want || math.Signbit(got) != (c.want < 0) {
			t.Errorf("Parse(%q, %v, %v) = %v, %v; want %v", c.text, c.d, c.implied, got, err, c.want)
		}
	}
}

func TestParseRefusals(t *testing.T) {
	m, kN := Must("m"), Must("kN")
	cases := []struct {
		text    string
		d       Dimension
		implied Unit
		says    string
	}{
		{"", Length, m, "nothing is written"}, {"  \u00a0", Length, m, "nothing is written"},
		{"6", Length, none, "no unit"}, {"6", Percent, none, "no unit"}, {"5 ton", Mass, none, "three things"},
		{"1,5", Length, m, "ambiguous"}, {"1,2345", Number, none, "ambiguous"}, {"0,123", Number, none, "ambiguous"},
		{"1234,567", Number, none, "ambiguous"}, {"1,234,5", Number, none, "ambiguous"}, {"1.5.2", Number, none, "decimal signs"},
		{"1.234,5", Number, none, "decimal signs"}, {"12 34", Number, none, "space inside"}, {"1 234,567", Number, none, "decimal signs"},
		{"NaN", Number, none, "not a number"}, {"Inf", Number, none, "not a number"}, {"-inf", Number, none, "not a number"},
		{"0x1p3", Number, none, "unknown unit"}, {"1_000", Number, none, "unknown unit"}, {"1e", Number, none, "unknown unit"},
		{"1e308 kN", Force, none, "too large"}, {"1e309", Number, none, "too large"}, {"1e-400", Number, none, "too large or too small"},
		{"1e29 kN", Force, none, "too large"}, {"1e-31", Number, none, "too small"},
		{"--5", Number, none, "not a number"}, {"+-5", Number, none, "not a number"}, {"five", Number, none, "not a number"}, {".", Number, none, "not a number"}, {"-", Number, none, "not a number"},
		{"12 kN", LineLoad, none, "kN is a force, not a load per length"}, {"12", LineLoad, kN, "kN is a force"},
		{"50 kg/m", LineLoad, none, "mass is not turned"}, {"5 lb", Force, none, "mass is not turned"}, {"5 %", Number, none, "percentage"},
		{"12 furlongs", Length, m, "unknown unit"}, {"3 m extra", Length, m, "unknown unit"},
		{"6 1/2 m", Length, none, "fractions"}, {"6 1/2", Number, none, "fractions"}, {"6 3/2 in", Length, none, "space inside"}, {"1/0 in", Length, none, "unknown unit"},
		{`12'-13"`, Length, none, "12 inches or more"}, {`12'-6 m`, Length, none, "feet and inches"}, {`12.5'-6"`, Length, none, "unknown unit"},
		{`12'-6" x`, Length, none, "feet and inches"}, {"12 ft 6", Length, none, "feet and inches"}, {`12'-6"`, Mass, none, "in is a length"},
		{"12\xff", Number, none, "no quantity"}, {strings.Repeat("1", 300), Number, none, "no quantity"},
	}
	for _, c := range cases {
		got, err := Parse(c.text, c.d, c.implied)
		var e *Error
		if !errors.As(err, &e) || got != 0 {
			t.Errorf("Parse(%q, %v) = %v, %v; want an *Error", c.text, c.d, got, err)
			continue
		}
		if !strings.Contains(e.Error(), c.says) || e.Accepted == "" {
			t.Errorf("Parse(%q, %v): %v; want it to say %q and what is accepted", c.text, c.d, e, c.says)
		}
	}
}

func TestParseDecimalComma(t *testing.T) {
	m := Must("m")
	cases := []struct {
		text string
		want float64
	}{
		{"1,5", 1.5}, {"1.234,5", 1234.5}, {"1.234", 1234}, {"12 m", 12}, {"1,5e3 mm", 1.5}, {`3'-6,5"`, 1.0795}, {"1 234,5", 1234.5},
	}
	for _, c := range cases {
		if got, err := ParseDecimalComma(c.text, Length, m); err != nil || got != c.want {
			t.Errorf("ParseDecimalComma(%q) = %v, %v; want %v", c.text, got, err, c.want)
		}
	}
	for _, text := range []string{"1.5", "0.500", "1,234.5", "1,2,3", "1.23,4"} {
		got, err := ParseDecimalComma(text, Length, m)
		var e *Error
		if !errors.As(err, &e) || got != 0 {
			t.Errorf("ParseDecimalComma(%q) = %v, %v; want a refusal", text, got, err)
		} else if !strings.Contains(e.Accepted, "12,5 m") {
			t.Errorf("ParseDecimalComma(%q): %v; want a remedy with a comma", text, e)
		}
	}
}

func TestErrorShortensText(t *testing.T) {
	_, err := Parse(strings.Repeat("é", 90), Length, none)
	if want := strings.Repeat("é", 60) + "…"; err == nil || !strings.Contains(err.Error(), `"`+want+`"`) {
		t.Errorf("got %v", err)
	}
	bare := &Error{Text: "x", Problem: "is wrong"}
	if got := bare.Error(); got != `"x": is wrong` {
		t.Errorf("got %s", got)
	}
}

// FuzzParse: never a panic, never NaN or infinity without an error, and every
// value read is read again from its formatted text.
func FuzzParse(f *testing.F) {
	for _, s := range []string{"6", "12 kN/m", `12'-6 1/2"`, "6½ in", "1.234,5", "1,234.5", "-1e-3 %", "NaN", "1e308", "5 ton", "1\u202f234 kPa", "0x1", "5. ", "9999999999.5 m"} {
		for _, d := range []Dimension{Number, Length, LineLoad, Percent, AreaLoad} {
			f.Add(s, uint8(d))
		}
	}
	f.Fuzz(func(t *testing.T, text string, dim uint8) {
		d := Dimension(dim) % dimensions
		for _, implied := range []Unit{none, siUnit(d)} {
			for _, parse := range []func(string, Dimension, Unit) (float64, error){Parse, ParseDecimalComma} {
				x, err := parse(text, d, implied)
				if err != nil {
					if x != 0 {
						t.Fatalf("%q: %v beside %v", text, x, err)
					}
					continue
				}
				if !(math.Abs(x) <= largest) {
					t.Fatalf("%q as %v: %v without an error", text, d, x)
				}
				checkRoundTrip(t, x, d)
			}
		}
		if _, u, found, err := Header(text); found != (err == nil && !u.IsZero()) {
			t.Fatalf("Header(%q): found %v, unit %v, %v", text, found, u, err)
		}
	})
}

func checkRoundTrip(t *testing.T, x float64, d Dimension) {
	t.Helper()
	for _, row := range table {
		if row.Dimension != d {
			continue
		}
		text := Format(x, row.Unit, 12)
		if back, err := Parse(text, d, none); err != nil || back != x {
			t.Errorf("%v in %s is %q, read back as %v, %v", x, row.Symbol, text, back, err)
		}
	}
}
