package engine

import (
	"context"
	"fmt"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
)

// weighCarbon multiplies the quantities with the emission factors of the book and
// draws their range from the same assumptions.
func (r *run) weighCarbon(ctx context.Context) error {
	if len(r.job.Book.Carbon) == 0 {
		return nil
	}
	var err error
	if r.carbon, err = pricing.PriceCarbon(r.items, r.job.Book.Carbon); err != nil {
		return &RatesError{fmt.Errorf("carbon: %w", err)}
	}
	if len(r.carbon.Lines) == 0 {
		return nil
	}
	s := r.rangeSettings()
	s.Correlation = r.correlation(r.carbon.Model)
	s.Sensitivities, s.Percentiles = false, []float64{0.1, 0.5, 0.9}
	res, err := ranges.Simulate(ctx, r.carbon.Model, s, nil)
	if err != nil {
		return rangeError(err)
	}
	r.carbonRange = &res
	return nil
}

// carbonOf is the carbon of the document; nil where the book has no factors.
func (r *run) carbonOf() *document.Carbon {
	if r.carbonRange == nil {
		return nil
	}
	c := &document.Carbon{
		Total: r.carbon.Total, Mean: document.Number(r.carbonRange.Mean),
		Method: "Quantities of the take-off times emission factors at likely values, modules A1-A3, A4 and A5 of EN 15978:2011 and EN 17472:2022; the range is simulated on the same draws of the take-off's allowances, without the systemic factor of cost",
		Exclusions: []string{
			"Modules B (use), C (end of life) and D (beyond the system boundary).",
			"Biogenic carbon, land use and offsets.",
			"Equipment, cladding and everything else that the estimate excludes.",
		},
	}
	for _, m := range sortedKeys(r.carbon.Modules) {
		c.Modules = append(c.Modules, document.CarbonModule{Module: m, Amount: r.carbon.Modules[m]})
	}
	for _, l := range r.carbon.Lines {
		c.Lines = append(c.Lines, document.CarbonLine{
			ID: l.ID, Item: l.Item, Group: l.Group, Module: l.Category, Driver: string(l.Driver), Quantity: l.Quantity, Unit: l.Unit,
			FactorID: l.RateID, Factor: l.Rate, Amount: l.Amount, Assumptions: l.Assumptions,
		})
	}
	for _, p := range r.carbonRange.Percentiles {
		c.Percentiles = append(c.Percentiles, document.CarbonPoint{P: document.Number(p.P), Value: document.Number(p.Value), SE: document.Number(p.SE)})
	}
	delivered := 0.0
	for _, it := range r.items {
		delivered += it.Delivered.Float64()
	}
	if delivered > 0 {
		c.PerTonne = document.Number(c.Total.Float64() / delivered)
	}
	return c
}

// carbonEntries are the register entries of the emission factors.
func (r *run) carbonEntries() []assumption.Entry {
	var out []assumption.Entry
	for _, f := range r.job.Book.Carbon {
		out = append(out, r.entryOf(pricing.CarbonID(f), assumption.Rate,
			fmt.Sprintf("Emissions of %s, module %s, per unit of %s", f.ID, f.Module, f.Driver), "kg CO₂e/"+f.Driver.Unit(), f.Figure))
	}
	return out
}
