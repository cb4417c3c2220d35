package resistance

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"spanwright/structural/section"
)

// catalogue returns every catalogued section, with a flat and a solid round, which
// are made by dimensions only.
func catalogue(t testing.TB) []section.Section {
	t.Helper()
	var all []section.Section
	for _, f := range section.Families() {
		if f.Sizes == 0 {
			continue
		}
		series, err := section.Series(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, series...)
	}
	for _, name := range []string{"FLAT 200x20", "ROUND 60"} {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, s)
	}
	if len(all) < 100 {
		t.Fatalf("only %d sections", len(all))
	}
	return all
}

// everyShape returns the catalogue with plated, open and singly symmetric sections.
func everyShape(t testing.TB) []section.Section {
	t.Helper()
	all := catalogue(t)
	for _, name := range []string{
		"WELDED-I 1500x300x8x20", "WELDED-I 600x400x10x10", "WELDED-I 500x200x10x16", "WELDED-BOX 600x400x8x12", "WELDED-BOX 300x300x12x12",
		"CHANNEL 200x80x6x11", "TEE 150x200x10x15", "TEE 200x100x6x10", "L 100x100x10", "L 150x100x8", "FLAT 300x6",
	} {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, s)
	}
	chords := section.Section{Designation: "chords", Shape: section.ChordSet, A: 0.01, Ry: 0.5, Rz: 0.5, Wely: 1e-3, Welz: 1e-3, Avy: 1e-3, Avz: 1e-3}
	return append(all, girder, chords)
}

// girder has flanges of different size, properties by a program of its own from
// rectangles.
var girder = section.Section{
	Designation: "girder", Shape: section.UnequalI, Making: section.Welded, H: 1, B: 0.3, Tw: 0.010, Tf: 0.020, LowerB: 0.2, LowerTf: 0.015,
	A: 0.01865, Iy: 0.00280651, Iz: 5.50804e-05, Wely: 0.00486292, Welz: 0.000367203, Wply: 0.00652806, Wplz: 0.000624125, J: 1.34667e-06, Iw: 7.89796e-06,
	Avy: 0.009, Avz: 0.00965, Ry: 0.387922, Rz: 0.0543449, Zc: 0.577125, Z0: 0.234239, Wagner: -0.576413, WebSlender: 96.5, FlangeSlender: 7.25,
}

// decades draws a value spread evenly over the decades, and now and then zero.
func decades(t *rapid.T, label string, lo, hi float64) float64 {
	if rapid.IntRange(0, 9).Draw(t, label+" is zero") == 0 {
		return 0
	}
	return math.Pow(10, rapid.Float64Range(math.Log10(lo), math.Log10(hi)).Draw(t, label))
}

func drawDemand(t *rapid.T) Demand {
	d := Demand{
		Moment:         decades(t, "moment", 1, 1e9),
		Shear:          decades(t, "shear", 1, 1e9),
		Axial:          decades(t, "axial", 1, 1e9),
		LateralSpacing: decades(t, "spacing", 0.01, 1000),
		LengthY:        decades(t, "length y", 0.01, 1000),
		LengthZ:        decades(t, "length z", 0.01, 1000),
	}
	d.MomentZ, d.ShearY = decades(t, "moment z", 1, 1e9), decades(t, "shear y", 1, 1e9)
	d.MomentFactor = rapid.SampledFrom([]float64{0, 1, 1.13, 2.7}).Draw(t, "moment factor")
	d.NetAreaFactor = rapid.SampledFrom([]float64{0, 0.5, 0.85, 1}).Draw(t, "net area factor")
	d.Frequency, d.FrequencyFloor = decades(t, "frequency", 0.1, 100), decades(t, "floor", 0.1, 100)
	if rapid.Bool().Draw(t, "tension") {
		d.Axial = -d.Axial
	}
	for range rapid.IntRange(0, 3).Draw(t, "deflections") {
		d.Deflections = append(d.Deflections, Deflection{Value: decades(t, "w", 1e-6, 10), Span: 5, Limit: 5.0 / 300})
	}
	return d
}

func drawMaterial(t *rapid.T) Material {
	fy := rapid.Float64Range(200e6, 700e6).Draw(t, "fy")
	return Material{Yield: fy, Ultimate: 1.2 * fy, E: 210e9, G: 81e9}
}

func drawSection(t *rapid.T, all []section.Section) *section.Section {
	return &all[rapid.IntRange(0, len(all)-1).Draw(t, "section")]
}

func drawBasis(t *rapid.T) Basis {
	b, err := Allowable(rapid.Float64Range(1.5, 10).Draw(t, "factor"))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestUtilisationEqualsExplanationBitForBit(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		s, m, d, b := drawSection(t, all), drawMaterial(t), drawDemand(t), drawBasis(t)
		got, id := b.Utilisation(s, m, &d)
		want, wantID := Governing(b.Explain(s, m, &d))
		if math.Float64bits(got) != math.Float64bits(want) || id != wantID {
			t.Fatalf("search %v by %q, explanation %v by %q", got, id, want, wantID)
		}
	})
}

func TestChecksAreFiniteAndConsistent(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		s, m, d, b := drawSection(t, all), drawMaterial(t), drawDemand(t), drawBasis(t)
		for _, c := range b.Explain(s, m, &d) {
			if !(0 <= c.Utilisation && c.Utilisation <= ceiling) {
				t.Fatalf("%s of %s: utilisation %v", c.ID, s.Designation, c.Utilisation)
			}
			if want := c.Demand / c.Resistance; c.Utilisation != want && c.Utilisation != ceiling {
				t.Fatalf("%s of %s: utilisation %v, demand over resistance %v", c.ID, s.Designation, c.Utilisation, want)
			}
			if c.Clause == "" || c.Formula == "" || len(c.Inputs) == 0 {
				t.Fatalf("%s explains nothing: %+v", c.ID, c)
			}
			for _, q := range c.Inputs {
				if math.IsNaN(q.Value) {
					t.Fatalf("%s of %s: input %s is NaN for %+v", c.ID, s.Designation, q.Symbol, d)
				}
			}
		}
	})
}

func TestEverySectionUnderWideDemands(t *testing.T) {
	b := basisOf(t, 1.5)
	for _, s := range catalogue(t) {
		for _, scale := range []float64{1e-3, 1, 1e3, 1e6, 1e12} {
			for _, axial := range []float64{-1, 0, 1} {
				for _, length := range []float64{1e-3, 1, 30, 1e4} {
					d := Demand{Moment: scale, Shear: scale, Axial: axial * scale, LateralSpacing: length, LengthY: length, LengthZ: length}
					u, id := b.Utilisation(&s, s355, &d)
					if !(0 < u && u <= ceiling) || id == "" {
						t.Fatalf("%s, %+v: %v by %q", s.Designation, d, u, id)
					}
				}
			}
		}
	}
}

// highest is the utilisation without the pass-fail check, whose web limit eases
// with the moment.
func highest(checks []Check) float64 {
	var top float64
	for _, c := range checks {
		if !c.PassFail {
			top = max(top, c.Utilisation)
		}
	}
	return top
}

func TestMoreDemandNeverLowersTheUtilisation(t *testing.T) {
	all := everyShape(t)
	rapid.Check(t, func(t *rapid.T) {
		s, m, b := drawSection(t, all), drawMaterial(t), drawBasis(t)
		less := drawDemand(t)
		less.LateralSpacing, less.LengthY, less.LengthZ = less.LateralSpacing+0.01, less.LengthY+0.01, less.LengthZ+0.01
		more := less
		more.Deflections = append([]Deflection(nil), less.Deflections...)
		grow := func(v *float64, label string) { *v *= rapid.Float64Range(1, 3).Draw(t, label) }
		for _, v := range []*float64{&more.Moment, &more.Shear, &more.Axial, &more.MomentZ, &more.ShearY, &more.FrequencyFloor, &more.LateralSpacing, &more.LengthY, &more.LengthZ} {
			grow(v, "growth")
		}
		for i := range more.Deflections {
			grow(&more.Deflections[i].Value, "growth of w")
		}
		lo, hi := highest(b.Explain(s, m, &less)), highest(b.Explain(s, m, &more))
		if hi < lo*(1-1e-12) {
			t.Fatalf("%s: %v for %+v, %v for the greater %+v", s.Designation, lo, less, hi, more)
		}
		if less.Axial > 0 {
			return
		}
		u, _ := b.Utilisation(s, m, &less)
		v, _ := b.Utilisation(s, m, &more)
		if v < u*(1-1e-12) {
			t.Fatalf("%s without compression: %v, %v for more", s.Designation, u, v)
		}
	})
}

func TestGreaterFactorNeverLowersTheUtilisation(t *testing.T) {
	all := catalogue(t)
	rapid.Check(t, func(t *rapid.T) {
		s, m, d := drawSection(t, all), drawMaterial(t), drawDemand(t)
		n := rapid.Float64Range(1.5, 9).Draw(t, "factor")
		less, more := basisOfDraw(t, n), basisOfDraw(t, n+rapid.Float64Range(0, 1).Draw(t, "rise"))
		if u, v := highest(less.Explain(s, m, &d)), highest(more.Explain(s, m, &d)); v < u*(1-1e-12) {
			t.Fatalf("%s: %v, %v with the greater factor", s.Designation, u, v)
		}
	})
}

func basisOfDraw(t *rapid.T, factor float64) Basis {
	b, err := Allowable(factor)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestUtilisationAllocatesNothing(t *testing.T) {
	b, all := basisOf(t, 1.5), catalogue(t)
	d := Demand{Moment: 1e4, Shear: 1e4, Axial: 1e4, LateralSpacing: 3, LengthY: 3, LengthZ: 3, Deflections: make([]Deflection, 3)}
	for i := range d.Deflections {
		d.Deflections[i] = Deflection{Value: 0.001, Limit: 0.01}
	}
	got := testing.AllocsPerRun(10, func() {
		for i := range all {
			b.Utilisation(&all[i], s355, &d)
		}
	})
	if got != 0 {
		t.Errorf("%v allocations over %d sections, want 0", got, len(all))
	}
}

func BenchmarkUtilisation(b *testing.B) {
	basis, all := basisOf(b, 1.5), catalogue(b)
	d := Demand{Moment: 1e4, Shear: 1e4, LateralSpacing: 3, LengthY: 3, LengthZ: 3, Deflections: []Deflection{{Value: 0.001, Limit: 0.01}}}
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		basis.Utilisation(&all[i%len(all)], s355, &d)
	}
}
