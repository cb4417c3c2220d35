package calibration

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
)

func samplesOf(groups map[string][]float64) []sample {
	var list []sample
	for kind, ys := range groups {
		for i, y := range ys {
			list = append(list, sample{fmt.Sprintf("%s %d", kind, i), kind, y})
		}
	}
	return list
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v within %g", what, got, want, tolerance)
	}
}

// By hand: three kinds of four jobs, each mean ± 0.1. Within, s² = 4·0.01/3 = 1/75
// and v = s²/4 = 1/300. The means 0, 0.1 and 0.3 have the sample variance 7/300, so
// τ² = 7/300 − 1/300 = 0.02 (for equal v Paule and Mandel's equation is linear) and
// each kind's weight on the pooled mean is (1/300)/(7/300) = 1/7. The third centre is
// 0.4/3/7 + 6·0.3/7 = 29/105, its variance 6/7/300 + (1/7)²·7/900 = 19/6300.
func TestShrinkageByHand(t *testing.T) {
	f := shrink(samplesOf(map[string][]float64{"a": {-0.1, 0.1, -0.1, 0.1}, "b": {0, 0.2, 0, 0.2}, "c": {0.2, 0.4, 0.2, 0.4}}))
	near(t, "pooled variance", f.variance, 1.0/75, 1e-15)
	near(t, "between", f.between, 0.02, 1e-14)
	near(t, "mean", f.mean, 0.4/3, 1e-15)
	near(t, "weight", f.groups[2].weight, 1.0/7, 1e-13)
	near(t, "centre", f.groups[2].centre, 29.0/105, 1e-14)
	near(t, "doubt", f.groups[2].doubt, 19.0/6300, 1e-14)
	near(t, "freedom", f.groups[2].freedom, 9, 0)
}

// Values of testdata/reference.py (SciPy 1.10.1).
func TestShrinkageAgainstSciPy(t *testing.T) {
	type row struct{ variance, weight, centre, doubt, freedom, p10, p90, density float64 }
	for name, c := range map[string]struct {
		groups                                map[string][]float64
		pooled, prior, between, mean, meanVar float64
		want                                  map[string]row
	}{
		"scattered": {map[string][]float64{"lattice": {0.31, 0.12, 0.22, 0.05, 0.41}, "simple beams": {0.02, -0.03, 0.05, 0.01, 0, 0.04, -0.01},
			"trestles": {0.10, 0.22, -0.08, 0.15}, "tube booms": {0.35}},
			0.010541593406593407, 4, 0.016503800449795485, 0.15171420956117784, 0.005083424176215747, map[string]row{
				"lattice":      {0.0156557967032967, 0.15946858939744282, 0.2107916241440368, 0.0027611104285203384, 8.0, 0.021231346759459757, 0.4003519015286139, 1.043578914244068},
				"simple beams": {0.004685208791208791, 0.038974612524399446, 0.01689614981752788, 0.0006509510528452361, 10.0, -0.0833405253198315, 0.11713282495488726, -1.0087191568477198},
				"trestles":     {0.013063053375196232, 0.16519147199682702, 0.10645572508055542, 0.0028650046994218247, 7.0, -0.07211674508931107, 0.2850281952504219, 0.8130820534307603},
				"tube booms":   {0.010541593406593407, 0.38977407622788907, 0.2727133392025913, 0.007205046847471922, 4.0, 0.06846494042504048, 0.4769617379801421, 0.8553532818927951}}},
		"alike": {map[string][]float64{"lattice": {0.30, 0.06, 0.22, 0.01, 0.33, 0.13, 0.26}, "simple beams": {0.06, -0.08, 0.10, 0.02, -0.05, 0.09, -0.04, 0.01},
			"trestles": {0.10, 0.19, -0.08, 0.15, 0.01, 0.07, 0.12, -0.03}},
			0.009085892857142858, 57.49216950335437, 0.006645835417554697, 0.0878386703336663, 0.002612383287972703, map[string]row{
				"lattice":      {0.009650175039973407, 0.17179988063159707, 0.17008240970282035, 0.001218858744002821, 20.0, 0.03190946712225873, 0.30825535228338197, 1.2863405395733043},
				"simple beams": {0.008583293080307718, 0.13900075073428056, 0.024048380797284236, 0.0009742505150201479, 20.0, -0.10552049215040925, 0.15361725374497776, -0.18236590792552754},
				"trestles":     {0.0090329600743525, 0.1452252710536377, 0.06938522050089432, 0.0010202394044499898, 20.0, -0.06350091974504884, 0.2022713607468375, 0.513363513897632}}},
	} {
		t.Run(name, func(t *testing.T) {
			f := shrink(samplesOf(c.groups))
			near(t, "pooled", f.variance, c.pooled, 1e-14)
			near(t, "prior", f.prior/c.prior, 1, 1e-9) // the equation is flat in it
			near(t, "between", f.between, c.between, 1e-12)
			near(t, "mean", f.mean, c.mean, 1e-12)
			near(t, "doubt of the mean", f.doubt, c.meanVar, 1e-12)
			if len(f.groups) != len(c.want) {
				t.Fatalf("got %d kinds, want %d", len(f.groups), len(c.want))
			}
			for _, g := range f.groups {
				w, p := c.want[g.kind], f.predict(g.kind, 0)
				near(t, g.kind+" variance", g.variance, w.variance, 1e-10)
				near(t, g.kind+" weight", g.weight, w.weight, 1e-10)
				near(t, g.kind+" centre", g.centre, w.centre, 1e-10)
				near(t, g.kind+" doubt", g.doubt, w.doubt, 1e-10)
				near(t, g.kind+" freedom", g.freedom, w.freedom, 1e-9)
				near(t, g.kind+" P10", p.quantile(0.1), w.p10, 1e-8)
				near(t, g.kind+" P90", p.quantile(0.9), w.p90, 1e-8)
				near(t, g.kind+" density", p.logDensity(0.2), w.density, 1e-8)
			}
		})
	}
}

func TestShrinkageOfFewIsSober(t *testing.T) {
	equal := shrink(samplesOf(map[string][]float64{"a": {0.1, 0.1, 0.1}, "b": {0.1, 0.1}}))
	near(t, "variance of equal ratios", equal.groups[0].variance, leastDeviation*leastDeviation, 0)
	near(t, "their centre", equal.groups[0].centre, 0.1, 1e-15)

	oneKind := shrink(samplesOf(map[string][]float64{"a": {0, 0.2, 0.4}}))
	near(t, "one kind", oneKind.groups[0].centre, 0.2, 1e-15)
	near(t, "one kind's variance", oneKind.groups[0].variance, 0.04, 1e-15)

	single := shrink([]sample{{"1", "a", 0}, {"2", "b", 0.2}, {"3", "c", 0.4}})
	if len(single.groups) != 1 || single.freedom != 2 {
		t.Errorf("one job of each kind: got %+v", single)
	}
	p := single.predict("b", 0)
	near(t, "its prediction", p.centre, 0.2, 1e-15)
	near(t, "its scale", p.scale, math.Sqrt(0.04+0.04/3), 1e-15)

	two := shrink([]sample{{"1", "a", 0}, {"2", "b", 0.2}})
	if p := two.predict("a", 0); math.IsNaN(p.quantile(0.9)) {
		t.Error("two jobs give no prediction")
	}
}

func TestOrderOfSamplesChangesNoBit(t *testing.T) {
	list := samplesOf(map[string][]float64{"a": {0.31, 0.12, 0.22}, "b": {0.02, -0.03, 0.05, 0.01}, "c": {0.35}})
	want := fmt.Sprintf("%v", shrink(list))
	slices.Reverse(list)
	if got := fmt.Sprintf("%v", shrink(list)); got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

// Leaving one job out of the groups is the fit to the others, to the bit.
func TestLeavingOneOutIsAFitToTheOthers(t *testing.T) {
	for _, groups := range []map[string][]float64{
		{"a": {0.31, 0.12, 0.22}, "b": {0.02, -0.03, 0.05, 0.01}, "c": {0.35}},
		{"a": {0.3, 0.1}, "b": {0.02}, "c": {0.35}},
	} {
		list := samplesOf(groups)
		slices.SortFunc(list, func(a, b sample) int { return strings.Compare(a.job, b.job) })
		all := byKind(list)
		for i := range list {
			want := fmt.Sprintf("%v", shrink(slices.Concat(list[:i], list[i+1:])))
			if got := fmt.Sprintf("%v", shrinkWithout(all, list, i)); got != want {
				t.Errorf("without %s: got %s, want %s", list[i].job, got, want)
			}
		}
	}
}
