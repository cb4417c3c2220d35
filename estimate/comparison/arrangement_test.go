package comparison_test

import (
	"context"
	"fmt"
	"testing"

	"spanwright/estimate/calculator"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
)

func run(ctx context.Context, j job.Job) (document.Document, error) { return engine.Run(ctx, j, nil) }

// boom is the demo's loading boom, row LB1, as an arrangement study; loads invented.
func boom() calculator.ArrangementsRequest {
	return calculator.ArrangementsRequest{Length: 42, Loads: []calculator.BeamLoad{
		{Label: "conveyor", Kind: "uniform", Nature: "permanent", Load: 0.9}, {Label: "bulk", Kind: "uniform", Nature: "variable", Load: 1.2}},
		Towers: calculator.ArrangementTowers{Height: 8}, MemberLimits: calculator.MemberLimits{DeflectionLimit: 100},
		Steel: calculator.Steel{Candidates: []string{"CHS"}, Grade: "S355", Basis: calculator.Basis{DesignBasis: "allowable", Factor: 3}}}
}

func study(tb testing.TB, r calculator.ArrangementsRequest, keys map[string]any) comparison.ArrangementStudy {
	tb.Helper()
	s, found, err := calculator.StudyArrangements(context.Background(), r)
	if err != nil {
		tb.Fatal(err)
	}
	sch, err := comparison.ReadArrangementJob(context.Background(), keys, r.DesignBasis, r.Grade, r.YieldFactor())
	if err != nil {
		tb.Fatal(err)
	}
	return comparison.ArrangementStudy{Study: s, Candidates: found, Kind: "boom", Schedule: sch, Source: job.Source{Name: "study.json"},
		Book: ratebook.UnitRate(), Sampling: job.DefaultSampling(), Data: engine.Data()}
}

func TestPrint(t *testing.T) {
	s := study(t, boom(), map[string]any{"Estimate class": 4, "Currency": "EUR"})
	a, err := comparison.CompareArrangements(context.Background(), s, run, engine.Joint)
	if err != nil {
		t.Fatal(err)
	}
	fmt.Println(comparison.ArrangementText(a))
	for _, x := range a.Arrangements {
		fmt.Println(x.Name, x.Steel, x.PlanBracing, x.Utilisation, x.Governing)
		for _, p := range x.Parts {
			fmt.Printf("   %+v\n", p)
		}
		for _, n := range x.Notes {
			fmt.Println("      ", n)
		}
	}
	for _, c := range a.Comparison.Schemes {
		fmt.Print(c.ID)
		for _, k := range c.Categories {
			fmt.Print(" ", k.Category, " ", k.Amount)
		}
		fmt.Println(c.Net, c.Delivered, c.Findings, c.Class)
	}
}
