package action

import (
	"fmt"
	"math"
)

// Combination gives the factors with which actions act together.
//
// Permanent actions and self-weight as a whole take either Permanent or
// PermanentFavourable, whichever is worse. Variable actions take Variable, or are
// absent where that is worse. With Accompanying, each variable action leads in turn
// and the others take Variable·Accompanying (EN 1990:2002 6.4.3.2, ψ0); without, all
// lead at once, which is on the safe side.
type Combination struct {
	Name                string
	Clause              string  // standard and clause that the factors come from
	Permanent           float64 // on permanent actions and self-weight where they add to the effect
	PermanentFavourable float64 // on the same where they relieve it, at most Permanent; 0 stands for Permanent
	Variable            float64 // on variable actions; 0 leaves them out
	Accompanying        float64 // ψ0 on variable actions beside the leading one, above 0 to 1; 0 stands for 1
}

// Validate refuses factors that are negative, not finite, or both zero, a favourable
// factor over the unfavourable one, and an accompanying factor over 1.
func (c Combination) Validate() error {
	for _, f := range []struct {
		on       string
		value    float64
		most     float64
		accepted string
	}{
		{"permanent actions", c.Permanent, math.MaxFloat64, "a number from 0"},
		{"favourable permanent actions", c.PermanentFavourable, c.Permanent, "0 for none, or up to that on permanent actions"},
		{"variable actions", c.Variable, math.MaxFloat64, "a number from 0"},
		{"accompanying variable actions", c.Accompanying, 1, "0 for none, or up to 1"},
	} {
		if !(0 <= f.value && f.value <= f.most) {
			return fmt.Errorf("combination %q: factor on %s is %v; accepted is %s", c.Name, f.on, f.value, f.accepted)
		}
	}
	if c.Permanent == 0 && c.Variable == 0 {
		return fmt.Errorf("combination %q: both factors are 0, so nothing would act; accepted is at least one above 0", c.Name)
	}
	return nil
}

// Favourable returns the factor on permanent actions where they relieve.
func (c Combination) Favourable() float64 {
	if c.PermanentFavourable == 0 {
		return c.Permanent
	}
	return c.PermanentFavourable
}

// Beside returns the factor on a variable action that does not lead.
func (c Combination) Beside() float64 {
	if c.Accompanying == 0 {
		return c.Variable
	}
	return c.Variable * c.Accompanying
}

// Factor returns the unfavourable factor on actions of the given nature.
func (c Combination) Factor(n Nature) float64 {
	if n == Permanent {
		return c.Permanent
	}
	return c.Variable
}
