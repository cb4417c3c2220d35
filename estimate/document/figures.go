package document

import (
	"strconv"
	"strings"

	"spanwright/estimate/assumption"
)

// Figures returns every figure of the document by id, as printed. These are the
// ids that the register's feeds name.
//
//	member/{mark}/check/{check}      utilisation
//	member/{mark}/net                kg
//	item/{item}/net|delivered|purchased, item/{item}/{other driver}
//	group/{group}/net|delivered|purchased|amount
//	line/{item}/{rate}, line/whole structure/{rate}, category/{category}
//	base, range, contingency, tax
//	carbon/{item}/{factor}, carbon/module/{module}, carbon/total, carbon/range
func (d Document) Figures() map[string]string {
	f := map[string]string{}
	num := Number.text
	for _, m := range d.Members {
		p := "member/" + assumption.Segment(m.Mark)
		f[p+"/net"] = num(m.Net)
		for _, c := range m.Checks {
			if c.PassFail {
				continue // a limit that is met or not, no figure that moves by degrees
			}
			f[p+"/check/"+assumption.Segment(c.ID)] = num(c.Utilisation)
		}
	}
	for _, it := range d.Items {
		f["item/"+it.ID+"/net"] = it.Net.String()
		f["item/"+it.ID+"/delivered"] = it.Delivered.String()
		f["item/"+it.ID+"/purchased"] = it.Purchased.String()
		for _, q := range it.Quantities {
			if q.Driver != "net tonnes" { // as drawn above; the quantity has the sizing bias
				f[QuantityID(it.ID, q.Driver)] = q.Value.String()
			}
		}
	}
	for _, g := range d.Groups {
		p := "group/" + assumption.Segment(g.Group)
		f[p+"/net"] = g.Net.String()
		f[p+"/delivered"] = g.Delivered.String()
		f[p+"/purchased"] = g.Purchased.String()
		f[p+"/amount"] = g.Amount.String()
	}
	for _, l := range d.Lines {
		f[l.ID] = l.Amount.String()
	}
	for _, c := range d.Categories {
		f["category/"+c.Category] = c.Amount.String()
	}
	f["base"] = d.Totals.Base.String()
	f["contingency"] = d.Totals.Contingency.String()
	var p []string
	for _, q := range d.Range.Percentiles {
		if q.P == 0.1 || q.P == 0.5 || q.P == 0.8 || q.P == 0.9 {
			p = append(p, num(q.Value))
		}
	}
	f["range"] = num(d.Range.Mean) + " " + strings.Join(p, " ")
	if d.Totals.Tax.Sign() != 0 {
		f["tax"] = d.Totals.Tax.String()
	}
	d.Carbon.figures(f)
	return f
}

// figures adds those of carbon.
func (c *Carbon) figures(f map[string]string) {
	if c == nil {
		return
	}
	f["carbon/total"] = c.Total.String()
	p := []string{c.Mean.text()}
	for _, q := range c.Percentiles {
		p = append(p, q.Value.text())
	}
	f["carbon/range"] = strings.Join(p, " ")
	for _, m := range c.Modules {
		f["carbon/module/"+m.Module] = m.Amount.String()
	}
	for _, l := range c.Lines {
		f[l.ID] = l.Amount.String()
	}
}

// text is the number as printed, without an exponent.
func (n Number) text() string { return strconv.FormatFloat(n.Rounded(), 'f', -1, 64) }
