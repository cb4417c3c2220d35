package ranges

import "spanwright/estimate/spread"

// drawer draws blocks of trials of one program.
type drawer struct {
	p         *program
	columns   *columns
	replicate uint32
	orders    []permutation // per input without a row of the matrix
	common    []permutation // per group
	rows      []permutation // per row of the matrix
	chances   []permutation // per risk
	normals   [][]float64   // group × trial: the common factor
	plain     [][]float64   // row of the matrix × trial: its own numbers
	mixed     [][]float64   // row of the matrix × trial: correlated
}

// newDrawer allocates storage for replicates of the given number of trials.
func newDrawer(p *program, trials int) drawer {
	permutations := func(n int) []permutation {
		out := make([]permutation, n)
		for i := range out {
			out[i] = newPermutation(trials)
		}
		return out
	}
	d := drawer{
		p: p, columns: p.newColumns(blockSize),
		orders: permutations(len(p.inputs)), common: permutations(len(p.groups)), chances: permutations(len(p.risks)),
		normals: matrix(len(p.groups), blockSize),
	}
	if p.matrix != nil {
		n := len(p.matrix.ids)
		d.rows, d.plain, d.mixed = permutations(n), matrix(n, blockSize), matrix(n, blockSize)
	}
	return d
}

// begin draws the orders of replicate r.
func (d *drawer) begin(r int) {
	d.replicate = uint32(r)
	for i := range d.orders {
		if d.p.inputs[i].row < 0 {
			d.orders[i].draw(&d.p.inputs[i].draws.order, r)
		}
	}
	for i := range d.common {
		d.common[i].draw(&d.p.groups[i].draws.order, r)
	}
	for i := range d.rows {
		d.rows[i].draw(&d.p.matrix.draws[i].order, r)
	}
	for i := range d.chances {
		d.chances[i].draw(&d.p.risks[i].draws.order, r)
	}
}

// draw fills values and occurrences with trials start to start + n.
func (d *drawer) draw(start, n int) {
	d.latents(start, n)
	for i := range d.p.inputs {
		in, x := &d.p.inputs[i], d.columns.values[i][:n]
		switch {
		case in.sampler.Fixed():
			for k := range x {
				x[k] = in.sampler.Base()
			}
		case d.latent(x, i, start):
			in.sampler.FillNormal(x, x)
		default:
			in.sampler.FillUniform(x, x)
		}
	}
	d.occurrences(start, n)
}

// latents draws what inputs share: common factors and the rows of the matrix.
func (d *drawer) latents(start, n int) {
	for i := range d.p.groups {
		z := d.normals[i][:n]
		d.p.groups[i].draws.fill(z, &d.common[i], int(d.replicate), start)
		spread.FillStandardNormal(z, z)
	}
	for i := range d.rows {
		z := d.plain[i][:n]
		d.p.matrix.draws[i].fill(z, &d.rows[i], int(d.replicate), start)
		spread.FillStandardNormal(z, z)
	}
	if d.p.matrix != nil {
		d.p.matrix.apply(d.mixed, d.plain, n)
	}
}

// latent sets x to what input i's values are made of: standard normal numbers
// where it is correlated (true), else uniform ones.
func (d *drawer) latent(x []float64, i, start int) bool {
	in := &d.p.inputs[i]
	if in.row >= 0 {
		copy(x, d.mixed[in.row])
		return true
	}
	in.draws.fill(x, &d.orders[i], int(d.replicate), start)
	if in.group < 0 {
		return false
	}
	g := &d.p.groups[in.group]
	spread.FillCorrelated(x, x, d.normals[in.group], g.common, g.own)
	return true
}

// occurrences sets 1 where a risk occurs and 0 where it does not. One uniform in
// each stratum makes the frequency right to 1/n.
func (d *drawer) occurrences(start, n int) {
	for i := range d.p.risks {
		r, u := &d.p.risks[i], d.columns.occurs[i][:n]
		r.draws.fill(u, &d.chances[i], int(d.replicate), start)
		for k, v := range u {
			u[k] = 0
			if v < r.probability {
				u[k] = 1
			}
		}
	}
}
