package api

import (
	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/bridge"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/trace"
)

// exampleOther is the second estimate where two are asked about.
var exampleOther = uuid.MustParse("01980000-0000-7000-8000-000000000002")

// explanationExamples are what is asked about estimates and answered, with invented
// figures, cut short.
func explanationExamples() map[string]any {
	d := exampleDocument()
	tree, _ := trace.Build(d, d.Lines[0].ID, 2) // the figure is there, and a test reads the example
	tidal := service.PreviewMultiplier{Name: "tidal work", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewPERT(1.05, 1.15, 1.4)}
	return map[string]any{
		"TraceNode": tree, "TraceSummaryItems": Items[trace.Summary]{trace.Figures(d)},
		"NewPreview": service.NewPreview{Multipliers: []service.PreviewMultiplier{tidal}}, "Preview": examplePreview(),
		"NewComparison": service.NewComparison{Estimates: []uuid.UUID{exampleID, exampleOther}}, "Comparison": exampleComparison(d),
		"NewBridge": service.NewBridge{From: exampleID, To: exampleOther}, "Bridge": exampleBridge(),
	}
}

func examplePreview() service.Preview {
	side := func(base, at, contingency string, p80 document.Number) service.PreviewTotals {
		return service.PreviewTotals{Base: amount(base), AtConfidence: amount(at), Contingency: amount(contingency), Mean: p80 - 470, MeanSE: 6, SD: 560, BaseAt: 0.36,
			Percentiles: []document.Percentile{{P: 0.8, Value: p80, SE: 11, Contingency: amount(contingency)}}}
	}
	return service.Preview{Caution: document.Caution, Estimate: exampleID, Currency: "EUR", Confidence: 0.8,
		Before: side("3240.00", "3980.00", "740.00", 3980), After: side("3400.00", "4190.00", "790.00", 4190),
		Change:      service.PreviewChange{Base: amount("160.00"), AtConfidence: amount("210.00"), Contingency: amount("50.00")},
		Categories:  []service.PreviewCategory{{Category: ratebook.Erection, Before: amount("1066.67"), After: amount("1226.67"), Change: amount("160.00")}},
		Multipliers: []service.PreviewMultiplied{{Assumption: "multiplier/tidal work/project", Acts: true}}, Replicates: 8, Trials: 1024, StoredDraws: true,
		Method: "Base and categories are priced exactly, as a new estimate would be. The range is a preview from 8192 trials."}
}

func exampleComparison(d document.Document) comparison.Comparison {
	first, second := exampleID.String(), exampleOther.String()
	scheme := func(id, name string, odds document.Number) comparison.Scheme {
		return comparison.Scheme{ID: id, Project: d.Job.Project, Scheme: name, Base: d.Totals.Base, Contingency: d.Totals.Contingency, Total: d.Totals.AtConfidence,
			Confidence: d.Totals.Confidence, Percentiles: d.Range.Percentiles, Categories: d.Categories, Net: d.Totals.Net, Delivered: d.Totals.Delivered,
			Cheapest: comparison.Probability{Value: odds, SE: 0.002}, Unsafe: []string{}, Class: 4}
	}
	return comparison.Comparison{Caution: document.Caution, Currency: "EUR", Money: "base date",
		Schemes: []comparison.Scheme{scheme(first, "Two trestles", 0.71), scheme(second, "One trestle", 0.29)},
		Pairs: []comparison.Pair{{First: first, Second: second, Cheaper: comparison.Probability{Value: 0.71, SE: 0.002}, Base: amount("-120.00"),
			Difference: comparison.Difference{Mean: -130, MeanSE: 1.2, Percentiles: []comparison.Percentile{{P: 0.5, Value: -126, SE: 1.5}}},
			Sentence:   "Two trestles is cheaper than One trestle with a probability of 71 %."}},
		Method: "All schemes simulated with the seed and sampling of the first.", Notes: []string{}}
}

func exampleBridge() bridge.Bridge {
	end := func(scheme, base, total, contingency string) bridge.End {
		return bridge.End{Project: "Brackwater loading quay", Scheme: scheme, Source: "quay.csv", JobSHA256: exampleSum, EngineVersion: document.EngineVersion,
			BaseDate: "2026-06-01", Confidence: 0.8, Base: amount(base), Contingency: amount(contingency), Total: amount(total)}
	}
	return bridge.Bridge{From: end("Two trestles", "3240.00", "3980.00", "740.00"), To: end("Two trestles", "3400.00", "4190.00", "790.00"), Currency: "EUR", Change: amount("210.00"),
		Shares: []bridge.Share{{Cause: bridge.Multiplier, Amount: amount("210.00"), SE: 4, Groups: []bridge.GroupShare{{Group: "Beams", Amount: amount("160.00")}},
			Contingency: amount("50.00"), Moved: []string{"multiplier/tidal work/project new (1.15)"}, Sentence: "Multiplier raises the cost by 210.00 EUR."}},
		Groups: []bridge.GroupShare{{Group: "Beams", Amount: amount("160.00")}}, Runs: 2, Method: "Shapley shares of base and contingency", Notes: []string{}}
}
