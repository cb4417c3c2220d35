package action

import (
	"fmt"
	"math"
)

// Combination gives the factors with which actions act together. Every variable
// action takes the same factor: no reduction for accompanying actions (ψ0 = 1),
// which is on the safe side.
type Combination struct {
	Name      string
	Clause    string  // standard and clause that the factors come from
	Permanent float64 // factor on permanent actions and self-weight
	Variable  float64 // factor on variable actions; each may also be absent
}

// Characteristic returns the characteristic combination with factors 1.0 and 1.0
// (EN 1990:2002 6.5.3, expression 6.14b, with ψ0 = 1). It belongs to a design
// basis that keeps the whole margin in the resistance.
func Characteristic() Combination {
	return Combination{Name: "characteristic", Clause: "EN 1990:2002 6.5.3 (6.14b)", Permanent: 1, Variable: 1}
}

// Validate refuses factors that are negative, not finite, or both zero.
func (c Combination) Validate() error {
	for _, f := range []struct {
		on    string
		value float64
	}{{"permanent", c.Permanent}, {"variable", c.Variable}} {
		if !(0 <= f.value && f.value <= math.MaxFloat64) {
			return fmt.Errorf("combination %q: factor on %s actions is %v; accepted is a number from 0", c.Name, f.on, f.value)
		}
	}
	if c.Permanent == 0 && c.Variable == 0 {
		return fmt.Errorf("combination %q: both factors are 0, so nothing would act; accepted is at least one above 0", c.Name)
	}
	return nil
}

// Factor returns the factor on actions of the given nature.
func (c Combination) Factor(n Nature) float64 {
	if n == Permanent {
		return c.Permanent
	}
	return c.Variable
}
