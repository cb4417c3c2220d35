package sizing

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// A Sizer chooses what Lightest chooses, for every kind of member and basis.
func TestSizerEqualsLightest(t *testing.T) {
	g := rand.New(rand.NewPCG(21, 34))
	lists := [][]section.Section{series(t, "IPE", "HEA", "HEB", "UPN"), series(t, "SHS", "CHS", "L")}
	for _, basis := range bases {
		for _, list := range lists {
			s := setupOf(t, basis, "S355")
			shuffled := slices.Clone(list)
			g.Shuffle(len(shuffled), func(i, j int) { shuffled[i], shuffled[j] = shuffled[j], shuffled[i] })
			z, err := NewSizer(s, shuffled)
			if err != nil {
				t.Fatal(err)
			}
			var members []Member
			for range 300 {
				m, _ := randomMember(g)
				members = append(members, m)
			}
			choices, err := z.Choose(members)
			if err != nil {
				t.Fatal(err)
			}
			passed := 0
			for i, c := range choices {
				r, err := Lightest(prepare(t, members[i], s), list)
				same, other := z.Lightest(members[i])
				if diff := cmp.Diff(r, same, cmpopts.IgnoreUnexported(beam.Envelope{})); diff != "" || (err == nil) != (other == nil) {
					t.Errorf("%s: Lightest and Sizer.Lightest differ: %v, %v\n%s", basis, err, other, diff)
				}
				switch {
				case err != nil || !r.Passes:
					if c.Index != -1 {
						t.Errorf("%s: chose %s where Lightest finds none: %v\n%+v", basis, shuffled[c.Index].Designation, err, members[i])
					}
				case c.Index < 0 || shuffled[c.Index].Designation != r.Section.Designation || math.Float64bits(c.Utilisation) != math.Float64bits(r.Utilisation) || c.Check != r.Governing:
					t.Errorf("%s: choice %+v, want %s at %v by %s\n%+v", basis, c, r.Section.Designation, r.Utilisation, r.Governing, members[i])
				default:
					passed++
				}
			}
			if passed < 50 {
				t.Errorf("%s: %d passed: the sample is one-sided", basis, passed)
			}
		}
	}
}

func TestSizerReportsMembersThatCannotBeAnalysed(t *testing.T) {
	z, err := NewSizer(setup(t, 1.5, "S355"), series(t, "IPE"))
	if err != nil {
		t.Fatal(err)
	}
	good := Member{Length: 6, Supports: pinned(0, 6)}
	choices, err := z.Choose([]Member{good, {Length: math.NaN()}, good, {Length: 6, Supports: pinned(2)}})
	if err == nil || !strings.Contains(err.Error(), "member 2") || !strings.Contains(err.Error(), "member 4") || strings.Contains(err.Error(), "member 1:") {
		t.Errorf("error %v, want members 2 and 4", err)
	}
	if choices[0].Index < 0 || choices[0] != choices[2] || choices[1].Index != -1 || choices[3].Index != -1 {
		t.Errorf("choices %+v", choices)
	}
}

func TestSizerRefuses(t *testing.T) {
	s := setup(t, 1.5, "A106 B")
	if _, err := NewSizer(s, series(t, "IPE")); err == nil || !strings.Contains(err.Error(), "A106 B") {
		t.Errorf("error %v", err)
	}
	if _, err := NewSizer(s, nil); err == nil {
		t.Error("no candidates are accepted")
	}
	s.Grade = material.Grade{}
	if _, err := NewSizer(s, series(t, "IPE")); err == nil {
		t.Error("no grade is accepted")
	}
}

// Memory and, by that, work grow with the members and with nothing else: a simple
// span costs fewer than one allocation, whatever the number of candidates tried.
func TestSizerAllocatesWithTheMembersAlone(t *testing.T) {
	z, err := NewSizer(caseSetup(t), caseSections())
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range []int{1000, 10_000, 100_000} {
		members := caseMembers(n)
		got := testing.AllocsPerRun(3, func() {
			if _, err := z.Choose(members); err != nil {
				t.Error(err)
			}
		})
		if got > 0.05*float64(n)+60 {
			t.Errorf("%v allocations for %d members", got, n)
		}
	}
}

// counting counts the checks of a basis.
type counting struct {
	sparse
	checks *int
}

func (c counting) Utilisation(s *section.Section, m resistance.Material, d *resistance.Demand) (float64, string) {
	*c.checks++
	return c.sparse.Utilisation(s, m, d)
}

// Checks grow in line with the members: what one member costs does not depend on how
// many there are.
func TestChecksGrowInLineWithTheMembers(t *testing.T) {
	s := caseSetup(t)
	members := caseMembers(100_000)
	per := map[int]float64{}
	for _, n := range []int{1000, 10_000, 100_000} {
		count := 0
		s.Basis = counting{sparse{355e6, 210e9, 81e9}, &count}
		z, err := NewSizer(s, caseSections())
		if err != nil {
			t.Fatal(err)
		}
		count = 0
		var p Prepared
		p.setUp(s)
		for _, m := range members[:n] {
			if err := p.prepare(m); err != nil {
				t.Fatal(err)
			}
			z.choose(&p)
		}
		per[n] = float64(count) / float64(n)
	}
	if math.Abs(per[1000]-per[10_000]) > 0.1*per[10_000] || math.Abs(per[10_000]-per[100_000]) > 0.05*per[10_000] || per[10_000] > 10 {
		t.Errorf("checks by member of 400 candidates: %v", per)
	}
}
