package beam

import (
	"fmt"
	"math"
	"slices"
)

// track is one quantity of one case over one piece: its polynomial, the sign
// that it starts with (0: nothing there) and where it changes its sign.
type track struct {
	c     poly
	roots [5]float64
	n     int8
	first int8
}

const (
	momentTrack = iota
	shearTrack
	deflectionTrack
	trackKinds
)

// noise is the part of a quantity's largest value in the member below which it
// is taken for rounding; it also decides ties.
const noise = 1e-12

// span is a stretch between supports or an overhang, as pieces first … last-1.
type span struct {
	from, to    float64
	first, last int
	overhang    bool
}

// Response holds the shears, moments, slopes and deflections of every case, as
// polynomials on common pieces, and the reactions. It is never changed after
// Analyse: any number of goroutines may read it.
type Response struct {
	x          []float64 // stations, m
	curved     []bool    // per piece: some case has a load that varies there
	cases      int       // the settlement case included
	settlement int
	tracks     [trackKinds][]track // piece by piece, in each case by case
	size       [trackKinds][]float64
	spans      []span
	supports   []float64  // m, left to right
	reactions  []Reaction // case by case
}

// Reaction is what a support does to the member.
type Reaction struct {
	X float64 // m
	F float64 // N, up +
	M float64 // N.m, clockwise +; 0 where the support cannot give a couple
}

// Side says from which side a place is looked at, where quantities jump.
type Side uint8

// The sides of a place. At the ends of the member the inner side is taken.
const (
	Left Side = iota
	Right
)

func newResponse(m *mesh, cases int) *Response {
	r := &Response{cases: cases, settlement: -1, curved: make([]bool, len(m.ei))}
	if slices.ContainsFunc(m.supports, func(s Support) bool { return s.Settlement != 0 }) {
		r.settlement = cases
		r.cases++
	}
	for _, x := range m.x {
		r.x = append(r.x, x*m.length)
	}
	for k := range r.tracks {
		r.tracks[k] = make([]track, len(m.ei)*r.cases)
		r.size[k] = make([]float64, r.cases)
	}
	for _, s := range m.supports {
		r.supports = append(r.supports, s.X)
	}
	r.reactions = make([]Reaction, r.cases*len(r.supports))
	from, overhang := 0, true
	for _, n := range m.nodes {
		last := n.station == len(m.ei)
		if n.station > from && (n.support >= 0 || last) {
			r.spans = append(r.spans, span{r.x[from], r.x[n.station], from, n.station, overhang || n.support < 0})
			from = n.station
		}
		overhang = overhang && n.support < 0
	}
	return r
}

// degrees returns the degrees of moment, shear and deflection in piece p.
func (r *Response) degrees(p int) [trackKinds]int {
	if r.curved[p] {
		return [trackKinds]int{3, 2, 5}
	}
	return [trackKinds]int{2, 1, 4}
}

// finish finds sizes, signs and roots. It refuses results too large to go on with.
// leastEI is the smallest bending stiffness (N.m²).
func (r *Response) finish(leastEI float64) *Fault {
	for k := range r.tracks {
		for i := range r.tracks[k] {
			size := r.tracks[k][i].c.size()
			if !(size <= largestResult) {
				return &Fault{FaultOverflow, fmt.Sprintf("case %d", i%r.cases+1), r.x[i/r.cases],
					"a result beyond " + num(largestResult), "loads, lengths and stiffnesses of usual sizes"}
			}
			r.size[k][i%r.cases] = math.Max(r.size[k][i%r.cases], size)
		}
	}
	// What is rounding follows from all of a case: of EI v/L² no moment may be
	// left (a settled simple span), of M/L no shear (a couple on a cantilever).
	length := r.x[len(r.x)-1]
	for c := range r.cases {
		V, M := &r.size[shearTrack][c], &r.size[momentTrack][c]
		*M = math.Max(*M, leastEI*r.size[deflectionTrack][c]/(length*length))
		*V = math.Max(*V, *M/length)
	}
	for k := range r.tracks {
		for i := range r.tracks[k] {
			r.tracks[k][i].settle(r.degrees(i / r.cases)[k], math.Max(smallestResult, noise*r.size[k][i%r.cases]))
		}
	}
	return nil
}

// settle fills sign and roots; of a track below least there are none.
func (t *track) settle(deg int, least float64) {
	if t.c.size() <= least {
		return
	}
	t.n = int8(t.c.roots(deg, 0, 1, &t.roots))
	// The sign is read in the widest interval (beside a double root rounding may
	// leave intervals without a sign) and counted back to the start; c may touch
	// zero in two places without changing its sign, so three are tried.
	from, width, flip := 0.0, 0.0, int8(1)
	last, turned := 0.0, int8(1)
	for k := int8(0); k <= t.n; k++ {
		end := 1.0
		if k < t.n {
			end = t.roots[k]
		}
		if end-last > width {
			from, width, flip = last, end-last, turned
		}
		last, turned = end, -turned
	}
	for _, f := range [3]float64{0.5, 0.3, 0.7} {
		if t.first = flip * sign(t.c.at(deg, from+f*width)); t.first != 0 {
			return
		}
	}
}

// Cases returns the number of cases, the settlement case included.
func (r *Response) Cases() int { return r.cases }

// SettlementCase returns the case of the supports' settlements, -1 if none
// settles. It follows the cases given to Analyse.
func (r *Response) SettlementCase() int { return r.settlement }

// Stations returns the places (m) where loads, stiffness or supports change,
// rising from 0 to the length; diagrams are smooth between them.
func (r *Response) Stations() []float64 { return slices.Clone(r.x) }

// Reactions returns the reactions of case c from left to right, nil if there
// is no such case.
func (r *Response) Reactions(c int) []Reaction {
	if c < 0 || c >= r.cases {
		return nil
	}
	return slices.Clone(r.reactions[c*len(r.supports) : (c+1)*len(r.supports)])
}

// At returns shear V (N), moment M (N.m), slope (rad) and deflection (m) of
// case c at x (m), on the given side. All are NaN off the member or for a case
// that does not exist.
func (r *Response) At(c int, x float64, side Side) (V, M, slope, deflection float64) {
	p, t, ok := r.locate(x, side)
	if !ok || c < 0 || c >= r.cases {
		return math.NaN(), math.NaN(), math.NaN(), math.NaN()
	}
	i, deg := p*r.cases+c, r.degrees(p)
	down := &r.tracks[deflectionTrack][i].c
	turn := down.derivative(deg[deflectionTrack])
	return r.tracks[shearTrack][i].c.at(deg[shearTrack], t),
		r.tracks[momentTrack][i].c.at(deg[momentTrack], t),
		turn.at(deg[deflectionTrack]-1, t) / (r.x[p+1] - r.x[p]),
		down.at(deg[deflectionTrack], t)
}

// locate returns the piece that holds x and the place in it, 0 to 1.
func (r *Response) locate(x float64, side Side) (int, float64, bool) {
	end := r.x[len(r.x)-1]
	if !(x >= -near*end && x <= end*(1+near)) {
		return 0, 0, false
	}
	p, found := slices.BinarySearch(r.x, x)
	if !found {
		p--
		switch {
		case p >= 0 && x-r.x[p] <= near*end:
			x, found = r.x[p], true
		case p+1 < len(r.x) && r.x[p+1]-x <= near*end:
			p++
			x, found = r.x[p], true
		}
	}
	if found && side == Left {
		p--
	}
	p = min(max(p, 0), len(r.x)-2)
	return p, min(max((x-r.x[p])/(r.x[p+1]-r.x[p]), 0), 1), true
}
