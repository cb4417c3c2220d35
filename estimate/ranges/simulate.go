// Package ranges turns a cost model and what is believed about its assumptions
// into the distribution of the total.
//
//	pricing.Model, Settings → compile: samplers, groups, terms by category
//	(seed, stream, replicate, index) → uniforms → values, one column per assumption
//	columns of values → evaluate → totals, categories and risks of each trial
//	sorted replicates → percentiles, standard errors, curve, moment checks → Result
//	the same columns, one assumption fixed → Sensitivities
//	several models on the same uniforms → Comparison
//	stored columns, some spreads changed → Preview
//
// A replicate is computed by one goroutine in blocks of constant size and written
// to its own place, so that the result has the same bits for any number of them.
package ranges

import (
	"context"
	"math"
	"sync"

	"gonum.org/v1/gonum/mathext"

	"spanwright/estimate/pricing"
)

// Simulate computes the range of m's total under s, in the currency of m. One
// draw per assumption per trial is shared by every term that uses it, and by all
// assumptions of its stream, each with its own spread; members of
// a group have the rank correlation of s between any two, members of two groups
// about the geometric mean of theirs, and assumptions of s.Matrix those of the
// matrix. progress, where not nil, is called with the trials done and their total
// after each replicate, one call at a time.
//
// Errors: *Error or *spread.Error (wrapped) for a faulty model or setting;
// ctx.Err() soon after ctx ends; a total that overflows; a moment check beyond 6
// standard errors.
func Simulate(ctx context.Context, m pricing.Model, s Settings, progress func(done, total int)) (Result, error) {
	s, err := s.withDefaults()
	if err != nil {
		return Result{}, err
	}
	p, err := compile(m, s, purpose{})
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
	base       float64     // total at base values
	bases      []float64   // category → its part of base
	totals     []float64   // replicate-major; sorted within each replicate
	kept       []float64   // totals in the order of trials, where asked for
	categories [][]float64 // category × (replicate-major trial)
	means      []float64   // of the total, per replicate
	percentile [][]float64 // replicate × percentile
	deviations [][]float64 // replicate × input: sample mean − closed-form mean
	sums       [][]float64 // replicate × part: sum over trials; parts are categories, then risks
	cross      [][]float64 // replicate × part: Σ (part − its base)·(total − base)
	occurred   [][]float64 // replicate × risk: trials in which it occurs
	responses  [][]response
}

// newSimulation allocates all results at once.
func newSimulation(p *program, s Settings) *simulation {
	n, parts := s.Replicates*s.Trials, len(p.categories)+len(p.risks)
	sim := &simulation{
		p: p, s: s,
		totals:     make([]float64, n),
		categories: matrix(len(p.categories), n),
		means:      make([]float64, s.Replicates),
		percentile: matrix(s.Replicates, len(s.Percentiles)),
		deviations: matrix(s.Replicates, len(p.inputs)),
		sums:       matrix(s.Replicates, parts),
		cross:      matrix(s.Replicates, parts),
		occurred:   matrix(s.Replicates, len(p.risks)),
	}
	sim.base, sim.bases = p.base()
	if s.Sensitivities {
		sim.responses = make([][]response, min(s.Replicates, sensitivityReplicates))
	}
	return sim
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
// over the root of their number, widened by widening.
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
	return math.Sqrt(squares/float64(n-1)/float64(n)) * widening(n)
}

// widening is the ratio of the 97.5 % points of Student's t with n − 1 degrees of
// freedom and of the normal distribution: 1.041 for 32 replicates. With it 95 % of
// values lie within 1.96 standard errors of the truth, although the error itself is
// an estimate from n replicates ("Student" 1908, Biometrika 6).
func widening(n int) float64 {
	const z975 = 1.959963984540054
	nu := float64(n - 1)
	x := mathext.InvRegIncBeta(nu/2, 0.5, 0.05)
	return math.Sqrt(nu*(1-x)/x) / z975
}
