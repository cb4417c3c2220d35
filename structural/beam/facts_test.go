package beam

import (
	"math"
	"testing"
)

// The held member of the trade: one end and two thirds of the length. Figures
// by hand from the three-moment equation; common practice, no source.
const (
	tubeL = 50.0
	tubeE = 210e9
	tubeW = 302.3 * 9.80665 // N/m, 508 x 25.4 mm at 7850 kg/m³
)

func tubeI() float64 {
	d, t := 0.508, 0.0254
	return math.Pi / 64 * (math.Pow(d, 4) - math.Pow(d-2*t, 4))
}

func tube() Beam {
	return Prismatic(tubeL, tubeE*tubeI(), Support{Kind: Pinned}, Support{X: 100.0 / 3, Kind: Pinned})
}

func TestTubeMass(t *testing.T) {
	area := math.Pi / 4 * (0.508*0.508 - 0.4572*0.4572)
	closer(t, "mass per metre", area*7850, 302.3, 302.3, 2e-4)
}

func TestTwoThirdsOwnWeight(t *testing.T) {
	cases, terms := []Case{{{Kind: Uniform, To: tubeL, Start: tubeW}}}, []Term{{Case: 0, Factor: 1}}
	s, e := bothMethods(t, tube(), cases, terms)
	for _, row := range []struct {
		name       string
		got, want  float64
		resolution float64 // half a unit of the last figure given
	}{
		{"span moment, split", s.Pieces[0].MomentMax.Value, 411.7e3, 50},
		{"span moment, exact", e.Spans[0].MomentMax.Value, 231.6e3, 50},
		{"overhang moment, split", s.Pieces[1].MomentMin.Value, -411.7e3, 50},
		{"overhang moment, exact", e.Spans[1].MomentMin.Value, -411.7e3, 50},
		{"inner reaction, split", s.Reactions[1].F, 98.8e3, 50},
		{"inner reaction, exact", e.Reactions[1].FMax, 111.2e3, 50},
		{"span deflection, split", s.Pieces[0].DeflectionMax.Value, 0.202, 5e-4},
		{"span deflection, exact", e.Spans[0].DeflectionMax.Value, 0.084, 5e-4},
		{"tip, split", s.Pieces[1].DeflectionMax.Value, 0.121, 5e-4},
		{"tip, exact", e.Spans[1].DeflectionMax.Value, 0.121, 5e-4},
	} {
		closer(t, row.name, row.got, row.want, 1, row.resolution)
	}
	ratios := Compare(s, e)
	wantRatio(t, ratios, EffectSpanMoment, "span 1", 16.0/9, false)
	wantRatio(t, ratios, EffectSupportMoment, "support at 33.333 m", 1, false)
	wantRatio(t, ratios, EffectReaction, "support at 33.333 m", 1/1.125, true)
	wantRatio(t, ratios, EffectPeakMoment, "member", 1, false)
}

func TestTwoThirdsWithVariable(t *testing.T) {
	a := 100.0 / 3
	cases := []Case{{{Kind: Uniform, To: tubeL, Start: tubeW}}, {{Kind: Uniform, To: a, Start: 1500}}, {{Kind: Uniform, From: a, To: tubeL, Start: 1500}}}
	s, e := bothMethods(t, tube(), cases, []Term{{0, 1, false}, {1, 1, true}, {2, 1, true}})
	closer(t, "span", e.Spans[0].MomentMax.Value, 431.3e3, 1, 50)
	closer(t, "overhang", e.Spans[1].MomentMin.Value, -620.1e3, 1, 50)
	closer(t, "tip, exact", e.Spans[1].DeflectionMax.Value, 0.346, 1, 5e-4)
	closer(t, "tip, split", s.Pieces[1].DeflectionMax.Value, 0.182, 1, 5e-4)
	wantRatio(t, Compare(s, e), EffectDeflection, "right overhang", 0.182/0.346, true)
}

// Two equal spans: 1/2 against 5/8 of a span's load, and 1 against 10/8.
func TestTwoEqualSpans(t *testing.T) {
	L, w := 6.0, 4e3
	b := Prismatic(2*L, 1e7, Support{Kind: Pinned}, Support{X: L, Kind: Pinned}, Support{X: 2 * L, Kind: Pinned})
	s, e := bothMethods(t, b, []Case{{{Kind: Uniform, To: 2 * L, Start: w}}}, []Term{{Case: 0, Factor: 1}})
	ratios := Compare(s, e)
	wantRatio(t, ratios, EffectReaction, "support at 6 m", 0.8, true)
	wantRatio(t, ratios, EffectReaction, "support at 0 m", 4.0/3, false)
	wantRatio(t, ratios, EffectShear, "span 1", 0.8, true)
	wantRatio(t, ratios, EffectShear, "span 2", 0.8, true)
	wantRatio(t, ratios, EffectSpanMoment, "span 1", 16.0/9, false)
	wantRatio(t, ratios, EffectSupportMoment, "support at 6 m", 0, true)
	wantRatio(t, ratios, EffectPeakMoment, "member", 1, false)
}

func bothMethods(t testing.TB, b Beam, cases []Case, terms []Term) (SplitResult, Envelope) {
	t.Helper()
	r, err := Analyse(b, cases)
	if err != nil {
		t.Fatal(err)
	}
	s, err := Split(b, cases, terms)
	if err != nil {
		t.Fatal(err)
	}
	return s, r.Envelope(terms)
}

// wantRatio looks for one ratio; ratios of rounded figures are given to 2e-3.
func wantRatio(t *testing.T, ratios []Ratio, effect, where string, want float64, unsafe bool) {
	t.Helper()
	for _, r := range ratios {
		if r.Effect == effect && r.Where == where {
			if !(math.Abs(r.Ratio-want) <= 2e-3) || r.Unsafe != unsafe {
				t.Errorf("%s, %s: ratio %.6g (unsafe %t), want %.6g (%t)", effect, where, r.Ratio, r.Unsafe, want, unsafe)
			}
			return
		}
	}
	t.Errorf("no ratio of %s at %s in %+v", effect, where, ratios)
}

// Supports for the least peak effect under a uniform load, found by golden
// section: 1/√2 of the length for one inner support with the other at the end,
// (√2-1)/2 from each end for two (handbooks, from memory); for the least
// deflection of two where the tips hang as low as the middle, 0.2231 or 0.2232
// in handbooks, from a rounded 0.5536 or 0.5537 between the supports.
func TestBestSupportPositions(t *testing.T) {
	peak := func(b Beam) Envelope { return envelopeOf(t, b, Case{{Kind: Uniform, To: 1, Start: 1}}) }
	two := func(x float64) Beam {
		return Prismatic(1, 1, Support{X: x, Kind: Pinned}, Support{X: 1 - x, Kind: Pinned})
	}
	moment := func(e Envelope) float64 { return math.Max(e.MomentMax.Value, -e.MomentMin.Value) }
	down := func(e Envelope) float64 { return math.Max(e.DeflectionMax.Value, -e.DeflectionMin.Value) }
	for _, row := range []struct {
		name      string
		f         func(x float64) float64
		lo, hi    float64
		want, tol float64
	}{
		{"one inner support", func(x float64) float64 {
			return moment(peak(Prismatic(1, 1, Support{Kind: Pinned}, Support{X: x, Kind: Pinned})))
		}, 0.55, 0.95, 1 / math.Sqrt2, 1e-8},
		{"two, moment", func(x float64) float64 { return moment(peak(two(x))) }, 0.05, 0.45, (math.Sqrt2 - 1) / 2, 1e-8},
		{"two, deflection", func(x float64) float64 { return down(peak(two(x))) }, 0.15, 0.3, levelSupports(), 1e-8},
	} {
		if got := goldenSection(row.f, row.lo, row.hi); !(math.Abs(got-row.want) <= row.tol) {
			t.Errorf("%s: %.8f of the length, want %.8f", row.name, got, row.want)
		}
	}
}

// levelSupports returns where tip and middle of a member of length 1 on two
// supports hang equally low: w a(3a³ + 6a²L - L³)/24 = 5wL⁴/384 - wa²L²/16,
// L = 1 - 2a, by halving.
func levelSupports() float64 {
	lo, hi := 0.2, 0.25
	for range 60 {
		a := (lo + hi) / 2
		L := 1 - 2*a
		if a*(3*cube(a)+6*a*a*L-cube(L))/24 < 5*math.Pow(L, 4)/384-a*a*L*L/16 {
			lo = a
		} else {
			hi = a
		}
	}
	return lo
}

func TestLevelSupportsInHandbooks(t *testing.T) {
	closer(t, "distance from the end", levelSupports(), 0.22315, 1, 5e-6)
}

func goldenSection(f func(float64) float64, a, b float64) float64 {
	g := (math.Sqrt(5) - 1) / 2
	for b-a > 1e-10 {
		c, d := b-g*(b-a), a+g*(b-a)
		if f(c) < f(d) {
			b = d
		} else {
			a = c
		}
	}
	return (a + b) / 2
}
