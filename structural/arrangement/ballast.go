package arrangement

import "math"

// Ballast is the counterweight of a cantilever. Moments are about the root.
type Ballast struct {
	Mass        float64 // kg; 0 where nothing lifts the tail
	Volume      float64 // m³
	Density     float64 // kg/m³
	Arm         float64 // m, from the root to the counterweight
	Overturning float64 // N·m, characteristic, of all that lifts the tail
	Holding     float64 // N·m, characteristic, of permanent actions and own weight of the tail
	Balance     float64 // N·m, Σ of the moments under the factors of Study.Stability
	Safety      float64 // (Holding + moment of the counterweight) / Overturning; 0 where nothing lifts
}

// ballast returns the counterweight at the tail's end:
//
//	mass = Σ(γ·M) / (γ_hold·g·arm)
//
// with SafetyFactor(n) that is (n·M_overturning − M_holding)/(g·arm). The moments are
// the exact reaction at the tail's end times the arm.
func (s *Study) ballast(h *holding, supports []Support, weight float64) *Ballast {
	b := &Ballast{Arm: s.Tail, Density: s.BallastDensity}
	b.Balance = max(0, -supports[0].Least*b.Arm)
	b.Mass = b.Balance / (s.Stability.Favourable() * s.Setup.Gravity * b.Arm)
	b.Volume = b.Mass / b.Density
	// what is always there on the tail holds; the reaction at its end has the rest
	b.Holding = h.tailMoment(weight)
	b.Overturning = max(0, b.Holding-supports[0].Min*b.Arm)
	if b.Overturning > 0 {
		b.Safety = (b.Holding + b.Mass*s.Setup.Gravity*b.Arm) / b.Overturning
	}
	return b
}

// tailMoment returns the moment of the tail's own weight about the root, N·m.
func (h *holding) tailMoment(weight float64) float64 {
	return weight * math.Pow(h.root, 2) / 2
}
