package arrangement

import (
	"math"
	"testing"
)

// 300 kN on 150 kPa take 2 m²; 10 kN take less than the least volume.
func TestFootingFromBearing(t *testing.T) {
	s := study(t, 10)
	s.Footings = FootingRule{Bearing: 150e3, Depth: 0.8, Least: 0.5}
	s = s.filled()
	for _, tc := range []struct {
		force, volume float64
		governs       string
	}{{300e3, 1.6, "bearing"}, {10e3, 0.5, "least volume"}} {
		f, err := s.footing(Support{Max: tc.force, Min: tc.force, Least: tc.force}, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		same(t, "volume", f.Volume, tc.volume, 1e-12)
		same(t, "width", f.Width, math.Sqrt(tc.volume/0.8), 1e-12)
		if f.Governs != tc.governs || f.Count != 1 {
			t.Errorf("%v N: governs %q, count %d", tc.force, f.Governs, f.Count)
		}
	}
}

// A footing under 400 kN with 200 kN·m, 1 m deep on 150 kPa. By hand with 23.536 kN/m³:
// at B = 2.2 m N = 513.9 kN, e = 0.3892 m ≤ B/3, on 2.2·(2.2 − 0.7783) m² 164.3 kPa of
// 173.5 kPa; at B = 2.1 m 503.8 kN, e = 0.397 m, 183.7 kPa: too much.
func TestFootingWithMoment(t *testing.T) {
	s := study(t, 10)
	s = s.filled()
	got, err := s.width(400e3, 400e3, 200e3)
	if err != nil {
		t.Fatal(err)
	}
	if !(2.1 < got && got < 2.2) {
		t.Errorf("width %v m, want between 2.1 and 2.2 m", got)
	}
	unit := 2400 * gravity
	n := 400e3 + unit*got*got
	same(t, "pressure", n/(got*(got-2*200e3/n)), 150e3+unit, 1e-9)
}

// A light force with the same moment is governed by the eccentricity, B/3: with no force
// at all W·B/3 = M, B³ = 3M/(ρ·g·d).
func TestFootingUnderMomentAlone(t *testing.T) {
	s := study(t, 10)
	s = s.filled()
	got, err := s.width(400e3, 0, 200e3)
	if err != nil {
		t.Fatal(err)
	}
	same(t, "width", got, math.Cbrt(3*200e3/(2400*gravity)), 1e-9)
}

// The counterweight presses on its own footing.
func TestCounterweightHasAFooting(t *testing.T) {
	c := only(t, study(t, 12, Cantilever))
	same(t, "force", c.Footings[0].Force, c.Ballast.Mass*gravity, 1e-12)
	if c.Footings[0].Uplift != 0 {
		t.Errorf("uplift %v N beside a counterweight", c.Footings[0].Uplift)
	}
	sum := 0.0
	for _, f := range c.Footings {
		sum += f.Volume * float64(f.Count)
	}
	same(t, "volume", c.Volume(), sum, 1e-12)
}
