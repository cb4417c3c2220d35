package beam

import (
	"math"
	"slices"
)

// AnalyseTrains is Analyse with trains that cross the member. Each train makes one
// more case, Response.TrainCase: a Term that names it adds the bounds of what
// the train does, in any position and both directions, at each place to the
// upper and to the lower envelope, whether the term is free or not, as a train
// is free by its nature. So Envelope, EnvelopeForces, EnvelopeDeflections and
// EnvelopeAt combine a train with every other action; At and Reactions know no
// train, which is no single state.
//
// At a place the bounds are exact; between places they are within 1e-6 of their
// largest value, or above it in a kink.
func AnalyseTrains(b Beam, cases []Case, trains []Train) (*Response, error) {
	if len(trains) == 0 {
		return Analyse(b, cases)
	}
	r, _, fault := analyseTrains(b, cases, trains)
	if fault != nil {
		return nil, fault
	}
	return r, nil
}

func analyseTrains(b Beam, cases []Case, trains []Train) (*Response, []*moving, *Fault) {
	if fault := check(b, cases); fault != nil {
		return nil, nil, fault
	}
	for i, t := range trains {
		if fault := t.check(ordinal("train", i)); fault != nil {
			return nil, nil, fault
		}
	}
	ln, fault := newLines(b)
	if fault != nil {
		return nil, nil, fault
	}
	m := newMesh(b, cases)
	all := make([]*moving, len(trains))
	for i, t := range trains {
		all[i] = newMoving(ln, t)
		for _, x := range all[i].jumps() {
			m.add(x * m.length)
		}
	}
	m.x = grow(m.x, all)
	m.stiffness(b)
	m.number(b)
	a := Analyser{solver: solver{mesh: m}}
	if fault := a.run(cases, len(trains)); fault != nil {
		return nil, nil, fault
	}
	r := &a.response
	for i, mv := range all {
		mv.record(r, i)
	}
	if fault := r.finishTrains(); fault != nil {
		return nil, nil, fault
	}
	r.settle()
	return r, all, nil
}

// grow finds the bounds of all trains between the given stations and returns
// these with the ends of the leaves among them.
func grow(x []float64, trains []*moving) []float64 {
	out := slices.Clone(x)
	for _, mv := range trains {
		mv.grow(x)
		for _, l := range mv.leaves {
			out = append(out, l.from)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// record writes the bounds of train i to the response in SI units.
func (mv *moving) record(r *Response, i int) {
	m, unit := mv.lines.mesh, mv.units()
	at := 0
	for p := range len(r.x) - 1 {
		a, b := r.x[p]/m.length, r.x[p+1]/m.length
		for at+1 < len(mv.leaves) && 0.5*(a+b) > mv.leaves[at].to {
			at++
		}
		l := &mv.leaves[at]
		from, width := (a-l.from)/(l.to-l.from), (b-a)/(l.to-l.from)
		for k := range lineKinds {
			up, down := l.up[k].part(4, from, width), l.down[k].part(4, from, width)
			for j := range up {
				up[j] *= unit[k]
				down[j] *= unit[k]
			}
			r.tracks[k][p*r.cases+r.solved+i].c = up
			r.lower[k][p*r.trains+i] = down
		}
	}
	for s, b := range mv.reactions() {
		r.moved[i*len(r.supports)+s] = [2]Bounds{
			{b[0].Max.Value, b[0].Min.Value}, {b[1].Max.Value, b[1].Min.Value}}
	}
}

// units returns what brings the effects to SI.
func (mv *moving) units() [lineKinds]float64 {
	m := mv.lines.mesh
	return [lineKinds]float64{lineMoment: m.length, lineShear: 1, lineDown: cube(m.length) / m.unitEI}
}

// reactions returns the bounds of force and couple of each support, SI.
func (mv *moving) reactions() [][2]PlacedBounds {
	ln := mv.lines
	m := ln.mesh
	var of [][]cubic
	for n := range m.nodes {
		if m.nodes[n].support >= 0 {
			F, M := ln.reaction(n)
			of = append(of, F, M)
		}
	}
	mv.cross.run(m.x, of, -1, Left)
	out := make([][2]PlacedBounds, len(of)/2)
	for i := range out {
		x := m.supports[i].X
		out[i] = [2]PlacedBounds{mv.placed(mv.cross.best[2*i], x, 1), mv.placed(mv.cross.best[2*i+1], x, m.length)}
	}
	return out
}

// placed brings bounds at x (m) to SI; unit is that of the value.
func (mv *moving) placed(b PlacedBounds, x, unit float64) PlacedBounds {
	for _, p := range [2]*Placed{&b.Max, &b.Min} {
		p.X = x
		p.Value *= unit
		p.Lead *= mv.lines.mesh.length
	}
	return b
}

// reaction returns the influence lines of force and couple at node n: the jumps
// of shear and moment there.
func (ln *lines) reaction(n int) (F, M []cubic) {
	m := ln.mesh
	F, M = make([]cubic, len(m.ei)), make([]cubic, len(m.ei))
	turns := m.supports[m.nodes[n].support].holdsRotation()
	holds := m.supports[m.nodes[n].support].Kind != Guided
	side := func(e int, sign float64, end []cubic) {
		el := &m.elements[e]
		for p := range F {
			if holds {
				F[p].add(sign/el.length, &ln.right[e][p])
				F[p].add(-sign/el.length, &ln.left[e][p])
			}
			if turns {
				M[p].add(sign, &end[p])
			}
		}
		for p := el.first; p < el.last && holds; p++ {
			a, h := (m.x[p]-m.x[el.first])/el.length, (m.x[p+1]-m.x[p])/el.length
			own := cubic{1 - a, -h}
			if sign < 0 {
				own = cubic{a, h}
			}
			F[p].add(1, &own)
		}
	}
	if n > 0 {
		side(n-1, -1, ln.right[n-1])
	}
	if n < len(m.elements) {
		side(n, 1, ln.left[n])
	}
	return F, M
}

// finishTrains finds the sizes of the trains' bounds and refuses results too
// large to go on with.
func (r *Response) finishTrains() *Fault {
	for i := range r.trains {
		for k := range r.tracks {
			for p := range len(r.x) - 1 {
				size := max(r.tracks[k][p*r.cases+r.solved+i].c.size(), r.lower[k][p*r.trains+i].size())
				if !(size <= largestResult) {
					return &Fault{FaultOverflow, ordinal("train", i), r.x[p],
						"a result beyond " + num(largestResult), "loads, lengths and stiffnesses of usual sizes"}
				}
				r.size[k][r.solved+i] = math.Max(r.size[k][r.solved+i], size)
			}
		}
	}
	return nil
}

// TrainCase returns the case of train i (from 0) of AnalyseTrains, -1 if there
// is none.
func (r *Response) TrainCase(i int) int {
	if i < 0 || i >= r.trains {
		return -1
	}
	return r.solved + i
}
