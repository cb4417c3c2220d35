package pricing

import (
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// Below a minimum order of 5 m³ the job pays 5 m³: 5 × 310 × 1.1 = 1 705, of which
// 2.2 m³ are for nothing.
// In a trial that needs more than 5 m³ the cost follows the quantity: at 2.8 m³ and
// growth 1.12 at base, growth of 2.24 makes 5.6 m³.
func TestMinimumOrder(t *testing.T) {
	concrete := rate("concrete", ratebook.Foundations, ratebook.CubicMetres, 310)
	concrete.MinimumOrder = decimal(t, "5")
	r := euros(t, concrete)
	r.Multipliers = []ratebook.Multiplier{project("tidal", 1.1, ratebook.Foundations)}
	items := []takeoff.Item{item(t, "A", cubic, "1.50"), item(t, "B", cubic, "1.30")}
	p := price(t, items, r)
	want := []string{
		"line/A/concrete: 1.50 × 341.0000 = 511.50", "line/B/concrete: 1.30 × 341.0000 = 443.30",
		"line/whole structure/concrete/minimum order: 2.20 × 341.0000 = 750.20",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	l := p.Lines[2]
	if l.Group != WholeStructure || l.Item != "" || l.Unit != "m³" || !strings.Contains(l.Note, "minimum order: 5 m³, of which the job needs 2.80") {
		t.Errorf("got group %q, item %q, unit %q, note %q", l.Group, l.Item, l.Unit, l.Note)
	}
	if diff := cmp.Diff([]string{"allowance/cubic metres", "allowance/growth", "multiplier/tidal/project", "norm/crew", "rate/concrete"}, l.Assumptions); diff != "" {
		t.Error(diff)
	}
	if diff := cmp.Diff([]string{"minimum-order rate/concrete"}, codes(p.Notes)); diff != "" {
		t.Error(diff)
	}
	for growth, want := range map[float64]float64{0.12: 1705, 0: 1705, 1.24: 5.6 * 341} {
		if got := trial(p.Model, map[string]float64{"allowance/growth": growth}); !near(got, want) {
			t.Errorf("growth %g: the model gives %.15g, want %.15g", growth, got, want)
		}
	}
	enough := price(t, []takeoff.Item{item(t, "A", cubic, "3.70"), item(t, "B", cubic, "1.30")}, r)
	if len(enough.Lines) != 2 || len(codes(enough.Notes)) != 0 {
		t.Errorf("5.00 m³ is enough: got %v, %v", amounts(enough.Lines), codes(enough.Notes))
	}
}

// A break goes by what is bought: the minimum order of 5 m³ reaches the break there.
func TestBreakAtTheMinimumOrder(t *testing.T) {
	concrete := rate("concrete", ratebook.Foundations, ratebook.CubicMetres, 310)
	concrete.MinimumOrder = decimal(t, "5")
	concrete.Breaks = []ratebook.Break{{From: decimal(t, "5"), Factor: decimal(t, "0.9")}}
	p := price(t, []takeoff.Item{item(t, "A", cubic, "1.50")}, euros(t, concrete))
	want := []string{"line/A/concrete: 1.50 × 279.0000 = 418.50", "line/whole structure/concrete/minimum order: 3.50 × 279.0000 = 976.50"}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Error(diff)
	}
}

// Lines of 200 + 100 USD fall below the minimum of 500 USD, which is 460 EUR and
// with 10 % of escalation 506 EUR. In a trial with the price at 10 USD/t the lines
// cost 600 USD, 607.20 EUR.
func TestMinimumCharge(t *testing.T) {
	survey := rate("survey", ratebook.Erection, ratebook.DeliveredTonnes, 5)
	survey.Spread = spread.NewTriangular(1, 5, 20)
	survey.Currency, survey.MinimumCharge = "USD", decimal(t, "500")
	r := euros(t, survey, rate("margin", ratebook.Margin, ratebook.CostOf, 0.1, ratebook.Erection))
	r.Exchange = map[string]Conversion{"USD": {Name: "exchange", ID: "exchange/USD", Value: decimal(t, "0.92"), Spread: spread.NewTriangular(0.8, 0.92, 1)}}
	r.Escalation = map[string][]Conversion{ratebook.Erection: {{Name: "escalation to base date", ID: "index/erection", Value: decimal(t, "1.1"), Spread: spread.NewTriangular(1, 1.1, 1.3)}}}
	m := project("height", 2, ratebook.Erection)
	m.Scope, m.Subject = ratebook.GroupScope, "Tower"
	r.Multipliers = []ratebook.Multiplier{m}
	b := item(t, "B", tonnes, "10.000")
	b.Group = "Tower"
	p := price(t, []takeoff.Item{item(t, "A", tonnes, "40.000"), b}, r) // 40 × 5 + 10 × 5 × 2 USD
	want := []string{
		"line/A/survey: 40.000 × 5.0600 = 202.40", "line/A/margin: 202.40 × 0.100000 = 20.24",
		"line/B/survey: 10.000 × 10.1200 = 101.20", "line/B/margin: 101.20 × 0.100000 = 10.12",
		"line/whole structure/survey/minimum charge: 1 × 202.4000 = 202.40", "line/whole structure/margin: 202.40 × 0.100000 = 20.24",
	}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	l := p.Lines[4]
	if l.Driver != ratebook.Lump || l.Unit != "sum" || l.Formula != MinimumShortfall || !strings.Contains(l.Note, "minimum charge: 506.00 EUR, of which the lines make 303.60") {
		t.Errorf("got driver %q, unit %q, formula %q, note %q", l.Driver, l.Unit, l.Formula, l.Note)
	}
	of := []string{"allowance/delivered tonnes", "allowance/growth", "exchange/USD", "index/erection", "multiplier/height/group/Tower", "norm/crew"}
	if diff := cmp.Diff(append(slices.Clone(of), "rate/survey"), l.Assumptions); diff != "" {
		t.Error(diff)
	}
	if diff := cmp.Diff(append(of, "rate/margin", "rate/survey"), p.Lines[5].Assumptions); diff != "" {
		t.Error(diff)
	}
	if diff := cmp.Diff([]string{"minimum-charge rate/survey"}, codes(p.Notes)); diff != "" {
		t.Error(diff)
	}
	// The multiplier of one group alone is no common factor: the shortfall holds it at
	// base, the line of the group follows it.
	for _, c := range []struct {
		values map[string]float64
		want   float64
	}{
		{nil, 556.60},
		{map[string]float64{"rate/survey": 10}, 1.1 * 607.2},
		{map[string]float64{"rate/survey": 10, "rate/margin": 0.2}, 1.2 * 607.2},
		{map[string]float64{"exchange/USD": 1}, 1.1 * 550},
		{map[string]float64{"rate/survey": 10, "exchange/USD": 1, "allowance/growth": 1.24}, 1.1 * 1320},
		{map[string]float64{"multiplier/height/group/Tower": 50}, 1.1 * (202.4 + 25*101.2 + 202.4)},
	} {
		if got := trial(p.Model, c.values); !near(got, c.want) {
			t.Errorf("%v: the model gives %.15g, want %.15g", c.values, got, c.want)
		}
	}
}

// The rate of a group is in another currency than that of the book: the shortfall
// takes all lines to follow the exchange of the book's, as the minimum does. 10 t ×
// 5 USD × 0.9 + 20 t × 4 EUR = 125 EUR; the minimum of 200 USD is 180 EUR.
func TestAMinimumChargeOverTwoCurrencies(t *testing.T) {
	survey := rate("survey", ratebook.Erection, ratebook.DeliveredTonnes, 5)
	survey.Currency, survey.MinimumCharge = "USD", decimal(t, "200")
	tower := rate("survey", ratebook.Erection, ratebook.DeliveredTonnes, 4)
	tower.Scope, tower.Subject = ratebook.GroupScope, "Tower"
	r := euros(t, survey, tower)
	r.Exchange = map[string]Conversion{"USD": {Name: ExchangeRate, ID: "exchange/USD", Value: decimal(t, "0.9"), Spread: spread.NewTriangular(0.8, 0.9, 1)}}
	b := item(t, "B", tonnes, "20.000")
	b.Group = "Tower"
	p := price(t, []takeoff.Item{item(t, "A", tonnes, "10.000"), b}, r)
	want := []string{"line/A/survey: 10.000 × 4.5000 = 45.00", "line/B/survey: 20.000 × 4.0000 = 80.00", "line/whole structure/survey/minimum charge: 1 × 55.0000 = 55.00"}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" {
		t.Fatal(diff)
	}
	for _, c := range []struct {
		values map[string]float64
		want   float64
	}{
		{nil, 180},
		{map[string]float64{"allowance/growth": 1.24}, 250},  // twice the quantity
		{map[string]float64{"allowance/growth": 0.344}, 180}, // 1.2 times the quantity
		{map[string]float64{"exchange/USD": 1}, 50 + 80 + 55/0.9},
		{map[string]float64{"allowance/growth": 1.24, "exchange/USD": 0.99}, 99 + 160},
	} {
		if got := trial(p.Model, c.values); !near(got, c.want) {
			t.Errorf("%v: the model gives %.15g, want %.15g", c.values, got, c.want)
		}
	}
}

// The finding that made the shortfall a line of its own: a group erected at twice the
// rate kept its multiplier only while the minimum did not bind, so that the base fell
// as the minimum of crane days rose from 42.4 to 42.5.
func TestABaseDoesNotFallAsAMinimumRises(t *testing.T) {
	days := string(ratebook.CraneDays)
	crane := rate("crane", ratebook.Erection, ratebook.CraneDays, 1500)
	height := project("height", 2, ratebook.Erection)
	height.Scope, height.Subject = ratebook.GroupScope, "Tower"
	a, b := item(t, "A", days, "20.0"), item(t, "B", days, "22.4")
	b.Group = "Tower"
	for _, c := range []struct{ order, charge, want string }{
		{"42.4", "0", "97200.00"}, // 20 × 1500 + 22.4 × 3000
		{"42.5", "0", "97350.00"}, // and 0.1 × 1500
		{"0", "97200", "97200.00"},
		{"0", "97200.01", "97200.01"},
		{"42.5", "97350.01", "97350.01"},
	} {
		crane.MinimumOrder, crane.MinimumCharge = decimal(t, c.order), decimal(t, c.charge)
		r := euros(t, crane)
		r.Multipliers = []ratebook.Multiplier{height}
		p := price(t, []takeoff.Item{a, b}, r)
		if p.Base.String() != c.want || p.Lines[1].Amount.String() != "67200.00" || !near(p.Model.Base(), p.Base.Float64()) {
			t.Errorf("minimum of %s days and %s EUR: base %s, of the model %.10g, of the tower %s; want %s", c.order, c.charge, p.Base, p.Model.Base(), p.Lines[1].Amount, c.want)
		}
	}
}

// Property: without price breaks no minimum makes any job cheaper, and none changes
// the line of an item.
func TestMinimumsOnlyAdd(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	bound := 0
	for range 60 {
		items, job := randomJob(t, r, 6)
		job.Currency = currency(t, "EUR")
		for i := range job.Rates {
			job.Rates[i].Breaks = nil
			if job.Rates[i].Driver == ratebook.CostOf { // their bases grow with the minimums
				job.Rates[i].MinimumCharge = money.Zero
			}
		}
		with := price(t, items, job)
		job.Rates = slices.Clone(job.Rates)
		for i := range job.Rates {
			job.Rates[i].MinimumCharge, job.Rates[i].MinimumOrder = money.Zero, money.Zero
		}
		without := price(t, items, job)
		if with.Base.Cmp(without.Base) < 0 {
			t.Errorf("minimums make the base fall from %s to %s", without.Base, with.Base)
		}
		amount := map[string]string{}
		for _, l := range with.Lines {
			amount[l.ID] = l.Amount.String()
			if strings.HasSuffix(l.ID, orderShortfall) || strings.HasSuffix(l.ID, chargeShortfall) {
				bound++
			}
		}
		for _, l := range without.Lines {
			if l.Item != "" && amount[l.ID] != l.Amount.String() {
				t.Errorf("minimums change %s from %s to %s", l.ID, l.Amount, amount[l.ID])
			}
		}
	}
	if bound < 60 {
		t.Errorf("only %d minimums bind: the test does not test them", bound)
	}
}

// In trials the shortfall is exact where the lines differ in no factor, and never
// negative: with both minimums, at any growth, the job costs the greatest of three.
func TestTheShortfallOfATrial(t *testing.T) {
	concrete := rate("concrete", ratebook.Foundations, ratebook.CubicMetres, 300)
	concrete.MinimumOrder = decimal(t, "5")
	p := price(t, []takeoff.Item{item(t, "A", cubic, "1.50"), item(t, "B", cubic, "1.30")}, euros(t, concrete))
	for growth := -0.9; growth < 3; growth += 0.13 {
		want := 300 * max(5, 2.8*(1+growth)/1.12)
		if got := trial(p.Model, map[string]float64{"allowance/growth": growth}); !near(got, want) {
			t.Errorf("growth %g: the model gives %.15g, want %.15g", growth, got, want)
		}
	}
	concrete.MinimumCharge = decimal(t, "1600")
	p = price(t, []takeoff.Item{item(t, "A", cubic, "1.50"), item(t, "B", cubic, "1.30")}, euros(t, concrete))
	for price, want := range map[float64]float64{0: 1600, 300: 1600, 310: 1600, 330: 1650, 600: 3000} {
		if got := trial(p.Model, map[string]float64{"rate/concrete": price}); !near(got, want) {
			t.Errorf("price %g: the model gives %.15g, want %.15g", price, got, want)
		}
	}
}

// Factors that stand twice in a product, as a multiplier of a category and of a
// percentage upon it does, are common as often as all terms have them: of x²y and
// xyz they are x and y, with x + z left at base.
func TestCommonFactors(t *testing.T) {
	c := newCompiler()
	var n [3]int32
	for i, v := range []float64{2, 3, 5} {
		var err error
		if n[i], err = c.factor(Input{ID: string(rune('x' + i)), Spread: spread.NewFixed(v)}, 0); err != nil {
			t.Fatal(err)
		}
	}
	x, y, z := n[0], n[1], n[2]
	terms := []term{
		{monomial: c.monomials.of(x, x, y), coefficient: 7},
		{monomial: c.monomials.of(x, y, z), coefficient: 11},
	}
	common := c.common(terms)
	if diff := cmp.Diff([]int32{x, y}, c.monomials.lists[common]); diff != "" {
		t.Error(diff)
	}
	if got, want := c.firstOrder(terms, common), 7*2.0+11*5; got != want {
		t.Errorf("got %g, want %g", got, want)
	}
	terms[1] = term{monomial: c.monomials.of(y), coefficient: 11}
	if common := c.common(terms); len(c.monomials.lists[common]) != 1 || c.firstOrder(terms, common) != 7*4+11 {
		t.Errorf("of x²y and y: %v, %g", c.monomials.lists[common], c.firstOrder(terms, common))
	}
	terms[0], terms[1] = term{monomial: c.monomials.of(x, y)}, term{monomial: c.monomials.of(x, x)}
	if diff := cmp.Diff([]int32{x}, c.monomials.lists[c.common(terms)]); diff != "" {
		t.Error(diff)
	}
}

func TestAMinimumChargeThatDoesNotBind(t *testing.T) {
	survey := rate("survey", ratebook.Erection, ratebook.DeliveredTonnes, 5)
	survey.MinimumCharge = decimal(t, "250")
	p := price(t, []takeoff.Item{item(t, "A", tonnes, "40.000"), item(t, "B", tonnes, "10.000")}, euros(t, survey))
	want := []string{"line/A/survey: 40.000 × 5.0000 = 200.00", "line/B/survey: 10.000 × 5.0000 = 50.00"}
	if diff := cmp.Diff(want, amounts(p.Lines)); diff != "" || len(codes(p.Notes)) > 0 {
		t.Errorf("%s, notes %v", diff, codes(p.Notes))
	}
}
