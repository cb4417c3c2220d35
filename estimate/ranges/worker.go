package ranges

import (
	"context"
	"fmt"
	"slices"
)

// worker is one goroutine's storage.
type worker struct {
	*simulation
	drawer
	means   []float64 // closed-form mean per input
	respond *responder
}

// newWorker allocates a worker's storage.
func (sim *simulation) newWorker() *worker {
	w := &worker{simulation: sim, drawer: newDrawer(sim.p, sim.s.Trials), means: make([]float64, len(sim.p.inputs))}
	for i := range w.means {
		w.means[i] = sim.p.inputs[i].sampler.Mean()
	}
	if sim.s.Sensitivities {
		w.respond = newResponder(sim.p, sim.s, sim.base)
	}
	return w
}

// replicate computes replicate r and leaves its totals sorted.
func (w *worker) replicate(ctx context.Context, r int) error {
	w.begin(r)
	offset, c := r*w.s.Trials, w.columns
	for start := 0; start < w.s.Trials; start += blockSize {
		if err := ctx.Err(); err != nil {
			return err
		}
		n := min(blockSize, w.s.Trials-start)
		w.draw(start, n)
		w.simulation.p.evaluate(c, n)
		copy(w.totals[offset+start:], c.total[:n])
		w.gather(r, n)
		for i, col := range c.categories {
			copy(w.categories[i][offset+start:], col[:n])
		}
		for i := range w.means {
			w.deviations[r][i] += sum(c.values[i][:n], w.means[i])
		}
		if r < len(w.responses) {
			w.respond.block(c, start, n)
		}
	}
	for i := range w.means {
		w.deviations[r][i] /= float64(w.s.Trials)
	}
	if r < len(w.responses) {
		w.responses[r] = w.respond.finish()
	}
	totals := w.totals[offset : offset+w.s.Trials]
	if w.kept != nil {
		copy(w.kept[offset:], totals)
	}
	return w.finish(r, totals)
}

// gather adds the block's sums and products of categories and risks.
func (w *worker) gather(r, n int) {
	c, total := w.columns, w.columns.total[:n]
	for i, col := range c.categories {
		w.sums[r][i] += sum(col[:n], 0)
		w.cross[r][i] += sumProduct(col[:n], total, w.bases[i], w.base)
	}
	for i, col := range c.risks {
		part := len(c.categories) + i
		w.sums[r][part] += sum(col[:n], 0)
		w.cross[r][part] += sumProduct(col[:n], total, 0, w.base)
		w.occurred[r][i] += sum(c.occurs[i][:n], 0)
	}
}

// sumProduct returns Σ (x − p)·(y − q) with two partial sums in a fixed order.
func sumProduct(x, y []float64, p, q float64) float64 {
	var a, b float64
	y = y[:len(x)]
	for k := 0; k+1 < len(x); k += 2 {
		a += float64((x[k] - p) * (y[k] - q))
		b += float64((x[k+1] - p) * (y[k+1] - q))
	}
	if k := len(x) - 1; len(x)%2 == 1 {
		a += float64((x[k] - p) * (y[k] - q))
	}
	return a + b
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
