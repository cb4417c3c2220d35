package calibration

import (
	"math"
	"slices"
)

// fittedMeasure is a measure with its fit.
type fittedMeasure struct {
	measure
	fit fit
}

// common is the part of the scatter that all categories of a job share.
type common struct {
	variance float64 // of the log ratio, 0 or more
	freedom  float64
	jobs     int
	known    bool // two categories or more were fitted
}

// sharedPart estimates the variance of the factor that all categories of a job
// share, from the products of the residuals of each pair of categories of one job,
// weighted by their share of its estimate:
//
//	f² = Σ_jobs [(Σ w r)² − Σ w² r²] / Σ_jobs [(Σ w)² − Σ w²] · n/(n − kinds)
//
// Each product of two different residuals has the expectation f², so that what one
// category has of its own does not enter (method of moments of the one-factor model).
func sharedPart(jobs []Comparable, list []fittedMeasure) common {
	var c common
	top, bottom := 0.0, 0.0
	for _, j := range jobs {
		sum, squares, weights, weightSquares := 0.0, 0.0, 0.0, 0.0
		n := 0
		for _, m := range list {
			r, w, ok := m.residual(j)
			if !ok {
				continue
			}
			n++
			sum += float64(w * r)
			squares += float64(float64(w*r) * float64(w*r))
			weights += w
			weightSquares += float64(w * w)
		}
		if n > 1 {
			c.jobs++
			top += float64(sum*sum) - squares
			bottom += float64(weights*weights) - weightSquares
		}
	}
	kindsSeen := len(byKindOfJobs(jobs))
	if !(bottom > 0) || c.jobs-kindsSeen < 1 {
		return c
	}
	c.known = true
	c.freedom = float64(c.jobs - kindsSeen)
	c.variance = max(0, top/bottom*float64(c.jobs)/c.freedom)
	return c
}

// residual is a job's distance from the mean of its kind in one category, with the
// category's share of the job's estimate.
func (m fittedMeasure) residual(j Comparable) (r, weight float64, ok bool) {
	i := slices.IndexFunc(m.samples, func(s sample) bool { return s.job == j.Job })
	a := slices.IndexFunc(j.Amounts, func(a Amount) bool { return a.Category == m.name })
	if i < 0 || a < 0 {
		return 0, 0, false
	}
	mean := m.fit.mean
	if k := slices.IndexFunc(m.fit.groups, func(g group) bool { return g.kind == j.Kind }); k >= 0 {
		mean = m.fit.groups[k].mean
	}
	return m.samples[i].y - mean, j.Amounts[a].Estimate.Float64() / j.Estimate.Float64(), true
}

func byKindOfJobs(jobs []Comparable) []string {
	var list []string
	for _, j := range jobs {
		if !slices.Contains(list, j.Kind) {
			list = append(list, j.Kind)
		}
	}
	return list
}

// deviation of the shared factor, widened for the few jobs that it is known from: a
// normal with it has the P10 and P90 of the Student distribution.
func (c common) deviation() float64 {
	return max(math.Sqrt(c.variance)*widening(c.freedom), leastDeviation)
}

// widening is how much wider P10 to P90 of a Student distribution is than of a
// normal one.
func widening(freedom float64) float64 {
	return prediction{0, 1, freedom}.quantile(0.9) / standardQuantile(0.9)
}
