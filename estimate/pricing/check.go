package pricing

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

// checkRates reports what no rate may be, whatever it is used for. A rate book is
// checked when it is read; this is the second lock on the same door.
func (p *pricer) checkRates() {
	first := map[string]ratebook.Rate{}
	for _, r := range p.rates {
		id := p.entry(r)
		want := func(ok bool, found, accepted string) {
			if !ok {
				p.fault(fmt.Errorf("%s: found %s; accepted: %s", id, found, accepted))
			}
		}
		want(slices.Contains(ratebook.Drivers(), r.Driver), fmt.Sprintf("the driver %.40q", string(r.Driver)), "a driver of the take-off such as delivered tonnes")
		if o, ok := first[r.ID]; ok {
			want(o.Category == r.Category, "it in the categories "+min(o.Category, r.Category)+" and "+max(o.Category, r.Category), "one category for all rates of one id")
			want(o.Driver == r.Driver, "it with the drivers "+string(min(o.Driver, r.Driver))+" and "+string(max(o.Driver, r.Driver)), "one driver for all rates of one id")
		}
		first[r.ID] = r
		err := r.Spread.Validate()
		want(err == nil, fmt.Sprint(err), "a spread whose low, likely and high are in order")
		if err == nil {
			want(r.Spread.Base() >= 0, fmt.Sprintf("the likely price %v", r.Spread.Base()), "a price of zero or more")
		}
		want(!r.OfReference || p.reference.Sign() > 0, "the reference price "+p.reference.String(), "a reference price above zero for a multiple of it")
		p.checkTerms(r, want)
	}
	for _, c := range p.exchange {
		p.checkConversion(c, exchangePlaces)
	}
	for _, cs := range p.escalation {
		for _, c := range cs {
			p.checkConversion(c, ratePlaces)
		}
	}
}

// checkTerms checks the terms of purchase of a rate.
func (p *pricer) checkTerms(r ratebook.Rate, want func(ok bool, found, accepted string)) {
	for _, b := range r.Breaks {
		want(b.Factor.Sign() > 0 && b.Factor.Round(ratePlaces).Equal(b.Factor), "the price break "+b.Factor.String(), fmt.Sprintf("a factor above zero of at most %d decimals", ratePlaces))
	}
	want(slices.IsSortedFunc(r.Breaks, func(a, b ratebook.Break) int { return a.From.Cmp(b.From) }), "price breaks out of order", "quantities that rise")
	want(r.MinimumCharge.Sign() >= 0, "the minimum charge "+r.MinimumCharge.String(), "zero or more")
	want(r.MinimumOrder.Sign() >= 0, "the minimum order "+r.MinimumOrder.String(), "zero or more")
	counted := r.Driver != ratebook.Lump && r.Driver != ratebook.CostOf
	want(counted || r.MinimumOrder.IsZero(), "a minimum order upon the driver "+string(r.Driver), "a minimum charge, or a driver that is counted")
}

func (p *pricer) checkConversion(c Conversion, places int) {
	if !(c.Value.Sign() > 0 && c.Value.Round(places).Equal(c.Value)) {
		p.fault(fmt.Errorf("%s: found the %s %s; accepted: a factor above zero of at most %d decimals", c.ID, c.Name, c.Value, places))
	}
	if err := c.Spread.Validate(); err != nil {
		p.fault(fmt.Errorf("%s: %w", c.ID, err))
	} else if !(c.Spread.Base() > 0) {
		p.fault(fmt.Errorf("%s: found the likely value %v; accepted: above zero", c.ID, c.Spread.Base()))
	}
}

// normed are the drivers that norms make of mass. A take-off that has none of them
// for steel was counted with a book that lacks norms.
var normed = []ratebook.Driver{ratebook.ShopHours, ratebook.SiteHours, ratebook.Truckloads, ratebook.TonneKilometres, ratebook.CraneDays, ratebook.Weeks}

// checkLacking reports a rate whose driver the take-off lacks altogether, although
// the rate selects an item that has mass.
func (p *pricer) checkLacking(c *charge) error {
	if !(c.massive && slices.Contains(normed, c.driver)) || slices.ContainsFunc(normed, func(d ratebook.Driver) bool { return p.has[d] }) {
		return nil
	}
	var known []string
	for _, d := range ratebook.Drivers() {
		if p.has[d] {
			known = append(known, string(d))
		}
	}
	return fmt.Errorf("%s: found the driver %s, which the take-off lacks; accepted: norms in the rate book that make it, or one of the drivers %q", c.entry, c.driver, known)
}

// mostNamed is how many items, and how many reasons, an error lists.
const mostNamed = 5

// nothing is the error of a job of which no line is made.
func (p *pricer) nothing() error {
	ids := make([]string, len(p.items))
	for i := range p.items {
		ids[i] = fmt.Sprintf("%q", p.items[i].ID)
	}
	var reasons []string
	for _, n := range p.sortedNotes() {
		if n.Subject != "" {
			reasons = append(reasons, n.Subject+": "+n.Message)
		}
	}
	if len(reasons) == 0 {
		reasons = []string{"the book has no rate for " + listed(p.categories)}
	}
	found := "no items"
	if len(ids) > 0 {
		found = "the items " + listed(ids)
	}
	return fmt.Errorf("pricing: no line was made, so that there is nothing to price: found %s, and of the rate book in %s %s; accepted: an item with a quantity above zero that a rate of the book is for, or a lump that applies",
		found, p.book, listed(reasons))
}

// listed joins the first texts and counts the rest.
func listed(texts []string) string {
	if len(texts) <= mostNamed {
		return strings.Join(texts, ", ")
	}
	return fmt.Sprintf("%s and %d more", strings.Join(texts[:mostNamed], ", "), len(texts)-mostNamed)
}

// triggered reports whether a lump applies to the job.
func (f Facts) triggered(t ratebook.Trigger) bool {
	meets := func(wanted, given []string) bool {
		return len(wanted) == 0 || slices.ContainsFunc(wanted, func(w string) bool { return slices.Contains(given, w) })
	}
	return meets(t.Kinds, f.Kinds) && meets(t.Executions, f.Executions) && meets(t.SiteConditions, f.SiteConditions) &&
		(!t.Permits || f.Permits > 0) && (t.DeliveredAbove.IsZero() || f.Delivered.Cmp(t.DeliveredAbove) > 0)
}

// one is the quantity of a lump.
var one = money.FromInt(1)
