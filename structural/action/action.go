// Package action holds what loads a member: single actions, and the factors with
// which they are combined.
//
// Data's way: the schedule reads a row's loads (an area load goes through
// Tributary) into Actions; Validate refuses what does not fit the member; sizing
// sorts them by Nature and Free into load cases for the beam analysis, and the
// Combination gives each case its factor.
//
// Values are characteristic values, SI, vertical, down positive.
package action

import (
	"fmt"
	"math"
)

// Nature tells whether an action is always there (EN 1990:2002 1.5.3.3, 1.5.3.4).
// The zero value is Variable, so that a load of unknown nature counts as variable.
type Nature uint8

// The natures of an action.
const (
	Variable Nature = iota
	Permanent
)

// String returns "variable" or "permanent".
func (n Nature) String() string {
	switch n {
	case Variable:
		return "variable"
	case Permanent:
		return "permanent"
	}
	return fmt.Sprintf("nature %d", uint8(n))
}

// Kind is the form of an action along the member.
type Kind uint8

// The kinds of action.
const (
	Uniform Kind = iota // force per length over an extent
	Point               // force at one position
)

// String returns "uniform" or "point".
func (k Kind) String() string {
	switch k {
	case Uniform:
		return "uniform"
	case Point:
		return "point"
	}
	return fmt.Sprintf("kind %d", uint8(k))
}

// Action is one load on one member, at its characteristic value.
type Action struct {
	Nature Nature
	Free   bool // placed span by span for the worst effect (EN 1990:2002 1.5.3.8); only for a variable action
	Kind   Kind
	From   float64 // m from the member's left end: start of a uniform action, position of a point action
	To     float64 // m: end of a uniform action; To ≤ 0 with From 0 means the whole member; unused for a point action
	Value  float64 // N/m (Uniform) or N (Point), down +
	Label  string  // what the user calls it; used in errors and explanations
}

// Extent returns where the action starts and ends on a member of the given
// length, both in m. A point action starts and ends at its position.
func (a Action) Extent(length float64) (from, to float64) {
	switch {
	case a.Kind == Point:
		return a.From, a.From
	case a.From == 0 && a.To <= 0:
		return 0, length
	}
	return a.From, a.To
}

// Total returns the sum of the action on a member of the given length (m), in N.
func (a Action) Total(length float64) float64 {
	if a.Kind == Point {
		return a.Value
	}
	from, to := a.Extent(length)
	return a.Value * (to - from)
}

// Validate refuses an action that does not fit a member of the given length (m):
// an unknown nature or kind, a permanent action marked free, a value that is not
// finite, or a position off the member. The error names the action by its label,
// says what was found and what would be accepted.
func (a Action) Validate(length float64) error {
	if !(length > 0 && length <= math.MaxFloat64) {
		return fmt.Errorf("%s: the member's length is %v m; accepted is a length above 0", a.name(), length)
	}
	if a.Nature > Permanent {
		return fmt.Errorf("%s: unknown nature %d; accepted are variable and permanent", a.name(), a.Nature)
	}
	if a.Free && a.Nature == Permanent {
		return fmt.Errorf("%s: a permanent action is marked free; only a variable action can be placed span by span", a.name())
	}
	if !(math.Abs(a.Value) <= math.MaxFloat64) {
		return fmt.Errorf("%s: value %v; accepted is a finite number", a.name(), a.Value)
	}
	return a.validateExtent(length)
}

func (a Action) validateExtent(length float64) error {
	from, to := a.Extent(length)
	switch a.Kind {
	case Uniform:
		if !(0 <= from && from < to && to <= length) {
			return fmt.Errorf("%s: runs from %v m to %v m; accepted is 0 ≤ from < to ≤ %v m, or 0 and 0 for the whole member",
				a.name(), a.From, a.To, length)
		}
	case Point:
		if !(0 <= from && from <= length) {
			return fmt.Errorf("%s: stands at %v m; accepted is a position from 0 to %v m", a.name(), a.From, length)
		}
	default:
		return fmt.Errorf("%s: unknown kind %d; accepted are uniform and point", a.name(), a.Kind)
	}
	return nil
}

func (a Action) name() string {
	if a.Label == "" {
		return fmt.Sprintf("%v %v action", a.Nature, a.Kind)
	}
	return fmt.Sprintf("action %q", a.Label)
}

// Tributary turns an area load (N/m², down +) over a tributary width (m) into a
// uniform load: q = p·b, N/m. The load must be finite and the width above zero.
func Tributary(pressure, width float64) (float64, error) {
	if !(math.Abs(pressure) <= math.MaxFloat64) {
		return 0, fmt.Errorf("area load %v N/m²; accepted is a finite number", pressure)
	}
	if !(width > 0 && width <= math.MaxFloat64) {
		return 0, fmt.Errorf("tributary width %v m; accepted is a width above 0", width)
	}
	q := pressure * width
	if math.IsInf(q, 0) {
		return 0, fmt.Errorf("area load %v N/m² times tributary width %v m is too large", pressure, width)
	}
	return q, nil
}
