package comparison_test

import (
	"context"
	"flag"
	"os"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/calculator"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
	"spanwright/structural/action"
	"spanwright/structural/arrangement"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

var update = flag.Bool("update", false, "write the golden texts anew")

// quick is the smallest number of replicates with enough trials for a probability.
var quick = job.Sampling{Seed: 3, Replicates: 32, Trials: 512}

func run(ctx context.Context, j job.Job) (document.Document, error) { return engine.Run(ctx, j, nil) }

// boom is the demo's loading boom, row LB1, as an arrangement study; loads invented.
func boom() calculator.ArrangementsRequest {
	return calculator.ArrangementsRequest{Length: 42, Loads: []calculator.BeamLoad{
		{Label: "conveyor", Kind: "uniform", Nature: "permanent", Load: 0.9}, {Label: "bulk", Kind: "uniform", Nature: "variable", Load: 1.2}},
		Towers: calculator.ArrangementTowers{Height: 8}, MemberLimits: calculator.MemberLimits{DeflectionLimit: 100},
		Steel: calculator.Steel{Candidates: []string{"CHS"}, Grade: "S355", Basis: calculator.Basis{DesignBasis: "allowable", Factor: 3}}}
}

// jetty is a short boom with wind, a load on a part, a force, in limit states: its
// cantilever is feasible. Loads invented.
func jetty() calculator.ArrangementsRequest {
	return calculator.ArrangementsRequest{Length: 12, Loads: []calculator.BeamLoad{
		{Label: "conveyor", Kind: "uniform", Nature: "permanent", Load: 0.9}, {Label: "bulk", Kind: "uniform", Load: 1.2},
		{Label: "wind", Kind: "uniform", Direction: "horizontal", Load: 0.5}, {Label: "head", Kind: "point", Position: 12, Force: 4},
		{Label: "spillage", Kind: "linear", From: 2, To: 9, Load: 0.2, EndLoad: 0.6}},
		Towers: calculator.ArrangementTowers{Height: 8, Wind: 0.3}, MemberLimits: calculator.MemberLimits{DeflectionLimit: 100},
		Steel: calculator.Steel{Candidates: []string{"CHS"}, Grade: "S355", Basis: calculator.Basis{DesignBasis: "en1993"}}}
}

// study computes the ways of a request and joins them with the starting book.
func study(tb testing.TB, r calculator.ArrangementsRequest) comparison.ArrangementStudy {
	tb.Helper()
	s, found, err := calculator.StudyArrangements(context.Background(), r)
	if err != nil {
		tb.Fatal(err)
	}
	return comparison.ArrangementStudy{Study: s, Candidates: found, OwnRules: r.OwnRules(), Kind: "boom", Schedule: settings(tb, r.DesignBasis, r.Grade, r.YieldFactor()),
		Source: job.Source{Name: "study.json"}, Book: ratebook.UnitRate(), Sampling: quick, Data: engine.Data()}
}

func compare(tb testing.TB, s comparison.ArrangementStudy) comparison.ArrangementComparison {
	tb.Helper()
	a, err := comparison.CompareArrangements(context.Background(), s, run, engine.Joint)
	if err != nil {
		tb.Fatal(err)
	}
	return a
}

// sides prices the feasible ways of a study.
func sides(tb testing.TB, s comparison.ArrangementStudy) []comparison.Side {
	tb.Helper()
	jobs, err := s.Jobs()
	if err != nil {
		tb.Fatal(err)
	}
	var out []comparison.Side
	for _, j := range jobs {
		d, err := run(context.Background(), j)
		if err != nil {
			tb.Fatal(err)
		}
		out = append(out, comparison.Side{ID: j.Settings.Scheme, Job: j, Document: d})
	}
	return out
}

// byHand are two ways to hold 20 m under 1 kN/m, made up so that a person can price
// them: A is HEB 200 (61.3 kg/m, so 1.226 t) with 10 m³ of concrete, B is HEB 260
// (93.0 kg/m, so 1.860 t) with 4 m³, of which 1.5 m³ are ballast.
func byHand(tb testing.TB, steel, concrete spread.Spread) comparison.ArrangementStudy {
	tb.Helper()
	way := func(name, designation string, footing, ballast float64) arrangement.Candidate {
		sec, err := section.Find(designation)
		if err != nil {
			tb.Fatal(err)
		}
		c := arrangement.Candidate{Name: name, Kind: arrangement.EndTower, Feasible: true, Governing: "member: bending", Utilisation: 0.5,
			Result: sizing.Result{Section: sec, Passes: true}, Supports: []arrangement.Support{{Kind: beam.Pinned}, {X: 20, Kind: beam.Pinned}},
			Footings: []arrangement.Footing{{Count: 2, Width: 1, Depth: 1, Volume: footing / 2, Governs: "bearing"}},
			Mass:     arrangement.Mass{Member: 20 * sec.Mass, Steel: 20 * sec.Mass, Ballast: 2400 * ballast}}
		if ballast > 0 {
			c.Ballast = &arrangement.Ballast{Mass: 2400 * ballast, Volume: ballast, Density: 2400, Arm: 5}
		}
		return c
	}
	grade, err := material.Find("S355")
	if err != nil {
		tb.Fatal(err)
	}
	basis, err := resistance.EN1993(resistance.Partial{})
	if err != nil {
		tb.Fatal(err)
	}
	strength, service, err := action.Sets("en1993")
	if err != nil {
		tb.Fatal(err)
	}
	s := comparison.ArrangementStudy{Kind: "beam", Schedule: settings(tb, "en1993", "S355", 0), Source: job.Source{Name: "by hand"}, Book: handBook(steel, concrete), Sampling: quick, Data: engine.Data()}
	s.Study = arrangement.Study{Setup: sizing.Setup{Basis: basis, Grade: grade, Strength: strength, Service: service, Gravity: 9.80665},
		Member: sizing.Member{Length: 20, RestraintSpacing: 2, Actions: []action.Action{{Kind: action.Uniform, Value: 1000}, {Kind: action.Uniform, Value: 100, Direction: action.Horizontal}}}}
	s.Candidates = []arrangement.Candidate{way("A", "HEB 200", 10, 0), way("B", "HEB 260", 2.5, 1.5),
		{Name: "C", Kind: arrangement.Cantilever, Reason: "member: no section passes", Supports: []arrangement.Support{{}}}}
	return s
}

// handBook prices net tonnes and cubic metres and nothing else, without allowances.
func handBook(steel, concrete spread.Spread) ratebook.Book {
	figure := func(s spread.Spread) ratebook.Figure {
		return ratebook.Figure{Spread: s, Source: "invented for the test", Author: "test", Confidence: "medium"}
	}
	b := ratebook.UnitRate()
	b.Norms, b.Carbon, b.Bands, b.Site = nil, nil, nil, nil
	b.Rates = []ratebook.Rate{
		{ID: "steel", Category: ratebook.Material, Driver: ratebook.NetTonnes, Figure: figure(steel)},
		{ID: "concrete", Category: ratebook.Foundations, Driver: ratebook.CubicMetres, Figure: figure(concrete)},
	}
	return b
}

func settings(tb testing.TB, basis, grade string, factor float64) schedule.Schedule {
	tb.Helper()
	out, err := comparison.ReadArrangementJob(context.Background(), map[string]any{"Project": "Brackwater loading quay", "Estimate class": 4, "Currency": "EUR"}, basis, grade, factor)
	if err != nil {
		tb.Fatal(err)
	}
	return out
}

// golden holds a text against a committed one.
func golden(t *testing.T, file, got string) {
	t.Helper()
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(string(want), got); d != "" {
		t.Errorf("%s differs (-want +got):\n%s", file, d)
	}
}
