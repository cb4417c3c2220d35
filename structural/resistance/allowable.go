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

// rule is one check of the basis: its wording and its only formula body.
type rule struct {
	wording
	eval func(allowable, *section.Section, Material, *Demand, *trace) use
}

// allowableRules stand in the order in which checks are explained.
var allowableRules = [...]rule{
	{wording{
		id: NotCovered, passFail: true,
		clause:  "scope of this basis",
		formula: "the shape is covered under the forces that act",
	}, allowable.notCovered},
	{wording{
		id: Bending, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.2.5 (6.14), elastic, over the factor n",
		formula: "M ≤ Wel·fy/n",
	}, allowable.bending},
	{wording{
		id: BendingZ, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.2.5 (6.14), elastic, over the factor n",
		formula: "Mz ≤ Wel,z·fy/n",
	}, allowable.bendingZ},
	{wording{
		id: LateralBuckling, unit: "N·m",
		clause:  "Timoshenko and Gere, Theory of Elastic Stability, chapter 6; NCCI SN003, C1 = 1; Johnson parabola; over the factor n",
		formula: "M ≤ Mn/n, Mn = My·(1 − My/(4·Mcr)) for Mcr ≥ My/2, else Mcr; Mcr = π²·E·Iz/L²·√(Iw/Iz + L²·G·J/(π²·E·Iz))",
	}, allowable.lateralBuckling},
	{wording{
		id: Shear, unit: "N",
		clause:  "EN 1993-1-1:2005 6.2.6 (6.18), over the factor n",
		formula: "V ≤ Av·fy/(√3·n)",
	}, allowable.shear},
	{wording{
		id: ShearY, unit: "N",
		clause:  "EN 1993-1-1:2005 6.2.6 (6.18), over the factor n",
		formula: "Vy ≤ Av,y·fy/(√3·n)",
	}, allowable.shearY},
	{wording{
		id: Axial, unit: "N",
		clause:  "compression: Johnson parabola and Euler, in the form of AISC ASD 1989 E2-1 and E2-2, over the factor n; tension: EN 1993-1-1:2005 6.2.3 (6.6), over the factor n, net section by the ratio of factors of AISC ASD 1989 D1, 2.0 to 1.67",
		formula: "N ≤ A·σ/n, σ = fy·(1 − λ²/(2·Cc²)) for λ ≤ Cc = √(2π²·E/fy), else π²·E/λ²; tension: N ≤ A·fy/n, with holes also Anet·fu/(1.2·n)",
	}, allowable.axial},
	{wording{
		id:      Interaction,
		clause:  "AISC ASD 1989 H1-1 with Cm = 1 and the factor n; tension and bending about both axes: H2-1",
		formula: "N/Na + My/(Ma·(1 − n·N/NEy)) + Mz/(Maz·(1 − n·N/NEz)) ≤ 1; tension: N/Nt + My/Ma + Mz/Maz ≤ 1",
	}, allowable.interaction},
	{wording{
		id: LocalBuckling, passFail: true,
		clause:  "EN 1993-1-1:2005 Table 5.2, class 3",
		formula: "(c/t)/limit ≤ 1",
	}, allowable.localBuckling},
	{deflectionWording, allowable.deflection},
	{frequencyWording, allowable.frequency},
}

// Utilisation returns the highest utilisation and the governing check. A case that is
// not covered has no other.
func (a allowable) Utilisation(s *section.Section, m Material, d *Demand) (float64, string) {
	var top governing
	for i := range allowableRules {
		r := &allowableRules[i]
		if u := r.eval(a, s, m, d, nil); u.applies {
			top.offer(u.utilisation, r.id, r.passFail)
			if r.id == NotCovered {
				break
			}
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
		if u := r.eval(a, s, m, d, &t); u.applies {
			checks = append(checks, r.check(u, &t))
			if r.id == NotCovered {
				break
			}
		}
	}
	return checks
}

func (a allowable) factor(m Material, t *trace) {
	t.put("fy", m.Yield, "Pa")
	t.put("n", a.n, "")
}

// notCovered refuses by name what the basis has no rule for.
func (a allowable) notCovered(s *section.Section, _ Material, d *Demand, t *trace) use {
	bends, pushed := d.Moment != 0 || d.MomentZ != 0, !(d.Axial <= 0)
	switch {
	case s.Shape == section.Angle && bends:
		t.say("bending of angles: their principal axes are not the axes of bending, which this basis has no rule for")
	case s.Shape == section.ChordSet && (bends || pushed):
		t.say("chord sets in bending or compression: EN 1993-1-1:2005 6.4 needs the stiffness of the lacing, which is not stated")
	default:
		return use{}
	}
	t.put("A", s.A, "m²")
	return refuse()
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

func (a allowable) bendingZ(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.MomentZ == 0 {
		return use{}
	}
	t.put("Wel,z", s.Welz, "m³")
	a.factor(m, t)
	return against(d.MomentZ, s.Welz*m.Yield/a.n)
}

func (a allowable) shearY(s *section.Section, m Material, d *Demand, t *trace) use {
	if d.ShearY == 0 {
		return use{}
	}
	t.put("Av,y", s.Avy, "m²")
	a.factor(m, t)
	return against(d.ShearY, s.Avy*m.Yield/(math.Sqrt(3)*a.n))
}

func (a allowable) deflection(_ *section.Section, _ Material, d *Demand, t *trace) use {
	return deflection(d, t)
}

func (a allowable) frequency(_ *section.Section, _ Material, d *Demand, t *trace) use {
	return frequency(d, t)
}
