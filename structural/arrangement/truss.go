package arrangement

import (
	"math"

	"spanwright/structural/beam"
)

// truss is the geometry of a Warren truss without posts on two supports: n panels of
// the loaded bottom chord, the top nodes above the middle of each panel.
//
// Its forces follow from the shears and moments of the simple beam under the same
// loads at the panel points (method of sections, any handbook): top chord −M/h at the
// panel points, bottom chord M/h in the middle of the panels, diagonals ±V·d/h.
type truss struct {
	panels int
	panel  float64 // m
	depth  float64 // m, between chord axes
}

// diagonal returns the length of a diagonal, m.
func (t truss) diagonal() float64 { return math.Hypot(t.panel/2, t.depth) }

// bars returns the total length of the chords and of the diagonals, m.
func (t truss) bars() (chords, diagonals float64) {
	n := float64(t.panels)
	return (2*n - 1) * t.panel, 2 * n * t.diagonal()
}

// effects are what one state of load does to a truss, or bounds of several.
type effects struct {
	node  []float64 // N·m, moment at panel points 0 … n
	mid   []float64 // N·m, moment in the middle of panels 1 … n
	shear []float64 // N, in panels 1 … n
	bend  []float64 // N·m, Σ N·n·l of the chords, of the deflection at panel points 0 … n: over E·A
	rack  []float64 // N·m, the same of the diagonals
}

func (t truss) blank() effects {
	n := t.panels
	return effects{make([]float64, n+1), make([]float64, n), make([]float64, n), make([]float64, n+1), make([]float64, n+1)}
}

func (e *effects) each(f func(values []float64)) {
	for _, v := range [...][]float64{e.node, e.mid, e.shear, e.bend, e.rack} {
		f(v)
	}
}

// statics fills moments and shears for forces (N, down +) at the panel points.
func (t truss) statics(e *effects, forces []float64) {
	n := t.panels
	shear := 0.0
	for j, p := range forces {
		shear += p * float64(n-j) / float64(n)
	}
	e.node[0] = 0
	for i := range n {
		shear -= forces[i]
		e.shear[i] = shear
		e.node[i+1] = e.node[i] + shear*t.panel
		e.mid[i] = (e.node[i] + e.node[i+1]) / 2
	}
	e.node[n] = 0
}

// units holds moments and shears under 1 N at each panel point in turn: the virtual
// loads of the deflections there, and by Maxwell of the real ones too.
func (t truss) units() []effects {
	all := make([]effects, t.panels+1)
	forces := make([]float64, t.panels+1)
	for k := range all {
		all[k] = t.blank()
		forces[k] = 1
		t.statics(&all[k], forces)
		forces[k] = 0
	}
	return all
}

// effect returns what forces at the panel points do. Deflections by virtual work,
// Σ N·n·l/(E·A): chords M·m·a/h², two diagonals a panel 2·V·v·d³/h².
func (t truss) effect(units []effects, forces []float64) effects {
	e := t.blank()
	t.statics(&e, forces)
	d := t.diagonal()
	for k, u := range units {
		chords, shears := 0.0, 0.0
		for i := range t.panels {
			chords += e.mid[i]*u.mid[i] + e.node[i]*u.node[i]
			shears += e.shear[i] * u.shear[i]
		}
		e.bend[k] = chords * t.panel / (t.depth * t.depth)
		e.rack[k] = 2 * shears * d * d * d / (t.depth * t.depth)
	}
	return e
}

// forces spreads a load over the panel points, each panel a simple beam. A couple
// becomes two forces at the ends of its panel.
func (t truss) forces(l beam.Load) []float64 {
	out := make([]float64, t.panels+1)
	switch l.Kind {
	case beam.Point:
		t.spread(out, l.From, l.Start)
	case beam.Moment:
		i := min(int(l.From/t.panel), t.panels-1)
		out[i] -= l.Start / t.panel
		out[i+1] += l.Start / t.panel
	default:
		t.distribute(out, l)
	}
	return out
}

// spread puts a force at x (m) on the two panel points beside it; off the truss it
// does nothing.
func (t truss) spread(out []float64, x, force float64) {
	at := x / t.panel
	if !(-near <= at && at <= float64(t.panels)+near) {
		return
	}
	i := min(max(int(at), 0), t.panels-1)
	part := at - float64(i)
	out[i] += force * (1 - part)
	out[i+1] += force * part
}

// distribute puts a uniform or linear load on the panel points: in each panel the
// resultant of the trapezium at its centroid.
func (t truss) distribute(out []float64, l beam.Load) {
	end := l.End
	if l.Kind == beam.Uniform {
		end = l.Start
	}
	value := func(x float64) float64 { return l.Start + (end-l.Start)*(x-l.From)/(l.To-l.From) }
	for i := range t.panels {
		from, to := max(l.From, float64(i)*t.panel), min(l.To, float64(i+1)*t.panel)
		if !(from < to) {
			continue
		}
		// the two triangles of the trapezium, each at its own third: exact for any signs
		third := (to - from) / 3
		t.spread(out, from+third, value(from)*(to-from)/2)
		t.spread(out, to-third, value(to)*(to-from)/2)
	}
}
