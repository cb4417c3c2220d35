package workbook

import (
	"fmt"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// 1.15 × 1.05 is 1.2075, a tie; as floats it is 1.2074999999999998, which the
// take-off rounds down to 1.207.
func TestQuantityRounding(t *testing.T) {
	for _, c := range []struct {
		floats []float64
		want   string
		wrap   string
	}{
		{[]float64{12.3456, 1.02}, "12.593", "ROUND(%s,3)"}, {[]float64{7}, "7", "ROUND(%s,0)"}, {[]float64{0, 1.2}, "0.000", "ROUND(%s,3)"},
		{[]float64{1.0005}, "1.001", "ROUND(ROUND(%s,9),3)"}, {[]float64{2.5}, "3", "ROUND(ROUND(%s,6),0)"},
		{[]float64{1.15, 1.05}, "1.207", "ROUND(ROUND(%s,9)-0.000000001,3)"}, {[]float64{1.15, 1.05}, "1.208", "ROUND(ROUND(%s,9),3)"},
		{[]float64{1.2074999}, "1.208", ""}, {[]float64{5}, "4", ""}, {[]float64{1e30}, "4", ""},
	} {
		wrap, ok := quantityRounding(c.floats, decimal(t, c.want))
		if wrap != c.wrap || ok != (c.wrap != "") {
			t.Errorf("%v, which is %s, is rounded by %q, %v; want %q", c.floats, c.want, wrap, ok, c.wrap)
		}
	}
}

func TestInnerPlaces(t *testing.T) {
	for _, c := range []struct {
		factors []string
		outer   int
		want    string
		inner   int
		ok      bool
	}{
		{[]string{"1.005", "1"}, 2, "1.01", 8, true}, {[]string{"81.915", "900"}, 2, "73723.50", 8, true}, {[]string{"1234567890.125", "1"}, 2, "1234567890.13", 5, true},
		{[]string{"0.00499999995", "1"}, 2, "0.00", 11, true},                                         // its ninth decimal decides
		{[]string{"0.00499999995", "1"}, 2, "0.01", 8, true},                                          // rounded twice
		{[]string{"9000000.00005", "1", "1", "1", "1", "1"}, 4, "9000000.0001", 7, true},              // six factors: their noise reaches the eighth decimal
		{[]string{"1.005", "1"}, 2, "1.00", 0, false}, {[]string{"-1.005", "1"}, 2, "-1.01", 8, true}, // half away from zero
	} {
		var factors []money.Decimal
		for _, f := range c.factors {
			factors = append(factors, decimal(t, f))
		}
		if inner, ok := innerPlaces(factors, c.outer, decimal(t, c.want)); ok != c.ok || inner != c.inner {
			t.Errorf("%v to %s: %d, %v; want %d, %v", c.factors, c.want, inner, ok, c.inner, c.ok)
		}
	}
}

// tiedQuantities is a take-off whose exact products are ties, rounded as the
// take-off does it: from the shortest text of the float. In some of them the noise
// of the float hides the tie.
func tiedQuantities(t *testing.T) document.Document {
	t.Helper()
	d := estimate(t, "EUR", nil)
	texts := []string{"0.15", "0.05", "0.12", "0.025", "0.18"}
	for _, s := range texts {
		x := decimal(t, s).Float64()
		d.Assumptions = append(d.Assumptions, assumption.Entry{ID: "allowance/" + s, Kind: assumption.Allowance, Statement: "invented", Source: "tests",
			Spread: &spread.Spread{Distribution: spread.Fixed, Likely: x}})
	}
	hidden := 0
	for k := int64(1); len(d.Items) < 150 && k < 200_000; k++ {
		measured := money.FromInt(k * 37 % 50_021).Mul(decimal(t, "0.001"))
		exact, x := measured, measured.Float64()
		q := document.Quantity{Driver: "delivered tonnes", Unit: "t", Measured: document.Number(x)}
		for i := range 1 + int(k%3) {
			s := texts[(int(k)+i)%len(texts)]
			f := document.Factor{Assumption: "allowance/" + s, Value: document.Number(1 + decimal(t, s).Float64())}
			exact, x = exact.Mul(decimal(t, "1").Add(decimal(t, s))), x*float64(f.Value)
			q.Factors = append(q.Factors, f)
		}
		if decimals(exact) != 4 || decimals(exact.Mul(money.FromInt(2))) > 3 {
			continue
		}
		var err error
		if q.Value, err = money.FromFloat(x, 3); err != nil {
			t.Fatal(err)
		}
		if !q.Value.Equal(exact.Round(3)) {
			hidden++
		} else if len(d.Items)%2 == 1 {
			continue // fewer of the plain ones
		}
		d.Items = append(d.Items, document.Item{ID: fmt.Sprint("item ", k), Group: "g", Delivered: q.Value, Quantities: []document.Quantity{q}})
	}
	if hidden < 10 {
		t.Fatalf("only %d of %d ties are hidden by noise", hidden, len(d.Items))
	}
	return d
}
