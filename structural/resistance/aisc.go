package resistance

import (
	"fmt"

	"spanwright/structural/section"
)

// ASD and LRFD are the methods of AISC 360-22 section B3, and the names of their
// design bases.
const (
	ASD  = "aisc-asd"
	LRFD = "aisc-lrfd"
)

// aisc is the design basis of AISC 360-22, chapters B4, D, E, F, G and H.
type aisc struct {
	lrfd bool
}

// AISC returns the design basis "aisc-asd" or "aisc-lrfd" of AISC 360-22. The demand
// must come from the load combinations of the same method (ASCE 7-22 section 2.4 or
// 2.3). Anything but ASD or LRFD is an error.
//
// First-order moments of a member in compression are amplified by B1 of Appendix 8
// with Cm = 1; sway (P-Δ) is not. Tubes are checked with the design wall of B4.2
// (section.Design), unless the section has it already: deflections should come from it
// too.
//
// Not covered, and refused by name: bending of angles (F10), of tees about the axis of
// symmetry and of unequal flanges (F4, F5), channels with a noncompact plate, tubes
// and boxes with slender webs, round walls over 0.45·E/Fy, chord sets (E6), slender
// angles in compression (E4), steels over 100 ksi. Webs count without stiffeners and
// tension field. Torsion (H3), concentrated forces (J10) and connections are not
// checked.
func AISC(method string) (Basis, error) {
	switch method {
	case ASD:
		return aisc{}, nil
	case LRFD:
		return aisc{lrfd: true}, nil
	}
	return nil, fmt.Errorf("AISC 360-22: method %q; accepted is %q or %q", method, ASD, LRFD)
}

// Name returns "aisc-asd" or "aisc-lrfd".
func (a aisc) Name() string {
	if a.lrfd {
		return LRFD
	}
	return ASD
}

// safety is the pair of resistance factor φ (LRFD) and safety factor Ω (ASD).
type safety struct{ phi, omega float64 }

var (
	general   = safety{0.90, 1.67} // D2(a), E1, F1, G1
	rupture   = safety{0.75, 2.00} // D2(b)
	rolledWeb = safety{1.00, 1.50} // G2.1(a)
)

// available takes a nominal strength to φ·Rn or Rn/Ω.
func (a aisc) available(nominal float64, f safety, t *aiscTrace) float64 {
	if a.lrfd {
		t.put("φ", f.phi, "")
		return f.phi * nominal
	}
	t.put("Ω", f.omega, "")
	return nominal / f.omega
}

// aiscChecks describe the checks in the order in which they are explained. Clause and
// formula depend on the shape: the formula bodies name them.
var aiscChecks = [...]wording{
	{id: NotCovered, passFail: true},
	{id: Bending, unit: "N·m"},
	{id: BendingZ, unit: "N·m"},
	{id: LateralBuckling, unit: "N·m"},
	{id: Shear, unit: "N"},
	{id: ShearY, unit: "N"},
	{id: Axial, unit: "N"},
	{id: Interaction},
	{id: LocalBuckling, passFail: true},
	{id: Deflecting, unit: "m"},
	{id: Vibrating, unit: "Hz"},
}

// eval runs the formula body of a check. A switch, not a table of functions: through
// one the compiler could not keep the design section of Utilisation off the heap.
func (a aisc) eval(id string, s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	switch id {
	case NotCovered:
		return notCovered(s, m, d, t)
	case Bending:
		return a.bending(s, m, d, t)
	case BendingZ:
		return a.bendingZ(s, m, d, t)
	case LateralBuckling:
		return a.lateralBuckling(s, m, d, t)
	case Shear:
		return a.shear(s, m, d, t)
	case ShearY:
		return a.shearY(s, m, d, t)
	case Axial:
		return a.axial(s, m, d, t)
	case Interaction:
		return a.interaction(s, m, d, t)
	case LocalBuckling:
		return localSlenderness(s, m, d, t)
	case Deflecting:
		t.cite("L2: deflection; the limit is the job's, as span over a number, overhangs as twice their length", deflectionWording.formula)
		return deflection(d, t.plain())
	case Vibrating:
		t.cite("L4: vibration; the floor is the job's", frequencyWording.formula)
		return frequency(d, t.plain())
	}
	return use{}
}

// Utilisation returns the highest utilisation and the governing check.
func (a aisc) Utilisation(s *section.Section, m Material, d *Demand) (float64, string) {
	if hollow(s) && s.Nominal == 0 {
		design := s.Design()
		s = &design
	}
	var top governing
	for i := range aiscChecks {
		c := &aiscChecks[i]
		if u := a.eval(c.id, s, m, d, nil); u.applies {
			top.offer(u.utilisation, c.id, c.passFail)
		}
	}
	return top.utilisation, top.id
}

// Explain returns every check that applies.
func (a aisc) Explain(s *section.Section, m Material, d *Demand) []Check {
	if hollow(s) && s.Nominal == 0 {
		design := s.Design()
		s = &design
	}
	checks := make([]Check, 0, len(aiscChecks))
	for _, c := range aiscChecks {
		t := aiscTrace{trace: trace{inputs: make([]Quantity, 0, 12)}}
		if u := a.eval(c.id, s, m, d, &t); u.applies {
			c.clause, c.formula = "AISC 360-22 "+t.clause, t.formula
			checks = append(checks, c.check(u, &t.trace))
		}
	}
	return checks
}

// hollow tells whether B4.2 has a design wall for the shape.
func hollow(s *section.Section) bool {
	return s.Shape == section.RoundTube || s.Shape == section.RectangularTube
}

// aiscTrace is a trace that also notes the clause and the formula. A nil one notes
// nothing.
type aiscTrace struct {
	trace
	clause, formula string
}

// plain returns the trace without clause and formula; nil of nil.
func (t *aiscTrace) plain() *trace {
	if t == nil {
		return nil
	}
	return &t.trace
}

func (t *aiscTrace) put(symbol string, value float64, unit string) {
	if t != nil {
		t.trace.put(symbol, value, unit)
	}
}

// say adds a remark to the note.
func (t *aiscTrace) say(note string) {
	if t == nil {
		return
	}
	if t.note != "" {
		note = t.note + "; " + note
	}
	t.note = note
}

func (t *aiscTrace) cite(clause, formula string) {
	if t != nil {
		t.clause, t.formula = clause, formula
	}
}

// steel notes the constants that most checks start from.
func (t *aiscTrace) steel(m Material) {
	t.put("Fy", m.Yield, "Pa")
	t.put("E", m.E, "Pa")
}

// notCovered refuses by name what the basis has no rule for.
func notCovered(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	reason := uncovered(s, m, d)
	if reason == "" {
		return use{}
	}
	t.cite("scope of this basis", "the case is covered by chapters B4, D, E, F, G, H as built")
	t.put("H", s.H, "m")
	t.say(reason)
	return against(1, 0)
}
