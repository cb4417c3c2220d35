package trace

import (
	"slices"
	"strings"

	"spanwright/estimate/document"
)

// Symbols of check inputs by where they come from. What is in none of the lists is
// an intermediate value of the clause, made of the three and of the row's lengths.
var (
	ofSection = []string{"A", "Ag", "Aw", "Av", "Av,y", "Wel", "Wel,z", "S", "Z", "Iz", "Iw", "J", "H", "t nominal", "t design", "rts",
		"c/t of the flange", "c/t or d/t of the web or wall", "h/tw", "hw/tw", "h/t", "b/t", "D/t"}
	ofGrade  = []string{"fy", "fu", "Fy", "Fu", "E", "G"}
	ofClause = []string{"γM0", "γM1", "γM2", "φ", "Ω", "η"}
	ofRow    = map[string]string{"Anet/A": "net area factor", "C1": "moment factor", "Cb": "moment factor", "floor": "frequency floor"}
)

// inputs are what went into a check, each with where it comes from.
func (t *Tracer) inputs(m *document.Member, c *document.Check, id string) []kid {
	out := make([]kid, 0, len(c.Inputs))
	for _, x := range c.Inputs {
		out = append(out, t.checkInput(m, c, id, x))
	}
	return out
}

func (t *Tracer) checkInput(m *document.Member, c *document.Check, id string, x document.Measure) kid {
	shown := text(x.Value)
	switch {
	case slices.Contains(ofSection, x.Symbol):
		return constant(x.Symbol+" of "+m.Section+".", shown, x.Unit, standardOf(m.Section, t.family(m)), "section catalogue", hash(t.doc.Job.CatalogueSHA256))
	case slices.Contains(ofGrade, x.Symbol):
		return constant(x.Symbol+" of "+m.Grade+", for the thickness of the section.", shown, x.Unit, c.Clause, "grade data of "+m.Grade, hash(t.doc.Job.GradesSHA256))
	case slices.Contains(ofClause, x.Symbol):
		return constant(x.Symbol+" of the design basis "+t.doc.Job.DesignBasis+", recommended value.", shown, x.Unit, c.Clause, "design basis", "")
	case x.Symbol == "n":
		return t.factor(shown)
	}
	if symbol, ok := ofRow[x.Symbol]; ok {
		if s := measureOf(m, symbol, ""); s != nil {
			return t.stated(m, symbol, printed(s.Value), s.Unit)
		}
		return constant(x.Symbol+" where the row gives none: the value on the safe side.", shown, x.Unit, c.Clause, "design basis", "")
	}
	return kid{id + "#" + x.Symbol, func() draft { return t.intermediate(m, c, id, x) }}
}

// factor is the factor on yield of the job, given or by default.
func (t *Tracer) factor(shown string) kid {
	for _, e := range t.doc.Assumptions {
		if strings.HasPrefix(e.ID, "default/factor") {
			return t.known(e.ID, shown)
		}
	}
	return kid{"input/factor", func() draft {
		if e, ok := t.entries["input/factor"]; ok {
			n := t.entryNode(e, shown)
			n.What = "Factor on yield of the job. " + n.What
			return draft{Node: n}
		}
		return draft{Node: Node{What: "Factor on yield of the job.", Value: shown, Kind: Input, Source: "job", Owner: "estimator", Version: hash(t.doc.Job.JobSHA256)}}
	}}
}

// intermediate is a value that a clause makes on its way to the resistance.
func (t *Tracer) intermediate(m *document.Member, c *document.Check, id string, x document.Measure) draft {
	d := draft{Node: Node{Figure: id + "#" + x.Symbol, What: x.Symbol + ": a value that the clause makes of section, steel and lengths on its way.", Value: text(x.Value), Unit: x.Unit,
		Kind: Quantity, Formula: c.Formula, Clause: c.Clause, Rounding: analysisDigits}}
	d.kids = []kid{t.catalogueRow(m.Section, t.family(m), m.LineMass),
		constant("Strength and stiffness of "+m.Grade+".", m.Grade, "", c.Clause, "grade data of "+m.Grade, hash(t.doc.Job.GradesSHA256)),
		t.stated(m, "length", printed(m.Length), "m")}
	for _, symbol := range []string{"restraint spacing", "effective length factor", "moment factor"} {
		if s := measureOf(m, symbol, ""); s != nil && !t.tookDefault(id, symbol) {
			d.kids = append(d.kids, t.stated(m, symbol, printed(s.Value), s.Unit))
		}
	}
	for _, e := range t.fed[strings.TrimSuffix(id, "#resistance")] {
		if strings.HasPrefix(e, "default/restraint/") || strings.HasPrefix(e, "default/length factor/") {
			d.kids = append(d.kids, t.known(e, ""))
		}
	}
	return d
}

// tookDefault tells whether a row took a measure by default.
func (t *Tracer) tookDefault(figure, symbol string) bool {
	return slices.ContainsFunc(t.fed[figure], func(id string) bool { return strings.HasPrefix(id, defaultOf(symbol)) })
}
