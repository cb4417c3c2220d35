package beam

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// drawBeam draws a member of one to four spans with overhangs, steps, springs,
// fixed ends and settlements, all within two decades.
func drawBeam(t *rapid.T) Beam {
	step := func(name string) float64 { return rapid.Float64Range(1, 12).Draw(t, name) }
	var b Beam
	if rapid.Bool().Draw(t, "left overhang") {
		b.Length = step("overhang")
	}
	n := rapid.IntRange(1, 4).Draw(t, "spans")
	for i := range n + 1 {
		s := Support{X: b.Length, Kind: Pinned}
		if rapid.IntRange(0, 4).Draw(t, "fixed") == 0 {
			s.Kind = Fixed
		} else if rapid.IntRange(0, 4).Draw(t, "spring") == 0 {
			s.Kind, s.Stiffness = Spring, rapid.Float64Range(1e4, 1e7).Draw(t, "stiffness")
		}
		if rapid.IntRange(0, 4).Draw(t, "settled") == 0 {
			s.Settlement = rapid.Float64Range(-0.02, 0.02).Draw(t, "settlement")
		}
		b.Supports = append(b.Supports, s)
		if i < n {
			b.Length += step("span")
		}
	}
	if rapid.Bool().Draw(t, "right overhang") {
		b.Length += step("overhang")
	}
	mid := rapid.Float64Range(0.2, 0.8).Draw(t, "step") * b.Length
	for _, to := range []float64{mid, b.Length} {
		b.Segments = append(b.Segments, Segment{To: to, EI: rapid.Float64Range(1e6, 2e7).Draw(t, "EI")})
	}
	return b
}

func drawLoad(t *rapid.T, length float64) Load {
	x := rapid.Float64Range(0, 0.9).Draw(t, "from") * length
	l := Load{Kind: rapid.SampledFrom([]LoadKind{Uniform, Linear, Point, Moment, Curvature}).Draw(t, "kind"), From: x,
		Start: rapid.Float64Range(-1e4, 1e4).Draw(t, "start")}
	if l.Kind.distributed() {
		l.To = x + rapid.Float64Range(0.05, 1).Draw(t, "extent")*(length-x)
	}
	if l.Kind == Linear || l.Kind == Curvature {
		l.End = rapid.Float64Range(-1e4, 1e4).Draw(t, "end")
	}
	if l.Kind == Curvature {
		l.Start, l.End = l.Start*1e-7, l.End*1e-7
	}
	return l
}

func drawCase(t *rapid.T, length float64, most int) Case {
	var c Case
	for range rapid.IntRange(1, most).Draw(t, "loads") {
		c = append(c, drawLoad(t, length))
	}
	return c
}

func analyse(t *rapid.T, b Beam, cases []Case) *Response {
	r, err := Analyse(b, cases)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// alike compares two sets of V, M, slope, deflection at one place, each
// against the size of its quantity.
func alike(t *rapid.T, what string, x float64, got, want, size [4]float64) {
	for k, name := range []string{"V", "M", "slope", "deflection"} {
		if !(math.Abs(got[k]-want[k]) <= 1e-8*size[k]) {
			t.Fatalf("%s: %s at %g m = %.12g, want %.12g (size %g)", what, name, x, got[k], want[k], size[k])
		}
	}
}

func state(r *Response, c int, x float64, side Side) [4]float64 {
	V, M, slope, v := r.At(c, x, side)
	return [4]float64{V, M, slope, v}
}

// sizes returns the largest magnitudes of a case at its stations and between,
// with a floor, about what 1 N gives, for quantities that cancel.
func sizes(r *Response, c int) [4]float64 {
	out := [4]float64{0.1, 0.1, 1e-8, 1e-8}
	for i, x := range r.x {
		for _, p := range []float64{x, (x + r.x[max(i-1, 0)]) / 2} {
			for _, side := range []Side{Left, Right} {
				for k, v := range state(r, c, p, side) {
					out[k] = math.Max(out[k], math.Abs(v))
				}
			}
		}
	}
	return out
}

func TestSuperposition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		p, q := drawCase(t, b.Length, 4), drawCase(t, b.Length, 4)
		both := append(append(Case{}, p...), q...)
		r := analyse(t, b, []Case{p, q, both})
		size, other := sizes(r, 0), sizes(r, 1)
		for k := range size {
			size[k] += other[k]
		}
		for _, x := range r.Stations() {
			for _, side := range []Side{Left, Right} {
				sum, one := state(r, 0, x, side), state(r, 1, x, side)
				for k := range sum {
					sum[k] += one[k]
				}
				alike(t, "superposition", x, state(r, 2, x, side), sum, size)
			}
		}
	})
}

func TestMirror(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		c := drawCase(t, b.Length, 5)
		r, m := analyse(t, b, []Case{c}), analyse(t, mirrored(b), []Case{mirroredCase(c, b.Length)})
		size := sizes(r, 0)
		for i := range 101 {
			x := b.Length * (float64(i) + 0.37) / 102
			got := state(m, 0, b.Length-x, Right)
			got[0], got[2] = -got[0], -got[2]
			alike(t, "mirror", x, got, state(r, 0, x, Left), size)
		}
	})
}

func mirrored(b Beam) Beam {
	out := Beam{Length: b.Length}
	for i := len(b.Segments) - 1; i >= 0; i-- {
		to := b.Length
		if i > 0 {
			to -= b.Segments[i-1].To
		}
		out.Segments = append(out.Segments, Segment{To: to, EI: b.Segments[i].EI})
	}
	for _, s := range b.Supports {
		s.X = b.Length - s.X
		out.Supports = append(out.Supports, s)
	}
	return out
}

func mirroredCase(c Case, length float64) Case {
	var out Case
	for _, l := range c {
		switch {
		case l.Kind == Uniform:
			l.From, l.To = length-l.To, length-l.From
		case l.Kind.distributed():
			l.From, l.To, l.Start, l.End = length-l.To, length-l.From, l.End, l.Start
		case l.Kind == Moment:
			l.From, l.Start = length-l.From, -l.Start
		default:
			l.From = length - l.From
		}
		out = append(out, l)
	}
	return out
}

// Maxwell's reciprocal theorem: deflection at a from a force at b equals that
// at b from the same force at a; deflection at a from a couple at b equals the
// rotation at b from a force at a.
func TestReciprocity(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		x := rapid.Float64Range(0, 1).Draw(t, "a") * b.Length
		y := rapid.Float64Range(0, 1).Draw(t, "b") * b.Length
		r := analyse(t, b, []Case{{{Kind: Point, From: x, Start: 1}}, {{Kind: Point, From: y, Start: 1}}, {{Kind: Moment, From: y, Start: 1}}})
		at := state(r, 0, y, Left)
		size := math.Max(sizes(r, 0)[3], sizes(r, 1)[3])
		if got, want := state(r, 1, x, Left)[3], at[3]; !(math.Abs(got-want) <= 1e-8*size) {
			t.Fatalf("deflection at %g from %g = %.12g, the other way %.12g", x, y, got, want)
		}
		size = math.Max(sizes(r, 0)[2], sizes(r, 2)[3])
		if got, want := state(r, 2, x, Left)[3], at[2]; !(math.Abs(got-want) <= 1e-8*size) {
			t.Fatalf("deflection at %g from a couple at %g = %.12g, rotation the other way %.12g", x, y, got, want)
		}
	})
}

// Whatever satisfies equilibrium, M = -EI v″, continuity and the supports is
// the solution; none of these uses the solver.
func TestEquilibriumAndSupports(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		c := drawCase(t, b.Length, 5)
		r := analyse(t, b, []Case{c})
		for k := range r.Cases() {
			if k == r.SettlementCase() {
				equilibrium(t, r, k, nil)
			} else {
				equilibrium(t, r, k, c)
			}
			continuity(t, r, k)
			supported(t, b, r, k)
		}
	})
}

func equilibrium(t *rapid.T, r *Response, k int, c Case) {
	var F, M, sizeF, sizeM float64
	add := func(force, x, couple float64) {
		F, M = F+force, M+force*x+couple
		sizeF, sizeM = sizeF+math.Abs(force), sizeM+math.Abs(force*x)+math.Abs(couple)
	}
	for _, l := range c {
		start, end := l.ends()
		d := l.To - l.From
		switch l.Kind {
		case Point:
			add(l.Start, l.From, 0)
		case Moment:
			add(0, 0, l.Start)
		case Uniform, Linear:
			add(start*d/2, l.From+d/3, 0)
			add(end*d/2, l.From+2*d/3, 0)
		}
	}
	for _, R := range r.Reactions(k) {
		add(-R.F, R.X, R.M)
	}
	if !(math.Abs(F) <= 1e-9*sizeF+1e-8 && math.Abs(M) <= 1e-9*(sizeM+sizeF*r.x[len(r.x)-1])+1e-8) {
		t.Fatalf("case %d: sum of forces %g of %g, of moments %g of %g", k, F, sizeF, M, sizeM)
	}
}

func continuity(t *rapid.T, r *Response, k int) {
	size := sizes(r, k)
	for _, x := range r.x[1 : len(r.x)-1] {
		a, b := state(r, k, x, Left), state(r, k, x, Right)
		a[0], a[1] = b[0], b[1]
		alike(t, "continuity", x, a, b, size)
	}
}

func supported(t *rapid.T, b Beam, r *Response, k int) {
	size := sizes(r, k)
	for i, s := range b.Supports {
		at, R := state(r, k, s.X, Left), r.Reactions(k)[i]
		settled := 0.0
		if k == r.SettlementCase() {
			settled = s.Settlement
		}
		want := at
		switch s.Kind {
		case Fixed:
			want[2], want[3] = 0, settled
		case Pinned:
			want[3] = settled
		case Spring:
			want[3] = settled + R.F/s.Stiffness
		}
		alike(t, "support", s.X, at, want, size)
	}
}
