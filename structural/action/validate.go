package action

import (
	"fmt"
	"math"
)

// largestDynamic bounds the dynamic factor: a load dropped from no height counts
// twice (any strength-of-materials handbook); 10 leaves room for real impact.
const largestDynamic = 10

// Validate refuses an action that does not fit a member of the given length (m): an
// unknown nature, direction or kind, a permanent action marked free, a value or
// factor out of range, a position off the member, a train that cannot cross it. The
// error names the action by its label, says what was found and what would be
// accepted.
func (a Action) Validate(length float64) error {
	if !(length > 0 && length <= math.MaxFloat64) {
		return fmt.Errorf("%s: the member's length is %v m; accepted is a length above 0", a.name(), length)
	}
	if a.Nature > Permanent {
		return fmt.Errorf("%s: unknown nature %d; accepted are variable and permanent", a.name(), a.Nature)
	}
	if a.Direction > Horizontal {
		return fmt.Errorf("%s: unknown direction %d; accepted are vertical and horizontal", a.name(), a.Direction)
	}
	if a.Free && a.Nature == Permanent {
		return fmt.Errorf("%s: a permanent action is marked free; only a variable action can be placed span by span", a.name())
	}
	if !(a.Dynamic == 0 || 1 <= a.Dynamic && a.Dynamic <= largestDynamic) {
		return fmt.Errorf("%s: dynamic factor %v; accepted is 1 to %v, or 0 for none", a.name(), a.Dynamic, largestDynamic)
	}
	if !(math.Abs(a.Value) <= math.MaxFloat64) {
		return fmt.Errorf("%s: value %v; accepted is a finite number", a.name(), a.Value)
	}
	if !(math.Abs(a.End) <= math.MaxFloat64) || a.End != 0 && a.Kind != Linear {
		return fmt.Errorf("%s: end value %v; accepted is a finite number for a linear action, none for the others", a.name(), a.End)
	}
	return a.validateKind(length)
}

func (a Action) validateKind(length float64) error {
	from, to := a.Extent(length)
	switch {
	case a.Kind > MovingTrain:
		return fmt.Errorf("%s: unknown kind %d; accepted are uniform, point, moment, linear and moving train", a.name(), a.Kind)
	case a.Kind == MovingTrain:
		return a.validateTrain()
	case len(a.Train.Loads) > 0 || len(a.Train.Spacings) > 0:
		return fmt.Errorf("%s: a %v action has wheels; accepted are wheels on a moving train alone", a.name(), a.Kind)
	case a.Kind.distributed():
		if !(0 <= from && from < to && to <= length) {
			return fmt.Errorf("%s: runs from %v m to %v m; accepted is 0 ≤ from < to ≤ %v m, or 0 and 0 for the whole member",
				a.name(), a.From, a.To, length)
		}
	default:
		if !(0 <= from && from <= length) {
			return fmt.Errorf("%s: stands at %v m; accepted is a position from 0 to %v m", a.name(), a.From, length)
		}
	}
	return nil
}

// validateTrain leaves the number of wheels that can be analysed to the beam.
func (a Action) validateTrain() error {
	t := a.Train
	if a.Nature == Permanent || a.Direction == Horizontal {
		return fmt.Errorf("%s: a %v %v train; accepted is a variable vertical one", a.name(), a.Nature, a.Direction)
	}
	if a.Value != 0 || a.From != 0 || a.To != 0 {
		return fmt.Errorf("%s: a train with value %v, from %v m, to %v m; accepted are wheel loads and spacings alone", a.name(), a.Value, a.From, a.To)
	}
	if len(t.Loads) == 0 || len(t.Spacings) != len(t.Loads)-1 {
		return fmt.Errorf("%s: %d wheels with %d spacings; accepted is at least one wheel and one spacing fewer than wheels", a.name(), len(t.Loads), len(t.Spacings))
	}
	for i, p := range t.Loads {
		if !(p >= 0 && p <= math.MaxFloat64) {
			return fmt.Errorf("%s: wheel %d weighs %v N; accepted is 0 or more", a.name(), i+1, p)
		}
	}
	for i, d := range t.Spacings {
		if !(d > 0 && d <= math.MaxFloat64) {
			return fmt.Errorf("%s: spacing %d is %v m; accepted is above 0", a.name(), i+1, d)
		}
	}
	return nil
}

func (a Action) name() string {
	if a.Label == "" {
		return fmt.Sprintf("%v %v action", a.Nature, a.Kind)
	}
	return fmt.Sprintf("action %q", a.Label)
}
