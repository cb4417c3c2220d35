// Package material holds the steel grades that members are made of and says
// which section families are made in which grade.
//
//	grades.csv, suits.csv (embedded) → rows → grades, verdicts
//	"S 355 J2" → Find → Grade → For(family) → Strength(thickness) → fy, fu
//	the user's own values → New → Grade
//	family, grade → Suits → Verdict
//
// All values are in SI: stresses in Pa, thickness in m, density in kg/m³.
package material

import (
	"fmt"
	"slices"
	"strings"
)

// Band is the strength of a grade up to a thickness.
type Band struct {
	UpTo     float64 // m, greatest thickness of the band, inclusive
	Yield    float64 // Pa, least yield strength
	Ultimate float64 // Pa, least tensile strength
}

// Grade is a steel grade with its elastic constants and its strength by
// thickness.
type Grade struct {
	Name     string  // as in Names, e.g. "S355", "A53 B"
	Standard string  // e.g. "EN 10025-2:2004"
	Source   string  // table and clause of each value
	E        float64 // Pa, Young's modulus
	G        float64 // Pa, shear modulus
	Density  float64 // kg/m³
	Bands    []Band  // thinnest first; the lowest of all families where Variants differ

	Variants []Variant // strengths that hold for some families only; mostly none
}

// Variant is the strength of a grade in some section families: A500 is stronger
// in shaped than in round tube, stainless plate than bar.
type Variant struct {
	Families []string // canonical family names
	Bands    []Band   // thinnest first
}

// For returns the grade with the strength that it has in a section family (its
// canonical name). Without For, Strength gives the lowest of all families, which
// is safe.
func (g Grade) For(family string) Grade {
	for _, v := range g.Variants {
		if slices.Contains(v.Families, family) {
			g.Bands = v.Bands
			return g
		}
	}
	return g
}

// Strength returns the least yield and tensile strength in Pa at a thickness
// in m, by the grade's bands. A thickness that is not above zero or that is
// over the last band is an error that names the limit.
func (g Grade) Strength(thickness float64) (fy, fu float64, err error) {
	if len(g.Bands) == 0 {
		return 0, 0, fmt.Errorf("grade %q has no strength bands; take one from Find", g.Name)
	}
	if !(thickness > 0) {
		return 0, 0, fmt.Errorf("grade %s: thickness %.4g mm is not above zero", g.Name, thickness*1000)
	}
	for _, b := range g.Bands {
		if thickness <= b.UpTo*(1+1e-9) {
			return b.Yield, b.Ultimate, nil
		}
	}
	limit := g.Bands[len(g.Bands)-1].UpTo
	return 0, 0, fmt.Errorf("grade %s (%s): thickness %.4g mm is over the limit of %.4g mm; take a thinner part or another grade",
		g.Name, g.Standard, thickness*1000, limit*1000)
}

// Names returns the names of all grades in the order of the data.
func Names() []string {
	d, err := load()
	if err != nil {
		return nil
	}
	return slices.Clone(d.names)
}

// Find returns the grade of a trade spelling: letter case, spaces, hyphens,
// "ASTM", "EN 10025-2", "Gr." and "Grade" don't matter, and a quality after an EN
// grade (S355J2+N) names the same strengths; NL and ML stand for N and M, JRH, J0H
// and J2H for the hollow-section grade (S355H). Anything else is an *UnknownError
// with near misses.
func Find(name string) (Grade, error) {
	d, err := load()
	if err != nil {
		return Grade{}, err
	}
	g, ok := d.grades[canonical(name)]
	if !ok {
		return Grade{}, &UnknownError{Found: name, Near: d.near(name)}
	}
	return g.clone(), nil
}

// UnknownError is a grade name that is not held.
type UnknownError struct {
	Found string   // as written by the caller
	Near  []string // grades that may have been meant, likeliest first; may be empty
}

// Error says what was found and what would be accepted.
func (e *UnknownError) Error() string {
	if len(e.Near) > 0 {
		return fmt.Sprintf("unknown steel grade %q; did you mean %s?", e.Found, strings.Join(e.Near, " or "))
	}
	return fmt.Sprintf("unknown steel grade %q; known grades are %s", e.Found, strings.Join(Names(), ", "))
}
