package ranges

import "math"

// lever is an input that is not fixed, and what the total is made of it.
type lever struct {
	input     int
	fixed     [fixings]float64         // its P10, P50, P90
	edges     [sensitivityBins]float64 // upper ends of its classes
	center    float64                  // mean, taken off the values in the classes
	classes   []class
	slope     []float64           // d Σ terms / d x of this block
	extra     *[fixings][]float64 // change of Σ terms beyond the slope; nil for none
	overall   *[fixings][]float64 // product of the overall factors; nil where it is not among them
	risks     []int               // those whose impact it is
	swing     float64
	narrowed  []float64 // total at its median, by trial
	duplicate bool      // twice in the term at hand
}

// The values at which a lever is fixed.
const (
	at10 = iota
	at50
	at90
	fixings
)

// newFixings returns a column for each fixing.
func newFixings() *[fixings][]float64 {
	m := matrix(fixings, blockSize)
	return &[fixings][]float64{m[0], m[1], m[2]}
}

// prepare computes the values at which a lever is fixed and its classes.
func (l *lever) prepare(p *program, bins int) {
	sampler := &p.inputs[l.input].sampler
	l.fixed = [fixings]float64{sampler.FromUniform(0.1), sampler.FromUniform(0.5), sampler.FromUniform(0.9)}
	l.center = sampler.Mean()
	for b := range l.edges {
		l.edges[b] = math.Inf(1)
		if b+1 < bins {
			l.edges[b] = sampler.FromUniform(float64(b+1) / float64(bins))
		}
	}
	l.classes = make([]class, sensitivityBins)
}

// riskResponse gathers a discrete risk's trials.
type riskResponse struct {
	classes  [2]class // it does not occur, it occurs
	swing    float64
	narrowed []float64
}

// respond takes in a lever's block: swing, narrowed totals, classes.
func (r *responder) respond(l *lever, c *columns, start, n int) {
	x, total := c.values[l.input][:n], c.total[:n]
	occurs := r.zero[:n]
	if len(l.risks) > 0 {
		occurs = r.after[:n]
		clear(occurs)
		for _, i := range l.risks {
			for k, v := range c.occurs[i][:n] {
				occurs[k] += v
			}
		}
	}
	narrowed, low, high := l.narrowed[start:start+n], r.backward[:n], r.scratch[:n]
	for a, dst := range [fixings][]float64{low, narrowed, high} {
		extra, overall := r.zero[:n], r.overall[:n]
		if l.extra != nil {
			extra = l.extra[a][:n]
		}
		if l.overall != nil {
			overall = l.overall[a][:n]
		}
		r.total(dst, l, l.fixed[a], extra, overall, x, occurs)
	}
	for k, v := range high {
		l.swing += v - low[k]
	}
	for k, v := range x {
		l.classes[l.class(v)].add(v-l.center, total[k]-r.base)
	}
}

// total sets dst to the total with lever l fixed at value.
func (r *responder) total(dst []float64, l *lever, value float64, extra, overall, x, occurs []float64) {
	n := len(dst)
	slope, sums, rest := l.slope[:n], r.sums[:n], r.rest[:n]
	extra, overall, x, occurs = extra[:n], overall[:n], x[:n], occurs[:n]
	for k := range dst {
		move := value - x[k]
		dst[k] = float64((sums[k]+float64(move*slope[k])+extra[k])*overall[k]) + (rest[k] + float64(move*occurs[k]))
	}
}

// class returns the class of a value, by four comparisons.
func (l *lever) class(x float64) int {
	e, i := &l.edges, 0
	if x >= e[7] {
		i = 8
	}
	if x >= e[i+3] {
		i += 4
	}
	if x >= e[i+1] {
		i += 2
	}
	if x >= e[i] {
		i++
	}
	return i
}

// respondRisk takes in a risk's block.
func (r *responder) respondRisk(i int, c *columns, start, n int) {
	k := &r.risk[i]
	cost, occurs, x := c.risks[i], c.occurs[i], c.values[r.p.risks[i].impact]
	for j, t := range c.total[:n] {
		k.narrowed[start+j] = t - cost[j]
		k.swing += x[j]
		k.classes[int(occurs[j])].add(0, t-r.base)
	}
}

// finish returns the replicate's responses, levers first, and starts anew.
func (r *responder) finish() []response {
	n := float64(r.at)
	whole := width(r.totals[:r.at])
	var out []response
	add := func(classes []class, swing float64, narrowed []float64) {
		next := response{swing: swing / n, narrowing: whole - width(narrowed[:r.at])}
		next.explained, next.squares = explain(classes)
		out = append(out, next)
		clear(classes)
	}
	for i := range r.levers {
		l := &r.levers[i]
		add(l.classes, l.swing, l.narrowed)
		l.swing = 0
	}
	for i := range r.risk {
		k := &r.risk[i]
		add(k.classes[:], k.swing, k.narrowed)
		k.swing = 0
	}
	return out
}

// width returns P90 − P10 of unsorted values, reordering them.
func width(x []float64) float64 {
	low := selectQuantile(x, 0.1)
	return selectQuantile(x, 0.9) - low
}
