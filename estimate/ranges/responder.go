package ranges

import (
	"slices"

	"spanwright/estimate/pricing"
)

// responder works out the total with each lever fixed, on the trials of one
// replicate. The sum of the terms is linear in a lever that is in no product
// twice and below no minimum, in each of its inputs where it has several: then the products of the other factors, by prefixes
// and suffixes, answer for any value without another evaluation.
type responder struct {
	p          *program
	base       float64
	levers     []lever
	of         []int // input → lever, −1 for none
	as         []int // input → its place among the members of its lever
	trials     int
	at         int       // trials seen
	totals     []float64 // by trial
	risk       []riskResponse
	forward    [][]float64 // prefixes: before each factor of a term
	backward   []float64
	after      []float64
	sums, rest []float64 // Σ terms; cost of the risks
	overall    []float64
	zero       []float64
	moved      []float64
	cost       []float64
	scratch    []float64
	held       [][]float64 // columns of fixed values, and those that they stand for
	was        [][]float64
	window     [][]float64
}

// newResponder allocates storage for one replicate.
func newResponder(p *program, s Settings, base float64) *responder {
	r := &responder{p: p, base: base}
	widest := r.findLevers()
	count := max(1, len(r.levers)+len(p.risks))
	r.trials = min(s.Trials, sensitivityTrials, max(sensitivityLeastTrials, sensitivityCells/count))
	slopes, narrowed := matrix(len(p.inputs), blockSize), matrix(count, r.trials)
	bins := max(1, min(r.trials/32, sensitivityBins))
	for i := range r.levers {
		for j := range r.levers[i].members {
			m := &r.levers[i].members[j]
			m.slope = slopes[m.input]
		}
		r.levers[i].narrowed = narrowed[i]
		r.levers[i].prepare(p, bins)
	}
	longest := 0
	for i := range p.terms {
		longest = max(longest, len(p.terms[i].factors)+len(p.terms[i].after))
		r.prepareTerm(&p.terms[i])
	}
	for _, f := range p.overall {
		if l := r.of[f.Input]; l >= 0 && r.levers[l].overall == nil {
			r.levers[l].overall = newFixings()
		}
	}
	for i, k := range p.risks {
		if l := r.of[k.impact]; l >= 0 {
			m := &r.levers[l].members[r.as[k.impact]]
			m.risks = append(m.risks, i)
		}
		r.risk = append(r.risk, riskResponse{narrowed: narrowed[len(r.levers)+i]})
	}
	r.totals, r.forward = make([]float64, r.trials), matrix(longest+2, blockSize)
	m := matrix(9, blockSize)
	r.backward, r.after, r.sums, r.rest, r.overall, r.zero, r.scratch, r.moved, r.cost = m[0], m[1], m[2], m[3], m[4], m[5], m[6], m[7], m[8]
	r.held, r.was = matrix(widest, blockSize), make([][]float64, widest)
	r.window = make([][]float64, len(p.inputs))
	return r
}

// findLevers makes the levers, in the order of the beliefs, and returns the largest
// number of members.
func (r *responder) findLevers() int {
	r.of, r.as = make([]int, len(r.p.inputs)), make([]int, len(r.p.inputs))
	at, widest := make([]int, len(r.p.beliefs)), 0
	for b := range at {
		if r.p.beliefs[b].drawn {
			at[b] = len(r.levers)
			r.levers = append(r.levers, lever{})
		}
	}
	for i := range r.p.inputs {
		r.of[i] = -1
		if in := &r.p.inputs[i]; !in.sampler.Fixed() {
			l := &r.levers[at[in.belief]]
			r.of[i], r.as[i] = at[in.belief], len(l.members)
			l.members = append(l.members, member{input: i})
			widest = max(widest, len(l.members))
		}
	}
	return widest
}

// prepareTerm finds the levers of t that are not linear in it.
func (r *responder) prepareTerm(t *term) {
	for i, f := range t.factors {
		l := r.of[f.Input]
		if l < 0 || r.levers[l].extra != nil {
			continue
		}
		if t.least > 0 || r.uses(t.factors[i+1:], l) || r.uses(t.after, l) {
			r.levers[l].extra = newFixings()
		}
	}
	for i, f := range t.after {
		if l := r.of[f.Input]; l >= 0 && r.levers[l].extra == nil && r.uses(t.after[i+1:], l) {
			r.levers[l].extra = newFixings()
		}
	}
}

// uses reports whether a factor is of the lever.
func (r *responder) uses(factors []pricing.Factor, l int) bool {
	return slices.ContainsFunc(factors, func(f pricing.Factor) bool { return r.of[f.Input] == l })
}

// block takes in trials start to start + n of the replicate, evaluated in c.
func (r *responder) block(c *columns, start, n int) {
	n = min(n, r.trials-start)
	if n <= 0 {
		return
	}
	copy(r.window, c.values)
	r.clear(n)
	for i := range r.p.terms {
		r.term(&r.p.terms[i], n)
	}
	multiply(r.overall[:n], 1, r.p.overall, c.values)
	for i := range r.levers {
		if o := r.levers[i].overall; o != nil {
			for a, col := range o {
				r.fix(i, a, n, func() { multiply(col[:n], 1, r.p.overall, r.window) })
			}
		}
	}
	for _, cost := range c.risks {
		for k, v := range cost[:n] {
			r.rest[k] += v
		}
	}
	copy(r.totals[start:], c.total[:n])
	for i := range r.levers {
		r.respond(&r.levers[i], c, start, n)
	}
	for i := range r.risk {
		r.respondRisk(i, c, start, n)
	}
	r.at = start + n
}

// clear empties the block's sums.
func (r *responder) clear(n int) {
	clear(r.sums[:n])
	clear(r.rest[:n])
	for i := range r.levers {
		l := &r.levers[i]
		for _, m := range l.members {
			clear(m.slope[:n])
		}
		if l.extra != nil {
			for _, col := range l.extra {
				clear(col[:n])
			}
		}
	}
}

// fix runs f with the columns of lever i set to their values at a fixing.
func (r *responder) fix(i, a, n int, f func()) {
	for j, m := range r.levers[i].members {
		r.was[j] = r.window[m.input]
		for k := range r.held[j][:n] {
			r.held[j][k] = m.fixed[a]
		}
		r.window[m.input] = r.held[j]
	}
	f()
	for j, m := range r.levers[i].members {
		r.window[m.input] = r.was[j]
	}
}

// term adds t to the sums, its derivatives to the slopes, and to extra what is
// not linear.
func (r *responder) term(t *term, n int) {
	m := len(t.factors)
	first := r.forward[0][:n]
	for k := range first {
		first[k] = t.coefficient
	}
	r.forwards(t.factors, 0, n)
	charged := r.forward[m][:n]
	if t.least > 0 {
		raised := r.forward[m+1][:n]
		for k, v := range charged {
			raised[k] = max(v, t.least)
		}
		charged, m = raised, m+1
	}
	r.forwards(t.after, m, n)
	value := r.forward[m+len(t.after)][:n]
	for k, v := range value {
		r.sums[k] += v
	}
	twice := r.mark(t)
	back := r.backward[:n]
	for k := range back {
		back[k] = 1
	}
	r.backwards(t.after, m, n)
	if t.least > 0 {
		copy(r.after, back)
		for k := range back {
			back[k] = 1
		}
		r.belowLeast(t, charged, n)
	} else {
		r.backwards(t.factors, 0, n)
	}
	for _, i := range twice {
		r.direct(t, i, value, n)
	}
}

// forwards fills the prefixes after column at: each the one before times a factor.
func (r *responder) forwards(factors []pricing.Factor, at, n int) {
	for j, f := range factors {
		from, to, x, o := r.forward[at+j][:n], r.forward[at+j+1][:n], r.window[f.Input][:n], f.Offset
		for k, v := range from {
			to[k] = v * (o + x[k])
		}
	}
}

// backwards adds prefix times suffix to the slope of each factor's lever, and
// takes the factors into the suffix.
func (r *responder) backwards(factors []pricing.Factor, at, n int) {
	back := r.backward[:n]
	for j := len(factors) - 1; j >= 0; j-- {
		f := factors[j]
		from, x, o := r.forward[at+j][:n], r.window[f.Input][:n], f.Offset
		if l := r.of[f.Input]; l >= 0 && !r.levers[l].duplicate {
			slope := r.levers[l].members[r.as[f.Input]].slope[:n]
			for k, v := range from {
				slope[k] += float64(v * back[k])
			}
		}
		for k, v := range x {
			back[k] *= o + v
		}
	}
}

// belowLeast adds to extra what each factor below a minimum charge does.
func (r *responder) belowLeast(t *term, charged []float64, n int) {
	back, after := r.backward[:n], r.after[:n]
	for j := len(t.factors) - 1; j >= 0; j-- {
		f := t.factors[j]
		from, x := r.forward[j][:n], r.window[f.Input][:n]
		if l := r.of[f.Input]; l >= 0 && !r.levers[l].duplicate {
			for a, col := range r.levers[l].extra {
				value := f.Offset + r.levers[l].members[r.as[f.Input]].fixed[a]
				for k, v := range from {
					fixed := max(float64(float64(v*back[k])*value), t.least)
					col[k] += float64((fixed - charged[k]) * after[k])
				}
			}
		}
		for k, v := range x {
			back[k] *= f.Offset + v
		}
	}
}

// mark notes the levers that are in t twice, and returns them.
func (r *responder) mark(t *term) []int {
	var twice []int
	visit := func(factors, others []pricing.Factor) {
		for i, f := range factors {
			l := r.of[f.Input]
			if l < 0 || r.levers[l].extra == nil || r.levers[l].duplicate {
				continue
			}
			if r.uses(factors[i+1:], l) || r.uses(others, l) {
				r.levers[l].duplicate = true
				twice = append(twice, l)
			}
		}
	}
	visit(t.factors, t.after)
	visit(t.after, nil)
	return twice
}

// direct evaluates t with lever i fixed.
func (r *responder) direct(t *term, i int, value []float64, n int) {
	for a, col := range r.levers[i].extra {
		r.fix(i, a, n, func() { t.value(r.after[:n], r.window) })
		for k, v := range r.after[:n] {
			col[k] += v - value[k]
		}
	}
	r.levers[i].duplicate = false
}
