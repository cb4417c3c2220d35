package ratebook

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/money"
)

func wastes() []string     { return []string{WasteSections, WasteTube, WastePlate} }
func treatments() []string { return []string{"size", "check", "not sized", "joint", "concrete"} }
func executions() []string {
	return []string{"EXC1", "EXC2", "EXC3", "EXC4", "AISC static", "AISC cyclic"}
}

// countedJoints is the connection class of rows whose joints are counted: a book has
// no allowance for it, and may have hours for the steel between the joints.
const countedJoints = "counted joints"

func driverNames() []string {
	var out []string
	for _, d := range Drivers() {
		out = append(out, string(d))
	}
	return out
}

// rates checks every rate, and how they stand together.
func (c *checker) rates(b Book) {
	c.want(len(b.Rates) > 0, "/rates", "", "at least one rate")
	type place struct {
		id, subject string
		scope       Scope
	}
	seen, first := map[place]int{}, map[string]int{}
	straight := slices.Clone(b.Rates) // without those of their own category, which have their own fault
	for i, r := range b.Rates {
		p := fmt.Sprintf("/rates/%d", i)
		c.rate(p, r, b)
		key := place{r.ID, r.Subject, r.scope()}
		j, again := seen[key]
		c.want(!again, p+"/id", r.ID, fmt.Sprintf("an id that no other rate of the same scope and subject has; /rates/%d has it", j))
		seen[key] = i
		if k, ok := first[r.ID]; !ok {
			first[r.ID] = i
		} else if o := b.Rates[k]; !again {
			c.want(o.Category == r.Category, p+"/category", r.Category, fmt.Sprintf("%s, as /rates/%d of the same id has it", o.Category, k))
			c.want(o.Driver == r.Driver, p+"/driver", string(r.Driver), fmt.Sprintf("%s, as /rates/%d of the same id has it", o.Driver, k))
		}
		straight[i].Of = slices.DeleteFunc(slices.Clone(r.Of), func(of string) bool { return of == r.Category })
	}
	_, err := CategoryOrder(straight)
	var cycle *CycleError
	if errors.As(err, &cycle) {
		c.want(false, "/rates", strings.Join(cycle.Categories, " → "), "percentages that do not come back to their own category")
	}
}

// scope returns the scope, blank being that of the rate book.
func (r *Rate) scope() Scope {
	if r.Scope == "" {
		return BookScope
	}
	return r.Scope
}

func (c *checker) rate(p string, r Rate, b Book) {
	c.name(p+"/id", r.ID)
	c.oneOf(p+"/category", r.Category, Categories())
	c.oneOf(p+"/driver", string(r.Driver), driverNames())
	high := maxPrice
	switch {
	case r.OfReference:
		high = maxRatio
		c.want(b.ReferencePrice.Sign() > 0 && r.Driver != CostOf, p+"/of_reference", "true", "false, or a /reference_price above zero and a driver other than "+string(CostOf))
	case r.Driver == CostOf:
		high = maxAllowance
	}
	c.figure(p, r.Figure, 0, high)
	c.rateScope(p, r)
	c.rateCurrency(p, r, b)
	c.selection(p+"/select", r.Select, b)
	c.of(p, r)
	c.trigger(p, r)
	c.breaks(p, r)
	minor := figurePlaces
	if cur, err := money.FindCurrency(r.currency(b)); err == nil {
		minor = cur.MinorDigits
	}
	c.decimal(p+"/minimum_charge", r.MinimumCharge, minor)
	c.want(len([]rune(r.Note)) <= 2000, p+"/note", r.Note, "at most 2000 characters")
	c.decimal(p+"/minimum_order", r.MinimumOrder, r.Driver.Places())
	c.want(r.MinimumOrder.Sign() <= 0 || r.bought(), p+"/minimum_order", r.MinimumOrder.String(), "nothing for the driver "+string(r.Driver))
}

// bought reports whether the driver is a quantity that more or less of can be
// bought.
func (r *Rate) bought() bool { return r.Driver != Lump && r.Driver != CostOf }

func (r *Rate) currency(b Book) string {
	if r.Currency == "" {
		return b.Currency
	}
	return r.Currency
}

func (c *checker) rateScope(p string, r Rate) {
	ok := r.scope().named() || r.scope() == BookScope
	c.want(ok, p+"/scope", string(r.Scope), "member, group, family or rate book")
	if ok {
		c.subject(p, r.scope(), r.Subject)
	}
	if r.Driver == Lump {
		c.want(!ok || r.scope() == BookScope, p+"/scope", string(r.Scope), "rate book: a lump is for the whole structure")
		c.want(r.Select.blank(), p+"/select", "a selection", "nothing: a lump is for the whole structure; /trigger says when it applies")
	}
}

func (c *checker) rateCurrency(p string, r Rate, b Book) {
	if r.Currency == "" {
		return
	}
	if r.OfReference || r.Driver == CostOf {
		c.want(false, p+"/currency", r.Currency, "nothing: the figure is no price")
		return
	}
	if _, err := money.FindCurrency(r.Currency); err != nil {
		c.want(false, p+"/currency", r.Currency, "an ISO 4217 code such as EUR, USD, JPY or KWD")
		return
	}
	ok := r.Currency == b.Currency || slices.ContainsFunc(b.Exchange, func(x Exchange) bool { return x.Currency == r.Currency })
	c.want(ok, p+"/currency", r.Currency, "the currency of the book, or one that /exchange has a rate for")
}

func (c *checker) of(p string, r Rate) {
	if r.Driver != CostOf {
		c.want(len(r.Of) == 0, p+"/of", strings.Join(r.Of, ", "), "nothing: the driver is not "+string(CostOf))
		return
	}
	c.want(len(r.Of) > 0, p+"/of", "", "the categories that it is a fraction of")
	for i, of := range r.Of {
		q := fmt.Sprintf("%s/of/%d", p, i)
		c.oneOf(q, of, Categories())
		c.want(of != r.Category, q, of, "another category than its own: "+of+" → "+of+" is a circle")
		c.want(!slices.Contains(r.Of[:i], of), q, of, "each category once")
	}
}

func (c *checker) trigger(p string, r Rate) {
	t := r.Trigger
	c.want(r.Driver == Lump || t.blank(), p+"/trigger", "a trigger", "nothing: only lumps have triggers")
	for i, k := range t.Kinds {
		c.text(fmt.Sprintf("%s/trigger/kinds/%d", p, i), k)
	}
	for i, e := range t.Executions {
		c.oneOf(fmt.Sprintf("%s/trigger/executions/%d", p, i), e, executions())
	}
	for i, s := range t.SiteConditions {
		c.oneOf(fmt.Sprintf("%s/trigger/site_conditions/%d", p, i), s, siteConditions())
	}
	c.decimal(p+"/trigger/delivered_above_t", t.DeliveredAbove, DeliveredTonnes.Places())
}

func (t Trigger) blank() bool {
	return len(t.Kinds)+len(t.Executions)+len(t.SiteConditions) == 0 && !t.Permits && t.DeliveredAbove.IsZero()
}

func (c *checker) breaks(p string, r Rate) {
	c.want(len(r.Breaks) == 0 || r.bought(), p+"/breaks", fmt.Sprintf("%d breaks", len(r.Breaks)), "nothing for the driver "+string(r.Driver))
	for i, b := range r.Breaks {
		q := fmt.Sprintf("%s/breaks/%d", p, i)
		c.decimal(q+"/from", b.From, r.Driver.Places())
		c.want(i == 0 || r.Breaks[i-1].From.Cmp(b.From) < 0, q+"/from", b.From.String(), "more than in the break before it")
		ok := b.Factor.Sign() > 0 && b.Factor.Cmp(money.FromInt(maxFactor)) <= 0 && b.Factor.Round(figurePlaces).Equal(b.Factor)
		c.want(ok, q+"/factor", b.Factor.String(), "above 0 to 100, with at most 4 decimals")
	}
}

func (s Selection) blank() bool {
	return len(s.Treatments)+len(s.Families)+len(s.Connections)+len(s.Wastes)+len(s.Coatings)+len(s.Executions) == 0
}

// selection checks what a rate or a carbon factor selects. A blank coating or
// execution class stands for items that name none.
func (c *checker) selection(p string, s Selection, b Book) {
	list := func(name string, found, accepted []string) {
		for i, f := range found {
			q := fmt.Sprintf("%s/%s/%d", p, name, i)
			if accepted != nil {
				c.oneOf(q, f, accepted)
			}
			c.want(!slices.Contains(found[:i], f), q, f, "each value once")
		}
	}
	list("treatments", s.Treatments, treatments())
	list("families", s.Families, nil)
	list("connections", s.Connections, append(b.ConnectionClasses(), countedJoints))
	list("wastes", s.Wastes, wastes())
	list("coatings", s.Coatings, nil)
	list("executions", s.Executions, append(executions(), ""))
	for i, f := range s.Families {
		c.text(fmt.Sprintf("%s/families/%d", p, i), f)
	}
}
