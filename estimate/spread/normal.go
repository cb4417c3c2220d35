package spread

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// The table of the standard normal quantile: every octave of the lower tail
// probability p is cut into segments of equal width, with a cubic in each that
// meets value and slope at both ends. A segment is found from the bits of p, so
// a look-up takes neither logarithm nor root. Absolute error below 2e-9.
const (
	segmentBits  = 6  // 64 segments an octave
	octaves      = 54 // 2⁻⁵⁴ ≤ p < 1
	mantissaBits = 52 // of a float64
	exponentBias = 0x3ff
	segments     = (octaves - 1) << segmentBits // up to p = 1/2
	firstSegment = (exponentBias - octaves) << segmentBits
	restBits     = mantissaBits - segmentBits
)

// cubic is c₀ + c₁t + c₂t² + c₃t³ for 0 ≤ t < 1.
type cubic [4]float64

// at evaluates c. The conversions forbid fused operations, which would give
// other bits on other machines.
func (c *cubic) at(t float64) float64 {
	return c[0] + float64(t*(c[1]+float64(t*(c[2]+float64(t*c[3])))))
}

// hermite returns the cubic through y0 and y1 with slopes d0 and d1 per unit of t.
func hermite(y0, y1, d0, d1 float64) cubic {
	rise := y1 - y0
	return cubic{y0, d0, 3*rise - 2*d0 - d1, d0 + d1 - 2*rise}
}

var normalTable = buildNormalTable()

// buildNormalTable fills the segments below p = 1/2 and one of zeros for p = 1/2.
func buildNormalTable() *[segments + 1]cubic {
	table := new([segments + 1]cubic)
	for i := range segments {
		p0 := math.Float64frombits(uint64(firstSegment+i) << restBits)
		p1 := math.Float64frombits(uint64(firstSegment+i+1) << restBits)
		z0, z1 := mathext.NormalQuantile(p0), mathext.NormalQuantile(p1)
		table[i] = hermite(z0, z1, (p1-p0)/normalDensity(z0), (p1-p0)/normalDensity(z1))
	}
	return table
}

// normalDensity is the standard normal density.
func normalDensity(z float64) float64 {
	return math.Exp(-0.5*z*z) / math.Sqrt(2*math.Pi)
}

// StandardNormal returns the standard normal quantile of u, by table: absolute
// error below 2e-9. It is −Inf at 0, +Inf at 1 and NaN outside.
func StandardNormal(u float64) float64 {
	k, t, sign := segment(u)
	if k > segments { // below 2⁻⁵⁴, or outside of 0 to 1
		return outerNormal(u)
	}
	return withSign(normalTable[k].at(t), sign)
}

// outerNormal is StandardNormal outside of the table.
func outerNormal(u float64) float64 {
	if !(0 <= u && u <= 1) {
		return math.NaN()
	}
	return mathext.NormalQuantile(u)
}

// FillStandardNormal sets dst[i] to StandardNormal(u[i]). dst may be u; it must
// be at least as long.
func FillStandardNormal(dst, u []float64) {
	dst = dst[:len(u)]
	table := normalTable
	for i, v := range u {
		k, t, sign := segment(v)
		if k > segments {
			dst[i] = outerNormal(v)
			continue
		}
		dst[i] = withSign(table[k].at(t), sign)
	}
}

// FillCorrelated sets dst[i] to common·z[i] + own·StandardNormal(u[i]): a member
// of a group with the common factor z. dst may be u; it and z must be at least as
// long.
func FillCorrelated(dst, u, z []float64, common, own float64) {
	dst, z = dst[:len(u)], z[:len(u)]
	table := normalTable
	for i, v := range u {
		k, t, sign := segment(v)
		if k > segments {
			dst[i] = float64(common*z[i]) + float64(own*outerNormal(v))
			continue
		}
		e := withSign(table[k].at(t), sign)
		dst[i] = float64(common*z[i]) + float64(own*e)
	}
}

// segment returns the segment of u's smaller tail, the place in it, and a number
// with the sign of the quantile. The half of u is chosen by its bits: a branch
// would be mispredicted every other time. Beyond the table k > segments.
func segment(u float64) (k uint64, t float64, sign uint64) {
	sign = math.Float64bits(u - 0.5)
	below := uint64(int64(sign) >> 63)
	bits := math.Float64bits(u)&below | math.Float64bits(1-u)&^below
	t = math.Float64frombits(bits<<segmentBits&(1<<mantissaBits-1)|exponentBias<<mantissaBits) - 1 // exact
	return bits>>restBits - firstSegment, t, sign
}

// withSign returns |z| with a sign bit.
func withSign(z float64, sign uint64) float64 {
	return math.Float64frombits(math.Float64bits(z)&^signBit | sign&signBit)
}

// signBit is that of a float64.
const signBit = 1 << 63

// The tables over z end at ±zEdge, beyond which the exact functions take over:
// one draw in 1.7 million.
const (
	zEdge    = 5
	tailRate = 64 // knots per unit of the table of the lower tail
)

var tailTable = buildTailTable()

// buildTailTable tabulates Φ(z) for z ≤ 0.
func buildTailTable() *[zEdge*tailRate + 1]cubic {
	table := new([zEdge*tailRate + 1]cubic)
	for i := range table {
		z0 := float64(i)/tailRate - zEdge
		z1 := z0 + 1.0/tailRate
		table[i] = hermite(lowerTail(z0), lowerTail(z1), normalDensity(z0)/tailRate, normalDensity(z1)/tailRate)
	}
	return table
}

// lowerTail is Φ(z), exact.
func lowerTail(z float64) float64 { return 0.5 * math.Erfc(-z/math.Sqrt2) }

// tail returns Φ(z) for z ≤ 0 by table: error below 2e-9, and below 1e-6 of Φ.
func tail(z float64) float64 {
	x := float64((z + zEdge) * tailRate)
	if !(x >= 0) {
		return lowerTail(z)
	}
	i := int(x)
	return tailTable[i].at(x - float64(i))
}
