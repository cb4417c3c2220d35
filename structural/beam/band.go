package beam

import "math"

// half is the half bandwidth: an element's unknowns are v, θ of its left node
// and v, θ of its right node, with one more rotation between at a hinge.
const half = 4

// band is a symmetric positive definite matrix in band form, scaled to a unit
// diagonal and factorised in place as L D Lᵀ.
type band struct {
	n     int
	a     []float64 // row i: (i, i), (i, i-1), … (i, i-half)
	scale []float64 // 1/√ of the diagonal before scaling
	work  []float64 // one value a row
}

func newBand(n int) *band {
	m := new(band)
	m.reset(n)
	return m
}

// reset makes m a matrix of zeros, in its own memory.
func (m *band) reset(n int) {
	m.n = n
	m.a, m.scale, m.work = sized(m.a, n*(half+1)), sized(m.scale, n), sized(m.work, n)
}

// add adds v to the entries (i, j) and (j, i).
func (m *band) add(i, j int, v float64) {
	if j <= i {
		m.a[i*(half+1)+i-j] += v
	}
}

// row returns row i from the diagonal to the left.
func (m *band) row(i int) []float64 { return m.a[i*(half+1) : (i+1)*(half+1)] }

// equilibrate scales the matrix to a unit diagonal, which makes the condition
// number of a band matrix nearly as small as scaling can (van der Sluis 1969),
// and returns its 1-norm.
func (m *band) equilibrate() float64 {
	for i := range m.n {
		m.scale[i] = 1 / math.Sqrt(m.row(i)[0])
	}
	sums := m.work
	clear(sums)
	for i := range m.n {
		r := m.row(i)
		for k := range min(half, i) + 1 {
			r[k] *= m.scale[i] * m.scale[i-k]
			sums[i] += math.Abs(r[k])
			if k > 0 {
				sums[i-k] += math.Abs(r[k])
			}
		}
	}
	norm := 0.0
	for _, s := range sums {
		norm = max(norm, s)
	}
	return norm
}

// factorise replaces the matrix by its factors. It returns the first row whose
// pivot is not above smallest, or -1.
func (m *band) factorise(smallest float64) int {
	for i := range m.n {
		ri := m.row(i)
		for k := min(half, i); k >= 0; k-- {
			j := i - k
			rj := m.row(j)
			s := ri[k]
			for p := max(0, i-half); p < j; p++ {
				s -= ri[i-p] * rj[j-p] * m.row(p)[0]
			}
			if k > 0 {
				s /= rj[0]
			}
			ri[k] = s
		}
		if !(ri[0] > smallest) {
			return i
		}
	}
	return -1
}

// solveScaled solves the scaled system in place; x is zero before row first.
func (m *band) solveScaled(x []float64, first int) {
	for i := first + 1; i < m.n; i++ {
		r, v := m.row(i), x[i]
		for k := 1; k <= min(half, i-first); k++ {
			v -= r[k] * x[i-k]
		}
		x[i] = v
	}
	for i := m.n - 1; i >= 0; i-- {
		v := x[i] / m.a[i*(half+1)]
		for k := 1; k <= half && i+k < m.n; k++ {
			v -= m.a[(i+k)*(half+1)+k] * x[i+k]
		}
		x[i] = v
	}
}

// solve solves the unscaled system in place.
func (m *band) solve(x []float64) {
	for i := range x {
		x[i] *= m.scale[i]
	}
	m.solveScaled(x, 0)
	for i := range x {
		x[i] *= m.scale[i]
	}
}

// inverseNorm returns the 1-norm of the inverse of the scaled matrix, column by
// column: members have few supports, and an estimate can be far too low.
func (m *band) inverseNorm() float64 {
	norm := 0.0
	x := m.work
	for j := range m.n {
		clear(x)
		x[j] = 1
		m.solveScaled(x, j)
		sum := 0.0
		for _, v := range x {
			sum += math.Abs(v)
		}
		norm = max(norm, sum)
	}
	return norm
}
