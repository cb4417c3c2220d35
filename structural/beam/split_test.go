package beam

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestSplitPieces(t *testing.T) {
	fix, pin := Fixed, Pinned
	at := func(x float64, k SupportKind) Support { return Support{X: x, Kind: k} }
	for _, row := range []struct {
		name     string
		supports []Support
		want     []string
	}{
		{"simple", []Support{at(0, pin), at(12, pin)}, []string{SimpleSpan}},
		{"cantilever", []Support{at(0, fix)}, []string{Cantilever}},
		{"cantilever, held right", []Support{at(12, fix)}, []string{Cantilever}},
		{"two cantilevers", []Support{at(5, fix)}, []string{Cantilever, Cantilever}},
		{"propped", []Support{at(12, fix), at(0, pin)}, []string{Propped}},
		{"fixed both ends", []Support{at(0, fix), at(12, fix)}, []string{FixedBothEnds}},
		{"two spans and overhangs", []Support{at(2, pin), at(6, pin), at(10, pin)}, []string{Cantilever, SimpleSpan, SimpleSpan, Cantilever}},
		{"fixed end, two spans", []Support{at(0, fix), at(6, pin), at(12, pin)}, []string{Propped, SimpleSpan}},
		{"spring", []Support{at(0, pin), {X: 12, Kind: Spring, Stiffness: 1}}, []string{SimpleSpan}},
	} {
		s, err := Split(Prismatic(12, 1e6, row.supports...), nil, nil)
		if err != nil {
			t.Fatalf("%s: %v", row.name, err)
		}
		var got []string
		for _, p := range s.Pieces {
			got = append(got, p.Handbook)
		}
		if diff := cmp.Diff(row.want, got); diff != "" {
			t.Errorf("%s (-want +got):\n%s", row.name, diff)
		}
	}
}

// Handbook values of each piece, by hand: span 8 m, overhang 3 m, 2 kN/m
// throughout, 10 kN at the inner support, 6 kN at the tip, a couple of 4 kN.m
// at the inner support that the span takes.
func TestSplitByHand(t *testing.T) {
	EI, w, P, Q, C := 5e6, 2e3, 6e3, 10e3, 4e3
	b := Prismatic(11, EI, Support{Kind: Pinned}, Support{X: 8, Kind: Pinned, Settlement: 0.05})
	c := Case{{Kind: Uniform, To: 11, Start: w}, {Kind: Point, From: 8, Start: Q}, {Kind: Point, From: 11, Start: P},
		{Kind: Moment, From: 8, Start: C}, {Kind: Curvature, To: 11, Start: 1e-3, End: 1e-3}}
	s, err := Split(b, []Case{c}, []Term{{0, 1, true}, {1, 1, false}})
	if err != nil {
		t.Fatal(err)
	}
	span, over := s.Pieces[0], s.Pieces[1]
	const tol = 1e-12
	RA := w*8/2 - C/8
	closer(t, "span moment", span.MomentMax.Value, RA*RA/(2*w), w*8, tol)
	closer(t, "span end moment", span.MomentMin.Value, -C, w*8, tol)
	closer(t, "span shear", span.ShearMax.Value, RA, w*8, tol)
	closer(t, "overhang moment", over.MomentMin.Value, -w*9/2-P*3, w*8, tol)
	closer(t, "overhang shear", over.ShearMax.Value, w*3+P, w*8, tol)
	closer(t, "overhang tip", over.DeflectionMax.Value, w*81/(8*EI)+P*27/(3*EI), 0.01, tol)
	closer(t, "place of the tip", over.DeflectionMax.X, 11, 11, tol)
	closer(t, "end reaction", s.Reactions[0].F, RA, w*8, tol)
	closer(t, "inner reaction", s.Reactions[1].F, w*8-RA+w*3+P+Q, w*8, tol)
	if s.Reactions[1].M != 0 {
		t.Errorf("a pinned support gives a couple of %g", s.Reactions[1].M)
	}
}

// On members that the cutting leaves as they are the two methods agree.
func TestSplitOfOnePieceIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ends := rapid.SampledFrom([][]Support{
			{{Kind: Pinned}, {X: 9, Kind: Pinned}}, {{Kind: Fixed}, {X: 9, Kind: Pinned}}, {{Kind: Fixed}},
			{{X: 9, Kind: Fixed}}, {{Kind: Fixed}, {X: 9, Kind: Fixed}}, {{X: 4, Kind: Fixed}},
		}).Draw(t, "supports")
		b := Beam{Length: 9, Segments: []Segment{{To: 3, EI: 2e6}, {To: 9, EI: 5e6}}, Supports: ends}
		c := drawCase(t, 9, 5)
		for i := range c {
			if c[i].Kind == Curvature {
				c[i] = Load{Kind: Point, From: c[i].From, Start: 1e3}
			}
		}
		r := analyse(t, b, []Case{c})
		terms := []Term{{Case: 0, Factor: 1.3}}
		s, err := Split(b, []Case{c}, terms)
		if err != nil {
			t.Fatal(err)
		}
		load := 1.0
		for _, l := range c {
			load += 9 * (math.Abs(l.Start) + math.Abs(l.End))
		}
		size := func(effect string) float64 {
			switch effect {
			case EffectDeflection:
				return load * 9 * 9 * 9 / 2e6
			case EffectShear, EffectReaction, EffectUplift:
				return load
			}
			return load * 9
		}
		for _, ratio := range Compare(s, r.Envelope(terms)) {
			if !(math.Abs(ratio.Split-ratio.Exact) <= 1e-9*size(ratio.Effect)) {
				t.Fatalf("%+v, want ratio 1", ratio)
			}
		}
	})
}

// Without continuity forces still balance: split reactions carry all load.
func TestSplitEquilibrium(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		c := drawCase(t, b.Length, 5)
		s, err := Split(b, []Case{c}, []Term{{Case: 0, Factor: 1}})
		if err != nil {
			t.Fatal(err)
		}
		sum, size := 0.0, 1.0
		for _, l := range c {
			start, end := l.ends()
			switch l.Kind {
			case Point:
				sum += start
				size += math.Abs(start)
			case Uniform, Linear:
				sum += (start + end) / 2 * (l.To - l.From)
				size += (math.Abs(start) + math.Abs(end)) * (l.To - l.From)
			}
		}
		for _, R := range s.Reactions {
			sum -= R.F
			size += math.Abs(R.F)
		}
		if !(math.Abs(sum) <= 1e-8*size) {
			t.Fatalf("%g of %g is not carried", sum, size)
		}
	})
}

// A heavy span beside a short overhang lifts its tip: the split method has it
// going down, and the ratio is negative.
func TestRatioOfOtherSign(t *testing.T) {
	b := Prismatic(11, 5e6, Support{Kind: Pinned}, Support{X: 9, Kind: Pinned})
	s, e := bothMethods(t, b, []Case{{{Kind: Uniform, To: 11, Start: 2e3}}}, []Term{{Case: 0, Factor: 1}})
	exact := larger(e.Spans[1].DeflectionMax, e.Spans[1].DeflectionMin).Value
	split := 2e3 * 16 / (8 * 5e6)
	wantRatio(t, Compare(s, e), EffectDeflection, "right overhang", split/exact, true)
	if !(exact < 0) {
		t.Errorf("tip at %g m, want it lifted", exact)
	}
}

func TestNamesOfSpans(t *testing.T) {
	b := Prismatic(20, 5e6, Support{X: 3, Kind: Pinned}, Support{X: 10, Kind: Pinned}, Support{X: 16.6666, Kind: Pinned})
	s, e := bothMethods(t, b, []Case{{{Kind: Uniform, To: 20, Start: 2e3}}}, []Term{{Case: 0, Factor: 1}})
	var got []string
	for _, r := range Compare(s, e) {
		if r.Effect == EffectShear || r.Effect == EffectReaction {
			got = append(got, r.Where)
		}
	}
	want := []string{"left overhang", "span 1", "span 2", "right overhang", "support at 3 m", "support at 10 m", "support at 16.667 m"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("names (-want +got):\n%s", diff)
	}
}

func TestUpliftIsUnsafe(t *testing.T) {
	b := Prismatic(12, 5e6, Support{Kind: Pinned}, Support{X: 6, Kind: Pinned}, Support{X: 12, Kind: Pinned})
	s, e := bothMethods(t, b, []Case{{{Kind: Uniform, To: 6, Start: 2e3}}}, []Term{{Case: 0, Factor: 1}})
	ratios := Compare(s, e)
	wantRatio(t, ratios, EffectUplift, "support at 12 m", 0, true)
	for _, r := range ratios {
		if math.IsNaN(r.Ratio) || math.IsInf(r.Ratio, 0) {
			t.Errorf("%+v", r)
		}
	}
}

func TestCompareRefusals(t *testing.T) {
	r, terms := spanned(t, 2)
	other, _ := spanned(t, 3)
	s, err := Split(Prismatic(12, 1, Support{Kind: Pinned}, Support{X: 6, Kind: Pinned}, Support{X: 12, Kind: Pinned}), make([]Case, 4), terms)
	if err != nil {
		t.Fatal(err)
	}
	if got := Compare(s, other.Envelope(terms)); got != nil {
		t.Errorf("another member: %v", got)
	}
	if got := Compare(s, r.Envelope([]Term{{Case: 99}})); got != nil {
		t.Errorf("not a number: %v", got)
	}
	if got := Compare(SplitResult{}, Envelope{}); got != nil {
		t.Errorf("nothing: %v", got)
	}
	if got := Compare(s, r.Envelope(nil)); len(got) != 0 {
		t.Errorf("no exact effect, but %v", got)
	}
}

func TestSplitFaults(t *testing.T) {
	pin := Support{Kind: Pinned}
	for _, row := range []struct {
		name  string
		beam  Beam
		terms []Term
		want  FaultKind
	}{
		{"one pin", Prismatic(5, 1, pin), nil, FaultMechanism},
		{"NaN", Prismatic(math.NaN(), 1, pin), nil, FaultLength},
		{"no such case", Prismatic(5, 1, Support{Kind: Fixed}), []Term{{Case: 0, Factor: 1}}, FaultTerm},
	} {
		if _, err := Split(row.beam, nil, row.terms); kindOf(err) != row.want {
			t.Errorf("%s: %v, want %s", row.name, err, row.want)
		}
	}
}
