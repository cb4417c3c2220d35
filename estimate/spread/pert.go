package spread

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// The table of a beta-PERT over z.
const (
	zKnotRate = 16 // knots per unit
	zSegments = 2 * zEdge * zKnotRate
)

// buildPERT tabulates the beta quantile of Φ(z) with slopes φ(z)/f(x). The upper
// half is computed as the mirrored lower half, so that both tails keep digits.
func buildPERT(sh *shape) *[zSegments + 1]cubic {
	const half = zSegments / 2
	var y, d [zSegments + 1]float64
	betaHalf(y[:half+1], d[:half+1], sh.alpha, sh.beta)
	var upper, slope [half + 1]float64
	betaHalf(upper[:], slope[:], sh.beta, sh.alpha)
	for i := range half {
		y[zSegments-i], d[zSegments-i] = 1-upper[i], slope[i]
	}
	table := new([zSegments + 1]cubic)
	for i := range zSegments {
		table[i] = hermite(y[i], y[i+1], d[i], d[i+1])
	}
	return table
}

// betaHalf sets y[i] to the quantile, at Φ(z), of the beta distribution on 0 to 1
// with exponents alpha and beta, and d[i] to its slope per knot, for the knots z
// from −zEdge to 0. Newton's method in the logarithms of value and probability,
// where the lower tail is nearly straight, each knot from the one before.
func betaHalf(y, d []float64, alpha, beta float64) {
	logB := mathext.Lbeta(alpha, beta)
	x := mathext.InvRegIncBeta(alpha, beta, lowerTail(-zEdge))
	for i := range y {
		z := float64(i)/zKnotRate - zEdge
		p := lowerTail(z)
		if i > 0 {
			x = min(x*math.Exp(d[i-1]/x), 1)
			x = polishBeta(x, p, alpha, beta, logB)
		}
		y[i], d[i] = x, normalDensity(z)/(betaDensity(x, alpha, beta, logB)*zKnotRate)
	}
}

// betaDensity is the density of the beta distribution.
func betaDensity(x, alpha, beta, logB float64) float64 {
	return math.Exp((alpha-1)*math.Log(x) + (beta-1)*math.Log1p(-x) - logB)
}

// polishBeta improves x towards the quantile of p.
func polishBeta(x, p, alpha, beta, logB float64) float64 {
	for range 8 {
		F := mathext.RegIncBeta(alpha, beta, x)
		step := math.Log(p/F) * F / (x * betaDensity(x, alpha, beta, logB))
		if !(math.Abs(step) < 1) {
			return mathext.InvRegIncBeta(alpha, beta, p)
		}
		x = min(x*math.Exp(step), 1-1e-16)
		if math.Abs(step) < 1e-6 { // the next error is its square
			return x
		}
	}
	return mathext.InvRegIncBeta(alpha, beta, p)
}
