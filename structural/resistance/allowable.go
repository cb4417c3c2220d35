package resistance

import (
	"fmt"
	"math"

	"spanwright/structural/section"
)

// allowable is the design basis "allowable": yield over a chosen factor n.
type allowable struct {
	n float64
}

// Allowable returns the design basis "allowable": every strength over one factor n,
// against characteristic actions. Accepted is a factor from 1.5 to 10: 1.5 to 1.67
// where the actions are known, 3 to 4 as a first pass (common practice, no source).
func Allowable(factor float64) (Basis, error) {
	if !(1.5 <= factor && factor <= 10) {
		return nil, fmt.Errorf("allowable: factor %v on yield; accepted is 1.5 to 10", factor)
	}
	return allowable{n: factor}, nil
}

// Name returns "allowable".
func (a allowable) Name() string { return "allowable" }

// rule is one check of the basis: its description and its only formula body.
type rule struct {
	id       string
	clause   string
	formula  string
	unit     string
	passFail bool
	eval     func(allowable, *section.Section, Material, *Demand, *trace) use
}

// use is what a formula body answers. The zero value means that the check does not
// apply.
type use struct {
	applies     bool
	demand      float64
	resistance  float64
	utilisation float64
}

// against is the use of a resistance by a demand in the same unit.
func against(demand, resistance float64) use {
	return use{applies: true, demand: demand, resistance: resistance, utilisation: ratio(demand, resistance)}
}

// allowableRules stand in the order in which checks are explained.
var allowableRules = [...]rule{
	{
		id: Bending, eval: allowable.bending, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.2.5 (6.14), elastic, over the factor n",
		formula: "M ≤ Wel·fy/n",
	},
	{
		id: LateralBuckling, eval: allowable.lateralBuckling, unit: "N·m",
		clause:  "Timoshenko and Gere, Theory of Elastic Stability, chapter 6; NCCI SN003, C1 = 1; Johnson parabola; over the factor n",
		formula: "M ≤ Mn/n, Mn = My·(1 − My/(4·Mcr)) for Mcr ≥ My/2, else Mcr; Mcr = π²·E·Iz/L²·√(Iw/Iz + L²·G·J/(π²·E·Iz))",
	},
	{
		id: Shear, eval: allowable.shear, unit: "N",
		clause:  "EN 1993-1-1:2005 6.2.6 (6.18), over the factor n",
		formula: "V ≤ Av·fy/(√3·n)",
	},
	{
		id: Axial, eval: allowable.axial, unit: "N",
		clause:  "compression: Johnson parabola and Euler, in the form of AISC ASD 1989 E2-1 and E2-2, over the factor n; tension: EN 1993-1-1:2005 6.2.3 (6.6), over the factor n",
		formula: "N ≤ A·σ/n, σ = fy·(1 − λ²/(2·Cc²)) for λ ≤ Cc = √(2π²·E/fy), else π²·E/λ²; tension: N ≤ A·fy/n",
	},
	{
		id: Interaction, eval: allowable.interaction,
		clause:  "AISC ASD 1989 H1-1 with Cm = 1 and the factor n; tension: H2-1",
		formula: "N/Na + M/(Ma·(1 − n·N/NEy)) ≤ 1; tension: N/Nt + M/Ma ≤ 1",
	},
	{
		id: LocalBuckling, eval: allowable.localBuckling, passFail: true,
		clause:  "EN 1993-1-1:2005 Table 5.2, class 3",
		formula: "(c/t)/limit ≤ 1",
	},
	{
		id: Deflecting, eval: allowable.deflection, unit: "m",
		clause:  "deflection limit of the job, as span over a number; overhangs as twice their length",
		formula: "w ≤ limit",
	},
}

// Utilisation returns the highest utilisation and the governing check.
func (a allowable) Utilisation(s *section.Section, m Material, d *Demand) (float64, string) {
	var top governing
	for i := range allowableRules {
		r := &allowableRules[i]
		if u := r.eval(a, s, m, d, nil); u.applies {
			top.offer(u.utilisation, r.id, r.passFail)
		}
	}
	return top.utilisation, top.id
}

// Explain returns every check that applies.
func (a allowable) Explain(s *section.Section, m Material, d *Demand) []Check {
	checks := make([]Check, 0, len(allowableRules))
	for i := range allowableRules {
		r := &allowableRules[i]
		t := trace{inputs: make([]Quantity, 0, 12)}
		u := r.eval(a, s, m, d, &t)
		if !u.applies {
			continue
		}
		checks = append(checks, Check{
			ID: r.id, Clause: r.clause, Formula: r.formula,
			Demand: u.demand, Resistance: u.resistance, Unit: r.unit, Utilisation: u.utilisation,
			PassFail: r.passFail, Inputs: t.inputs, Note: t.note,
		})
	}
	return checks
}

// trace notes what a formula body works with. A nil trace notes nothing.
type trace struct {
	inputs []Quantity
	note   string
}

func (t *trace) put(symbol string, value float64, unit string) {
	if t != nil {
		t.inputs = append(t.inputs, Quantity{Symbol: symbol, Value: value, Unit: unit})
	}
}

func (t *trace) say(note string) {
	if t != nil {
		t.note = note
	}
}

func (a allowable) factor(m Material, t *trace) {
	t.put("fy", m.Yield, "Pa")
	t.put("n", a.n, "")
}

func (a allowable) bending(s *section.Section, m Material, d *Demand, t *trace) use {
	t.put("Wel", s.Wely, "m³")
	a.factor(m, t)
	return against(d.Moment, s.Wely*m.Yield/a.n)
}

func (a allowable) shear(s *section.Section, m Material, d *Demand, t *trace) use {
	t.put("Av", s.Avz, "m²")
	a.factor(m, t)
	return against(d.Shear, s.Avz*m.Yield/(math.Sqrt(3)*a.n))
}

// deflection reports the span or overhang that uses most of its own limit.
func (a allowable) deflection(_ *section.Section, _ Material, d *Demand, t *trace) use {
	var worst use
	at := -1
	for i := range d.Deflections {
		u := against(d.Deflections[i].Value, d.Deflections[i].Limit)
		if at < 0 || u.utilisation > worst.utilisation {
			worst, at = u, i
		}
	}
	if at >= 0 {
		t.put("span", d.Deflections[at].Span, "m")
		t.say(d.Deflections[at].Where)
	}
	return worst
}
