// Package action holds what loads a member: single actions, the factors with which
// they are combined, and ready loads for usual uses.
//
// Data's way: the schedule reads a row's loads (an area load goes through
// Tributary; an empty cell may be filled from Ready) into Actions; Validate refuses
// what does not fit the member; sizing sorts them by Direction, Nature and Free into
// load cases for the beam analysis; Sets names the Combinations of the design basis,
// which give each case its factor.
//
// Values are characteristic values, SI: vertical ones down positive, horizontal ones
// to one side positive.
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

// Direction is the plane in which an action bends the member. The zero value is
// Vertical.
type Direction uint8

// The directions of an action.
const (
	Vertical   Direction = iota // in the depth: bends about the strong axis
	Horizontal                  // along the width: bends about the weak axis
)

// String returns "vertical" or "horizontal".
func (d Direction) String() string {
	switch d {
	case Vertical:
		return "vertical"
	case Horizontal:
		return "horizontal"
	}
	return fmt.Sprintf("direction %d", uint8(d))
}

// Kind is the form of an action along the member.
type Kind uint8

// The kinds of action.
const (
	Uniform     Kind = iota // force per length over an extent
	Point                   // force at one position
	Moment                  // couple at one position
	Linear                  // force per length that runs straight from one value to another
	MovingTrain             // wheels that cross the member; vertical and variable
)

var kindNames = [...]string{
	Uniform: "uniform", Point: "point", Moment: "moment", Linear: "linear", MovingTrain: "moving train",
}

// String returns "uniform", "point", "moment", "linear" or "moving train".
func (k Kind) String() string {
	if int(k) < len(kindNames) {
		return kindNames[k]
	}
	return fmt.Sprintf("kind %d", uint8(k))
}

// distributed tells whether the kind has an extent.
func (k Kind) distributed() bool { return k == Uniform || k == Linear }

// Train is a row of wheels at constant spacing that crosses the member in both
// directions. Wheels off the member carry nothing.
type Train struct {
	Loads    []float64 // N, down +, 0 or more, from the leading wheel backwards
	Spacings []float64 // m, above 0, one fewer than Loads
}

// Action is one load on one member, at its characteristic value.
type Action struct {
	Nature    Nature
	Free      bool // placed span by span for the worst effect (EN 1990:2002 1.5.3.8); only for a variable action
	Direction Direction
	Kind      Kind
	From      float64 // m from the member's left end: start of a distributed action, position of a point action or couple
	To        float64 // m: end of a distributed action; To ≤ 0 with From 0 means the whole member; unused for the others
	Value     float64 // N/m (Uniform; Linear at From), N (Point), N·m (Moment, clockwise +); unused for a train
	End       float64 // N/m at To; of a Linear action only
	Dynamic   float64 // dynamic factor on the static value, 1 or more; 0 stands for 1
	Train     Train   // of a MovingTrain only
	Label     string  // what the user calls it; used in errors and explanations
}

// Extent returns where the action starts and ends on a member of the given length,
// both in m. A point action or couple starts and ends at its position; a train may
// stand anywhere.
func (a Action) Extent(length float64) (from, to float64) {
	switch {
	case a.Kind == Point || a.Kind == Moment:
		return a.From, a.From
	case a.Kind == MovingTrain || a.From == 0 && a.To <= 0:
		return 0, length
	}
	return a.From, a.To
}

// Factor returns the dynamic factor, 1 where none is stated.
func (a Action) Factor() float64 {
	if a.Dynamic == 0 {
		return 1
	}
	return a.Dynamic
}

// Total returns the sum of the action on a member of the given length (m), in N,
// with its dynamic factor. A couple has none; a train counts all its wheels, whether
// they fit on the member or not.
func (a Action) Total(length float64) float64 {
	from, to := a.Extent(length)
	sum := 0.0
	switch a.Kind {
	case Uniform:
		sum = a.Value * (to - from)
	case Linear:
		sum = (a.Value + a.End) / 2 * (to - from)
	case Point:
		sum = a.Value
	case MovingTrain:
		for _, p := range a.Train.Loads {
			sum += p
		}
	}
	return sum * a.Factor()
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
