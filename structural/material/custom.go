package material

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// Limits of a custom grade: no structural metal lies beyond them, so that a slip
// of units is caught.
const (
	leastModulus, greatestModulus = 10e9, 1000e9 // Pa
	leastStress, greatestStress   = 10e6, 3e9    // Pa
	leastDensity, greatestDensity = 1000, 25000  // kg/m³
	greatestBand                  = 10           // m
)

// New checks a custom grade and returns a copy of its own: a name that no held
// grade has, E, G and density within what structural metals have (G under E/2),
// at least one band, bands of rising thickness, in each an ultimate strength not
// under the yield strength. Every fault is named with what was found and what
// would be accepted.
func New(g Grade) (Grade, error) {
	g.Name = strings.TrimSpace(g.Name)
	if g.Name == "" {
		return Grade{}, fmt.Errorf("custom grade without a name")
	}
	if held, err := Find(g.Name); err == nil {
		return Grade{}, fmt.Errorf("custom grade %q: the name stands for grade %s already; choose another", g.Name, held.Name)
	}
	for _, c := range []struct {
		name                  string
		value, least, most, k float64
		unit                  string
	}{
		{"Young's modulus", g.E, leastModulus, greatestModulus, 1e9, "GPa"},
		{"shear modulus", g.G, leastModulus / 3, g.E / 2, 1e9, "GPa"},
		{"density", g.Density, leastDensity, greatestDensity, 1, "kg/m³"},
	} {
		if !(c.least <= c.value && c.value <= c.most) {
			return Grade{}, fmt.Errorf("custom grade %q: %s of %.6g %s; want %.6g to %.6g %s", g.Name, c.name, c.value/c.k, c.unit, c.least/c.k, c.most/c.k, c.unit)
		}
	}
	if err := checkBands(g.Bands); err != nil {
		return Grade{}, fmt.Errorf("custom grade %q: %w", g.Name, err)
	}
	for _, v := range g.Variants {
		if len(v.Families) == 0 {
			return Grade{}, fmt.Errorf("custom grade %q: a variant names no family", g.Name)
		}
		if err := checkBands(v.Bands); err != nil {
			return Grade{}, fmt.Errorf("custom grade %q in %s: %w", g.Name, strings.Join(v.Families, ", "), err)
		}
	}
	if g.Standard == "" {
		g.Standard = "custom"
	}
	if g.Source == "" {
		g.Source = "given by the user"
	}
	return g.clone(), nil
}

func checkBands(bands []Band) error {
	if len(bands) == 0 {
		return fmt.Errorf("no strength; want at least one band of thickness")
	}
	var last float64
	for i, b := range bands {
		if !(b.UpTo > last && b.UpTo <= greatestBand) {
			return fmt.Errorf("band %d reaches to %.6g mm; want over %.6g and at most %g mm", i+1, b.UpTo*1000, last*1000, greatestBand*1000.0)
		}
		if !(leastStress <= b.Yield && b.Yield <= b.Ultimate && b.Ultimate <= greatestStress) {
			return fmt.Errorf("band %d has yield %.6g and ultimate %.6g MPa; want %g <= yield <= ultimate <= %g MPa",
				i+1, b.Yield/1e6, b.Ultimate/1e6, leastStress/1e6, greatestStress/1e6)
		}
		last = b.UpTo
	}
	return nil
}

// clone returns a grade that shares no slice with g.
func (g Grade) clone() Grade {
	g.Bands = slices.Clone(g.Bands)
	g.Variants = slices.Clone(g.Variants)
	for i, v := range g.Variants {
		g.Variants[i] = Variant{Families: slices.Clone(v.Families), Bands: slices.Clone(v.Bands)}
	}
	return g
}

// finite is a number above zero that is not infinite.
func finite(x float64) bool { return x > 0 && x <= math.MaxFloat64 }
