package trace

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
)

// way is one way in which members may make a quantity.
type way struct {
	certain bool // no other way is there: where its numbers differ, that is a fault
	kind    Kind
	formula string
	text    string
	terms   []value
	total   between
	kids    []kid
}

// way is the sum over members that a quantity should be; none where only the
// take-off knows.
func (t *Tracer) way(it *document.Item, q *document.Quantity) way {
	tonnes := strings.HasSuffix(q.Driver, "tonnes")
	switch {
	case it.Treatment == "concrete":
		return t.over(it, "Σ pieces × m³ of concrete", t.volume).sure()
	case it.Treatment == "joint":
		return t.jointWay(it, q)
	case q.Driver == "metres":
		return t.over(it, "Σ pieces × length", t.length).sure()
	case q.Driver == "pieces", q.Driver == "crane days":
		w := t.over(it, "Σ pieces", func(m *document.Member) (value, kid) { return whole(m.Quantity), t.pieces(m) })
		w.certain = q.Driver == "pieces" // lifts are of delivered parts, of which a piece may have several
		return w
	case planned(q):
		return t.shares(it)
	case q.Driver == "weeks":
		return t.perCrew(t.mass(it))
	}
	w := t.mass(it)
	w.certain = tonnes || q.Driver == "shop hours" || q.Driver == "site hours"
	return w
}

// sure is a way beside which there is no other.
func (w way) sure() way {
	w.certain = true
	return w
}

// jointWay is the joints that rows count, beside which the take-off may count site
// splices.
func (t *Tracer) jointWay(it *document.Item, q *document.Quantity) way {
	w := t.over(it, "Σ joints counted by the rows", func(m *document.Member) (value, kid) { return t.joints(jointKind(it), m) })
	if strings.HasSuffix(q.Driver, "tonnes") || q.Driver == "tonne-kilometres" {
		w = w.divided(1000, "joints ÷ 1000, so that kg each make tonnes")
	}
	return w
}

// mass is the drawn mass of an item, which most of its quantities begin with.
func (t *Tracer) mass(it *document.Item) way {
	return t.over(it, "Σ net mass of the members", func(m *document.Member) (value, kid) { return printed(m.Net), t.kid(rowID(m)) }).
		divided(1000, "Σ net mass of the members ÷ 1000")
}

// summed names a sum over the rows of an item.
type summed struct{ item, formula string }

// over sums a measure over the rows of an item, once for all quantities that begin
// with it.
func (t *Tracer) over(it *document.Item, formula string, measure func(*document.Member) (value, kid)) way {
	if known, ok := t.sums.Load(summed{it.ID, formula}); ok {
		return known.(way)
	}
	w := over(t.holds[it.ID], formula, measure)
	t.sums.Store(summed{it.ID, formula}, w)
	return w
}

// over sums a measure over rows.
func over(rows []*document.Member, formula string, measure func(*document.Member) (value, kid)) way {
	w := way{kind: Sum, formula: formula, total: sum()}
	for _, m := range rows {
		v, k := measure(m)
		if v.rat == nil {
			continue
		}
		w.terms, w.kids = append(w.terms, v), append(w.kids, k)
		w.total.include(v)
	}
	w.text = sumText(w.terms, "")
	return w
}

// divided is the sum over a number, which has no uncertainty.
func (w way) divided(n int, formula string) way {
	w.total, _ = w.total.over(of(whole(n)))
	if len(w.terms) > 1 && len(w.terms) <= mostTerms {
		w.text = "(" + w.text + ")"
	}
	w.text += fmt.Sprintf(" ÷ %d", n)
	if formula != "" {
		w.formula = formula
	}
	return w
}

// perCrew is the sum over the hours that a crew works in a week; nothing where the
// register lacks one of them.
func (t *Tracer) perCrew(w way) way {
	crew, hours := t.entries["norm/crew"], t.entries["norm/week hours"]
	if crew == nil || hours == nil || crew.Spread == nil || hours.Spread == nil {
		return way{}
	}
	c, h := document.Number(crew.Spread.Base()), document.Number(hours.Spread.Base())
	total, ok := w.total.over(product(printed(c), printed(h)))
	if !ok {
		return way{}
	}
	w.total, w.formula = total, "Σ net mass of the members ÷ 1000 ÷ (persons × hours of a person per week)"
	w.text += fmt.Sprintf(" ÷ (%s × %s)", text(c), text(h))
	return w
}
