package section

import (
	"fmt"
	"math"
	"slices"
	"testing"
)

// The independent check of the closed forms: outlines as polygons with arcs cut
// into quarterSteps chords a quarter circle, integrated by Green's theorem. The
// chords lose a share of about (π/2/quarterSteps)²/6 of an arc's area: 4e-7.
const quarterSteps = 1000

type point struct{ y, z float64 }

// arc appends a quarter arc of radius r about (cy, cz) from angle from·90° on,
// counter-clockwise if turn is 1, clockwise if −1.
func arc(loop []point, cy, cz, r float64, from, turn int) []point {
	for i := range quarterSteps + 1 {
		a := (float64(from) + float64(turn)*float64(i)/quarterSteps) * math.Pi / 2
		loop = append(loop, point{cy + r*math.Cos(a), cz + r*math.Sin(a)})
	}
	return loop
}

func circle(d float64) []point {
	var loop []point
	for q := range 4 {
		loop = arc(loop, 0, 0, d/2, q, 1)
	}
	return loop
}

func rounded(h, b, r float64) []point {
	y, z := b/2-r, h/2-r
	loop := arc(nil, y, z, r, 0, 1)
	loop = arc(loop, -y, z, r, 1, 1)
	loop = arc(loop, -y, -z, r, 2, 1)
	return arc(loop, y, -z, r, 3, 1)
}

// iOutline runs counter-clockwise from the lower left flange tip.
func iOutline(h, b, tw, tf, r float64) []point {
	y, z := b/2, h/2
	cy, cz := tw/2+r, h/2-tf-r
	loop := []point{{-y, -z}, {y, -z}, {y, -z + tf}}
	loop = arc(loop, cy, -cz, r, 3, -1)
	loop = arc(loop, cy, cz, r, 2, -1)
	loop = append(loop, point{y, z - tf}, point{y, z}, point{-y, z}, point{-y, z - tf})
	loop = arc(loop, -cy, cz, r, 1, -1)
	loop = arc(loop, -cy, -cz, r, 0, -1)
	return append(loop, point{-y, -z + tf})
}

// outlines returns the outer loop and, for tubes, the bore.
func outlines(t *testing.T, s Section, inner float64) (outer, bore []point) {
	t.Helper()
	switch s.Shape {
	case RoundTube:
		return circle(s.H), circle(s.H - 2*s.Tw)
	case SolidRound:
		return circle(s.H), nil
	case Flat:
		return rounded(s.H, s.B, 0), nil
	case ISection:
		return iOutline(s.H, s.B, s.Tw, s.Tf, s.R), nil
	case RectangularTube:
		return rounded(s.H, s.B, s.R), rounded(s.H-2*s.Tw, s.B-2*s.Tw, inner)
	case WeldedBox:
		return rounded(s.H, s.B, 0), rounded(s.H-2*s.Tf, s.B-2*s.Tw, 0)
	}
	t.Fatalf("%s: no outline for %v", s.Designation, s.Shape)
	return nil, nil
}

// moments are integrals over an area: dA, z²dA, y²dA, |z|dA, |y|dA.
type moments struct{ a, zz, yy, absZ, absY float64 }

func integrate(loop []point) moments {
	var m moments
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		c := p.y*q.z - q.y*p.z
		m.a += c / 2
		m.zz += c * (p.z*p.z + p.z*q.z + q.z*q.z) / 12
		m.yy += c * (p.y*p.y + p.y*q.y + q.y*q.y) / 12
	}
	m.absZ = 2 * firstMomentAbove(loop)
	turned := make([]point, len(loop))
	for i, p := range loop {
		turned[i] = point{-p.z, p.y}
	}
	m.absY = 2 * firstMomentAbove(turned)
	return m
}

// firstMomentAbove clips the loop at z = 0 and returns the first moment of the
// upper part.
func firstMomentAbove(loop []point) float64 {
	var upper []point
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		if p.z >= 0 {
			upper = append(upper, p)
		}
		if (p.z < 0) != (q.z < 0) {
			upper = append(upper, point{p.y + (q.y-p.y)*p.z/(p.z-q.z), 0})
		}
	}
	var sum float64
	for i, p := range upper {
		q := upper[(i+1)%len(upper)]
		sum += (p.y*q.z - q.y*p.z) * (p.z + q.z) / 6
	}
	return sum
}

func length(loop []point) float64 {
	var sum float64
	for i, p := range loop {
		q := loop[(i+1)%len(loop)]
		sum += math.Hypot(q.y-p.y, q.z-p.z)
	}
	return sum
}

// checkPolygon compares area, second moments, plastic moduli and painted outline
// with the polygon of the section's own dimensions.
func checkPolygon(t *testing.T, s Section, inner float64) {
	t.Helper()
	if s.Shape == Channel || s.Shape == Angle || s.Shape == Tee || s.Shape == UnequalI {
		checkAsymmetric(t, s)
		return
	}
	outer, bore := outlines(t, s, inner)
	m, hole := integrate(outer), moments{}
	if bore != nil {
		hole = integrate(bore)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"A", s.A, m.a - hole.a},
		{"Iy", s.Iy, m.zz - hole.zz},
		{"Iz", s.Iz, m.yy - hole.yy},
		{"Wply", s.Wply, m.absZ - hole.absZ},
		{"Wplz", s.Wplz, m.absY - hole.absY},
		{"Wely", s.Wely, (m.zz - hole.zz) / (s.H / 2)},
		{"Welz", s.Welz, (m.yy - hole.yy) / (s.B / 2)},
		{"Ry", s.Ry, math.Sqrt((m.zz - hole.zz) / (m.a - hole.a))},
		{"Rz", s.Rz, math.Sqrt((m.yy - hole.yy) / (m.a - hole.a))},
		{"Perimeter", s.Perimeter, length(outer)},
	} {
		if !(math.Abs(c.got/c.want-1) <= 1e-6) {
			t.Errorf("%s: %s = %.9g, polygon gives %.9g", s.Designation, c.name, c.got, c.want)
		}
	}
}

// innerRadius is the bore's corner radius, written here again from the annexes:
// EN 10219-2 B.3 ri = 1.0t, 1.5t, 2.0t by wall; EN 10210-2 A.3 1.0t; HSS 1.0t.
func innerRadius(s Section) float64 {
	if s.Shape != RectangularTube {
		return 0
	}
	t := s.Tw * 1000
	switch {
	case s.Family == "HSS" || s.Making == HotRolled || t < 6.001:
		return s.Tw
	case t < 10.001:
		return 1.5 * s.Tw
	}
	return 2 * s.Tw
}

func TestEveryRowAgainstPolygon(t *testing.T) {
	n := 0
	for _, f := range Families() {
		if f.Sizes == 0 {
			continue
		}
		list, err := Series(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range list {
			checkPolygon(t, s, innerRadius(s))
			n++
		}
	}
	if n < 1700 {
		t.Errorf("checked %d rows; want at least 1700", n)
	}
}

func TestByDimensionsAgainstPolygon(t *testing.T) {
	for _, designation := range []string{
		"CHS 508x25.4", "CHS 60x25", "PIPE 508x25.4", "RHS 333x111x7", "SHS 101x6", "SHS 101x6.1", "SHS 260x10.1",
		"RHS 200x100x8 EN 10210", "SHS 100x12.5 EN 10210-2",
		"WELDED-I 500x200x10x16", "WELDED-I 2080x500x16x40", "HSS 8x8x0.4", "HSS 7.5x3x0.2", "HSS 9x0.4",
		"WELDED-BOX 600x400x12x20", "WELDED-BOX 300x300x10x10", "WELDED-I 900x300x10x20x400x25", "WELDED-I 1200x500x14x30x250x20",
		"TEE 150x200x10x15", "TEE 140x140x12x15x12", "1/2 HEA 300", "WT9x25", "CHANNEL 200x80x6x11", "CHANNEL 200x80x6x11x13",
		"L 110x90x9", "L 90x110x9x12", "L 200x25", "WELDED-I 100x300x30x20", "ROUND 50", "FLAT 100x10", "FLAT 25x25",
	} {
		s, err := Find(designation)
		if err != nil {
			t.Errorf("Find(%q): %v", designation, err)
			continue
		}
		checkPolygon(t, s, innerRadius(s))
		if got, want := s.Mass, 7850*s.A; got != want && s.Family != "HEA" && s.Family != "W" {
			t.Errorf("%s: mass %.9g, want 7850 A = %.9g", designation, got, want)
		}
	}
}

// The outer radius is checked through the inputs of the polygon, so its rule is
// written here a second time: EN 10219-2 annex B, EN 10210-2 annex A.
func TestCornerRadii(t *testing.T) {
	for _, c := range []struct {
		designation string
		want        float64 // mm
	}{
		{"SHS 100x5", 10},
		{"SHS 100x6", 12},
		{"SHS 100x6.3", 15.75},
		{"SHS 100x10", 25},
		{"SHS 200x12.5", 37.5},
		{"RHS 200x100x6", 12},
		{"RHS 200x100x8", 20},
		{"SHS 100x5 EN 10210", 7.5},
		{"RHS 200x100x12.5 EN 10210-2", 18.75},
	} {
		s, err := Find(c.designation)
		if err != nil {
			t.Errorf("Find(%q): %v", c.designation, err)
			continue
		}
		if !(math.Abs(s.R*1000-c.want) < 1e-9) {
			t.Errorf("%s: outer radius %.9g mm, want %g", c.designation, s.R*1000, c.want)
		}
	}
}

// A square, a rectangle's I and the polygon's own first moment, by hand: the
// oracle must be right before it judges.
func TestPolygonOracle(t *testing.T) {
	m := integrate(rounded(4, 2, 0))
	got := fmt.Sprintf("%.6f %.6f %.6f %.6f %.6f", m.a, m.zz, m.yy, m.absZ, m.absY)
	if want := "8.000000 10.666667 2.666667 8.000000 4.000000"; got != want {
		t.Errorf("4 x 2 rectangle: got %s, want %s", got, want)
	}
	ring := circle(2)
	slices.Reverse(ring)
	if a := integrate(ring).a; !(math.Abs(a+math.Pi) < 2e-6) {
		t.Errorf("clockwise unit circle: area %.9g, want −π", a)
	}
}
