// Package sizing chooses the section of one member: the lightest, or the best by an
// objective handed in, that passes every check of a design basis.
//
// Data's way: Prepare turns a Member into load cases, analyses it once with EI = 1
// in each plane and expands the combinations into variants of factors; for each
// candidate section the effects are taken with that section's own weight,
// deflections are divided by its E·I, and each variant's demand goes to the design
// basis, where the worst governs; Lightest, Best and SameSize search with the bare
// utilisation, then Explain writes out the checks of the choice, its split-method
// ratios, and why the next ones below it fail. A Sizer does the search alone for
// many members on all cores.
//
// Everything is in SI: m, N, N/m, N·m, Pa, kg/m.
package sizing

import (
	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Member is one member to be sized: how it is held, what acts on it, what it has to
// keep to.
type Member struct {
	Length           float64         // m
	Supports         []beam.Support  // pinned or fixed, without settlement; they hold both planes; may be empty for an upright member without actions
	Actions          []action.Action // across the member: vertical ones in its depth, horizontal ones along its width
	Axial            float64         // N, characteristic, compression +; the variable part, and any of unknown nature
	PermanentAxial   float64         // N, characteristic, compression +; the part that is always there
	RestraintSpacing float64         // m between lateral restraints; 0 = the longest span or overhang
	LengthFactor     float64         // effective length factor K on the longest span or overhang; 0 = 1 for spans, 2 for overhangs
	MomentFactor     float64         // C1 (EN 1993) or Cb (AISC 360) of the governing unrestrained length; 0 = 1, which is safe
	NetAreaFactor    float64         // net over gross area in tension, above 0 to 1; 0 = 1
	DeflectionLimit  float64         // n of span/n, and of twice the length over n for overhangs, in both planes; 0 = no limit
	FrequencyFloor   float64         // Hz, least first natural frequency in the vertical plane; 0 = no check
	MassShare        float64         // share of the downward variable actions whose mass is there with the frequency, 0 to 1
	MaxDepth         float64         // m, greatest depth of a section; 0 = any
	MaxWidth         float64         // m, greatest width of a section; 0 = any
	StockLength      float64         // m, longest piece that can be had; a longer member is warned of; 0 = not looked at
	Upright          bool            // a strut or column: its own weight acts along it
}

// Setup is what members of one job share.
type Setup struct {
	Basis    resistance.Basis
	Grade    material.Grade
	Strength []action.Combination // for strength; the worst governs; see action.Sets
	Service  action.Combination   // for deflection
	Gravity  float64              // m/s², standard 9.80665
}

// Candidate is a section that a member may be given.
type Candidate = section.Section

// Rejected is a candidate that does not pass, and the check that decides it.
type Rejected struct {
	Section     string // designation
	Check       string // governing check
	Utilisation float64
}

// Skipped is a candidate that cannot be had in the grade or is too deep or wide.
type Skipped struct {
	Section string // designation
	Reason  string
}

// Result is a section in its member, with everything that speaks for and against it.
type Result struct {
	Section         section.Section
	Passes          bool               // every check at a utilisation of at most 1 + 1e-9
	Checks          []resistance.Check // in the order of the design basis, each under its worst combination
	Governing       string             // the check with the highest utilisation
	Utilisation     float64            // of the governing check
	Combination     string             // of strength or service, under which the governing check is highest
	Combinations    []string           // by check, the combination under which it is highest
	LighterRejected []Rejected         // up to three next better by the objective (lighter, in Lightest), nearest first
	Skipped         []Skipped          // better by the objective, but not to be had in the grade, or too deep or wide
	Envelope        beam.Envelope      // under Service and the section's own weight, deflections at its E·Iy
	Ratios          []beam.Ratio       // split method over exact envelope; only where the member is more than one determinate piece
	Unsafe          bool               // a ratio lies below 1: the split method alone would be an unsafe shortcut
	TotalLoad       float64            // N, see Prepared.TotalLoad
	SelfWeight      float64            // N, mass × length × gravity, without factor
	Warnings        []string           // what is doubtful about the section in its grade
	WaysOut         []string           // what would help, when nothing passes
}
