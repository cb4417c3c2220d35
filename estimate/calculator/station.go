package calculator

import (
	"cmp"
	"math"
	"slices"

	"spanwright/structural/beam"
)

// defaultStations is the grid of the diagrams where the request asks for none.
const defaultStations = 101

// place is one station to be: jumps are looked at from both sides, what is kept is
// kept when there are too many.
type place struct {
	x          float64
	jump, keep bool
}

// places are the grid, supports, jumps and extremes, in order, each once.
func (a *analysis) places() []place {
	n, L := a.request.Stations, a.request.Length
	if n == 0 {
		n = defaultStations
	}
	var all []place
	for i := range n {
		all = append(all, place{x: L * float64(i) / float64(n-1), keep: i == 0 || i == n-1})
	}
	for _, s := range a.beam.Supports {
		all = append(all, place{s.X, true, true})
	}
	for _, x := range a.beam.Hinges {
		all = append(all, place{x: x})
	}
	for _, l := range a.request.Loads {
		from, to := l.extent(L)
		switch l.Kind {
		case "point", "moment":
			all = append(all, place{x: l.Position, jump: true})
		case "train":
		default:
			all = append(all, place{x: from}, place{x: to})
		}
	}
	e := a.envelope
	for _, x := range []beam.Extreme{e.MomentMax, e.MomentMin, e.ShearMax, e.ShearMin, e.DeflectionMax, e.DeflectionMin} {
		all = append(all, place{x: x.X, keep: true})
	}
	return distinct(all, L)
}

func distinct(all []place, L float64) []place {
	slices.SortStableFunc(all, func(p, q place) int { return cmp.Compare(p.x, q.x) })
	var out []place
	for _, p := range all {
		if n := len(out); n > 0 && p.x-out[n-1].x <= 1e-9*L {
			out[n-1].jump, out[n-1].keep = out[n-1].jump || p.jump, out[n-1].keep || p.keep
			continue
		}
		out = append(out, p)
	}
	return out
}

// stations evaluates the bounds at every place.
func (a *analysis) stations() []BeamStation {
	out := []BeamStation{}
	var keep []bool
	L := a.request.Length
	for _, p := range a.places() {
		left := a.station(p.x, beam.Left)
		if p.jump && p.x > 1e-9*L && p.x < L*(1-1e-9) {
			if right := a.station(p.x, beam.Right); !alike(left, right) {
				out, keep = append(out, left), append(keep, p.keep)
				left = right
			}
		}
		out, keep = append(out, left), append(keep, p.keep)
	}
	clean(out)
	return thinned(out, keep)
}

// clean makes zeros of what is rounding beside the largest value of the same kind.
func clean(list []BeamStation) {
	for _, of := range []func(*BeamStation) (*Number, *Number){
		func(s *BeamStation) (*Number, *Number) { return &s.MomentMax, &s.MomentMin },
		func(s *BeamStation) (*Number, *Number) { return &s.ShearMax, &s.ShearMin },
		func(s *BeamStation) (*Number, *Number) { return &s.DeflectionMax, &s.DeflectionMin },
	} {
		least := Number(0)
		for i := range list {
			a, b := of(&list[i])
			least = max(least, 1e-11**a, -1e-11**a, 1e-11**b, -1e-11**b)
		}
		for i := range list {
			a, b := of(&list[i])
			for _, v := range []*Number{a, b} {
				if -least < *v && *v < least {
					*v = 0
				}
			}
		}
	}
}

// alike tells whether two stations differ by rounding alone.
func alike(a, b BeamStation) bool {
	near := func(x, y Number) bool {
		return math.Abs(float64(x-y)) <= 1e-9*math.Max(math.Abs(float64(x)), math.Abs(float64(y)))
	}
	return near(a.MomentMax, b.MomentMax) && near(a.MomentMin, b.MomentMin) && near(a.ShearMax, b.ShearMax) && near(a.ShearMin, b.ShearMin)
}

// thinned leaves out evenly what need not be kept, down to the limit.
func thinned(list []BeamStation, keep []bool) []BeamStation {
	must := 0
	for _, k := range keep {
		if k {
			must++
		}
	}
	room, others := MaxStations-must, len(list)-must
	if others <= room {
		return list
	}
	var out []BeamStation
	seen := 0
	for i, s := range list {
		if keep[i] {
			out = append(out, s)
			continue
		}
		if (seen+1)*room/others > seen*room/others {
			out = append(out, s)
		}
		seen++
	}
	return out
}

// station is the worst of all sets at a place.
func (a *analysis) station(x float64, side beam.Side) BeamStation {
	var shear, moment, deflection beam.Bounds
	for i, set := range a.strength {
		v, m, _ := a.response.EnvelopeAt(set, x, side)
		shear, moment = widened(shear, v, i == 0), widened(moment, m, i == 0)
	}
	for i, set := range a.service {
		_, _, d := a.response.EnvelopeAt(set, x, side)
		deflection = widened(deflection, d, i == 0)
	}
	return BeamStation{Position: Number(x), MomentMax: Number(moment.Max / 1e3), MomentMin: Number(moment.Min / 1e3),
		ShearMax: Number(shear.Max / 1e3), ShearMin: Number(shear.Min / 1e3),
		DeflectionMax: Number(deflection.Max * 1e3), DeflectionMin: Number(deflection.Min * 1e3)}
}

func widened(b, x beam.Bounds, first bool) beam.Bounds {
	if first {
		return x
	}
	return beam.Bounds{Max: math.Max(b.Max, x.Max), Min: math.Min(b.Min, x.Min)}
}
