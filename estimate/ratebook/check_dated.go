package ratebook

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/money"
)

// emissionDrivers are those that an emission can be per unit of: what is counted.
func emissionDrivers() []string {
	return slices.DeleteFunc(driverNames(), func(d string) bool { return d == string(CostOf) || d == string(Lump) })
}

// carbon checks the emission factors.
func (c *checker) carbon(b Book) {
	seen := map[string]bool{}
	for i, f := range b.Carbon {
		p := fmt.Sprintf("/carbon/%d", i)
		c.name(p+"/id", f.ID)
		c.want(!seen[f.ID], p+"/id", f.ID, "an id that no other factor has")
		seen[f.ID] = true
		c.oneOf(p+"/module", f.Module, []string{"A1-A3", "A4", "A5"})
		c.oneOf(p+"/driver", string(f.Driver), emissionDrivers())
		c.figure(p, f.Figure, 0, 1e9)
		c.selection(p+"/select", f.Select, b)
	}
}

// exchange checks the exchange rates.
func (c *checker) exchange(b Book) {
	seen := map[string]bool{b.Currency: true}
	for i, x := range b.Exchange {
		p := fmt.Sprintf("/exchange/%d", i)
		_, err := money.FindCurrency(x.Currency)
		c.want(err == nil, p+"/currency", x.Currency, "an ISO 4217 code such as EUR, USD, JPY or KWD")
		c.want(!seen[x.Currency], p+"/currency", x.Currency, "each currency once, and not that of the book")
		seen[x.Currency] = true
		c.figureTo(p, x.Figure, 1e-6, 1e6, datedPlaces)
		c.date(p+"/date", x.Date)
	}
}

// indices checks the indices: names and categories once, dates rising.
func (c *checker) indices(indices []Index) {
	names, covered := map[string]bool{}, map[string]string{}
	for i, x := range indices {
		p := fmt.Sprintf("/indices/%d", i)
		c.name(p+"/name", x.Name)
		c.want(!names[x.Name], p+"/name", x.Name, "a name that no other index has")
		names[x.Name] = true
		c.want(len(x.Categories) > 0, p+"/categories", "", "the categories that follow the index")
		for j, cat := range x.Categories {
			q := fmt.Sprintf("%s/categories/%d", p, j)
			c.oneOf(q, cat, Categories())
			other, again := covered[cat]
			c.want(!again, q, cat, "a category that follows no other index; it follows “"+other+"”")
			covered[cat] = x.Name
		}
		c.values(p, x.Values)
		if x.Growth != nil {
			c.figureTo(p+"/growth", *x.Growth, -0.9, 10, datedPlaces)
		}
		c.text(p+"/source", x.Source)
	}
}

func (c *checker) values(p string, values []IndexValue) {
	c.want(len(values) > 0, p+"/values", "", "at least one dated value")
	last := ""
	for i, v := range values {
		q := fmt.Sprintf("%s/values/%d", p, i)
		if c.date(q+"/date", v.Date) {
			c.want(v.Date > last, q+"/date", v.Date, "a date after that before it, "+last)
			last = v.Date
		}
		ok := v.Value.Sign() > 0 && v.Value.Cmp(money.FromInt(1e9)) <= 0 && v.Value.Round(datedPlaces).Equal(v.Value)
		c.want(ok, q+"/value", v.Value.String(), "above zero, with at most 6 decimals")
	}
}

func (c *checker) spendMonths(months map[string]int) {
	for _, cat := range slices.Sorted(maps.Keys(months)) {
		p := at("/spend_months", cat)
		c.want(slices.Contains(Categories(), cat), p, cat, strings.Join(Categories(), ", "))
		c.want(months[cat] >= -240 && months[cat] <= 240, p, fmt.Sprint(months[cat]), "-240 to 240 months after the spend date")
	}
}
