package engine_test

import (
	"context"
	"errors"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

const tiedHead = "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade,Same size as\n"

// Rows of one size get what the most heavily loaded of them needs, whatever their
// order and whoever names whom.
func TestSameSizeGroups(t *testing.T) {
	alone := inBasis(t, []byte(tiedHead+"B1,1,6,simple,1,1,IPE,S355,\nB2,1,6,simple,4,9,IPE,S275,\nB3,1,5,fixed both ends,2,2,IPE,S355,\n"), "en1993")
	tied := inBasis(t, []byte(tiedHead+"B1,1,6,simple,1,1,IPE,S355,B3\nB2,1,6,simple,4,9,IPE,S275,\nB3,1,5,fixed both ends,2,2,IPE,S355,B2\n"), "en1993")
	want := memberOf(t, alone, "B2").Section
	if memberOf(t, alone, "B1").Section == want {
		t.Fatal("the test's rows all need the same section")
	}
	for _, mark := range []string{"B1", "B2", "B3"} {
		m := memberOf(t, tied, mark)
		if m.Section != want || !m.Passes {
			t.Errorf("%s gets %s, want %s", mark, m.Section, want)
		}
	}
	if got, want := memberOf(t, tied, "B2").Utilisation, memberOf(t, alone, "B2").Utilisation; got != want {
		t.Errorf("B2 uses %v in the group, %v alone", got, want)
	}
	if memberOf(t, tied, "B1").SameSizeAs != "B3" {
		t.Error("the document does not say whose size B1 takes")
	}
}

func faultsOf(t *testing.T, csv, basis string, change func(*schedule.Schedule)) []engine.Fault {
	t.Helper()
	s := readCSV(t, []byte(csv), table("Standard", basis, "Base date", "2026-06-01"))
	if change != nil {
		change(&s)
	}
	_, err := engine.Run(context.Background(), freeze(t, s, ratebook.Ratio(), nil, quick), nil)
	var f *engine.FaultsError
	if !errors.As(err, &f) {
		t.Fatalf("error %v, want faults of members", err)
	}
	return f.Faults
}

func TestFaultsOfGroupsAndBases(t *testing.T) {
	two := tiedHead + "B1,1,6,simple,1,1,IPE,S355,\nB2,1,6,simple,1,1,IPE,S355,B1\n"
	for _, c := range []struct {
		name, csv, basis string
		change           func(*schedule.Schedule)
		marks            []string
		problem, remedy  string
	}{
		{"a mark that no member has", two, "en1993", func(s *schedule.Schedule) { s.Members[1].SameSizeAs = "B9" }, []string{"B2"}, `size of "B9"`, "another row"},
		{"another family", two, "en1993", func(s *schedule.Schedule) { s.Members[0].Family = "HEA" }, []string{"B2"}, "no row sized from IPE", "same family"},
		{"nothing passes for one of the group", strings.Replace(two, "6,simple,1,1,IPE,S355,\n", "30,simple,50,50,IPE,S355,\n", 1), "en1993", nil, []string{"B1"}, "no size of IPE passes", "ways out"},
		{"an angle in bending", tiedHead + "B1,1,2,simple,1,1,L,S355,\n", "en1993", nil, []string{"B1"}, "en1993 does not cover L here: angles in bending", "angles are sized as upright members alone"},
		{"stainless under AISC 360", tiedHead + "B1,1,2,simple,1,1,IPE,1.4301,\n", "aisc-lrfd", nil, []string{"B1"}, "aisc-lrfd does not cover 1.4301: AISC 360-22", "allowable"},
		{"stainless under EN 1993-1-1", tiedHead + "B1,1,2,simple,1,1,WELDED-I 200x100x6x10,1.4301,\n", "en1993", nil, []string{"B1"}, "goes by EN 1993-1-4", "allowable"},
		{"no depth left", "Mark,Quantity,Length (m),Permanent load (kN/m),Variable load (kN/m),Section or family,Max depth (mm)\nB1,1,6,1,1,IPE,50\n", "en1993", nil, []string{"B1"}, "none of the", "another family"},
	} {
		t.Run(c.name, func(t *testing.T) {
			faults := faultsOf(t, c.csv, c.basis, c.change)
			var marks []string
			for _, f := range faults {
				marks = append(marks, f.Mark)
			}
			if !slices.Equal(marks, c.marks) || !strings.Contains(faults[0].Problem, c.problem) || !strings.Contains(faults[0].Remedy, c.remedy) {
				t.Errorf("faults %+v, want %v: %s; %s", faults, c.marks, c.problem, c.remedy)
			}
		})
	}
}

// A given section that the basis does not cover is priced and said to be unchecked.
func TestGivenSectionThatIsNotCovered(t *testing.T) {
	d := inBasis(t, []byte(tiedHead+"B1,1,2,simple,1,1,L 100x100x10,S355,\n"), "en1993")
	if m := memberOf(t, d, "B1"); m.Passes || m.Governing != "not covered" {
		t.Errorf("member passes: %v, governed by %s", m.Passes, m.Governing)
	}
	f := d.Findings[0]
	if f.Severity != document.Unsafe || f.Code != "not-covered" || !strings.Contains(f.Message, "angles in bending") {
		t.Errorf("first finding %+v", f)
	}
}

// Each basis rests on its own notes, with a clause.
func TestStructuralNotesOfTheBasis(t *testing.T) {
	csv := "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Axial load (kN),Horizontal load (kN/m),Moving load (kN),Dynamic factor,Frequency floor (Hz),Section or family,Grade\n" +
		"B1,1,6,simple,1,1,50,0.2,5,1.2,3,SHS,S355\nB2,1,6,simple,1,1,,,,,,IPE,S355\n"
	for basis, clause := range map[string]string{"allowable": "6.14b", "en1993": "6.10", "aisc-asd": "2.4.1", "aisc-lrfd": "2.3.1"} {
		d := inBasis(t, []byte(csv), basis)
		if e := entryOf(t, d, "structural/combination"); !strings.Contains(e.Clause, clause) || e.Source != "design basis "+basis {
			t.Errorf("%s: combinations by %q of %q", basis, e.Clause, e.Source)
		}
		for _, id := range []string{"horizontal", "moving load", "dynamic factor", "frequency", "lateral restraint", "struts", "axial nature"} {
			entryOf(t, d, "structural/"+id)
		}
		for _, e := range d.Assumptions {
			for _, other := range []string{"en1993", "aisc"} {
				if strings.HasPrefix(e.ID, "structural/"+other) && !strings.HasPrefix(basis, other) {
					t.Errorf("%s rests on %s", basis, e.ID)
				}
			}
		}
	}
}

// Whatever a frozen job holds, the engine answers with a document that can be
// written or with an error, never with a panic or a figure that is not a number.
func TestAnyJobIsAnswered(t *testing.T) {
	s := readCSV(t, []byte(feedsSchedule), table("Base date", "2026-06-01"))
	number := rapid.OneOf(rapid.Float64Range(-1e3, 1e5), rapid.Float64Range(0, 30), rapid.SampledFrom([]float64{0, 1, -1, 1e-9, 1e9, 1e300}))
	rapid.Check(t, func(rt *rapid.T) {
		j := freeze(t, s, ratebook.Ratio(), nil, quick)
		j.Settings.DesignBasis = rapid.SampledFrom(append([]string{"none"}, designBases...)).Draw(rt, "basis")
		j.Members = slices.Clone(j.Members[:rapid.IntRange(1, 4).Draw(rt, "members")])
		for i := range j.Members {
			disturb(rt, &j.Members[i], number)
		}
		d, err := engine.Run(context.Background(), j, nil)
		if err != nil {
			return
		}
		if _, _, err := d.Canonical(); err != nil {
			rt.Fatal(err)
		}
	})
}

// disturb writes over some of a member.
func disturb(rt *rapid.T, m *schedule.Member, number *rapid.Generator[float64]) {
	m.Loads, m.Supports = slices.Clone(m.Loads), slices.Clone(m.Supports)
	fields := []*float64{&m.Length, &m.Axial, &m.Restraint, &m.LengthFactor, &m.DeflectionLimit, &m.MomentFactor, &m.NetAreaFactor, &m.FrequencyFloor, &m.MaxDepth}
	for i := range m.Loads {
		fields = append(fields, &m.Loads[i].Value, &m.Loads[i].Position, &m.Loads[i].Dynamic)
	}
	for i := range m.Supports {
		fields = append(fields, &m.Supports[i].Position)
	}
	for range rapid.IntRange(0, 3).Draw(rt, "changes") {
		*rapid.SampledFrom(fields).Draw(rt, "field") = number.Draw(rt, "value")
	}
	if rapid.Bool().Draw(rt, "train") {
		m.Loads = append(m.Loads, schedule.Load{Nature: "variable", Kind: "train", Free: true, Label: "moving load",
			Wheels: rapid.SliceOfN(number, 0, 4).Draw(rt, "wheels"), Spacings: rapid.SliceOfN(number, 0, 3).Draw(rt, "spacings")})
	}
	m.Family = rapid.SampledFrom([]string{m.Family, "IPE", "W", "L", "UPN", "HSS", "WELDED-I", "none"}).Draw(rt, "family")
	m.SameSizeAs = rapid.SampledFrom([]string{"", "", m.Mark, "B1", "B2", "none"}).Draw(rt, "same size")
}
