package engine_test

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/document"
	"spanwright/structural/section"
)

// bySplit is the lightest round tube that the boom would get by hand: a simple span
// of 28 m and a cantilever of 14 m, each for itself, in S355 to EN 1993-1-1. Both
// have the moment 98·w; sags are 5wL⁴/384EI and wL⁴/8EI from a root that does not
// turn, against 28/100 m and 2·14/100 m.
func bySplit(t *testing.T) section.Section {
	t.Helper()
	const E, fy = 210e9, 355e6
	list, err := section.Series("CHS")
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range list {
		own := s.Mass * 9.80665
		w, sls := 1.35*(900+own)+1.5*1200, 900+own+1200
		d, wall := s.H*1e3, s.Tw*1e3
		modulus, plastic := tube(d, wall)
		epsilon2 := 235 / (fy / 1e6)
		switch slender := d / wall; { // EN 1993-1-1:2005 table 5.2 sheet 3
		case slender <= 70*epsilon2:
			modulus = plastic
		case slender > 90*epsilon2:
			continue
		}
		I := math.Pi / 64 * (math.Pow(s.H, 4) - math.Pow(s.H-2*s.Tw, 4))
		sag := max(5*sls*math.Pow(28, 4)/384, sls*math.Pow(14, 4)/8) / (E * I)
		if 98*w <= modulus*fy && sag <= 0.28 {
			return s
		}
	}
	t.Fatal("no tube passes")
	return section.Section{}
}

// The overhang's tip sags far more where the root turns with the inner span: the
// split method saves steel there and is unsafe.
func TestSplitMethodIsUnsafeForTheBoom(t *testing.T) {
	d := inBasis(t, []byte(boom), "en1993")
	want := bySplit(t)
	s := d.Split
	if s == nil || len(s.Members) != 1 {
		t.Fatalf("summary %+v, want one member", s)
	}
	m := s.Members[0]
	if m.Split != want.Designation || m.Exact != "CHS 508x12" || !m.Unsafe || m.Check != "deflection" || !(m.Utilisation > 1) {
		t.Errorf("member %+v, want %s by split", m, want.Designation)
	}
	// Two pieces of 42 m; 147 kg/m is the exact section's.
	if got := 2 * 42 * (want.Mass - 147) / 1000; math.Abs(float64(s.DifferenceT)-got) > 0.05 || s.DifferenceT != m.DifferenceT {
		t.Errorf("difference %v t, by hand %.3f", s.DifferenceT, got)
	}
	if !slices.Equal(s.UnsafeMembers, []string{"LB1"}) || math.Abs(float64(s.TonnesSplit-s.TonnesExact-s.DifferenceT)) > 1e-9 {
		t.Errorf("summary %+v", s)
	}
	// The inner support carries w·42·21/28 = 31.5·w by moments about the root; the split
	// method would give it half of either piece, 28·w, and is not asked.
	sized := memberOf(t, d, "LB1")
	w := 0.9 + 1.2 + float64(sized.LineMass)*9.80665/1000
	if got := sized.Reactions[1]; got.Position != 28 || !within(got.Max, 31.5*w) {
		t.Errorf("reaction %+v, by hand %.2f kN", got, 31.5*w)
	}
	i := slices.IndexFunc(d.Findings, func(f document.Finding) bool { return f.Code == "split-summary" })
	if i < 0 || !strings.Contains(d.Findings[i].Message, "LB1") {
		t.Error("no finding sums up the split method")
	}
}

// Where a handbook case is the member itself, the shortcut changes nothing; simple
// spans and given sections are not compared.
func TestSplitMethodEqualsTheHandbook(t *testing.T) {
	head := "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Point load (kN),Point position (m),Moving load (kN),Horizontal load (kN/m),Section or family,Grade\n"
	rows := "F1,1,7,fixed both ends,2,3,4,3,,,IPE,S355\nP1,1,6,propped,2,3,,,10; 10 @ 1.5,,HEA,S355\nF2,1,6,fixed both ends,1,2,,,,0.5,HEB,S275\nS1,1,6,simple,2,3,,,,,IPE,S355\nG1,1,6,fixed both ends,2,3,,,,,IPE 300,S355\n"
	for _, basis := range designBases {
		d := inBasis(t, []byte(head+rows), basis)
		var marks []string
		for _, m := range d.Split.Members {
			marks = append(marks, m.Mark)
			if m.Split != m.Exact || m.Unsafe || m.DifferenceT != 0 || !within(m.Utilisation, float64(memberOf(t, d, m.Mark).Utilisation)) {
				t.Errorf("%s: %+v differs from the exact envelope", basis, m)
			}
		}
		if diff := cmp.Diff([]string{"F1", "F2", "P1"}, marks); diff != "" {
			t.Errorf("%s: members compared (-want +got):\n%s", basis, diff)
		}
		if d.Split.DifferenceT != 0 || len(d.Split.UnsafeMembers) != 0 {
			t.Errorf("%s: summary %+v", basis, d.Split)
		}
	}
}

func TestNothingToSplit(t *testing.T) {
	d := inBasis(t, []byte("Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m)\nB1,1,6,IPE,1,1\n"), "en1993")
	if d.Split != nil {
		t.Errorf("summary %+v of a simple beam", d.Split)
	}
}

// Over the corpus: the difference is that of the sections, unsafe means that the
// section fails under the exact envelope.
func TestSplitSummaryIsConsistent(t *testing.T) {
	seen, unsafe := 0, 0
	for i := range corpusSize {
		d := run(t, corpusJob(t, i))
		if d.Split == nil {
			continue
		}
		sum := 0.0
		for _, m := range d.Split.Members {
			seen++
			sum += float64(m.DifferenceT)
			if m.Unsafe != (m.Split != "" && m.Utilisation > 1+1e-9) || m.Unsafe != slices.Contains(d.Split.UnsafeMembers, m.Mark) {
				t.Errorf("job %d: %+v", i, m)
			}
			if m.Unsafe {
				unsafe++
			}
			if m.Exact != memberOf(t, d, m.Mark).Section || m.Unsafe && m.Split == m.Exact {
				t.Errorf("job %d: %+v is not the section of the member", i, m)
			}
		}
		if math.Abs(sum-float64(d.Split.DifferenceT)) > 1e-9 {
			t.Errorf("job %d: members differ by %v t, the summary by %v", i, strconv.FormatFloat(sum, 'g', -1, 64), d.Split.DifferenceT)
		}
	}
	if seen < 50 || unsafe < 3 {
		t.Errorf("the corpus compares %d members, %d unsafe; choose other jobs", seen, unsafe)
	}
}
