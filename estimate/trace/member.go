package trace

import (
	"fmt"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

// memberFigure is a figure of one member: its net mass or one of its checks.
func (t *Tracer) memberFigure(name, last string) (draft, bool) {
	if segment, ok := strings.CutSuffix(name, "/check"); ok {
		m, found := t.members[segment]
		if !found {
			return draft{}, false
		}
		for i := range m.Checks {
			if assumption.Segment(m.Checks[i].ID) == last {
				return t.check(m, &m.Checks[i]), true
			}
		}
		return draft{}, false
	}
	m, ok := t.members[name]
	if !ok || last != "net" {
		return draft{}, false
	}
	return t.net(m), true
}

// net is the drawn mass of all pieces of a row.
func (t *Tracer) net(m *document.Member) draft {
	d := draft{Node: Node{Figure: rowID(m), What: "Net mass of row " + m.Mark + ", all pieces, as drawn.", Value: text(m.Net), Unit: "kg", Kind: Product,
		Rounding: "none: 12 significant digits are printed"}}
	factors := []value{whole(m.Quantity)}
	d.kids = []kid{t.pieces(m)}
	perArea, area := measureOf(m, "mass if not sized", "kg/m²"), measureOf(m, "area", "")
	switch {
	case perArea != nil && area != nil && m.Section == "":
		factors = append(factors, printed(perArea.Value), printed(area.Value))
		d.Formula = "pieces × kg/m² × area of a piece"
		d.Arithmetic = fmt.Sprintf("%d × %s × %s", m.Quantity, with(text(perArea.Value), "kg/m²"), with(text(area.Value), "m²"))
		d.kids = append(d.kids, t.stated(m, perArea.Symbol, factors[1], perArea.Unit), t.stated(m, area.Symbol, factors[2], area.Unit))
	default:
		factors = append(factors, printed(m.Length), printed(m.LineMass))
		d.Formula = "pieces × length × nominal kg/m"
		d.Arithmetic = fmt.Sprintf("%d × %s × %s", m.Quantity, with(text(m.Length), "m"), with(text(m.LineMass), "kg/m"))
		d.kids = append(d.kids, t.stated(m, "length", factors[1], "m"), t.lineMass(m))
	}
	d.Arithmetic += " = " + with(d.Value, "kg")
	d.recheck(product(factors...), printed(m.Net))
	return d
}

func measureOf(m *document.Member, symbol, unit string) *document.Measure {
	for i := range m.Inputs {
		if x := &m.Inputs[i]; x.Symbol == symbol && (unit == "" || x.Unit == unit) {
			return x
		}
	}
	return nil
}

// lineMass is where the kg/m of a row come from: its section, or the row itself.
func (t *Tracer) lineMass(m *document.Member) kid {
	if m.Section == "" {
		return t.stated(m, "mass if not sized", printed(m.LineMass), "kg/m")
	}
	return kid{rowID(m) + "#section", func() draft { return t.section(m) }}
}

// section is the choice of a section: its nominal kg/m, the checks that it passes,
// and why the next lighter ones fail.
func (t *Tracer) section(m *document.Member) draft {
	d := draft{Node: Node{Figure: rowID(m) + "#section", Value: text(m.LineMass), Unit: "kg/m", Kind: Choice, Formula: "lightest of the family that passes every check",
		Source: "design basis " + t.doc.Job.DesignBasis, Version: hash(t.doc.Job.CatalogueSHA256)}}
	name := strings.TrimSpace(m.Section + " " + m.Grade)
	verdict := "passes every check"
	if !m.Passes {
		verdict = "does not pass"
	}
	if m.Governing != "" {
		verdict += fmt.Sprintf("; %s governs with a utilisation of %s", m.Governing, short(m.Utilisation))
	}
	d.What = fmt.Sprintf("Section of row %s: %s, chosen by its checks; it %s.", m.Mark, name, verdict)
	if m.Treatment == "check" {
		d.What = fmt.Sprintf("Section of row %s: %s, given by the row and checked; it %s.", m.Mark, name, verdict)
		d.Formula = "as the row gives it"
	}
	if m.Combination != "" {
		d.Notes = append(d.Notes, "the governing check is highest under "+m.Combination)
	}
	for _, r := range m.Rejected {
		d.Notes = append(d.Notes, fmt.Sprintf("%s, lighter, fails in %s with a utilisation of %s", r.Section, r.Check, short(r.Utilisation)))
	}
	if m.Treatment == "size" && len(m.Rejected) == 0 {
		d.Notes = append(d.Notes, "no lighter section of the family was rejected: it is the lightest")
	}
	d.Notes = append(d.Notes, m.Warnings...)
	d.kids = []kid{t.catalogueRow(m.Section, t.family(m), m.LineMass)}
	ids := make([]string, 0, len(m.Checks))
	for _, c := range m.Checks {
		id := "member/" + assumption.Segment(m.Mark) + "/check/" + assumption.Segment(c.ID)
		if c.ID == m.Governing {
			ids = append([]string{id}, ids...)
		} else {
			ids = append(ids, id)
		}
	}
	for _, id := range ids {
		d.kids = append(d.kids, t.kid(id))
	}
	if m.SameSizeAs != "" {
		d.Notes = append(d.Notes, "tied to the section of row "+m.SameSizeAs+": the row that needs more decides for both")
		d.kids = append(d.kids, t.listed("input/same size as")...)
	}
	return d
}

// family is the section family of a member, as its item has it.
func (t *Tracer) family(m *document.Member) string {
	if it, ok := t.items[m.Item]; ok {
		return it.Family
	}
	return ""
}

// catalogueRow is the constant that a section's row in the catalogue is.
func (t *Tracer) catalogueRow(section, family string, mass document.Number) kid {
	return constant(fmt.Sprintf("Nominal mass of %s, and with it the dimensions and properties of its row in the section catalogue.", section), text(mass), "kg/m",
		standardOf(section, family), "section catalogue", hash(t.doc.Job.CatalogueSHA256))
}

// standards are those of sizes and nominal masses by family, as the catalogue's
// data name them; a test holds them equal.
var standards = map[string]string{
	"IPE": "EN 10365:2017", "HEA": "EN 10365:2017", "HEB": "EN 10365:2017", "HEM": "EN 10365:2017", "UPN": "EN 10365:2017", "UPE": "EN 10365:2017",
	"W": "ASTM A6/A6M", "C": "ASTM A6/A6M", "L": "EN 10056-1:2017", "CHS": "EN 10210-2:2006", "PIPE": "ASME B36.10M",
	"SHS": "EN 10219-2:2006", "RHS": "EN 10219-2:2006", "HSS": "ASTM A500/A500M", "HSS-ROUND": "ASTM A500/A500M",
	"ROUND": "EN 10060", "FLAT": "EN 10058",
}

// standardOf is the standard of a family, which the designation leads with where it
// is not known.
func standardOf(section, family string) string {
	if family == "" {
		family, _, _ = strings.Cut(section, " ")
	}
	if s, ok := standards[family]; ok {
		return s
	}
	return "by the dimensions of its designation, nominal density 7850 kg/m³ of EN 1991-1-1:2002 table A.4"
}
