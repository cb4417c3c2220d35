package ranges

import "math"

// quantile returns the p-quantile of ascending values by linear interpolation:
// type 7 of Hyndman and Fan 1996, The American Statistician 50. 0 ≤ p ≤ 1, at
// least one value.
func quantile(sorted []float64, p float64) float64 {
	k, part := position(len(sorted), p)
	if k+1 >= len(sorted) {
		return sorted[len(sorted)-1]
	}
	return interpolate(sorted[k], sorted[k+1], part)
}

// position returns the lower order statistic of the p-quantile of n values and
// the share of the way to the next.
func position(n int, p float64) (int, float64) {
	h := float64(n-1) * p
	k := math.Floor(h)
	return int(k), h - k
}

// interpolate goes the given part of the way from low to high, exact where they
// are equal.
func interpolate(low, high, part float64) float64 {
	return low + float64(part*(high-low))
}

// mergeRuns merges runs of equal length, each ascending, into one ascending
// slice. It may use x and scratch, of the same length, in turn; the result is
// one of them.
func mergeRuns(x, scratch []float64, run int) []float64 {
	for ; run < len(x); run *= 2 {
		for i := 0; i < len(x); i += 2 * run {
			middle, end := min(i+run, len(x)), min(i+2*run, len(x))
			merge(scratch[i:end], x[i:middle], x[middle:end])
		}
		x, scratch = scratch, x
	}
	return x
}

// merge writes two ascending slices as one.
func merge(dst, a, b []float64) {
	for k := range dst {
		if len(b) == 0 || len(a) > 0 && a[0] <= b[0] {
			dst[k], a = a[0], a[1:]
		} else {
			dst[k], b = b[0], b[1:]
		}
	}
}

// selectQuantile returns the p-quantile of unsorted values, type 7, reordering
// them.
func selectQuantile(x []float64, p float64) float64 {
	k, part := position(len(x), p)
	selectOrder(x, k)
	if k+1 >= len(x) || part == 0 {
		return x[k]
	}
	next := x[k+1]
	for _, v := range x[k+2:] {
		next = min(next, v)
	}
	return interpolate(x[k], next, part)
}

// selectOrder reorders x so that x[k] is its k-th smallest, smaller ones before,
// larger ones after (Hoare 1961, Algorithm 65, with the median of three). All
// values are numbers.
func selectOrder(x []float64, k int) {
	lo, hi := 0, len(x)-1
	for lo < hi {
		a, b, c := x[lo], x[lo+(hi-lo)/2], x[hi]
		pivot := max(min(a, b), min(max(a, b), c))
		i, j := lo, hi
		for i <= j {
			for x[i] < pivot {
				i++
			}
			for x[j] > pivot {
				j--
			}
			if i <= j {
				x[i], x[j] = x[j], x[i]
				i++
				j--
			}
		}
		switch {
		case k <= j:
			hi = j
		case k >= i:
			lo = i
		default:
			return
		}
	}
}
