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
	return Setup{Basis: b, Grade: g, Strength: []action.Combination{action.Characteristic()}, Service: action.Characteristic(), Gravity: gravity}
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
	slices.SortFunc(all, func(a, b section.Section) int { return order(&a, &b, massOf) })
	return all
}

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

// basisOf returns a design basis by the name of its job.
func basisOf(t testing.TB, name string) resistance.Basis {
	t.Helper()
	var b resistance.Basis
	var err error
	switch name {
	case "allowable":
		b, err = resistance.Allowable(1.67)
	case "en1993":
		b, err = resistance.EN1993(resistance.Partial{})
	default:
		b, err = resistance.AISC(name)
	}
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// bases are the four design bases.
var bases = []string{"allowable", "en1993", resistance.ASD, resistance.LRFD}

// setupOf returns a design basis with its own combinations.
func setupOf(t testing.TB, basis, grade string) Setup {
	t.Helper()
	s := setup(t, 1.5, grade)
	var err error
	s.Basis = basisOf(t, basis)
	if s.Strength, s.Service, err = action.Sets(basis); err != nil {
		t.Fatal(err)
	}
	return s
}

func enSetup(t testing.TB, grade string) Setup { return setupOf(t, "en1993", grade) }
