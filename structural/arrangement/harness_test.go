package arrangement

import (
	"context"
	"math"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

const gravity = 9.80665

// study returns a length under 0.9 kN/m permanent and 1.2 kN/m variable in CHS S355
// with factor 3, as the boom of the demo.
func study(t testing.TB, length float64, kinds ...Kind) Study {
	t.Helper()
	b, err := resistance.Allowable(3)
	if err != nil {
		t.Fatal(err)
	}
	g, err := material.Find("S355")
	if err != nil {
		t.Fatal(err)
	}
	return Study{
		Setup: sizing.Setup{
			Basis: b, Grade: g, Gravity: gravity,
			Strength: []action.Combination{action.Characteristic()}, Service: action.Characteristic(),
		},
		Member: sizing.Member{
			Length: length, DeflectionLimit: 100,
			Actions: []action.Action{{Nature: action.Permanent, Value: 900}, {Value: 1200}},
		},
		Sections: series(t, "CHS"),
		Kinds:    kinds,
		Towers:   TowerRule{Height: 8},
	}
}

func series(t testing.TB, family string) []section.Section {
	t.Helper()
	s, err := section.Series(family)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func candidates(t testing.TB, s Study) []Candidate {
	t.Helper()
	all, err := Candidates(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return all
}

// only returns the one candidate of a study of one kind.
func only(t testing.TB, s Study) Candidate {
	t.Helper()
	all := candidates(t, s)
	if len(all) != 1 {
		t.Fatalf("%d candidates, want 1", len(all))
	}
	return all[0]
}

// near reports a got that is off want by more than a relative tolerance.
func same(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance*math.Max(math.Abs(want), 1e-30)) {
		t.Errorf("%s: got %v, want %v", what, got, want)
	}
}
