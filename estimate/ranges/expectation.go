package ranges

import (
	"math"

	"spanwright/estimate/pricing"
)

// expectedTotal returns the expectation of the total without risks: of each
// product, overall factors included. Factors of independent inputs multiply by
// their means; inputs of one group or stream, an input that occurs twice, and two
// inputs of the matrix are integrated over the standard normal numbers behind them, because
// E[XY] is not E[X]·E[Y] there. Where that is not possible it says why.
func (p *program) expectedTotal() (float64, string) {
	e := expectation{p: p, given: map[int][]float64{}, pairs: map[[2]int]float64{}}
	var total float64
	var factors []pricing.Factor
	for _, t := range p.terms {
		if t.least > 0 {
			return 0, "a minimum charge has no closed form"
		}
		factors = append(append(append(factors[:0], t.factors...), t.after...), p.overall...)
		total += float64(t.coefficient * e.product(factors))
		if e.beyond {
			return 0, "a product holds three or more correlated assumptions of the matrix, or products hold too many pairs of them"
		}
	}
	return total, ""
}

// expectation integrates products over standard normal numbers by the trapezoid
// rule, which converges geometrically for smooth functions that vanish at both
// ends (Trefethen, Weideman 2014, SIAM Review 56).
type expectation struct {
	p     *program
	given map[int][]float64 // input → its mean at each node of the common factor

	pairs  map[[2]int]float64 // inputs of the matrix → E[x·y]
	beyond bool               // a product that is not integrated
}

// maxPairs bounds the time of the check: each takes less than a millisecond.
const maxPairs = 1000

// Nodes of the trapezoid rule: every 1/8 from −8 to 8.
const (
	nodeRate = 8
	nodeEdge = 8
	nodes    = 2*nodeEdge*nodeRate + 1
	// The radius of the pairs of nodes that are looked at; beyond r lies a
	// probability of exp(−r²/2). A spread with limits moves the mean by less than
	// 4e-6 of its width from there, and its table is not left, which is slow.
	farthest        = 8
	farthestBounded = 5
)

// node returns the abscissa and weight of node k.
func node(k int) (float64, float64) {
	z := float64(k)/nodeRate - nodeEdge
	return z, math.Exp(-0.5*z*z) / math.Sqrt(2*math.Pi) / nodeRate
}

// product returns E[Π (offset + x)].
func (e *expectation) product(factors []pricing.Factor) float64 {
	result := 1.0
	for i, f := range factors {
		linked := e.linked(factors, f)
		if linked[0] != i {
			continue // counted with its first
		}
		if len(linked) == 1 {
			result *= f.Offset + e.p.inputs[f.Input].sampler.Mean()
			continue
		}
		cluster := make([]pricing.Factor, len(linked))
		for k, at := range linked {
			cluster[k] = factors[at]
		}
		if e.p.inputs[f.Input].row >= 0 && !e.same(cluster) {
			result *= e.pair(cluster)
			continue
		}
		result *= e.joint(cluster)
	}
	return result
}

// linked returns the places of the factors that depend on f's input, on its belief,
// on a group as it does, or on another uncertain input of the matrix.
func (e *expectation) linked(factors []pricing.Factor, f pricing.Factor) []int {
	var out []int
	a := &e.p.inputs[f.Input]
	for i, other := range factors {
		b := &e.p.inputs[other.Input]
		uncertain := !a.sampler.Fixed() && !b.sampler.Fixed()
		if other.Input == f.Input || a.group >= 0 && b.group >= 0 || uncertain && (a.belief == b.belief || a.row >= 0 && b.row >= 0) {
			out = append(out, i)
		}
	}
	return out
}

// same reports whether all factors are of one belief.
func (e *expectation) same(factors []pricing.Factor) bool {
	for _, f := range factors {
		if e.p.inputs[f.Input].belief != e.p.inputs[factors[0].Input].belief {
			return false
		}
	}
	return true
}

// pair returns E[(o + x)·(q + y)] of two inputs of the matrix, and marks any
// other cluster as beyond it.
func (e *expectation) pair(factors []pricing.Factor) float64 {
	a, b := factors[0], factors[1]
	key := [2]int{a.Input, b.Input}
	both, known := e.pairs[key]
	if len(factors) > 2 || !known && len(e.pairs) >= maxPairs {
		e.beyond = true
		return math.NaN()
	}
	x, y := &e.p.inputs[a.Input], &e.p.inputs[b.Input]
	if !known {
		both = e.meanProduct(x, y)
		e.pairs[key] = both
	}
	return float64(a.Offset*b.Offset) + float64(a.Offset*y.sampler.Mean()) + float64(b.Offset*x.sampler.Mean()) + both
}

// meanProduct returns E[x·y] by the rule of integrate: x on the nodes, y given x.
func (e *expectation) meanProduct(x, y *input) float64 {
	r := e.p.matrix.latent[x.row][y.row]
	own := math.Sqrt(max(0, 1-r*r))
	radius := float64(farthest)
	if x.sampler.Bounded() && y.sampler.Bounded() {
		radius = farthestBounded
	}
	var total float64
	for k := range nodes {
		Z, weight := node(k)
		var given float64
		for l := range nodes {
			z, w := node(l)
			if Z*Z+z*z <= radius*radius {
				given += float64(w * y.sampler.FromNormal(float64(r*Z)+float64(own*z)))
			}
		}
		total += float64(float64(weight*x.sampler.FromNormal(Z)) * given)
	}
	return total
}

// joint returns E[Π (offset + x)] of factors of one group or one belief.
func (e *expectation) joint(factors []pricing.Factor) float64 {
	column := make([]float64, nodes)
	for k := range column {
		_, column[k] = node(k)
	}
	done := make([]bool, len(factors))
	for i, f := range factors {
		var together []pricing.Factor // of f's belief
		for k, other := range factors {
			if !done[k] && e.same([]pricing.Factor{f, other}) {
				together, done[k] = append(together, other), true
			}
		}
		if together == nil {
			continue // counted with its first
		}
		for k, v := range e.conditional(factors[i].Input, together) {
			column[k] *= v
		}
	}
	return sum(column, 0)
}

// conditional returns E[Π (offset + x) | Z] of factors of input i's belief at each
// node of the common factor Z of its group; without a group it is constant.
func (e *expectation) conditional(i int, factors []pricing.Factor) []float64 {
	if len(factors) > 1 {
		return e.integrate(factors, func(z float64) float64 {
			product := 1.0
			for _, f := range factors {
				product *= f.Offset + e.p.inputs[f.Input].sampler.FromNormal(z)
			}
			return product
		})
	}
	if e.given[i] == nil {
		e.given[i] = e.integrate(factors, e.p.inputs[i].sampler.FromNormal)
	}
	out := make([]float64, nodes)
	for k, v := range e.given[i] {
		out[k] = factors[0].Offset + v
	}
	return out
}

// integrate returns E[f(z) | Z] at each node of Z, z being the standard normal number
// of the factors' belief.
func (e *expectation) integrate(factors []pricing.Factor, f func(z float64) float64) []float64 {
	in := &e.p.inputs[factors[0].Input]
	common, own := 0.0, 1.0
	if in.group >= 0 {
		common, own = e.p.groups[in.group].common, e.p.groups[in.group].own
	}
	radius := float64(farthestBounded)
	for _, f := range factors {
		if !e.p.inputs[f.Input].sampler.Bounded() {
			radius = farthest
		}
	}
	out := make([]float64, nodes)
	for k := range out {
		Z, _ := node(k)
		if in.group < 0 && k > 0 {
			out[k] = out[0]
			continue
		}
		for l := range nodes {
			z, weight := node(l)
			if in.group >= 0 && Z*Z+z*z > radius*radius {
				continue
			}
			out[k] += float64(weight * f(float64(common*Z)+float64(own*z)))
		}
	}
	return out
}
