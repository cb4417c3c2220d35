package trace

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/document"
)

// planned tells whether a quantity is the stock of cutting plans.
func planned(q *document.Quantity) bool {
	return q.Driver == "purchased tonnes" && strings.Contains(q.Formula, "cutting plan")
}

// bar names what the rows cut from one plan share.
type bar struct{ section, grade string }

// shares is the stock of the plans by the net mass of the item's rows that are cut
// from each; nothing where a row has no plan.
func (t *Tracer) shares(it *document.Item) way {
	const formula = "Σ over plans: net mass of the rows here ÷ that of all rows cut from the plan × stock × kg/m ÷ 1000"
	if known, ok := t.sums.Load(summed{it.ID, formula}); ok {
		return known.(way)
	}
	w := way{kind: Sum, formula: formula, total: sum()}
	var words []string
	for _, rows := range byBar(t.holds[it.ID]) {
		b := bar{rows[0].Section, rows[0].Grade}
		p, all := t.plan[b], t.cut[b]
		if p == nil {
			return way{}
		}
		here := over(rows, "", func(m *document.Member) (value, kid) { return printed(m.Net), t.kid(rowID(m)) })
		share, ok := here.total.times(product(printed(p.Stock), printed(rows[0].LineMass))).over(product(printed(all), whole(1000)))
		if !ok {
			return way{}
		}
		w.total = w.total.add(share, 1)
		w.terms, w.kids = append(w.terms, here.terms...), append(w.kids, here.kids...)
		words = append(words, fmt.Sprintf("(%s) ÷ %s × %s × %s ÷ 1000", here.text, with(text(all), "kg"), with(text(p.Stock), "m"), with(text(rows[0].LineMass), "kg/m")))
		if len(here.terms) > mostTerms {
			words = append(words, "")
		}
	}
	if !slices.Contains(words, "") && len(words) <= mostTerms {
		w.text = strings.Join(words, " + ")
	}
	t.sums.Store(summed{it.ID, formula}, w)
	return w
}

// byBar parts rows by the plan that they are cut from, in their order.
func byBar(rows []*document.Member) [][]*document.Member {
	at := map[bar]int{}
	var out [][]*document.Member
	for _, m := range rows {
		b := bar{m.Section, m.Grade}
		i, ok := at[b]
		if !ok {
			i = len(out)
			at[b], out = i, append(out, nil)
		}
		out[i] = append(out[i], m)
	}
	return out
}

// plans are the cutting plans that a purchased mass rests on.
func (t *Tracer) plans(it *document.Item, q *document.Quantity) []kid {
	if !planned(q) {
		return nil
	}
	var out []kid
	seen := map[bar]bool{}
	for _, m := range t.holds[it.ID] {
		b := bar{m.Section, m.Grade}
		if p := t.plan[b]; p != nil && !seen[b] {
			seen[b] = true
			out = append(out, kid{quantityID(it.ID, q.Driver) + "#cutting " + b.section + " " + b.grade, func() draft { return t.stock(p, m.LineMass) }})
		}
	}
	return out
}

// stock is what is bought of one section and grade.
func (t *Tracer) stock(p *document.CuttingPlan, mass document.Number) draft {
	d := draft{Node: Node{What: fmt.Sprintf("Stock bought of %s %s, by the cutting plan (%s).", p.Section, p.Grade, p.Method), Value: p.Purchased.String(), Unit: "t",
		Kind: Product, Formula: "Σ bars × length × kg/m ÷ 1000", Rounding: fmt.Sprintf("to %s, %s", placed(places(p.Purchased)), halfAway)}}
	var words []string
	total := sum()
	for _, b := range p.Bars {
		words = append(words, fmt.Sprintf("%d × %s", b.Count, with(text(b.Length), "m")))
		total = total.add(product(whole(b.Count), printed(b.Length)), 1)
	}
	d.Arithmetic = fmt.Sprintf("(%s) × %s ÷ 1000 = %s", strings.Join(words, " + "), with(text(mass), "kg/m"), with(d.Value, "t"))
	kg := total.times(of(printed(mass)))
	if t, ok := kg.over(of(whole(1000))); ok {
		d.recheck(t.rounded(places(p.Purchased)), exact(p.Purchased))
	}
	d.Notes = append(d.Notes, fmt.Sprintf("yield %s, lower bound %s, kerf %s, proven: %v", short(p.Yield), with(text(p.Bound), "m"), with(text(p.Kerf), "m"), p.Proven))
	if p.Hint != "" {
		d.Notes = append(d.Notes, p.Hint)
	}
	d.kids = t.listed("input/stock lengths", "default/stock lengths", "input/kerf", "default/kerf")
	d.kids = append(d.kids, kid{"", func() draft {
		return draft{Node: Node{What: "Stock lengths of the job.", Value: t.doc.Job.StockLengths, Kind: Input, Source: "job", Owner: "estimator", Version: hash(t.doc.Job.JobSHA256)}}
	}}, t.catalogueRow(p.Section, "", mass))
	return d
}
