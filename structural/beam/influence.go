package beam

// cubic is a polynomial of t in [0, 1] over one cell, lowest power first.
type cubic [4]float64

// lines holds the influence lines of what is enough to know any effect of a unit
// force at a: the moments at both ends of each element and the deflections of
// the nodes that can move. Each line is the member's own shape under the
// displacement that goes with the effect (Müller-Breslau; for deflections
// Maxwell's reciprocal theorem), hence a cubic on each piece, stepped members
// included. Lengths are in lengths of the member, stiffness in the largest EI.
type lines struct {
	mesh        *mesh
	left, right [][]cubic // by element: end moments, piece by piece
	down        [][]cubic // by node: deflection, nil if held
	element     []int     // by piece
}

// newLines solves the member for its influence lines.
func newLines(b Beam) (*lines, *Fault) {
	m := newMesh(b, nil)
	k, fault := m.assemble()
	if fault != nil {
		return nil, fault
	}
	ln := &lines{mesh: m}
	rhs := make([]float64, m.unknowns)
	for e := range m.elements {
		el := &m.elements[e]
		for range el.last - el.first {
			ln.element = append(ln.element, e)
		}
		ln.left = append(ln.left, ln.kinked(k, rhs, e, 1, 0))
		ln.right = append(ln.right, ln.kinked(k, rhs, e, 0, 1))
	}
	for _, n := range m.nodes {
		if n.deflection < 0 {
			ln.down = append(ln.down, nil)
			continue
		}
		clear(rhs)
		rhs[n.deflection] = 1
		k.solve(rhs)
		ln.down = append(ln.down, ln.shape(rhs, -1, 0, 0))
	}
	return ln, nil
}

// kinked returns the shape under sagging kinks inside the two ends of element e.
func (ln *lines) kinked(k *band, rhs []float64, e int, left, right float64) []cubic {
	clear(rhs)
	el := &ln.mesh.elements[e]
	ml, mr := el.ends(0, 0, -left, -right)
	pair := (ml - mr) / el.length
	dofs, _ := ln.mesh.unknownsOf(e)
	for i, f := range [4]float64{pair, ml, -pair, -mr} {
		if dofs[i] >= 0 {
			rhs[dofs[i]] += f
		}
	}
	k.solve(rhs)
	return ln.shape(rhs, e, left, right)
}

// shape integrates the deflection of the whole member from its displacements,
// with kinks in element e.
func (ln *lines) shape(u []float64, e int, left, right float64) []cubic {
	m := ln.mesh
	out := make([]cubic, 0, len(m.ei))
	for i := range m.elements {
		el := &m.elements[i]
		dofs, _ := m.unknownsOf(i)
		var d [4]float64
		for k, dof := range dofs {
			if dof >= 0 {
				d[k] = u[dof]
			}
		}
		kl, kr := 0.0, 0.0
		if i == e {
			kl, kr = left, right
		}
		chord := (d[2] - d[0]) / el.length
		ml, mr := el.ends(d[1]-chord, d[3]-chord, kl, kr)
		v, slope := d[0], d[1]-kl
		for p := el.first; p < el.last; p++ {
			at := ml + (mr-ml)*(m.x[p]-m.x[el.first])/el.length
			out = append(out, bend(&v, &slope, m.x[p+1]-m.x[p], at/m.ei[p], (mr-ml)/el.length/m.ei[p]))
		}
	}
	return out
}

// bend returns the deflection over h from v and slope under a curvature that
// runs straight from c with slope rise, and moves v and slope to its end.
func bend(v, slope *float64, h, c, rise float64) cubic {
	out := cubic{*v, h * *slope, -h * h * c / 2, -h * h * h * rise / 6}
	*v = out[0] + out[1] + out[2] + out[3]
	*slope -= h*c + h*h*rise/2
	return out
}

// The effects at a section, in the order in which section holds their lines.
const (
	lineMoment = momentTrack
	lineShear  = shearTrack
	lineDown   = deflectionTrack
	lineKinds  = trackKinds
)

// section holds the influence lines of one section: over the mesh's pieces, the
// one with the section cut in two there.
type section struct {
	bounds []float64 // ends of the cells
	cut    int       // the cell to the left of the section
	line   [lineKinds][]cubic
}

// set makes the lines of the section at t (0 to 1) of piece p.
func (s *section) set(ln *lines, p int, t float64) {
	m := ln.mesh
	e := ln.element[p]
	el := &m.elements[e]
	x := m.x[p] + t*(m.x[p+1]-m.x[p])
	xi := (x - m.x[el.first]) / el.length
	s.cells(m, p, x)
	tl, tr := s.local(m, el, p, xi)
	far := [lineKinds][2]float64{
		lineMoment: {1 - xi, xi}, lineShear: {-1 / el.length, 1 / el.length}, lineDown: {tl, tr},
	}
	for k := range lineKinds {
		add := func(factor float64, shape []cubic) { s.add(k, factor, shape, p, t) }
		add(far[k][0], ln.left[e])
		add(far[k][1], ln.right[e])
		if k == lineDown {
			add(1-xi, ln.down[e])
			add(xi, ln.down[e+1])
		}
	}
}

// cells copies the bounds of the pieces, with one more at x in piece p.
func (s *section) cells(m *mesh, p int, x float64) {
	s.bounds = append(append(append(s.bounds[:0], m.x[:p+1]...), x), m.x[p+1:]...)
	s.cut = p
	for k := range s.line {
		if cap(s.line[k]) < len(s.bounds)-1 {
			s.line[k] = make([]cubic, len(s.bounds)-1)
		}
		s.line[k] = s.line[k][:len(s.bounds)-1]
		clear(s.line[k])
	}
}

// local fills in what the element of the section does as a simple span under a
// unit force at a: by reciprocity for the deflection its shape under a unit
// force at the section. It returns the end turns of that shape.
func (s *section) local(m *mesh, el *element, p int, xi float64) (tl, tr float64) {
	l := el.length
	cell := func(c int) (piece int, a, h float64) {
		piece = c
		if c > p {
			piece--
		}
		return piece, (s.bounds[c] - m.x[el.first]) / l, (s.bounds[c+1] - s.bounds[c]) / l
	}
	for c := el.first; c <= el.last; c++ {
		_, a, h := cell(c)
		if c <= p {
			s.line[lineMoment][c] = cubic{l * a * (1 - xi), l * h * (1 - xi)}
			s.line[lineShear][c] = cubic{-a, -h}
		} else {
			s.line[lineMoment][c] = cubic{l * xi * (1 - a), -l * xi * h}
			s.line[lineShear][c] = cubic{1 - a, -h}
		}
		piece, a, h := cell(c)
		c0, c1 := s.line[lineMoment][c][0]/m.ei[piece], s.line[lineMoment][c][1]/m.ei[piece]
		whole, first := c0+c1/2, c0/2+c1/3
		tl += l * h * ((1-a)*whole - h*first)
		tr += l * h * (a*whole + h*first)
	}
	v, slope := 0.0, tl
	for c := el.first; c <= el.last; c++ {
		piece, _, h := cell(c)
		c0, c1 := s.line[lineMoment][c][0]/m.ei[piece], s.line[lineMoment][c][1]/m.ei[piece]
		h *= l
		s.line[lineDown][c] = cubic{v, h * slope, -h * h * c0 / 2, -h * h * c1 / 6}
		v += h*slope - h*h*(c0/2+c1/6)
		slope -= h * (c0 + c1/2)
	}
	return tl, tr
}

// add adds factor times a shape over the pieces, piece p cut at t.
func (s *section) add(kind int, factor float64, shape []cubic, p int, t float64) {
	if factor == 0 || shape == nil {
		return
	}
	for i := range shape {
		switch {
		case i < p:
			s.line[kind][i].add(factor, &shape[i])
		case i > p:
			s.line[kind][i+1].add(factor, &shape[i])
		default:
			before, after := shape[i].part(0, t), shape[i].part(t, 1-t)
			s.line[kind][i].add(factor, &before)
			s.line[kind][i+1].add(factor, &after)
		}
	}
}

// add adds f times q.
func (c *cubic) add(f float64, q *cubic) {
	for k := range c {
		c[k] += f * q[k]
	}
}

// part returns c(from + width u) as a polynomial of u.
func (c *cubic) part(from, width float64) cubic {
	w2 := width * width
	return cubic{
		((c[3]*from+c[2])*from+c[1])*from + c[0],
		width * ((3*c[3]*from+2*c[2])*from + c[1]),
		w2 * (3*c[3]*from + c[2]),
		w2 * width * c[3],
	}
}
