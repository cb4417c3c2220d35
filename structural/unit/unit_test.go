package unit

import (
	"errors"
	"strings"
	"testing"
)

// Factors of NIST Special Publication 811 (2008), appendix B.8, printed there
// to seven significant digits; copied from memory.
var sp811 = []struct {
	symbol string
	factor float64
}{
	{"ft", 3.048e-1}, {"in", 2.54e-2}, {"ft²", 9.290304e-2}, {"in²", 6.4516e-4},
	{"ft³", 2.831685e-2}, {"in³", 1.638706e-5}, {"yd³", 7.645549e-1}, {"in⁴", 4.162314e-7},
	{"lb", 4.535924e-1}, {"cwt", 4.535924e1}, {"short ton", 9.071847e2}, {"long ton", 1.016047e3}, {"t", 1e3},
	{"lbf", 4.448222}, {"kip", 4.448222e3}, {"kgf", 9.80665},
	{"lbf·ft", 1.355818}, {"lbf·in", 1.129848e-1}, {"kip·ft", 1.355818e3}, {"kip·in", 1.129848e2},
	{"psi", 6.894757e3}, {"ksi", 6.894757e6}, {"plf", 1.459390e1}, {"klf", 1.459390e4},
	{"psf", 4.788026e1}, {"ksf", 4.788026e4}, {"lb/ft", 1.488164}, {"lb/ft²", 4.882428},
}

func TestFactorsAgainstSP811(t *testing.T) {
	for _, c := range sp811 {
		u, err := Lookup(c.symbol)
		if err != nil {
			t.Errorf("Lookup(%q): %v", c.symbol, err)
			continue
		}
		if got := Round(u.Factor, 7); got != c.factor {
			t.Errorf("%s: factor %v, SP 811 has %v", c.symbol, u.Factor, c.factor)
		}
	}
}

// The pound-force is exactly 4.448 221 615 260 5 N (SP 811, appendix B.8, footnote; from memory).
func TestPoundForceExact(t *testing.T) {
	if got := Must("lbf").Factor; got != 4.4482216152605 {
		t.Errorf("1 lbf = %v N", got)
	}
}

func TestLookupSpellings(t *testing.T) {
	cases := []struct{ spelling, symbol string }{
		{"kN·m", "kN·m"}, {"kNm", "kN·m"}, {"kN-m", "kN·m"}, {"kN*m", "kN·m"}, {"kN m", "kN·m"}, {"kN ⋅ m", "kN·m"},
		{"kN/m²", "kN/m²"}, {"kN/m2", "kN/m²"}, {"kN/m^2", "kN/m²"}, {"kN / m²", "kN/m²"}, {"KN/M2", "kN/m²"},
		{"N/mm²", "MPa"}, {"N/mm2", "MPa"}, {"N/mm", "kN/m"}, {"kips", "kip"}, {"kip-ft", "kip·ft"}, {"ft-kips", "kip·ft"},
		{"lbf/ft", "plf"}, {"kip/ft", "klf"}, {"lbs", "lb"}, {"tonnes", "t"}, {"Short Tons", "short ton"},
		{"US ton", "short ton"}, {"imperial ton", "long ton"}, {"Feet", "ft"}, {"FT", "ft"}, {`"`, "in"}, {"'", "ft"},
		{"″", "in"}, {"per cent", "%"}, {"short\u00a0ton", "short ton"}, {"m3", "m³"}, {"cm^4", "cm⁴"}, {"1/s", "Hz"},
	}
	for _, c := range cases {
		u, err := Lookup(c.spelling)
		if err != nil || u.Symbol != c.symbol {
			t.Errorf("Lookup(%q) = %q, %v; want %q", c.spelling, u.Symbol, err, c.symbol)
		}
	}
}

func TestLookupRefusals(t *testing.T) {
	cases := []struct{ symbol, names string }{
		{"ton", "short ton"}, {"tons", "long ton"}, {"Ton", "t (1000 kg)"}, {"ton/m", "short ton"},
		{"mpa", "MPa"}, {"mN", "MN"}, {"", "kN"}, {"furlong", "kN"}, {"m5", "mm"}, {"kN//m", "kN"},
	}
	for _, c := range cases {
		u, err := Lookup(c.symbol)
		var e *Error
		if !errors.As(err, &e) || !u.IsZero() {
			t.Errorf("Lookup(%q) = %v, %v; want an *Error", c.symbol, u, err)
			continue
		}
		if e.Text != c.symbol || !strings.Contains(e.Accepted, c.names) {
			t.Errorf("Lookup(%q): %v; want %q among the accepted", c.symbol, e, c.names)
		}
	}
}

func TestTableIsUnambiguous(t *testing.T) {
	seen := map[string]string{}
	for _, row := range table[1:] {
		if u, err := Lookup(row.Symbol); err != nil || u != row.Unit {
			t.Errorf("Lookup(%q) = %v, %v", row.Symbol, u, err)
		}
		if !(row.Factor > 0) {
			t.Errorf("%s has factor %v", row.Symbol, row.Factor)
		}
		for _, s := range append(strings.Split(row.spellings, "|"), row.Symbol) {
			if s == "" {
				continue
			}
			key := strings.ToLower(tidySymbol(s))
			if other, ok := seen[key]; ok && other != row.Symbol {
				t.Errorf("%q means %s and %s", s, other, row.Symbol)
			}
			seen[key] = row.Symbol
		}
	}
}

func TestFirstUnitIsSI(t *testing.T) {
	for d := Length; d < dimensions; d++ {
		if u := siUnit(d); u.Factor != 1 {
			t.Errorf("%v begins with %v", d, u)
		}
		if !strings.HasPrefix(Symbols(d), siUnit(d).Symbol) {
			t.Errorf("Symbols(%v) = %q", d, Symbols(d))
		}
	}
}

func TestAccepts(t *testing.T) {
	for d := Number; d < dimensions; d++ {
		for e := Number; e < dimensions; e++ {
			want := d == e || d == Stress && e == AreaLoad || d == AreaLoad && e == Stress
			if got := d.Accepts(e); got != want {
				t.Errorf("%v accepts %v: %v", d, e, got)
			}
		}
		if d.String() == "" || d.String() == dimensions.String() {
			t.Errorf("dimension %d has the name %q", d, d)
		}
	}
}

func TestMustPanics(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("Must accepted an unknown unit")
		}
	}()
	Must("furlong")
}
