package ranges

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// repair is a matrix made positive definite.
type repair struct {
	latent, lower [][]float64
	first, second string  // the assumptions of the entry that changed most
	from, to      float64 // its ρ
}

// message states the repair in one line.
func (r *repair) message() string {
	return fmt.Sprintf("the correlation matrix is not positive definite; in the nearest one that is, ρ of %q and %q changes most: from %.4g to %.4g", r.first, r.second, r.from, r.to)
}

// Settings of the alternating projections. Entries are rounded at the end, so
// that the last iterations leave no trace in the draws.
const (
	repairFloor  = 1e-6 // least eigenvalue, so that the result can be factored
	repairRounds = 200
	repairClose  = 1e-10
	repairDigits = 1e9
	repairShrink = 1 - 1e-4 // of the correlations, where the rounds did not end it
)

// nearest returns the correlation matrix nearest to a, m's latent correlations. A
// change of an entry of m by more than MaxRepair is an error that names it.
func (m *Matrix) nearest(a [][]float64) (*repair, error) {
	y, err := nearestCorrelation(a, repairFloor)
	if err != nil {
		return nil, err
	}
	return m.repaired(y)
}

// nearestCorrelation returns the correlation matrix nearest to the symmetric a in
// the Frobenius norm, by alternating projections on the matrices of unit diagonal
// and on those without eigenvalues below floor, with Dykstra's correction (Higham
// 2002, "Computing the nearest correlation matrix: a problem from finance", IMA
// Journal of Numerical Analysis 22, algorithm 3.3).
func nearestCorrelation(a [][]float64, floor float64) (*mat.SymDense, error) {
	n := len(a)
	y, correction := mat.NewSymDense(n, nil), mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			y.SetSym(i, j, a[i][j])
		}
	}
	for range repairRounds {
		r := difference(y, correction)
		x, err := projectPositive(r, floor)
		if err != nil {
			return nil, err
		}
		correction = difference(x, r)
		var moved float64
		for i := range n {
			for j := i; j < n; j++ {
				next := x.At(i, j)
				if i == j {
					next = 1
				}
				moved = max(moved, math.Abs(next-y.At(i, j)))
				y.SetSym(i, j, next)
			}
		}
		if moved < repairClose {
			break
		}
	}
	return y, nil
}

// difference returns a − b.
func difference(a, b *mat.SymDense) *mat.SymDense {
	n := a.SymmetricDim()
	c := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			c.SetSym(i, j, a.At(i, j)-b.At(i, j))
		}
	}
	return c
}

// projectPositive returns r with its eigenvalues raised to floor.
func projectPositive(r *mat.SymDense, floor float64) (*mat.SymDense, error) {
	var eigen mat.EigenSym
	if !eigen.Factorize(r, true) {
		return nil, fault("matrix", "eigenvalues that do not converge", "correlations between −1 and 1")
	}
	values, n := eigen.Values(nil), r.SymmetricDim()
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	x := mat.NewSymDense(n, nil)
	x.CopySym(r)
	column := make([]float64, n)
	for k, v := range values {
		if v < floor {
			mat.Col(column, k, &vectors)
			x.SymRankOne(x, floor-v, mat.NewVecDense(n, column))
		}
	}
	return x, nil
}

// repaired rounds and factors y, and compares it with m.
func (m *Matrix) repaired(y *mat.SymDense) (*repair, error) {
	n := len(m.IDs)
	r := &repair{latent: matrix(n, n)}
	worst := -1.0
	for i := range n {
		for j := range n {
			v := math.Round(y.At(i, j)*repairDigits) / repairDigits
			r.latent[i][j] = max(-1, min(v, 1))
			rho := 6 / math.Pi * math.Asin(r.latent[i][j]/2)
			if change := math.Abs(rho - m.Rho[i][j]); i < j && change > worst {
				worst = change
				r.first, r.second, r.from, r.to = m.IDs[i], m.IDs[j], m.Rho[i][j], rho
			}
		}
	}
	if !(worst <= MaxRepair) {
		return nil, fault(fmt.Sprintf("matrix.rho of %q and %q", r.first, r.second),
			fmt.Sprintf("%v, which together with the other correlations is impossible; the nearest matrix that is possible has %.4g", r.from, r.to),
			fmt.Sprintf("correlations that fit together with changes of at most %v", MaxRepair))
	}
	var ok bool
	for r.lower, ok = cholesky(r.latent); !ok; r.lower, ok = cholesky(r.latent) {
		for i := range n {
			for j := range n {
				if i != j {
					r.latent[i][j] *= repairShrink
				}
			}
		}
	}
	return r, nil
}
