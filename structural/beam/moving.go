package beam

import (
	"math"
	"slices"
)

const (
	movingTolerance = 1e-6      // of the largest value: what the bounds of a train may be off between samples
	firstCells      = 8         // per element, before any is halved
	leastCell       = 1.0 / 512 // of the element: where the bound has a kink, it is enclosed in so small a cell
)

// moving finds the bounds of a train's effects along the member.
type moving struct {
	lines   *lines
	cross   *crossing
	section section
	size    [lineKinds]float64
	leaves  []leaf
}

// leaf is a stretch over which the bounds are polynomials of degree 4 at the most.
type leaf struct {
	from, to float64
	up, down [lineKinds]poly
}

// sample holds the bounds of the effects at one section.
type sample [lineKinds]Bounds

// samples are those at 0, 1/4, 1/2, 3/4 and 1 of a stretch.
type samples [5]sample

func newMoving(ln *lines, t Train) *moving {
	return &moving{lines: ln, cross: newCrossing(t, ln.mesh.length)}
}

// at returns the bounds at x (lengths of the member) in piece p.
func (mv *moving) at(p int, x float64, side Side) sample {
	m := mv.lines.mesh
	t := min(max((x-m.x[p])/(m.x[p+1]-m.x[p]), 0), 1)
	mv.section.set(mv.lines, p, t)
	mv.cross.run(mv.section.bounds, mv.section.line[:], mv.section.cut, side)
	var out sample
	for k := range out {
		out[k] = Bounds{mv.cross.best[k].Max.Value, mv.cross.best[k].Min.Value}
	}
	return out
}

// jumps returns the places where a bound can jump: a wheel stands at a free end,
// from which it falls or onto which it comes, and another one at the section.
func (mv *moving) jumps() []float64 {
	var out []float64
	nodes := mv.lines.mesh.nodes
	for i, end := range [2]node{nodes[0], nodes[len(nodes)-1]} {
		if end.deflection < 0 {
			continue
		}
		offs := mv.cross.offsets[0]
		for j, a := range offs {
			for _, b := range offs[:j] {
				out = append(out, math.Abs(float64(i)-math.Abs(a-b)))
			}
		}
	}
	return slices.DeleteFunc(out, func(x float64) bool { return !(x > 0 && x < 1) })
}

// grow fills leaves from the stretches between the given places, which hold
// every station of the lines' mesh.
func (mv *moving) grow(x []float64) {
	type stretch struct {
		piece    int
		from, to float64
		s        samples
	}
	var cells []stretch
	m, p := mv.lines.mesh, 0
	for i := range len(x) - 1 {
		for p+2 < len(m.x) && 0.5*(x[i]+x[i+1]) > m.x[p+1] {
			p++
		}
		n := int(math.Ceil(firstCells * (x[i+1] - x[i]) / m.elements[mv.lines.element[p]].length))
		for k := range n {
			c := stretch{piece: p, from: x[i] + (x[i+1]-x[i])*float64(k)/float64(n), to: x[i] + (x[i+1]-x[i])*float64(k+1)/float64(n)}
			if k == n-1 {
				c.to = x[i+1]
			}
			for j := range c.s {
				if j == 0 && k > 0 { // inside a stretch the bounds do not jump
					c.s[0] = cells[len(cells)-1].s[4]
					continue
				}
				c.s[j] = mv.at(p, c.from+(c.to-c.from)*float64(j)/4, sideOf(j))
				for q, b := range c.s[j] {
					mv.size[q] = max(mv.size[q], b.Max, -b.Min)
				}
			}
			cells = append(cells, c)
		}
	}
	for i := range cells {
		mv.split(cells[i].piece, cells[i].from, cells[i].to, &cells[i].s)
	}
}

// sideOf returns the side from which the end of a stretch is looked at.
func sideOf(j int) Side {
	if j == 0 {
		return Right
	}
	return Left
}

// split keeps the stretch if the polynomials through its samples foretell the
// samples between them, and halves it if not.
func (mv *moving) split(p int, from, to float64, s *samples) {
	l := leaf{from: from, to: to}
	for q := range lineKinds {
		l.up[q] = through(s, func(v *sample) float64 { return v[q].Max })
		l.down[q] = through(s, func(v *sample) float64 { return v[q].Min })
	}
	var between [4]sample
	good := true
	for j := range between {
		t := (2*float64(j) + 1) / 8
		between[j] = mv.at(p, from+t*(to-from), Left)
		for q, b := range between[j] {
			tol := movingTolerance * mv.size[q]
			good = good && math.Abs(l.up[q].at(4, t)-b.Max) <= tol && math.Abs(l.down[q].at(4, t)-b.Min) <= tol
		}
	}
	switch {
	case good:
	case to-from <= leastCell*mv.lines.mesh.elements[mv.lines.element[p]].length:
		l.enclose(s, &between)
	default:
		mid := from + (to-from)/2
		mv.split(p, from, mid, &samples{s[0], between[0], s[1], between[1], s[2]})
		mv.split(p, mid, to, &samples{s[2], between[2], s[3], between[3], s[4]})
		return
	}
	mv.leaves = append(mv.leaves, l)
}

// enclose replaces the polynomials by straight lines outside all samples: a
// bound is the greatest of several smooth ones, so that where it has a kink the
// chord lies outside it.
func (l *leaf) enclose(s *samples, between *[4]sample) {
	for q := range lineKinds {
		up := poly{s[0][q].Max, s[4][q].Max - s[0][q].Max}
		down := poly{s[0][q].Min, s[4][q].Min - s[0][q].Min}
		over, under := 0.0, 0.0
		look := func(v *sample, t float64) {
			over = max(over, v[q].Max-up.at(1, t))
			under = min(under, v[q].Min-down.at(1, t))
		}
		for j := range s {
			look(&s[j], float64(j)/4)
		}
		for j := range between {
			look(&between[j], (2*float64(j)+1)/8)
		}
		up[0] += over
		down[0] += under
		l.up[q], l.down[q] = up, down
	}
}

// through returns the polynomial through five equidistant values (Newton's
// forward differences).
func through(s *samples, value func(*sample) float64) poly {
	var d [5]float64
	for j := range d {
		d[j] = value(&s[j])
	}
	for order := 1; order < 5; order++ {
		for j := 4; j >= order; j-- {
			d[j] = (d[j] - d[j-1]) / float64(order)
		}
	}
	out := poly{d[4]}
	for j := 3; j >= 0; j-- { // out·(u - j) + d[j], u = 4t
		for k := 4; k > 0; k-- {
			out[k] = 4*out[k-1] - float64(j)*out[k]
		}
		out[0] = d[j] - float64(j)*out[0]
	}
	return out
}

// part returns p(from + width u) as a polynomial of u, for degree deg.
func (p *poly) part(deg int, from, width float64) poly {
	out := poly{p[deg]}
	for k := deg - 1; k >= 0; k-- {
		for j := deg; j > 0; j-- {
			out[j] = out[j]*from + out[j-1]*width
		}
		out[0] = out[0]*from + p[k]
	}
	return out
}
