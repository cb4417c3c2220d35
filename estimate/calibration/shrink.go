package calibration

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat/distuv"
)

// Bounds that keep fits from few jobs sober; judgements, no source.
const (
	leastDeviation = 0.02 // of a log ratio: no trade repeats itself better than 2 %
	leastPrior     = 4    // degrees of freedom that the pooled variance is worth
	mostPrior      = 100
)

// sample is the log ratio of one job.
type sample struct {
	job, kind string
	y         float64
}

// group is what is known of one kind.
type group struct {
	kind     string
	jobs     int
	mean     float64 // of its own jobs
	squares  float64 // sum of squared distances from mean
	variance float64 // within the kind, shrunk towards the pooled one
	weight   float64 // of the pooled mean in the centre, 0 to 1
	centre   float64
	doubt    float64 // variance of the centre
	freedom  float64 // degrees of freedom of the prediction
}

// fit is the normal-normal model of log ratios by kind:
//
//	y = μ + θ(kind) + ε,  θ ~ N(0, τ²),  ε ~ N(0, σ²(kind))
//
// with τ² after Paule and Mandel, μ by weighted least squares, the centres of kinds
// as their posterior means and variances given τ² (Morris, Journal of the American
// Statistical Association 78 (1983), 47–55), and σ² of each kind shrunk towards the
// pooled variance with a prior weight from the scatter of the variances (Smyth,
// Statistical Applications in Genetics and Molecular Biology 3 (2004), article 3).
type fit struct {
	groups   []group // sorted by kind
	jobs     int
	mean     float64 // μ
	doubt    float64 // variance of μ
	between  float64 // τ²
	variance float64 // pooled, within kinds
	prior    float64 // degrees of freedom that it is worth
	freedom  float64 // jobs less kinds
}

// shrink fits samples of at least two jobs. Their order does not matter.
func shrink(samples []sample) fit {
	groups := byKind(samples)
	if len(groups) == len(samples) { // one job of each kind: nothing tells kinds from chance
		groups = byKind(renamed(samples, ""))
	}
	return fitGroups(groups)
}

// shrinkWithout is shrink of all samples but one, given the groups of all; the
// samples are sorted by job.
func shrinkWithout(groups []group, samples []sample, left int) fit {
	kind := samples[left].kind
	var ys []float64
	for i, s := range samples {
		if i != left && s.kind == kind {
			ys = append(ys, s.y)
		}
	}
	rest := make([]group, 0, len(groups))
	for _, g := range groups {
		switch {
		case g.kind != kind:
			rest = append(rest, g)
		case len(ys) > 0:
			g = group{kind: kind, jobs: len(ys)}
			g.mean, g.squares = moments(ys)
			rest = append(rest, g)
		}
	}
	if len(rest) == len(samples)-1 {
		return shrink(slices.Concat(samples[:left], samples[left+1:]))
	}
	return fitGroups(rest)
}

// fitGroups fits kinds that have at least one job more than they are.
func fitGroups(groups []group) fit {
	f := fit{groups: groups}
	for _, g := range groups {
		f.jobs += g.jobs
	}
	f.pool()
	for i := range f.groups {
		g := &f.groups[i]
		own := float64(g.jobs - 1)
		g.variance = max((float64(f.prior*f.variance)+g.squares)/(f.prior+own), leastDeviation*leastDeviation)
		g.freedom = min(f.prior+own, f.freedom)
	}
	f.between = pauleMandel(f.groups)
	f.mean, f.doubt = weighted(f.groups, f.between)
	for i := range f.groups {
		g := &f.groups[i]
		v := g.variance / float64(g.jobs)
		g.weight = v / (v + f.between)
		g.centre = float64(g.weight*f.mean) + float64((1-g.weight)*g.mean)
		g.doubt = float64((1-g.weight)*v) + float64(g.weight*g.weight*f.doubt)
	}
	return f
}

func renamed(samples []sample, kind string) []sample {
	out := slices.Clone(samples)
	for i := range out {
		out[i].kind = kind
	}
	return out
}

// byKind gathers samples; sums run in the order of jobs.
func byKind(samples []sample) []group {
	sorted := slices.Clone(samples)
	slices.SortFunc(sorted, func(a, b sample) int {
		return cmp.Or(strings.Compare(a.kind, b.kind), strings.Compare(a.job, b.job), cmp.Compare(a.y, b.y))
	})
	var groups []group
	var ys []float64
	for i, s := range sorted {
		ys = append(ys, s.y)
		if i+1 == len(sorted) || sorted[i+1].kind != s.kind {
			g := group{kind: s.kind, jobs: len(ys)}
			g.mean, g.squares = moments(ys)
			groups, ys = append(groups, g), ys[:0]
		}
	}
	return groups
}

// pool sets the pooled variance and what it is worth as a prior for each kind's own.
func (f *fit) pool() {
	squares := 0.0
	for _, g := range f.groups {
		squares += g.squares
	}
	f.freedom = float64(f.jobs - len(f.groups))
	f.variance = max(squares/f.freedom, leastDeviation*leastDeviation)
	f.prior = priorFreedom(f.groups)
}

// priorFreedom solves ψ′(d₀/2) = var(e) − mean ψ′(dᵢ/2), with e = ln s² − ψ(d/2) +
// ln(d/2) over kinds of two and more jobs (Smyth 2004, section 6.2). Where the
// variances scatter no more than chance, d₀ is as large as mostPrior.
func priorFreedom(groups []group) float64 {
	var e []float64
	chance := 0.0
	for _, g := range groups {
		if g.jobs < 2 {
			continue
		}
		half := float64(g.jobs-1) / 2
		s2 := max(g.squares/(2*half), leastDeviation*leastDeviation)
		e = append(e, math.Log(s2)-mathext.Digamma(half)+math.Log(half))
		chance += trigamma(half)
	}
	if len(e) < 2 {
		return mostPrior
	}
	_, squares := moments(e)
	excess := squares/float64(len(e)-1) - chance/float64(len(e))
	low, high := float64(leastPrior), float64(mostPrior)
	if excess <= trigamma(high/2) {
		return high
	}
	for range bisections {
		if d := (low + high) / 2; trigamma(d/2) > excess {
			low = d
		} else {
			high = d
		}
	}
	return (low + high) / 2
}

// bisections halve an interval until a double has no more digits to give.
const bisections = 64

// trigamma is ψ′(x) = ζ(2, x), Hurwitz's zeta function (DLMF 25.11.12).
func trigamma(x float64) float64 { return mathext.Zeta(2, x) }

// weighted returns the mean of the kinds' means with weights 1/(σ²/n + τ²), and its
// variance.
func weighted(groups []group, between float64) (mean, variance float64) {
	sum, weights := 0.0, 0.0
	for _, g := range groups {
		w := 1 / (g.variance/float64(g.jobs) + between)
		sum += float64(w * g.mean)
		weights += w
	}
	return sum / weights, 1 / weights
}

// pauleMandel returns τ² ≥ 0 with Σ (m − μ)²/(σ²/n + τ²) = kinds − 1 (Paule, Mandel,
// Journal of Research of the National Bureau of Standards 87 (1982), 377–385); 0
// where the kinds differ no more than chance, and for one kind.
func pauleMandel(groups []group) float64 {
	excess := func(between float64) float64 {
		mean, _ := weighted(groups, between)
		q := -float64(len(groups) - 1)
		for _, g := range groups {
			q += float64((g.mean-mean)*(g.mean-mean)) / (g.variance/float64(g.jobs) + between)
		}
		return q
	}
	if len(groups) < 2 || excess(0) <= 0 {
		return 0
	}
	low, high := 0.0, 1.0
	for excess(high) > 0 && high < 1e6 {
		high *= 2
	}
	for range bisections {
		if t := (low + high) / 2; excess(t) > 0 {
			low = t
		} else {
			high = t
		}
	}
	return (low + high) / 2
}

// prediction is a Student distribution of the log ratio of a job to come.
type prediction struct {
	centre, scale, freedom float64
}

func (p prediction) student() distuv.StudentsT {
	return distuv.StudentsT{Mu: p.centre, Sigma: p.scale, Nu: p.freedom}
}

func (p prediction) quantile(u float64) float64 { return p.student().Quantile(u) }

func (p prediction) logDensity(y float64) float64 { return p.student().LogProb(y) }

// predict returns the distribution of a job to come, of a kind that has been seen
// or of any other, with part of the variance within kinds taken away (0 for none).
func (f fit) predict(kind string, less float64) prediction {
	floor := leastDeviation * leastDeviation
	if i := slices.IndexFunc(f.groups, func(g group) bool { return g.kind == kind }); i >= 0 {
		g := f.groups[i]
		return prediction{g.centre, math.Sqrt(max(g.variance-less, floor) + g.doubt), g.freedom}
	}
	return prediction{f.mean, math.Sqrt(max(f.variance-less, floor) + f.doubt + f.between), f.freedom}
}
