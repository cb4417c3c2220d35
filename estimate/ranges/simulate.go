// Package ranges turns a cost model and what is believed about its assumptions
// into the distribution of the total.
//
//	pricing.Model, Settings → compile: samplers, groups, terms by category
//	(seed, id, replicate, index) → uniforms → values, one column per assumption
//	columns of values → evaluate → totals and categories of each trial
//	sorted replicates → percentiles, standard errors, curve, moment checks → Result
//
// A replicate is computed by one goroutine in blocks of constant size and written
// to its own place, so that the result has the same bits for any number of them.
package ranges

import (
	"context"
	"fmt"
	"math"
	"slices"
	"sync"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// Simulate computes the range of m's total under s, in the currency of m. One
// draw per assumption per trial is shared by every term that uses it; members of
// a group have the rank correlation of s between any two, members of two groups
// about the geometric mean of theirs. progress, where not
// nil, is called with the trials done and their total after each replicate, one
// call at a time.
//
// Errors: *Error or *spread.Error (wrapped) for a faulty model or setting;
// ctx.Err() soon after ctx ends; a total that overflows; a moment check beyond 6
// standard errors.
func Simulate(ctx context.Context, m pricing.Model, s Settings, progress func(done, total int)) (Result, error) {
	s, err := s.withDefaults()
	if err != nil {
		return Result{}, err
	}
	p, err := compile(m, s)
	if err != nil {
		return Result{}, err
	}
	sim := newSimulation(p, s)
	if err := sim.run(ctx, progress); err != nil {
		return Result{}, err
	}
	return sim.summarise(ctx)
}

// simulation holds the settings and what each replicate leaves behind.
type simulation struct {
	p          *program
	s          Settings
	totals     []float64   // replicate-major; sorted within each replicate
	categories [][]float64 // category × (replicate-major trial)
	means      []float64   // of the total, per replicate
	percentile [][]float64 // replicate × percentile
	deviations [][]float64 // replicate × input: sample mean − closed-form mean
	sums       [][]float64 // replicate × category: sum over trials
}

// newSimulation allocates all results at once.
func newSimulation(p *program, s Settings) *simulation {
	n := s.Replicates * s.Trials
	return &simulation{
		p: p, s: s,
		totals:     make([]float64, n),
		categories: matrix(len(p.categories), n),
		means:      make([]float64, s.Replicates),
		percentile: matrix(s.Replicates, len(s.Percentiles)),
		deviations: matrix(s.Replicates, len(p.inputs)),
		sums:       matrix(s.Replicates, len(p.categories)),
	}
}

// run computes all replicates on s.Workers goroutines.
func (sim *simulation) run(ctx context.Context, progress func(done, total int)) error {
	var (
		mu       sync.Mutex
		next     int
		done     int
		failed   error
		finished sync.WaitGroup
	)
	take := func() (int, bool) {
		mu.Lock()
		defer mu.Unlock()
		next++
		return next - 1, next <= sim.s.Replicates && failed == nil
	}
	report := func(err error) {
		mu.Lock()
		defer mu.Unlock()
		if err != nil {
			failed = err
			return
		}
		done++
		if progress != nil {
			progress(done*sim.s.Trials, sim.s.Replicates*sim.s.Trials)
		}
	}
	for range min(sim.s.Workers, sim.s.Replicates) {
		finished.Go(func() {
			w := sim.newWorker()
			for r, ok := take(); ok; r, ok = take() {
				report(w.replicate(ctx, r))
			}
		})
	}
	finished.Wait()
	return failed
}

// worker is one goroutine's storage.
type worker struct {
	*simulation
	columns *columns
	orders  []permutation // per input
	common  []permutation // per group
	normals [][]float64   // group × trial: the common factor
	means   []float64     // closed-form mean per input
}

// newWorker allocates a worker's storage.
func (sim *simulation) newWorker() *worker {
	w := &worker{
		simulation: sim,
		columns:    sim.p.newColumns(blockSize),
		orders:     make([]permutation, len(sim.p.inputs)),
		common:     make([]permutation, len(sim.p.groups)),
		normals:    matrix(len(sim.p.groups), blockSize),
		means:      make([]float64, len(sim.p.inputs)),
	}
	for i := range w.orders {
		w.orders[i] = newPermutation(sim.s.Trials)
		w.means[i] = sim.p.inputs[i].sampler.Mean()
	}
	for i := range w.common {
		w.common[i] = newPermutation(sim.s.Trials)
	}
	return w
}

// replicate computes replicate r and leaves its totals sorted.
func (w *worker) replicate(ctx context.Context, r int) error {
	for i := range w.orders {
		w.orders[i].draw(w.p.inputs[i].draws.order, r)
	}
	for i := range w.common {
		w.common[i].draw(w.p.groups[i].draws.order, r)
	}
	offset := r * w.s.Trials
	for start := 0; start < w.s.Trials; start += blockSize {
		if err := ctx.Err(); err != nil {
			return err
		}
		n := min(blockSize, w.s.Trials-start)
		w.draw(r, start, n)
		w.p.evaluate(w.columns, n)
		copy(w.totals[offset+start:], w.columns.total[:n])
		for i, col := range w.columns.categories {
			copy(w.categories[i][offset+start:], col[:n])
			w.sums[r][i] += sum(col[:n], 0)
		}
		for i := range w.means {
			w.deviations[r][i] += sum(w.columns.values[i][:n], w.means[i])
		}
	}
	for i := range w.means {
		w.deviations[r][i] /= float64(w.s.Trials)
	}
	return w.finish(r, w.totals[offset:offset+w.s.Trials])
}

// draw fills the columns of values with trials start to start + n of replicate r.
func (w *worker) draw(r, start, n int) {
	for i := range w.p.groups {
		z := w.normals[i][:n]
		w.p.groups[i].draws.fill(z, &w.common[i], r, start)
		spread.FillStandardNormal(z, z)
	}
	for i := range w.p.inputs {
		in := &w.p.inputs[i]
		x := w.columns.values[i][:n]
		if in.sampler.Fixed() {
			for k := range x {
				x[k] = in.sampler.Base()
			}
			continue
		}
		in.draws.fill(x, &w.orders[i], r, start)
		if in.group < 0 {
			in.sampler.FillUniform(x, x)
			continue
		}
		spread.FillStandardNormal(x, x)
		g := &w.p.groups[in.group]
		for k, z := range w.normals[in.group][:n] {
			x[k] = float64(g.common*z) + float64(g.own*x[k])
		}
		in.sampler.FillNormal(x, x)
	}
}

// finish sorts a replicate's totals and records its mean and percentiles.
func (w *worker) finish(r int, totals []float64) error {
	mean := sum(totals, 0) / float64(len(totals))
	if !isFinite(mean) {
		return fmt.Errorf("ranges: replicate %d: the total is %v; accepted: coefficients and spreads whose products stay finite", r, mean)
	}
	w.simulation.means[r] = mean
	slices.Sort(totals)
	for i, p := range w.s.Percentiles {
		w.percentile[r][i] = quantile(totals, p)
	}
	return nil
}

// sum returns Σ (x − shift) with four partial sums in a fixed order.
func sum(x []float64, shift float64) float64 {
	var s [4]float64
	for len(x) >= 4 {
		s[0] += x[0] - shift
		s[1] += x[1] - shift
		s[2] += x[2] - shift
		s[3] += x[3] - shift
		x = x[4:]
	}
	for _, v := range x {
		s[0] += v - shift
	}
	return s[0] + s[1] + (s[2] + s[3])
}

// standardError returns the standard deviation of independent replicates' values
// over the root of their number.
func standardError(n int, value func(replicate int) float64) float64 {
	var mean, squares float64
	for r := range n {
		mean += value(r)
	}
	mean /= float64(n)
	for r := range n {
		d := value(r) - mean
		squares += float64(d * d)
	}
	return math.Sqrt(squares / float64(n-1) / float64(n))
}
