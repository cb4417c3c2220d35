package ranges

import (
	"fmt"
	"math"
	"slices"
)

// MomentCheck compares a sample mean with its expectation.
type MomentCheck struct {
	Input      string  // the assumption's id; empty for a risk and for the total
	Risk       string  // the risk's id; empty for an assumption and for the total
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

// What Result.MomentMethod says.
const (
	momentMethod        = "The sample mean of each spread and risk is compared with its closed form, that of the total with the expectation of each of its products: by the means where factors are independent, else by quadrature; with the risks at their sample means."
	momentMethodPartial = "The sample mean of each spread and risk is compared with its closed form. That of the total is not compared: "
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
		res.Moments = append(res.Moments, newMomentCheck(in.id, "", mean, mean+off, math.Sqrt(in.sampler.Variance())/root))
	}
	risks := sim.checkRisks(res)
	expected, why := sim.p.expectedTotal()
	res.MomentMethod = momentMethod
	if why == "" {
		res.Moments = append(res.Moments, newMomentCheck("", "", expected+risks, res.Mean, res.SD/root))
	} else {
		res.MomentMethod = momentMethodPartial + why + "."
	}
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

// fewOccurrences is where the count of a rare risk, or of its rare absence, is far
// from normal: below it the deviation is taken as if there were as many.
const fewOccurrences = 10

// checkRisks compares each risk's mean with p·E[x], the deviation being that of a
// number that is x with probability p and else 0. It returns the sum of the sample
// means, with which the total is compared: a rare, dear risk that happens not to
// occur is no fault of the total's.
func (sim *simulation) checkRisks(res *Result) float64 {
	var total float64
	n := float64(len(sim.totals))
	for i, r := range sim.p.risks {
		in := &sim.p.inputs[r.impact]
		mean, p := in.sampler.Mean(), r.probability
		variance := float64(p*in.sampler.Variance()) + float64(p*(1-p))*float64(mean*mean)
		if count := n * min(p, 1-p); 0 < count && count < fewOccurrences {
			variance *= fewOccurrences / count
		}
		total += res.Risks[i].Mean
		res.Moments = append(res.Moments, newMomentCheck("", r.id, p*mean, res.Risks[i].Mean, math.Sqrt(variance/n)))
	}
	return total
}

// newMomentCheck allows for the rounding of sums beside the standard error.
func newMomentCheck(id, risk string, expected, sample, se float64) MomentCheck {
	se += 1e-12 * math.Abs(expected)
	m := MomentCheck{Input: id, Risk: risk, Expected: expected, Sample: sample, SE: se}
	if sample != expected {
		m.Deviations = (sample - expected) / se
	}
	return m
}

// String states the finding in one line.
func (m MomentCheck) String() string {
	what := "the total"
	switch {
	case m.Input != "":
		what = fmt.Sprintf("assumption %q", m.Input)
	case m.Risk != "":
		what = fmt.Sprintf("risk %q", m.Risk)
	}
	return fmt.Sprintf("%s: sample mean %.9g against %.9g, %.1f standard errors off", what, m.Sample, m.Expected, m.Deviations)
}

// correlationWarnings notes a repaired matrix, uncorrelated groups and models.
func (sim *simulation) correlationWarnings() []Warning {
	var out []Warning
	used, correlated, uncertain := map[string]bool{}, false, 0
	if mix := sim.p.matrix; mix != nil {
		correlated = mix.correlated
		if mix.repair != nil {
			out = append(out, Warning{WarningRepaired, mix.repair.message()})
		}
	}
	for _, g := range sim.p.groups {
		used[g.name] = true
		correlated = correlated || g.rho > 0 && g.members > 1
		if g.rho == 0 && g.members > 1 {
			out = append(out, Warning{WarningUncorrelated, fmt.Sprintf("group %q: its %d spreads are taken as uncorrelated, which narrows the range", g.name, g.members)})
		}
	}
	for _, b := range sim.p.beliefs {
		if b.drawn {
			uncertain++
		}
	}
	if !correlated && uncertain > 1 && !slices.ContainsFunc(out, func(w Warning) bool { return w.Code == WarningUncorrelated }) {
		out = append(out, Warning{WarningUncorrelated, fmt.Sprintf("all %d spreads are taken as uncorrelated, which narrows the range", uncertain)})
	}
	for _, name := range sortedKeys(sim.s.Correlation) {
		if !used[name] {
			out = append(out, Warning{WarningUnusedGroup, fmt.Sprintf("correlation of group %q: no assumption is in it", name)})
		}
	}
	return out
}
