package calibration

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// truth is what synthetic jobs are drawn from.
type truth struct {
	jobs      int
	bias      map[string]float64 // mean of the log ratio by category
	deviation float64            // of a category's own part
	shared    float64            // of the part that all categories of a job share
	between   float64            // of kinds
	mass      float64            // mean of ln(weighed/take-off)
	massDev   float64
	priced    bool    // jobs state the delivered mass that they were priced on
	band      float64 // log-deviation that the past estimates believed, 0 for no range
}

// draw makes jobs with known truth, the same for the same seed.
func (tr truth) draw(t testing.TB, seed uint64) []Comparable {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 1))
	shift := map[string]float64{}
	for _, k := range kinds {
		shift[k] = tr.between * r.NormFloat64()
	}
	var list []Comparable
	for i := range tr.jobs {
		j := Comparable{Job: fmt.Sprintf("job %03d", i), Completed: "2024-01-01", Kind: kinds[i%len(kinds)], Class: "4", ScopeShare: 1,
			TakeOffMass: math.Round(1000 * math.Exp(3+r.NormFloat64()))}
		j.WeighedMass = j.TakeOffMass * math.Exp(tr.mass+tr.massDev*r.NormFloat64())
		if tr.priced {
			j.DeliveredMass = j.TakeOffMass * 1.1
		}
		shared := tr.shared * r.NormFloat64()
		for _, c := range categories {
			bias, there := tr.bias[c]
			if !there {
				continue
			}
			estimate := j.TakeOffMass * 2
			cost := estimate * math.Exp(bias+shift[j.Kind]+shared+tr.deviation*r.NormFloat64())
			if tr.priced {
				cost *= j.WeighedMass / j.DeliveredMass
			}
			a := Amount{c, decimal(t, estimate), decimal(t, cost)}
			j.Amounts = append(j.Amounts, a)
			j.Estimate, j.Outturn = j.Estimate.Add(a.Estimate), j.Outturn.Add(a.Outturn)
		}
		if tr.band > 0 {
			for p, z := range map[int]float64{10: -1.2815515655446004, 50: 0, 80: 0.8416212335729143, 90: 1.2815515655446004} {
				j.Percentiles = append(j.Percentiles, Percentile{p, decimal(t, j.Estimate.Float64()*math.Exp(tr.band*z))})
			}
			slices.SortFunc(j.Percentiles, func(a, b Percentile) int { return a.Percent - b.Percent })
		}
		list = append(list, j)
	}
	return list
}

func decimal(t testing.TB, x float64) money.Decimal {
	t.Helper()
	d, err := money.FromFloat(x, 2)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

var fiveCategories = map[string]float64{Material: 0, Fabrication: 0.10, Coating: -0.05, Shipping: 0, Erection: 0.20}

func mustFit(t testing.TB, jobs []Comparable, o FitOptions) Proposal {
	t.Helper()
	p, err := Fit(jobs, o)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func figureOf(t testing.TB, p Proposal, name string) Figure {
	t.Helper()
	i := slices.IndexFunc(p.Figures, func(f Figure) bool { return f.Name == name })
	if i < 0 {
		t.Fatalf("no figure %s", name)
	}
	return p.Figures[i]
}

func TestNineteenRefusedTwentyAccepted(t *testing.T) {
	jobs := truth{jobs: 20, bias: fiveCategories, deviation: 0.1}.draw(t, 1)
	left := []Left{{"Ferry ramp", []string{"no exchange rate from NOK to EUR holds on 2026-01-01: none is dated before"}}}
	_, err := Fit(jobs[:19], FitOptions{Left: left})
	var few *TooFewError
	if !errors.As(err, &few) || few.Found != 19 {
		t.Fatalf("19 jobs: got %v", err)
	}
	want := "19 comparable jobs were found and at least 20 are needed; 1 was left out: Ferry ramp: no exchange rate from NOK to EUR holds on 2026-01-01: none is dated before"
	if err.Error() != want {
		t.Errorf("got %q, want %q", err, want)
	}
	if _, err := BackTest(jobs[:19], FitOptions{}); !errors.As(err, &few) {
		t.Errorf("back-test of 19 jobs: got %v", err)
	}
	mustFit(t, jobs, FitOptions{})
}

func TestFiguresOfFewJobsAreListed(t *testing.T) {
	jobs := truth{jobs: 24, bias: fiveCategories, deviation: 0.1}.draw(t, 2)
	for i := range 5 {
		jobs[i].Amounts = slices.DeleteFunc(slices.Clone(jobs[i].Amounts), func(a Amount) bool { return a.Category == Coating })
	}
	p := mustFit(t, jobs, FitOptions{})
	if diff := cmp.Diff([]Left{{Coating, []string{"19 jobs have it and at least 20 are needed"}}}, p.Unfitted); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// Over 200 synthetic books the mean of what is recovered lies within 4 standard
// errors of the truth, and one book within the error that theory gives it.
func TestRecoversBiasAndDeviation(t *testing.T) {
	const books = 200
	tr := truth{jobs: 40, bias: fiveCategories, deviation: 0.12, shared: 0.09, mass: 0.14, massDev: 0.05}
	var erection, mass, shared, within []float64
	for seed := range uint64(books) {
		p := mustFit(t, tr.draw(t, seed), FitOptions{})
		f := figureOf(t, p, Erection)
		erection = append(erection, math.Log(f.Median))
		within = append(within, f.Within*f.Within)
		mass = append(mass, math.Log(figureOf(t, p, FigureMass).Median))
		shared = append(shared, p.Shared.Deviation*p.Shared.Deviation)
	}
	for _, c := range []struct {
		name  string
		got   []float64
		truth float64
		least float64 // standard deviation of one book by theory, the least it can be
	}{
		{"erection bias", erection, 0.20, 0.15 / math.Sqrt(40)},
		{"mass factor", mass, 0.14, 0.05 / math.Sqrt(40)},
		{"variance within", within, 0.15 * 0.15, 0.15 * 0.15 * math.Sqrt(2.0/36)},
		{"shared variance", shared, 0.09 * 0.09, 0.09 * 0.09 * math.Sqrt(2.0/36)},
	} {
		mean, squares := moments(c.got)
		deviation := math.Sqrt(squares / (books - 1))
		if e := deviation / math.Sqrt(books); math.Abs(mean-c.truth) > 4*e {
			t.Errorf("%s: mean of %d books %v, want %v within 4·%v", c.name, books, mean, c.truth, e)
		}
		if !(deviation > 0.8*c.least && deviation < 2*c.least) {
			t.Errorf("%s: deviation of one book %v, theory %v", c.name, deviation, c.least)
		}
	}
}

// A kind with few jobs is moved far to the pooled centre, one with many hardly; the
// shrunk centres are nearer to the truth than the kinds' own means.
func TestShrinkingPays(t *testing.T) {
	own, shrunk := 0.0, 0.0
	for seed := range uint64(100) {
		r := rand.New(rand.NewPCG(seed, 7))
		var samples []sample
		real := map[string]float64{}
		for k := range 6 {
			kind := string(rune('a' + k))
			real[kind] = 0.1 + 0.05*r.NormFloat64()
			for i := range 2 + k {
				samples = append(samples, sample{fmt.Sprint(kind, i), kind, real[kind] + 0.15*r.NormFloat64()})
			}
		}
		for _, g := range shrink(samples).groups {
			own += (g.mean - real[g.kind]) * (g.mean - real[g.kind])
			shrunk += (g.centre - real[g.kind]) * (g.centre - real[g.kind])
		}
	}
	if !(shrunk < 0.6*own) {
		t.Errorf("squared error after shrinking %v, of own means %v", shrunk, own)
	}
}

func TestPerTonneKeepsTheMassOut(t *testing.T) {
	tr := truth{jobs: 40, bias: fiveCategories, deviation: 0.05, mass: math.Log(1.32), massDev: 0.04, priced: true}
	p := mustFit(t, tr.draw(t, 3), FitOptions{})
	near(t, "fabrication per tonne", math.Log(figureOf(t, p, Fabrication).Median), 0.10, 4*0.05/math.Sqrt(40))
	near(t, "mass", math.Log(figureOf(t, p, FigureMass).Median), math.Log(1.32), 4*0.04/math.Sqrt(40))
	near(t, "total", math.Log(figureOf(t, p, FigureTotal).Median), math.Log(1.2)+0.05, 0.05)
	for _, c := range p.Changes {
		if len(c.Excludes) > 0 {
			t.Errorf("%s of %s excludes %v", c.Target, c.Name, c.Excludes)
		}
	}
	tr.priced = false
	p = mustFit(t, tr.draw(t, 3), FitOptions{})
	for _, c := range p.Changes {
		want := map[string][]string{TargetMultiplier: {TargetAllowance}, TargetAllowance: {TargetMultiplier}}[c.Target]
		if diff := cmp.Diff(want, c.Excludes); diff != "" {
			t.Errorf("%s of %s (-want +got):\n%s", c.Target, c.Name, diff)
		}
	}
}

// The spread proposed for a multiplier leaves the shared scatter to the systemic
// factor: variances add up to the whole prediction's, and nothing is padded twice.
func TestSharedScatterIsCountedOnce(t *testing.T) {
	p := mustFit(t, truth{jobs: 60, bias: fiveCategories, deviation: 0.10, shared: 0.12}.draw(t, 5), FitOptions{})
	logDeviation := func(s spread.Spread) float64 { return math.Log(s.High/s.Low) / 2 / 1.2815515655446004 }
	f := figureOf(t, p, Fabrication)
	for _, c := range p.Changes {
		if c.Name != Fabrication {
			continue
		}
		i := slices.IndexFunc(f.Kinds, func(k KindFit) bool { return k.Kind == c.SubjectKind })
		widen := widening(f.Kinds[i].Freedom)
		whole, own := logDeviation(f.Kinds[i].Prediction)/widen, logDeviation(c.New)/widen
		near(t, c.SubjectKind, own*own+p.Shared.Deviation*p.Shared.Deviation, whole*whole, 1e-8)
		near(t, c.SubjectKind+" median", c.New.Base(), f.Kinds[i].Median, 1e-8)
	}
}

func TestOldSpreadsAreScaledAndShown(t *testing.T) {
	jobs := truth{jobs: 24, bias: fiveCategories, deviation: 0.05}.draw(t, 8)
	plain := mustFit(t, jobs, FitOptions{})
	priced := mustFit(t, jobs, FitOptions{Current: []Current{{TargetMultiplier, Erection, "", spread.NewTriangular(1.1, 1.25, 1.6)},
		{TargetMultiplier, Erection, "lattice", spread.NewFixed(2)}, {TargetAllowance, FigureMass, "", spread.NewFixed(1.08)}}, Systemic: map[string]float64{"5": 0.25, "4": 0.18}})
	for i, c := range plain.Changes {
		if c.Target == TargetSystemic {
			break
		}
		with, factor := priced.Changes[i], 1.0
		switch {
		case c.Name == Erection && c.SubjectKind == "lattice":
			factor = 2
		case c.Name == Erection:
			factor = 1.25
		case c.Name == FigureMass && (c.Old != nil || with.Old.Base() != 1.08):
			t.Errorf("mass: old %v and %v", c.Old, with.Old)
		}
		near(t, c.Name+" "+c.SubjectKind, with.New.High, c.New.High*factor, 1e-8)
		if c.Target == TargetMultiplier {
			near(t, c.Name+" old", with.Old.Base(), factor, 0)
		}
	}
	last := priced.Changes[len(priced.Changes)-1]
	if last.Target != TargetSystemic || last.Class != "5" || !(last.New.High > priced.Changes[len(priced.Changes)-2].New.High) {
		t.Errorf("systemic: got %+v", last)
	}
	near(t, "systemic of the jobs' class", math.Log(priced.Changes[len(priced.Changes)-2].New.High), 1.2815515655446004*priced.Shared.Widened, 1e-8)
}

func TestProposalsAreSoundSpreads(t *testing.T) {
	list, left, err := Normalise(demo(t), demoBasis(t))
	if err != nil {
		t.Fatal(err)
	}
	p := mustFit(t, list, FitOptions{Left: left})
	if len(p.Changes) < 40 {
		t.Errorf("got %d changes", len(p.Changes))
	}
	for _, c := range p.Changes {
		if err := c.New.Validate(); err != nil || !(c.New.Low < c.New.Base() && c.New.Base() < c.New.High) {
			t.Errorf("%s %s: %+v %v", c.Name, c.SubjectKind, c.New, err)
		}
		if c.Evidence == "" || c.Jobs == 0 {
			t.Errorf("%s %s has no evidence", c.Name, c.SubjectKind)
		}
	}
	t.Log(p.Statement)
	t.Log(Coverage(list).Verdict)
}

func TestPermutationChangesNoByte(t *testing.T) {
	list, left, err := Normalise(demo(t), demoBasis(t))
	if err != nil {
		t.Fatal(err)
	}
	o := FitOptions{Left: left, Systemic: map[string]float64{"5": 0.25, "4": 0.18, "3": 0.11, "2": 0.08, "1": 0.06}}
	want, digest, err := mustFit(t, list, o).Canonical()
	if err != nil {
		t.Fatal(err)
	}
	r := rand.New(rand.NewPCG(1, 2))
	for range 5 {
		r.Shuffle(len(list), func(i, j int) { list[i], list[j] = list[j], list[i] })
		got, d, err := mustFit(t, list, o).Canonical()
		if err != nil {
			t.Fatal(err)
		}
		if d != digest || string(got) != string(want) {
			t.Fatal("the order of the jobs changes the proposal")
		}
	}
	list[0].WeighedMass *= 1.0001
	if _, d, _ := mustFit(t, list, o).Canonical(); d == digest {
		t.Error("another mass leaves the same digest")
	}
}

func TestOptionsThatCannotBe(t *testing.T) {
	jobs := truth{jobs: 20, bias: fiveCategories, deviation: 0.1}.draw(t, 1)
	none := slices.Clone(jobs)
	none[4].WeighedMass = math.NaN()
	for _, c := range []struct {
		jobs []Comparable
		o    FitOptions
		word string
	}{
		{jobs, FitOptions{Current: []Current{{TargetMultiplier, Erection, "", spread.NewTriangular(2, 1, 3)}}}, "/current/0/spread"},
		{jobs, FitOptions{Current: []Current{{TargetMultiplier, Erection, "", spread.NewFixed(0)}}}, "above 0"},
		{jobs, FitOptions{Current: []Current{{TargetMultiplier, "erecton", "", spread.NewFixed(1)}}}, "did you mean erection?"},
		{jobs, FitOptions{Current: []Current{{"allowances", Erection, "", spread.NewFixed(1)}}}, "/current/0"},
		{jobs, FitOptions{Systemic: map[string]float64{"4": math.NaN()}}, "/systemic/4"},
		{append(slices.Clone(jobs), jobs[3]), FitOptions{}, "stands in the list twice"},
		{none, FitOptions{}, "no tonnage"},
	} {
		if _, err := Fit(c.jobs, c.o); err == nil || !strings.Contains(err.Error(), c.word) {
			t.Errorf("got %v, want %q", err, c.word)
		}
	}
}

// Past ranges far too narrow speak against a narrower systemic factor.
func TestNarrowRangesStopANarrowerSystemicFactor(t *testing.T) {
	tr := truth{jobs: 40, bias: map[string]float64{Fabrication: 0.2, Erection: 0.2}, shared: 0.1, deviation: 0.02, band: 0.02}
	o := FitOptions{Systemic: map[string]float64{"4": 0.4}}
	systemic := func(o FitOptions) Change {
		p := mustFit(t, tr.draw(t, 9), o)
		return p.Changes[len(p.Changes)-1]
	}
	if c := systemic(o); c.Recommended || !strings.Contains(c.Evidence, "not recommended, because past ranges held too seldom") {
		t.Errorf("narrower: %+v", c)
	}
	o.Systemic["4"] = 0.05
	if c := systemic(o); !c.Recommended || !(c.New.High > c.Old.High) {
		t.Errorf("wider: %+v", c)
	}
}
