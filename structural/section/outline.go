package section

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// An outline is the closed boundary of an area, counter-clockwise, of straight
// and circular strokes. Areas and moments follow by Green's theorem; each stroke
// is integrated by Gauss's rule, exact for lines and to rounding for arcs.
type outline []stroke

// stroke runs from a to b; where r is above zero, on a circle about c.
type stroke struct {
	a, b, c     place
	r           float64 // m
	from, sweep float64 // rad, counter-clockwise positive
}

type place struct{ y, z float64 }

// corner is a vertex of an outline with its rounding radius in m; 0 is sharp.
type corner struct{ y, z, r float64 }

var gaussAt, gaussWeight = func() (at, weight [12]float64) {
	quad.Legendre{}.FixedLocations(at[:], weight[:], 0, 1)
	return at, weight
}()

// outlineOf rounds the corners and joins them. Roundings that overlap on an edge
// are an error.
func outlineOf(corners []corner) (outline, error) {
	n := len(corners)
	var o outline
	used := make([]float64, n) // of the edge that starts at i
	var first, last place
	for i, p := range corners {
		before, after := corners[(i+n-1)%n], corners[(i+1)%n]
		dy, dz := direction(before, p)
		ey, ez := direction(p, after)
		turn := math.Atan2(dy*ez-dz*ey, dy*ey+dz*ez)
		cut := p.r * math.Tan(math.Abs(turn)/2)
		used[i] += cut
		used[(i+n-1)%n] += cut
		start, end := place{p.y - dy*cut, p.z - dz*cut}, place{p.y + ey*cut, p.z + ez*cut}
		if i == 0 {
			first = start
		} else {
			o = append(o, stroke{a: last, b: start})
		}
		last = end
		if p.r > 0 {
			side := math.Copysign(p.r, turn)
			c := place{start.y - dz*side, start.z + dy*side}
			o = append(o, stroke{a: start, b: end, c: c, r: p.r, from: math.Atan2(start.z-c.z, start.y-c.y), sweep: turn})
		}
	}
	for i, cut := range used {
		q := corners[(i+1)%n]
		if length := math.Hypot(q.y-corners[i].y, q.z-corners[i].z); !(cut <= length*(1+1e-12)) {
			return nil, fmt.Errorf("radii need %s mm of a face of %s mm; want smaller radii or thinner parts", mm(cut), mm(length))
		}
	}
	return append(o, stroke{a: last, b: first}), nil
}

func direction(p, q corner) (y, z float64) {
	l := math.Hypot(q.y-p.y, q.z-p.z)
	return (q.y - p.y) / l, (q.z - p.z) / l
}

// part returns the piece of a stroke between two shares of its length.
func (s stroke) part(t, u float64) stroke {
	if s.r == 0 {
		at := func(t float64) place { return place{s.a.y + t*(s.b.y-s.a.y), s.a.z + t*(s.b.z-s.a.z)} }
		return stroke{a: at(t), b: at(u)}
	}
	s.from, s.sweep = s.from+t*s.sweep, (u-t)*s.sweep
	s.a = place{s.c.y + s.r*math.Cos(s.from), s.c.z + s.r*math.Sin(s.from)}
	s.b = place{s.c.y + s.r*math.Cos(s.from+s.sweep), s.c.z + s.r*math.Sin(s.from+s.sweep)}
	return s
}

// each calls f with y, z and dz of the rule's points on the stroke.
func (s stroke) each(f func(y, z, dz float64)) {
	for i, t := range gaussAt {
		if s.r == 0 {
			f(s.a.y+t*(s.b.y-s.a.y), s.a.z+t*(s.b.z-s.a.z), gaussWeight[i]*(s.b.z-s.a.z))
			continue
		}
		sin, cos := math.Sincos(s.from + t*s.sweep)
		f(s.c.y+s.r*cos, s.c.z+s.r*sin, gaussWeight[i]*s.r*cos*s.sweep)
	}
}

// integrals over an area: dA, y dA, z dA, y² dA, z² dA, yz dA, z(y²+z²) dA.
type integrals struct{ a, y, z, yy, zz, yz, wagner float64 }

func (o outline) integrals() integrals {
	var m integrals
	for _, s := range o {
		s.each(func(y, z, dz float64) {
			m.a += y * dz
			m.y += y * y / 2 * dz
			m.z += y * z * dz
			m.yy += y * y * y / 3 * dz
			m.zz += y * z * z * dz
			m.yz += y * y * z / 2 * dz
			m.wagner += y * z * (y*y/3 + z*z) * dz
		})
	}
	return m
}

// moved returns the outline shifted by (dy, dz).
func (o outline) moved(dy, dz float64) outline {
	out := make(outline, len(o))
	for i, s := range o {
		for _, p := range []*place{&s.a, &s.b, &s.c} {
			p.y += dy
			p.z += dz
		}
		out[i] = s
	}
	return out
}

// turned returns the outline turned clockwise by a right angle: z becomes −y.
func (o outline) turned() outline { return o.rotated(0, 1, math.Pi/2) }

// rotated returns the outline turned clockwise by an angle of the given cosine
// and sine.
func (o outline) rotated(cos, sin, angle float64) outline {
	out := make(outline, len(o))
	for i, s := range o {
		for _, p := range []*place{&s.a, &s.b, &s.c} {
			p.y, p.z = p.y*cos+p.z*sin, p.z*cos-p.y*sin
		}
		s.from -= angle
		out[i] = s
	}
	return out
}

func (o outline) length() float64 {
	var sum float64
	for _, s := range o {
		if s.r == 0 {
			sum += math.Hypot(s.b.y-s.a.y, s.b.z-s.a.z)
		} else {
			sum += s.r * math.Abs(s.sweep)
		}
	}
	return sum
}

// extent returns the least and greatest z of the vertices; arcs stay between
// them, because every rounding lies inside its corner.
func (o outline) extent() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, s := range o {
		low, high = min(low, s.a.z, s.b.z), max(high, s.a.z, s.b.z)
	}
	return low, high
}

// below returns the area under the level z = cut and its first moment about y.
// The closing line along the level has dz = 0 and adds nothing.
func (o outline) below(cut float64) (area, moment float64) {
	for _, s := range o {
		t := 0.0
		for _, u := range append(s.crossings(cut), 1) {
			piece := s.part(t, u)
			if middle := s.part(t, (t+u)/2).b; middle.z < cut {
				piece.each(func(y, z, dz float64) {
					area += y * dz
					moment += y * z * dz
				})
			}
			t = u
		}
	}
	return area, moment
}

// crossings returns the shares of the stroke's length, ascending, at which it
// crosses z = cut.
func (s stroke) crossings(cut float64) []float64 {
	if s.r == 0 {
		if t := (cut - s.a.z) / (s.b.z - s.a.z); t > 0 && t < 1 {
			return []float64{t}
		}
		return nil
	}
	sine := (cut - s.c.z) / s.r
	if !(sine > -1 && sine < 1) {
		return nil
	}
	var list []float64
	for _, angle := range [2]float64{math.Asin(sine), math.Pi - math.Asin(sine)} {
		t := math.Mod(angle-s.from, 2*math.Pi) / s.sweep
		for _, t := range [3]float64{t - 2*math.Pi/math.Abs(s.sweep), t, t + 2*math.Pi/math.Abs(s.sweep)} {
			if t > 0 && t < 1 {
				list = append(list, t)
			}
		}
	}
	if len(list) == 2 && list[0] > list[1] {
		list[0], list[1] = list[1], list[0]
	}
	return list
}

// plastic returns the plastic modulus about the horizontal axis that halves the
// area a; m is ∫z dA. The modulus is stationary there, so that thirty halvings
// of the depth give it to rounding.
func (o outline) plastic(a, m float64) float64 {
	low, high := o.extent()
	for range 30 {
		middle := (low + high) / 2
		if area, _ := o.below(middle); area < a/2 {
			low = middle
		} else {
			high = middle
		}
	}
	level := (low + high) / 2
	area, moment := o.below(level)
	return (m - moment) - (a-area)*level + area*level - moment
}
