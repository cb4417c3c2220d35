package sizing

import (
	"encoding/json"
	"flag"
	"math"
	"math/rand/v2"
	"os"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// The case of many members: 10,000 simple spans against 400 I sections, checked by
// EN 1993-1-1:2005 6.2.5 and 6.2.6 (plastic), 6.3.1 with curves b and c, 6.3.2.2 with
// curve b, N and M added up, deflection L/360. It knows no own weight.

// sparse is the design basis of the case.
type sparse struct{ yield, e, g float64 }

func (sparse) Name() string { return "sparse" }

func (b sparse) Utilisation(s *section.Section, _ resistance.Material, d *resistance.Demand) (float64, string) {
	u, id := b.interaction(s, d), resistance.Interaction
	if v := d.Shear * math.Sqrt(3) / (s.Avz * b.yield); v > u {
		u, id = v, resistance.Shear
	}
	for _, f := range d.Deflections {
		if v := f.Value / f.Limit; v > u {
			u, id = v, resistance.Deflecting
		}
	}
	return u, id
}

func (b sparse) interaction(s *section.Section, d *resistance.Demand) float64 {
	squash := s.A * b.yield
	u := 0.0
	weak := math.Pi * math.Pi * b.e * s.Iz / (d.LateralSpacing * d.LateralSpacing)
	if d.Axial > 0 {
		strong := math.Pi * math.Pi * b.e * s.Iy / (d.LengthY * d.LengthY)
		u = d.Axial / (squash * min(reduction(squash/strong, 0.34), reduction(squash/weak, 0.49)))
	}
	if d.Moment > 0 {
		c1 := max(d.MomentFactor, 1)
		critical := c1 * weak * math.Sqrt(s.Iw/s.Iz+b.g*s.J/weak)
		plastic := s.Wply * b.yield
		u += d.Moment / (plastic * reduction(plastic/critical, 0.34))
	}
	return u
}

// reduction is χ of EN 1993-1-1:2005 (6.49) for λ².
func reduction(squared, alpha float64) float64 {
	phi := 0.5 * (1 + alpha*(math.Sqrt(squared)-0.2) + squared)
	return min(1, 1/(phi+math.Sqrt(phi*phi-squared)))
}

func (b sparse) Explain(s *section.Section, m resistance.Material, d *resistance.Demand) []resistance.Check {
	u, id := b.Utilisation(s, m, d)
	return []resistance.Check{{ID: id, Utilisation: u}}
}

// caseSections are 400 I sections: 100 depths, four widths each.
func caseSections() []section.Section {
	all := make([]section.Section, 400)
	for k := range all {
		h := 0.1 + 0.9*float64(k/4)/99
		w := min(h*[4]float64{0.45, 0.55, 0.8, 1}[k%4], 0.45)
		tw := 0.004 + 0.014*h
		tf, r := 1.55*tw, 1.2*tw
		hw := h - 2*tf
		a := 2*w*tf + hw*tw + (4-math.Pi)*r*r
		iz := 2*tf*w*w*w/12 + hw*tw*tw*tw/12
		iy := (w*h*h*h-(w-tw)*hw*hw*hw)/12 + 0.03*r*r*4*(h/2-tf)*(h/2-tf)*3
		all[k] = section.Section{
			Designation: "case", Family: "IPE", Shape: section.ISection, Making: section.HotRolled, H: h, B: w, Tw: tw, Tf: tf, R: r, Thickness: tf,
			A: a, Iy: iy, Iz: iz, Wely: iy / (h / 2), Wply: w*tf*(h-tf) + tw*hw*hw/4, J: (2*w*tf*tf*tf + (h-tf)*tw*tw*tw) / 3,
			Iw: iz * (h - tf) * (h - tf) / 4, Avz: a - 2*w*tf + (tw+2*r)*tf, Mass: 7850 * a,
		}
	}
	return all
}

func caseMembers(n int) []Member {
	g := rand.New(rand.NewPCG(3, 3))
	all := make([]Member, n)
	for i := range all {
		l := 2 + 12*g.Float64()
		m := Member{
			Length: l, Supports: pinned(0, l), DeflectionLimit: 360, RestraintSpacing: l / float64(1+g.IntN(4)),
			MomentFactor: [3]float64{1, 1.132, 1.35}[g.IntN(3)],
			Actions:      []action.Action{{Value: 2e3 + 38e3*g.Float64()}},
		}
		if g.IntN(2) == 0 {
			m.Axial = 6e5 * g.Float64()
		}
		all[i] = m
	}
	return all
}

func caseSetup(t testing.TB) Setup {
	s := setup(t, 1.5, "S355")
	s.Basis, s.Gravity = sparse{355e6, 210e9, 81e9}, 1e-15
	return s
}

// Every member of the case gets the section that trying all 400 by the formulas
// above, without any of this package's code, finds the lightest.
func TestCaseOfManyMembers(t *testing.T) {
	sections, members, b := caseSections(), caseMembers(10000), sparse{355e6, 210e9, 81e9}
	z, err := NewSizer(caseSetup(t), sections)
	if err != nil {
		t.Fatal(err)
	}
	got, err := z.Choose(members)
	if err != nil {
		t.Fatal(err)
	}
	none := 0
	for i, m := range members {
		want, least, w, l := -1, math.Inf(1), m.Actions[0].Value, m.Length
		for k := range sections {
			s := &sections[k]
			u := b.interaction(s, &resistance.Demand{Moment: w * l * l / 8, Axial: m.Axial, LateralSpacing: m.RestraintSpacing, LengthY: l, MomentFactor: m.MomentFactor})
			u = max(u, w*l/2*math.Sqrt(3)/(s.Avz*355e6), 5*w*l*l*l*360/(384*210e9*s.Iy))
			if u <= 1 && s.Mass < least {
				want, least = k, s.Mass
			}
		}
		if want < 0 {
			none++
		}
		if got[i].Index != want {
			t.Errorf("member %d: section %d, want %d\n%+v", i, got[i].Index, want, m)
		}
	}
	if none > 1000 {
		t.Errorf("%d members without section: the sample is one-sided", none)
	}
}

// caseFile names a case that another program has made and solved, to be compared member
// by member: go test ./structural/sizing -run CaseOfAnother -case file.json. JSON: section
// {h, b, A, Iy, Iz, Wel, Wpl, It, Iw, Av, m}, L, w, N, Lb, C1 as lists, chosen (index of
// the section, -1 for none) and util.
var caseFile = flag.String("case", "testdata/case.json", "case of another program")

type otherCase struct {
	Section struct {
		H   []float64 `json:"h"`
		B   []float64 `json:"b"`
		M   []float64 `json:"m"`
		A   []float64
		Iy  []float64
		Iz  []float64
		Wel []float64
		Wpl []float64
		It  []float64
		Iw  []float64
		Av  []float64
	} `json:"section"`
	L      []float64
	W      []float64 `json:"w"`
	N      []float64
	Lb     []float64
	C1     []float64
	Chosen []int      `json:"chosen"`
	Util   []*float64 `json:"util"`
}

// testdata/case.json holds 40 members and 400 sections of the case with the choices of
// a NumPy program by the formulas at the head of this file.
func TestCaseOfAnotherProgram(t *testing.T) {
	text, err := os.ReadFile(*caseFile)
	if err != nil {
		t.Fatal(err)
	}
	var c otherCase
	if err := json.Unmarshal(text, &c); err != nil {
		t.Fatal(err)
	}
	if len(c.L) == 0 || len(c.Section.A) == 0 {
		t.Fatalf("%s holds %d members and %d sections", *caseFile, len(c.L), len(c.Section.A))
	}
	var sections []section.Section
	for k, o := range c.Section.A {
		sections = append(sections, section.Section{
			Designation: "case", Family: "IPE", Shape: section.ISection, H: c.Section.H[k], B: c.Section.B[k], Thickness: 0.01, A: o,
			Iy: c.Section.Iy[k], Iz: c.Section.Iz[k], Wely: c.Section.Wel[k], Wply: c.Section.Wpl[k], J: c.Section.It[k], Iw: c.Section.Iw[k],
			Avz: c.Section.Av[k], Mass: c.Section.M[k],
		})
	}
	var members []Member
	for i, l := range c.L {
		members = append(members, Member{
			Length: l, Supports: pinned(0, l), DeflectionLimit: 360, RestraintSpacing: c.Lb[i], MomentFactor: c.C1[i],
			Axial: c.N[i], Actions: []action.Action{{Value: c.W[i]}},
		})
	}
	z, err := NewSizer(caseSetup(t), sections)
	if err != nil {
		t.Fatal(err)
	}
	got, err := z.Choose(members)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range c.Chosen {
		if got[i].Index != want || want >= 0 && math.Abs(got[i].Utilisation-*c.Util[i]) > 1e-9 {
			t.Errorf("member %d: %+v, want section %d", i, got[i], want)
		}
	}
}

// One operation sizes the 10,000 members of the case on all cores, candidates'
// preparation included. Compare with a vectorised program by hand, in one sitting.
func BenchmarkCase(b *testing.B) {
	sections, members, s := caseSections(), caseMembers(10000), caseSetup(b)
	b.ReportAllocs()
	for b.Loop() {
		z, err := NewSizer(s, sections)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := z.Choose(members); err != nil {
			b.Fatal(err)
		}
	}
}
