package beam

import (
	"errors"
	"math"
	"testing"
)

// FuzzMember gives any numbers to trains, frequency and support positions: an
// answer is finite, or the error is a *Fault.
func FuzzMember(f *testing.F) {
	f.Add(10.0, 1e7, 6.0, 1e5, 3.0, 2e4, 1.5, 80.0, uint8(0))
	f.Add(1e-3, 1e300, 1e-3, 1e-300, 1e-9, 1e30, 1e308, 1e-300, uint8(7))
	f.Add(1e9, 1.0, 1e8, 1e12, 5e8, 0.0, 1e-12, 1e300, uint8(3))
	f.Fuzz(func(t *testing.T, length, ei, x, stiffness, step, load, spacing, mass float64, kind uint8) {
		b := Beam{Length: length, Segments: []Segment{{To: step, EI: ei}, {To: length, EI: 1e6}},
			Supports: []Support{{Kind: SupportKind(kind%5 + 1)}, {X: x, Kind: Pinned}}}
		if b.Supports[0].Kind == Spring {
			b.Supports[0].Stiffness = stiffness
		}
		var values []float64
		answer := func(err error, got ...float64) {
			var fault *Fault
			switch {
			case err == nil:
				values = append(values, got...)
			case !errors.As(err, &fault):
				t.Errorf("error %v, want a *Fault", err)
			}
		}
		p, err := MoveTrain(b, Train{Loads: []float64{load, 1e4}, Spacings: []float64{spacing}})
		answer(err)
		if err == nil {
			e := p.Extremes()
			for _, v := range []PlacedBounds{e.Moment, e.Shear, e.Deflection, e.Reactions[0].F, e.Reactions[0].M} {
				values = append(values, v.Max.Value, v.Min.Value, v.Max.X, v.Max.Lead, v.Min.Lead)
			}
		}
		frequency, err := Frequency(b, []Mass{{0, x, mass}, {0, length, 10}})
		answer(err, frequency)
		free := Beam{Length: length, Segments: b.Segments, Supports: b.Supports[:1]}
		best, err := PlaceSupports(free, []Case{{{Kind: Point, From: x, Start: load}}}, []Term{{Case: 0, Factor: 1}}, Layout{Free: 1}, LeastMoment)
		answer(err, best.Value)
		for i, v := range values {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Errorf("value %d is %g", i, v)
			}
		}
	})
}
