package arrangement

import (
	"spanwright/structural/action"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// Kind is a way to hold a length.
type Kind string

// The ways to hold a length. The root is the end at x = 0.
const (
	// Cantilever is held at its root on a tail that a counterweight holds down.
	Cantilever Kind = "cantilever with counterweight"
	// EndTower is a simple span from the root to a tower at the end.
	EndTower Kind = "tower at the end"
	// InnerSupport has the root and one support at each of Study.Fractions.
	InnerSupport Kind = "inner support"
	// InnerLeastMoment has the inner support where the peak moment is least.
	InnerLeastMoment Kind = "inner support, least moment"
	// InnerLeastDeflection has the inner support where the deflection is least.
	InnerLeastDeflection Kind = "inner support, least deflection"
	// TwoInner stands on two supports, as far from the ends as each other, where
	// the peak moment is least; the ends hang free.
	TwoInner Kind = "two inner supports"
	// EqualSpans has as many equal spans as each of Study.Spans says.
	EqualSpans Kind = "equal spans"
	// Propped is fixed at the root, with a tower at the end.
	Propped Kind = "propped"
	// Lattice is a simple span as a parallel-chord lattice.
	Lattice Kind = "lattice"
)

// Kinds returns every kind in the order of the constants.
func Kinds() []Kind {
	return []Kind{
		Cantilever, EndTower, InnerSupport, InnerLeastMoment, InnerLeastDeflection,
		TwoInner, EqualSpans, Propped, Lattice,
	}
}

// Study is a length to be held, what acts on it, and what the ways to hold it are
// made of. A zero value stands for the default named beside the field; every default
// taken is in the Notes.
type Study struct {
	Setup sizing.Setup

	// Member is the length to be held, from the root to the tip, with what acts on it
	// (moving trains and horizontal wind included) and its limits, before it has
	// supports: these and axial forces must be empty. A tail carries its own weight and
	// trains alone.
	Member   sizing.Member
	Sections []section.Section // for the main member, any order

	Kinds     []Kind    // to be tried; empty = all
	Fractions []float64 // of the length, 0 to 1: places of InnerSupport; empty = 2/3
	Spans     []int     // numbers of EqualSpans, 2 to 20; empty = 2 and 3
	Tail      float64   // m, lever arm of the counterweight behind the root; 0 = a third of the length

	Stability      action.Combination // of ballast and against uplift; 0 = SafetyFactor(1.5)
	BallastDensity float64            // kg/m³ of ballast and footings; 0 = 2400, plain concrete

	Towers   TowerRule
	Footings FootingRule
	Lattice  LatticeRule
}

// TowerRule says what towers are made of: plumb legs under one head, braced to each
// other.
type TowerRule struct {
	Height     float64           // m, from footing to the member at towers; 0 = supports stand on their footings
	RootHeight float64           // m, the same at the root; 0 = the root stands on its footing
	Legs       int               // 1 to 4; 0 = 2
	Spread     float64           // m between neighbouring legs at the foot; 0 = an eighth of the height
	Factor     float64           // effective length factor K of a leg; 0 = 2 for a single leg, 1 for braced legs
	Bracing    float64           // mass of bracing, head and feet over the mass of the legs; 0 = 0.25
	Wind       float64           // N/m of height on the tower, characteristic; 0 = none
	Sections   []section.Section // of a leg, any order; empty = Study.Sections
}

// FootingRule says how footings are sized: square, of one depth.
type FootingRule struct {
	Bearing float64 // Pa, allowable pressure beyond the footing's own; 0 = 150 kPa
	Depth   float64 // m; 0 = 1
	Least   float64 // m³, of each footing; 0 = 1
}

// LatticeRule bounds the proportions of a lattice: a Warren truss without posts.
type LatticeRule struct {
	MinDepth      float64           // m between chord axes; 0 = length/18
	MaxDepth      float64           // m; 0 = length/10
	Depths        int               // how many depths are tried from least to greatest, 1 to 50; 0 = 5
	MinPanel      float64           // m; 0 = as the slope of the diagonals allows
	MaxPanel      float64           // m; 0 = as the slope of the diagonals allows
	AtPanelPoints bool              // every action enters at a panel point; else it also bends the chord between them
	Allowance     float64           // own weight of gussets and plan bracing over that of the drawn members; 0 = 0.15
	Chords        []section.Section // any order; empty = Study.Sections
	Diagonals     []section.Section // any order; empty = Chords
}

// The defaults of a Study. Those without a clause are common practice, no source.
const (
	defaultFraction  = 2.0 / 3
	defaultTail      = 1.0 / 3
	defaultSafety    = 1.5
	defaultDensity   = 2400 // kg/m³; EN 1991-1-1:2002 Table A.1 has 24 kN/m³ for normal-weight concrete
	defaultLegs      = 2
	defaultSpread    = 1.0 / 8
	defaultBracing   = 0.25
	defaultBearing   = 150e3
	defaultDepth     = 1.0
	defaultLeast     = 1.0
	defaultSlender   = 18.0
	defaultStocky    = 10.0
	defaultDepths    = 5
	defaultAllowance = 0.15
)

// filled returns the study with its defaults in place.
func (s Study) filled() Study {
	or(&s.Tail, s.Member.Length*defaultTail)
	or(&s.BallastDensity, defaultDensity)
	or(&s.Towers.Spread, s.Towers.Height*defaultSpread)
	or(&s.Towers.Bracing, defaultBracing)
	or(&s.Footings.Bearing, defaultBearing)
	or(&s.Footings.Depth, defaultDepth)
	or(&s.Footings.Least, defaultLeast)
	or(&s.Lattice.MinDepth, s.Member.Length/defaultSlender)
	or(&s.Lattice.MaxDepth, max(s.Member.Length/defaultStocky, s.Lattice.MinDepth))
	or(&s.Lattice.Allowance, defaultAllowance)
	if s.Towers.Legs == 0 {
		s.Towers.Legs = defaultLegs
	}
	if s.Lattice.Depths == 0 {
		s.Lattice.Depths = defaultDepths
	}
	if s.Stability == (action.Combination{}) {
		s.Stability = SafetyFactor(defaultSafety)
	}
	s.fillLists()
	return s
}

// fillLists orders the sections lightest first, in slices of the study's own.
func (s *Study) fillLists() {
	if len(s.Kinds) == 0 {
		s.Kinds = Kinds()
	}
	if len(s.Fractions) == 0 {
		s.Fractions = []float64{defaultFraction}
	}
	if len(s.Spans) == 0 {
		s.Spans = []int{2, 3}
	}
	s.Sections = ordered(s.Sections)
	s.Towers.Sections = ordered(first(s.Towers.Sections, s.Sections))
	s.Lattice.Chords = ordered(first(s.Lattice.Chords, s.Sections))
	s.Lattice.Diagonals = ordered(first(s.Lattice.Diagonals, s.Lattice.Chords))
}

func or(value *float64, otherwise float64) {
	if *value == 0 {
		*value = otherwise
	}
}

func first(a, b []section.Section) []section.Section {
	if len(a) > 0 {
		return a
	}
	return b
}
