package spread

import (
	"bytes"
	"encoding/json"
	"math"
)

// written is a spread as JSON has it: a field that is absent is not a zero.
type written struct {
	Distribution Distribution `json:"distribution"`
	Low          *float64     `json:"low,omitempty"`
	Likely       *float64     `json:"likely,omitempty"`
	High         *float64     `json:"high,omitempty"`
	Bounds       string       `json:"bounds,omitempty"`
}

// counts tells which of low, likely and high a distribution cannot do without.
func (d Distribution) counts() (ends, likely bool) {
	switch d {
	case Fixed:
		return false, true
	case Triangular, PERT:
		return true, true
	case Uniform, Lognormal:
		return true, false
	}
	return false, false
}

// MarshalJSON writes what the distribution needs, zeros too, and of the rest what is
// not zero.
func (s Spread) MarshalJSON() ([]byte, error) {
	ends, likely := s.Distribution.counts()
	w := written{Distribution: s.Distribution, Bounds: s.Bounds}
	for _, f := range []struct {
		into   **float64
		value  *float64
		needed bool
	}{{&w.Low, &s.Low, ends}, {&w.Likely, &s.Likely, likely}, {&w.High, &s.High, ends}} {
		if f.needed || *f.value != 0 {
			*f.into = f.value
		}
	}
	return json.Marshal(w)
}

// UnmarshalJSON reads a spread and refuses unknown fields. A value that the
// distribution needs and that is not there becomes NaN, which Validate refuses by
// name: a blank is never zero.
func (s *Spread) UnmarshalJSON(data []byte) error {
	var w written
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(&w); err != nil {
		return err
	}
	ends, likely := w.Distribution.counts()
	*s = Spread{Distribution: w.Distribution, Bounds: w.Bounds, Low: valueOf(w.Low, ends), Likely: valueOf(w.Likely, likely), High: valueOf(w.High, ends)}
	return nil
}

func valueOf(x *float64, needed bool) float64 {
	switch {
	case x != nil:
		return *x
	case needed:
		return math.NaN()
	}
	return 0
}
