package calibration

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/spread"
)

// MinimumJobs is how many comparable jobs a proposal, and each figure of it, rests
// on at the least.
const MinimumJobs = 20

// FitOptions are what the past estimates were priced with, and what was left out
// before.
type FitOptions struct {
	Current  []Current          `json:"current,omitempty"`
	Systemic map[string]float64 `json:"systemic,omitempty" doc:"deviation of the logarithm of the systemic factor by estimate class"`
	Left     []Left             `json:"left,omitempty" doc:"as Normalise returned it"`
}

// Current is a spread that the past estimates were priced with. A multiplier that
// is not named was 1; a mass factor that is not named was 1 too.
type Current struct {
	Target string        `json:"target" enum:"multiplier,allowance,rate"`
	Name   string        `json:"name" doc:"the figure's name"`
	Kind   string        `json:"kind,omitempty" doc:"empty for every kind without one of its own"`
	Spread spread.Spread `json:"spread"`
}

// TooFewError refuses a fit from fewer than MinimumJobs comparable jobs.
type TooFewError struct {
	Found int
	Left  []Left
}

// Error says how many jobs were found, how many were left out and why.
func (e *TooFewError) Error() string {
	var b strings.Builder
	were := "were"
	if len(e.Left) == 1 {
		were = "was"
	}
	fmt.Fprintf(&b, "%d comparable jobs were found and at least %d are needed; %d %s left out", e.Found, MinimumJobs, len(e.Left), were)
	for i, l := range e.Left {
		if i == 0 {
			b.WriteString(": ")
		} else {
			b.WriteString("; ")
		}
		b.WriteString(l.Job + ": " + strings.Join(l.Reasons, ", "))
	}
	return b.String()
}

// Fit fits each figure by kind, tests it on each job from the others, and proposes
// what follows. Fewer than MinimumJobs jobs are refused with *TooFewError; a figure
// that fewer jobs have is listed in Unfitted. Other errors are those of options that
// cannot be.
func Fit(comparables []Comparable, o FitOptions) (Proposal, error) {
	jobs := sortedJobs(comparables)
	if err := o.validate(jobs); err != nil {
		return Proposal{}, err
	}
	if len(jobs) < MinimumJobs {
		return Proposal{}, &TooFewError{len(jobs), o.Left}
	}
	p := Proposal{Left: append([]Left{}, o.Left...), PerTonne: allPriced(jobs), Unfitted: []Left{}, Changes: []Change{}}
	for _, j := range jobs {
		p.Jobs = append(p.Jobs, j.Job)
	}
	var fitted, costs []fittedMeasure
	for _, m := range measures(jobs, p.PerTonne) {
		if len(m.samples) < MinimumJobs {
			if len(m.samples) > 0 {
				p.Unfitted = append(p.Unfitted, Left{m.name, []string{fmt.Sprintf("%d jobs have it and at least %d are needed", len(m.samples), MinimumJobs)}})
			}
			continue
		}
		f := fittedMeasure{m, shrink(m.samples)}
		fitted = append(fitted, f)
		if m.target == TargetMultiplier {
			costs = append(costs, f)
		}
	}
	shared := sharedPart(jobs, costs)
	if shared.known {
		p.Shared = &Shared{shared.jobs, printed(math.Sqrt(shared.variance)), printed(shared.deviation())}
	}
	for _, m := range fitted {
		p.Figures = append(p.Figures, m.figure(backTest(m.measure, jobs, o)))
	}
	p.propose(fitted, shared, jobs, o)
	return p, nil
}

// validate refuses jobs and options that no fit can be made of.
func (o FitOptions) validate(jobs []Comparable) error {
	for i, j := range jobs {
		if i > 0 && jobs[i-1].Job == j.Job {
			return fmt.Errorf("fitting outturns: the job %q stands in the list twice", shorten(j.Job))
		}
		if j.Kind == "" {
			return fmt.Errorf("fitting outturns: the job %q has no kind of structure", shorten(j.Job))
		}
		if !(j.Outturn.Sign() > 0 && j.Estimate.Sign() > 0 && j.TakeOffMass > 0 && j.WeighedMass > 0) {
			return fmt.Errorf("fitting outturns: the job %q has no cost or no tonnage", shorten(j.Job))
		}
	}
	for i, c := range o.Current {
		if names := figureNames(c.Target); !slices.Contains(names, c.Name) {
			return fmt.Errorf("fitting outturns: /current/%d: found target %q of %q; accepted: %s", i, shorten(c.Target), shorten(c.Name),
				didYouMean(nearMisses(c.Name, names), "multiplier of a category, allowance of "+FigureMass+", rate of "+FigureShop+" or "+FigureSite))
		}
		if err := c.Spread.Validate(); err != nil {
			return fmt.Errorf("fitting outturns: /current/%d/spread: %w", i, err)
		}
		if !(c.Spread.Base() > 0) {
			return fmt.Errorf("fitting outturns: /current/%d/spread: found base %g; accepted: above 0", i, c.Spread.Base())
		}
	}
	for _, class := range sortedKeys(o.Systemic) {
		if s := o.Systemic[class]; !(s > 0 && s <= 2) {
			return fmt.Errorf("fitting outturns: /systemic/%s: found %g; accepted: a deviation above 0, up to 2", class, s)
		}
	}
	return nil
}

// figureNames are the figures from which changes of a target are proposed.
func figureNames(target string) []string {
	switch target {
	case TargetMultiplier:
		return categories
	case TargetAllowance:
		return []string{FigureMass}
	case TargetRate:
		return []string{FigureShop, FigureSite}
	}
	return nil
}

// current returns the spread that a figure was priced with for a kind; nil where
// none was handed in.
func (o FitOptions) current(m measure, kind string) *spread.Spread {
	for _, k := range []string{kind, ""} {
		i := slices.IndexFunc(o.Current, func(c Current) bool { return c.Target == m.target && c.Name == m.name && c.Kind == k })
		if i >= 0 {
			s := o.Current[i].Spread
			return &s
		}
	}
	return nil
}

// figure puts a fit into words.
func (m fittedMeasure) figure(s Score) Figure {
	f := Figure{Name: m.name, Target: m.target, Measure: m.words, Unit: m.unit, Jobs: m.fit.jobs, Median: printed(math.Exp(m.fit.mean)),
		Between: printed(math.Sqrt(m.fit.between)), Within: printed(math.Sqrt(m.fit.variance)), BackTest: s}
	for _, g := range m.fit.groups {
		if g.kind == "" {
			continue
		}
		k := m.kindFit(g.kind)
		k.Jobs, k.Weight, k.OwnMedian = g.jobs, printed(g.weight), printed(math.Exp(g.mean))
		if g.jobs > 1 {
			k.OwnDeviation = printed(math.Sqrt(g.squares / float64(g.jobs-1)))
		}
		k.Deviation = printed(math.Sqrt(g.variance))
		f.Kinds = append(f.Kinds, k)
	}
	other := m.kindFit("")
	other.Weight, other.Deviation = 1, f.Within
	f.Kinds = append(f.Kinds, other)
	return f
}

// kindFit has what a prediction says of a kind.
func (m fittedMeasure) kindFit(kind string) KindFit {
	p := m.fit.predict(kind, 0)
	return KindFit{Kind: kind, Median: printed(math.Exp(p.centre)), Freedom: printed(p.freedom), Prediction: p.spread(1)}
}

// spread is the lognormal with the prediction's median, P10 and P90, times a
// factor.
func (p prediction) spread(factor float64) spread.Spread {
	return spread.NewLognormal(printed(factor*math.Exp(p.quantile(0.1))), printed(factor*math.Exp(p.quantile(0.9))))
}

func sortedKeys(m map[string]float64) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	return keys
}
