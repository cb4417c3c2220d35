package calibration

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// scipy.stats 1.10.1:
//
//	beta.ppf(.025, k, n-k+1), beta.ppf(.975, k+1, n-k)
func TestClopperPearsonAgainstSciPy(t *testing.T) {
	for _, c := range []struct {
		k, n      int
		low, high float64
	}{
		{0, 20, 0, 0.1684334709830853}, {1, 20, 0.0012650894979498038, 0.24873276277202777}, {5, 24, 0.07131861719805496, 0.42151284363725267},
		{12, 24, 0.29124177983621197, 0.708758220163788}, {19, 24, 0.5784871563627474, 0.928681382801945}, {24, 24, 0.8575264022774743, 1},
		{160, 200, 0.7377736354103999, 0.8531055117842411}, {3, 7, 0.09898827844250786, 0.8159484323599169},
	} {
		low, high := ClopperPearson(c.k, c.n, 0.95)
		if !(math.Abs(low-c.low) < 1e-9 && math.Abs(high-c.high) < 1e-9) {
			t.Errorf("%d of %d: got %v to %v, want %v to %v", c.k, c.n, low, high, c.low, c.high)
		}
	}
	for _, c := range []struct {
		k, n  int
		level float64
	}{{-1, 5, 0.95}, {6, 5, 0.95}, {0, 0, 0.95}, {1, 2, math.NaN()}, {1, 2, 1}} {
		if low, high := ClopperPearson(c.k, c.n, c.level); !math.IsNaN(low) || !math.IsNaN(high) {
			t.Errorf("%+v: got %v to %v, want NaN", c, low, high)
		}
	}
}

// at makes a job whose outturn lies at a normal score of a past range, P50 1000,
// log-deviation 0.2.
func at(t testing.TB, name string, outturn string) Comparable {
	t.Helper()
	p := func(percent int, text string) Percentile { return Percentile{percent, amount(t, text)} }
	return Comparable{Job: name, Kind: "trestles", Estimate: amount(t, "1000"), Outturn: amount(t, outturn), ScopeShare: 1, TakeOffMass: 1, WeighedMass: 1,
		Percentiles: []Percentile{p(10, "773.90"), p(50, "1000.00"), p(80, "1183.34"), p(90, "1292.16")}}
}

func many(t testing.TB, groups ...struct {
	n       int
	outturn string
}) []Comparable {
	t.Helper()
	var list []Comparable
	for i, g := range groups {
		for k := range g.n {
			list = append(list, at(t, fmt.Sprintf("job %d-%02d", i, k), g.outturn))
		}
	}
	return list
}

func TestCoverageCountsAndVerdicts(t *testing.T) {
	type g = struct {
		n       int
		outturn string
	}
	for _, c := range []struct {
		name   string
		groups []g
		counts []int // P10, P50, P80, P90, band
		words  string
	}{
		{"as promised", []g{{2, "700"}, {8, "900"}, {6, "1100"}, {2, "1200"}, {2, "1400"}}, []int{2, 10, 16, 18, 16}, "consistent with the 20 outturns"},
		{"narrow", []g{{7, "700"}, {3, "900"}, {3, "1100"}, {7, "1400"}}, []int{7, 10, 13, 13, 6}, "too narrow: 6 of 20"},
		{"low", []g{{3, "900"}, {7, "1100"}, {5, "1200"}, {5, "1400"}}, []int{0, 3, 10, 15, 15}, "too low: 3 of 20 outturns lay at or below P50"},
		{"low alone explains the band", []g{{1, "900"}, {9, "1100"}, {10, "1400"}}, []int{0, 1, 10, 10, 10}, "too low: 1 of 20"},
		{"low and narrow", []g{{4, "700"}, {4, "1100"}, {12, "1400"}}, []int{4, 4, 8, 8, 4}, "too low and too narrow"},
		{"high", []g{{4, "700"}, {13, "900"}, {3, "1100"}}, []int{4, 17, 20, 20, 16}, "too high: 17 of 20"},
		{"wide", []g{{12, "900"}, {13, "1100"}}, []int{0, 12, 25, 25, 25}, "too wide: 25 of 25"},
		{"on the percentile itself", []g{{20, "1000.00"}}, []int{0, 20, 20, 20, 20}, "too high"},
	} {
		t.Run(c.name, func(t *testing.T) {
			got := Coverage(many(t, c.groups...))
			for i, want := range c.counts {
				if got.Tallies[i].Count != want {
					t.Errorf("%s: got %d, want %d", got.Tallies[i].Name, got.Tallies[i].Count, want)
				}
			}
			if !strings.Contains(got.Verdict, c.words) || strings.Contains(c.words, "too low: ") && strings.Contains(got.Verdict, "narrow") {
				t.Errorf("verdict %q, want %q", got.Verdict, c.words)
			}
		})
	}
}

func TestCoverageListsWhomItLeavesOut(t *testing.T) {
	a, b, c := at(t, "a", "1000"), at(t, "b", "1000"), at(t, "c", "1000")
	a.Percentiles, b.ScopeShare = nil, 0.85
	got := Coverage([]Comparable{c, b, a})
	if got.Jobs != 1 || len(got.Left) != 2 || got.Left[0].Job != "a" || !strings.Contains(got.Left[1].Reasons[0], "85 % of the past base") {
		t.Errorf("got %+v", got)
	}
	if none := Coverage(nil); !strings.Contains(none.Verdict, "nothing can be said") || none.Integral != nil {
		t.Errorf("of nothing: got %+v", none)
	}
}

// The range of at is lognormal, so that scores are (ln x − ln 1000)/0.2 whatever the
// piece. scipy.stats 1.10.1: norm.cdf(log(1.5)/.2), norm.cdf(log(.95)/.2),
// norm.cdf(log(.5)/.2). The percentiles are rounded to the cent.
func TestIntegralAgainstSciPy(t *testing.T) {
	got := Coverage([]Comparable{at(t, "a", "1500"), at(t, "b", "950"), at(t, "c", "500")}).Integral
	want := []float64{0.9786854344045007, 0.39879533318476923, 0.00026439120652224093}
	for i, w := range want {
		if math.Abs(got.Jobs[i].Probability-w) > 2e-5 {
			t.Errorf("%s: got %v, want %v", got.Jobs[i].Job, got.Jobs[i].Probability, w)
		}
	}
	if math.Abs(got.Mean+0.5649589447322191) > 1e-4 || math.Abs(got.Deviation-2.759493922697923) > 1e-4 {
		t.Errorf("scores: got mean %v and deviation %v", got.Mean, got.Deviation)
	}
}

func TestIntegralNeedsFourRisingPercentiles(t *testing.T) {
	a, b := at(t, "a", "1000"), at(t, "b", "1000")
	a.Percentiles = a.Percentiles[:3]
	b.Percentiles[2].Amount = b.Percentiles[1].Amount
	if got := Coverage([]Comparable{a, b}); got.Integral != nil || got.Jobs != 2 {
		t.Errorf("got %+v", got)
	}
}
