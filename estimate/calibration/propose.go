package calibration

import (
	"fmt"
	"math"
	"slices"

	"spanwright/estimate/spread"
)

// propose lists the changes and says what the back-test thinks of them.
func (p *Proposal) propose(fitted []fittedMeasure, shared common, jobs []Comparable, o FitOptions) {
	total := p.score(FigureTotal)
	worse := total != nil && total.Unfitted != nil && total.Gain < 0
	for _, m := range fitted {
		if m.target == TargetNone {
			continue
		}
		score := p.score(m.name)
		recommended := score.Improves && !(worse && m.target == TargetMultiplier)
		for _, kind := range m.subjects() {
			c := m.change(kind, shared, o, p.PerTonne, recommended, *score)
			if score.Improves && !recommended {
				c.Evidence += " Not recommended all the same, because the fit does worse for totals."
			}
			p.Changes = append(p.Changes, c)
		}
	}
	if shared.known {
		p.Changes = append(p.Changes, systemicChanges(shared, jobs, o, total)...)
	}
	p.Recommended = slices.ContainsFunc(p.Changes, func(c Change) bool { return c.Recommended })
	p.Statement = p.statement(total)
}

// score returns the back-test of a fitted figure, nil where it was not fitted.
func (p *Proposal) score(name string) *Score {
	i := slices.IndexFunc(p.Figures, func(f Figure) bool { return f.Name == name })
	if i < 0 {
		return nil
	}
	return &p.Figures[i].BackTest
}

// subjects are the kinds that a figure has jobs of, and then every other.
func (m fittedMeasure) subjects() []string {
	var list []string
	for _, g := range m.fit.groups {
		if g.kind != "" {
			list = append(list, g.kind)
		}
	}
	return append(list, "")
}

func (m fittedMeasure) change(kind string, shared common, o FitOptions, perTonne, recommended bool, s Score) Change {
	old, factor, less := o.current(m.measure, kind), 1.0, 0.0
	if m.target == TargetMultiplier {
		less = shared.variance
		if old == nil {
			fixed := spread.NewFixed(1)
			old = &fixed
		}
		factor = old.Base()
	}
	c := Change{Target: m.target, Name: m.name, Categories: m.categories, SubjectKind: kind, Old: old,
		New: m.fit.predict(kind, less).spread(factor), Recommended: recommended}
	if !perTonne && m.target == TargetMultiplier && !slices.Contains(withoutMass, m.name) {
		c.Excludes = []string{TargetAllowance}
	}
	if !perTonne && m.target == TargetAllowance {
		c.Excludes = []string{TargetMultiplier}
	}
	c.Jobs, c.Evidence = m.evidence(kind, c, s)
	return c
}

// evidence says what a change rests on.
func (m fittedMeasure) evidence(kind string, c Change, s Score) (int, string) {
	before := "no earlier value was given"
	if c.Old != nil {
		before = fmt.Sprintf("%.4g before", c.Old.Base())
	}
	text := fmt.Sprintf("%s: median %.4g, P10 %.4g, P90 %.4g", m.words, c.New.Base(), c.New.Low, c.New.High)
	if m.unit != "" {
		text += " " + m.unit
	}
	text += "; " + before
	i := slices.IndexFunc(m.fit.groups, func(g group) bool { return g.kind == kind && kind != "" })
	if i < 0 {
		return m.fit.jobs, fmt.Sprintf("%s; from all %d jobs, for kinds without jobs of their own. %s", text, m.fit.jobs, s.Statement)
	}
	g := m.fit.groups[i]
	return g.jobs, fmt.Sprintf("%s; from %d jobs of this kind, moved %.0f %% of the way to the median of all %d jobs, %.4g. %s",
		text, g.jobs, 100*g.weight, m.fit.jobs, math.Exp(m.fit.mean), s.Statement)
}

// systemicChanges scales the deviations of all estimate classes by one factor, so
// that they keep their order; without deviations handed in, or with a job of a class
// that has none, one deviation for all classes is proposed. A narrower factor is not
// recommended while past ranges held too seldom.
func systemicChanges(shared common, jobs []Comparable, o FitOptions, total *Score) []Change {
	recommended := total != nil && total.Improves
	deviation := shared.deviation()
	squares, known := 0.0, len(o.Systemic) > 0
	for _, j := range jobs {
		s, ok := o.Systemic[j.Class]
		known = known && ok
		squares += float64(s * s)
	}
	what := "the scatter that all categories of a job share"
	if !known {
		return []Change{{Target: TargetSystemic, Name: TargetSystemic, New: printedDeviation(deviation), Jobs: shared.jobs, Recommended: recommended,
			Evidence: fmt.Sprintf("%s: deviation %.3g of the logarithm, widened for %d jobs; for all estimate classes, since not every job has a class with a deviation before", what, deviation, shared.jobs)}}
	}
	factor := deviation / math.Sqrt(squares/float64(len(jobs)))
	caution := ""
	if band := Coverage(jobs).tally(withinBand); factor < 1 && band.Below() {
		recommended, caution = false, fmt.Sprintf("; not recommended, because past ranges held too seldom: %s", tallyWords(band))
	}
	var list []Change
	for _, class := range sortedKeys(o.Systemic) {
		old, n := printedDeviation(o.Systemic[class]), 0
		for _, j := range jobs {
			if j.Class == class {
				n++
			}
		}
		list = append(list, Change{Target: TargetSystemic, Name: TargetSystemic, Class: class, Old: &old,
			New: printedDeviation(o.Systemic[class] * factor), Jobs: n, Recommended: recommended,
			Evidence: fmt.Sprintf("%s, over all %d jobs: every class times %.3g, from deviation %.3g to %.3g here; %d jobs are of this class%s",
				what, len(jobs), factor, o.Systemic[class], o.Systemic[class]*factor, n, caution)})
	}
	return list
}

// printedDeviation is the lognormal of median 1 with a deviation of the logarithm,
// given by its P10 and P90.
func printedDeviation(sigma float64) spread.Spread {
	half := sigma * standardQuantile(0.9)
	s := spread.NewLognormal(printed(math.Exp(-half)), printed(math.Exp(half)))
	s.Likely = 1
	return s
}

// statement is the verdict on the whole proposal.
func (p *Proposal) statement(total *Score) string {
	n := 0
	for _, c := range p.Changes {
		if c.Recommended {
			n++
		}
	}
	text := "The totals could not be tested."
	if total != nil {
		text = "Totals: " + total.Statement
	}
	if n == 0 {
		return text + " No change is recommended."
	}
	return fmt.Sprintf("%s %d of %d changes are recommended.", text, n, len(p.Changes))
}
