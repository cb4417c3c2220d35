package beam

import (
	"fmt"
	"math"
)

// largestTrain bounds the wheels of a train: the work grows with their square.
const largestTrain = 32

// Train is a row of wheels that crosses the member at constant spacing, in both
// directions. Wheel k stands at lead - direction × (spacing 1 + … + spacing k):
// the lead is the first wheel. A wheel off the member carries nothing, so that a
// train longer than the member and one half on it are ordinary states, and so is
// the member without a wheel. No dynamic factor is in it: that belongs to
// Term.Factor.
type Train struct {
	Loads    []float64 // N, down +, 0 or more, from the lead backwards
	Spacings []float64 // m, above 0, one fewer than Loads
}

// Placed is an extreme value under a train, where it stands in the member, and
// where the train stands. Direction is 1 with the lead to the right, -1 with the
// lead to the left, 0 without a wheel on the member (then Lead is 0). Of equal
// values direction 1 and the smallest lead are taken.
type Placed struct {
	Value     float64 // N.m, N or m
	X         float64 // m, the section or support
	Lead      float64 // m, may lie off the member
	Direction int
}

// PlacedBounds are the largest and the smallest value under a train.
type PlacedBounds struct{ Max, Min Placed }

// check refuses what cannot cross a member.
func (t Train) check(part string) *Fault {
	if !(len(t.Loads) >= 1 && len(t.Loads) <= largestTrain) {
		return &Fault{FaultTrain, part, 0, fmt.Sprintf("%d wheels", len(t.Loads)), fmt.Sprintf("1 to %d wheels", largestTrain)}
	}
	if len(t.Spacings) != len(t.Loads)-1 {
		return &Fault{FaultTrain, part, 0, fmt.Sprintf("%d spacings for %d wheels", len(t.Spacings), len(t.Loads)), "one spacing fewer than wheels"}
	}
	for i, p := range t.Loads {
		if !(p >= 0 && p <= largestFactor) {
			return &Fault{FaultTrain, fmt.Sprintf("%s wheel %d", part, i+1), 0, num(p) + " N", "a wheel load of 0 N or more"}
		}
	}
	for i, d := range t.Spacings {
		if !positive(d) {
			return &Fault{FaultTrain, fmt.Sprintf("%s spacing %d", part, i+1), 0, num(d) + " m", "a spacing above 0 m"}
		}
	}
	if !finite(t.length()) {
		return &Fault{FaultTrain, part, 0, "a length of " + num(t.length()) + " m", "a finite length"}
	}
	return nil
}

// length returns the distance from the first to the last wheel, m.
func (t Train) length() float64 {
	sum := 0.0
	for _, d := range t.Spacings {
		sum += d
	}
	return sum
}

// offsets returns where the wheels stand from the lead, in lengths of the member.
func (t Train) offsets(direction int, length float64) []float64 {
	out, at := make([]float64, len(t.Loads)), 0.0
	for i, d := range t.Spacings {
		at += d
		out[i+1] = -float64(direction) * at / length
	}
	return out
}

// alike tells whether the train looks the same from both ends.
func (t Train) alike() bool {
	n := len(t.Loads)
	for i := range n {
		if t.Loads[i] != t.Loads[n-1-i] {
			return false
		}
	}
	for i, d := range t.Spacings {
		if math.Abs(d-t.Spacings[n-2-i]) > 0 {
			return false
		}
	}
	return true
}
