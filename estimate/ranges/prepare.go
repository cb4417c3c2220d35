package ranges

import (
	"context"
	"fmt"
	"sync"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// The smaller run that Prepare keeps: 8,192 trials. Its percentiles differ from
// those of the full run by its sampling error; the change between two previews is
// much surer than either, because they share their draws.
const (
	PreviewReplicates = 8
	PreviewTrials     = 1024
)

// maxPrepared bounds the memory of the columns: 512 MB.
const maxPrepared = 4000

// Prepared holds the draws of a model, so that the range can be had again at once
// when spreads change. It is safe for concurrent use.
type Prepared struct {
	p       *program
	s       Settings
	index   map[string]int
	uses    [][]int     // input → terms with it
	all     []int       // the numbers of all terms
	overall []bool      // input → is among the overall factors
	normal  []bool      // input → its latents are standard normal, else uniform
	latents [][]float64 // input × trial: what values are made of
	values  [][]float64 // input × trial, at the spreads of the model
	occurs  [][]float64 // risk × trial
	sums    []float64   // trial: sum of the terms
	factor  []float64   // trial: product of the overall factors
	risks   []float64   // trial: cost of the risks
}

// Prepare draws and evaluates PreviewReplicates × PreviewTrials trials of m under
// s, of which replicates, trials and sensitivities are not used, and keeps the
// columns: 64 kB for each input, twice.
//
// Errors: as Simulate's; *Error for more inputs than can be kept.
func Prepare(ctx context.Context, m pricing.Model, s Settings) (*Prepared, error) {
	s.Replicates, s.Trials, s.Sensitivities = 0, PreviewTrials, false
	s, err := s.withDefaults()
	if err != nil {
		return nil, err
	}
	s.Replicates = PreviewReplicates
	if len(m.Inputs)+len(m.Risks) > maxPrepared {
		return nil, fault("model.inputs", len(m.Inputs), fmt.Sprintf("at most %d inputs and risks for a preview", maxPrepared))
	}
	p, err := compile(m, s, purpose{latents: true})
	if err != nil {
		return nil, err
	}
	const n = PreviewReplicates * PreviewTrials
	r := &Prepared{
		p: p, s: s, index: map[string]int{}, uses: make([][]int, len(p.inputs)), overall: make([]bool, len(p.inputs)), normal: make([]bool, len(p.inputs)),
		latents: matrix(len(p.inputs), n), values: matrix(len(p.inputs), n), occurs: matrix(len(p.risks), n),
	}
	r.indexUses()
	if err := r.draw(ctx); err != nil {
		return nil, err
	}
	for i := range p.inputs {
		r.fill(r.values[i], i, &p.inputs[i].sampler)
	}
	r.sums = make([]float64, n)
	r.addTerms(r.sums, nil, r.values)
	r.factor = make([]float64, n)
	multiply(r.factor, 1, p.overall, r.values)
	r.risks = r.riskCosts(r.values)
	if _, err := r.Preview(nil); err != nil {
		return nil, err
	}
	return r, nil
}

// indexUses notes where each input is used.
func (r *Prepared) indexUses() {
	for i, in := range r.p.inputs {
		r.index[in.id] = i
	}
	for i, t := range r.p.terms {
		r.all = append(r.all, i)
		for _, factors := range [][]pricing.Factor{t.factors, t.after} {
			for _, f := range factors {
				if u := r.uses[f.Input]; len(u) == 0 || u[len(u)-1] != i {
					r.uses[f.Input] = append(u, i)
				}
			}
		}
	}
	for _, f := range r.p.overall {
		r.overall[f.Input] = true
	}
}

// draw fills the latents and occurrences.
func (r *Prepared) draw(ctx context.Context) error {
	d := newDrawer(r.p, PreviewTrials)
	for k := range PreviewReplicates {
		if err := ctx.Err(); err != nil {
			return err
		}
		d.begin(k)
		for start := 0; start < PreviewTrials; start += blockSize {
			at := k*PreviewTrials + start
			d.latents(start, blockSize)
			for i := range r.latents {
				r.normal[i] = d.latent(r.latents[i][at:at+blockSize], i, start)
			}
			d.occurrences(start, blockSize)
			for i, col := range d.columns.occurs {
				copy(r.occurs[i][at:], col)
			}
		}
	}
	return nil
}

// fill sets dst to input i's values under a sampler.
func (r *Prepared) fill(dst []float64, i int, sampler *spread.Sampler) {
	switch {
	case sampler.Fixed():
		for k := range dst {
			dst[k] = sampler.Base()
		}
	case r.normal[i]:
		sampler.FillNormal(dst, r.latents[i])
	default:
		sampler.FillUniform(dst, r.latents[i])
	}
}

// addTerms adds the terms of the given numbers, all for nil, to dst: the runs of
// trials shared out to the workers, in blocks whose columns stay in the cache.
func (r *Prepared) addTerms(dst []float64, numbers []int, values [][]float64) {
	if numbers == nil {
		numbers = r.all
	}
	workers := min(r.s.Workers, PreviewReplicates)
	if len(numbers) < parallelTerms {
		workers = 1
	}
	var finished sync.WaitGroup
	for w := range workers {
		from, to := w*PreviewReplicates/workers, (w+1)*PreviewReplicates/workers
		finished.Go(func() { r.addRun(dst, numbers, values, from*PreviewTrials, to*PreviewTrials) })
	}
	finished.Wait()
}

// parallelTerms is where another goroutine is worth its start.
const parallelTerms = 20

// addRun is addTerms for trials from up to to, multiples of blockSize.
func (r *Prepared) addRun(dst []float64, numbers []int, values [][]float64, from, to int) {
	product := make([]float64, blockSize)
	window := make([][]float64, len(values))
	for start := from; start < to; start += blockSize {
		for i, col := range values {
			window[i] = col[start : start+blockSize]
		}
		for _, i := range numbers {
			r.p.terms[i].addTo(dst[start:start+blockSize], product, window)
		}
	}
}

// riskCosts returns the cost of the risks in each trial.
func (r *Prepared) riskCosts(values [][]float64) []float64 {
	cost := make([]float64, PreviewReplicates*PreviewTrials)
	for i := range r.p.risks {
		for k, v := range values[r.p.risks[i].impact] {
			cost[k] += float64(v * r.occurs[i][k])
		}
	}
	return cost
}
