package spread

import "math"

// exp is the exponential function in operations that are never fused: the
// library's own gives other bits on machines with fused operations. x = k·ln 2/64
// + r; 2^(k/64) by table and exponent bits, e^r by its series. Relative error
// below 1e-15; outside of ±700 the library's.
func exp(x float64) float64 {
	if !(-expEdge < x && x < expEdge) {
		return math.Exp(x)
	}
	shifted := float64(x*(expSteps/math.Ln2)) + expMagic
	k := int(int32(math.Float64bits(shifted)))
	n := shifted - expMagic
	r := x - float64(n*ln2High) - float64(n*ln2Low)
	power := expTable[k&(expSteps-1)] * expSeries(r)
	return math.Float64frombits(math.Float64bits(power) + uint64(k>>expStepBits)<<mantissaBits)
}

// expSeries is e^r for |r| ≤ ln 2/128.
func expSeries(r float64) float64 {
	return 1 + float64(r*(1+float64(r*(1.0/2+float64(r*(1.0/6+float64(r*(1.0/24+float64(r*(1.0/120))))))))))
}

const (
	expEdge     = 700
	expMagic    = 3 << 51 // adding it rounds to an integer in the low bits
	expStepBits = 6
	expSteps    = 1 << expStepBits
	// ln 2/64 as a number of 33 bits, whose products with n are exact, and a rest.
	ln2High = 0x1.62e42feep-1 / expSteps
	ln2Low  = (math.Ln2 - 0x1.62e42feep-1) / expSteps
)

var expTable = buildExpTable()

// buildExpTable tabulates 2^(i/64).
func buildExpTable() [expSteps]float64 {
	var table [expSteps]float64
	for i := range table {
		table[i] = math.Exp2(float64(i) / expSteps)
	}
	return table
}
