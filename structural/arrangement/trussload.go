package arrangement

import (
	"math"

	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// trussLoad holds what the actions do to one truss: what is always there, an own
// weight of 1 N/m, and the bounds of all variable actions, each of which may be absent.
type trussLoad struct {
	truss
	always, own effects
	most, least effects
}

// loadTruss puts the holding's vertical actions on the truss.
func (h *holding) loadTruss(t truss) *trussLoad {
	l := h.load(action.Vertical, nil)
	u := t.units()
	on := func(c int) effects { return t.effect(u, t.forces(l.cases[c][0])) }
	out := &trussLoad{truss: t, always: t.blank(), own: on(l.own[0]), most: t.blank(), least: t.blank()}
	for _, c := range l.permanent {
		out.always.add(on(c), func(sum, v float64) float64 { return sum + v })
	}
	for _, c := range l.variable {
		e := on(c)
		out.most.add(e, func(sum, v float64) float64 { return sum + max(0, v) })
		out.least.add(e, func(sum, v float64) float64 { return sum + min(0, v) })
	}
	for i, train := range l.trains {
		most, least := t.pass(u, train)
		out.most.add(most, func(sum, v float64) float64 { return sum + l.dynamic[i]*v })
		out.least.add(least, func(sum, v float64) float64 { return sum + l.dynamic[i]*v })
	}
	return out
}

// add merges v into e, value by value.
func (e *effects) add(v effects, merge func(sum, v float64) float64) {
	var from [][]float64
	v.each(func(values []float64) { from = append(from, values) })
	k := 0
	e.each(func(values []float64) {
		for i := range values {
			values[i] = merge(values[i], from[k][i])
		}
		k++
	})
}

// pass returns the bounds of a train in any position and both directions. Between
// panel points every effect runs straight, so that a wheel at a panel point is worst.
func (t truss) pass(units []effects, train beam.Train) (most, least effects) {
	most, least = t.blank(), t.blank()
	for _, direction := range [...]float64{1, -1} {
		behind := 0.0 // of the wheel that stands at the panel point
		for k := range train.Loads {
			if k > 0 {
				behind += train.Spacings[k-1]
			}
			for node := range t.panels + 1 {
				lead := float64(node)*t.panel + direction*behind
				e := t.effect(units, t.wheels(train, lead, direction))
				most.add(e, math.Max)
				least.add(e, math.Min)
			}
		}
	}
	return most, least
}

// wheels returns the forces at the panel points of a train with its lead at x, m.
func (t truss) wheels(train beam.Train, x, direction float64) []float64 {
	out := make([]float64, t.panels+1)
	for k, p := range train.Loads {
		if k > 0 {
			x -= direction * train.Spacings[k-1]
		}
		t.spread(out, x, p)
	}
	return out
}

// barForces are the greatest forces in a truss, N, characteristic, and the states that
// chords and diagonals have to bear.
type barForces struct {
	compression, tension, diagonal float64
	chords, diagonals              []axial
}

// under returns the bar forces under an own weight, N/m. Of a state's permanent and
// variable part each is the worst of all places, which is on the safe side.
func (l *trussLoad) under(weight float64) barForces {
	var f barForces
	var top, bottom, web span
	for i := 1; i < l.panels; i++ {
		top.take((l.always.node[i]+weight*l.own.node[i])/l.depth, l.most.node[i]/l.depth, l.least.node[i]/l.depth)
	}
	slope := l.diagonal() / l.depth
	for i := range l.own.mid {
		bottom.take((l.always.mid[i]+weight*l.own.mid[i])/l.depth, l.most.mid[i]/l.depth, l.least.mid[i]/l.depth)
		web.take((l.always.shear[i]+weight*l.own.shear[i])*slope, l.most.shear[i]*slope, l.least.shear[i]*slope)
	}
	f.compression, f.tension = max(top.high, -bottom.low), max(bottom.high, -top.low)
	f.diagonal = max(web.high, -web.low)
	f.chords = []axial{{top.most, top.up}, {-bottom.most, -bottom.up}}
	if bottom.down < 0 || top.down < 0 || top.least < 0 { // what lifts turns the forces about
		f.chords = append(f.chords, axial{-bottom.least, -bottom.down}, axial{top.least, top.down})
	}
	p, v := max(web.most, -web.least), max(web.up, -web.down)
	f.diagonals = []axial{{p, v}, {-p, -v}}
	return f
}

// span bounds a force over all places of a truss: the permanent part, the variable
// parts of either sign, and their sums.
type span struct {
	any         bool
	most, least float64 // of the permanent part
	up, down    float64 // of the variable part
	high, low   float64 // of the sum
}

func (s *span) take(permanent, up, down float64) {
	if !s.any {
		*s = span{true, permanent, permanent, up, down, permanent + up, permanent + down}
		return
	}
	s.most, s.least = max(s.most, permanent), min(s.least, permanent)
	s.up, s.down = max(s.up, up), min(s.down, down)
	s.high, s.low = max(s.high, permanent+up), min(s.low, permanent+down)
}

// sag returns the greatest deflection (m) at a panel point under a combination, with
// the areas (m²) of chord and diagonal, and which part of it comes from the diagonals.
// The parts are bounded one by one, which is on the safe side.
func (l *trussLoad) sag(c action.Combination, weight, chord, diagonal, e float64) Deflection {
	var worst Deflection
	for k := range l.own.bend {
		bend := c.Permanent * (l.always.bend[k] + weight*l.own.bend[k])
		rack := c.Permanent * (l.always.rack[k] + weight*l.own.rack[k])
		for _, v := range [...]effects{l.most, l.least} {
			shear := (rack + c.Variable*v.rack[k]) / (e * diagonal)
			value := (bend+c.Variable*v.bend[k])/(e*chord) + shear
			if math.Abs(value) > math.Abs(worst.Value) {
				worst = Deflection{Value: value, X: float64(k) * l.panel, Shear: shear}
			}
		}
	}
	return worst
}
