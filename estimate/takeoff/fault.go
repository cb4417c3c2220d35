package takeoff

import (
	"cmp"
	"fmt"
	"slices"
)

// Fault is one member that cannot be counted as it stands.
type Fault struct {
	Mark    string
	Problem string
	Remedy  string
}

// FaultsError lists every member that cannot be counted, by mark.
type FaultsError struct {
	Faults []Fault
}

// Error names the first fault and how many there are.
func (e *FaultsError) Error() string {
	f := e.Faults[0]
	s := fmt.Sprintf("member %s: %s; %s", f.Mark, f.Problem, f.Remedy)
	if n := len(e.Faults) - 1; n > 0 {
		s += fmt.Sprintf(" (and %d more)", n)
	}
	return s
}

// faultsError returns the faults in the order of their marks; nil for none.
func faultsError(faults []Fault) error {
	if len(faults) == 0 {
		return nil
	}
	slices.SortFunc(faults, func(a, b Fault) int { return cmp.Or(cmp.Compare(a.Mark, b.Mark), cmp.Compare(a.Problem, b.Problem)) })
	return &FaultsError{slices.Compact(faults)}
}
