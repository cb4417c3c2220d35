package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
	"spanwright/estimate/comparison"
)

const tagExplaining = "Comparisons and bridges"

type newComparison struct{ Body service.NewComparison }

func (a *api) comparisons() {
	o := computed("/v1/comparisons", "compare-estimates", tagExplaining, "Compare estimates by their whole range",
		"2 to 16 estimates in one currency, simulated together on common draws: what each costs, weighs and emits, what is unsafe in it, the probability that one is cheaper than another, and the difference trial by trial. "+
			"With Accept: text/plain as a table. It is computed at each call and given up when the caller goes.",
		http.StatusNotFound, http.StatusConflict, http.StatusNotAcceptable)
	o.Responses["200"] = a.orText("the comparison", comparison.Comparison{})
	register(a, o, func(ctx context.Context, r *request, in *newComparison) (*content, error) {
		return textual(r, "no-store", comparison.Text, func() (comparison.Comparison, error) {
			return a.service.Compare(ctx, r.Actor, in.Body)
		})
	})
}
