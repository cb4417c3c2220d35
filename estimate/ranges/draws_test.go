package ranges

import (
	"math"
	"slices"
	"testing"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// column returns all uniforms of one id in a replicate.
func column(seed uint64, id string, n, replicate int) []float64 {
	u, p, out := newUniforms(seed, "assumption", id), newPermutation(n), make([]float64, n)
	p.draw(&u.order, replicate)
	for start := 0; start < n; start += blockSize {
		u.fill(out[start:min(start+blockSize, n)], &p, replicate, start)
	}
	return out
}

func TestPermutationHitsEachPlaceOnce(t *testing.T) {
	for _, n := range []int{16, 17, 100, 255, 256, 257, 1000, 4096, 5000, 1 << 16, MaxTrials} {
		p := newPermutation(n)
		s := newStream(7, "order", "x")
		p.draw(&s, 3)
		seen := make([]bool, n)
		places := make([]uint32, n)
		p.places(places, 0)
		for i, at := range places {
			if at >= uint32(n) || seen[at] {
				t.Fatalf("n = %d: place %d of index %d outside or taken", n, at, i)
			}
			seen[at] = true
		}
	}
}

// Property: one draw in each stratum, none on an end, different in each replicate.
func TestUniformsAreStratified(t *testing.T) {
	for _, n := range []int{16, 100, 4096, MaxTrials} {
		u := column(1, "a", n, 0)
		other := column(1, "a", n, 1)
		if slices.Equal(u, other) {
			t.Errorf("n = %d: two replicates are equal", n)
		}
		slices.Sort(u)
		for i, v := range u {
			if !(v > 0 && v < 1) || int(v*float64(n)) != i {
				t.Fatalf("n = %d: %v is not in stratum %d", n, v, i)
			}
		}
	}
}

func TestUniformsDoNotDependOnBlocks(t *testing.T) {
	want := column(9, "a", 4096, 5)
	u, p := newUniforms(9, "assumption", "a"), newPermutation(4096)
	p.draw(&u.order, 5)
	for _, block := range []int{4, 64, 100} {
		got := make([]float64, 4096)
		for start := 0; start < len(got); start += block {
			u.fill(got[start:min(start+block, len(got))], &p, 5, start)
		}
		if !slices.Equal(got, want) {
			t.Errorf("blocks of %d give other numbers", block)
		}
	}
}

// The correlation of two independent random orders of n has variance 1/(n − 1)
// (Hotelling, Pabst 1936, Annals of Mathematical Statistics 7); so has that of an
// order with its index.
func TestOrdersAreUncorrelated(t *testing.T) {
	const n, pairs = 256, 2000
	for _, lag := range []bool{false, true} {
		var sum, squares float64
		for i := range pairs {
			a, b := column(uint64(i), "a", n, 0), column(uint64(i), "b", n, 0)
			if lag { // a draw against its neighbour in the same column
				b = append(append([]float64(nil), a[1:]...), a[0])
			}
			var r float64
			for k := range a {
				r += (a[k] - 0.5) * (b[k] - 0.5) * 12 / n
			}
			sum += r
			squares += r * r * (n - 1)
		}
		if mean := sum / pairs; math.Abs(mean) > 4/math.Sqrt(n*pairs)+1.0/n {
			t.Errorf("lag %v: mean correlation %v", lag, mean)
		}
		if ratio := squares / pairs; math.Abs(ratio-1) > 5*math.Sqrt(2.0/pairs) {
			t.Errorf("lag %v: variance of the correlation %v of a random order's", lag, ratio)
		}
	}
}

// values returns every draw of the model's inputs, input-major.
func values(t *testing.T, m pricing.Model, s Settings) [][]float64 {
	t.Helper()
	s, err := s.withDefaults()
	if err != nil {
		t.Fatal(err)
	}
	p, err := compile(m, s, purpose{})
	if err != nil {
		t.Fatal(err)
	}
	w := newSimulation(p, s).newWorker()
	out := make([][]float64, len(m.Inputs))
	for r := range s.Replicates {
		w.begin(r)
		for start := 0; start < s.Trials; start += blockSize {
			n := min(blockSize, s.Trials-start)
			w.draw(start, n)
			for i := range out {
				out[i] = append(out[i], w.columns.values[i][:n]...)
			}
		}
	}
	return out
}

// everySpread is one input of each distribution, in the given group.
func everySpread(group string) pricing.Model {
	m := pricing.Model{Terms: []pricing.Term{{Category: "material", Coefficient: 1}}}
	for _, in := range []struct {
		id string
		s  spread.Spread
	}{
		{"a uniform", spread.NewUniform(1, 3)}, {"b triangular", spread.NewTriangular(0.8, 1, 1.5)},
		{"c pert", spread.NewPERT(18, 28, 42)}, {"d lognormal", spread.NewLognormal(50, 200)},
	} {
		m.Inputs = append(m.Inputs, pricing.Input{ID: in.id, Spread: in.s, Group: group})
	}
	return m
}

// ranks returns the rank of each value.
func ranks(x []float64) []float64 {
	order := make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int {
		if x[a] < x[b] {
			return -1
		}
		return 1
	})
	out := make([]float64, len(x))
	for r, i := range order {
		out[i] = float64(r)
	}
	return out
}

// spearman returns the rank correlation of x and y.
func spearman(x, y []float64) float64 {
	a, b, n := ranks(x), ranks(y), float64(len(x))
	var sum float64
	for i := range a {
		sum += (a[i] - b[i]) * (a[i] - b[i])
	}
	return 1 - 6*sum/(n*(n*n-1))
}

// Reference: the definition of Spearman's coefficient; within 0.01 at 102,400 trials.
func TestSpearmanAchieved(t *testing.T) {
	for _, rho := range []float64{0.2, 0.5, 0.8, 0.95} {
		v := values(t, everySpread("g"), Settings{Seed: 3, Trials: 3200, Correlation: map[string]float64{"g": rho}})
		for i := range v {
			for j := range i {
				if got := spearman(v[i], v[j]); math.Abs(got-rho) > 0.01 {
					t.Errorf("inputs %d and %d: ρ = %.4f, want %v", i, j, got, rho)
				}
			}
		}
	}
	v := values(t, everySpread(""), Settings{Seed: 3, Trials: 3200})
	if got := spearman(v[0], v[3]); math.Abs(got) > 0.01 {
		t.Errorf("independent inputs: ρ = %.4f", got)
	}
}

func TestLatentCorrelation(t *testing.T) {
	// r = 2 sin(πρ/6): 1 at 1, 0 at 0, and 0.6180339887 (the golden section, 2 sin 18°) at 0.6.
	for rho, want := range map[float64]float64{0: 0, 1: 1, -1: -1, 0.6: (math.Sqrt(5) - 1) / 2, 0.5: (math.Sqrt(6) - math.Sqrt(2)) / 2} {
		if got := LatentCorrelation(rho); math.Abs(got-want) > 1e-15 {
			t.Errorf("latent correlation of %v = %v, want %v", rho, got, want)
		}
	}
	for _, rho := range []float64{1.01, -2, math.NaN()} {
		if got := LatentCorrelation(rho); !math.IsNaN(got) {
			t.Errorf("latent correlation of %v = %v, want NaN", rho, got)
		}
	}
}

// Reference: closed forms of spread; the sample of 131,072 against them, in
// standard errors of plain sampling.
func TestDrawnMomentsAgainstClosedForms(t *testing.T) {
	for _, s := range []Settings{{Seed: 5}, {Seed: 5, Correlation: map[string]float64{"g": 0.5}}} {
		group := ""
		if s.Correlation != nil {
			group = "g"
		}
		m := everySpread(group)
		for i, x := range values(t, m, s) {
			mean, variance := m.Inputs[i].Spread.Mean(), m.Inputs[i].Spread.Variance()
			n := float64(len(x))
			var m1, m2, m4 float64
			for _, v := range x {
				d := v - mean
				m1 += d / n
				m2 += d * d / n
				m4 += d * d * d * d / n
			}
			if z := m1 / math.Sqrt(variance/n); math.Abs(z) > 4 {
				t.Errorf("%s: mean %.1f standard errors off", m.Inputs[i].ID, z)
			}
			if z := (m2 - variance) / math.Sqrt((m4-m2*m2)/n); math.Abs(z) > 4 {
				t.Errorf("%s: variance %.1f standard errors off", m.Inputs[i].ID, z)
			}
		}
	}
}

func TestAddedAssumptionMovesNoDraw(t *testing.T) {
	s := Settings{Seed: 11, Trials: 64, Correlation: map[string]float64{"g": 0.3, "h": 0.6}}
	m := everySpread("g")
	before := values(t, m, s)
	wider := m
	wider.Inputs = append([]pricing.Input{
		{ID: "0 first", Spread: spread.NewPERT(1, 2, 3), Group: "h"},
		{ID: "a", Spread: spread.NewPERT(1, 2, 3), Group: "g"}}, m.Inputs...)
	after := values(t, wider, s)
	for i := range before {
		if !slices.Equal(before[i], after[i+2]) {
			t.Errorf("draws of %q moved", m.Inputs[i].ID)
		}
	}
	if slices.Equal(before[0], values(t, m, Settings{Seed: 12, Trials: 64, Correlation: s.Correlation})[0]) {
		t.Error("another seed gives the same draws")
	}
}
