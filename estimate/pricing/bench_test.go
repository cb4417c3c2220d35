package pricing

import (
	"fmt"
	"testing"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// large is a job of n items with eight rates, two of them percentages.
func large(tb testing.TB, n int) ([]takeoff.Item, Rates) {
	tb.Helper()
	var items []takeoff.Item
	for i := range n {
		it := item(tb, fmt.Sprintf("Boom/CHS/size/%05d", i), hours, fmt.Sprintf("%d.%d", 50+i%97, i%10), tonnes, fmt.Sprintf("2.%03d", i%1000),
			string(ratebook.PurchasedTonnes), fmt.Sprintf("2.%03d", (i+100)%1000), string(ratebook.SquareMetres), fmt.Sprintf("41.%02d", i%100))
		it.Group = fmt.Sprintf("G%d", i%20)
		items = append(items, it)
	}
	r := euros(tb,
		rate("steel", ratebook.Material, ratebook.PurchasedTonnes, 900), rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60.5),
		rate("paint", ratebook.Coating, ratebook.SquareMetres, 28.4), rate("haul", ratebook.Shipping, ratebook.DeliveredTonnes, 95),
		rate("site", ratebook.Erection, ratebook.DeliveredTonnes, 780), rate("consumables", ratebook.Fabrication, ratebook.DeliveredTonnes, 40),
		rate("inspection", ratebook.Inspection, ratebook.CostOf, 0.05, ratebook.Fabrication),
		rate("margin", ratebook.Margin, ratebook.CostOf, 0.08, ratebook.Categories()[:9]...))
	r.Multipliers = []ratebook.Multiplier{project("over water", 1.15, ratebook.Erection), project("height", 1.1, ratebook.Erection, ratebook.Coating)}
	return items, r
}

func benchmark(b *testing.B, n int) {
	items, r := large(b, n)
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
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*lines), "ns/line")
}

func BenchmarkPrice2000Lines(b *testing.B)  { benchmark(b, 250) }
func BenchmarkPrice80000Lines(b *testing.B) { benchmark(b, 10_000) }

// 10,000 members with a multiplier each, in groups of their own: the search for
// what applies must not go through all of them for each.
func BenchmarkPriceMemberMultipliers(b *testing.B) {
	items, r := large(b, 10_000)
	for i := range items {
		m := project("own", 1.05, ratebook.Erection)
		m.Scope, m.Subject = ratebook.MemberScope, items[i].Marks[0]
		r.Multipliers = append(r.Multipliers, m)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Price(items, r); err != nil {
			b.Fatal(err)
		}
	}
}

// The starting book of unit rates over 400 items, as many as a job of 10,000 rows
// may have.
func BenchmarkPriceUnitRates(b *testing.B) {
	book := ratebook.UnitRate()
	var items []takeoff.Item
	for i := range 400 {
		it := item(b, fmt.Sprintf("I%03d", i))
		it.Group = fmt.Sprintf("G%02d", i%40)
		it.Waste = []string{ratebook.WasteSections, ratebook.WasteTube, ratebook.WastePlate}[i%3]
		it.Execution = []string{"EXC2", "EXC3"}[i%2]
		it.Coating = []string{"", "galvanised", "C3 medium"}[i%3]
		for _, d := range ratebook.Drivers() {
			if d != ratebook.Lump && d != ratebook.CostOf && d != ratebook.CubicMetres {
				it.Quantities = append(it.Quantities, measure(b, d, fmt.Sprintf("%.*f", d.Places(), 3.0+float64(i%97))))
			}
		}
		items = append(items, it)
	}
	r := euros(b, book.PricedRates()...)
	r.Multipliers = append(book.Multipliers, project("height", 1.1, ratebook.Erection))
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
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*lines), "ns/line")
}
