package trace

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

const analysisDigits = "8 significant digits are printed"

// check is demand over resistance.
func (t *Tracer) check(m *document.Member, c *document.Check) draft {
	id := "member/" + assumption.Segment(m.Mark) + "/check/" + assumption.Segment(c.ID)
	d := draft{Node: Node{Figure: id, What: fmt.Sprintf("Utilisation of %s in row %s by the check of %s.", m.Section, m.Mark, c.ID), Value: text(c.Utilisation), Kind: Check,
		Formula: c.Formula, Clause: c.Clause, Rounding: analysisDigits, Source: "design basis " + t.doc.Job.DesignBasis, Version: fmt.Sprintf("engine version %d", t.doc.EngineVersion)}}
	if c.Note != "" {
		d.Notes = append(d.Notes, c.Note)
	}
	if c.PassFail {
		d.Notes = append(d.Notes, "a limit that is met or not: it governs only where it is not met")
	}
	if c.Combination != "" {
		d.Notes = append(d.Notes, "highest under "+c.Combination)
	}
	if q, ok := of(measured(c.Demand)).over(of(measured(c.Resistance))); ok {
		d.Arithmetic = fmt.Sprintf("%s ÷ %s = %s", with(text(c.Demand), c.Unit), with(text(c.Resistance), c.Unit), d.Value)
		d.recheck(q, measured(c.Utilisation))
	}
	d.kids = []kid{{id + "#demand", func() draft { return t.demand(m, c, id) }}, {id + "#resistance", func() draft { return t.resistance(m, c, id) }}}
	return d
}

// demand is what the actions ask in a check.
func (t *Tracer) demand(m *document.Member, c *document.Check, id string) draft {
	d := draft{Node: Node{Figure: id + "#demand", What: "Demand of the check: the greatest effect of the actions, from the exact envelope with own weight.", Value: text(c.Demand), Unit: c.Unit,
		Kind: Effect, Formula: "largest effect over the member, actions combined and placed for the worst", Rounding: analysisDigits}}
	if c.Combination != "" {
		d.Notes = append(d.Notes, "under "+c.Combination)
	}
	switch {
	case c.ID == frequency:
		d.What, d.Kind, d.Formula = "Demand of the check: the least natural frequency asked for.", Quantity, "frequency floor"
	case c.Unit == "":
		d.What, d.Formula = "Demand of the check: the sum of the shares that its formula adds up, or the measure that it limits.", c.Formula
		d.kids = t.inputs(m, c, id)
	}
	d.kids = append(d.kids, t.actions(m, id)...)
	if m.SelfWeight > 0 && c.ID != frequency {
		d.kids = append(d.kids, kid{rowID(m) + "#own weight", func() draft { return t.ownWeight(m) }})
	}
	if m.Arrangement != "" {
		d.kids = append(d.kids, kid{"", func() draft {
			return draft{Node: Node{What: "How row " + m.Mark + " is held.", Value: m.Arrangement, Kind: Input, Source: t.source() + ", row " + m.Mark, Owner: "schedule", Version: hash(t.doc.Job.SourceSHA256)}}
		}})
	}
	d.kids = append(d.kids, t.listed("structural/combination", "structural/own weight")...)
	return d
}

const (
	frequency  = "frequency"
	deflection = "deflection"
)

// actions are the numbers of the row, and the defaults that it took, that the
// register says move a check.
func (t *Tracer) actions(m *document.Member, figure string) []kid {
	var out []kid
	defaults := slices.Clone(t.fed[figure])
	pattern := "member/{mark}" + strings.TrimPrefix(figure, "member/"+assumption.Segment(m.Mark))
	for _, x := range m.Inputs {
		if i := slices.IndexFunc(defaults, func(id string) bool { return strings.HasPrefix(id, defaultOf(x.Symbol)) }); i >= 0 {
			out = append(out, t.known(defaults[i], text(x.Value)))
			defaults = slices.Delete(defaults, i, i+1)
			continue
		}
		e, ok := t.entries["input/"+column(x.Symbol)]
		if ok && !slices.Contains(e.Feeds, pattern) && !slices.Contains(e.Feeds, figure) {
			continue // the register says that it does not act here
		}
		if !ok && !strings.Contains(x.Unit, "N") {
			continue
		}
		out = append(out, t.stated(m, x.Symbol, printed(x.Value), x.Unit))
	}
	for _, id := range defaults {
		out = append(out, t.entry(t.entries[id], ""))
	}
	if len(out) == 0 {
		out = append(out, t.stated(m, "length", printed(m.Length), "m"))
	}
	return out
}

// defaultOf is how the id of the default of a measure begins.
func defaultOf(symbol string) string {
	switch symbol {
	case "restraint spacing":
		return "default/restraint/"
	case "effective length factor":
		return "default/length factor/"
	case "deflection limit":
		return "default/deflection limit/"
	case "frequency floor":
		return "default/frequency floor"
	}
	return "default/load/" + assumption.Segment(symbol) + "/"
}

// ownWeight is a member's nominal weight.
func (t *Tracer) ownWeight(m *document.Member) draft {
	d := draft{Node: Node{Figure: rowID(m) + "#own weight", What: "Own weight of one piece of row " + m.Mark + ", a permanent action.", Value: text(m.SelfWeight), Unit: "kN", Kind: Product,
		Formula: "nominal kg/m × length × g ÷ 1000", Rounding: analysisDigits}}
	g := value{text: "9.80665"}
	g.rat, g.open = whole(980665).rat, whole(0).rat
	g.rat.Quo(g.rat, whole(100000).rat)
	d.Arithmetic = fmt.Sprintf("%s × %s × 9.80665 m/s² ÷ 1000 = %s", with(text(m.LineMass), "kg/m"), with(text(m.Length), "m"), with(d.Value, "kN"))
	if kn, ok := product(printed(m.LineMass), printed(m.Length), g).over(of(whole(1000))); ok {
		d.recheck(kn, measured(m.SelfWeight))
	}
	d.kids = []kid{t.catalogueRow(m.Section, t.family(m), m.LineMass), t.stated(m, "length", printed(m.Length), "m"),
		constant("Standard acceleration of free fall.", "9.80665", "m/s²", "ISO 80000-3", "standard", "")}
	return d
}

// resistance is what a section offers in a check.
func (t *Tracer) resistance(m *document.Member, c *document.Check, id string) draft {
	d := draft{Node: Node{Figure: id + "#resistance", What: "Resistance of the check: what " + strings.TrimSpace(m.Section+" "+m.Grade) + " offers.", Value: text(c.Resistance), Unit: c.Unit,
		Kind: Quantity, Formula: c.Formula, Clause: c.Clause, Rounding: analysisDigits}}
	if len(c.Inputs) > 0 {
		var words []string
		for _, x := range c.Inputs {
			words = append(words, x.Symbol+" = "+with(text(x.Value), x.Unit))
		}
		d.Notes = append(d.Notes, "with "+strings.Join(words, "; "))
	}
	switch {
	case c.Unit == "":
		d.What = "Resistance of the check: the limit that its formula compares with."
		d.Kind = Constant
		return d
	case c.ID == deflection:
		d.What, d.Formula = "Limit of the deflection: the span over a number; an overhang counts with twice its length.", "span ÷ n, of an overhang 2 × length ÷ n"
	case c.ID == frequency:
		d.What, d.Kind = "Lowest natural frequency of the member.", Effect
		d.kids = append(t.actions(m, id), t.catalogueRow(m.Section, t.family(m), m.LineMass))
	}
	d.kids = append(d.kids, t.inputs(m, c, id)...)
	if c.ID == deflection {
		d.kids = append(d.kids, t.limit(m, id)...)
	}
	d.kids = append(d.kids, t.structural(c)...)
	if len(d.kids) == 0 {
		d.kids = []kid{t.catalogueRow(m.Section, t.family(m), m.LineMass)}
	}
	return d
}

// limit is the deflection limit of a row, given or by default.
func (t *Tracer) limit(m *document.Member, figure string) []kid {
	check := strings.TrimSuffix(figure, "#resistance")
	for _, id := range t.fed[check] {
		if strings.HasPrefix(id, "default/deflection limit/") {
			return []kid{t.known(id, text(m.DeflectionLimit))}
		}
	}
	return []kid{t.stated(m, "deflection limit", printed(m.DeflectionLimit), "")}
}

// structural are the simplifications that a check rests on.
func (t *Tracer) structural(c *document.Check) []kid {
	switch c.ID {
	case "lateral-torsional buckling":
		return t.listed("structural/lateral restraint", "structural/en1993/edition", "structural/aisc/edition")
	case "axial", "interaction":
		return t.listed("structural/struts", "structural/tension", "structural/en1993/interaction", "structural/aisc/second order")
	case "web shear buckling":
		return t.listed("structural/en1993/webs")
	case deflection:
		return t.listed("structural/deflection")
	case frequency:
		return t.listed("structural/frequency")
	}
	return t.listed("structural/en1993/edition", "structural/aisc/edition")
}
