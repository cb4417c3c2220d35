package beam

import "math"

// clamped counts the natural frequencies below λ of a stretch held at both ends:
// the roots of cosh λ cos λ = 1 (Wittrick and Williams 1971).
func clamped(lambda float64) int {
	if lambda < 1 { // the first root is 4.730; near 0 the difference is rounding
		return 0
	}
	i := int(lambda / math.Pi)
	s := 1
	if 1/math.Cosh(lambda)-math.Cos(lambda) < 0 {
		s = -1
	}
	if i%2 == 1 {
		s = -s
	}
	return i - (1-s)/2
}

// dynamic returns the dynamic stiffness on v, θ, v, θ of a stretch of length h;
// λ⁴ = m ω² h⁴/EI.
func dynamic(lambda, ei, h float64) [4][4]float64 {
	f := stiffnessFunctions(lambda)
	k := ei / h
	v, x, l, r, a, b := f[0]*k/(h*h), f[1]*k/(h*h), f[2]*k/h, f[3]*k/h, f[4]*k, f[5]*k
	// v down and θ clockwise +: a turn moves the far end down.
	return [4][4]float64{{v, l, x, r}, {l, a, -r, b}, {x, -r, v, -l}, {r, b, -l, a}}
}

// stiffnessFunctions returns force by deflection at the same and at the far end,
// couple by deflection likewise, couple by turn likewise; at λ = 0: 12, -12, 6, 6,
// 4, 2. For small λ the closed forms lose their digits: there numerators and
// denominator are summed as power series of λ⁴.
func stiffnessFunctions(lambda float64) [6]float64 {
	if lambda < 1.5 {
		return seriesFunctions(lambda * lambda * lambda * lambda)
	}
	s, c := math.Sincos(lambda)
	f := math.Exp(-lambda) // all over e^λ/2, lest sinh and cosh overflow
	sh, ch, one := 1-f*f, 1+f*f, 2*f
	d := one - ch*c
	l2 := lambda * lambda
	return [6]float64{
		l2 * lambda * (s*ch + c*sh) / d,
		-l2 * lambda * (sh + s*one) / d,
		l2 * s * sh / d,
		l2 * (ch - c*one) / d,
		lambda * (s*ch - c*sh) / d,
		lambda * (sh - s*one) / d,
	}
}

// seriesFunctions is stiffnessFunctions by series of q = λ⁴.
func seriesFunctions(q float64) [6]float64 {
	var out [6]float64
	d := 0.0
	power, four := 1.0, 1.0 // q^k/(4k)!, (-4)^k
	for k := range 9 {
		n := float64(4 * k)
		p1 := power / (n + 1)
		p2 := p1 / (n + 2)
		p3 := p2 / (n + 3)
		out[0] += 2 * four * p1
		out[1] -= 2 * p1
		out[2] += 2 * four * p2
		out[3] += 2 * p2
		out[4] += 4 * four * p3
		out[5] += 2 * p3
		four *= -4
		d -= four * p3 / (n + 4)
		power = p3 / (n + 4) * q
	}
	for i := range out {
		out[i] /= d
	}
	return out
}

// transfer carries v, v', EI v″ and EI v‴ from the left end of a stretch to its
// right end.
type transfer [4][4]float64

// stretchTransfer returns the transfer matrix of a uniform stretch.
func stretchTransfer(lambda, ei, h float64) transfer {
	q := lambda * lambda * lambda * lambda
	c := krylov(lambda)
	b := 1 / ei
	return transfer{
		{c[0], h * c[1], h * h * c[2] * b, h * h * h * c[3] * b},
		{q * c[3] / h, c[0], h * c[1] * b, h * h * c[2] * b},
		{q * c[2] / (h * h) * ei, q * c[3] / h * ei, c[0], h * c[1]},
		{q * c[1] / (h * h * h) * ei, q * c[2] / (h * h) * ei, q * c[3] / h, c[0]},
	}
}

// krylov returns (cosh λ + cos λ)/2, (sinh λ + sin λ)/2λ, (cosh λ - cos λ)/2λ² and
// (sinh λ - sin λ)/2λ³: 1, 1, 1/2 and 1/6 at λ = 0.
func krylov(lambda float64) [4]float64 {
	if lambda >= 1.5 {
		s, c := math.Sincos(lambda)
		sh, ch := math.Sinh(lambda), math.Cosh(lambda)
		return [4]float64{(ch + c) / 2, (sh + s) / (2 * lambda), (ch - c) / (2 * lambda * lambda), (sh - s) / (2 * cube(lambda))}
	}
	q := lambda * lambda * lambda * lambda
	var out [4]float64
	term := 1.0
	for k := range 9 {
		n := float64(4 * k)
		out[0] += term
		out[1] += term / (n + 1)
		out[2] += term / ((n + 1) * (n + 2))
		out[3] += term / ((n + 1) * (n + 2) * (n + 3))
		term *= q / ((n + 1) * (n + 2) * (n + 3) * (n + 4))
	}
	return out
}

// times returns t·s.
func (t transfer) times(s *transfer) transfer {
	var out transfer
	for i := range 4 {
		for j := range 4 {
			for k := range 4 {
				out[i][j] += t[i][k] * s[k][j]
			}
		}
	}
	return out
}

// stiffness turns the transfer matrix into forces by displacements: of
// u₁ = A u₀ + B f₀ and f₁ = C u₀ + D f₀ follow f₀ = B⁻¹ (u₁ - A u₀) and f₁. The end
// forces are EI v‴ and -EI v″ on the left, -EI v‴ and EI v″ on the right.
func (t transfer) stiffness() [4][4]float64 {
	det := t[0][2]*t[1][3] - t[0][3]*t[1][2]
	inv := [2][2]float64{{t[1][3] / det, -t[0][3] / det}, {-t[1][2] / det, t[0][2] / det}}
	var f0, f1 [2][4]float64
	for i := range 2 {
		for j := range 2 {
			f0[i][j] = -inv[i][0]*t[0][j] - inv[i][1]*t[1][j]
			f0[i][j+2] = inv[i][j]
		}
	}
	for i := range 2 {
		for j := range 4 {
			f1[i][j] = t[i+2][2]*f0[0][j] + t[i+2][3]*f0[1][j]
			if j < 2 {
				f1[i][j] += t[i+2][j]
			}
		}
	}
	var out [4][4]float64
	for j := range 4 {
		out[0][j], out[1][j] = f0[1][j], -f0[0][j]
		out[2][j], out[3][j] = -f1[1][j], f1[0][j]
	}
	return out
}
