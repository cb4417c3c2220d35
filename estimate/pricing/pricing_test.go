package pricing

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

func euros(tb testing.TB) money.Currency {
	tb.Helper()
	c, err := money.FindCurrency("EUR")
	if err != nil {
		tb.Fatal(err)
	}
	return c
}

func decimal(tb testing.TB, text string) money.Decimal {
	tb.Helper()
	d, err := money.Parse(text)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

func item(tb testing.TB, i int, delivered, purchased string) takeoff.Item {
	tb.Helper()
	a := func(id string, v float64) takeoff.Allowance {
		return takeoff.Allowance{ID: id, Spread: spread.NewTriangular(0, v, 3*v), Offset: 1}
	}
	return takeoff.Item{
		ID: fmt.Sprintf("Boom/CHS/size/%d", i), Group: "Boom", Family: "CHS", Treatment: schedule.SizeFromFamily, Marks: []string{fmt.Sprintf("B%d", i)},
		Delivered: decimal(tb, delivered), Purchased: decimal(tb, purchased),
		ToDelivered: []takeoff.Allowance{a("allowance/connections", 0.12), a("allowance/bolts", 0.02)},
		ToPurchased: []takeoff.Allowance{a("allowance/connections", 0.12), a("allowance/waste", 0.09)},
	}
}

func rates(tb testing.TB) Rates {
	tb.Helper()
	b := ratebook.Ratio()
	return Rates{Book: b, Multipliers: b.Multipliers, Currency: euros(tb),
		Systemic: takeoff.Allowance{ID: "systemic", Spread: spread.LogDeviation(0.25)}}
}

// By hand: material 24.643 t × 900 = 22 178.70; fabrication 21.007 t × 900 × 2.4 ×
// 1 = 45 375.12.
func TestLinesByHand(t *testing.T) {
	p, err := Price([]takeoff.Item{item(t, 1, "21.007", "24.643")}, rates(t))
	if err != nil {
		t.Fatal(err)
	}
	want := map[string]string{ratebook.Material: "22178.70", ratebook.Fabrication: "45375.12"}
	for _, l := range p.Lines {
		if w, ok := want[l.Category]; ok && l.Amount.String() != w {
			t.Errorf("%s: got %s, want %s", l.Category, l.Amount, w)
		}
	}
	sum := money.Decimal{}
	for _, c := range p.Categories {
		sum = sum.Add(c)
	}
	if sum.Cmp(p.Base) != 0 {
		t.Errorf("the categories sum to %s, the base is %s", sum, p.Base)
	}
}

// The labour of the ratio book hangs on the frozen reference price: another price
// of steel moves the material alone.
func TestLabourDoesNotMoveWithThePriceOfSteel(t *testing.T) {
	items := []takeoff.Item{item(t, 1, "21.007", "24.643")}
	before, err := Price(items, rates(t))
	if err != nil {
		t.Fatal(err)
	}
	r := rates(t)
	r.Book.MaterialPrice.Spread = spread.NewPERT(1000, 1200, 1500)
	after, err := Price(items, r)
	if err != nil {
		t.Fatal(err)
	}
	for c, a := range before.Categories {
		if same := a.Cmp(after.Categories[c]) == 0; same == (c == ratebook.Material) {
			t.Errorf("%s: %s before, %s after", c, a, after.Categories[c])
		}
	}
}

// DESIGN: at base values the model equals the unrounded decimal total to 1e-12,
// and the rounded total within half a minor unit a line.
func TestModelAgreesWithTheLines(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	var items []takeoff.Item
	for i := range 200 {
		items = append(items, item(t, i, fmt.Sprintf("%.3f", 50*r.Float64()), fmt.Sprintf("%.3f", 60*r.Float64())))
	}
	p, err := Price(items, rates(t))
	if err != nil {
		t.Fatal(err)
	}
	unrounded := 0.0
	for _, l := range p.Lines {
		v := l.Quantity.Mul(l.Rate)
		for _, m := range l.Multipliers {
			v = v.Mul(m.Value)
		}
		unrounded += v.Float64()
	}
	if got := p.Model.Base(); math.Abs(got-unrounded) > 1e-12*unrounded {
		t.Errorf("the model's base is %.15g, the unrounded total %.15g", got, unrounded)
	}
	if got := p.Model.Base(); math.Abs(got-p.Base.Float64()) > 0.005*float64(len(p.Lines)) {
		t.Errorf("the model's base is %.15g, the rounded total %s", got, p.Base)
	}
}

// A trial's cost does not grow with the members: identical products merge.
func TestTermsMerge(t *testing.T) {
	var one, many []takeoff.Item
	for i := range 500 {
		many = append(many, item(t, i, "1.5", "1.7"))
	}
	one = many[:1]
	a, err := Price(one, rates(t))
	if err != nil {
		t.Fatal(err)
	}
	b, err := Price(many, rates(t))
	if err != nil {
		t.Fatal(err)
	}
	if len(a.Model.Terms) != len(b.Model.Terms) || len(a.Model.Inputs) != len(b.Model.Inputs) {
		t.Errorf("500 like items have %d terms and %d inputs, one has %d and %d", len(b.Model.Terms), len(b.Model.Inputs), len(a.Model.Terms), len(a.Model.Inputs))
	}
}

func TestPriceRefuses(t *testing.T) {
	long := rates(t)
	long.Multipliers = append(long.Multipliers,
		ratebook.Multiplier{Name: "a", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewFixed(1.2345)},
		ratebook.Multiplier{Name: "b", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewFixed(1.2347)},
		ratebook.Multiplier{Name: "c", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewFixed(1.2349)})
	places := rates(t)
	places.Multipliers = []ratebook.Multiplier{{Name: "exact", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewFixed(1.00001)}}
	for name, c := range map[string]struct {
		r    Rates
		want string
	}{"a product beyond 15 digits": {long, "15"}, "a multiplier with five decimals": {places, "decimals"}} {
		if _, err := Price([]takeoff.Item{item(t, 1, "21.007", "24.643")}, c.r); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error that names %q", name, err, c.want)
		}
	}
}

func BenchmarkPrice10000Lines(b *testing.B) {
	var items []takeoff.Item
	for i := range 1250 {
		items = append(items, item(b, i, "21.007", "24.643"))
	}
	r := rates(b)
	b.ReportAllocs()
	lines := 0
	for b.Loop() {
		p, err := Price(items, r)
		if err != nil {
			b.Fatal(err)
		}
		lines = len(p.Lines)
	}
	b.ReportMetric(float64(lines), "lines")
}
