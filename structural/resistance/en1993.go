package resistance

import (
	"fmt"
	"math"

	"spanwright/structural/section"
)

// Partial holds the partial factors of the design basis "en1993" and its one choice
// between clauses. A zero factor stands for the recommended value of EN
// 1993-1-1:2005 6.1: γM0 = γM1 = 1.0, γM2 = 1.25.
type Partial struct {
	M0         float64 // γM0 on yield of cross-sections, 1 to 2
	M1         float64 // γM1 on instability, 1 to 2
	M2         float64 // γM2 on fracture in tension, 1 to 2
	RolledCase bool    // lateral-torsional buckling of I sections by 6.3.2.3 with f; by default the general case 6.3.2.2
}

// en1993 is the design basis "en1993".
type en1993 struct {
	p Partial
}

// EN1993 returns the design basis "en1993": EN 1993-1-1:2005 + A1:2014 with EN
// 1993-1-5 for plates, recommended values, against factored actions.
//
// Choices, each on the safe side where the standard leaves one:
//   - classes under compression come from N alone, with the section taken to yield
//     in bending, so that they do not ease as the moment grows;
//   - class 4 plates by effective widths: Aeff under N alone, Weff under M alone;
//   - lateral-torsional buckling by the general case 6.3.2.2 unless RolledCase;
//   - interaction of 6.3.3 by annex B with Cmy = Cmz = CmLT = 1;
//   - webs with stiffeners at the supports alone, non-rigid end posts, no share of
//     the flanges in shear; η = 1.2 for shear buckling, 1.0 for the shear area.
//
// Forces put into the web across it (EN 1993-1-5 section 6), shear lag and torsion
// are not checked. Class 4 round tubes, steels above S460 and shapes that the
// clauses in use are not written for are answered by a NotCovered check.
//
// Accepted is every factor from 1 to 2, or 0.
func EN1993(p Partial) (Basis, error) {
	for _, f := range []struct {
		name        string
		value       *float64
		recommended float64
	}{{"γM0", &p.M0, 1}, {"γM1", &p.M1, 1}, {"γM2", &p.M2, 1.25}} {
		if *f.value == 0 {
			*f.value = f.recommended
		}
		if !(1 <= *f.value && *f.value <= 2) {
			return nil, fmt.Errorf("en1993: partial factor %s is %v; accepted is 1 to 2, or 0 for the recommended %v", f.name, *f.value, f.recommended)
		}
	}
	return en1993{p: p}, nil
}

// Name returns "en1993".
func (e en1993) Name() string { return "en1993" }

// Utilisation returns the highest utilisation and the governing check.
func (e en1993) Utilisation(s *section.Section, m Material, d *Demand) (float64, string) {
	var x enCase
	x.prepare(e.p, s, m, d)
	var top governing
	for i := range enRules {
		if u := x.eval(i, nil); u.applies {
			top.offer(u.utilisation, enRules[i].id, enRules[i].passFail)
		}
	}
	return top.utilisation, top.id
}

// Explain returns every check that applies.
func (e en1993) Explain(s *section.Section, m Material, d *Demand) []Check {
	var x enCase
	x.prepare(e.p, s, m, d)
	checks := make([]Check, 0, len(enRules))
	for i := range enRules {
		t := trace{inputs: make([]Quantity, 0, 16)}
		if u := x.eval(i, &t); u.applies {
			checks = append(checks, enRules[i].check(u, &t))
		}
	}
	return checks
}

// enCase is one section under one demand: what the checks share, found once.
type enCase struct {
	p       Partial
	s       *section.Section
	m       Material
	d       *Demand
	epsilon float64
	push    float64 // N, compression; 0 in tension
	refusal string  // why the basis does not cover the case; empty where it does
	area    float64 // m², A or Aeff of class 4 under compression alone
	y, z    enBent
}

// enBent is a section in bending about one axis.
type enBent struct {
	class int     // 1 to 4, under the compression that acts with the bending
	w     float64 // m³, Wpl of class 1 and 2, Wel of class 3, Weff of class 4
}

func (x *enCase) prepare(p Partial, s *section.Section, m Material, d *Demand) {
	x.p, x.s, x.m, x.d = p, s, m, d
	x.epsilon = math.Sqrt(235e6 / m.Yield)
	x.push = max(d.Axial, 0)
	if x.refusal = x.refused(); x.refusal != "" {
		return
	}
	x.area = s.A
	if x.push > 0 {
		x.area = x.effectiveArea()
	}
	x.y = x.bentStrong()
	if d.MomentZ != 0 {
		x.z = x.bentWeak()
	}
}

// yield is fy/γM0.
func (x *enCase) yield() float64 { return x.m.Yield / x.p.M0 }

func (x *enCase) steel(t *trace) {
	t.put("fy", x.m.Yield, "Pa")
	t.put("γM0", x.p.M0, "")
}

// eval runs the formula body of enRules[i].
func (x *enCase) eval(i int, t *trace) use {
	switch enRules[i].body {
	case enRefusal:
		return x.notCovered(t)
	case enDeflection:
		return deflection(x.d, t)
	case enFrequency:
		return frequency(x.d, t)
	}
	if x.refusal != "" {
		return use{}
	}
	switch enRules[i].body {
	case enBending:
		return x.bending(t)
	case enBendingZ:
		return x.bendingZ(t)
	case enLateral:
		return x.lateralBuckling(t)
	case enShear:
		return x.shear(t)
	case enShearY:
		return x.shearY(t)
	case enWeb:
		return x.webBuckling(t)
	case enAxial:
		return x.axial(t)
	case enInteraction:
		return x.interaction(t)
	case enLocal:
		return x.flangeInduced(t)
	}
	return use{}
}
