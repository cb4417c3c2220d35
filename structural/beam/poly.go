package beam

import "math"

// poly is a polynomial of t in [0, 1], lowest power first, degree 5 at the most
// (the deflection under a linear load).
type poly [6]float64

// at returns the value at t (Horner).
func (p *poly) at(deg int, t float64) float64 {
	v := p[deg]
	for k := deg - 1; k >= 0; k-- {
		v = v*t + p[k]
	}
	return v
}

// add adds f times q.
func (p *poly) add(deg int, f float64, q *poly) {
	for k := 0; k <= deg; k++ {
		p[k] += f * q[k]
	}
}

// derivative returns dp/dt; its degree is one less.
func (p *poly) derivative(deg int) poly {
	var d poly
	for k := 1; k <= deg; k++ {
		d[k-1] = float64(k) * p[k]
	}
	return d
}

// size returns the sum of the magnitudes, a bound of |p| on [0, 1].
func (p *poly) size() float64 {
	s := 0.0
	for _, c := range p {
		s += math.Abs(c)
	}
	return s
}

// roots writes to out the places inside (a, b) where p changes its sign, in
// rising order, and returns their number. Between two neighbouring roots of
// the derivative p is monotonic, so that every bracket holds one root.
func (p *poly) roots(deg int, a, b float64, out *[5]float64) int {
	switch {
	case deg <= 0:
		return 0
	case deg == 1:
		if p[1] == 0 {
			return 0
		}
		return keep(-p[0]/p[1], a, b, out, 0)
	case deg == 2:
		return p.quadratic(a, b, out)
	}
	var turns [5]float64
	d := p.derivative(deg)
	n := d.roots(deg-1, a, b, &turns)
	turns[n] = b
	found, last := 0, sign(p.at(deg, a))
	lo, flo := a, p.at(deg, a)
	for _, hi := range turns[:n+1] {
		fhi := p.at(deg, hi)
		switch s := sign(fhi); {
		case flo*fhi < 0:
			found = keep(p.bracket(deg, lo, hi, flo, fhi), a, b, out, found)
			last = s
		case s != 0 && s == -last:
			found = keep(lo, a, b, out, found)
			last = s
		case s != 0:
			last = s
		}
		lo, flo = hi, fhi
	}
	return found
}

// turns writes to out where p is stationary inside (a, b), as roots does.
func (p *poly) turns(deg int, a, b float64, out *[5]float64) int {
	if deg == 2 {
		if p[2] == 0 {
			return 0
		}
		return keep(-0.5*p[1]/p[2], a, b, out, 0)
	}
	d := p.derivative(deg)
	if math.Abs(d[0]) > math.Abs(d[1])+math.Abs(d[2])+math.Abs(d[3])+math.Abs(d[4]) {
		return 0 // d keeps its sign on [0, 1]
	}
	return d.roots(deg-1, a, b, out)
}

// quadratic is roots for degree 2, in the form without cancellation.
func (p *poly) quadratic(a, b float64, out *[5]float64) int {
	A, B, C := p[2], p[1], p[0]
	if math.Abs(C) > math.Abs(B)+math.Abs(A) {
		return 0 // no root on [0, 1]
	}
	disc := B*B - 4*A*C
	if !(disc > 0) {
		return 0
	}
	q := -0.5 * (B + math.Copysign(math.Sqrt(disc), B))
	r, s := math.Inf(1), C/q
	if A != 0 {
		r = q / A
	}
	return keep(max(r, s), a, b, out, keep(min(r, s), a, b, out, 0))
}

// bracket returns the root between lo and hi, where p has unlike signs: Newton,
// kept inside the bracket by halving.
func (p *poly) bracket(deg int, lo, hi, flo, fhi float64) float64 {
	const enough = 1e-10 // Newton squares the error: the step after this one is lost in rounding
	t := lo + (hi-lo)*flo/(flo-fhi)
	for range 100 {
		f, d := p[deg], 0.0
		for k := deg - 1; k >= 0; k-- {
			d = d*t + f
			f = f*t + p[k]
		}
		if f == 0 {
			return t
		}
		if (f > 0) == (flo > 0) {
			lo = t
		} else {
			hi = t
		}
		next := t - f/d
		if !(lo < next && next < hi) {
			next = 0.5 * (lo + hi)
		}
		if math.Abs(next-t) < enough {
			return next
		}
		t = next
	}
	return t
}

// keep appends t to the n values of out when it lies inside (a, b).
func keep(t, a, b float64, out *[5]float64, n int) int {
	if t > a && t < b && n < len(out) {
		out[n] = t
		n++
	}
	return n
}

func sign(v float64) int8 {
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}
