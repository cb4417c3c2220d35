package sizing

import (
	"math/rand/v2"
	"strings"
	"testing"

	"spanwright/structural/action"
)

// The size of a group is the lightest of the list that passes in every member, found
// here by asking each member for each candidate.
func TestSameSizeEqualsBruteForce(t *testing.T) {
	g := rand.New(rand.NewPCG(5, 8))
	candidates := series(t, "IPE", "HEA", "HEB")
	passed := 0
	for n := range 60 {
		var members []*Prepared
		for range 2 + g.IntN(3) {
			m, _ := randomMember(g)
			m.MaxDepth, m.MaxWidth = 0, 0
			members = append(members, prepare(t, m, setupOf(t, bases[n%4], "S355")))
		}
		want := ""
		for i := range candidates {
			ok := true
			for _, p := range members {
				u, _, err := p.Utilisation(&candidates[i])
				ok = ok && err == nil && u <= 1+1e-9
			}
			if ok {
				want = candidates[i].Designation
				break
			}
		}
		got, err := SameSize(members, candidates)
		if err != nil {
			t.Fatal(err)
		}
		if got.Passes != (want != "") || len(got.Members) != len(members) {
			t.Errorf("group %d passes %v, want %q", n, got.Passes, want)
		}
		for i, r := range got.Members {
			if got.Passes && r.Section.Designation != want || r.Section.Designation != got.Members[0].Section.Designation {
				t.Errorf("group %d member %d: %s, want %s", n, i+1, r.Section.Designation, want)
			}
			if r.Utilisation > got.Members[got.Governing].Utilisation || got.Passes && !r.Passes {
				t.Errorf("group %d: member %d at %v is over the governing one", n, i+1, r.Utilisation)
			}
		}
		if got.Passes {
			passed++
		} else if len(got.Members[got.Governing].WaysOut) == 0 {
			t.Errorf("group %d: nothing passes and there is no way out", n)
		}
	}
	if passed < 10 || passed == 60 {
		t.Errorf("%d of 60 groups pass: the sample is one-sided", passed)
	}
}

func TestSameSizeIsThatOfTheHardestMember(t *testing.T) {
	s, ipe := setup(t, 1.5, "S355"), series(t, "IPE")
	span := func(l float64) Member {
		return Member{Length: l, Supports: pinned(0, l), RestraintSpacing: 1, Actions: []action.Action{{Value: 8e3}}}
	}
	alone := lightest(t, span(9), s, ipe)
	g, err := SameSize([]*Prepared{prepare(t, span(4), s), prepare(t, span(9), s)}, ipe)
	if err != nil || g.Governing != 1 || g.Members[0].Section.Designation != alone.Section.Designation {
		t.Errorf("group %+v, want %s by member 2, %v", g.Members[0].Section.Designation, alone.Section.Designation, err)
	}
	if len(g.Members[0].LighterRejected) != 0 {
		t.Errorf("the short member rejects %+v, which it would pass with", g.Members[0].LighterRejected)
	}
}

func TestSameSizeRefuses(t *testing.T) {
	p := prepare(t, Member{Length: 6, Supports: pinned(0, 6)}, setup(t, 1.5, "S355"))
	if _, err := SameSize(nil, series(t, "IPE")); err == nil || !strings.Contains(err.Error(), "no members") {
		t.Errorf("error %v", err)
	}
	if _, err := SameSize([]*Prepared{p}, nil); err == nil || !strings.Contains(err.Error(), "no candidates") {
		t.Errorf("error %v", err)
	}
	low := prepare(t, Member{Length: 6, Supports: pinned(0, 6), MaxDepth: 0.05}, setup(t, 1.5, "S355"))
	if _, err := SameSize([]*Prepared{p, low}, series(t, "IPE")); err == nil || !strings.Contains(err.Error(), "50 mm") {
		t.Errorf("error %v, want one with the depth", err)
	}
}

func TestDepthAndWidthLimits(t *testing.T) {
	m := Member{Length: 9, Supports: pinned(0, 9), RestraintSpacing: 1, Actions: []action.Action{{Value: 15e3}}}
	s, list := setup(t, 1.5, "S355"), series(t, "IPE", "HEB")
	free := lightest(t, m, s, list)
	m.MaxDepth = free.Section.H - 0.001
	low := lightest(t, m, s, list)
	if !low.Passes || low.Section.H > m.MaxDepth || low.Section.Mass <= free.Section.Mass {
		t.Errorf("under %v m: %s after %s", m.MaxDepth, low.Section.Designation, free.Section.Designation)
	}
	found := false
	for _, k := range low.Skipped {
		found = found || k.Section == free.Section.Designation && strings.Contains(k.Reason, "mm deep")
	}
	if !found {
		t.Errorf("skipped %+v lacks %s with its depth", low.Skipped, free.Section.Designation)
	}
	m.MaxDepth, m.MaxWidth = 0, 0.2
	if narrow := lightest(t, m, s, list); narrow.Section.B > 0.2 {
		t.Errorf("%s is %v m wide", narrow.Section.Designation, narrow.Section.B)
	}
	m.MaxWidth = 0.01
	if _, err := Lightest(prepare(t, m, s), list); err == nil || !strings.Contains(err.Error(), "10 mm") {
		t.Errorf("error %v, want one with the width", err)
	}
}

func TestMemberOverTheStockLengthIsWarnedOf(t *testing.T) {
	m := Member{Length: 24.5, Supports: pinned(0, 24.5), StockLength: 12}
	r, err := prepare(t, m, setup(t, 1.5, "S355")).Explain(named(t, "HE 300 B"))
	if err != nil || len(r.Warnings) != 1 || !strings.Contains(r.Warnings[0], "at least 2 splices") {
		t.Errorf("warnings %q, want 2 splices, %v", r.Warnings, err)
	}
	m.StockLength = 24.5
	if r, err = prepare(t, m, setup(t, 1.5, "S355")).Explain(named(t, "HE 300 B")); err != nil || len(r.Warnings) != 0 {
		t.Errorf("warnings %q, want none, %v", r.Warnings, err)
	}
}

func TestSectionHeavierThanFollowedIsRefused(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6)}
	s := *named(t, "HE 300 B")
	s.Mass = heaviest + 1
	if _, err := prepare(t, m, setup(t, 1.5, "S355")).Explain(&s); err == nil || !strings.Contains(err.Error(), "8001 kg/m") {
		t.Errorf("error %v, want one with the mass", err)
	}
}
