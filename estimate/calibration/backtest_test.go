package calibration

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
)

func scoreOf(t testing.TB, jobs []Comparable, name string) Score {
	t.Helper()
	list, err := BackTest(jobs, FitOptions{})
	if err != nil {
		t.Fatal(err)
	}
	i := slices.IndexFunc(list, func(s Score) bool { return s.Figure == name })
	if i < 0 {
		t.Fatalf("no score of %s", name)
	}
	return list[i]
}

// Values of testdata/reference.py (SciPy 1.10.1) for the kinds LIKE.
func TestBackTestAgainstSciPy(t *testing.T) {
	m := measure{name: Fabrication, target: TargetMultiplier, scaled: true}
	for kind, ys := range map[string][]float64{"lattice": {0.30, 0.06, 0.22, 0.01, 0.33, 0.13, 0.26}, "simple beams": {0.06, -0.08, 0.10, 0.02, -0.05, 0.09, -0.04, 0.01},
		"trestles": {0.10, 0.19, -0.08, 0.15, 0.01, 0.07, 0.12, -0.03}} {
		for i, y := range ys {
			m.samples = append(m.samples, sample{fmt.Sprint(kind, i), kind, y})
		}
	}
	slices.SortFunc(m.samples, func(a, b sample) int { return strings.Compare(a.job, b.job) })
	s := backTest(m, nil, FitOptions{})
	if s.Band.Count != 18 || s.Eighty.Count != 17 {
		t.Errorf("got %d in the band and %d below P80, want 18 and 17", s.Band.Count, s.Eighty.Count)
	}
	near(t, "log score", s.LogScore, 0.8031717452721354, 1e-8)
	near(t, "gain", s.Gain, 0.31941813076259634, 1e-8)
	near(t, "error of the gain", s.GainError, 0.15580647678625392, 1e-8)
}

// Over 150 synthetic books of 28 jobs the leave-one-out bands hold within two
// percentage points of what they promise; the error of the mean is 0.4 points.
func TestLeaveOneOutHoldsNearNominal(t *testing.T) {
	const books = 150
	for _, tr := range []truth{
		{jobs: 28, bias: map[string]float64{Fabrication: 0.1}, deviation: 0.15},
		{jobs: 28, bias: map[string]float64{Fabrication: 0.1}, deviation: 0.15, between: 0.1},
		{jobs: 28, bias: map[string]float64{Fabrication: 0.1}, deviation: 0.1, between: 0.3},
	} {
		band, eighty := 0, 0
		for seed := range uint64(books) {
			all := measures(tr.draw(t, seed), false)
			s := backTest(all[slices.IndexFunc(all, func(m measure) bool { return m.name == Fabrication })], nil, FitOptions{})
			band, eighty = band+s.Band.Count, eighty+s.Eighty.Count
		}
		n := float64(books * tr.jobs)
		near(t, fmt.Sprintf("P10 to P90, kinds apart by %v", tr.between), float64(band)/n, 0.8, 0.02)
		near(t, fmt.Sprintf("P80, kinds apart by %v", tr.between), float64(eighty)/n, 0.8, 0.02)
	}
}

// Estimates that were right cannot be improved on: most books say so, and none of
// those that do worse recommends a cost multiplier.
func TestRightEstimatesAreLeftAlone(t *testing.T) {
	const books = 60
	worse, improved := 0, 0
	for seed := range uint64(books) {
		jobs := truth{jobs: 32, bias: map[string]float64{Fabrication: 0, Erection: 0}, shared: 0.12, deviation: 0.001, band: 0.12}.draw(t, seed)
		p := mustFit(t, jobs, FitOptions{})
		s := figureOf(t, p, FigureTotal).BackTest
		if s.Improves {
			improved++
		}
		if s.Gain >= 0 {
			continue
		}
		worse++
		if !strings.Contains(p.Statement, "does worse than the past estimates' own ranges") {
			t.Errorf("statement %q", p.Statement)
		}
		for _, c := range p.Changes {
			if c.Recommended && (c.Target == TargetMultiplier || c.Target == TargetSystemic) {
				t.Errorf("book %d does worse and recommends %s of %s", seed, c.Target, c.Name)
			}
		}
	}
	if !(worse > books/2 && improved < books/5) {
		t.Errorf("of %d books %d do worse and %d improve", books, worse, improved)
	}
}

func TestBiasedEstimatesAreImproved(t *testing.T) {
	jobs := truth{jobs: 32, bias: map[string]float64{Fabrication: 0.3, Erection: 0}, shared: 0.05, deviation: 0.08, band: 0.08}.draw(t, 4)
	p := mustFit(t, jobs, FitOptions{})
	for _, c := range p.Changes {
		if c.Target == TargetMultiplier && c.Recommended != (c.Name == Fabrication) {
			t.Errorf("%s for %q: recommended %v: %s", c.Name, c.SubjectKind, c.Recommended, c.Evidence)
		}
	}
	if !p.Recommended || !strings.Contains(p.Statement, "improves on") {
		t.Errorf("statement %q", p.Statement)
	}
}

// Hours have no earlier value unless one is handed in, and the test says so.
func TestHoursHaveNothingToCompareWith(t *testing.T) {
	jobs := truth{jobs: 24, bias: fiveCategories, deviation: 0.1}.draw(t, 6)
	for i := range jobs {
		jobs[i].ShopHours = jobs[i].WeighedMass / 1000 * 24 * math.Exp(0.01*float64(i%5-2))
	}
	s := scoreOf(t, jobs, FigureShop)
	if s.Unfitted != nil || s.Compared != 0 || !strings.Contains(s.Statement, "nothing to compare with") {
		t.Errorf("got %+v", s)
	}
	f := figureOf(t, mustFit(t, jobs, FitOptions{}), FigureShop)
	near(t, "shop hours per tonne", f.Median, 24, 0.2)
	if f.Unit != "h/t" {
		t.Errorf("unit %q", f.Unit)
	}
}
