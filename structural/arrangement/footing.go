package arrangement

import (
	"fmt"
	"math"
)

// Footing is the square footing under a support, or under each leg of its tower.
type Footing struct {
	X       float64 // m from the root
	Count   int     // of its kind at X
	Force   float64 // N, greatest on the ground under one, characteristic, without its own weight
	Moment  float64 // N·m on one, characteristic
	Uplift  float64 // N on one under the factors of Study.Stability; 0 where it is never lifted
	Width   float64 // m
	Depth   float64 // m
	Volume  float64 // m³ of one
	Governs string  // "bearing", "least volume" or "uplift"
}

// footing sizes the footing of a support with its tower (nil for none) and what
// stands on it beside (N).
//
//   - bearing: (N + W)/(B·(B − 2e)) ≤ p + ρ·g·d, e = M/(N + W) ≤ B/3 (effective area:
//     EN 1997-1:2004 annex D; the bound on e: 6.5.4), under the greatest and the least N;
//   - uplift: the footing's own weight times its holding factor.
func (s *Study) footing(u Support, t *Tower, beside float64) (Footing, error) {
	f := Footing{X: u.X, Count: 1, Force: max(0, u.Max) + beside, Moment: u.Couple, Depth: s.Footings.Depth}
	light, least := max(0, u.Min)+beside, u.Least
	if t != nil {
		n := float64(t.Legs)
		own := (t.LegMass + t.BracingMass) * s.Setup.Gravity
		force := t.Overturning * couple(t.Legs, s.spread(t.Height))
		f.Count = t.Legs
		f.Force = max(0, u.Max/n+force) + own/n
		light = max(0, (u.Min+own)/n-force)
		least = (least+s.Stability.Favourable()*own)/n - s.Stability.Variable*force
		f.Moment /= n
		if t.Legs == 1 {
			f.Moment += t.Overturning
		}
	} else {
		least += s.Stability.Favourable() * beside
	}
	f.Uplift = max(0, -least)
	width, err := s.width(f.Force, light, f.Moment)
	if err != nil {
		return Footing{}, fmt.Errorf("arrangement: footing at %v m: %w", u.X, err)
	}
	f.Volume, f.Governs = width*width*f.Depth, "bearing"
	if s.Footings.Least > f.Volume {
		f.Volume, f.Governs = s.Footings.Least, "least volume"
	}
	if v := f.Uplift / (s.Stability.Favourable() * s.BallastDensity * s.Setup.Gravity); v > f.Volume {
		f.Volume, f.Governs = v, "uplift"
	}
	f.Width = math.Sqrt(f.Volume / f.Depth)
	return f, nil
}

// width returns the least width (m) at which the ground bears the greatest and the
// least force with the moment: √(N/p) without moment, else by halving.
func (s *Study) width(force, light, moment float64) (float64, error) {
	p, unit := s.Footings.Bearing, s.BallastDensity*s.Setup.Gravity*s.Footings.Depth
	low := math.Sqrt(force / p)
	if moment == 0 {
		return low, nil
	}
	bears := func(b, n float64) bool {
		total := n + unit*b*b
		e := moment / total
		return e <= b/3 && total/(b*(b-2*e)) <= p+unit
	}
	high := max(low, 1)
	for range 60 {
		if bears(high, force) && bears(high, light) {
			break
		}
		high *= 2
	}
	if !(bears(high, force) && bears(high, light)) {
		return 0, fmt.Errorf("no width bears %v N with %v N·m; accepted is a moment that a footing can take", force, moment)
	}
	for range 100 {
		mid := (low + high) / 2
		if bears(mid, force) && bears(mid, light) {
			high = mid
		} else {
			low = mid
		}
	}
	return high, nil
}
