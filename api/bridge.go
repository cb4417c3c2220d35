package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
	"spanwright/estimate/bridge"
)

type newBridge struct{ Body service.NewBridge }

func (a *api) bridges() {
	o := computed("/v1/bridges", "bridge-estimates", tagExplaining, "Explain the change between two estimates",
		"The change of base and contingency between any two estimates in one currency, shared out to its causes with nothing left over, by member group and as sentences. "+
			"With Accept: text/plain as a table with the sentences. Every combination of the causes that differ is priced and simulated, so that many causes take long; it is computed at each call and given up when the caller goes.",
		http.StatusNotFound, http.StatusConflict, http.StatusNotAcceptable)
	o.Responses["200"] = a.orText("the bridge", bridge.Bridge{})
	register(a, o, func(ctx context.Context, r *request, in *newBridge) (*content, error) {
		return textual(r, "no-store", bridge.Text, func() (bridge.Bridge, error) {
			return a.service.Bridge(ctx, r.Actor, in.Body)
		})
	})
}
