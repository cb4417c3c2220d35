package pricing

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// Each fault is an answer that names the rate, line, conversion or assumption.
func TestPriceRefuses(t *testing.T) {
	base := func() Rates {
		return euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60.5), rate("steel", ratebook.Material, ratebook.DeliveredTonnes, 900))
	}
	quantities := []string{hours, "21.7", tonnes, "24.643"}
	for name, c := range map[string]struct {
		change func(r *Rates, it *takeoff.Item)
		want   []string
	}{
		"a currency without a rate": {func(r *Rates, _ *takeoff.Item) {
			r.Rates[0].Currency, r.Exchange = "USD", map[string]Conversion{"GBP": {Name: "exchange", ID: "exchange/GBP", Value: decimal(t, "1.1"), Spread: spread.NewFixed(1.1)}}
		}, []string{"rate/labour", "USD", "into EUR", "accepted", "GBP"}},
		"a book in a currency without a rate": {func(r *Rates, _ *takeoff.Item) { r.Book = "NOK" }, []string{"rate/labour", "rate/steel", "NOK"}},
		"a negative price":                    {func(r *Rates, _ *takeoff.Item) { r.Rates[0].Spread = spread.NewTriangular(-10, -5, 10) }, []string{"rate/labour", "likely price -5"}},
		"a price of NaN":                      {func(r *Rates, _ *takeoff.Item) { r.Rates[0].Spread = spread.NewFixed(math.NaN()) }, []string{"rate/labour", "nothing"}},
		"a price of five decimals":            {func(r *Rates, _ *takeoff.Item) { r.Rates[0].Spread = spread.NewFixed(1.00001) }, []string{"rate/labour", "decimals"}},
		"a multiplier of five decimals": {func(r *Rates, _ *takeoff.Item) {
			r.Multipliers = []ratebook.Multiplier{project("exact", 1.00001, ratebook.Material)}
		}, []string{"multiplier/exact/project", "decimals"}},
		"a negative multiplier": {func(r *Rates, _ *takeoff.Item) {
			r.Multipliers = []ratebook.Multiplier{project("refund", -0.5, ratebook.Material)}
			r.Multipliers[0].Spread = spread.NewTriangular(-1, -0.5, 1)
		}, []string{"multiplier/refund/project", "-0.5", "zero or more"}},
		"spreads out of order": {func(r *Rates, _ *takeoff.Item) { r.Rates[1].Spread = spread.NewTriangular(3, 2, 1) }, []string{"rate/steel", "high"}},
		"a product beyond 15 digits": {func(r *Rates, it *takeoff.Item) {
			r.Rates[0].Spread = spread.NewFixed(1234567.8912)
			it.Quantities[0].Value = decimal(t, "98765.4")
		}, []string{"line/A/labour", "rate/labour", "15", "fewer decimals"}},
		"a driver that the take-off lacks":  {func(_ *Rates, it *takeoff.Item) { it.Quantities = it.Quantities[1:] }, []string{"rate/labour", "shop hours", "norms", "delivered tonnes"}},
		"a ratio without a reference price": {func(r *Rates, _ *takeoff.Item) { r.Rates[0].OfReference = true }, []string{"rate/labour", "reference price"}},
		"no driver at all":                  {func(r *Rates, _ *takeoff.Item) { r.Rates[0].Driver = "pounds" }, []string{"rate/labour", "pounds"}},
		"one id in two categories": {func(r *Rates, _ *takeoff.Item) {
			r.Rates = append(r.Rates, rate("labour", ratebook.Erection, ratebook.ShopHours, 1))
		}, []string{"rate/labour", "erection", "fabrication"}},
		"one id with two drivers": {func(r *Rates, _ *takeoff.Item) {
			r.Rates = append(r.Rates, rate("labour", ratebook.Fabrication, ratebook.Pieces, 1))
		}, []string{"rate/labour", "pieces", "shop hours"}},
		"a minimum order of a lump": {func(r *Rates, _ *takeoff.Item) {
			r.Rates[0].Driver, r.Rates[0].MinimumOrder = ratebook.Lump, decimal(t, "2")
		}, []string{"rate/labour", "minimum order"}},
		"a negative minimum":     {func(r *Rates, _ *takeoff.Item) { r.Rates[0].MinimumCharge = decimal(t, "-1") }, []string{"rate/labour", "minimum charge -1"}},
		"a break of factor zero": {func(r *Rates, _ *takeoff.Item) { r.Rates[0].Breaks = []ratebook.Break{{}} }, []string{"rate/labour", "price break 0"}},
		"breaks out of order": {func(r *Rates, _ *takeoff.Item) {
			r.Rates[0].Breaks = []ratebook.Break{{From: decimal(t, "5"), Factor: decimal(t, "1")}, {From: decimal(t, "4"), Factor: decimal(t, "1")}}
		}, []string{"rate/labour", "out of order"}},
		"an exchange of zero": {func(r *Rates, _ *takeoff.Item) {
			r.Exchange = map[string]Conversion{"USD": {Name: "exchange", ID: "exchange/USD", Spread: spread.NewFixed(0)}}
		}, []string{"exchange/USD", "above zero"}},
		"an escalation of seven decimals": {func(r *Rates, _ *takeoff.Item) {
			r.Escalation = map[string][]Conversion{"material": {{Name: "escalation to base date", ID: "index/steel", Value: decimal(t, "1.0000001"), Spread: spread.NewFixed(1.0000001)}}}
		}, []string{"index/steel", "decimals"}},
		"an allowance of −100 %": {func(_ *Rates, it *takeoff.Item) {
			it.Quantities[0].Factors = []takeoff.Allowance{{ID: "allowance/odd", Spread: spread.NewFixed(-1), Offset: 1}}
		}, []string{"A", "allowance/odd", "shop hours", "above zero"}},
		"one allowance with two spreads": {func(_ *Rates, it *takeoff.Item) {
			it.Quantities[1].Factors = []takeoff.Allowance{allowance("allowance/growth", 0.3)}
		}, []string{"allowance/growth", "twice"}},
		"a probability of NaN": {func(r *Rates, _ *takeoff.Item) {
			r.Risks = []DiscreteRisk{{ID: "risk/x", Probability: math.NaN(), Impact: spread.NewFixed(1)}}
		}, []string{"risk/x", "0 to 1"}},
		"a risk twice": {func(r *Rates, _ *takeoff.Item) {
			r.Risks = []DiscreteRisk{{ID: "risk/x", Impact: spread.NewFixed(1)}, {ID: "risk/x", Impact: spread.NewFixed(1)}}
		}, []string{"risk/x", "twice"}},
		"an unknown category": {func(r *Rates, _ *takeoff.Item) { r.Categories = append(r.Categories, "luck") }, []string{"luck", "fabrication"}},
		"all faults at once": {func(r *Rates, _ *takeoff.Item) {
			r.Rates[0].Spread, r.Rates[1].Currency = spread.NewFixed(-1), "USD"
			r.Rates[1].Spread = spread.NewFixed(-2)
		}, []string{"rate/labour", "rate/steel"}},
	} {
		r, it := base(), item(t, "A", quantities...)
		c.change(&r, &it)
		p, err := Price([]takeoff.Item{it}, r)
		if err == nil {
			t.Errorf("%s: got %v, want an error", name, amounts(p.Lines))
			continue
		}
		for _, w := range c.want {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: the error does not name %q: %v", name, w, err)
			}
		}
	}
}

// A take-off made with norms may lack a driver for a good reason: no error.
func TestAnAbsentQuantityIsNoFault(t *testing.T) {
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60), rate("survey", ratebook.Engineering, ratebook.Lump, 900))
	for name, it := range map[string]takeoff.Item{
		"site hours alone": item(t, "A", tonnes, "2.000", string(ratebook.SiteHours), "12.0"),
		"concrete alone":   item(t, "A", cubic, "2.00"),
	} {
		p := price(t, []takeoff.Item{it}, r)
		if len(p.Lines) != 1 || len(codes(p.Notes)) != 1 || codes(p.Notes)[0] != "no-quantity rate/labour" {
			t.Errorf("%s: got %v, %v", name, amounts(p.Lines), codes(p.Notes))
		}
	}
	if p := price(t, nil, r); len(p.Lines) != 1 || p.Base.String() != "900.00" {
		t.Errorf("a job of a survey alone costs %s", p.Base)
	}
}

// A job of which nothing is priced says so: the items, the book, and why.
func TestAJobWithoutALineIsRefused(t *testing.T) {
	labour := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60)
	load := rate("load test", ratebook.Engineering, ratebook.Lump, 900)
	load.Trigger.Kinds = []string{"boom"}
	var many []takeoff.Item
	for i := range 8 {
		many = append(many, item(t, fmt.Sprintf("I%d", i), cubic, "2.00"))
	}
	for name, c := range map[string]struct {
		items []takeoff.Item
		rates Rates
		want  []string
	}{
		"no item":     {nil, euros(t, labour), []string{"no line", "no items", "book in EUR", "rate/labour: no item that it is for has shop hours", "accepted"}},
		"no quantity": {many, euros(t, labour, load), []string{`"I0", "I1"`, "3 more", "rate/labour", "rate/load test: nothing in the job asks for it"}},
		"zeros":       {[]takeoff.Item{item(t, "A", hours, "0")}, euros(t, labour), []string{`the items "A"`, "above zero"}},
		"no rate":     {many[:1], euros(t), []string{"no rate for material"}},
	} {
		_, err := Price(c.items, c.rates)
		if err == nil {
			t.Errorf("%s: no error", name)
			continue
		}
		for _, w := range c.want {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: the error does not say %q: %v", name, w, err)
			}
		}
	}
}

// Errors about digits can be told from others, so that the caller blames the book.
func TestDigitsAreErrDigits(t *testing.T) {
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 1234567.8912))
	_, err := Price([]takeoff.Item{item(t, "A", hours, "98765.4")}, r)
	if !errors.Is(err, money.ErrDigits) {
		t.Errorf("got %v, want money.ErrDigits", err)
	}
}
