package beam

import (
	"cmp"
	"slices"
)

// SupportKind says what a support holds.
type SupportKind uint8

const (
	// Pinned holds the deflection (at the support's settlement).
	Pinned SupportKind = iota + 1
	// Fixed holds the deflection and the rotation.
	Fixed
	// Spring resists deflection with Support.Stiffness.
	Spring
	// Guided holds the rotation alone: the member may slide across.
	Guided
)

// String returns the kind in words.
func (k SupportKind) String() string {
	switch k {
	case Pinned:
		return "pinned"
	case Fixed:
		return "fixed"
	case Spring:
		return "spring"
	case Guided:
		return "guided"
	}
	return "unknown"
}

// Support holds the member at one place.
type Support struct {
	X                   float64 // m from the left end
	Kind                SupportKind
	Stiffness           float64 // N/m, above 0 for Spring, 0 for the others
	RotationalStiffness float64 // N.m/rad, 0 or more; 0 for Fixed and Guided
	Settlement          float64 // m, down +; makes a case of its own, see Response.SettlementCase
}

// holdsRotation tells whether the support can give a couple.
func (s Support) holdsRotation() bool {
	return s.Kind == Fixed || s.Kind == Guided || s.RotationalStiffness > 0
}

// Segment is a stretch of constant bending stiffness, from the end of the one
// before it (or the left end) to To. The last one ends at the member's end.
type Segment struct {
	To float64 // m from the left end
	EI float64 // N.m²
}

// Beam is a straight member from 0 to Length.
type Beam struct {
	Length   float64   // m
	Segments []Segment // left to right; one for a prismatic member
	Supports []Support // any order; results come left to right
	Hinges   []float64 // m; places inside the member where the moment is zero
}

// Prismatic returns a member of one bending stiffness.
// length is in m, ei in N.m².
func Prismatic(length, ei float64, supports ...Support) Beam {
	return Beam{Length: length, Segments: []Segment{{To: length, EI: ei}}, Supports: supports}
}

// ordered returns the supports left to right.
func (b Beam) ordered() []Support { return order(slices.Clone(b.Supports)) }

func order(s []Support) []Support {
	slices.SortFunc(s, func(s, t Support) int { return cmp.Compare(s.X, t.X) })
	return s
}
