package arrangement

import (
	"fmt"

	"spanwright/structural/action"
)

// SafetyFactor returns the plain rule that what holds down is n times what lifts or
// overturns, all at characteristic values (common practice, no source; 1.5 is usual).
// The other usual rule is action.EN1990Equilibrium.
func SafetyFactor(n float64) action.Combination {
	return action.Combination{
		Name: fmt.Sprintf("safety %g against overturning", n), Clause: "common practice, no source",
		Permanent: n, PermanentFavourable: 1, Variable: n,
	}
}

// validateStability refuses factors that would not be safe: holding down above 1,
// lifting below 1, or above 10.
func validateStability(c action.Combination) error {
	if err := c.Validate(); err != nil {
		return fmt.Errorf("stability: %w", err)
	}
	if !(0 < c.Favourable() && c.Favourable() <= 1) {
		return fmt.Errorf("stability: factor on holding effects %v; accepted is above 0, at most 1", c.Favourable())
	}
	if !(1 <= c.Permanent && c.Permanent <= 10) || !(1 <= c.Variable && c.Variable <= 10) {
		return fmt.Errorf("stability: factors on lifting effects %v (permanent) and %v (variable); accepted is 1 to 10", c.Permanent, c.Variable)
	}
	return nil
}
