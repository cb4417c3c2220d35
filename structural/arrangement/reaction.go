package arrangement

import (
	"fmt"
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// react returns the supports with their exact reactions under an own weight, N/m.
func (s *Study) react(h *holding, weight float64) ([]Support, error) {
	b := beam.Prismatic(h.length, 1, h.supports...)
	l := h.load(action.Vertical, h.supports)
	r, err := beam.AnalyseTrains(b, l.cases, l.trains)
	if err != nil {
		return nil, fmt.Errorf("arrangement: %w", err)
	}
	always := r.Envelope(l.always(weight)).Reactions
	all := r.Envelope(append(l.always(weight), l.freely(r, 1)...)).Reactions
	stable := r.Envelope(l.stability(r, weight, s.Stability)).Reactions
	side, err := s.sideways(h, b)
	if err != nil {
		return nil, err
	}
	out := make([]Support, len(all))
	for i := range all {
		out[i] = Support{
			X: all[i].X - h.root, Kind: h.supports[i].Kind, Role: h.roles[i],
			Max: all[i].FMax, Min: all[i].FMin, Permanent: always[i].FMax,
			Couple: max(all[i].MMax, -all[i].MMin), Side: side[i], Least: stable[i].FMin,
		}
		for _, v := range []float64{out[i].Max, out[i].Min, out[i].Least, out[i].Side} {
			if !(math.Abs(v) <= math.MaxFloat64) {
				return nil, fmt.Errorf("arrangement: the reaction at %v m is no finite number; accepted are actions that leave it one", out[i].X)
			}
		}
	}
	return out, nil
}

// sideways returns the greatest reaction of each support to horizontal actions; every
// support holds the member sideways as it does upwards.
func (s *Study) sideways(h *holding, b beam.Beam) ([]float64, error) {
	side := make([]float64, len(h.supports))
	l := h.load(action.Horizontal, h.supports)
	if len(l.cases) == 0 {
		return side, nil
	}
	r, err := beam.Analyse(b, l.cases)
	if err != nil {
		return nil, fmt.Errorf("arrangement: sideways: %w", err)
	}
	for i, q := range r.Envelope(l.characteristic(0)).Reactions {
		side[i] = max(q.FMax, -q.FMin)
	}
	return side, nil
}
