package beam

import (
	"math"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// Every pattern of the free terms by brute force: 2ⁿ sums at sampled places.
func TestEnvelopeAgainstPatterns(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		var cases []Case
		var terms []Term
		for i := range rapid.IntRange(1, 6).Draw(t, "cases") {
			cases = append(cases, drawCase(t, b.Length, 3))
			terms = append(terms, Term{i, rapid.Float64Range(-2, 2).Draw(t, "factor"), rapid.IntRange(0, 3).Draw(t, "free") > 0})
		}
		r := analyse(t, b, cases)
		e := r.Envelope(terms)
		size := combined(r, terms)
		for _, s := range e.Spans {
			for i := range 41 {
				x := s.From + (s.To-s.From)*float64(i)/40
				side := Right
				if i == 40 {
					side = Left
				}
				patternsAt(t, r, terms, s, x, side, size)
			}
			attained(t, r, terms, s, size)
		}
		reactionPatterns(t, r, terms, e, size)
	})
}

func combined(r *Response, terms []Term) [4]float64 {
	var size [4]float64
	for _, term := range terms {
		for k, v := range sizes(r, term.Case) {
			size[k] += v * max(1, math.Abs(term.Factor))
		}
	}
	return size
}

// patterns returns bounds of V, M, slope, deflection over all patterns.
func patterns(r *Response, terms []Term, x float64, side Side) (most, least [4]float64) {
	states := make([][4]float64, len(terms))
	for i, term := range terms {
		states[i] = state(r, term.Case, x, side)
	}
	for mask := range 1 << len(terms) {
		var sum [4]float64
		for i, term := range terms {
			if !term.Free || mask>>i&1 == 1 {
				for k := range sum {
					sum[k] += term.Factor * states[i][k]
				}
			}
		}
		if mask == 0 {
			most, least = sum, sum
		}
		for k := range sum {
			most[k], least[k] = math.Max(most[k], sum[k]), math.Min(least[k], sum[k])
		}
	}
	return most, least
}

func patternsAt(t *rapid.T, r *Response, terms []Term, s SpanEnvelope, x float64, side Side, size [4]float64) {
	most, least := patterns(r, terms, x, side)
	V, M, v := r.EnvelopeAt(terms, x, side)
	for _, row := range []struct {
		name   string
		k      int
		at     Bounds
		hi, lo float64
	}{
		{"V", 0, V, s.ShearMax.Value, s.ShearMin.Value},
		{"M", 1, M, s.MomentMax.Value, s.MomentMin.Value},
		{"deflection", 3, v, s.DeflectionMax.Value, s.DeflectionMin.Value},
	} {
		tol := 1e-9 * size[row.k]
		if !(math.Abs(row.at.Max-most[row.k]) <= tol && math.Abs(row.at.Min-least[row.k]) <= tol) {
			t.Fatalf("%s at %g: %v, patterns %g, %g", row.name, x, row.at, most[row.k], least[row.k])
		}
		if !(most[row.k] <= row.hi+tol && least[row.k] >= row.lo-tol) {
			t.Fatalf("%s at %g: patterns %g, %g beyond extremes %g, %g", row.name, x, most[row.k], least[row.k], row.hi, row.lo)
		}
	}
}

// attained checks that each extreme really occurs where it is said to.
func attained(t *rapid.T, r *Response, terms []Term, s SpanEnvelope, size [4]float64) {
	for _, row := range []struct {
		name string
		k    int
		x    Extreme
		most bool
	}{
		{"V max", 0, s.ShearMax, true}, {"V min", 0, s.ShearMin, false},
		{"M max", 1, s.MomentMax, true}, {"M min", 1, s.MomentMin, false},
		{"deflection max", 3, s.DeflectionMax, true}, {"deflection min", 3, s.DeflectionMin, false},
	} {
		found := false
		for _, side := range []Side{Left, Right} {
			most, least := patterns(r, terms, row.x.X, side)
			v := least[row.k]
			if row.most {
				v = most[row.k]
			}
			found = found || math.Abs(v-row.x.Value) <= 1e-9*size[row.k]
		}
		if !found || row.x.X < s.From || row.x.X > s.To {
			t.Fatalf("%s %v does not occur in %g to %g", row.name, row.x, s.From, s.To)
		}
	}
}

func reactionPatterns(t *rapid.T, r *Response, terms []Term, e Envelope, size [4]float64) {
	for i, got := range e.Reactions {
		want := ReactionEnvelope{X: got.X}
		for _, term := range terms {
			R := r.Reactions(term.Case)[i]
			F, M := R.F*term.Factor, R.M*term.Factor
			if !term.Free || F > 0 {
				want.FMax += F
			}
			if !term.Free || F < 0 {
				want.FMin += F
			}
			if !term.Free || M > 0 {
				want.MMax += M
			}
			if !term.Free || M < 0 {
				want.MMin += M
			}
		}
		for _, d := range []struct{ got, want, size float64 }{
			{got.FMax, want.FMax, size[0]}, {got.FMin, want.FMin, size[0]}, {got.MMax, want.MMax, size[1]}, {got.MMin, want.MMin, size[1]},
		} {
			if !(math.Abs(d.got-d.want) <= 1e-9*d.size) {
				t.Fatalf("reaction %+v, want %+v", got, want)
			}
		}
	}
}

func TestEnvelopeOfParts(t *testing.T) {
	r, terms := spanned(t, 3)
	ignore := cmpopts.IgnoreUnexported(Envelope{})
	whole := r.Envelope(terms)
	var forces, downs Envelope
	r.EnvelopeForces(&forces, terms)
	r.EnvelopeDeflections(&downs, terms)
	if forces.DeflectionMax != (Extreme{}) || downs.MomentMax != (Extreme{}) || downs.Reactions[1].FMax != 0 {
		t.Errorf("parts hold more than asked for: %v, %v", forces.DeflectionMax, downs.MomentMax)
	}
	for i := range forces.Spans {
		forces.Spans[i].DeflectionMax, forces.Spans[i].DeflectionMin = downs.Spans[i].DeflectionMax, downs.Spans[i].DeflectionMin
	}
	forces.DeflectionMax, forces.DeflectionMin = downs.DeflectionMax, downs.DeflectionMin
	if diff := cmp.Diff(whole, forces, ignore); diff != "" {
		t.Errorf("forces and deflections (-whole +parts):\n%s", diff)
	}
	reused := r.Envelope([]Term{{Case: 0, Factor: -3}})
	r.EnvelopeInto(&reused, terms)
	if diff := cmp.Diff(whole, reused, ignore); diff != "" {
		t.Errorf("a used envelope (-fresh +used):\n%s", diff)
	}
}

// A term's factor scales what Analyse was given: EI = 1 in the analysis and
// division afterwards must be the same as the true stiffness.
func TestUnitStiffness(t *testing.T) {
	const EI = 3.7e7
	build := func(ei float64) Envelope {
		b := Prismatic(14, ei, Support{Kind: Pinned}, Support{X: 8, Kind: Pinned})
		r, err := Analyse(b, []Case{{{Kind: Uniform, To: 14, Start: 1}}, {{Kind: Uniform, To: 8, Start: 4e3}}, {{Kind: Uniform, From: 8, To: 14, Start: 4e3}}})
		if err != nil {
			t.Fatal(err)
		}
		return r.Envelope([]Term{{Case: 0, Factor: 900}, {1, 1.5, true}, {2, 1.5, true}})
	}
	unit, whole := build(1), build(EI)
	closer(t, "M", unit.MomentMax.Value, whole.MomentMax.Value, whole.MomentMax.Value, 1e-13)
	closer(t, "deflection", unit.DeflectionMax.Value/EI, whole.DeflectionMax.Value, whole.DeflectionMax.Value, 1e-12)
	closer(t, "uplift", unit.DeflectionMin.Value/EI, whole.DeflectionMin.Value, whole.DeflectionMax.Value, 1e-12)
}

func TestEnvelopeAllocatesNothing(t *testing.T) {
	for _, n := range []int{1, 5} {
		r, terms := spanned(t, n)
		var e Envelope
		r.EnvelopeInto(&e, terms)
		if got := testing.AllocsPerRun(100, func() { r.EnvelopeInto(&e, terms) }); got != 0 {
			t.Errorf("%d spans: %g allocations, want 0", n, got)
		}
	}
	b := Prismatic(9, 1, Support{Kind: Fixed}, Support{X: 6, Kind: Pinned})
	r, err := Analyse(b, []Case{{{Kind: Linear, To: 9, Start: 1, End: -2}}, {{Kind: Linear, From: 1, To: 4, Start: 2, End: 7}}, {{Kind: Point, From: 8, Start: 3}}})
	if err != nil {
		t.Fatal(err)
	}
	terms := []Term{{0, 1, true}, {1, -1, true}, {2, 2, true}}
	var e Envelope
	r.EnvelopeInto(&e, terms)
	if got := testing.AllocsPerRun(100, func() { r.EnvelopeInto(&e, terms) }); got != 0 {
		t.Errorf("linear loads: %g allocations, want 0", got)
	}
}

func TestResponseIsShared(t *testing.T) {
	r, terms := spanned(t, 4)
	want := r.Envelope(terms)
	var wg sync.WaitGroup
	for range 4 {
		wg.Go(func() {
			var e Envelope
			for range 50 {
				r.EnvelopeInto(&e, terms)
			}
			if e.MomentMax != want.MomentMax {
				t.Errorf("%v, want %v", e.MomentMax, want.MomentMax)
			}
		})
	}
	wg.Wait()
}

func TestEmptyCombination(t *testing.T) {
	r, _ := spanned(t, 2)
	e := r.Envelope(nil)
	if e.MomentMax != (Extreme{}) || e.DeflectionMin != (Extreme{}) || len(e.Spans) != 2 || e.Reactions[2].X != 12 {
		t.Errorf("envelope of nothing: %+v", e)
	}
}

// A load that begins beside the tip has a moment with a double root there,
// where rounding decides its sign: the free term must act all the same.
func TestFreeLoadBesideTheTip(t *testing.T) {
	a := 3.0011794567108154
	b := Prismatic(18.75, 1e6, Support{X: a, Kind: Spring, Stiffness: 131072.9941401481}, Support{X: 7, Kind: Pinned}, Support{X: 10.5, Kind: Pinned})
	for i := range 200 {
		from := 0.3 + float64(i)*0.01
		r, err := Analyse(b, []Case{{{Kind: Linear, From: from, To: 18.75, Start: 1, End: 0.25}}})
		if err != nil {
			t.Fatal(err)
		}
		e := r.Envelope([]Term{{Case: 0, Factor: 1, Free: true}})
		d := a - from
		want := -(d*d/2 - 0.75/(18.75-from)*cube(d)/6)
		closer(t, "root moment", e.Spans[0].MomentMin.Value, want, 10, 1e-12)
	}
}
