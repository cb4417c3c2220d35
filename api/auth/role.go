// Package auth holds roles, the policy that says what each may do, and the form
// of tokens. It knows no SQL and no HTTP.
//
//	bearer text → ParseToken (public id, secret) → store finds the public id
//	            → Matches (constant time) → role → Policy.Allow for each use case
package auth

import (
	"fmt"
	"slices"
)

// Role is what a token may be used for. Each role may do all that the ones
// before it may.
type Role string

// The roles, least first.
const (
	Viewer        Role = "viewer"
	Estimator     Role = "estimator"
	Manager       Role = "manager"
	Administrator Role = "administrator"
)

// Roles returns every role, least first.
func Roles() []Role { return []Role{Viewer, Estimator, Manager, Administrator} }

// ParseRole reads a role; the error lists those accepted.
func ParseRole(text string) (Role, error) {
	r := Role(text)
	if !slices.Contains(Roles(), r) {
		return "", fmt.Errorf("role: found %q; accepted: viewer, estimator, manager, administrator", text)
	}
	return r, nil
}

// Operation is one use case, as the policy sees it.
type Operation string

// The operations. The full matrix comes with the hardening of the service; each
// use case already asks.
const (
	ReadProjects    Operation = "read projects"
	WriteProjects   Operation = "write projects"
	PostSchedules   Operation = "post schedules"
	MakeEstimates   Operation = "make estimates"
	ReadRates       Operation = "read rate books and multipliers"
	WriteRates      Operation = "write rate books and multipliers"
	ReadAudit       Operation = "read audit events"
	ManageTokens    Operation = "manage tokens"
	UseCalculators  Operation = "use calculators"
	ManageOwnAccess Operation = "sign in and out"

	ReadOutturns       Operation = "read outturns and calibrations"
	WriteOutturns      Operation = "post outturns and fit calibrations"
	WithdrawOutturns   Operation = "withdraw outturns"
	DecideCalibrations Operation = "decide on calibrations"
)

var least = map[Operation]Role{
	ReadProjects: Viewer, UseCalculators: Viewer, ManageOwnAccess: Viewer, ReadRates: Viewer,
	WriteProjects: Estimator, PostSchedules: Estimator, MakeEstimates: Estimator, WriteRates: Estimator,
	ReadAudit: Manager, ManageTokens: Administrator,
	ReadOutturns: Viewer, WriteOutturns: Estimator, WithdrawOutturns: Manager, DecideCalibrations: Manager,
}

// Allow reports whether the role may do the operation. An operation that the
// policy does not know is refused.
func Allow(r Role, o Operation) bool {
	need, ok := least[o]
	if !ok {
		return false
	}
	have := slices.Index(Roles(), r)
	return have >= 0 && have >= slices.Index(Roles(), need)
}

// LeastRole returns the least role that may do the operation.
func LeastRole(o Operation) Role { return least[o] }
