package spread

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"
)

// limits returns the lower and upper limit of a triangular or beta-PERT spread
// whose P10 is Low, mode Likely and P90 High. With p the mode's place between the
// limits (0 to 1) and q10, q90 the percentiles of the shape of unit width, the
// share (p − q10)/(q90 − q10) of the mode between the percentiles rises with p,
// so one bisection finds p and two divisions the limits.
func (s Spread) limits() (float64, float64, error) {
	want := (s.Likely - s.Low) / (s.High - s.Low)
	percentiles := unitTriangle
	if s.Distribution == PERT {
		percentiles = unitPERT
	}
	lo, hi := 0.0, 1.0
	for range 60 {
		p := 0.5 * (lo + hi)
		q10, q90 := percentiles(p)
		if p-q10 < want*(q90-q10) {
			lo = p
		} else {
			hi = p
		}
	}
	p := 0.5 * (lo + hi)
	q10, q90 := percentiles(p)
	width := (s.High - s.Low) / (q90 - q10)
	if miss := math.Abs(p - q10 - float64(want*(q90-q10))); !(miss < 1e-9) {
		return 0, 0, s.noFit()
	}
	a, b := s.Low-float64(width*q10), s.High+float64(width*(1-q90))
	return min(a, s.Likely), max(b, s.Likely), nil
}

// noFit is the error of percentiles to which no distribution of the kind is fitted.
func (s Spread) noFit() error {
	return &Error{
		Field:    "likely",
		Found:    fmt.Sprintf("%.12g with P10 %.12g and P90 %.12g, which no %s distribution fits with its mode between its P10 and P90", s.Likely, s.Low, s.High, s.Distribution),
		Accepted: fmt.Sprintf("a likely value (the mode) from %.12g to %.12g; or low and high as limits instead of percentiles", s.Low, s.High),
	}
}

// unitTriangle returns P10 and P90 of the triangle from 0 to 1 with mode p.
func unitTriangle(p float64) (float64, float64) {
	sh := shape{kind: kindTriangular, m: p, b: 1}
	return sh.quantile(0.1, 0.9), sh.quantile(0.9, 0.1)
}

// unitPERT returns P10 and P90 of the beta-PERT from 0 to 1 with mode p.
func unitPERT(p float64) (float64, float64) {
	alpha, beta := 1+float64(pertWeight*p), 1+float64(pertWeight*(1-p))
	return mathext.InvRegIncBeta(alpha, beta, 0.1), 1 - mathext.InvRegIncBeta(beta, alpha, 0.1)
}
