package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
	"spanwright/estimate/calculator"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
)

// arrangementPrices compares the ways to hold a length in money.
func (a *api) arrangementPrices() {
	o := computed("/v1/comparisons/arrangements", "compare-arrangements", tagExplaining, "Compare ways to hold a length by their whole range",
		"Works out the ways of an arrangement study, prices each feasible one with its towers, ballast and footings, and simulates all on common draws: base, range, probability that it is the cheapest, difference of each two. "+
			"Those that are not feasible are listed with their reason. With Accept: text/plain as a table.",
		http.StatusForbidden, http.StatusNotFound, http.StatusNotAcceptable)
	o.Responses["200"] = a.orText("the comparison of the ways", comparison.ArrangementComparison{})
	register(a, o, func(ctx context.Context, r *request, in *posted[service.NewArrangementComparison]) (*content, error) {
		return textual(r, "no-store", comparison.ArrangementText, func() (comparison.ArrangementComparison, error) {
			return a.service.CompareArrangements(ctx, r.Actor, in.Body)
		})
	})
}

// arrangementPriceExamples are the loading quay's boom with invented loads, and an
// answer cut short; its amounts are invented.
func arrangementPriceExamples() map[string]any {
	const inner, spans = "inner support at 0.667 of the length", "3 equal spans"
	percentiles := func(p50, p80 document.Number) []document.Percentile {
		return []document.Percentile{{P: 0.5, Value: p50, SE: 60, Contingency: amount("4000.00")}, {P: 0.8, Value: p80, SE: 110, Contingency: amount("19400.00")}}
	}
	scheme := func(name, base string, mean, p50, p80, cheapest document.Number) comparison.Scheme {
		return comparison.Scheme{ID: name, Project: "Brackwater loading quay", Scheme: name, Base: amount(base), Contingency: amount("19400.00"), Total: amount("83900.00"),
			Confidence: 0.8, Mean: mean, Percentiles: percentiles(p50, p80), Categories: []document.Category{}, Net: amount("2.545"), Delivered: amount("3.090"),
			Cheapest: comparison.Probability{Value: cheapest, SE: 0.001}, Unsafe: []string{}, Class: 4}
	}
	way := func(name, kind, section string, steel, footings document.Number) comparison.PricedArrangement {
		return comparison.PricedArrangement{Name: name, Kind: kind, Priced: true, Feasible: true, WaysOut: []string{}, Section: section, Steel: steel, Footings: footings,
			Deflection: 43, Governing: "member: bending", Utilisation: 0.91, Notes: []string{},
			Parts: []comparison.ArrangedPart{{Mark: "MAIN", Group: "Main member", Quantity: 1, Section: section, Net: steel, Passes: true, Governing: "bending", Utilisation: 0.91}}}
	}
	return map[string]any{
		"NewArrangementComparison": service.NewArrangementComparison{Kind: "boom", RateBook: "unit-rate", Job: map[string]any{"Currency": "EUR", "Estimate class": 4}, Replicates: 32, Trials: 1024,
			Study: calculator.ArrangementsRequest{Length: 42, Towers: calculator.ArrangementTowers{Height: 8}, Kinds: []string{"inner support", "equal spans"}, Spans: []int{3},
				Loads: []calculator.BeamLoad{{Label: "conveyor", Kind: "uniform", Nature: "permanent", Load: 0.9}, {Label: "bulk", Kind: "uniform", Load: 1.2}},
				Steel: calculator.Steel{Candidates: []string{"CHS"}, Grade: "S355", Basis: calculator.Basis{DesignBasis: "allowable", Factor: 3}}}},
		"ComparisonArrangementComparison": comparison.ArrangementComparison{
			Arrangements: []comparison.PricedArrangement{way(spans, "equal spans", "CHS 323.9x6", 2545, 7), way(inner, "inner support", "CHS 610x12", 7758, 3)},
			Notes:        []string{"Lumps come once a job whatever the number of supports, which favours many of them."},
			Comparison: comparison.Comparison{Caution: document.Caution, Currency: "EUR", Money: "base-date money of 2026-06-01, net of taxes", Method: "common draws", Notes: []string{},
				Schemes: []comparison.Scheme{scheme(spans, "64462.31", 70500, 68500, 83900, 1), scheme(inner, "95791.97", 105000, 102000, 125000, 0)},
				Pairs: []comparison.Pair{{First: spans, Second: inner, Cheaper: comparison.Probability{Value: 1}, Dearer: comparison.Probability{}, Base: amount("-31329.66"),
					Difference: comparison.Difference{Mean: -34100, MeanSE: 40, Percentiles: []comparison.Percentile{{P: 0.5, Value: -33000, SE: 50}}},
					Sentence:   spans + " is cheaper than " + inner + " with a probability of more than 99 %."}}},
		},
	}
}
