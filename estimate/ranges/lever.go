package ranges

import "math"

// lever is a belief that is not fixed, and what the total is made of it.
type lever struct {
	members   []member                 // its inputs that are not fixed; at least one
	edges     [sensitivityBins]float64 // upper ends of its classes, of the first member
	center    float64                  // mean of the first member, taken off the values in the classes
	classes   []class
	extra     *[fixings][]float64 // change of Σ terms beyond the slopes; nil for none
	overall   *[fixings][]float64 // product of the overall factors; nil where it is not among them
	swing     float64
	narrowed  []float64 // total at its median, by trial
	duplicate bool      // twice in the term at hand
}

// member is an input of a lever.
type member struct {
	input int
	fixed [fixings]float64 // its P10, P50, P90
	slope []float64        // d Σ terms / d x of this block
	risks []int            // those whose impact it is
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
	for i := range l.members {
		sampler := &p.inputs[l.members[i].input].sampler
		l.members[i].fixed = [fixings]float64{sampler.FromUniform(0.1), sampler.FromUniform(0.5), sampler.FromUniform(0.9)}
	}
	sampler := &p.inputs[l.members[0].input].sampler
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
	narrowed, low, high := l.narrowed[start:start+n], r.backward[:n], r.scratch[:n]
	for a, dst := range [fixings][]float64{low, narrowed, high} {
		r.total(dst, l, a, c)
	}
	x, total := c.values[l.members[0].input][:n], c.total[:n]
	for k, v := range high {
		l.swing += v - low[k]
	}
	for k, v := range x {
		l.classes[l.class(v)].add(v-l.center, total[k]-r.base)
	}
}

// total sets dst to the total with lever l at a fixing.
func (r *responder) total(dst []float64, l *lever, a int, c *columns) {
	n := len(dst)
	sums, rest, extra, overall := r.sums[:n], r.rest[:n], r.zero[:n], r.overall[:n]
	moved, cost := r.moved[:n], r.cost[:n] // of Σ terms, of the risks
	for i := range l.members {
		m := &l.members[i]
		value, slope, x, occurs := m.fixed[a], m.slope[:n], c.values[m.input][:n], r.occurrences(m, c, n)
		if i == 0 {
			clear(moved)
			clear(cost)
		}
		for k, v := range x {
			move := value - v
			moved[k] += float64(move * slope[k])
			cost[k] += float64(move * occurs[k])
		}
	}
	if l.extra != nil {
		extra = l.extra[a][:n]
	}
	if l.overall != nil {
		overall = l.overall[a][:n]
	}
	for k := range dst {
		dst[k] = float64((sums[k]+moved[k]+extra[k])*overall[k]) + (rest[k] + cost[k])
	}
}

// occurrences returns how many risks whose impact m is occur in each trial.
func (r *responder) occurrences(m *member, c *columns, n int) []float64 {
	if len(m.risks) == 0 {
		return r.zero[:n]
	}
	occurs := r.after[:n]
	clear(occurs)
	for _, i := range m.risks {
		for k, v := range c.occurs[i][:n] {
			occurs[k] += v
		}
	}
	return occurs
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
