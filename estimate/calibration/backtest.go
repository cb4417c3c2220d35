package calibration

import (
	"fmt"
	"math"
	"slices"
)

// Score is the leave-one-out test of one figure: each job predicted from the fit to
// the others.
type Score struct {
	Figure string `json:"figure"`
	Jobs   int    `json:"jobs"`
	Band   Tally  `json:"band" doc:"jobs within P10 to P90 of their prediction"`
	Eighty Tally  `json:"eighty" doc:"jobs at or below P80 of their prediction"`

	LogScore float64 `json:"log_score" doc:"mean logarithm of the predicted density at the log ratio that came; more is better"`
	// Compared is how many of the jobs the unfitted prediction exists for; Gain is
	// over these.
	Compared  int      `json:"compared"`
	Unfitted  *float64 `json:"unfitted_log_score,omitempty" doc:"the same for what was believed before; absent where nothing was"`
	Against   string   `json:"against" doc:"what was believed before"`
	Gain      float64  `json:"gain" doc:"mean gain in log score over what was believed before"`
	GainError float64  `json:"gain_error" doc:"standard error of the gain"`
	Improves  bool     `json:"improves" doc:"the gain is above its standard error; where nothing was believed before, the band holds as often as promised"`
	Statement string   `json:"statement"`
}

// BackTest predicts each job of each figure from the others and scores it against
// what was believed before: for the total the past estimate's own range, for other
// figures their old centre with the scatter of the other jobs about it, so that the
// test is of the centre. The total is predicted by the fit to totals, which holds
// what all categories do together. A gain counts as an improvement above one standard
// error of its mean (the one-standard-error rule; Breiman, Friedman, Olshen, Stone,
// Classification and Regression Trees, 1984, section 3.4.3). It refuses what Fit refuses, and tests the figures that Fit
// fits, in the same order.
func BackTest(comparables []Comparable, o FitOptions) ([]Score, error) {
	jobs := sortedJobs(comparables)
	if err := o.validate(jobs); err != nil {
		return nil, err
	}
	if len(jobs) < MinimumJobs {
		return nil, &TooFewError{len(jobs), o.Left}
	}
	var list []Score
	for _, m := range measures(jobs, allPriced(jobs)) {
		if len(m.samples) >= MinimumJobs {
			list = append(list, backTest(m, jobs, o))
		}
	}
	return list, nil
}

// backTest tests one figure; jobs are sorted, and so are its samples.
func backTest(m measure, jobs []Comparable, o FitOptions) Score {
	s := Score{Figure: m.name, Jobs: len(m.samples)}
	inBand, belowEighty := 0, 0
	var scores, gains, before []float64
	groups := byKind(m.samples)
	for i, x := range m.samples {
		p := shrinkWithout(groups, m.samples, i).predict(x.kind, 0)
		if x.y > p.quantile(0.1) && x.y <= p.quantile(0.9) {
			inBand++
		}
		if x.y <= p.quantile(0.8) {
			belowEighty++
		}
		score := p.logDensity(x.y)
		scores = append(scores, score)
		if old, ok := unfitted(m, i, jobs, o); ok {
			before = append(before, old)
			gains = append(gains, score-old)
		}
	}
	s.Band = newTally(withinBand, 0.8, inBand, s.Jobs)
	s.Eighty = newTally(below(80), 0.8, belowEighty, s.Jobs)
	mean, _ := moments(scores)
	s.LogScore = printed(mean)
	s.compare(m, before, gains)
	return s
}

// compare sets the gain over what was believed before.
func (s *Score) compare(m measure, before, gains []float64) {
	s.Compared, s.Against = len(gains), "the old centre, with the other jobs' scatter about it"
	if m.name == FigureTotal {
		s.Against = "the past estimates' own ranges"
	}
	if len(gains) < 2 {
		s.Against = "nothing: no earlier value was given"
		s.Improves = !s.Band.Below() && !s.Band.Above()
		s.Statement = fmt.Sprintf("The back-test has nothing to compare with; %s.", tallyWords(s.Band))
		return
	}
	old, _ := moments(before)
	old = printed(old)
	gain, squares := moments(gains)
	n := float64(len(gains))
	s.Unfitted, s.Gain, s.GainError = &old, printed(gain), printed(math.Sqrt(squares/(n-1)/n))
	s.Improves = s.Gain > s.GainError
	verdict := "does not clearly improve on"
	switch {
	case s.Improves:
		verdict = "improves on"
	case s.Gain < 0:
		verdict = "does worse than"
	}
	s.Statement = fmt.Sprintf("In the back-test of %d jobs the fit %s %s: %+.3f in mean log score, standard error %.3f; %s.",
		s.Compared, verdict, s.Against, s.Gain, s.GainError, tallyWords(s.Band))
}

// unfitted is the log density of a sample under what was believed before; ok is
// false where nothing was.
func unfitted(m measure, left int, jobs []Comparable, o FitOptions) (float64, bool) {
	x := m.samples[left]
	if m.name == FigureTotal {
		i := slices.IndexFunc(jobs, func(j Comparable) bool { return j.Job == x.job })
		b, ok := bandOf(jobs[i])
		if !ok || !(jobs[i].ScopeShare >= LeastScopeShare) {
			return 0, false
		}
		return b.logDensity(math.Log(jobs[i].Outturn.Float64())), true
	}
	centre := func(kind string) (float64, bool) {
		if m.scaled { // what it was priced with is in the estimate already
			return 0, true
		}
		if old := o.current(m, kind); old != nil {
			return math.Log(old.Base()), true
		}
		return 0, m.unit == "" // a ratio that nobody named was 1
	}
	at, ok := centre(x.kind)
	if !ok {
		return 0, false
	}
	squares, n := 0.0, 0
	for i, other := range m.samples {
		if c, ok := centre(other.kind); ok && i != left {
			squares += float64((other.y - c) * (other.y - c))
			n++
		}
	}
	if n == 0 {
		return 0, false
	}
	return prediction{at, max(math.Sqrt(squares/float64(n)), leastDeviation), float64(n)}.logDensity(x.y), true
}
