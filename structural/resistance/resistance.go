// Package resistance checks one section of one steel against what one member asks
// of it.
//
// Data's way: sizing hands in a section.Section, the Material for its thickness and
// the Demand of the member; a Basis answers with the highest utilisation for the
// search (no allocation), or with every Check, its inputs and its clause for the
// explanation. Both forms run the same formula body: the explanation only switches
// on the trace that notes the intermediate values.
package resistance

import (
	"fmt"
	"math"

	"spanwright/structural/section"
)

// Names of the checks, as they stand in Check.ID.
const (
	Bending         = "bending"
	LateralBuckling = "lateral-torsional buckling"
	Shear           = "shear"
	Axial           = "axial"
	Interaction     = "interaction"
	LocalBuckling   = "local slenderness"
	Deflecting      = "deflection"
	BendingZ        = "bending about the weak axis"
	ShearY          = "shear along the width"
	WebBuckling     = "web shear buckling"
	Vibrating       = "frequency"
	NotCovered      = "not covered"
)

// tolerance is how far above 1 a utilisation may lie and still pass: rounding, not
// a margin.
const tolerance = 1e-9

// ceiling bounds every utilisation, so that a demand that cannot be met at all, or
// an input that is not a number, gives a finite figure that fails.
const ceiling = 1e9

// Passes tells whether a utilisation is met: at most 1 + 1e-9. NaN does not pass.
func Passes(utilisation float64) bool { return utilisation <= 1+tolerance }

// Material is the steel of one section, for that section's thickness.
type Material struct {
	Yield    float64 // Pa, fy
	Ultimate float64 // Pa, fu
	E        float64 // Pa, Young's modulus
	G        float64 // Pa, shear modulus
}

// Validate refuses a strength or a modulus that is not above zero and finite, or an
// ultimate strength below the yield strength.
func (m Material) Validate() error {
	for _, q := range []struct {
		name  string
		value float64
	}{{"yield strength", m.Yield}, {"ultimate strength", m.Ultimate}, {"modulus E", m.E}, {"modulus G", m.G}} {
		if !(q.value > 0 && q.value <= math.MaxFloat64) {
			return fmt.Errorf("material: %s is %v Pa; accepted is a number above 0", q.name, q.value)
		}
	}
	if m.Ultimate < m.Yield {
		return fmt.Errorf("material: ultimate strength %v Pa is below the yield strength %v Pa", m.Ultimate, m.Yield)
	}
	return nil
}

// Demand is what one member asks of its section, own weight included.
type Demand struct {
	Moment         float64      // N·m about the strong axis, greatest absolute value
	Shear          float64      // N, greatest absolute value
	Axial          float64      // N, greatest compression positive, tension negative
	LateralSpacing float64      // m between lateral restraints of the compression flange; above 0 wherever there is a moment
	LengthY        float64      // m, buckling length K·L about the strong axis; above 0 wherever there is compression
	LengthZ        float64      // m, buckling length K·L about the weak axis; above 0 wherever there is compression
	Deflections    []Deflection // one for each span and overhang that has a limit
	MomentZ        float64      // N·m about the weak axis, greatest absolute value
	ShearY         float64      // N along the width, greatest absolute value
	MomentFactor   float64      // C1 (EN 1993) or Cb (AISC 360) of the governing unrestrained length; 0 stands for 1
	NetAreaFactor  float64      // net over gross area of a tension member, above 0 to 1; 0 stands for 1
	Frequency      float64      // Hz, lowest natural frequency of the member
	FrequencyFloor float64      // Hz, least natural frequency asked for; 0 means no check
}

// Deflection is the sag or rise of one span, or of the tip of one overhang.
type Deflection struct {
	Where    string  // "span 1", "left overhang"
	Value    float64 // m, greatest absolute value
	Span     float64 // m, length of the span or overhang
	Limit    float64 // m, above 0
	Overhang bool
}

// Quantity is a named number that went into a check.
type Quantity struct {
	Symbol string
	Value  float64
	Unit   string
}

// Check is one check of one section, explained.
type Check struct {
	ID          string     // one of the names above
	Clause      string     // standard and clause, or handbook, that the formula comes from
	Formula     string     // the condition in symbols; Inputs holds their values
	Demand      float64    // in Unit
	Resistance  float64    // in Unit
	Unit        string     //
	Utilisation float64    // Demand over Resistance; from 0 to 1e9, never NaN
	PassFail    bool       // a limit that is met or not: it governs only where it is not met
	Inputs      []Quantity // SI
	Note        string     // what a reader has to know beside the figures; may be empty
}

// Passes tells whether the check is met.
func (c Check) Passes() bool { return Passes(c.Utilisation) }

// Basis is a rule set of checks. Its methods read their arguments and keep nothing;
// one Basis serves any number of goroutines.
type Basis interface {
	// Name returns the design basis as the job names it.
	Name() string
	// Utilisation returns the highest utilisation and the name of the governing
	// check. Pass-fail checks count only where they are not met; of equal
	// utilisations the first in the order of Explain governs. The figure lies
	// between 0 and 1e9: an input that is not a number fails. It allocates nothing.
	//
	// At a given axial force more demand never lowers it, except where local
	// slenderness governs under compression, whose limit may ease as the moment grows:
	// sizing gives up candidates by this rule. More axial force never lowers it by
	// more than 1 %, where it shifts the class of a section.
	Utilisation(s *section.Section, m Material, d *Demand) (float64, string)
	// Explain returns every check that applies, with the figures that Utilisation
	// used, bit for bit. What the basis does not cover is a NotCovered check, which
	// is never met and whose Note names the clause and the reason.
	Explain(s *section.Section, m Material, d *Demand) []Check
}

// Governing returns the highest utilisation among explained checks and its name, by
// the rule of Basis.Utilisation. Without checks it returns 0 and "".
func Governing(checks []Check) (float64, string) {
	var top governing
	for i := range checks {
		top.offer(checks[i].Utilisation, checks[i].ID, checks[i].PassFail)
	}
	return top.utilisation, top.id
}

// governing keeps the highest utilisation offered so far.
type governing struct {
	utilisation float64
	id          string
}

func (g *governing) offer(utilisation float64, id string, passFail bool) {
	if passFail && Passes(utilisation) {
		return
	}
	if g.id == "" || utilisation > g.utilisation {
		g.utilisation, g.id = utilisation, id
	}
}

// ratio returns demand over resistance, bounded; anything that is not a ratio of a
// demand from zero to a resistance above zero counts as not met.
func ratio(demand, resistance float64) float64 {
	u := demand / resistance
	if !(demand >= 0 && resistance > 0 && u <= ceiling) {
		return ceiling
	}
	return u
}
