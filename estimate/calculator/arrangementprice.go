package calculator

import (
	"context"

	"spanwright/structural/arrangement"
)

// StudyArrangements returns the study of a request as the structural engine takes it,
// with the ways that it finds: what Arrangements answers from. The error is Faults, or
// that of ctx.
func StudyArrangements(ctx context.Context, r ArrangementsRequest) (arrangement.Study, []arrangement.Candidate, error) {
	s, f := r.study()
	if len(f) > 0 {
		return s, nil, f
	}
	found, err := arrangement.Candidates(ctx, s)
	switch {
	case ctx.Err() != nil:
		return s, nil, ctx.Err()
	case err != nil:
		return s, nil, fromSizing(err)
	}
	return s, found, nil
}

// YieldFactor is the factor on yield of the design basis allowable, the default where
// the request names none; 0 for the others.
func (r ArrangementsRequest) YieldFactor() float64 {
	switch {
	case r.DesignBasis != "allowable":
		return 0
	case r.Factor == 0:
		return defaultFactor
	}
	return r.Factor
}

// OwnRules tells whether the request checks by partial factors, combinations or factors
// on loads of its own, in place of those of its design basis.
func (r ArrangementsRequest) OwnRules() bool {
	return r.M0 != 0 || r.M1 != 0 || r.M2 != 0 || r.RolledCase || r.Factors != nil || r.Service != nil
}
