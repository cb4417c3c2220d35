package beam

// loading is one case on the mesh, in lengths of the member: q per length,
// forces and moments in N, curvature in 1 / unitEI.
type loading struct {
	q, curve      [][2]float64 // per piece: value at its start, increase to its end
	force, couple []float64    // per station
	settle        bool         // the settlements act
	shear, moment []float64    // per piece, at its start
}

// reset makes room for so many pieces.
func (ld *loading) reset(pieces int) {
	ld.q, ld.curve = sized(ld.q, pieces), sized(ld.curve, pieces)
	ld.force, ld.couple = sized(ld.force, pieces+1), sized(ld.couple, pieces+1)
	ld.shear, ld.moment = sized(ld.shear, pieces), sized(ld.moment, pieces)
}

// set replaces the loads by those of c.
func (ld *loading) set(m *mesh, c Case) {
	clear(ld.q)
	clear(ld.curve)
	clear(ld.force)
	clear(ld.couple)
	for i := range c {
		l := &c[i]
		from := m.station(l.From)
		switch l.Kind {
		case Point:
			ld.force[from] += l.Start
		case Moment:
			ld.couple[from] += l.Start / m.length
		case Curvature:
			spread(ld.curve, m, l, m.unitEI/m.length)
		default:
			spread(ld.q, m, l, m.length)
		}
	}
}

// spread adds a distributed load times unit to the pieces that it covers.
func spread(to [][2]float64, m *mesh, l *Load, unit float64) {
	first, last := m.station(l.From), m.station(l.To)
	start, end := l.ends()
	start, end = start*unit, end*unit
	rise := (end - start) / (m.x[last] - m.x[first])
	for p := first; p < last; p++ {
		to[p][0] += start + rise*(m.x[p]-m.x[first])
		to[p][1] += rise * (m.x[p+1] - m.x[p])
	}
}

// simple fills shear and moment of element e taken as a simple span and
// returns the shear inside its two ends.
func (ld *loading) simple(m *mesh, e *element) (left, right float64) {
	V, M := 0.0, 0.0
	for p := e.first; p < e.last; p++ {
		if p > e.first {
			V -= ld.force[p]
			M += ld.couple[p]
		}
		ld.shear[p], ld.moment[p] = V, M
		h, q := m.x[p+1]-m.x[p], ld.q[p]
		M += h*V - h*h*(q[0]/2+q[1]/6)
		V -= h * (q[0] + q[1]/2)
	}
	ld.tilt(m, e, 0, -M)
	return -M / e.length, V - M/e.length
}

// tilt adds to the element a moment that runs straight from left to left + rise.
func (ld *loading) tilt(m *mesh, e *element, left, rise float64) {
	for p := e.first; p < e.last; p++ {
		ld.shear[p] += rise / e.length
		ld.moment[p] += left + rise*(m.x[p]-m.x[e.first])/e.length
	}
}

// curvature returns M/EI plus the imposed curvature over piece p, and M itself.
func (ld *loading) curvature(m *mesh, p int) (curve, moment poly) {
	h, q := m.x[p+1]-m.x[p], ld.q[p]
	moment = poly{ld.moment[p], h * ld.shear[p], -h * h * q[0] / 2, -h * h * q[1] / 6}
	for k := range 4 {
		curve[k] = moment[k] / m.ei[p]
	}
	curve[0] += ld.curve[p][0]
	curve[1] += ld.curve[p][1]
	return curve, moment
}

// turns returns ∫c(1-ξ) and ∫cξ over element e with its present moments: the
// end turns of the simple span, each in the sense that sagging gives.
func (ld *loading) turns(m *mesh, e *element) (left, right float64) {
	for p := e.first; p < e.last; p++ {
		c, _ := ld.curvature(m, p)
		h := m.x[p+1] - m.x[p]
		a, d := (m.x[p]-m.x[e.first])/e.length, h/e.length
		for k := range 4 {
			whole, first := h*c[k]/float64(k+1), h*c[k]/float64(k+2)
			left += (1-a)*whole - d*first
			right += a*whole + d*first
		}
	}
	return left, right
}
