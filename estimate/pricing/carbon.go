package pricing

import (
	"fmt"
	"slices"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// CarbonPriced is the embodied carbon of a job, kg of CO₂ equivalent.
type CarbonPriced struct {
	Lines   []Line                   // Category is the module, RateID the emission factor, Amount in whole kg
	Modules map[string]money.Decimal // sums of the rounded lines
	Total   money.Decimal
	Model   Model // in kg
	Notes   []Note
}

// PriceCarbon prices items with emission factors, as Price does with rates: the
// quantity times the factor, each line rounded to the kilogram, half away from
// zero. No multiplier acts on it. Lines are named carbon/{item}/{factor}.
func PriceCarbon(items []takeoff.Item, factors []ratebook.CarbonFactor) (CarbonPriced, error) {
	rates := make([]ratebook.Rate, len(factors))
	modules := map[string]bool{}
	for i, f := range factors {
		rates[i] = ratebook.Rate{ID: f.ID, Category: f.Module, Driver: f.Driver, Figure: f.Figure, Select: f.Select}
		modules[f.Module] = true
	}
	p := newPricer(items, rates, nil, sortedKeys(modules), ratebook.Place{})
	p.line = "carbon/"
	p.entry = func(r ratebook.Rate) string { return CarbonID(ratebook.CarbonFactor{ID: r.ID}) }
	p.places, p.minor = ratePlaces, 0
	for _, f := range factors {
		if f.Driver == ratebook.CostOf || f.Driver == ratebook.Lump {
			p.fault(fmt.Errorf("%s: found the driver %s; accepted: one that a take-off counts", CarbonID(f), f.Driver))
		}
	}
	if err := p.run(p.categories); err != nil {
		return CarbonPriced{}, err
	}
	model, err := p.compiler.model(takeoff.Allowance{}, nil)
	if err != nil {
		return CarbonPriced{}, err
	}
	out := CarbonPriced{Lines: p.ordered(), Modules: p.sums, Model: model, Notes: slices.Clip(p.sortedNotes())}
	for _, m := range sortedKeys(p.sums) {
		out.Total = out.Total.Add(p.sums[m])
	}
	return out, nil
}
