package calculator

import (
	"errors"
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// bases are the design bases by name.
var bases = []string{"allowable", "en1993", resistance.ASD, resistance.LRFD}

// Basis names the rule set of the checks and its choices.
type Basis struct {
	DesignBasis string  `json:"design_basis" enum:"allowable,en1993,aisc-asd,aisc-lrfd"`
	Factor      float64 `json:"factor,omitempty" doc:"of allowable, 1.5 to 10; 1.5 when absent"`
	M0          float64 `json:"gamma_m0,omitempty" doc:"of en1993, 1 to 2; recommended value 1.0 when absent"`
	M1          float64 `json:"gamma_m1,omitempty" doc:"of en1993; 1.0 when absent"`
	M2          float64 `json:"gamma_m2,omitempty" doc:"of en1993; 1.25 when absent"`
	RolledCase  bool    `json:"rolled_case,omitempty" doc:"of en1993: lateral-torsional buckling of I sections by 6.3.2.3; the general case 6.3.2.2 when absent"`
}

// defaultFactor is the factor of allowable where the request names none.
const defaultFactor = 1.5

func (b Basis) basis(f *Faults) resistance.Basis {
	if !f.oneOf("/design_basis", b.DesignBasis, bases...) {
		return nil
	}
	b.foreign(f)
	var out resistance.Basis
	var err error
	switch b.DesignBasis {
	case "allowable":
		factor := b.Factor
		if factor == 0 {
			factor = defaultFactor
		}
		if !f.within("/factor", factor, 1.5, 10, "") {
			return nil
		}
		out, err = resistance.Allowable(factor)
	case "en1993":
		ok := true
		for _, p := range []struct {
			name  string
			value float64
		}{{"/gamma_m0", b.M0}, {"/gamma_m1", b.M1}, {"/gamma_m2", b.M2}} {
			ok = (p.value == 0 || f.within(p.name, p.value, 1, 2, "")) && ok
		}
		if !ok {
			return nil
		}
		out, err = resistance.EN1993(resistance.Partial{M0: b.M0, M1: b.M1, M2: b.M2, RolledCase: b.RolledCase})
	default:
		out, err = resistance.AISC(b.DesignBasis)
	}
	if err != nil {
		f.add("/design_basis", quoted(b.DesignBasis), err.Error(), strings.Join(bases, ", "))
		return nil
	}
	return out
}

// foreign refuses settings of another basis.
func (b Basis) foreign(f *Faults) {
	if b.Factor != 0 && b.DesignBasis != "allowable" {
		f.add("/factor", number(b.Factor), "belongs to the design basis allowable", "the field absent")
	}
	if (b.M0 != 0 || b.M1 != 0 || b.M2 != 0 || b.RolledCase) && b.DesignBasis != "en1993" {
		f.add("/design_basis", quoted(b.DesignBasis), "gamma_m0, gamma_m1, gamma_m2 and rolled_case belong to en1993", "these fields absent, or en1993")
	}
}

// sectionOf finds a section; a fault names near misses.
func sectionOf(at, designation string, f *Faults) (section.Section, bool) {
	s, err := section.Find(designation)
	if err == nil {
		return s, true
	}
	f.unknown(at, designation, err)
	return s, false
}

// gradeOf finds a grade; a fault names near misses.
func gradeOf(at, name string, f *Faults) (material.Grade, bool) {
	g, err := material.Find(name)
	if err == nil {
		return g, true
	}
	f.unknown(at, name, err)
	return g, false
}

// unknown words a designation, family or grade that is not held.
func (f *Faults) unknown(at, name string, err error) {
	var s *section.UnknownError
	var g *material.UnknownError
	switch {
	case errors.As(err, &s):
		f.add(at, quoted(name), s.Why, near(s.Near, "a designation as the trade writes it, such as IPE 300, W18x50 or CHS 168.3x6.3"))
	case errors.As(err, &g):
		f.add(at, quoted(name), "no such grade", near(g.Near, "one of "+strings.Join(material.Names(), ", ")))
	default:
		f.add(at, quoted(name), err.Error(), "another one")
	}
}

func near(names []string, otherwise string) string {
	if len(names) == 0 {
		return otherwise
	}
	return "perhaps " + strings.Join(names, ", ")
}

// checksOf writes checks as documents do.
func checksOf(list []resistance.Check) []document.Check {
	out := []document.Check{}
	for _, c := range list {
		d := document.Check{ID: c.ID, Clause: c.Clause, Formula: c.Formula, Demand: Number(c.Demand), Resistance: Number(c.Resistance),
			Unit: c.Unit, Utilisation: Number(c.Utilisation), PassFail: c.PassFail, Note: c.Note, Inputs: []document.Measure{}}
		for _, q := range c.Inputs {
			d.Inputs = append(d.Inputs, document.Measure{Symbol: q.Symbol, Value: Number(q.Value), Unit: q.Unit})
		}
		out = append(out, d)
	}
	return out
}
