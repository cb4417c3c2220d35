package ranges

import (
	"fmt"
	"math"
	"sort"

	"spanwright/estimate/spread"
)

// Change gives an assumption another spread.
type Change struct {
	ID     string
	Spread spread.Spread
}

// Preview is the range under changed spreads, in the same units as Result.
type Preview struct {
	Base, Mean, MeanSE, SD float64
	Percentiles            []Percentile // those of the settings
	BasePercentile         float64
}

// Preview returns the range with some spreads changed, on the stored draws; the others
// of a changed assumption's stream keep theirs. None
// changed is the model's own range. Only the terms that hold a changed assumption
// are evaluated again.
//
// Errors: *Error for an id that is unknown or twice, *spread.Error, wrapped, for a
// faulty spread; *Error for a total that overflows.
func (r *Prepared) Preview(changes []Change) (Preview, error) {
	values, samplers, touched, err := r.apply(changes)
	if err != nil {
		return Preview{}, err
	}
	total := r.changedSums(values, touched)
	factor, risks := r.factor, r.risks
	for _, i := range touched {
		if r.overall[i] {
			factor = make([]float64, len(total))
			multiply(factor, 1, r.p.overall, values)
			break
		}
	}
	if len(touched) > 0 && len(r.p.risks) > 0 {
		risks = r.riskCosts(values)
	}
	for k, f := range factor {
		total[k] = float64(total[k]*f) + risks[k]
	}
	return r.summarise(total, r.base(samplers))
}

// apply returns the columns and samplers under the changes, and the inputs that
// changed, in order.
func (r *Prepared) apply(changes []Change) ([][]float64, map[int]*spread.Sampler, []int, error) {
	values := append([][]float64(nil), r.values...)
	samplers := map[int]*spread.Sampler{}
	var touched []int
	for k, c := range changes {
		where := fmt.Sprintf("changes[%d] %q", k, c.ID)
		i, ok := r.index[c.ID]
		if !ok {
			return nil, nil, nil, fault(where, "an unknown id", "the id of an assumption that the total depends on")
		}
		if samplers[i] != nil {
			return nil, nil, nil, fault(where, "the id twice", "one change of each assumption")
		}
		sampler, err := c.Spread.Sampler()
		if err != nil {
			return nil, nil, nil, fmt.Errorf("ranges: %s: %w", where, err)
		}
		samplers[i] = &sampler
		touched = append(touched, i)
		values[i] = make([]float64, PreviewReplicates*PreviewTrials)
		r.fill(values[i], i, &sampler)
	}
	sort.Ints(touched)
	return values, samplers, touched, nil
}

// changedSums returns the sums of the terms. Where few hold a changed input, it
// takes their old values out and puts the new ones in.
func (r *Prepared) changedSums(values [][]float64, touched []int) []float64 {
	marked := make([]bool, len(r.p.terms))
	var numbers []int
	for _, i := range touched {
		for _, t := range r.uses[i] {
			if !marked[t] {
				marked[t] = true
				numbers = append(numbers, t)
			}
		}
	}
	sort.Ints(numbers)
	out := make([]float64, len(r.sums))
	if 2*len(numbers) > len(r.p.terms) {
		r.addTerms(out, nil, values)
		return out
	}
	copy(out, r.sums)
	if len(numbers) == 0 {
		return out
	}
	old := make([]float64, len(out))
	r.addTerms(old, numbers, r.values)
	for k, v := range old {
		out[k] -= v
	}
	r.addTerms(out, numbers, values)
	return out
}

// base returns the base estimate under changed samplers.
func (r *Prepared) base(samplers map[int]*spread.Sampler) float64 {
	c := r.p.newColumns(1)
	for i := range r.p.inputs {
		c.values[i][0] = r.p.inputs[i].sampler.Base()
		if s := samplers[i]; s != nil {
			c.values[i][0] = s.Base()
		}
	}
	r.p.evaluate(c, 1)
	return c.total[0]
}

// summarise sorts the totals.
func (r *Prepared) summarise(total []float64, base float64) (Preview, error) {
	mean := sum(total, 0) / float64(len(total))
	var squares float64
	below := 0
	for _, v := range total {
		squares += float64((v - mean) * (v - mean))
		if v <= base {
			below++
		}
	}
	v := Preview{Base: base, SD: math.Sqrt(squares / float64(len(total)-1)), BasePercentile: float64(below) / float64(len(total))}
	if !isFinite(v.SD) || !isFinite(base) {
		return Preview{}, fault("model", fmt.Sprintf("a total of %v at base values and a standard deviation of %v", base, v.SD), "coefficients and spreads whose products stay finite")
	}
	d := summariseRuns(total, PreviewReplicates, r.s.Percentiles)
	v.Mean, v.MeanSE, v.Percentiles = d.Mean, d.MeanSE, d.Percentiles
	return v, nil
}
