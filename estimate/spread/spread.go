// Package spread holds what is believed about one number: a distribution and
// the low, likely and high values that fix it.
//
//	Spread (as entered) → Validate → resolve: limits, mode, shape
//	resolved → Base, Mean, Variance, Quantile, CDF (exact, closed forms)
//	resolved → Sampler (tables) → FromUniform, FromNormal, FillUniform, FillNormal
//
// The random numbers come from outside; nothing here draws any.
package spread

import (
	"fmt"
	"math"
)

// Distribution is the shape of a spread.
type Distribution string

// The distributions.
const (
	Fixed      Distribution = "fixed"      // the likely value alone
	Uniform    Distribution = "uniform"    // equally likely between low and high
	Triangular Distribution = "triangular" // mode at likely
	PERT       Distribution = "pert"       // beta-PERT, mode at likely, λ = 4
	Lognormal  Distribution = "lognormal"  // low and high are P10 and P90
)

// What low and high are.
const (
	BoundsLimits      = "limits"  // nothing lies beyond them
	BoundsPercentiles = "p10-p90" // one in ten lies below low, one in ten above high
)

// Spread is what is believed about one number, in that number's unit. Low ≤
// likely ≤ high. Which fields count depends on the distribution:
//
//   - fixed: Likely; Low and High are 0 or equal to it.
//   - uniform: Low and High; Likely, where it is not 0, is the base value, else
//     the base value is the middle.
//   - triangular, pert: all three; Likely is the mode.
//   - lognormal: Low and High, both above 0, are always P10 and P90, and the
//     median is √(Low·High). Where Likely is not 0 it is the median instead, and
//     Low and High only fix the deviation of the logarithm through their ratio.
//
// Bounds is BoundsLimits or BoundsPercentiles; empty means limits, and
// percentiles for lognormal, which has no upper limit. A spread with Low = High
// is the fixed value.
type Spread struct {
	Distribution Distribution `json:"distribution" enum:"fixed,uniform,triangular,pert,lognormal"`
	Low          float64      `json:"low,omitempty"`
	Likely       float64      `json:"likely,omitempty"`
	High         float64      `json:"high,omitempty"`
	Bounds       string       `json:"bounds,omitempty" enum:"limits,p10-p90"`
}

// NewFixed returns the spread of a number that is taken as known.
func NewFixed(value float64) Spread {
	return Spread{Distribution: Fixed, Likely: value}
}

// NewUniform returns the uniform spread between the limits low and high.
func NewUniform(low, high float64) Spread {
	return Spread{Distribution: Uniform, Low: low, High: high}
}

// NewTriangular returns the triangular spread with limits low and high.
func NewTriangular(low, likely, high float64) Spread {
	return Spread{Distribution: Triangular, Low: low, Likely: likely, High: high}
}

// NewPERT returns the beta-PERT spread with limits low and high and weight 4 on the
// mode (Malcolm, Roseboom, Clark, Fazar 1959, Operations Research 7).
func NewPERT(low, likely, high float64) Spread {
	return Spread{Distribution: PERT, Low: low, Likely: likely, High: high}
}

// NewLognormal returns the lognormal spread with P10 low, P90 high and median √(low·high).
func NewLognormal(low, high float64) Spread {
	return Spread{Distribution: Lognormal, Low: low, High: high}
}

// LogDeviation returns the lognormal spread of median 1 whose natural logarithm
// has the standard deviation sigma ≥ 0: the systemic factor. A sigma that is
// negative, NaN or too large gives a spread that Validate refuses.
func LogDeviation(sigma float64) Spread {
	if sigma == 0 {
		return NewFixed(1)
	}
	return Spread{Distribution: Lognormal, Low: math.Exp(-z90 * sigma), Likely: 1, High: math.Exp(z90 * sigma)}
}

// Error is a faulty field of a spread.
type Error struct {
	Field    string // JSON name of the field
	Found    string // what stands there
	Accepted string // what would do
}

// Error states field, finding and remedy in one line.
func (e *Error) Error() string {
	return fmt.Sprintf("spread: %s: found %s; accepted: %s", e.Field, e.Found, e.Accepted)
}

// fault builds an Error about a number; one that is not there is NaN.
func fault(field string, found float64, accepted string) error {
	if math.IsNaN(found) {
		return &Error{Field: field, Found: "nothing", Accepted: accepted}
	}
	return &Error{Field: field, Found: fmt.Sprintf("%.12g", found), Accepted: accepted}
}

// Validate returns nil or an *Error for the first faulty field.
func (s Spread) Validate() error {
	_, err := s.resolve()
	return err
}

// check tests the fields alone, before any shape is solved for.
func (s Spread) check() error {
	for _, f := range []struct {
		name  string
		value float64
	}{{"low", s.Low}, {"likely", s.Likely}, {"high", s.High}} {
		if !(math.Abs(f.value) <= maxValue) {
			return fault(f.name, f.value, "a finite number within ±1e100")
		}
	}
	if s.Bounds != "" && s.Bounds != BoundsLimits && s.Bounds != BoundsPercentiles {
		return &Error{Field: "bounds", Found: fmt.Sprintf("%.40q", s.Bounds), Accepted: BoundsLimits + ", " + BoundsPercentiles}
	}
	switch s.Distribution {
	case Fixed:
		return s.checkFixed()
	case Uniform, Triangular, PERT:
		return s.checkOrder(s.Distribution != Uniform || s.Likely != 0)
	case Lognormal:
		return s.checkLognormal()
	}
	return &Error{Field: "distribution", Found: fmt.Sprintf("%.40q", string(s.Distribution)), Accepted: "fixed, uniform, triangular, pert, lognormal"}
}

// maxValue keeps squares and products of a few values finite.
const maxValue = 1e100

// checkFixed tests that low and high do not contradict the fixed value.
func (s Spread) checkFixed() error {
	if s.Low != 0 && s.Low != s.Likely {
		return fault("low", s.Low, "nothing, or the likely value, for a fixed number")
	}
	if s.High != 0 && s.High != s.Likely {
		return fault("high", s.High, "nothing, or the likely value, for a fixed number")
	}
	return nil
}

// checkOrder tests low ≤ high, and likely between them where it counts.
func (s Spread) checkOrder(likely bool) error {
	if !(s.Low <= s.High) {
		return fault("high", s.High, fmt.Sprintf("at least low, %.12g", s.Low))
	}
	if likely && !(s.Low <= s.Likely && s.Likely <= s.High) {
		if s.Bounds == BoundsPercentiles && (s.Distribution == Triangular || s.Distribution == PERT) {
			return s.noFit()
		}
		return fault("likely", s.Likely, fmt.Sprintf("from low, %.12g, to high, %.12g", s.Low, s.High))
	}
	return nil
}

// checkLognormal tests that low and high can be percentiles of a positive number.
func (s Spread) checkLognormal() error {
	if s.Bounds == BoundsLimits {
		return &Error{Field: "bounds", Found: s.Bounds, Accepted: BoundsPercentiles + " or nothing: a lognormal spread has no upper limit"}
	}
	if !(s.Low >= 1/maxValue) {
		return fault("low", s.Low, "above 0 for a lognormal spread")
	}
	return s.checkOrder(s.Likely != 0)
}

// Scale returns the spread of f times the number. A negative f swaps low and
// high; Validate refuses the result for lognormal. f = 0 gives the fixed value 0.
func (s Spread) Scale(f float64) Spread {
	if f == 0 {
		return NewFixed(0)
	}
	s.Low, s.Likely, s.High = f*s.Low, f*s.Likely, f*s.High
	if f < 0 {
		s.Low, s.High = s.High, s.Low
	}
	return s
}
