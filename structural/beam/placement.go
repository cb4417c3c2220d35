package beam

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// Goal is what the best positions of supports make least.
type Goal uint8

const (
	// LeastMoment is the largest magnitude of the moment, N.m.
	LeastMoment Goal = iota + 1
	// LeastDeflection is the largest magnitude of the deflection, m.
	LeastDeflection
	// ParallelEnds is the larger slope of the two ends, rad: the ends of a
	// symmetrical member stay parallel (Airy points under own weight).
	ParallelEnds
	// LeastShortening is what the axis loses in length by bending, ∫(dv/dx)²/2 dx,
	// m (Bessel points under own weight). All terms act together, free or not.
	LeastShortening
)

// String returns the goal in words.
func (g Goal) String() string {
	switch g {
	case LeastMoment:
		return "least moment"
	case LeastDeflection:
		return "least deflection"
	case ParallelEnds:
		return "parallel ends"
	case LeastShortening:
		return "least shortening"
	}
	return "unknown"
}

// Layout says which supports are free to move. Those of the Beam stand where
// they are.
type Layout struct {
	Free      int  // pinned supports to be placed, 1 to 8
	Symmetric bool // in pairs, mirrored about the middle; Free is even
}

// Placement is where free supports stand best.
type Placement struct {
	X     []float64 // m, left to right
	Value float64   // of the goal, in its unit
}

const (
	mostFree  = 8
	leastGap  = 1e-4  // of the length, between supports
	placeStep = 1e-10 // of the length, where the search ends
)

// PlaceSupports finds the positions of free supports that reach the goal best
// under the terms (as Response.Envelope takes them), by exact analysis of each
// trial: one position by scanning the length in 200 steps and golden section in
// every valley; several by a search with simplices (Nelder and Mead 1965) from the
// best of fixed starts. The same input gives the same answer; with three and
// more free supports it is the best found and not proven the least.
//
// Every error is a *Fault; if no trial can be analysed, that of the last.
func PlaceSupports(b Beam, cases []Case, terms []Term, l Layout, g Goal) (Placement, error) {
	if fault := checkLayout(l, g); fault != nil {
		return Placement{}, fault
	}
	for _, f := range []*Fault{checkLength(b), checkTerms(terms, len(cases))} {
		if f != nil {
			return Placement{}, f
		}
	}
	s := &placing{beam: b, cases: cases, terms: terms, layout: l, goal: g, best: math.Inf(1)}
	n := l.Free
	if l.Symmetric {
		n /= 2
	}
	if n == 1 {
		s.scan()
	} else {
		s.descend(n)
	}
	if s.at == nil {
		return Placement{}, s.fault
	}
	x := s.positions(s.at)
	slices.Sort(x)
	return Placement{X: x, Value: s.best}, nil
}

func checkLayout(l Layout, g Goal) *Fault {
	switch {
	case !(l.Free >= 1 && l.Free <= mostFree):
		return &Fault{FaultLayout, "free supports", 0, fmt.Sprintf("%d", l.Free), fmt.Sprintf("1 to %d", mostFree)}
	case l.Symmetric && l.Free%2 != 0:
		return &Fault{FaultLayout, "symmetric supports", 0, fmt.Sprintf("%d", l.Free), "an even number"}
	case !(g >= LeastMoment && g <= LeastShortening):
		return &Fault{FaultLayout, "goal", 0, fmt.Sprintf("%d", g), "LeastMoment, LeastDeflection, ParallelEnds or LeastShortening"}
	}
	return nil
}

// placing is one search; places are in lengths of the member.
type placing struct {
	beam     Beam
	cases    []Case
	terms    []Term
	layout   Layout
	goal     Goal
	analyser Analyser
	envelope Envelope
	supports []Support
	at       []float64 // the best trial
	best     float64
	fault    *Fault
}

// positions returns the free supports of a trial, m.
func (s *placing) positions(at []float64) []float64 {
	var out []float64
	for _, x := range at {
		out = append(out, x*s.beam.Length)
		if s.layout.Symmetric {
			out = append(out, (1-x)*s.beam.Length)
		}
	}
	return out
}

// try returns the goal of a trial, infinity where it cannot be analysed, and
// keeps the best.
func (s *placing) try(at []float64) float64 {
	trial := s.beam
	s.supports = append(s.supports[:0], s.beam.Supports...)
	for _, x := range s.positions(at) {
		x = min(max(x, 0), s.beam.Length)
		for _, o := range s.supports {
			if math.Abs(o.X-x) < leastGap*s.beam.Length {
				if s.fault == nil {
					s.fault = &Fault{FaultTwice, "free support", x, "another support at the same place", "supports apart"}
				}
				return math.Inf(1)
			}
		}
		s.supports = append(s.supports, Support{X: x, Kind: Pinned})
	}
	for _, x := range at {
		if !(x >= 0 && x <= 1) {
			return math.Inf(1)
		}
	}
	trial.Supports = s.supports
	r, err := s.analyser.Analyse(trial, s.cases)
	if err != nil {
		errors.As(err, &s.fault)
		return math.Inf(1)
	}
	v := s.value(r)
	if v < s.best*(1-noise) || s.at == nil {
		s.best, s.at = v, slices.Clone(at)
	}
	return v
}

// value returns the goal.
func (s *placing) value(r *Response) float64 {
	switch s.goal {
	case LeastMoment:
		r.EnvelopeForces(&s.envelope, s.terms)
		return max(s.envelope.MomentMax.Value, -s.envelope.MomentMin.Value)
	case LeastDeflection:
		r.EnvelopeDeflections(&s.envelope, s.terms)
		return max(s.envelope.DeflectionMax.Value, -s.envelope.DeflectionMin.Value)
	case ParallelEnds:
		most := 0.0
		for _, x := range [2]float64{0, s.beam.Length} {
			var slope Bounds
			for _, t := range s.terms {
				_, _, v, _ := r.At(t.Case, x, Right)
				slope.add(t, v)
			}
			most = max(most, slope.Max, -slope.Min)
		}
		return most
	}
	return r.shortening(s.terms)
}

// shortening returns ∫(dv/dx)²/2 dx with all terms acting.
func (r *Response) shortening(terms []Term) float64 {
	sum := 0.0
	for p := range len(r.x) - 1 {
		deg := r.degrees(p)[deflectionTrack]
		var v poly
		for _, t := range terms {
			v.add(deg, t.Factor, &r.tracks[deflectionTrack][p*r.cases+t.Case].c)
		}
		d := v.derivative(deg)
		for i := range deg {
			for j := range deg {
				sum += d[i] * d[j] / float64(i+j+1) / (2 * (r.x[p+1] - r.x[p]))
			}
		}
	}
	return sum
}

// scan searches along one position.
func (s *placing) scan() {
	const steps = 200
	end := 1.0
	if s.layout.Symmetric {
		end = 0.5
	}
	var v [steps + 1]float64
	one := func(x float64) float64 { return s.try([]float64{x}) }
	for i := range v {
		v[i] = one(end * float64(i) / steps)
	}
	for i := range v {
		lo, hi := max(i-1, 0), min(i+1, steps)
		if !math.IsInf(v[i], 1) && v[i] <= v[lo] && v[i] <= v[hi] {
			golden(one, end*float64(lo)/steps, end*float64(hi)/steps, placeStep)
		}
	}
}

// descend searches in n dimensions: the best of evenly spread and of
// low-discrepancy starts, then simplices of falling size.
func (s *placing) descend(n int) {
	for _, start := range s.starts(n) {
		s.try(start)
	}
	if s.at == nil {
		return
	}
	for _, size := range []float64{0.1, 0.03, 0.1, 0.01, 0.03, 0.003, 0.01, 1e-3, 1e-4} {
		s.simplex(slices.Clone(s.at), size)
	}
}

// starts returns trials in rising order of their places.
func (s *placing) starts(n int) [][]float64 {
	end := 1.0
	if s.layout.Symmetric {
		end = 0.5
	}
	var out [][]float64
	for _, edge := range []float64{0, 0.1, 0.2, 0.5, 1} { // free ends of so many spacings
		at := make([]float64, n)
		for i := range at {
			at[i] = end * (edge + float64(i)) / (2*edge + float64(n) - 1)
		}
		out = append(out, at)
	}
	primes := [mostFree]int{2, 3, 5, 7, 11, 13, 17, 19}
	for k := 1; k <= 100*n; k++ {
		at := make([]float64, n)
		for i := range at {
			at[i] = end * halton(k, primes[i])
		}
		slices.Sort(at)
		out = append(out, at)
	}
	return out
}

// halton returns number k of the van der Corput sequence of a base.
func halton(k, base int) float64 {
	v, part := 0.0, 1.0
	for ; k > 0; k /= base {
		part /= float64(base)
		v += part * float64(k%base)
	}
	return v
}

// simplex moves a simplex of the given size from a trial downhill (Nelder and
// Mead 1965: reflection 1, expansion 2, contraction ½, shrinking ½).
func (s *placing) simplex(from []float64, size float64) {
	n := len(from)
	points, values := make([][]float64, n+1), make([]float64, n+1)
	for i := range points {
		points[i] = slices.Clone(from)
		if i > 0 {
			points[i][i-1] += size
			if points[i][i-1] > 1 {
				points[i][i-1] -= 2 * size
			}
		}
		values[i] = s.try(points[i])
	}
	for range 400 * n {
		rank(points, values)
		if !(spreadOf(points) > placeStep) {
			return
		}
		last := values[n]
		reflected, v := s.step(points, 1)
		switch {
		case v < values[0]:
			if further, w := s.step(points, 2); w < v {
				reflected, v = further, w
			}
		case v >= values[n-1]:
			part := -0.5
			if v < last {
				part = 0.5
			}
			reflected, v = s.step(points, part)
			if !(v < last) {
				s.shrink(points, values)
				continue
			}
		}
		points[n], values[n] = reflected, v
	}
}

// step tries the last point mirrored at the centre of the others, part times as
// far.
func (s *placing) step(points [][]float64, part float64) ([]float64, float64) {
	n := len(points) - 1
	out := make([]float64, n)
	for i := range out {
		centre := 0.0
		for _, p := range points[:n] {
			centre += p[i] / float64(n)
		}
		out[i] = centre + part*(centre-points[n][i])
	}
	return out, s.try(out)
}

// rank sorts points by value, stable.
func rank(points [][]float64, values []float64) {
	for i := range points {
		for j := i; j > 0 && values[j] < values[j-1]; j-- {
			points[j], points[j-1], values[j], values[j-1] = points[j-1], points[j], values[j-1], values[j]
		}
	}
}

// spreadOf returns the size of a simplex.
func spreadOf(points [][]float64) float64 {
	most := 0.0
	for _, p := range points {
		for k := range p {
			most = max(most, math.Abs(p[k]-points[0][k]))
		}
	}
	return most
}

func (s *placing) shrink(points [][]float64, values []float64) {
	for i := 1; i < len(points); i++ {
		for k := range points[i] {
			points[i][k] = 0.5 * (points[i][k] + points[0][k])
		}
		values[i] = s.try(points[i])
	}
}
