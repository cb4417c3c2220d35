package engine

import (
	"context"
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
)

// Joint simulates several jobs on common draws, each on this engine, with the
// sampling and correlation of the first.
func Joint(ctx context.Context, jobs []job.Job) (ranges.Comparison, error) {
	var models []pricing.Model
	var settings ranges.Settings
	correlation := map[string]float64{}
	for i, j := range jobs {
		j.EngineVersion, j.Data = document.EngineVersion, Data()
		sized, err := Size(ctx, j, nil)
		if err != nil {
			return ranges.Comparison{}, fmt.Errorf("scheme %s: %w", j.Settings.Scheme, err)
		}
		p, err := sized.Price(ctx, j)
		if err != nil {
			return ranges.Comparison{}, fmt.Errorf("scheme %s: %w", j.Settings.Scheme, err)
		}
		if i == 0 {
			settings = p.Settings
		}
		for g, rho := range p.Settings.Correlation {
			if _, ok := correlation[g]; !ok {
				correlation[g] = rho
			}
		}
		models = append(models, p.Model)
	}
	settings.Sensitivities, settings.Correlation = false, correlation
	c, err := ranges.Compare(ctx, models, settings)
	return c, rangeError(err)
}
