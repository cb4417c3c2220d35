package resistance

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func drawEN(t *rapid.T) (Basis, Material) {
	p := Partial{M0: rapid.Float64Range(1, 1.2).Draw(t, "γM0"), M1: rapid.Float64Range(1, 1.2).Draw(t, "γM1"), RolledCase: rapid.Bool().Draw(t, "rolled case")}
	b, err := EN1993(p)
	if err != nil {
		t.Fatal(err)
	}
	fy := rapid.SampledFrom([]float64{235e6, 275e6, 355e6, 440e6, 460e6}).Draw(t, "fy")
	return b, Material{Yield: fy, Ultimate: 1.2 * fy, E: 210e9, G: 81e9}
}

// members draws demands of the size that sections carry, so that every branch is met.
func drawMember(t *rapid.T) Demand {
	d := drawDemand(t)
	if rapid.Bool().Draw(t, "wide") {
		return d
	}
	for _, v := range []*float64{&d.Moment, &d.Shear, &d.Axial, &d.MomentZ, &d.ShearY} {
		*v = math.Copysign(decades(t, "effect", 1e3, 1e7), *v)
	}
	for _, v := range []*float64{&d.LateralSpacing, &d.LengthY, &d.LengthZ} {
		*v = decades(t, "length", 0.3, 20)
	}
	return d
}

func TestENSearchEqualsExplanationBitForBit(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		b, m := drawEN(t)
		s, d := drawSection(t, all), drawMember(t)
		got, id := b.Utilisation(s, m, &d)
		want, wantID := Governing(b.Explain(s, m, &d))
		if math.Float64bits(got) != math.Float64bits(want) || id != wantID {
			t.Fatalf("%s: search %v by %q, explanation %v by %q", s.Designation, got, id, want, wantID)
		}
	})
}

func TestENChecksAreFiniteAndConsistent(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		b, m := drawEN(t)
		s, d := drawSection(t, all), drawMember(t)
		seen := map[string]bool{}
		for _, c := range b.Explain(s, m, &d) {
			if want := c.Demand / c.Resistance; !(0 <= c.Utilisation && c.Utilisation <= ceiling) || c.Utilisation != want && c.Utilisation != ceiling {
				t.Fatalf("%s of %s: utilisation %v, demand over resistance %v", c.ID, s.Designation, c.Utilisation, want)
			}
			if c.Clause == "" || c.Formula == "" || len(c.Inputs) == 0 || seen[c.ID] {
				t.Fatalf("%s of %s explains nothing or comes twice: %+v", c.ID, s.Designation, c)
			}
			seen[c.ID] = true
			for _, q := range c.Inputs {
				if !(math.Abs(q.Value) <= math.MaxFloat64) {
					t.Fatalf("%s of %s: input %s is %v for %+v", c.ID, s.Designation, q.Symbol, q.Value, d)
				}
			}
		}
	})
}

func TestENEverySectionInEveryGrade(t *testing.T) {
	b := basisEN(t, Partial{})
	all := everyShape(t)
	for _, fy := range []float64{235e6, 275e6, 355e6, 420e6, 460e6} {
		m := Material{Yield: fy, Ultimate: 1.2 * fy, E: 210e9, G: 81e9}
		for i := range all {
			for _, scale := range []float64{1, 1e4, 1e6, 1e12} {
				for _, axial := range []float64{-1, 0, 1} {
					for _, length := range []float64{1e-3, 3, 1e4} {
						d := Demand{Moment: scale, Shear: scale, Axial: axial * scale, MomentZ: scale / 10, ShearY: scale / 10, LateralSpacing: length, LengthY: length, LengthZ: length}
						u, id := b.Utilisation(&all[i], m, &d)
						if !(0 < u && u <= ceiling) || id == "" {
							t.Fatalf("%s, %+v: %v by %q", all[i].Designation, d, u, id)
						}
					}
				}
			}
		}
	}
}

// growth multiplies some of the values by 1 to 3, so that each is met alone too.
func growth(t *rapid.T, values ...*float64) {
	for _, v := range values {
		if rapid.Bool().Draw(t, "grows") {
			*v *= rapid.Float64Range(1, 3).Draw(t, "growth")
		}
	}
}

// At a given axial force more moment, shear, length and sag never lower the
// utilisation: sizing gives up candidates by this rule.
func TestENMoreDemandNeverLowersTheUtilisation(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		b, m := drawEN(t)
		s, less := drawSection(t, all), drawMember(t)
		less.LateralSpacing, less.LengthY, less.LengthZ = less.LateralSpacing+0.01, less.LengthY+0.01, less.LengthZ+0.01
		more := less
		more.Deflections = append([]Deflection(nil), less.Deflections...)
		growth(t, &more.Moment, &more.Shear, &more.MomentZ, &more.ShearY, &more.LateralSpacing, &more.LengthY, &more.LengthZ, &more.FrequencyFloor)
		for i := range more.Deflections {
			growth(t, &more.Deflections[i].Value)
		}
		lo, by := b.Utilisation(s, m, &less)
		if hi, id := b.Utilisation(s, m, &more); hi < lo*(1-1e-9) {
			t.Fatalf("%s: %v by %s for %+v, %v by %s for the greater %+v", s.Designation, lo, by, less, hi, id, more)
		}
	})
}

// More compression may step into a class whose kyy is smaller, which is worth less
// than 1 % of the utilisation; otherwise it never lowers it. More tension never does.
func TestENMoreAxialForceNeverLowersTheUtilisation(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		b, m := drawEN(t)
		s, less := drawSection(t, all), drawMember(t)
		more := less
		more.Axial *= rapid.Float64Range(1, 2).Draw(t, "growth")
		slack := 1e-9
		if x, y := caseOf(s, m, &less), caseOf(s, m, &more); x.y.class != y.y.class || x.z.class != y.z.class {
			slack = 0.01
		}
		lo, by := b.Utilisation(s, m, &less)
		if hi, id := b.Utilisation(s, m, &more); hi < lo*(1-slack) {
			t.Fatalf("%s: %v by %s for %+v, %v by %s for %v N", s.Designation, lo, by, less, hi, id, more.Axial)
		}
	})
}

// A moment or a shear that appears from nothing never helps either.
func TestENEffectsFromNothing(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		b, m := drawEN(t)
		s, d := drawSection(t, all), drawMember(t)
		if d.Axial < 0 {
			d.Axial = 0
		}
		with, _ := b.Utilisation(s, m, &d)
		for name, drop := range map[string]func(*Demand){
			"moment": func(d *Demand) { d.Moment = 0 }, "moment z": func(d *Demand) { d.MomentZ = 0 },
			"shear": func(d *Demand) { d.Shear = 0 }, "shear y": func(d *Demand) { d.ShearY = 0 }, "axial": func(d *Demand) { d.Axial = 0 },
		} {
			less := d
			drop(&less)
			if without, id := b.Utilisation(s, m, &less); with < without*(1-0.01) {
				t.Fatalf("%s: %v with, %v by %s without %s; %+v", s.Designation, with, without, id, name, d)
			}
		}
	})
}

func TestENGreaterPartialFactorNeverLowersTheUtilisation(t *testing.T) {
	all := catalogue(t)
	rapid.Check(t, func(t *rapid.T) {
		s, d := drawSection(t, all), drawMember(t)
		m := s355
		d.Axial = min(d.Axial, 0) // under compression γM0 shifts the class, which needs the stress
		u, _ := basisOfEN(t, Partial{}).Utilisation(s, m, &d)
		v, _ := basisOfEN(t, Partial{M0: 1.1, M1: 1.1, M2: 1.3}).Utilisation(s, m, &d)
		if v < u*(1-1e-12) {
			t.Fatalf("%s: %v, %v with the greater factors", s.Designation, u, v)
		}
	})
}

func basisOfEN(t *rapid.T, p Partial) Basis {
	b, err := EN1993(p)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestENUtilisationAllocatesNothing(t *testing.T) {
	b, all := basisEN(t, Partial{}), everyShape(t)
	d := Demand{Moment: 1e4, Shear: 1e4, MomentZ: 1e3, ShearY: 1e3, Axial: 1e4, LateralSpacing: 3, LengthY: 3, LengthZ: 3, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}}, Frequency: 5, FrequencyFloor: 3}
	if got := testing.AllocsPerRun(10, func() {
		for i := range all {
			b.Utilisation(&all[i], s355, &d)
		}
	}); got != 0 {
		t.Errorf("%v allocations over %d sections, want 0", got, len(all))
	}
}

func BenchmarkENUtilisation(b *testing.B) {
	basis, all := basisEN(b, Partial{}), catalogue(b)
	for name, d := range map[string]Demand{
		"beam":   {Moment: 1e4, Shear: 1e4, LateralSpacing: 3, LengthY: 3, LengthZ: 3, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}}},
		"column": {Moment: 1e4, MomentZ: 1e3, Shear: 1e4, Axial: 1e5, LateralSpacing: 3, LengthY: 3, LengthZ: 3},
	} {
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for i := 0; b.Loop(); i++ {
				basis.Utilisation(&all[i%len(all)], s355, &d)
			}
		})
	}
}
