package spread

import "math"

// FillUniform sets dst[i] to FromUniform(u[i]). dst may be u; it must be at
// least as long.
func (r *Sampler) FillUniform(dst, u []float64) {
	dst = dst[:len(u)]
	switch r.sh.kind {
	case kindPERT, kindLognormal:
		FillStandardNormal(dst, u)
		r.FillNormal(dst, dst)
	case kindTriangular:
		r.fillTriangular(dst, u)
	default:
		for i, v := range u {
			dst[i] = r.FromUniform(v)
		}
	}
}

// FillNormal sets dst[i] to FromNormal(z[i]). dst may be z; it must be at least
// as long. The loops do the operations of FromNormal in its order.
func (r *Sampler) FillNormal(dst, z []float64) {
	dst = dst[:len(z)]
	switch r.sh.kind {
	case kindUniform:
		fillProbability(dst, z)
		a, b, width := r.sh.a, r.sh.b, r.width
		for i, u := range dst {
			x := a + float64(u*width)
			if x > b {
				x = b
			}
			dst[i] = x
		}
	case kindTriangular:
		fillProbability(dst, z)
		r.fillTriangular(dst, dst)
	case kindPERT:
		r.fillPERT(dst, z)
	case kindLognormal:
		r.fillLognormal(dst, z)
	default:
		for i := range dst {
			dst[i] = r.sh.base
		}
	}
}

// fillProbability sets dst[i] to Φ(z[i]) by table.
func fillProbability(dst, z []float64) {
	dst = dst[:len(z)]
	table := tailTable
	for i, v := range z {
		bits := math.Float64bits(v)
		x := float64((math.Float64frombits(bits|signBit) + zEdge) * tailRate)
		var below float64
		if k := uint(int(x)); x >= 0 && k < uint(len(table)) {
			below = table[k].at(x - float64(int(k)))
		} else {
			below = lowerTail(-math.Abs(v))
		}
		half := math.Float64bits(0.5-below)&^signBit | bits&signBit
		dst[i] = 0.5 + math.Float64frombits(half)
	}
}

// fillTriangular maps uniform numbers. Both sides of the mode take one root of a
// number that is chosen by its bits: a branch would be mispredicted.
func (r *Sampler) fillTriangular(dst, u []float64) {
	dst = dst[:len(u)]
	a, b, w := r.sh.a, r.sh.b, r.sh.b-r.sh.a
	l, h := r.sh.m-a, b-r.sh.m
	for i, v := range u {
		uw := v * w
		side := uint64(int64(math.Float64bits(uw-l)) >> 63) // all ones below the mode
		low, high := float64(uw*l), float64(float64((1-v)*w)*h)
		root := math.Sqrt(math.Float64frombits(math.Float64bits(low)&side | math.Float64bits(high)&^side))
		from := math.Float64frombits(math.Float64bits(a)&side | math.Float64bits(b)&^side)
		dst[i] = from + math.Float64frombits(math.Float64bits(root)|^side&signBit)
	}
}

// fillPERT maps standard normal numbers through the table of the spread.
func (r *Sampler) fillPERT(dst, z []float64) {
	dst = dst[:len(z)]
	a, width, table := r.sh.a, r.width, r.table
	for i, v := range z {
		x := float64((v + zEdge) * zKnotRate)
		if !(0 <= x && x < zSegments) {
			dst[i] = r.outer(v)
			continue
		}
		k := int(x)
		dst[i] = a + float64(width*table[k].at(x-float64(k)))
	}
}

// fillLognormal is exp of a line, with exp spelt out: a call would cost as much.
func (r *Sampler) fillLognormal(dst, z []float64) {
	dst = dst[:len(z)]
	mu, sigma := r.sh.mu, r.sh.sigma
	for i, v := range z {
		x := mu + float64(sigma*v)
		if !(-expEdge < x && x < expEdge) {
			dst[i] = math.Exp(x)
			continue
		}
		shifted := float64(x*(expSteps/math.Ln2)) + expMagic
		k := int(int32(math.Float64bits(shifted)))
		n := shifted - expMagic
		r := x - float64(n*ln2High) - float64(n*ln2Low)
		power := expTable[k&(expSteps-1)] * expSeries(r)
		dst[i] = math.Float64frombits(math.Float64bits(power) + uint64(k>>expStepBits)<<mantissaBits)
	}
}
