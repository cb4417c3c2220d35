package ranges

import (
	"context"
	"fmt"
	"math"
	"sort"
	"sync"
)

// Percentile is the cost not exceeded with probability P.
type Percentile struct {
	P     float64 // 0 to 1
	Value float64 // major units of the currency
	SE    float64 // standard error of Value, from the spread between replicates
}

// CategoryRange is the range of one category. Percentiles of categories do not
// add to those of the total.
type CategoryRange struct {
	Category      string
	Base, Mean    float64 // major units, overall factors included
	P10, P50, P90 float64
	Share         float64 // covariance with the total over the total's variance; 0 where nothing varies
}

// RiskRange is what one discrete risk adds to the total.
type RiskRange struct {
	ID        string
	Mean      float64 // of its cost over all trials, in major units
	Frequency float64 // share of the trials in which it occurs
	Share     float64 // covariance with the total over the total's variance; 0 where nothing varies
}

// Warning is a note about the result that belongs into its document.
type Warning struct {
	Code    string // stable: see the constants
	Message string
}

// Codes of warnings.
const (
	WarningMoments      = "moment-check" // a sample mean beyond 4 standard errors
	WarningUncorrelated = "uncorrelated" // a group with ρ = 0, or no correlation at all
	WarningUnusedGroup  = "unused-group" // a correlation that no input takes
	WarningRepaired     = "repaired"     // a matrix that was not positive definite
)

// Result is the range of a total, in major units of the model's currency.
type Result struct {
	Trials, Replicates int     // trials per replicate, replicates
	Base               float64 // total at base values
	Mean, MeanSE       float64 // pooled mean and its standard error between replicates
	SD                 float64 // standard deviation of one total
	Percentiles        []Percentile
	Replicated         [][]float64     // replicate × Percentiles: the percentiles of each replicate alone
	BasePercentile     float64         // probability, 0 to 1, that the total does not exceed Base
	Curve              []float64       // pooled type-7 quantiles at 0, 1, …, 100 %
	Categories         []CategoryRange // in the order in which the model's terms name them
	Risks              []RiskRange     // by id; shares of categories and risks add to 1
	Warnings           []Warning
	Moments            []MomentCheck // spreads that are not fixed, risks, then the total where MomentMethod says so
	MomentMethod       string        // what was checked and how
	Sensitivities      []Sensitivity // by falling narrowing, then id; nil unless asked for
}

// summarise pools the replicates.
func (sim *simulation) summarise(ctx context.Context) (Result, error) {
	n := len(sim.totals)
	base := sim.base
	if !isFinite(base) {
		return Result{}, fault("model", fmt.Sprintf("a total of %v at base values", base), "coefficients and spreads whose products stay finite")
	}
	res := Result{Trials: sim.s.Trials, Replicates: sim.s.Replicates, Base: base, Replicated: sim.percentile}
	res.Mean = sum(sim.means, 0) / float64(len(sim.means))
	res.MeanSE = standardError(sim.s.Replicates, func(r int) float64 { return sim.means[r] })
	var squares float64
	for _, v := range sim.totals {
		d := v - res.Mean
		squares += float64(d * d)
	}
	res.SD = math.Sqrt(squares / float64(n-1))
	if !isFinite(res.SD) {
		return Result{}, fault("model", fmt.Sprintf("totals with a standard deviation of %v", res.SD), "coefficients and spreads whose squares stay finite")
	}
	sorted := mergeRuns(sim.totals, make([]float64, n), sim.s.Trials)
	for i, p := range sim.s.Percentiles {
		se := standardError(sim.s.Replicates, func(r int) float64 { return sim.percentile[r][i] })
		res.Percentiles = append(res.Percentiles, Percentile{P: p, Value: quantile(sorted, p), SE: se})
	}
	res.Curve = make([]float64, 101)
	for i := range res.Curve {
		res.Curve[i] = quantile(sorted, float64(i)/100)
	}
	res.BasePercentile = float64(sort.Search(n, func(i int) bool { return sorted[i] > base })) / float64(n)
	if err := ctx.Err(); err != nil {
		return Result{}, err
	}
	res.Categories, res.Risks = sim.categoryRanges(sim.bases), sim.riskRanges()
	sim.share(&res)
	res.Sensitivities = sim.sensitivities()
	if err := sim.check(&res); err != nil {
		return Result{}, err
	}
	return res, nil
}

// categoryRanges summarises the categories, each on a goroutine of at most
// s.Workers at a time.
func (sim *simulation) categoryRanges(base []float64) []CategoryRange {
	out := make([]CategoryRange, len(sim.p.categories))
	slots := make(chan struct{}, sim.s.Workers)
	var finished sync.WaitGroup
	for i := range out {
		slots <- struct{}{}
		finished.Go(func() {
			out[i] = sim.categoryRange(i, base[i])
			<-slots
		})
	}
	finished.Wait()
	return out
}

// categoryRange summarises category i.
func (sim *simulation) categoryRange(i int, base float64) CategoryRange {
	var total float64
	for r := range sim.sums {
		total += sim.sums[r][i]
	}
	x := sim.categories[i]
	c := CategoryRange{Category: sim.p.categories[i], Base: base, Mean: total / float64(len(x))}
	c.P10 = selectQuantile(x, 0.1)
	c.P50 = selectQuantile(x, 0.5)
	c.P90 = selectQuantile(x, 0.9)
	return c
}
