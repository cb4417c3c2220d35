package beam

import "slices"

// Analyser analyses one member after another in the same memory. The zero value
// is ready. One goroutine at a time may use it and its responses.
type Analyser struct {
	solver
	response Response
}

// solver carries the factorised member and the scratch of one case.
type solver struct {
	mesh  *mesh
	band  band
	load  loading
	rhs   []float64
	turns [][2]float64 // per element: end turns of the loads on the simple span
}

// Analyse solves the member for each case: stiffness method on supports and
// hinges, element flexibilities by virtual forces over stepped stiffness, so
// that shears, moments, slopes and deflections are exact for the beam theory.
// The matrix is factorised once. Settlements of supports are no part of the
// cases given: they make one more case, Response.SettlementCase.
//
// Every error is a *Fault. Beam and cases are not kept and not changed.
func Analyse(b Beam, cases []Case) (*Response, error) {
	var a Analyser
	r, err := a.Analyse(b, cases)
	if err != nil {
		return nil, err
	}
	r.settle()
	return r, nil
}

// Analyse is the function Analyse without allocation once the memory has grown.
// The response holds until the next call; it may find roots on the first
// envelope with a free term and so is no more for many goroutines than a.
func (a *Analyser) Analyse(b Beam, cases []Case) (*Response, error) {
	if fault := check(b, cases); fault != nil {
		return nil, fault
	}
	if a.mesh == nil {
		a.mesh = new(mesh)
	}
	a.mesh.set(b, cases)
	if fault := a.run(cases, 0); fault != nil {
		return nil, fault
	}
	return &a.response, nil
}

// run solves the cases on the present mesh, with room for trains.
func (a *Analyser) run(cases []Case, trains int) *Fault {
	m, s, r := a.mesh, &a.solver, &a.response
	if fault := m.assembleInto(&s.band); fault != nil {
		return fault
	}
	s.load.reset(len(m.ei))
	s.rhs, s.turns = sized(s.rhs, m.unknowns), sized(s.turns, len(m.elements))
	r.prepare(m, len(cases), trains)
	for c := range r.solved {
		s.load.settle = c == r.settlement
		if s.load.settle {
			s.load.set(m, nil)
		} else {
			s.load.set(m, cases[c])
		}
		s.solve()
		s.record(r, c)
	}
	return r.finish(slices.Min(m.ei) * m.unitEI)
}

// solve finds the displacements of the case in load and leaves the final
// shears and moments in it.
func (s *solver) solve() {
	clear(s.rhs)
	for i := range s.mesh.nodes {
		s.nodeLoads(&s.mesh.nodes[i])
	}
	for i := range s.mesh.elements {
		s.elementLoads(i)
	}
	s.band.solve(s.rhs)
	for i := range s.mesh.elements {
		e := &s.mesh.elements[i]
		u := s.displacements(i)
		chord := (u[2] - u[0]) / e.length
		left, right := e.ends(u[1]-chord, u[3]-chord, s.turns[i][0], s.turns[i][1])
		s.load.tilt(s.mesh, e, left, right-left)
	}
}

func (s *solver) nodeLoads(n *node) {
	spring, _ := s.mesh.springs(n)
	if n.deflection >= 0 {
		s.rhs[n.deflection] += s.load.force[n.station]
		if s.load.settle {
			s.rhs[n.deflection] += spring * n.settled
		}
	}
	if n.turn >= 0 {
		s.rhs[n.turn] += s.load.couple[n.station]
	}
}

// elementLoads adds what the loads inside element i do to its nodes: the end
// shears of the simple span, the couples that hold its ends straight, and the
// forces of settled ends.
func (s *solver) elementLoads(i int) {
	m, e := s.mesh, &s.mesh.elements[i]
	vl, vr := s.load.simple(m, e)
	tl, tr := s.load.turns(m, e)
	s.turns[i] = [2]float64{tl, tr}
	left, right := e.ends(0, 0, -tl, -tr)
	pair := (left - right) / e.length
	f := [4]float64{vl + pair, left, -vr - pair, -right}
	dofs, held := m.unknownsOf(i)
	if s.load.settle {
		k := e.matrix()
		for row := range 4 {
			for column, d := range dofs {
				if d < 0 {
					f[row] -= k[row][column] * held[column]
				}
			}
		}
	}
	for row, d := range dofs {
		if d >= 0 {
			s.rhs[d] += f[row]
		}
	}
}

// displacements returns v, θ, v, θ at the ends of element i.
func (s *solver) displacements(i int) [4]float64 {
	dofs, held := s.mesh.unknownsOf(i)
	var u [4]float64
	for k, d := range dofs {
		switch {
		case d >= 0:
			u[k] = s.rhs[d]
		case s.load.settle:
			u[k] = held[k]
		}
	}
	return u
}

// record writes case c to the response in SI units.
func (s *solver) record(r *Response, c int) {
	m, ld := s.mesh, &s.load
	turn := m.length * m.length / m.unitEI
	for i := range m.elements {
		e := &m.elements[i]
		u := s.displacements(i)
		v, slope := u[0], u[1]
		for p := e.first; p < e.last; p++ {
			h := m.x[p+1] - m.x[p]
			curve, moment := ld.curvature(m, p)
			shear := poly{ld.shear[p], -h * ld.q[p][0], -h * ld.q[p][1] / 2}
			down := poly{v, h * slope}
			for k := range 4 {
				down[k+2] = -h * h * curve[k] / float64((k+1)*(k+2))
				slope -= h * curve[k] / float64(k+1)
			}
			v = down.at(5, 1)
			at := p*r.cases + c
			for k := range 6 {
				r.tracks[shearTrack][at].c[k] = shear[k]
				r.tracks[momentTrack][at].c[k] = moment[k] * m.length
				r.tracks[deflectionTrack][at].c[k] = down[k] * turn * m.length
			}
			r.curved[p] = r.curved[p] || ld.q[p][1] != 0
		}
	}
	s.reactions(r, c)
}

// reactions reads the reactions off the jumps of shear and moment.
func (s *solver) reactions(r *Response, c int) {
	m, ld := s.mesh, &s.load
	for i := range m.nodes {
		n := &m.nodes[i]
		if n.support < 0 {
			continue
		}
		F, M := ld.force[n.station], -ld.couple[n.station]
		if p := n.station; p < len(m.ei) {
			F += ld.shear[p]
			M += ld.moment[p]
		}
		if p := n.station - 1; p >= 0 {
			h, q := m.x[p+1]-m.x[p], ld.q[p]
			F -= ld.shear[p] - h*(q[0]+q[1]/2)
			M -= ld.moment[p] + h*ld.shear[p] - h*h*(q[0]/2+q[1]/6)
		}
		if !m.supports[n.support].holdsRotation() {
			M = 0
		}
		if m.supports[n.support].Kind == Guided {
			F = 0
		}
		r.reactions[c*len(m.supports)+n.support] = Reaction{X: m.supports[n.support].X, F: F, M: M * m.length}
	}
}
