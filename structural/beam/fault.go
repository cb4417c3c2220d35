package beam

import (
	"fmt"
	"strconv"
)

// FaultKind names what is wrong with a beam, a load or a term.
type FaultKind string

// The kinds of fault.
const (
	FaultLength     FaultKind = "length"                // not above zero, not finite
	FaultStiffness  FaultKind = "stiffness"             // bending or support stiffness zero, negative, not finite
	FaultSegment    FaultKind = "segment"               // segments missing or not in order
	FaultNoSupport  FaultKind = "no support"            // nothing holds the member
	FaultOutside    FaultKind = "outside the member"    // support, hinge or load off the member
	FaultTwice      FaultKind = "two at one place"      // supports or hinges that coincide
	FaultSupport    FaultKind = "support"               // kind or settlement unusable
	FaultHinge      FaultKind = "hinge"                 // hinge where a couple has to be taken
	FaultLoad       FaultKind = "load"                  // kind, extent or value unusable
	FaultMechanism  FaultKind = "mechanism"             // the member can move without bending
	FaultCondition  FaultKind = "ill-conditioned"       // stiffnesses too unlike to solve
	FaultOverflow   FaultKind = "overflow"              // a result too large
	FaultTerm       FaultKind = "term"                  // a term names no case, or its factor is unusable
	FaultTrain      FaultKind = "train"                 // wheels or spacings unusable
	FaultMass       FaultKind = "mass"                  // no mass, or an unusable one
	FaultLayout     FaultKind = "layout"                // free supports or goal unusable
	FaultSplitHinge FaultKind = "hinge in split method" // a hinge away from the supports
)

// Fault is the error of this package: what is wrong, where, what was found and
// what would be accepted.
type Fault struct {
	Kind     FaultKind
	Part     string  // "support 2", "case 1 load 3", counted from 1
	Where    float64 // m from the left end; 0 where no place applies
	Found    string
	Accepted string
}

// Error returns one line: place, kind, found, accepted.
func (f *Fault) Error() string {
	return fmt.Sprintf("beam: %s at %s m: %s: found %s; accepted: %s", f.Part, num(f.Where), f.Kind, f.Found, f.Accepted)
}

func num(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }
