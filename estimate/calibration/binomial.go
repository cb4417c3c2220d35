package calibration

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// confidence of the intervals for shares.
const confidence = 0.95

// ClopperPearson returns the exact interval for the probability of an event seen k
// times in n independent trials, 0 ≤ k ≤ n, 1 ≤ n: its ends are quantiles of the beta
// distribution, B(α/2; k, n−k+1) and B(1−α/2; k+1, n−k), with α = 1 − level. NaN for
// any other k, n or level. Clopper, Pearson, Biometrika 26 (1934), 404–413.
func ClopperPearson(k, n int, level float64) (low, high float64) {
	if !(level > 0 && level < 1) || n < 1 || k < 0 || k > n {
		return math.NaN(), math.NaN()
	}
	low, high = 0, 1
	tail := (1 - level) / 2
	if k > 0 {
		low = distuv.Beta{Alpha: float64(k), Beta: float64(n - k + 1)}.Quantile(tail)
	}
	if k < n {
		high = distuv.Beta{Alpha: float64(k + 1), Beta: float64(n - k)}.Quantile(1 - tail)
	}
	return low, high
}
