package ranges

import (
	"cmp"
	"fmt"
	"math"
	"slices"
)

// Sensitivity is what one assumption or discrete risk does to the range; assumptions
// of one stream are one belief, fixed together. How each
// measure is defined, and how correlation is treated, SensitivityMethod says.
// Correlated assumptions move along in Share, so that the shares of a group may
// add to more than 1; they stay as drawn in Swing and Narrowing.
type Sensitivity struct {
	ID                     string  // of the assumption, its stream where it has one, or of the risk
	Risk                   bool    // a discrete risk, else an assumption
	Share, ShareSE         float64 // of the total's variance, 0 to 1
	Swing, SwingSE         float64 // major units, signed
	Narrowing, NarrowingSE float64 // major units; negative where fixing it widens the range
}

// Sensitivities are taken from this many replicates at most and, of each, from
// this many trials at most; from fewer, but not below the last, in models with
// more uncertain assumptions than sensitivityCells/sensitivityTrials.
const (
	sensitivityReplicates  = 32
	sensitivityTrials      = 4096
	sensitivityCells       = 1 << 20
	sensitivityLeastTrials = 256
	sensitivityBins        = 16
)

// SensitivityMethod says what the measures of Sensitivity are.
var SensitivityMethod = fmt.Sprintf("Share of variance: the first-order index (correlation ratio) Var(E[total | assumption]) / Var(total), by straight lines in %d classes of equal probability of the assumption and corrected for their number; assumptions correlated with it move along, so that shares of correlated assumptions overlap and need not add to 1. Swing: mean total with the assumption fixed at its P90 less that with it fixed at its P10, all others as drawn. Narrowing: P90 less P10 of the total, less the same with the assumption fixed at its median, all others as drawn. For a discrete risk: the index of its occurrence; the mean total with it occurring less that without; the narrowing when it does not occur. From the first %d replicates, up to %d trials of each; standard errors from the spread between replicates. Figures of one belief, such as the growth of an index to several dates, are fixed together.",
	sensitivityBins, sensitivityReplicates, sensitivityTrials)

// response is one replicate's measures of one lever.
type response struct {
	explained, squares float64 // sums of squares of the total: by the lever, all
	swing, narrowing   float64
}

// sensitivities pools the replicates' responses.
func (sim *simulation) sensitivities() []Sensitivity {
	if len(sim.responses) == 0 {
		return nil
	}
	var out []Sensitivity
	each := make([]response, len(sim.responses))
	at := 0
	add := func(id string, isRisk bool) {
		for r := range each {
			each[r] = sim.responses[r][at]
		}
		at++
		s := pool(each)
		s.ID, s.Risk = id, isRisk
		out = append(out, s)
	}
	for _, b := range sim.p.beliefs {
		if b.drawn {
			add(b.key, false)
		}
	}
	for _, r := range sim.p.risks {
		add(r.id, true)
	}
	slices.SortStableFunc(out, func(a, b Sensitivity) int {
		return cmp.Or(cmp.Compare(b.Narrowing, a.Narrowing), cmp.Compare(a.ID, b.ID))
	})
	return out
}

// pool returns means and standard errors; of the share, a ratio of means, the
// error is that of its linearised deviations.
func pool(each []response) Sensitivity {
	var s Sensitivity
	n := len(each)
	var explained, squares float64
	for _, r := range each {
		explained += r.explained
		squares += r.squares
		s.Swing += r.swing / float64(n)
		s.Narrowing += r.narrowing / float64(n)
	}
	s.SwingSE = standardError(n, func(r int) float64 { return each[r].swing })
	s.NarrowingSE = standardError(n, func(r int) float64 { return each[r].narrowing })
	if !(squares > 0) {
		return s
	}
	share, mean := explained/squares, squares/float64(n)
	s.ShareSE = standardError(n, func(r int) float64 {
		return (each[r].explained - float64(share*each[r].squares)) / mean
	})
	s.Share = max(0, min(share, 1))
	return s
}

// class holds the sums of one class of an assumption's values x against totals t.
type class struct{ n, x, xx, t, xt, tt float64 }

// add counts one trial.
func (c *class) add(x, t float64) {
	c.n++
	c.x += x
	c.t += t
	c.xx += float64(x * x)
	c.xt += float64(x * t)
	c.tt += float64(t * t)
}

// explain returns the sum of squares of t that straight lines in the classes
// explain, without what as many parameters explain of mere noise, and the sum of
// squares of t.
func explain(classes []class) (float64, float64) {
	var all class
	for _, c := range classes {
		all.n += c.n
		all.t += c.t
		all.tt += c.tt
	}
	mean := all.t / all.n
	squares := all.tt - float64(all.t*mean)
	var raw, parameters float64
	for _, c := range classes {
		if c.n == 0 {
			continue
		}
		d := c.t/c.n - mean
		raw += float64(c.n * d * d)
		parameters++
		xx, xt := c.xx-c.x*c.x/c.n, c.xt-c.x*c.t/c.n
		if c.n > 2 && xx > 1e-12*c.xx {
			raw += xt * xt / xx
			parameters++
		}
	}
	if !(squares > 1e-20*all.tt) || all.n <= parameters {
		return 0, 0
	}
	noise := math.Max(0, squares-raw) / (all.n - parameters)
	return raw - float64((parameters-1)*noise), squares
}
