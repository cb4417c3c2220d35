package document

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"spanwright/estimate/money"
)

// Values of strconv's %.12g rule, by hand.
func TestNumbersPrintTwelveSignificantDigits(t *testing.T) {
	for x, want := range map[float64]string{
		1.0 / 3: "0.333333333333", 2.0 / 3: "0.666666666667", 123456789.123456: "123456789.123", 0.1 + 0.2: "0.3",
		1e21: "1e+21", 5e-324: "5e-324", 42: "42", math.Copysign(0, -1): "0",
	} {
		got, err := json.Marshal(Number(x))
		if err != nil || string(got) != want {
			t.Errorf("%v: got %s, %v; want %s", x, got, err, want)
		}
	}
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if _, err := json.Marshal(Number(x)); err == nil {
			t.Errorf("%v was written", x)
		}
	}
}

func TestCanonicalReadsBackToTheSameBytes(t *testing.T) {
	base, err := money.Parse("766439.80")
	if err != nil {
		t.Fatal(err)
	}
	d := Document{EngineVersion: EngineVersion, Caution: Caution, Totals: Totals{Base: base},
		Members: []Member{{Mark: "<B1> & “co”", Utilisation: 2.0 / 3}}, Range: Range{Percentiles: []Percentile{{P: 0.1, Value: 1}, {P: 0.85, Value: 2}}}}
	first, sum, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(first), `<B1> & “co”`) || !strings.Contains(string(first), `"766439.80"`) || len(sum) != 64 {
		t.Errorf("got %s, %s", first, sum)
	}
	back, err := Parse(first)
	if err != nil {
		t.Fatal(err)
	}
	if second, again, err := back.Canonical(); err != nil || string(second) != string(first) || again != sum {
		t.Errorf("read back it is %s, %v", second, err)
	}
	if _, err := Parse([]byte(`{"unknown":1}`)); err == nil {
		t.Error("an unknown field was accepted")
	}
}

// The range figure holds the percentiles that every document has; a chosen
// confidence that adds one must not change it.
func TestFigures(t *testing.T) {
	d := Document{
		Members: []Member{{Mark: "B/1", Net: 12, Checks: []Check{{ID: "bending", Utilisation: 0.5}}}},
		Range:   Range{Mean: 3, Percentiles: []Percentile{{P: 0.1, Value: 1}, {P: 0.85, Value: 2}}},
	}
	f := d.Figures()
	for id, want := range map[string]string{"member/B%2F1/net": "12", "member/B%2F1/check/bending": "0.5", "range": "3 1", "base": "0"} {
		if f[id] != want {
			t.Errorf("%s: got %q, want %q", id, f[id], want)
		}
	}
}
