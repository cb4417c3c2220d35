package ranges

import (
	"context"
	"fmt"
	"slices"

	"spanwright/estimate/pricing"
)

// MaxModels is the most models of one comparison.
const MaxModels = 16

// Probability is an estimated probability.
type Probability struct {
	Value float64 // 0 to 1
	SE    float64 // standard error, from the spread between replicates
}

// Difference is the distribution of one total less another, trial by trial.
type Difference struct {
	Mean, MeanSE float64      // major units
	Percentiles  []Percentile // P10, P50, P80, P90
}

// Comparison is several models on common draws. Index i is models[i].
type Comparison struct {
	Results     []Result
	Cheapest    []Probability   // that i has the least total; equal totals share it, so that all add to 1
	Less        [][]Probability // Less[i][j]: that the total of i is below that of j; 0 for i = j
	Differences [][]Difference  // Differences[i][j]: total of i − total of j; 0 for i = j
}

// comparedPercentiles are those of differences.
var comparedPercentiles = []float64{0.1, 0.5, 0.8, 0.9}

// Compare simulates models, in one currency, with one seed: an assumption or risk
// of the same id, or stream, has the same uniform number in each, mapped by each model's own
// spread, so that what they have in common cancels in their differences. An id of
// s.Matrix need only be in one of the models.
//
// Errors: as Simulate's, naming the model; *Error for fewer than two or more than
// MaxModels.
func Compare(ctx context.Context, models []pricing.Model, s Settings) (Comparison, error) {
	if len(models) < 2 || len(models) > MaxModels {
		return Comparison{}, fault("models", len(models), fmt.Sprintf("2 to %d models", MaxModels))
	}
	s, err := s.withDefaults()
	if err != nil {
		return Comparison{}, err
	}
	if err := knownToAny(models, s); err != nil {
		return Comparison{}, err
	}
	c := Comparison{Results: make([]Result, len(models))}
	totals := make([][]float64, len(models))
	for i, m := range models {
		p, err := compile(m, s, purpose{joint: true})
		if err != nil {
			return Comparison{}, fmt.Errorf("ranges: models[%d]: %w", i, err)
		}
		sim := newSimulation(p, s)
		sim.kept = make([]float64, len(sim.totals))
		if err := sim.run(ctx, nil); err != nil {
			return Comparison{}, fmt.Errorf("ranges: models[%d]: %w", i, err)
		}
		if c.Results[i], err = sim.summarise(ctx); err != nil {
			return Comparison{}, fmt.Errorf("ranges: models[%d]: %w", i, err)
		}
		totals[i] = sim.kept
	}
	return c, c.compare(ctx, totals, s)
}

// knownToAny tests that each id of the matrix is in one of the models.
func knownToAny(models []pricing.Model, s Settings) error {
	if s.Matrix == nil {
		return nil
	}
	known := map[string]bool{}
	for _, m := range models {
		for _, in := range m.Inputs {
			known[keyOf(in)] = true
		}
	}
	mix := mixing{ids: s.Matrix.IDs}
	return mix.unknown(known)
}

// compare fills in what is computed from the totals of the same trials.
func (c *Comparison) compare(ctx context.Context, totals [][]float64, s Settings) error {
	n := len(totals)
	c.Cheapest = cheapest(totals, s)
	c.Less, c.Differences = make([][]Probability, n), make([][]Difference, n)
	for i := range n {
		c.Less[i], c.Differences[i] = make([]Probability, n), make([]Difference, n)
		for j := range n {
			if err := ctx.Err(); err != nil {
				return err
			}
			if i != j {
				c.Less[i][j] = less(totals[i], totals[j], s)
				c.Differences[i][j] = differ(totals[i], totals[j], s)
			}
		}
		c.Differences[i][i] = noDifference()
	}
	return nil
}

// noDifference is a total less itself.
func noDifference() Difference {
	var d Difference
	for _, p := range comparedPercentiles {
		d.Percentiles = append(d.Percentiles, Percentile{P: p})
	}
	return d
}

// probability returns the mean and its error of a share per replicate.
func probability(shares []float64) Probability {
	at := func(r int) float64 { return shares[r] }
	return Probability{Value: sum(shares, 0) / float64(len(shares)), SE: standardError(len(shares), at)}
}

// less returns the probability that a is below b.
func less(a, b []float64, s Settings) Probability {
	shares := make([]float64, s.Replicates)
	for k, v := range a {
		if v < b[k] {
			shares[k/s.Trials]++
		}
	}
	for r := range shares {
		shares[r] /= float64(s.Trials)
	}
	return probability(shares)
}

// cheapest returns the probability that each is the least.
func cheapest(totals [][]float64, s Settings) []Probability {
	shares := matrix(len(totals), s.Replicates)
	for k := range totals[0] {
		least, ties := totals[0][k], 0
		for _, t := range totals {
			least = min(least, t[k])
		}
		for _, t := range totals {
			if t[k] == least {
				ties++
			}
		}
		for i, t := range totals {
			if t[k] == least {
				shares[i][k/s.Trials] += 1 / float64(ties)
			}
		}
	}
	out := make([]Probability, len(totals))
	for i, share := range shares {
		for r := range share {
			share[r] /= float64(s.Trials)
		}
		out[i] = probability(share)
	}
	return out
}

// differ returns the distribution of a − b.
func differ(a, b []float64, s Settings) Difference {
	all := make([]float64, len(a))
	for k, v := range a {
		all[k] = v - b[k]
	}
	return summariseRuns(all, s.Replicates, comparedPercentiles)
}

// summariseRuns sorts replicate-major values in place and gives their mean and
// percentiles, pooled, with the errors between replicates.
func summariseRuns(all []float64, replicates int, percentiles []float64) Difference {
	trials := len(all) / replicates
	means, each := make([]float64, replicates), matrix(len(percentiles), replicates)
	for r := range replicates {
		run := all[r*trials : (r+1)*trials]
		means[r] = sum(run, 0) / float64(trials)
		slices.Sort(run)
		for i, p := range percentiles {
			each[i][r] = quantile(run, p)
		}
	}
	mean := probability(means)
	d := Difference{Mean: mean.Value, MeanSE: mean.SE}
	sorted := mergeRuns(all, make([]float64, len(all)), trials)
	for i, p := range percentiles {
		d.Percentiles = append(d.Percentiles, Percentile{P: p, Value: quantile(sorted, p), SE: probability(each[i]).SE})
	}
	return d
}
