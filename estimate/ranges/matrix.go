package ranges

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/blas/gonum"

	"spanwright/estimate/pricing"
)

// Matrix holds Spearman's rank correlations between assumptions. Those in it
// leave their group, and are independent of everything outside of it. Assumptions of
// one stream have the row of their stream.
type Matrix struct {
	IDs []string    // assumptions or streams, each once, in any order
	Rho [][]float64 // len(IDs) × len(IDs): symmetric, 1 on the diagonal, −1 to 1
}

// Limits of a matrix.
const (
	MaxMatrix = 300  // assumptions
	MaxRepair = 0.05 // largest change of an entry by repair, in units of ρ
)

// matrixFaults are told at once, up to this number.
const matrixFaults = 20

// mixing turns independent standard normal numbers of the matrix's assumptions
// into correlated ones: y = L·z with L·Lᵀ the latent correlations. The first
// assumption keeps its own numbers; each later one depends on those before it.
type mixing struct {
	ids        []string
	rows       map[string]int
	lower      [][]float64 // L, row i of length i + 1
	latent     [][]float64 // L·Lᵀ before the factoring
	draws      []uniforms  // the streams of the assumptions themselves
	correlated bool
	repair     *repair // nil where the matrix stands as given
}

// compile checks m and factors it; nil for nil. The error holds an *Error for
// each fault, up to matrixFaults of them.
func (m *Matrix) compile(seed uint64) (*mixing, error) {
	if m == nil || len(m.IDs) == 0 && len(m.Rho) == 0 {
		return nil, nil
	}
	mix := &mixing{ids: m.IDs, rows: map[string]int{}}
	if err := m.check(mix.rows); err != nil {
		return nil, err
	}
	n := len(m.IDs)
	mix.latent = matrix(n, n)
	for i, row := range m.Rho {
		mix.draws = append(mix.draws, newUniforms(seed, "assumption", m.IDs[i]))
		for j, rho := range row {
			mix.latent[i][j] = LatentCorrelation(rho)
			mix.correlated = mix.correlated || i != j && rho != 0
		}
		mix.latent[i][i] = 1
	}
	lower, ok := cholesky(mix.latent)
	if !ok {
		var err error
		if mix.repair, err = m.nearest(mix.latent); err != nil {
			return nil, err
		}
		mix.latent = mix.repair.latent
		lower = mix.repair.lower
	}
	mix.lower = lower
	return mix, nil
}

// check tests the form of m, all faults at once, and numbers its ids.
func (m *Matrix) check(rows map[string]int) error {
	n := len(m.IDs)
	if n > MaxMatrix {
		return fault("matrix.ids", n, fmt.Sprintf("at most %d assumptions", MaxMatrix))
	}
	var faults []error
	add := func(field string, found any, accepted string) {
		if len(faults) < matrixFaults {
			faults = append(faults, fault(field, found, accepted))
		}
	}
	for i, id := range m.IDs {
		if first, ok := rows[id]; ok || id == "" {
			add(fmt.Sprintf("matrix.ids[%d]", i), fmt.Sprintf("%q, also at %d", id, first), "each assumption's id once")
		}
		rows[id] = i
	}
	if len(m.Rho) != n {
		add("matrix.rho", fmt.Sprintf("%d rows", len(m.Rho)), fmt.Sprintf("a square matrix: %d rows, one for each id", n))
	}
	for i := range min(n, len(m.Rho)) {
		if len(m.Rho[i]) != n {
			add(fmt.Sprintf("matrix.rho row %q", m.IDs[i]), fmt.Sprintf("%d entries", len(m.Rho[i])), fmt.Sprintf("a square matrix: %d entries", n))
		}
	}
	if len(faults) > 0 {
		return errors.Join(faults...)
	}
	for i, row := range m.Rho {
		if row[i] != 1 {
			add(fmt.Sprintf("matrix.rho of %q with itself", m.IDs[i]), row[i], "1")
		}
		for j := range i {
			a, b := row[j], m.Rho[j][i]
			where := fmt.Sprintf("matrix.rho of %q and %q", m.IDs[j], m.IDs[i])
			switch {
			case !(-1 <= a && a <= 1):
				add(where, a, "a rank correlation ρ, −1 to 1")
			case a != b:
				add(where, fmt.Sprintf("%v above the diagonal, %v below", b, a), "a symmetric matrix")
			}
		}
	}
	return errors.Join(faults...)
}

// row returns the row of an assumption, −1 where it has none.
func (mix *mixing) row(id string) int {
	if mix == nil {
		return -1
	}
	if i, ok := mix.rows[id]; ok {
		return i
	}
	return -1
}

// checkKnown tests that each id of the matrix is an assumption of the model.
func (mix *mixing) checkKnown(inputs []pricing.Input, use purpose) error {
	if mix == nil || use.joint {
		return nil
	}
	known := map[string]bool{}
	for _, in := range inputs {
		known[keyOf(in)] = true
	}
	return mix.unknown(known)
}

// unknown returns an error that names the ids of the matrix that are not known.
func (mix *mixing) unknown(known map[string]bool) error {
	var faults []error
	for i, id := range mix.ids {
		if !known[id] && len(faults) < matrixFaults {
			faults = append(faults, fault(fmt.Sprintf("matrix.ids[%d]", i), fmt.Sprintf("%q", id), "the id of an assumption that the total depends on"))
		}
	}
	return errors.Join(faults...)
}

// semidefinite is the pivot that counts as zero: of two assumptions of ρ = 1 one
// is a function of the other.
const semidefinite = 1e-10

// cholesky returns L with L·Lᵀ = a, lower triangular; false where a is not
// positive semidefinite. A column whose pivot is zero is zero.
func cholesky(a [][]float64) ([][]float64, bool) {
	L := make([][]float64, len(a))
	for i := range a {
		L[i] = make([]float64, i+1)
		for j := range i + 1 {
			rest := a[i][j]
			for k := range j {
				rest -= float64(L[i][k] * L[j][k])
			}
			switch {
			case i == j && !(rest >= -semidefinite):
				return nil, false
			case i == j && rest > semidefinite:
				L[i][i] = math.Sqrt(rest)
			case i != j && L[j][j] > 0:
				L[i][j] = rest / L[j][j]
			case i != j && !(math.Abs(rest) <= 1e-7):
				return nil, false
			}
		}
	}
	return L, true
}

// rowsTogether is the number of rows of L that go through the columns of z
// together, so that each column is read from the near cache but once in as many.
const rowsTogether = 8

// apply sets y to L·z for columns of n trials. Each element is summed in the order
// of L's columns; the kernel multiplies and adds without fusing on amd64.
func (mix *mixing) apply(y, z [][]float64, n int) {
	var kernel gonum.Implementation
	for first := 0; first < len(y); first += rowsTogether {
		last := min(first+rowsTogether, len(y))
		for i := first; i < last; i++ {
			clear(y[i][:n])
		}
		for j := range last {
			for i := max(first, j); i < last; i++ {
				if l := mix.lower[i][j]; l != 0 {
					kernel.Daxpy(n, l, z[j], 1, y[i], 1)
				}
			}
		}
	}
}
