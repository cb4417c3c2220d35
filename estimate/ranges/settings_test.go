package ranges

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

func TestSettingsRefused(t *testing.T) {
	for _, c := range []struct {
		s     Settings
		field string
	}{
		{Settings{Replicates: 31}, "replicates"}, {Settings{Replicates: -1}, "replicates"}, {Settings{Replicates: MaxReplicates + 1}, "replicates"},
		{Settings{Trials: 15}, "trials"}, {Settings{Trials: MaxTrials + 1}, "trials"}, {Settings{Trials: MaxTrials, Replicates: 32}, "replicates × trials"},
		{Settings{Workers: -1}, "workers"}, {Settings{Workers: MaxWorkers + 1}, "workers"},
		{Settings{Percentiles: []float64{0.1, 80}}, "percentiles[1]"}, {Settings{Percentiles: []float64{math.NaN()}}, "percentiles[0]"},
		{Settings{Percentiles: []float64{0}}, "percentiles[0]"}, {Settings{Percentiles: []float64{1}}, "percentiles[0]"},
		{Settings{Correlation: map[string]float64{"g": 1}}, `correlation["g"]`}, {Settings{Correlation: map[string]float64{"g": -0.1}}, `correlation["g"]`},
		{Settings{Correlation: map[string]float64{"g": math.NaN()}}, `correlation["g"]`},
	} {
		_, err := Simulate(context.Background(), everySpread(""), c.s, nil)
		var e *Error
		if !errors.As(err, &e) || e.Field != c.field || e.Accepted == "" {
			t.Errorf("%+v: error %v, want one on %s", c.s, err, c.field)
		}
	}
}

func TestModelRefused(t *testing.T) {
	nan := math.NaN()
	for name, c := range map[string]struct {
		change func(m *pricing.Model)
		part   string
	}{
		"no terms":        {func(m *pricing.Model) { m.Terms = nil }, "model.terms"},
		"empty id":        {func(m *pricing.Model) { m.Inputs[0].ID = "" }, `model.inputs[0] ""`},
		"repeated id":     {func(m *pricing.Model) { m.Inputs[2].ID = m.Inputs[1].ID }, "model.inputs[2]"},
		"unsorted ids":    {func(m *pricing.Model) { m.Inputs[3].ID = "A" }, "model.inputs[3]"},
		"unknown group":   {func(m *pricing.Model) { m.Inputs[1].Group = "steel" }, `group: found "steel"; accepted: a group of the settings' correlation: ["labour"]`},
		"NaN coefficient": {func(m *pricing.Model) { m.Terms[0].Coefficient = nan }, "model.terms[0] coefficient"},
		"infinite":        {func(m *pricing.Model) { m.Terms[0].Coefficient = math.Inf(1) }, "model.terms[0] coefficient"},
		"factor too high": {func(m *pricing.Model) { m.Terms[0].Factors = []pricing.Factor{{Input: 4}} }, "model.terms[0] factor 0 input"},
		"factor negative": {func(m *pricing.Model) { m.Overall = []pricing.Factor{{Input: -1}} }, "model.overall factor 0 input"},
		"NaN offset":      {func(m *pricing.Model) { m.Overall = []pricing.Factor{{Input: 0, Offset: nan}} }, "model.overall factor 0 offset"},
		"bad spread":      {func(m *pricing.Model) { m.Inputs[2].Spread.High = nan }, `model.inputs[2] "c pert": spread: high`},
		"overflow": {func(m *pricing.Model) {
			m.Terms[0] = pricing.Term{Coefficient: 1e308, Factors: []pricing.Factor{{Input: 3}}}
		}, "finite"},
		"square overflows": {func(m *pricing.Model) {
			m.Terms[0] = pricing.Term{Coefficient: 1e200, Factors: []pricing.Factor{{Input: 3}}}
		}, "standard deviation"},
	} {
		m := everySpread("")
		c.change(&m)
		_, err := Simulate(context.Background(), m, Settings{Trials: 16, Correlation: map[string]float64{"labour": 0.5}}, nil)
		if err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.part)
		}
	}
	var e *spread.Error
	m := everySpread("")
	m.Inputs[0].Spread.Low = nan
	if _, err := Simulate(context.Background(), m, Settings{}, nil); !errors.As(err, &e) || e.Field != "low" {
		t.Errorf("error %v does not wrap the spread's", err)
	}
}

func TestModelsAreNotChanged(t *testing.T) {
	percentiles := []float64{0.9, 0.1}
	m := job(5, "g")
	s := Settings{Trials: 32, Percentiles: percentiles, Correlation: map[string]float64{"g": 0.2}}
	first := simulate(t, m, s)
	second := simulate(t, m, s)
	if first.Mean != second.Mean || percentiles[0] != 0.9 || first.Percentiles[0].P != 0.9 {
		t.Errorf("running twice: %v and %v, percentiles %v", first.Mean, second.Mean, percentiles)
	}
}

func TestCorrelationWarnings(t *testing.T) {
	for name, c := range map[string]struct {
		m    pricing.Model
		rho  map[string]float64
		want string
	}{
		"independent": {everySpread(""), nil, WarningUncorrelated},
		"ρ = 0":       {everySpread("g"), map[string]float64{"g": 0}, WarningUncorrelated},
		"correlated":  {everySpread("g"), map[string]float64{"g": 0.3}, ""},
		"unused":      {everySpread("g"), map[string]float64{"g": 0.3, "h": 0.3}, WarningUnusedGroup},
		"one spread":  {sumModel(threeLines[:1], ""), nil, ""},
	} {
		r := simulate(t, c.m, Settings{Trials: 64, Correlation: c.rho})
		var codes []string
		for _, w := range r.Warnings {
			codes = append(codes, w.Code)
		}
		if got := strings.Join(codes, " "); got != c.want {
			t.Errorf("%s: warnings %v, want %q", name, r.Warnings, c.want)
		}
	}
}
