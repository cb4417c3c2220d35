package beam

import "math"

// Passage is one train on one member: what it does at any section, and where it
// then stands. One goroutine at a time.
type Passage struct {
	moving   *moving
	response *Response
}

// PassageExtremes are the extremes under a train alone, the empty member
// included: no maximum is below 0, no minimum above.
type PassageExtremes struct {
	Moment     PlacedBounds // N.m, sagging +
	Shear      PlacedBounds // N
	Deflection PlacedBounds // m, down +
	Reactions  []PlacedReaction
}

// PlacedReaction bounds the reaction of one support under a train.
type PlacedReaction struct {
	X    float64      // m
	F, M PlacedBounds // N, up +; N.m, clockwise +
}

// MoveTrain moves a train across the member, in both directions and from wholly
// off one end to wholly off the other. The member's weight and settlements are no
// part of it. Every error is a *Fault.
func MoveTrain(b Beam, t Train) (*Passage, error) {
	r, all, fault := analyseTrains(b, nil, []Train{t})
	if fault != nil {
		return nil, fault
	}
	return &Passage{all[0], r}, nil
}

// At returns the bounds of moment, shear and deflection at x (m), seen from the
// given side, with the positions of the train; exact. All are NaN off the member.
func (p *Passage) At(x float64, side Side) (moment, shear, deflection PlacedBounds) {
	m := p.moving.lines.mesh
	piece, t, ok := locate(m.x, x/m.length, side)
	if !ok {
		n := Placed{Value: math.NaN(), X: x, Lead: math.NaN()}
		b := PlacedBounds{n, n}
		return b, b, b
	}
	p.moving.at(piece, m.x[piece]+t*(m.x[piece+1]-m.x[piece]), side)
	unit := p.moving.units()
	best := p.moving.cross.best
	return p.moving.placed(best[lineMoment], x, unit[lineMoment]), p.moving.placed(best[lineShear], x, unit[lineShear]),
		p.moving.placed(best[lineDown], x, unit[lineDown])
}

// Extremes returns the extremes over the member and of every support. Of equal
// values the smallest X is taken.
func (p *Passage) Extremes() PassageExtremes {
	e := p.response.Envelope([]Term{{Case: p.response.TrainCase(0), Factor: 1}})
	out := PassageExtremes{
		Moment:     PlacedBounds{p.polish(lineMoment, e.MomentMax.X, 1), p.polish(lineMoment, e.MomentMin.X, -1)},
		Shear:      PlacedBounds{p.polish(lineShear, e.ShearMax.X, 1), p.polish(lineShear, e.ShearMin.X, -1)},
		Deflection: PlacedBounds{p.polish(lineDown, e.DeflectionMax.X, 1), p.polish(lineDown, e.DeflectionMin.X, -1)},
	}
	for i, r := range p.moving.reactions() {
		out.Reactions = append(out.Reactions, PlacedReaction{X: p.response.supports[i], F: r[0], M: r[1]})
	}
	return out
}

// polish returns the exact extreme (sign 1: maximum) near x: the polynomials of
// the response tell where to look, golden section finds the place.
func (p *Passage) polish(kind int, x, sign float64) Placed {
	length := p.moving.lines.mesh.length
	best := p.extreme(kind, x, sign)
	reach := 1e-4 * length
	golden(func(x float64) float64 {
		v := p.extreme(kind, x, sign)
		if v.Value > best.Value+noise*math.Abs(best.Value) {
			best = v
		}
		return -v.Value
	}, max(0, x-reach), min(length, x+reach), 1e-9*length)
	best.Value *= sign
	return best
}

// extreme returns the extreme at x from either side, its value times sign.
func (p *Passage) extreme(kind int, x, sign float64) Placed {
	var out Placed
	for _, side := range [2]Side{Left, Right} {
		var b [lineKinds]PlacedBounds
		b[lineMoment], b[lineShear], b[lineDown] = p.At(x, side)
		v := b[kind].Max
		if sign < 0 {
			v = b[kind].Min
		}
		v.Value *= sign
		if side == Left || v.Value > out.Value {
			out = v
		}
	}
	return out
}

// golden returns where f is least between a and b, to within tol (golden-section
// search; f has one valley there).
func golden(f func(float64) float64, a, b, tol float64) float64 {
	const part = 0.6180339887498949 // (√5 - 1) / 2
	c, d := b-part*(b-a), a+part*(b-a)
	fc, fd := f(c), f(d)
	for b-a > tol {
		if fc <= fd {
			b, d, fd = d, c, fc
			c = b - part*(b-a)
			fc = f(c)
		} else {
			a, c, fc = c, d, fd
			d = a + part*(b-a)
			fd = f(d)
		}
	}
	return 0.5 * (a + b)
}
