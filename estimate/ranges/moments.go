package ranges

import (
	"fmt"
	"math"

	"spanwright/estimate/pricing"
)

// MomentCheck compares a sample mean with its expectation.
type MomentCheck struct {
	Input      string  // the assumption's id; empty for the total
	Expected   float64 // closed form; for the total the expectation of each product
	Sample     float64
	SE         float64 // σ/√n of plain sampling, an upper bound of the stratified sample's
	Deviations float64 // (Sample − Expected)/SE
}

// Deviations of a moment check that warn and that fail.
const (
	warnDeviations = 4
	failDeviations = 6
)

// check fills in moments and warnings; a mean beyond failDeviations is an error.
func (sim *simulation) check(res *Result) error {
	root := math.Sqrt(float64(len(sim.totals)))
	for i := range sim.p.inputs {
		in := &sim.p.inputs[i]
		if in.sampler.Fixed() {
			continue
		}
		var off float64
		for r := range sim.deviations {
			off += sim.deviations[r][i]
		}
		off /= float64(sim.s.Replicates)
		mean := in.sampler.Mean()
		res.Moments = append(res.Moments, newMomentCheck(in.id, mean, mean+off, math.Sqrt(in.sampler.Variance())/root))
	}
	res.Moments = append(res.Moments, newMomentCheck("", sim.p.expectedTotal(), res.Mean, res.SD/root))
	for _, m := range res.Moments {
		if !(math.Abs(m.Deviations) <= warnDeviations) {
			res.Warnings = append(res.Warnings, Warning{Code: WarningMoments, Message: m.String()})
		}
		if !(math.Abs(m.Deviations) <= failDeviations) {
			return fmt.Errorf("ranges: moment check: %s; accepted: at most %d", m, failDeviations)
		}
	}
	res.Warnings = append(res.Warnings, sim.correlationWarnings()...)
	return nil
}

// newMomentCheck allows for the rounding of sums beside the standard error.
func newMomentCheck(id string, expected, sample, se float64) MomentCheck {
	se += 1e-12 * math.Abs(expected)
	m := MomentCheck{Input: id, Expected: expected, Sample: sample, SE: se}
	if sample != expected {
		m.Deviations = (sample - expected) / se
	}
	return m
}

// String states the finding in one line.
func (m MomentCheck) String() string {
	what := "the total"
	if m.Input != "" {
		what = fmt.Sprintf("assumption %q", m.Input)
	}
	return fmt.Sprintf("%s: sample mean %.9g against %.9g, %.1f standard errors off", what, m.Sample, m.Expected, m.Deviations)
}

// correlationWarnings notes uncorrelated groups and models.
func (sim *simulation) correlationWarnings() []Warning {
	var out []Warning
	used, correlated, uncertain := map[string]bool{}, false, 0
	for _, g := range sim.p.groups {
		used[g.name] = true
		correlated = correlated || g.rho > 0 && g.members > 1
		if g.rho == 0 && g.members > 1 {
			out = append(out, Warning{WarningUncorrelated, fmt.Sprintf("group %q: its %d spreads are taken as uncorrelated, which narrows the range", g.name, g.members)})
		}
	}
	for i := range sim.p.inputs {
		if !sim.p.inputs[i].sampler.Fixed() {
			uncertain++
		}
	}
	if !correlated && uncertain > 1 && len(out) == 0 {
		out = append(out, Warning{WarningUncorrelated, fmt.Sprintf("all %d spreads are taken as uncorrelated, which narrows the range", uncertain)})
	}
	for _, name := range sortedKeys(sim.s.Correlation) {
		if !used[name] {
			out = append(out, Warning{WarningUnusedGroup, fmt.Sprintf("correlation of group %q: no assumption is in it", name)})
		}
	}
	return out
}

// expectedTotal returns the expectation of the total: of each product, overall
// factors included. Factors of independent inputs multiply by their means; inputs
// of one group, and an input that occurs twice, are integrated over the common
// factor and their own, because E[XY] is not E[X]·E[Y] there.
func (p *program) expectedTotal() float64 {
	e := expectation{p: p, given: map[int][]float64{}}
	var total float64
	var factors []pricing.Factor
	for _, t := range p.terms {
		factors = append(append(factors[:0], t.factors...), p.overall...)
		total += float64(t.coefficient * e.product(factors))
	}
	return total
}

// expectation integrates products over standard normal numbers by the trapezoid
// rule, which converges geometrically for smooth functions that vanish at both
// ends (Trefethen, Weideman 2014, SIAM Review 56).
type expectation struct {
	p     *program
	given map[int][]float64 // input → its mean at each node of the common factor
}

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
		result *= e.joint(cluster)
	}
	return result
}

// linked returns the places of the factors that depend on f's input or group.
func (e *expectation) linked(factors []pricing.Factor, f pricing.Factor) []int {
	var out []int
	group := e.p.inputs[f.Input].group
	for i, other := range factors {
		if other.Input == f.Input || group >= 0 && e.p.inputs[other.Input].group >= 0 {
			out = append(out, i)
		}
	}
	return out
}

// joint returns E[Π (offset + x)] of factors of one group or one input.
func (e *expectation) joint(factors []pricing.Factor) float64 {
	column := make([]float64, nodes)
	for k := range column {
		_, column[k] = node(k)
	}
	for i, f := range factors {
		var same []float64
		for k, other := range factors {
			if other.Input == f.Input && k < i {
				same = nil
				break
			}
			if other.Input == f.Input {
				same = append(same, other.Offset)
			}
		}
		if same == nil {
			continue
		}
		for k, v := range e.conditional(f.Input, same) {
			column[k] *= v
		}
	}
	return sum(column, 0)
}

// conditional returns E[Π (offset + x) | Z] at each node of the common factor Z
// of the input's group; without a group it is constant.
func (e *expectation) conditional(i int, offsets []float64) []float64 {
	if len(offsets) > 1 {
		return e.integrate(i, func(x float64) float64 {
			product := 1.0
			for _, o := range offsets {
				product *= o + x
			}
			return product
		})
	}
	if e.given[i] == nil {
		e.given[i] = e.integrate(i, func(x float64) float64 { return x })
	}
	out := make([]float64, nodes)
	for k, v := range e.given[i] {
		out[k] = offsets[0] + v
	}
	return out
}

// integrate returns E[f(x) | Z] at each node of Z.
func (e *expectation) integrate(i int, f func(float64) float64) []float64 {
	in := &e.p.inputs[i]
	common, own := 0.0, 1.0
	if in.group >= 0 {
		common, own = e.p.groups[in.group].common, e.p.groups[in.group].own
	}
	radius := float64(farthest)
	if in.sampler.Bounded() {
		radius = farthestBounded
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
			out[k] += float64(weight * f(in.sampler.FromNormal(float64(common*Z)+float64(own*z))))
		}
	}
	return out
}
