package workbook

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"strconv"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// generator makes unit-rate documents by the rules of the arithmetic, in exact
// decimals and without the writer's code. One seed gives one document; a changed
// input gives what the service would answer after the same change. All figures
// are invented.
type generator struct {
	t       testing.TB
	r       *rand.Rand
	c       money.Currency
	changed map[string]string // register id → new value
	entries map[string]assumption.Entry
	values  map[string]money.Decimal
	d       document.Document
	ties    int // roundings that had a tie to break
}

// unitRate makes the document of a seed in a currency with some inputs changed.
func unitRate(t testing.TB, seed uint64, code string, changed map[string]string) (document.Document, *generator) {
	t.Helper()
	c, err := money.FindCurrency(code)
	if err != nil {
		t.Fatal(err)
	}
	g := &generator{t: t, r: rand.New(rand.NewPCG(seed, 7)), c: c, changed: changed,
		entries: map[string]assumption.Entry{}, values: map[string]money.Decimal{}}
	g.d = estimate(t, code, nil)
	g.d.Job.RateBookKind, g.d.Job.ReferencePrice = "unit-rate", ""
	for i := range 3 + g.r.IntN(5) {
		g.item(i)
	}
	for _, it := range g.d.Items {
		g.itemLines(it)
	}
	g.wholeStructure()
	g.carbon()
	for _, id := range sortedKeys(g.entries) {
		g.d.Assumptions = append(g.d.Assumptions, g.entries[id])
	}
	g.totals()
	return g.d, g
}

// pick takes one of the texts.
func (g *generator) pick(texts ...string) string { return texts[g.r.IntN(len(texts))] }

// believed is the likely value of a register entry, which it makes.
func (g *generator) believed(id string, kind assumption.Kind, texts ...string) money.Decimal {
	v := g.pick(texts...) // drawn in any case, so that a change moves no other draw
	if old, ok := g.values[id]; ok {
		return old
	}
	if to, ok := g.changed[id]; ok {
		v = to
	}
	d := decimal(g.t, v)
	x := d.Float64()
	g.values[id] = d
	g.entries[id] = assumption.Entry{ID: id, Kind: kind, Statement: "Invented: " + id, Source: "invented for tests", Owner: "tests",
		Confidence: assumption.Low, Spread: &spread.Spread{Distribution: spread.PERT, Low: 0.8 * x, Likely: x, High: 1.4 * x}, Feeds: []string{"base", "range"}}
	return d
}

// round rounds by a number of places and counts ties.
func (g *generator) round(d money.Decimal, places int) money.Decimal {
	r := d.Round(places)
	if twice := r.Sub(d).Mul(money.FromInt(2)); twice.Sign() != 0 && decimals(twice) <= places {
		g.ties++
	}
	return r
}

// quantity is measured × factors, a float that becomes a decimal once.
func (g *generator) quantity(driver, unit string, places int, measured float64, factors ...document.Factor) document.Quantity {
	x := document.Number(measured).Rounded()
	for _, f := range factors {
		x *= float64(f.Value)
	}
	v, err := money.FromFloat(x, places)
	if err != nil {
		g.t.Fatal(err)
	}
	return document.Quantity{Driver: driver, Unit: unit, Value: v, Measured: document.Number(measured), Factors: factors, Formula: driver + " of the drawing × factors"}
}

// on is the factor 1 and an allowance; of is a factor by itself.
func (g *generator) on(id string, texts ...string) document.Factor {
	return document.Factor{Assumption: id, Value: document.Number(1 + g.believed(id, assumption.Allowance, texts...).Float64())}
}

func (g *generator) of(id string, texts ...string) document.Factor {
	return document.Factor{Assumption: id, Value: document.Number(g.believed(id, assumption.Allowance, texts...).Float64())}
}

func (g *generator) item(i int) {
	class := g.pick("lattice", "simple beams", "tube boom")
	group := fmt.Sprintf("%s %d", g.pick("boom", "gallery", "tower"), g.r.IntN(3))
	it := document.Item{ID: fmt.Sprintf("%s/%d/size/%s", group, i, class), Group: group, Family: "CHS", Treatment: "size", Connection: class,
		Coating: "C5, high", Execution: "EXC3", Marks: []string{fmt.Sprintf("M%d", i)}, Pieces: 1 + g.r.IntN(40)}
	net := float64(1+g.r.IntN(90_000)) / 1000
	if g.r.IntN(3) == 0 {
		net = 90 * g.r.Float64() // all digits
	}
	conn, growth := g.on("allowance/connections/"+class, "0.06", "0.15", "0.115"), g.on("allowance/growth/4", "0.12", "0.25")
	bias, bolts := g.of("allowance/sizing bias", "0.95", "1"), g.on("allowance/bolts", "0.02", "0.025")
	waste := g.on("allowance/waste/tube", "0.09", "0.05")
	hours, site := g.of("norm/shop hours/"+class, "28", "18.5"), g.of("norm/site hours", "14", "22")
	it.Quantities = []document.Quantity{
		g.quantity("net tonnes", "t", 3, net), g.quantity("delivered tonnes", "t", 3, net, bias, conn, growth, bolts),
		g.quantity("purchased tonnes", "t", 3, net, bias, conn, growth, waste), g.quantity("metres", "m", 2, float64(g.r.IntN(50_000))/200),
		g.quantity("pieces", "pcs", 0, float64(it.Pieces)), g.quantity("square metres", "m²", 2, net*23.5, g.on("norm/surface", "0.05", "0.125")),
		g.quantity("kg of zinc", "kg", 1, net*23.5*0.6), g.quantity("shop hours", "h", 1, net, bias, conn, growth, bolts, hours),
		g.quantity("site hours", "h", 1, net, bias, conn, growth, bolts, site), g.quantity("truckloads", "loads", 2, net/25, g.on("norm/load use", "0.3", "0.15")),
	}
	it.Net, it.Delivered, it.Purchased = it.Quantities[0].Value, it.Quantities[1].Value, it.Quantities[2].Value
	it.Length, it.Surface = it.Quantities[3].Measured, document.Number(net*23.5)
	g.d.Items = append(g.d.Items, it)
}

// line prices a quantity: unit price = parts × multipliers, amount = quantity ×
// unit price.
func (g *generator) line(l document.Line) {
	places := g.c.MinorDigits + 2
	if l.Driver == "cost of categories" {
		places = 6
	}
	l.Rate = money.FromInt(1)
	for _, p := range l.RateParts {
		l.Rate = l.Rate.Mul(p.Value)
	}
	product := l.Rate
	for _, m := range l.Multipliers {
		product = product.Mul(m.Value)
	}
	l.UnitPrice = g.round(product.Round(8), places)
	exact, err := money.Product(l.Quantity, l.UnitPrice)
	if err != nil {
		g.t.Fatal(err)
	}
	l.Amount = g.round(exact, g.c.MinorDigits)
	if l.Multipliers == nil {
		l.Multipliers = []document.Multiplier{}
	}
	place := l.Item
	if place == "" {
		place, l.Group = "whole structure", "whole structure"
	}
	l.ID = "line/" + place + "/" + l.RateID[len("rate/"):]
	g.d.Lines = append(g.d.Lines, l)
}

// price is the parts of a rate: its price, and where told, what it is converted by.
func (g *generator) price(rate, exchange string, escalated bool, texts ...string) []document.Part {
	parts := []document.Part{{Name: "price", Value: g.believed("rate/"+rate, assumption.Rate, texts...), Assumption: "rate/" + rate}}
	if exchange != "" {
		id := "exchange/" + exchange
		parts = append(parts, document.Part{Name: "exchange", Value: g.believed(id, assumption.Rate, "1.085", "0.923417", "0.5"), Assumption: id})
	}
	if escalated {
		id := "escalation/steel/base date"
		parts = append(parts, document.Part{Name: "escalation to base date", Value: g.believed(id, assumption.Rate, "1.035", "1.012346", "1"), Assumption: id})
	}
	return parts
}

// times is a multiplier in a scope.
func (g *generator) times(name, scope, subject string, texts ...string) document.Multiplier {
	id := "multiplier/" + name + "/" + scope
	if subject != "" {
		id += "/" + subject
	}
	return document.Multiplier{Name: name, Scope: scope, Subject: subject, Value: g.believed(id, assumption.Multiplier, texts...), Assumption: id}
}

// itemLines prices an item by eight rates and a percentage of two of them.
func (g *generator) itemLines(it document.Item) {
	height := g.times("height", "project", "", "1.15", "1.05", "0.9725")
	skill := g.times("skill", "group", it.Group, "1.1", "1.25", "1")
	rates := []struct {
		id, category, driver string
		parts                []document.Part
		multipliers          []document.Multiplier
	}{
		{"steel", "material", "purchased tonnes", append(g.price("steel", "USD", true, "1180", "912.55"), document.Part{Name: "price break", Value: decimal(g.t, "0.97")}), nil},
		{"shop labour", "fabrication", "shop hours", g.price("shop labour", "", false, "58", "62.5", "61.25"), []document.Multiplier{skill}},
		{"painting", "coating", "square metres", g.price("painting", "", false, "31.5", "18.75"), nil},
		{"zinc", "coating", "kg of zinc", g.price("zinc", "USD", false, "3.1415", "2.5"), nil},
		{"weld tests", "inspection", "metres", g.price("weld tests", "", false, "0.5", "12.345"), nil},
		{"freight", "shipping", "truckloads", g.price("freight", "USD", false, "1850", "975.5"), nil},
		{"site labour", "erection", "site hours", g.price("site labour", "", false, "64", "71.3"), []document.Multiplier{height, skill}},
		{"handling", "erection", "pieces", g.price("handling", "", false, "7.5", "0.125"), []document.Multiplier{height}},
	}
	var of []string
	for _, x := range rates {
		q := it.Quantities[slices.IndexFunc(it.Quantities, func(q document.Quantity) bool { return q.Driver == x.driver })]
		g.line(document.Line{Item: it.ID, Group: it.Group, Category: x.category, Driver: x.driver, Quantity: q.Value, Unit: q.Unit, RateID: "rate/" + x.id,
			RateScope: "rate book", RateFormula: "price", RateParts: x.parts, Multipliers: x.multipliers})
		if x.category == "fabrication" || x.category == "erection" {
			of = append(of, g.d.Lines[len(g.d.Lines)-1].ID)
		}
	}
	g.percentage(it.ID, it.Group, "supervision", "indirects", of, []document.Multiplier{height}, "0.05", "0.0725")
}

// percentage is a line upon the rounded amounts of others.
func (g *generator) percentage(item, group, rate, category string, of []string, multipliers []document.Multiplier, texts ...string) {
	sum, chosen := money.Zero, map[string]bool{}
	for _, id := range of {
		chosen[id] = true
	}
	for _, l := range g.d.Lines {
		if chosen[l.ID] {
			sum = sum.Add(l.Amount)
		}
	}
	g.line(document.Line{Item: item, Group: group, Category: category, Driver: "cost of categories", Quantity: sum, RateID: "rate/" + rate, RateScope: "rate book",
		RateFormula: "fraction", RateParts: []document.Part{{Name: "fraction", Value: g.believed("rate/"+rate, assumption.Rate, texts...), Assumption: "rate/" + rate}},
		Multipliers: multipliers, Of: of})
}

// wholeStructure adds lumps, a percentage of categories and one of everything.
func (g *generator) wholeStructure() {
	for _, lump := range []string{"design", "load test"} {
		g.line(document.Line{Category: "engineering", Driver: "lump", Quantity: money.FromInt(1), Unit: "sum", RateID: "rate/" + lump, RateScope: "rate book",
			RateFormula: "lump", RateParts: g.price(lump, "", true, "18500", "4321.5")})
	}
	var of, all []string
	for _, l := range g.d.Lines {
		if l.Category == "material" || l.Category == "fabrication" {
			of = append(of, l.ID)
		}
		all = append(all, l.ID)
	}
	g.percentage("", "", "project management", "indirects", of, nil, "0.035", "0.0425")
	g.percentage("", "", "margin", "margin", append(all, g.d.Lines[len(g.d.Lines)-1].ID), []document.Multiplier{g.times("appetite", "scheme", "", "1", "0.9")}, "0.08", "0.1025")
}

// carbon multiplies the same quantities by factors.
func (g *generator) carbon() {
	c := &document.Carbon{Mean: 1000, PerTonne: 2500, Method: "invented", Exclusions: []string{"modules B and C"},
		Percentiles: []document.CarbonPoint{{P: 0.5, Value: 990, SE: 3}, {P: 0.9, Value: 1300, SE: 5}}}
	sums := map[string]money.Decimal{}
	for _, it := range g.d.Items {
		for _, x := range []struct{ module, driver, factor string }{{"A1-A3", "purchased tonnes", "1130"}, {"A4", "truckloads", "85.5"}, {"A5", "site hours", "2.5"}} {
			q := it.Quantities[slices.IndexFunc(it.Quantities, func(q document.Quantity) bool { return q.Driver == x.driver })]
			id := "carbon/" + x.module
			l := document.CarbonLine{ID: "carbon/" + it.ID + "/" + x.module, Item: it.ID, Group: it.Group, Module: x.module, Driver: x.driver, Quantity: q.Value,
				Unit: q.Unit, FactorID: id, Factor: g.believed(id, assumption.Allowance, x.factor), Assumptions: []string{id}}
			l.Amount = g.round(l.Quantity.Mul(l.Factor), 0)
			sums[x.module] = sums[x.module].Add(l.Amount)
			c.Total = c.Total.Add(l.Amount)
			c.Lines = append(c.Lines, l)
		}
	}
	for _, m := range []string{"A1-A3", "A4", "A5"} {
		c.Modules = append(c.Modules, document.CarbonModule{Module: m, Amount: sums[m]})
	}
	g.d.Carbon = c
}

// totals adds up categories, groups and base.
func (g *generator) totals() {
	groups, categories := map[string]document.Group{}, map[string]money.Decimal{}
	for _, it := range g.d.Items {
		x := groups[it.Group]
		x.Members, x.Pieces = x.Members+len(it.Marks), x.Pieces+it.Pieces
		x.Net, x.Delivered, x.Purchased = x.Net.Add(it.Net), x.Delivered.Add(it.Delivered), x.Purchased.Add(it.Purchased)
		groups[it.Group] = x
		t := &g.d.Totals
		t.Net, t.Delivered, t.Purchased = t.Net.Add(it.Net), t.Delivered.Add(it.Delivered), t.Purchased.Add(it.Purchased)
	}
	for _, l := range g.d.Lines {
		x := groups[l.Group]
		x.Amount = x.Amount.Add(l.Amount)
		groups[l.Group] = x
		categories[l.Category] = categories[l.Category].Add(l.Amount)
		g.d.Totals.Base = g.d.Totals.Base.Add(l.Amount)
	}
	for _, name := range sortedKeys(groups) {
		x := groups[name]
		x.Group = name
		g.d.Groups = append(g.d.Groups, x)
	}
	for _, name := range sortedKeys(categories) {
		g.d.Categories = append(g.d.Categories, document.Category{Category: name, Amount: categories[name]})
	}
	fillRange(g.t, &g.d, g.c)
}

// fresh returns a new value for an input, other than its old one.
func fresh(old money.Decimal) string {
	x, _ := strconv.ParseFloat(old.String(), 64)
	return strconv.FormatFloat(x*1.25+0.0125, 'f', 4, 64)
}
