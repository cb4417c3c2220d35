package ranges

import (
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// symmetric returns the matrix with the given lower triangle.
func symmetric(ids []string, lower ...[]float64) *Matrix {
	m := &Matrix{IDs: ids, Rho: matrix(len(ids), len(ids))}
	for i, row := range lower {
		m.Rho[i][i] = 1
		for j, v := range row {
			m.Rho[i][j], m.Rho[j][i] = v, v
		}
	}
	return m
}

var everyID = []string{"a uniform", "b triangular", "c pert", "d lognormal"}

// Reference: the definition of Spearman's coefficient; within 0.01 at 102,400
// trials, negative correlations included.
func TestMatrixSpearmanAchieved(t *testing.T) {
	mx := symmetric(everyID, nil, []float64{0.6}, []float64{-0.4, 0.1}, []float64{0.2, 0.7, 0.3})
	v := values(t, everySpread("g"), Settings{Seed: 3, Trials: 3200, Matrix: mx})
	for i := range v {
		for j := range i {
			if got := spearman(v[i], v[j]); math.Abs(got-mx.Rho[i][j]) > 0.01 {
				t.Errorf("%s and %s: ρ = %.4f, want %v", everyID[i], everyID[j], got, mx.Rho[i][j])
			}
		}
	}
}

// Two of a group in the matrix leave it; the others keep theirs.
func TestMatrixInputsLeaveTheirGroup(t *testing.T) {
	mx := symmetric([]string{"c pert", "a uniform"}, nil, []float64{0.5})
	s := Settings{Seed: 3, Trials: 3200, Matrix: mx, Correlation: map[string]float64{"g": 0.8}}
	v := values(t, everySpread("g"), s)
	for _, c := range []struct {
		i, j int
		want float64
	}{{0, 2, 0.5}, {1, 3, 0.8}, {0, 1, 0}, {2, 3, 0}} {
		if got := spearman(v[c.i], v[c.j]); math.Abs(got-c.want) > 0.01 {
			t.Errorf("%s and %s: ρ = %.4f, want %v", everyID[c.i], everyID[c.j], got, c.want)
		}
	}
	if r := simulate(t, everySpread("g"), Settings{Trials: 64, Matrix: mx, Correlation: s.Correlation}); len(r.Warnings) != 0 {
		t.Errorf("warnings %v", r.Warnings)
	}
}

// Source: the ten lines of TestTenLines at ρ = 1, where each is the same function
// of one number: 918.3, 1081.7, 1235.4, 1312.9 thousand.
func TestTenLinesWhollyCorrelated(t *testing.T) {
	var lines []spread.Spread
	for range 10 {
		lines = append(lines, spread.NewTriangular(80, 100, 150))
	}
	m := sumModel(lines, "")
	r := simulate(t, m, Settings{Seed: 4, Matrix: equalMatrix(m, 1)})
	for i, want := range []float64{918.3, 1081.7, 1235.4, 1312.9} {
		if p := r.Percentiles[i]; math.Abs(p.Value-want) > 4*p.SE+0.05 {
			t.Errorf("P%.0f = %.2f ± %.2f, want %.2f", 100*p.P, p.Value, p.SE, want)
		}
	}
	two := sumModel([]spread.Spread{spread.NewUniform(1, 3), spread.NewUniform(1, 3)}, "")
	mx := symmetric([]string{"line 000", "line 001"}, nil, []float64{-1})
	if r := simulate(t, two, Settings{Trials: 256, Matrix: mx}); math.Abs(r.Mean-4) > 1e-7 || r.SD > 1e-7 {
		t.Errorf("ρ = −1: mean %v, deviation %v; want 4, 0", r.Mean, r.SD)
	}
}

// Source: Higham 2002, section 4: the nearest correlation matrix to
// [1 1 0; 1 1 1; 0 1 1] has 0.7607 and 0.1573 (from memory).
func TestNearestCorrelation(t *testing.T) {
	y, err := nearestCorrelation([][]float64{{1, 1, 0}, {1, 1, 1}, {0, 1, 1}}, 0)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		i, j int
		want float64
	}{{0, 0, 1}, {0, 1, 0.7607}, {1, 2, 0.7607}, {0, 2, 0.1573}} {
		if got := y.At(c.i, c.j); math.Abs(got-c.want) > 5e-5 {
			t.Errorf("entry %d, %d = %.5f, want %v", c.i, c.j, got, c.want)
		}
	}
}

func TestMatrixIsRepairedAndSaid(t *testing.T) {
	// ρ = 0.9 twice asks for at least about 0.62 between the other two.
	mx := symmetric(everyID[:3], nil, []float64{0.9}, []float64{0.9, 0.58})
	r := simulate(t, everySpread(""), Settings{Seed: 2, Trials: 3200, Matrix: mx})
	if len(r.Warnings) != 1 || r.Warnings[0].Code != WarningRepaired || !strings.Contains(r.Warnings[0].Message, `"a uniform" and "b triangular" changes most: from 0.9 to 0.887`) {
		t.Errorf("warnings %v", r.Warnings)
	}
	v := values(t, everySpread(""), Settings{Seed: 2, Trials: 3200, Matrix: mx})
	for i, row := range mx.Rho {
		for j := range i {
			if got := spearman(v[i], v[j]); math.Abs(got-row[j]) > MaxRepair {
				t.Errorf("%d, %d: ρ = %.4f, asked %v", i, j, got, row[j])
			}
		}
	}
	mx = symmetric(everyID[:3], nil, []float64{0.9}, []float64{0.9, -0.2})
	_, err := Simulate(t.Context(), everySpread(""), Settings{Matrix: mx}, nil)
	if err == nil || !strings.Contains(err.Error(), `matrix.rho of "a uniform" and "b triangular": found 0.9, which together`) {
		t.Errorf("error %v", err)
	}
}

func TestMatrixRefused(t *testing.T) {
	fine := func() *Matrix {
		return symmetric(everyID, nil, []float64{0.6}, []float64{0, 0.1}, []float64{0.2, 0.7, 0.3})
	}
	for name, c := range map[string]struct {
		change func(m *Matrix)
		parts  []string
	}{
		"row missing":   {func(m *Matrix) { m.Rho = m.Rho[:3] }, []string{"matrix.rho: found 3 rows; accepted: a square matrix: 4 rows"}},
		"short row":     {func(m *Matrix) { m.Rho[2] = m.Rho[2][:1] }, []string{`row "c pert": found 1 entries`}},
		"not symmetric": {func(m *Matrix) { m.Rho[0][1] = 0.5 }, []string{`"a uniform" and "b triangular": found 0.5 above the diagonal, 0.6 below`}},
		"diagonal":      {func(m *Matrix) { m.Rho[3][3] = 0.9 }, []string{`"d lognormal" with itself: found 0.9; accepted: 1`}},
		"outside":       {func(m *Matrix) { m.Rho[1][2], m.Rho[2][1] = 1.2, 1.2 }, []string{`"b triangular" and "c pert": found 1.2`}},
		"NaN":           {func(m *Matrix) { m.Rho[2][1] = math.NaN() }, []string{`"b triangular" and "c pert": found NaN`}},
		"NaN above":     {func(m *Matrix) { m.Rho[1][2] = math.NaN() }, []string{`NaN above the diagonal`}},
		"unknown":       {func(m *Matrix) { m.IDs = []string{"a uniform", "steel", "c pert", "zinc"} }, []string{`matrix.ids[1]: found "steel"`, `matrix.ids[3]: found "zinc"`}},
		"twice":         {func(m *Matrix) { m.IDs = []string{"a uniform", "b triangular", "a uniform", "c pert"} }, []string{`matrix.ids[2]: found "a uniform", also at 0`}},
		"all at once":   {func(m *Matrix) { m.Rho[0][0], m.Rho[3][0] = 2, 0.9 }, []string{`"a uniform" with itself: found 2`, `"a uniform" and "d lognormal"`}},
		"ids missing":   {func(m *Matrix) { m.IDs = nil }, []string{"matrix.rho: found 4 rows; accepted: a square matrix: 0 rows"}},
		"too large":     {func(m *Matrix) { m.IDs = make([]string, MaxMatrix+1) }, []string{"matrix.ids: found 301; accepted: at most 300"}},
	} {
		mx := fine()
		mx.IDs = slices.Clone(mx.IDs)
		c.change(mx)
		_, err := Simulate(t.Context(), everySpread(""), Settings{Trials: 16, Matrix: mx}, nil)
		for _, part := range c.parts {
			if err == nil || !strings.Contains(err.Error(), part) {
				t.Errorf("%s: error %v, want %q in it", name, err, part)
			}
		}
	}
	with, without := simulate(t, sumModel(threeLines, ""), Settings{Trials: 16, Matrix: &Matrix{}}), simulate(t, sumModel(threeLines, ""), Settings{Trials: 16})
	if d := cmp.Diff(without, with); d != "" {
		t.Errorf("an empty matrix is not none:\n%s", d)
	}
}

// Property: an assumption at the end of the matrix moves no draw of those before,
// and the order of other inputs does not matter.
func TestAddedRowMovesNoDraw(t *testing.T) {
	wide := symmetric(everyID, nil, []float64{0.6}, []float64{0, 0.1}, []float64{0.2, 0.7, 0.3})
	narrow := &Matrix{IDs: everyID[:3]}
	for _, row := range wide.Rho[:3] {
		narrow.Rho = append(narrow.Rho, row[:3])
	}
	a := values(t, everySpread(""), Settings{Seed: 9, Trials: 64, Matrix: narrow})
	b := values(t, everySpread(""), Settings{Seed: 9, Trials: 64, Matrix: wide})
	for i := range 3 {
		if !slices.Equal(a[i], b[i]) {
			t.Errorf("draws of %q moved", everyID[i])
		}
	}
}

// Closed form: E[XY] = exp((s² + q² + 2rsq)/2) of lognormals of median 1.
func TestMomentsOfMatrixProducts(t *testing.T) {
	const s, q, rho = 0.25, 0.4, -0.6
	X, Y, Z := pricing.Factor{Input: 0, Offset: 1}, pricing.Factor{Input: 1}, pricing.Factor{Input: 2}
	m := pricing.Model{
		Inputs: []pricing.Input{{ID: "x", Spread: spread.LogDeviation(s)}, {ID: "y", Spread: spread.LogDeviation(q)}, {ID: "z", Spread: spread.LogDeviation(q)}},
		Terms:  []pricing.Term{{Category: "a", Coefficient: 3, Factors: []pricing.Factor{X, Y}}},
	}
	m.Terms = append(m.Terms, pricing.Term{Category: "a", Coefficient: 1, Factors: []pricing.Factor{Z}})
	mx := symmetric([]string{"z", "x", "y"}, nil, []float64{0.1}, []float64{0.2, rho})
	want := 3*(math.Exp(q*q/2)+math.Exp((s*s+q*q+2*LatentCorrelation(rho)*s*q)/2)) + math.Exp(q*q/2)
	if got := expected(t, m, Settings{Matrix: mx}); math.Abs(got/want-1) > 2e-9 {
		t.Errorf("expectation %v, closed form %v", got, want)
	}
	m.Terms[0].Factors = []pricing.Factor{X, Y, Z}
	r := simulate(t, m, Settings{Trials: 256, Matrix: mx})
	if len(r.Moments) != 3 || !strings.Contains(r.MomentMethod, "three or more correlated") {
		t.Errorf("moments %v by %q", r.Moments, r.MomentMethod)
	}
}
