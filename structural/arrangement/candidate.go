package arrangement

import (
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/sizing"
)

// Candidate is one way to hold the length, with all that it needs.
type Candidate struct {
	Name     string
	Kind     Kind
	Supports []Support     // left to right
	Result   sizing.Result // of the main member; of a lattice its chord, as a bar between panel points
	Truss    *Truss        // of a lattice; else nil
	Towers   []Tower       // left to right
	Ballast  *Ballast      // of a counterweighted cantilever; else nil
	Footings []Footing     // left to right, each for Count of its kind
	Mass     Mass

	Deflection  Deflection // of the main member or lattice
	Governing   string     // part and check with the highest utilisation: "member: bending", "tower leg: axial"
	Utilisation float64    // of the governing check

	Feasible bool
	Reason   string   // why not; empty if feasible
	WaysOut  []string // what would help; empty if feasible
	Notes    []Note
}

// Role says what a support is.
type Role string

// The roles of supports.
const (
	Root     Role = "root"
	TowerTop Role = "tower"
	HoldDown Role = "hold-down" // the tail's end, held by the counterweight
)

// Support is one support of the main member with its exact reactions. Max and Min are
// characteristic values with every variable action where it is worst.
type Support struct {
	X         float64 // m from the root
	Kind      beam.SupportKind
	Role      Role
	Max       float64 // N, up +
	Min       float64 // N, up +; below 0 the support is pulled up
	Permanent float64 // N, of permanent actions and own weight alone
	Couple    float64 // N·m, greatest absolute couple of a fixed support
	Side      float64 // N, greatest sideways reaction to wind
	Least     float64 // N, least reaction under the factors of Study.Stability
}

// Lifted tells whether the support needs holding down.
func (s Support) Lifted() bool { return s.Least < 0 }

// Deflection is the largest deflection of the main member.
type Deflection struct {
	Value float64 // m, down +
	X     float64 // m from the root
	Shear float64 // m of Value that come from a lattice's diagonals; 0 for beams
	Limit float64 // m, where a lattice has one; those of beams are in Result.Checks
}

// Mass is what a candidate weighs, kg. Connections are left to the estimate.
type Mass struct {
	Member  float64 // main member with its tail, or the lattice's chords and diagonals
	Legs    float64 // of all towers
	Bracing float64 // of all towers, by TowerRule.Bracing
	Steel   float64 // sum of the above
	Ballast float64 // counterweight
}

// Volume returns the sum of the footings, m³.
func (c Candidate) Volume() float64 {
	sum := 0.0
	for _, f := range c.Footings {
		sum += float64(f.Count) * f.Volume
	}
	return sum
}

// Note is one thing that was assumed, left out or taken by default.
type Note struct {
	ID        string // stable
	Clause    string // standard and clause, handbook, or "common practice, no source"
	Statement string
	Values    []resistance.Quantity // SI
}
