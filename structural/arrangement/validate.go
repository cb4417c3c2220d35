package arrangement

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/section"
)

const (
	mostSpans  = 20
	mostDepths = 50
	mostLegs   = 4
)

// Validate refuses a study that cannot be answered. Every fault is reported with what
// was found and what would be accepted; what the engine below refuses (supports that
// coincide, a train of no wheels) comes back from Candidates.
func (s Study) Validate() error {
	if err := s.Setup.Validate(); err != nil {
		return fmt.Errorf("arrangement: %w", err)
	}
	if !(s.Member.Length > 0 && s.Member.Length <= math.MaxFloat64) {
		return fmt.Errorf("arrangement: length %v m; accepted is a length above 0", s.Member.Length)
	}
	var faults []error
	fault := func(format string, values ...any) {
		faults = append(faults, fmt.Errorf("arrangement: "+format, values...))
	}
	for _, q := range s.ranges() {
		if !(q.low <= q.value && q.value <= q.high) {
			fault("%s is %v; accepted is %g to %g", q.name, q.value, q.low, q.high)
		}
	}
	if len(s.Sections) == 0 {
		fault("no sections for the main member; accepted is at least one")
	}
	for _, list := range []struct {
		name string
		of   []section.Section
	}{{"main member", s.Sections}, {"tower leg", s.Towers.Sections}, {"chord", s.Lattice.Chords}, {"diagonal", s.Lattice.Diagonals}} {
		for i := range list.of {
			if m := list.of[i].Mass; !(m > 0 && m <= math.MaxFloat64) {
				fault("section %d of the %s (%s) has a mass of %v kg/m; accepted is a number above 0", i+1, list.name, list.of[i].Designation, m)
			}
		}
	}
	if m := s.Member; len(m.Supports) > 0 || m.Axial != 0 || m.PermanentAxial != 0 || m.Upright {
		fault("the member has %d supports, axial forces %v and %v N, upright %v; accepted is a member across without any of them",
			len(m.Supports), m.Axial, m.PermanentAxial, m.Upright)
	}
	probe := s.Member
	probe.Supports, probe.Upright = []beam.Support{pinned(0), pinned(probe.Length)}, false
	if err := probe.Validate(); err != nil {
		fault("%w", err)
	}
	faults = append(faults, s.validateKinds()...)
	if s.Stability != (action.Combination{}) {
		if err := validateStability(s.Stability); err != nil {
			fault("%w", err)
		}
	}
	return errors.Join(faults...)
}

type bound struct {
	name             string
	value, low, high float64
}

// ranges are the bounds of single numbers; 0 stands for a default.
func (s Study) ranges() []bound {
	most, l := math.MaxFloat64, s.Lattice
	deepest := l.MaxDepth
	if deepest == 0 {
		deepest = max(s.Member.Length/defaultStocky, l.MinDepth)
	}
	shallowest := l.MinDepth
	if shallowest == 0 {
		shallowest = s.Member.Length / defaultSlender
	}
	return []bound{
		{"tail (m)", s.Tail, 0, 10 * s.Member.Length},
		{"ballast density (kg/m³)", s.BallastDensity, 0, 20000},
		{"tower height (m)", s.Towers.Height, 0, most},
		{"root height (m)", s.Towers.RootHeight, 0, most},
		{"number of legs", float64(s.Towers.Legs), 0, mostLegs},
		{"spread of the legs (m)", s.Towers.Spread, 0, most},
		{"effective length factor of a leg", s.Towers.Factor, 0, 10},
		{"bracing over legs", s.Towers.Bracing, 0, 10},
		{"wind on a tower (N/m)", s.Towers.Wind, 0, most},
		{"bearing pressure (Pa)", s.Footings.Bearing, 0, most},
		{"footing depth (m)", s.Footings.Depth, 0, 100},
		{"least footing (m³)", s.Footings.Least, 0, most},
		{"number of lattice depths", float64(l.Depths), 0, mostDepths},
		{"least lattice depth (m)", shallowest, s.Member.Length / 100, min(deepest, s.Member.Length)},
		{"greatest lattice depth (m)", deepest, 0, s.Member.Length},
		{"least panel (m)", l.MinPanel, 0, s.Member.Length / 2},
		{"greatest panel (m)", l.MaxPanel, 0, most},
		{"lattice own-weight allowance", l.Allowance, 0, 10},
	}
}

func (s Study) validateKinds() []error {
	var faults []error
	for _, k := range s.Kinds {
		if !slices.Contains(Kinds(), k) {
			faults = append(faults, fmt.Errorf("arrangement: kind %q; accepted are %q", k, Kinds()))
		}
	}
	for _, f := range s.Fractions {
		if !(0 < f && f <= 1) {
			faults = append(faults, fmt.Errorf("arrangement: inner support at %v of the length; accepted is above 0, at most 1", f))
		}
	}
	for _, n := range s.Spans {
		if n < 2 || n > mostSpans {
			faults = append(faults, fmt.Errorf("arrangement: %d equal spans; accepted is 2 to %d", n, mostSpans))
		}
	}
	return faults
}
