package ranges

import "spanwright/estimate/pricing"

// blockSize is the number of trials evaluated together: a column of an input is
// then 2 kB, and the columns of some hundred inputs stay in a core's cache.
const blockSize = 256

// columns holds one block of trials: a column for each input, and the results.
type columns struct {
	values     [][]float64 // input × trial
	categories [][]float64 // category × trial, with the overall factors
	total      []float64
	product    []float64
	overall    []float64
}

// newColumns returns storage for blocks of at most n trials.
func (p *program) newColumns(n int) *columns {
	return &columns{
		values:     matrix(len(p.inputs), n),
		categories: matrix(len(p.categories), n),
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

// evaluate computes categories and total of the first n trials from the values.
func (p *program) evaluate(c *columns, n int) {
	for _, col := range c.categories {
		clear(col[:n])
	}
	product := c.product[:n]
	for i := range p.terms {
		t := &p.terms[i]
		multiply(product, t.coefficient, t.factors, c.values)
		sum := c.categories[t.category][:n]
		for k, v := range product {
			sum[k] += v
		}
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
}

// multiply sets dst to coefficient · Π (offset + value).
func multiply(dst []float64, coefficient float64, factors []pricing.Factor, values [][]float64) {
	for k := range dst {
		dst[k] = coefficient
	}
	for _, f := range factors {
		x := values[f.Input][:len(dst)]
		offset := f.Offset
		for k, v := range x {
			dst[k] *= offset + v
		}
	}
}

// base evaluates the model at its base values: the total and each category.
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
