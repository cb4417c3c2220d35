package takeoff

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/ratebook"
)

// Count gathers pieces into items, sorted by id; the order of the pieces does not
// matter. Rows whose connection class, waste or joints the book does not know are
// reported together in a *FaultsError.
func Count(pieces []Piece, a Allowances, s Settings) ([]Item, error) {
	c := &counter{a: a, s: s, sums: map[string]sum{}}
	for _, p := range byMark(pieces) {
		c.add(p)
	}
	if err := faultsError(c.faults); err != nil {
		return nil, err
	}
	var items []Item
	for _, id := range sortedKeys(c.sums) {
		b := builder{}
		item := c.sums[id].finish(&b, a, s)
		if b.err != nil {
			return nil, fmt.Errorf("take-off of %s: %w", id, b.err)
		}
		slices.Sort(item.Marks)
		item.Quantities = b.list
		if len(item.Quantities) > 0 || item.Treatment != Joint {
			items = append(items, item)
		}
	}
	return items, nil
}

// byMark returns the pieces in the order of their marks, so that sums of floats
// come out alike whatever the order of the rows.
func byMark(pieces []Piece) []Piece {
	sorted := slices.Clone(pieces)
	slices.SortStableFunc(sorted, func(a, b Piece) int { return strings.Compare(a.Member.Mark, b.Member.Mark) })
	return sorted
}

// counter gathers rows into sums by item id.
type counter struct {
	a      Allowances
	s      Settings
	sums   map[string]sum
	faults []Fault
}

// sum is an item in the making; finish puts its quantities into the builder.
type sum interface {
	finish(b *builder, a Allowances, s Settings) Item
}

func (c *counter) fault(p Piece, problem, remedy string) {
	c.faults = append(c.faults, Fault{p.Member.Mark, problem, remedy})
}

func (c *counter) add(p Piece) {
	if p.Member.Concrete > 0 {
		c.addConcrete(p)
		if p.Net() == 0 {
			return // concrete alone
		}
	}
	c.check(p)
	c.addSteel(p)
	c.addJoints(p)
}

// check reports what the book lacks for the row.
func (c *counter) check(p Piece) {
	a, class := c.a, c.a.class(p)
	if _, ok := a.Connections[class]; !ok && !a.Counted(p) {
		c.fault(p, fmt.Sprintf("the rate book has no connection class %q", class), "one of "+names(a.Connections))
	}
	if _, ok := a.Waste[p.Waste]; !ok {
		c.fault(p, fmt.Sprintf("the rate book has no waste allowance for %q", p.Waste), "one of "+names(a.Waste))
	}
	if a.Norms == nil || a.Counted(p) { // a norm for the steel between counted joints is optional
		return
	}
	for _, n := range []struct {
		what string
		list map[string]Allowance
	}{{"shop hours", a.Norms.ShopHours}, {"site hours", a.Norms.SiteHours}} {
		if _, ok := n.list[class]; !ok {
			c.fault(p, fmt.Sprintf("the norms of the rate book have no %s for %q", n.what, class), "add them to the book; it has "+names(n.list))
		}
	}
}

func names[V any](m map[string]V) string { return strings.Join(sortedKeys(m), ", ") }

// itemID joins the parts of an id and what sets the row apart: a coating or an
// execution class other than the job's, and the mark where it is split off.
func (c *counter) itemID(p Piece, parts ...string) string {
	if own := p.Member.Coating; own != "" && own != c.s.Coating {
		parts = append(parts, "coating "+own)
	}
	if own := p.Member.ExecutionClass; own != "" && own != c.s.Execution {
		parts = append(parts, "execution "+own)
	}
	if p.Split != "" {
		parts = append(parts, p.Member.Mark)
	}
	for i, s := range parts {
		parts[i] = assumption.Segment(s)
	}
	return strings.Join(parts, "/")
}

// item starts an item with what it takes from its first row.
func (c *counter) item(id string, p Piece) Item {
	return Item{ID: id, Group: p.Member.Group, Coating: c.s.coating(p), Execution: c.s.execution(p)}
}

// builder collects the quantities of one item in the order in which they are put,
// which is that of ratebook.Drivers.
type builder struct {
	list  []Quantity
	fixed []string // ids that every quantity depends on
	err   error
}

// put adds a quantity, unless it rounds to zero.
func (b *builder) put(d ratebook.Driver, measured float64, factors []Allowance, formula string, fixed ...string) {
	q, err := newQuantity(d, measured, factors, formula, unique(slices.Concat(b.fixed, fixed)))
	switch {
	case err != nil && b.err == nil:
		b.err = err
	case err == nil && q.Value.Sign() > 0:
		b.list = append(b.list, q)
	}
}
