package beam

import (
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
// polynomials on common pieces, and the reactions; of trains their bounds. It is
// never changed after Analyse or AnalyseTrains: any number of goroutines may read
// it. That of an Analyser belongs to it.
type Response struct {
	x          []float64 // stations, m
	curved     []bool    // per piece: some case has a load that varies there
	cases      int       // settlement and trains included
	solved     int       // cases that are states: without the trains
	trains     int
	settlement int
	tracks     [trackKinds][]track // piece by piece, in each case by case; of trains the upper bounds
	lower      [trackKinds][]poly  // piece by piece, in each train by train: the lower bounds
	moved      [][2]Bounds         // train by train: force and couple of each support
	settled    bool                // signs and roots of the tracks are found
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

// prepare makes room for the results of the mesh.
func (r *Response) prepare(m *mesh, cases, trains int) {
	r.solved, r.trains, r.settlement, r.settled = cases, trains, -1, false
	r.supports, r.x, r.spans = r.supports[:0], r.x[:0], r.spans[:0]
	for i := range m.supports {
		r.supports = append(r.supports, m.supports[i].X)
		if m.supports[i].Settlement != 0 {
			r.settlement, r.solved = cases, cases+1
		}
	}
	r.cases = r.solved + trains
	r.curved = sized(r.curved, len(m.ei))
	for _, x := range m.x {
		r.x = append(r.x, x*m.length)
	}
	for k := range r.tracks {
		r.tracks[k] = sized(r.tracks[k], len(m.ei)*r.cases)
		r.lower[k] = sized(r.lower[k], len(m.ei)*trains)
		r.size[k] = sized(r.size[k], r.cases)
	}
	r.moved = sized(r.moved, trains*len(r.supports))
	r.reactions = sized(r.reactions, r.solved*len(r.supports))
	from, overhang := 0, true
	for i := range m.nodes {
		n := &m.nodes[i]
		last := n.station == len(m.ei)
		if n.station > from && (n.support >= 0 || last) {
			r.spans = append(r.spans, span{r.x[from], r.x[n.station], from, n.station, overhang || n.support < 0})
			from = n.station
		}
		overhang = overhang && n.support < 0
	}
}

// degrees returns the degrees of moment, shear and deflection in piece p.
func (r *Response) degrees(p int) [trackKinds]int {
	if r.trains > 0 {
		return [trackKinds]int{4, 4, 5}
	}
	if r.curved[p] {
		return [trackKinds]int{3, 2, 5}
	}
	return [trackKinds]int{2, 1, 4}
}

// finish finds the sizes. It refuses results too large to go on with.
// leastEI is the smallest bending stiffness (N.m²).
func (r *Response) finish(leastEI float64) *Fault {
	for k := range r.tracks {
		for i := range r.tracks[k] {
			size, c := r.tracks[k][i].c.size(), i%r.cases
			if !(size <= largestResult) {
				return &Fault{FaultOverflow, ordinal("case", c), r.x[i/r.cases],
					"a result beyond " + num(largestResult), "loads, lengths and stiffnesses of usual sizes"}
			}
			r.size[k][c] = max(r.size[k][c], size)
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
	return nil
}

// settle finds the signs and roots that free terms need.
func (r *Response) settle() {
	if r.settled {
		return
	}
	r.settled = true
	for k := range r.tracks {
		for i := range r.tracks[k] {
			if c := i % r.cases; c < r.solved {
				r.tracks[k][i].settle(r.degrees(i / r.cases)[k], math.Max(smallestResult, noise*r.size[k][c]))
			}
		}
	}
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

// Cases returns the number of cases, settlements and trains included.
func (r *Response) Cases() int { return r.cases }

// SettlementCase returns the case of the supports' settlements, -1 if none
// settles. It follows the cases given to Analyse.
func (r *Response) SettlementCase() int { return r.settlement }

// Stations returns the places (m) where loads, stiffness or supports change,
// rising from 0 to the length; diagrams are smooth between them.
func (r *Response) Stations() []float64 { return slices.Clone(r.x) }

// Reactions returns the reactions of case c from left to right, nil if there
// is no such case or it is a train's.
func (r *Response) Reactions(c int) []Reaction {
	if c < 0 || c >= r.solved {
		return nil
	}
	return slices.Clone(r.reactions[c*len(r.supports) : (c+1)*len(r.supports)])
}

// At returns shear V (N), moment M (N.m), slope (rad) and deflection (m) of
// case c at x (m), on the given side. All are NaN off the member or for a case
// that does not exist or is a train's.
func (r *Response) At(c int, x float64, side Side) (V, M, slope, deflection float64) {
	p, t, ok := r.locate(x, side)
	if !ok || c < 0 || c >= r.solved {
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
func (r *Response) locate(x float64, side Side) (int, float64, bool) { return locate(r.x, x, side) }

// locate returns the interval of rising stations that holds x and the place in it.
func locate(xs []float64, x float64, side Side) (int, float64, bool) {
	end := xs[len(xs)-1]
	if !(x >= -near*end && x <= end*(1+near)) {
		return 0, 0, false
	}
	p, found := slices.BinarySearch(xs, x)
	if !found {
		p--
		switch {
		case p >= 0 && x-xs[p] <= near*end:
			x, found = xs[p], true
		case p+1 < len(xs) && xs[p+1]-x <= near*end:
			p++
			x, found = xs[p], true
		}
	}
	if found && side == Left {
		p--
	}
	p = min(max(p, 0), len(xs)-2)
	return p, min(max((x-xs[p])/(xs[p+1]-xs[p]), 0), 1), true
}
