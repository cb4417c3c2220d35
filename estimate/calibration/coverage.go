package calibration

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"spanwright/structural/unit"
)

// LeastScopeShare is how much of a past base the compared categories must be for
// its percentiles to be judged: percentiles of parts do not add, and scaling them
// with the base is fair for a small part alone. A judgement, no source.
const LeastScopeShare = 0.9

// Tally counts jobs of which a given share was promised to lie somewhere.
type Tally struct {
	Name     string  `json:"name" doc:"at or below P80, or within P10 to P90"`
	Promised float64 `json:"promised" doc:"share of jobs that the past estimates promised"`
	Jobs     int     `json:"jobs" doc:"jobs whose estimate gave what is needed to count"`
	Count    int     `json:"count"`
	Expected float64 `json:"expected" doc:"promised share times jobs"`
	Low      float64 `json:"low" doc:"exact 95 % interval for the share (Clopper-Pearson)"`
	High     float64 `json:"high"`
}

// Below tells whether fewer jobs than promised lie there, beyond chance at 95 %.
func (t Tally) Below() bool { return t.Jobs > 0 && t.High < t.Promised }

// Above tells whether more jobs than promised lie there, beyond chance at 95 %.
func (t Tally) Above() bool { return t.Jobs > 0 && t.Low > t.Promised }

// Covered is how past ranges held.
type Covered struct {
	Jobs     int              `json:"jobs" doc:"jobs whose estimate gave any percentile over comparable scope"`
	Tallies  []Tally          `json:"tallies" doc:"at or below P10, P50, P80, P90, and within P10 to P90"`
	Integral *IntegralSummary `json:"integral,omitempty" doc:"where each outturn lay in its past range; absent where no estimate gave four rising percentiles"`
	Left     []Left           `json:"left" doc:"jobs that are not counted at all"`
	Verdict  string           `json:"verdict" doc:"one sentence"`
}

// Coverage counts how many outturns lay at or below each percentile of their past
// estimate. It holds for any number of jobs; the intervals say what few jobs are
// worth. They treat jobs as independent.
func Coverage(comparables []Comparable) Covered {
	jobs := sortedJobs(comparables)
	c := Covered{Left: []Left{}}
	var counted []Comparable
	for _, j := range jobs {
		switch {
		case len(j.Percentiles) == 0:
			c.Left = append(c.Left, Left{j.Job, []string{"the past estimate gave no percentile"}})
		case !(j.ScopeShare >= LeastScopeShare):
			c.Left = append(c.Left, Left{j.Job, []string{fmt.Sprintf("the compared categories are %.0f %% of the past base; its percentiles are judged from %.0f %% on", 100*j.ScopeShare, 100*LeastScopeShare)}})
		default:
			counted = append(counted, j)
		}
	}
	c.Jobs = len(counted)
	for _, p := range []int{10, 50, 80, 90} {
		c.Tallies = append(c.Tallies, tallyBelow(counted, p))
	}
	c.Tallies = append(c.Tallies, tallyWithin(counted))
	c.Integral = summarise(counted)
	c.Verdict = verdict(c)
	return c
}

func sortedJobs(list []Comparable) []Comparable {
	out := slices.Clone(list)
	slices.SortFunc(out, func(a, b Comparable) int {
		return cmp.Or(strings.Compare(a.Job, b.Job), strings.Compare(a.Completed, b.Completed))
	})
	return out
}

// beyond compares a job's outturn with a percentile: −1, 0, +1; ok is false where
// the estimate did not give it.
func (c Comparable) beyond(percent int) (sign int, ok bool) {
	i := slices.IndexFunc(c.Percentiles, func(p Percentile) bool { return p.Percent == percent })
	if i < 0 {
		return 0, false
	}
	return c.Outturn.Cmp(c.Percentiles[i].Amount), true
}

func tallyBelow(jobs []Comparable, percent int) Tally {
	n, k := 0, 0
	for _, j := range jobs {
		if sign, ok := j.beyond(percent); ok {
			n++
			if sign <= 0 {
				k++
			}
		}
	}
	return newTally(below(percent), float64(percent)/100, k, n)
}

// below names the tally of a percentile.
func below(percent int) string { return fmt.Sprintf("at or below P%d", percent) }

// tally returns one by its name; all are always there.
func (c Covered) tally(name string) Tally {
	i := slices.IndexFunc(c.Tallies, func(t Tally) bool { return t.Name == name })
	return c.Tallies[i]
}

// withinBand is the name of the tally of the whole band.
const withinBand = "within P10 to P90"

func tallyWithin(jobs []Comparable) Tally {
	n, k := 0, 0
	for _, j := range jobs {
		low, ok1 := j.beyond(10)
		high, ok2 := j.beyond(90)
		if ok1 && ok2 {
			n++
			if low > 0 && high <= 0 {
				k++
			}
		}
	}
	return newTally(withinBand, 0.8, k, n)
}

func newTally(name string, promised float64, k, n int) Tally {
	t := Tally{Name: name, Promised: promised, Jobs: n, Count: k, Expected: printed(promised * float64(n)), High: 1}
	if n > 0 {
		low, high := ClopperPearson(k, n, confidence)
		t.Low, t.High = printed(low), printed(high)
	}
	return t
}

// printed rounds a figure to the digits that are shown, so that the text does not
// depend on a machine's last bits.
func printed(x float64) float64 { return unit.Round(x, 10) + 0 }

// verdict says in one sentence what the tallies show. The middle of the ranges is
// judged by P50, or by P80 where no estimate gave it, and their width by the band.
func verdict(c Covered) string {
	fifty, eighty, band := c.tally(below(50)), c.tally(below(80)), c.tally(withinBand)
	if fifty.Jobs == 0 {
		fifty = eighty
	}
	if c.Jobs == 0 {
		return "No past estimate gave a range over comparable scope, so nothing can be said of the ranges."
	}
	var found []string
	var because []Tally
	switch {
	case fifty.Below():
		found, because = append(found, "too low"), append(because, fifty)
	case fifty.Above():
		found, because = append(found, "too high"), append(because, fifty)
	case eighty.Below():
		found, because = append(found, "too low at P80"), append(because, eighty)
	}
	switch {
	case band.Below() && !explained(fifty, c.tally(below(10)), c.tally(below(90))):
		found, because = append(found, "too narrow"), append(because, band)
	case band.Above():
		found, because = append(found, "too wide"), append(because, band)
	}
	if len(found) == 0 {
		return fmt.Sprintf("Past ranges are consistent with the %d outturns: %s.", c.Jobs, tallyWords(band, fifty))
	}
	return fmt.Sprintf("Past ranges were %s: %s.", strings.Join(found, " and "), tallyWords(because...))
}

// explained tells whether ranges that lie too low or too high account for outturns
// outside the band by themselves: the tail on the other side is then emptier than
// promised.
func explained(fifty, ten, ninety Tally) bool {
	switch {
	case fifty.Below():
		return float64(ten.Count) < ten.Expected
	case fifty.Above():
		return float64(ninety.Jobs-ninety.Count) < float64(ninety.Jobs)-ninety.Expected
	}
	return false
}

func tallyWords(list ...Tally) string {
	var parts []string
	for _, t := range list {
		if t.Jobs > 0 {
			parts = append(parts, fmt.Sprintf("%d of %d outturns lay %s (95 %% interval %.0f to %.0f %%) where %.0f %% were promised", t.Count, t.Jobs, t.Name, 100*t.Low, 100*t.High, 100*t.Promised))
		}
	}
	return strings.Join(parts, ", ")
}
