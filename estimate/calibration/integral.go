package calibration

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// IntegralSummary is the probability integral transform of the outturns in their
// past ranges: if the ranges were right, the probabilities would be uniform between
// 0 and 1, their normal scores of mean 0 and deviation 1 (Dawid, Journal of the Royal
// Statistical Society A 147 (1984), 278–292).
type IntegralSummary struct {
	Jobs      []Integral `json:"jobs"`
	Mean      float64    `json:"mean" doc:"of the normal scores: above 0, outturns lay high in their ranges"`
	Deviation float64    `json:"deviation" doc:"of the normal scores: above 1, the ranges were narrow"`
}

// Integral is where one outturn lay in its past range.
type Integral struct {
	Job         string  `json:"job"`
	Probability float64 `json:"probability" doc:"that the past estimate gave to a cost at most the outturn"`
}

// band is a past range as a distribution of the logarithm of the cost: the normal
// score is linear in it between the percentiles, and goes on beyond them as in the
// first and the last piece.
type band struct {
	logs   [4]float64
	scores [4]float64
}

// bandScores are the normal scores of P10, P50, P80 and P90.
var bandScores = [4]float64{standardQuantile(0.1), 0, standardQuantile(0.8), standardQuantile(0.9)}

func standardQuantile(p float64) float64 { return distuv.UnitNormal.Quantile(p) }

// bandOf returns the past range of a job; ok is false where the estimate did not
// give four percentiles that rise.
func bandOf(c Comparable) (b band, ok bool) {
	if len(c.Percentiles) != len(b.logs) {
		return b, false
	}
	b.scores = bandScores
	for i, p := range c.Percentiles {
		b.logs[i] = math.Log(p.Amount.Float64())
		if math.IsInf(b.logs[i], 0) || i > 0 && !(b.logs[i] > b.logs[i-1]) {
			return b, false
		}
	}
	return b, true
}

// score returns the normal score of a log cost and its slope there.
func (b band) score(x float64) (z, slope float64) {
	i := 0
	for i < len(b.logs)-2 && x > b.logs[i+1] {
		i++
	}
	slope = (b.scores[i+1] - b.scores[i]) / (b.logs[i+1] - b.logs[i])
	return b.scores[i] + float64(slope*(x-b.logs[i])), slope
}

// logDensity is the logarithm of the density of the log cost.
func (b band) logDensity(x float64) float64 {
	z, slope := b.score(x)
	return distuv.UnitNormal.LogProb(z) + math.Log(slope)
}

func summarise(jobs []Comparable) *IntegralSummary {
	var s IntegralSummary
	var scores []float64
	for _, j := range jobs {
		b, ok := bandOf(j)
		if !ok {
			continue
		}
		z, _ := b.score(math.Log(j.Outturn.Float64()))
		scores = append(scores, z)
		s.Jobs = append(s.Jobs, Integral{j.Job, printed(distuv.UnitNormal.CDF(z))})
	}
	if len(scores) == 0 {
		return nil
	}
	mean, squares := moments(scores)
	s.Mean = printed(mean)
	if len(scores) > 1 {
		s.Deviation = printed(math.Sqrt(squares / float64(len(scores)-1)))
	}
	return &s
}

// moments returns the mean and the sum of squared distances from it.
func moments(x []float64) (mean, squares float64) {
	for _, v := range x {
		mean += v
	}
	mean /= float64(len(x))
	for _, v := range x {
		squares += float64((v - mean) * (v - mean))
	}
	return mean, squares
}
