package ranges

import "spanwright/estimate/pricing"

// blockSize is the number of trials evaluated together: a column of an input is
// then 2 kB, and the columns of some hundred inputs stay in a core's cache.
const blockSize = 256

// columns holds one block of trials: a column for each input, and the results.
type columns struct {
	values     [][]float64 // input × trial
	occurs     [][]float64 // risk × trial: 1 where it occurs, else 0
	categories [][]float64 // category × trial, with the overall factors
	risks      [][]float64 // risk × trial: its cost
	total      []float64
	product    []float64
	overall    []float64
}

// newColumns returns storage for blocks of at most n trials.
func (p *program) newColumns(n int) *columns {
	return &columns{
		values:     matrix(len(p.inputs), n),
		occurs:     matrix(len(p.risks), n),
		categories: matrix(len(p.categories), n),
		risks:      matrix(len(p.risks), n),
		total:      make([]float64, n),
		product:    make([]float64, n),
		overall:    make([]float64, n),
	}
}

// matrix returns rows × n zeros in one allocation.
func matrix(rows, n int) [][]float64 {
	all := make([]float64, rows*n)
	m := make([][]float64, rows)
	for i := range m {
		m[i] = all[i*n : (i+1)*n : (i+1)*n]
	}
	return m
}

// evaluate computes categories, risks and total of the first n trials from the
// values and occurrences.
func (p *program) evaluate(c *columns, n int) {
	for _, col := range c.categories {
		clear(col[:n])
	}
	for i := range p.terms {
		t := &p.terms[i]
		t.addTo(c.categories[t.category][:n], c.product[:n], c.values)
	}
	overall, total := c.overall[:n], c.total[:n]
	multiply(overall, 1, p.overall, c.values)
	clear(total)
	for _, col := range c.categories {
		col = col[:n]
		for k, v := range overall {
			x := float64(col[k] * v) // not fused with the sum: same bits everywhere
			col[k] = x
			total[k] += x
		}
	}
	for i := range p.risks {
		x, occurs, cost := c.values[p.risks[i].impact][:n], c.occurs[i][:n], c.risks[i][:n]
		for k, v := range x {
			cost[k] = float64(v * occurs[k])
			total[k] += cost[k]
		}
	}
}

// addTo adds the values of t to dst; product is storage of the same length. The
// shortest products take one pass: the same operations in the same order.
func (t *term) addTo(dst, product []float64, values [][]float64) {
	f := t.factors
	switch {
	case t.plain() && len(f) == 1:
		addOne(dst, t.coefficient, f[0].Offset, values[f[0].Input])
	case t.plain() && len(f) == 2:
		addTwo(dst, t.coefficient, f[0].Offset, f[1].Offset, values[f[0].Input], values[f[1].Input])
	default:
		t.value(product, values)
		for k, v := range product {
			dst[k] += v
		}
	}
}

// addOne adds c·(o + x) to dst.
func addOne(dst []float64, c, o float64, x []float64) {
	x = x[:len(dst)]
	for k, v := range x {
		dst[k] += float64(c * (o + v))
	}
}

// addTwo adds c·(o + x)·(q + y) to dst.
func addTwo(dst []float64, c, o, q float64, x, y []float64) {
	x, y = x[:len(dst)], y[:len(dst)]
	for k, v := range x {
		dst[k] += float64(float64(c*(o+v)) * (q + y[k]))
	}
}

// value sets dst to the values of t.
func (t *term) value(dst []float64, values [][]float64) {
	multiply(dst, t.coefficient, t.factors, values)
	if t.least > 0 {
		for k, v := range dst {
			if v < t.least {
				dst[k] = t.least
			}
		}
	}
	timesAll(dst, t.after, values)
}

// multiply sets dst to coefficient · Π (offset + value), multiplied from left to
// right.
func multiply(dst []float64, coefficient float64, factors []pricing.Factor, values [][]float64) {
	if len(factors) == 0 {
		for k := range dst {
			dst[k] = coefficient
		}
		return
	}
	o, x := factors[0].Offset, values[factors[0].Input][:len(dst)]
	for k, v := range x {
		dst[k] = coefficient * (o + v)
	}
	timesAll(dst, factors[1:], values)
}

// timesAll multiplies dst by Π (offset + value) from left to right, three factors
// in each pass over dst.
func timesAll(dst []float64, f []pricing.Factor, values [][]float64) {
	for ; len(f) >= 3; f = f[3:] {
		o, q, s := f[0].Offset, f[1].Offset, f[2].Offset
		x, y, z := values[f[0].Input][:len(dst)], values[f[1].Input][:len(dst)], values[f[2].Input][:len(dst)]
		for k, v := range x {
			dst[k] = float64(float64(dst[k]*(o+v))*(q+y[k])) * (s + z[k])
		}
	}
	for _, g := range f {
		o, x := g.Offset, values[g.Input][:len(dst)]
		for k, v := range x {
			dst[k] *= o + v
		}
	}
}

// base evaluates the model at its base values, no risk occurring: the total and
// each category.
func (p *program) base() (float64, []float64) {
	c := p.newColumns(1)
	for i := range p.inputs {
		c.values[i][0] = p.inputs[i].sampler.Base()
	}
	p.evaluate(c, 1)
	categories := make([]float64, len(p.categories))
	for i := range categories {
		categories[i] = c.categories[i][0]
	}
	return c.total[0], categories
}
