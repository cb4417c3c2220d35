package engine

import (
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

func (r *run) assemble() (document.Document, error) {
	head, err := r.head()
	if err != nil {
		return document.Document{}, err
	}
	plans, err := r.cutting()
	if err != nil {
		return document.Document{}, err
	}
	d := document.Document{
		EngineVersion: document.EngineVersion, Caution: document.Caution, Job: head,
		Items: r.itemList(), Lines: r.lines(), Cutting: plans, Shipping: r.shipping(), Carbon: r.carbonOf(), Class: r.class(),
		Inclusions: r.inclusions(), Exclusions: r.exclusions(), Notes: r.textNotes(),
		Assumptions: withResizing(r.register.Entries()),
	}
	d.Groups = groups(d.Items, d.Lines)
	for _, s := range r.sized.members {
		d.Members = append(d.Members, r.member(s))
	}
	if d.Totals, err = r.totals(d); err != nil {
		return document.Document{}, err
	}
	if d.Range, err = r.rangeOf(d.Totals); err != nil {
		return document.Document{}, err
	}
	d.Categories = r.categories()
	if err := r.allocate(&d); err != nil {
		return document.Document{}, err
	}
	d.Split = r.splitSummary()
	d.Findings = r.findings(d)
	for _, f := range d.Findings {
		if f.Severity == document.Unsafe {
			d.Totals.Unsafe++
		}
	}
	return d, nil
}

func (r *run) totals(d document.Document) (document.Totals, error) {
	t := document.Totals{Base: r.priced.Base, Confidence: document.Number(r.job.Settings.Confidence), Members: len(d.Members)}
	found := false
	for _, p := range r.ranged.Percentiles {
		if p.P == r.job.Settings.Confidence {
			at, err := money.FromFloat(document.Number(p.Value).Rounded(), r.currency.MinorDigits)
			if err != nil {
				return t, fmt.Errorf("percentile %g: %w", p.P, err)
			}
			t.AtConfidence, found = at, true
		}
	}
	if !found {
		return t, fmt.Errorf("the simulation did not return the percentile %g", r.job.Settings.Confidence)
	}
	t.Contingency = t.AtConfidence.Sub(t.Base)
	t.Reserve = r.job.Settings.ManagementReserve
	if rate := r.job.Settings.TaxRate; rate > 0 {
		f, err := money.FromFloat(rate, 6)
		if err != nil {
			return t, fmt.Errorf("tax: %w", err)
		}
		t.Tax = r.currency.Round(t.AtConfidence.Mul(f))
	}
	for _, g := range d.Groups {
		t.Net, t.Delivered, t.Purchased = t.Net.Add(g.Net), t.Delivered.Add(g.Delivered), t.Purchased.Add(g.Purchased)
		t.Pieces += g.Pieces
	}
	return t, nil
}

func (r *run) categories() []document.Category {
	var out []document.Category
	for _, c := range ratebook.Categories() {
		amount, ok := r.priced.Categories[c]
		if !ok {
			continue
		}
		row := document.Category{Category: c, Amount: amount}
		for _, x := range r.ranged.Categories {
			if x.Category == c {
				row.Mean, row.P10, row.P90 = document.Number(x.Mean), document.Number(x.P10), document.Number(x.P90)
			}
		}
		out = append(out, row)
	}
	return out
}

func (r *run) itemList() []document.Item {
	out := make([]document.Item, len(r.items))
	byArea := r.byArea()
	for i, it := range r.items {
		area := len(it.Marks) > 0 && byArea[it.Marks[0]] // rows by area are items of their own
		out[i] = document.Item{
			ID: it.ID, Group: it.Group, Family: it.Family, Treatment: it.Treatment, Connection: it.Connection, Marks: it.Marks,
			Coating: it.Coating, Execution: it.Execution,
			Pieces: it.Pieces, Length: document.Number(it.Length), Surface: document.Number(it.Surface),
			Net: it.Net, Delivered: it.Delivered, Purchased: it.Purchased, Quantities: []document.Quantity{},
		}
		for _, q := range it.Quantities {
			out[i].Quantities = append(out[i].Quantities, quantity(q, dependsOn(it, q, area)))
		}
	}
	return out
}

func quantity(q takeoff.Quantity, depends []string) document.Quantity {
	out := document.Quantity{Driver: string(q.Driver), Value: q.Value, Unit: q.Driver.Unit(), Measured: document.Number(q.Measured),
		Factors: []document.Factor{}, Assumptions: q.Fixed, Formula: q.Formula, Depends: depends}
	for _, a := range q.Factors {
		out.Factors = append(out.Factors, document.Factor{Assumption: a.ID, Value: document.Number(a.Value())})
	}
	return out
}

// groups sums the rounded items and lines, so that groups add up exactly.
func groups(items []document.Item, lines []document.Line) []document.Group {
	at, counted := map[string]int{}, map[string]bool{}
	var out []document.Group
	for _, it := range items {
		i, ok := at[it.Group]
		if !ok {
			i = len(out)
			at[it.Group] = i
			out = append(out, document.Group{Group: it.Group})
		}
		g := &out[i]
		for _, m := range it.Marks { // a row with joints or concrete is in several items
			if !counted[m] {
				counted[m] = true
				g.Members++
			}
		}
		g.Pieces += it.Pieces
		g.Length += it.Length
		g.Surface += it.Surface
		g.Net, g.Delivered, g.Purchased = g.Net.Add(it.Net), g.Delivered.Add(it.Delivered), g.Purchased.Add(it.Purchased)
	}
	for _, l := range lines {
		i, ok := at[l.Group]
		if !ok { // the whole structure
			i = len(out)
			at[l.Group] = i
			out = append(out, document.Group{Group: l.Group})
		}
		out[i].Amount = out[i].Amount.Add(l.Amount)
	}
	return out
}

func (r *run) lines() []document.Line {
	out := make([]document.Line, len(r.priced.Lines))
	for i, l := range r.priced.Lines {
		out[i] = document.Line{
			ID: l.ID, Item: l.Item, Group: l.Group, Category: l.Category, Driver: string(l.Driver), Quantity: l.Quantity, Unit: l.Unit,
			RateID: l.RateID, RateScope: string(l.RateScope), Rate: l.Rate, RateFormula: l.Formula, RateParts: []document.Part{},
			Multipliers: []document.Multiplier{}, UnitPrice: l.UnitPrice, Amount: l.Amount, Of: l.Of, Assumptions: l.Assumptions, Note: l.Note,
		}
		for _, p := range l.Parts {
			out[i].RateParts = append(out[i].RateParts, document.Part{Name: p.Name, Value: p.Value, Assumption: p.Assumption})
		}
		for _, a := range l.Multipliers {
			out[i].Multipliers = append(out[i].Multipliers, document.Multiplier{
				Name: a.Name, Scope: string(a.Scope), Subject: a.Subject, Value: a.Value, Assumption: a.Assumption})
		}
	}
	return out
}
