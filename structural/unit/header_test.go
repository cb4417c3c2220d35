package unit

import "testing"

func TestHeader(t *testing.T) {
	cases := []struct{ text, name, symbol string }{
		{"Length (m)", "Length", "m"}, {"Permanent load [kN/m]", "Permanent load", "kN/m"}, {"Length, ft", "Length", "ft"},
		{"Length", "Length", ""}, {"  Length \u00a0 ( mm ) ", "Length", "mm"}, {"Area load (kN/m2)", "Area load", "kN/m²"},
		{"Size, as built", "Size, as built", ""}, {"Waste (%)", "Waste", "%"}, {"", "", ""}, {"(m)", "(m)", ""}, {"Length ()", "Length ()", ""}, {", ft", ", ft", ""},
		{"Axial load, compression + (kN)", "Axial load, compression +", "kN"}, {"Load (permanent) (kip/ft)", "Load (permanent)", "klf"},
	}
	for _, c := range cases {
		name, u, found, err := Header(c.text)
		if err != nil || name != c.name || u.Symbol != c.symbol || found != (c.symbol != "") {
			t.Errorf("Header(%q) = %q, %v, %v, %v; want %q, %q", c.text, name, u, found, err, c.name, c.symbol)
		}
	}
}

func TestHeaderRefusals(t *testing.T) {
	for _, text := range []string{"Mass (ton)", "Mass, tons", "Length (furlong)", "Axial load (compression +)", "Stress, mpa"} {
		if name, u, found, err := Header(text); err == nil || found || !u.IsZero() || name == text {
			t.Errorf("Header(%q) = %q, %v, %v, %v; want the bare name and an error", text, name, u, found, err)
		}
	}
}
