package section

import (
	"math"
	"testing"
)

// vertex is a corner of the independent outline: position and radius in m.
type vertex struct{ y, z, r float64 }

// chorded cuts every rounding into chords. The centre stands on the bisector of
// the corner at r/sin(half the inner angle): another way than the outline's own.
func chorded(list []vertex) []point {
	const steps = 400
	var loop []point
	for i, p := range list {
		if p.r == 0 {
			loop = append(loop, point{p.y, p.z})
			continue
		}
		before, after := list[(i+len(list)-1)%len(list)], list[(i+1)%len(list)]
		to := func(q vertex) float64 { return math.Atan2(q.z-p.z, q.y-p.y) }
		inner := math.Remainder(to(before)-to(after), 2*math.Pi)
		bisector := to(after) + inner/2
		far := p.r / math.Sin(math.Abs(inner)/2)
		cy, cz := p.y+far*math.Cos(bisector), p.z+far*math.Sin(bisector)
		span := math.Pi - math.Abs(inner)
		for k := range steps + 1 {
			share := (float64(k)/steps - 0.5) * span * math.Copysign(1, inner)
			a := bisector + math.Pi + share
			loop = append(loop, point{cy + p.r*math.Cos(a), cz + p.r*math.Sin(a)})
		}
	}
	return loop
}

// vertices draws the section again from its printed dimensions.
func vertices(s Section) []vertex {
	h, b, tw, tf := s.H, s.B, s.Tw, s.Tf
	switch s.Shape {
	case Channel:
		mean := b / 2 // DIN 1026-1: tf at b/2 up to 300 mm depth; A6 and above 300 mm midway from web to tip
		if s.Family == "C" || h > 0.3 {
			mean = tw + (b-tw)/2
		}
		tip, web := tf-s.Slope*(b-mean), tf+s.Slope*(mean-tw)
		return []vertex{{0, 0, 0}, {b, 0, 0}, {b, tip, s.ToeR}, {tw, web, s.R}, {tw, h - web, s.R}, {b, h - tip, s.ToeR}, {b, h, 0}, {0, h, 0}}
	case Angle:
		return []vertex{{0, 0, 0}, {b, 0, 0}, {b, tw, s.ToeR}, {tw, tw, s.R}, {tw, h, s.ToeR}, {0, h, 0}}
	case Tee:
		l, r := (b-tw)/2, (b+tw)/2
		return []vertex{{l, 0, 0}, {r, 0, 0}, {r, h - tf, s.R}, {b, h - tf, 0}, {b, h, 0}, {0, h, 0}, {0, h - tf, 0}, {l, h - tf, s.R}}
	case UnequalI:
		m := max(b, s.LowerB) / 2
		u, w, d := b/2, tw/2, s.LowerB/2
		return []vertex{{m - d, 0, 0}, {m + d, 0, 0}, {m + d, s.LowerTf, 0}, {m + w, s.LowerTf, 0}, {m + w, h - tf, 0}, {m + u, h - tf, 0},
			{m + u, h, 0}, {m - u, h, 0}, {m - u, h - tf, 0}, {m - w, h - tf, 0}, {m - w, s.LowerTf, 0}, {m - d, s.LowerTf, 0}}
	}
	return nil
}

// above returns the area over a level and its first moment about that level.
func above(loop []point, level float64) (area, moment float64) {
	var upper []point
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		if p.z >= level {
			upper = append(upper, point{p.y, p.z - level})
		}
		if (p.z < level) != (q.z < level) {
			upper = append(upper, point{p.y + (q.y-p.y)*(level-p.z)/(q.z-p.z), 0})
		}
	}
	for i, p := range upper {
		q := upper[(i+1)%len(upper)]
		c := p.y*q.z - q.y*p.z
		area += c / 2
		moment += c * (p.z + q.z) / 6
	}
	return area, moment
}

// halved returns ∫|z − z₀|dA about the level z₀ that halves the area.
func halved(loop []point) float64 {
	low, high := math.Inf(1), math.Inf(-1)
	over := make([]point, len(loop)) // turned upside down
	for i, p := range loop {
		low, high = min(low, p.z), max(high, p.z)
		over[i] = point{-p.y, -p.z}
	}
	total := integrate(loop).a
	for range 26 {
		middle := (low + high) / 2
		if area, _ := above(loop, middle); area > total/2 {
			low = middle
		} else {
			high = middle
		}
	}
	level := (low + high) / 2
	_, upper := above(loop, level)
	_, lower := above(over, -level)
	return upper + lower
}

// centred returns the loop about its centroid, and the centroid.
func centred(loop []point) (about []point, y, z float64) {
	var a float64
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		c := p.y*q.z - q.y*p.z
		a += c / 2
		y += c * (p.y + q.y) / 6
		z += c * (p.z + q.z) / 6
	}
	y, z = y/a, z/a
	for _, p := range loop {
		about = append(about, point{p.y - y, p.z - z})
	}
	return about, y, z
}

// product is ∫yz dA.
func product(loop []point) float64 {
	var sum float64
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		sum += (p.y*q.z - q.y*p.z) * (p.y*q.z + 2*p.y*p.z + 2*q.y*q.z + q.y*p.z) / 24
	}
	return sum
}

func checkAsymmetric(t *testing.T, s Section) {
	t.Helper()
	loop, yc, zc := centred(chorded(vertices(s)))
	m := integrate(loop)
	turned := make([]point, len(loop))
	for i, p := range loop {
		turned[i] = point{-p.z, p.y}
	}
	width := max(s.B, s.LowerB)
	radius := math.Hypot((m.zz-m.yy)/2, product(loop))
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"A", s.A, m.a}, {"Yc", s.Yc, yc}, {"Zc", s.Zc, zc},
		{"Iy", s.Iy, m.zz}, {"Iz", s.Iz, m.yy},
		{"Iu", s.Iu, (m.zz+m.yy)/2 + radius}, {"Iv", s.Iv, (m.zz+m.yy)/2 - radius},
		{"Wely", s.Wely, m.zz / max(zc, s.H-zc)}, {"Welz", s.Welz, m.yy / max(yc, width-yc)},
		{"WelyTop", s.WelyTop, m.zz / (s.H - zc)}, {"WelyBottom", s.WelyBottom, m.zz / zc},
		{"WelzLeft", s.WelzLeft, m.yy / yc}, {"WelzRight", s.WelzRight, m.yy / (width - yc)},
		{"Wply", s.Wply, halved(loop)}, {"Wplz", s.Wplz, halved(turned)},
		{"Ry", s.Ry, math.Sqrt(m.zz / m.a)}, {"Rz", s.Rz, math.Sqrt(m.yy / m.a)},
		{"Perimeter", s.Perimeter, length(loop)},
	} {
		if !(math.Abs(c.got/c.want-1) <= 2e-6) {
			t.Errorf("%s: %s = %.9g, polygon gives %.9g", s.Designation, c.name, c.got, c.want)
		}
	}
	if off := math.Abs(s.Iyz - product(loop)); !(off <= 2e-6*m.zz) {
		t.Errorf("%s: Iyz = %.9g, polygon gives %.9g", s.Designation, s.Iyz, product(loop))
	}
}

// The oracle by hand: a 2 × 4 rectangle off its origin, and ∫yz of a right
// triangle with legs 1 about its right corner, 1/24.
func TestAsymmetricOracle(t *testing.T) {
	loop, y, z := centred([]point{{1, 1}, {3, 1}, {3, 5}, {1, 5}})
	if math.Abs(y-2) > 1e-12 || math.Abs(z-3) > 1e-12 || math.Abs(halved(loop)-8) > 1e-6 {
		t.Errorf("rectangle: centroid %g, %g, plastic modulus %.9g; want 2, 3, 8", y, z, halved(loop))
	}
	if got := product([]point{{0, 0}, {1, 0}, {0, 1}}); math.Abs(got-1.0/24) > 1e-15 {
		t.Errorf("triangle: ∫yz = %.9g, want 1/24", got)
	}
	circle := chorded([]vertex{{-1, -1, 1}, {1, -1, 1}, {1, 1, 1}, {-1, 1, 1}})
	if got := integrate(circle).a; math.Abs(got-math.Pi) > 1e-5 {
		t.Errorf("square rounded to a circle: area %.9g, want π", got)
	}
}
