package sizing

import (
	"slices"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

const gravity = 9.80665

func setup(t testing.TB, factor float64, grade string) Setup {
	t.Helper()
	b, err := resistance.Allowable(factor)
	if err != nil {
		t.Fatal(err)
	}
	g, err := material.Find(grade)
	if err != nil {
		t.Fatal(err)
	}
	return Setup{Basis: b, Grade: g, Combination: action.Characteristic(), Gravity: gravity}
}

func series(t testing.TB, families ...string) []section.Section {
	t.Helper()
	var all []section.Section
	for _, f := range families {
		s, err := section.Series(f)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, s...)
	}
	slices.SortFunc(all, func(a, b section.Section) int { return order(&a, &b, mass) })
	return all
}

func mass(s *section.Section) float64 { return s.Mass }

func prepare(t testing.TB, m Member, s Setup) *Prepared {
	t.Helper()
	p, err := Prepare(m, s)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func lightest(t testing.TB, m Member, s Setup, candidates []section.Section) Result {
	t.Helper()
	r, err := Lightest(prepare(t, m, s), candidates)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func named(t testing.TB, designation string) *section.Section {
	t.Helper()
	s, err := section.Find(designation)
	if err != nil {
		t.Fatal(err)
	}
	return &s
}

func pinned(xs ...float64) []beam.Support {
	var all []beam.Support
	for _, x := range xs {
		all = append(all, beam.Support{X: x, Kind: beam.Pinned})
	}
	return all
}

func check(t testing.TB, r Result, id string) resistance.Check {
	t.Helper()
	for _, c := range r.Checks {
		if c.ID == id {
			return c
		}
	}
	t.Fatalf("no %s check among %v", id, r.Checks)
	return resistance.Check{}
}
