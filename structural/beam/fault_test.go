package beam

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestFaults(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	good := func() Beam { return Prismatic(10, 1e6, Support{Kind: Pinned}, Support{X: 10, Kind: Pinned}) }
	with := func(s ...Support) Beam { return Prismatic(10, 1e6, s...) }
	hinged := func(x ...float64) Beam { b := good(); b.Hinges = x; return b }
	pin := Support{Kind: Pinned}
	for _, row := range []struct {
		name string
		beam Beam
		load Load
		want FaultKind
	}{
		{"zero length", Prismatic(0, 1e6, pin), Load{}, FaultLength},
		{"NaN length", Prismatic(nan, 1e6, pin), Load{}, FaultLength},
		{"infinite length", Prismatic(inf, 1e6, pin), Load{}, FaultLength},
		{"zero EI", Prismatic(10, 0, pin), Load{}, FaultStiffness},
		{"NaN EI", Prismatic(10, nan, pin), Load{}, FaultStiffness},
		{"infinite EI", Prismatic(10, inf, pin), Load{}, FaultStiffness},
		{"no segment", Beam{Length: 10, Supports: []Support{pin}}, Load{}, FaultSegment},
		{"segments short", Beam{Length: 10, Segments: []Segment{{9, 1}}, Supports: []Support{pin}}, Load{}, FaultSegment},
		{"segments unordered", Beam{Length: 10, Segments: []Segment{{6, 1}, {5, 1}, {10, 1}}, Supports: []Support{pin}}, Load{}, FaultSegment},
		{"segment NaN", Beam{Length: 10, Segments: []Segment{{nan, 1}}, Supports: []Support{pin}}, Load{}, FaultSegment},
		{"no support", with(), Load{}, FaultNoSupport},
		{"support before", with(Support{X: -1, Kind: Fixed}), Load{}, FaultOutside},
		{"support after", with(Support{X: 10.1, Kind: Fixed}), Load{}, FaultOutside},
		{"support NaN", with(Support{X: nan, Kind: Fixed}), Load{}, FaultOutside},
		{"two supports at one place", with(pin, Support{X: 4, Kind: Pinned}, Support{X: 4, Kind: Fixed}), Load{}, FaultTwice},
		{"support of no kind", with(Support{}, Support{X: 10, Kind: Pinned}), Load{}, FaultSupport},
		{"spring without stiffness", with(pin, Support{X: 10, Kind: Spring}), Load{}, FaultStiffness},
		{"spring NaN", with(pin, Support{X: 10, Kind: Spring, Stiffness: nan}), Load{}, FaultStiffness},
		{"pinned with stiffness", with(pin, Support{X: 10, Kind: Pinned, Stiffness: 1}), Load{}, FaultStiffness},
		{"negative rotational", with(pin, Support{X: 10, Kind: Pinned, RotationalStiffness: -1}), Load{}, FaultStiffness},
		{"NaN rotational", with(pin, Support{X: 10, Kind: Pinned, RotationalStiffness: nan}), Load{}, FaultStiffness},
		{"fixed with rotational", with(Support{Kind: Fixed, RotationalStiffness: 1}), Load{}, FaultStiffness},
		{"NaN settlement", with(pin, Support{X: 10, Kind: Pinned, Settlement: nan}), Load{}, FaultSupport},
		{"one pin", with(pin), Load{}, FaultMechanism},
		{"hinge too many", hinged(5), Load{}, FaultMechanism},
		{"hinge at the end", hinged(10), Load{}, FaultOutside},
		{"hinge NaN", hinged(nan), Load{}, FaultOutside},
		{"two hinges at one place", hinged(5, 5), Load{}, FaultTwice},
		{"stiffnesses too unlike", Beam{Length: 10, Segments: []Segment{{4.99999, 1e9}, {5.00001, 1e-9}, {10, 1e9}}, Supports: []Support{{Kind: Fixed}, {X: 10, Kind: Fixed}}}, Load{}, FaultCondition},
		{"stiffnesses beyond float64", Beam{Length: 10, Segments: []Segment{{5, 1e200}, {10, 1e-200}}, Supports: []Support{pin, {X: 10, Kind: Pinned}}}, Load{}, FaultCondition},
		{"spring too soft", with(pin, Support{X: 10, Kind: Spring, Stiffness: 1e-8}), Load{}, FaultCondition},
		{"load of no kind", good(), Load{Start: 1}, FaultLoad},
		{"load NaN", good(), Load{Kind: Point, From: 5, Start: nan}, FaultLoad},
		{"load end NaN", good(), Load{Kind: Linear, To: 5, End: nan}, FaultLoad},
		{"load infinite", good(), Load{Kind: Uniform, To: 5, Start: inf}, FaultLoad},
		{"load without extent", good(), Load{Kind: Uniform, From: 5, To: 5, Start: 1}, FaultLoad},
		{"load backwards", good(), Load{Kind: Uniform, From: 5, To: 4, Start: 1}, FaultLoad},
		{"uniform with two values", good(), Load{Kind: Uniform, To: 4, Start: 1, End: 2}, FaultLoad},
		{"load off the end", good(), Load{Kind: Uniform, To: 11, Start: 1}, FaultOutside},
		{"point off the end", good(), Load{Kind: Point, From: -0.5, Start: 1}, FaultOutside},
		{"point nowhere", good(), Load{Kind: Point, From: nan, Start: 1}, FaultOutside},
		{"load to nowhere", good(), Load{Kind: Uniform, To: nan, Start: 1}, FaultOutside},
		{"load too large", good(), Load{Kind: Uniform, To: 10, Start: 1e300}, FaultOverflow},
	} {
		t.Run(row.name, func(t *testing.T) {
			var cases []Case
			if row.load != (Load{}) {
				cases = []Case{{row.load}}
			}
			r, err := Analyse(row.beam, cases)
			var f *Fault
			if !errors.As(err, &f) || r != nil {
				t.Fatalf("Analyse = %v, %v, want a fault and no response", r, err)
			}
			if f.Kind != row.want {
				t.Errorf("kind %q, want %q: %v", f.Kind, row.want, f)
			}
			if f.Part == "" || f.Found == "" || f.Accepted == "" || !strings.Contains(f.Error(), f.Accepted) {
				t.Errorf("incomplete: %#v", f)
			}
		})
	}
}

func TestFaultHinges(t *testing.T) {
	b := Prismatic(10, 1e6, Support{Kind: Fixed}, Support{X: 5, Kind: Fixed}, Support{X: 10, Kind: Pinned})
	b.Hinges = []float64{5}
	if _, err := Analyse(b, nil); kindOf(err) != FaultHinge {
		t.Errorf("hinge at a fixed support: %v", err)
	}
	b.Hinges = []float64{3}
	if _, err := Analyse(b, []Case{{{Kind: Moment, From: 3, Start: 1}}}); kindOf(err) != FaultHinge {
		t.Errorf("moment at a hinge: %v", err)
	}
	if _, err := Split(b, nil, nil); kindOf(err) != FaultSplitHinge {
		t.Errorf("split with a hinge in the span: %v", err)
	}
}

func TestMechanismPlace(t *testing.T) {
	b := Prismatic(10, 1e6, Support{Kind: Pinned}, Support{X: 5, Kind: Pinned}, Support{X: 10, Kind: Pinned})
	b.Hinges = []float64{6, 7, 8}
	_, err := Analyse(b, nil)
	var f *Fault
	if !errors.As(err, &f) || f.Kind != FaultMechanism || !(f.Where >= 6 && f.Where <= 10) {
		t.Errorf("fault %v, want a mechanism between 6 and 10 m", err)
	}
}

func TestTermFaults(t *testing.T) {
	r, _ := spanned(t, 2)
	for _, term := range []Term{{Case: -1, Factor: 1}, {Case: r.Cases(), Factor: 1}, {Factor: math.NaN()}, {Factor: math.Inf(-1)}, {Factor: 1e31}} {
		terms := []Term{{Case: 0, Factor: 1}, term}
		if err := r.CheckTerms(terms); kindOf(err) != FaultTerm {
			t.Errorf("CheckTerms(%v) = %v", term, err)
		}
		e := r.Envelope(terms)
		for _, v := range []float64{e.MomentMax.Value, e.ShearMin.Value, e.DeflectionMax.Value, e.Reactions[1].FMax, e.Spans[1].MomentMin.Value, e.Spans[0].MomentAtTo.Min} {
			if !math.IsNaN(v) {
				t.Errorf("envelope with %v has %g, want NaN", term, v)
			}
		}
		if _, m, _ := r.EnvelopeAt(terms, 1, Left); !math.IsNaN(m.Max) {
			t.Errorf("EnvelopeAt with %v = %v, want NaN", term, m)
		}
	}
	if err := r.CheckTerms([]Term{{Case: 1, Factor: -1e30}}); err != nil {
		t.Error(err)
	}
}

func kindOf(err error) FaultKind {
	var f *Fault
	if errors.As(err, &f) {
		return f.Kind
	}
	return ""
}
