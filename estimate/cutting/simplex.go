package cutting

import "math"

const (
	tolerance = 1e-9
	refactor  = 60 // pivots between fresh inverses
)

// entry is one column of the linear program, in rows of the program.
type entry struct {
	price float64
	rows  []int
	coefs []float64
	use   int // index into the columns, or one of the kinds below
}

// Kinds of entries that are no bars.
const (
	artificial = -1 - iota // a piece from nowhere
	surplus                // a piece too many
	slack                  // a bar not used
)

// simplex is a revised simplex method with an explicit inverse: least price·x
// with rows·x = right, x ≥ 0 (Chvátal, Linear Programming, 1983, chapter 7).
// The right-hand side is not negative and the first basis is diagonal.
type simplex struct {
	n       int
	right   []float64
	basis   []entry
	inverse []float64 // n × n by rows
	x       []float64 // of the basis
	duals   []float64
	pivots  int
	work    []float64
}

// newSimplex starts from a basis whose entry i stands in row i alone.
func newSimplex(right []float64, basis []entry) *simplex {
	n := len(right)
	s := &simplex{n: n, right: right, basis: basis, inverse: make([]float64, n*n), x: make([]float64, n),
		duals: make([]float64, n), work: make([]float64, n)}
	for i, e := range basis {
		s.inverse[i*n+i] = 1 / e.coefs[0]
		s.x[i] = right[i] / e.coefs[0]
	}
	s.price()
	return s
}

// price sets the duals: prices of the basis times the inverse.
func (s *simplex) price() {
	clear(s.duals)
	for i, e := range s.basis {
		if e.price == 0 {
			continue
		}
		row := s.inverse[i*s.n : (i+1)*s.n]
		for j, v := range row {
			s.duals[j] += float64(e.price * v)
		}
	}
}

// reduced returns the reduced price of an entry.
func (s *simplex) reduced(e *entry) float64 {
	r := e.price
	for k, row := range e.rows {
		r -= float64(s.duals[row] * e.coefs[k])
	}
	return r
}

// enter brings the entry into the basis; false where it changes nothing safely.
func (s *simplex) enter(e entry) bool {
	clear(s.work)
	for k, row := range e.rows {
		for i := range s.n {
			s.work[i] += float64(s.inverse[i*s.n+row] * e.coefs[k])
		}
	}
	out := s.leaving()
	if out < 0 {
		return false
	}
	s.pivot(out)
	s.basis[out] = e
	s.pivots++
	if s.pivots%refactor == 0 && !s.invert() {
		return false
	}
	s.price()
	return true
}

// leaving is the ratio test: the least ratio, among equals the largest pivot.
func (s *simplex) leaving() int {
	out, least := -1, math.Inf(1)
	for i, a := range s.work {
		if a <= 1e-8 {
			continue
		}
		r := math.Max(0, s.x[i]) / a
		if r < least-1e-12 || r <= least+1e-12 && (out < 0 || a > s.work[out]) {
			out, least = i, r
		}
	}
	return out
}

// pivot applies the eta column in work at row out.
func (s *simplex) pivot(out int) {
	n := s.n
	lead := s.inverse[out*n : (out+1)*n]
	p := s.work[out]
	for j := range lead {
		lead[j] /= p
	}
	s.x[out] /= p
	for i := range n {
		f := s.work[i]
		if i == out || f == 0 {
			continue
		}
		row := s.inverse[i*n : (i+1)*n]
		for j, v := range lead {
			row[j] -= float64(f * v)
		}
		s.x[i] -= float64(f * s.x[out])
	}
}

// invert makes the inverse of the basis afresh; false where it is singular.
func (s *simplex) invert() bool {
	n := s.n
	m := make([]float64, n*n)
	for j, e := range s.basis {
		for k, row := range e.rows {
			m[row*n+j] = e.coefs[k]
		}
	}
	inv := make([]float64, n*n)
	for i := range n {
		inv[i*n+i] = 1
	}
	for c := range n {
		if !eliminate(m, inv, n, c) {
			return false
		}
	}
	s.inverse = inv
	for i := range n {
		s.x[i] = 0
		for j, b := range s.right {
			s.x[i] += float64(inv[i*n+j] * b)
		}
	}
	return true
}

// eliminate clears column c of m by Gauss-Jordan with row pivoting.
func eliminate(m, inv []float64, n, c int) bool {
	best := c
	for i := c + 1; i < n; i++ {
		if math.Abs(m[i*n+c]) > math.Abs(m[best*n+c]) {
			best = i
		}
	}
	p := m[best*n+c]
	if !(math.Abs(p) > 1e-11) {
		return false
	}
	for j := range n {
		m[c*n+j], m[best*n+j] = m[best*n+j], m[c*n+j]
		inv[c*n+j], inv[best*n+j] = inv[best*n+j], inv[c*n+j]
		m[c*n+j] /= p
		inv[c*n+j] /= p
	}
	for i := range n {
		f := m[i*n+c]
		if i == c || f == 0 {
			continue
		}
		for j := range n {
			m[i*n+j] -= float64(f * m[c*n+j])
			inv[i*n+j] -= float64(f * inv[c*n+j])
		}
	}
	return true
}
