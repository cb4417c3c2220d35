package trace

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
)

const carbonUnit = "kg CO₂e"

// carbonTotal is a figure of embodied carbon of which the document has one.
func (t *Tracer) carbonTotal(id string) (draft, bool) {
	c := t.doc.Carbon
	if c == nil {
		return draft{}, false
	}
	switch id {
	case "carbon/total":
		var ids []string
		var values []value
		for _, m := range c.Modules {
			ids, values = append(ids, "carbon/module/"+m.Module), append(values, exact(m.Amount))
		}
		d := t.add(Node{Figure: id, What: "Embodied carbon at likely values, modules A1-A3, A4 and A5.", Unit: carbonUnit, Formula: "Σ modules",
			Rounding: "none: every line was rounded before", Clause: "EN 15978:2011, EN 17472:2022"}, c.Total, ids, values)
		d.Notes = append(d.Notes, c.Method)
		return d, true
	case "carbon/range":
		return t.carbonRange(c), true
	}
	name, _ := strings.CutPrefix(id, "carbon/module/")
	for _, m := range c.Modules {
		if m.Module == name {
			var ids []string
			var values []value
			for _, l := range t.module[name] {
				ids, values = append(ids, l.ID), append(values, exact(l.Amount))
			}
			return t.add(Node{Figure: id, What: "Embodied carbon of module " + name + " at likely values.", Unit: carbonUnit, Formula: "Σ lines of the module",
				Rounding: "none: every line was rounded before"}, m.Amount, ids, values), true
		}
	}
	return draft{}, false
}

// carbonLine is a quantity times an emission factor.
func (t *Tracer) carbonLine(l *document.CarbonLine) draft {
	per := carbonUnit + "/" + l.Unit
	where := l.Item
	if it, ok := t.items[l.Item]; ok {
		where = itemWords(it)
	}
	d := draft{Node: Node{Figure: l.ID, What: fmt.Sprintf("Embodied carbon of %s, module %s, by %s.", where, l.Module, l.Driver), Value: l.Amount.String(), Unit: carbonUnit, Kind: Product,
		Formula: "quantity × emission factor", Rounding: "to the kilogram, " + halfAway}}
	d.Arithmetic = fmt.Sprintf("%s × %s = %s", with(l.Quantity.String(), l.Unit), with(l.Factor.String(), per), with(d.Value, carbonUnit))
	d.recheck(product(exact(l.Quantity), exact(l.Factor)).rounded(places(l.Amount)), exact(l.Amount))
	d.kids = []kid{t.kid(quantityID(l.Item, l.Driver)), t.known(l.FactorID, l.Factor.String())}
	return d
}

// carbonRange is the distribution of embodied carbon.
func (t *Tracer) carbonRange(c *document.Carbon) draft {
	j := t.doc.Job
	d := draft{Node: Node{Figure: "carbon/range", What: "Range of embodied carbon over all trials: the mean, then the percentiles of the notes.", Unit: carbonUnit, Kind: Percentile,
		Formula: "total of a trial = Σ lines at the values drawn", Source: c.Method,
		Version: fmt.Sprintf("engine version %d, seed %d, %d replicates of %d trials", t.doc.EngineVersion, j.Seed, j.Replicates, j.Trials), Rounding: "12 significant digits; percentiles are read to three"}}
	words := []string{text(c.Mean)}
	d.Notes = append(d.Notes, "mean "+short(c.Mean))
	for _, p := range c.Percentiles {
		words = append(words, text(p.Value))
		d.Notes = append(d.Notes, fmt.Sprintf("P%s %s, standard error %s", percent(p.P), short(p.Value), short(p.SE)))
	}
	d.Value = strings.Join(words, " ")
	d.kids = append([]kid{t.kid("carbon/total")}, t.drawn("carbon/range")...)
	return d
}
