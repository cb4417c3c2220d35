package beam

import (
	"fmt"
	"math"
)

// sweep walks the pieces of the member with one combination.
type sweep struct {
	r      *Response
	terms  []Term
	least  [trackKinds]float64 // noise of each quantity
	events []event
}

// event is a place t where a free term changes the sign of its effect, and so
// moves between the upper and the lower polynomial.
type event struct {
	t      float64
	term   int32
	rising bool
}

// Limits that keep every product and square within float64; smaller results
// are zero.
const (
	largestFactor  = 1e30
	largestResult  = 1e100
	smallestResult = 1e-100
)

// checkTerms refuses terms outside the cases or without a usable factor.
func checkTerms(terms []Term, cases int) *Fault {
	for i, t := range terms {
		if !(t.Case >= 0 && t.Case < cases) {
			return &Fault{FaultTerm, fmt.Sprintf("term %d", i+1), 0, fmt.Sprintf("case %d", t.Case), fmt.Sprintf("0 to %d", cases-1)}
		}
		if !(math.Abs(t.Factor) <= largestFactor) {
			return &Fault{FaultTerm, fmt.Sprintf("term %d", i+1), 0, "factor " + num(t.Factor), "a factor of " + num(largestFactor) + " at the most"}
		}
	}
	return nil
}

// reactions finds the bounds of the reactions.
func (s *sweep) reactions(dst *Envelope) {
	for i := range dst.Reactions {
		var F, M Bounds
		for _, t := range s.terms {
			if train := t.Case - s.r.solved; train >= 0 {
				b := &s.r.moved[train*len(s.r.supports)+i]
				F.move(t.Factor, b[0])
				M.move(t.Factor, b[1])
				continue
			}
			v := &s.r.reactions[t.Case*len(s.r.supports)+i]
			F.add(t, v.F)
			M.add(t, v.M)
		}
		s.tidy(shearTrack, &F.Max, &F.Min)
		s.tidy(momentTrack, &M.Max, &M.Min)
		d := &dst.Reactions[i]
		d.FMax, d.FMin, d.MMax, d.MMin = F.Max, F.Min, M.Max, M.Min
	}
}

// span finds the extremes of one span.
func (s *sweep) span(e *SpanEnvelope, sp span, what effects) {
	for p := sp.first; p < sp.last; p++ {
		if what&forces != 0 {
			start, end := s.piece(p, momentTrack, &e.MomentMax, &e.MomentMin, p == sp.first)
			if p == sp.first {
				e.MomentAtFrom = start
			}
			e.MomentAtTo = end
			s.piece(p, shearTrack, &e.ShearMax, &e.ShearMin, p == sp.first)
		}
		if what&deflections != 0 {
			s.piece(p, deflectionTrack, &e.DeflectionMax, &e.DeflectionMin, p == sp.first)
		}
	}
	if what&forces != 0 {
		s.tidy(momentTrack, &e.MomentMax.Value, &e.MomentMin.Value, &e.MomentAtFrom.Max, &e.MomentAtFrom.Min, &e.MomentAtTo.Max, &e.MomentAtTo.Min)
		s.tidy(shearTrack, &e.ShearMax.Value, &e.ShearMin.Value)
	}
	if what&deflections != 0 {
		s.tidy(deflectionTrack, &e.DeflectionMax.Value, &e.DeflectionMin.Value)
	}
}

// tidy sets rounding to zero.
func (s *sweep) tidy(kind int, values ...*float64) {
	for _, v := range values {
		if math.Abs(*v) <= s.least[kind] {
			*v = 0
		}
	}
}

// piece takes the extremes of one quantity over piece p into hi and lo (set
// afresh when first) and returns the bounds at its two ends.
//
// The upper bound is the fixed terms plus the free terms that are above zero;
// between two events it is one polynomial. At an event it turns upwards, so a
// maximum is never there: the piece's ends and the stationary places between
// events are enough. Likewise for the lower bound.
func (s *sweep) piece(p, kind int, hi, lo *Extreme, first bool) (start, end Bounds) {
	r := s.r
	deg := r.degrees(p)[kind]
	tracks := r.tracks[kind][p*r.cases : (p+1)*r.cases]
	w := window{x: r.x[p], length: r.x[p+1] - r.x[p], least: s.least[kind], hi: hi, lo: lo}
	if deg == 1 {
		start, end = s.straight(tracks)
		w.open(start, first)
	} else {
		var up, down poly
		single := s.begin(p, kind, deg, &up, &down)
		start = Bounds{up[0], down[0]}
		w.open(start, first)
		from := 0.0
		for i := range s.events {
			ev := &s.events[i]
			w.between(&up, &down, deg, from, ev.t, single)
			s.turn(ev, tracks, deg, &up, &down)
			from = ev.t
		}
		w.between(&up, &down, deg, from, 1, single)
		end = Bounds{up.at(deg, 1), down.at(deg, 1)}
	}
	hi.raise(end.Max, r.x[p+1], w.least)
	lo.lower(end.Min, r.x[p+1], w.least)
	return start, end
}

// straight returns the bounds at both ends of a piece where every case is a
// straight line, and with it every extreme: bounds of straight lines are convex.
func (s *sweep) straight(tracks []track) (start, end Bounds) {
	for i := range s.terms {
		c := &tracks[s.terms[i].Case].c
		start.add(s.terms[i], c[0])
		end.add(s.terms[i], c[0]+c[1])
	}
	return start, end
}

// begin sets up the two polynomials at the start of a piece and lists the
// events in it, in order. single tells that no free term and no train acts in
// the piece: the polynomials are one.
func (s *sweep) begin(p, kind, deg int, up, down *poly) (single bool) {
	r := s.r
	tracks := r.tracks[kind][p*r.cases : (p+1)*r.cases]
	s.events = s.events[:0]
	single = true
	for i := range s.terms {
		if t := &s.terms[i]; !t.Free && t.Case < r.solved {
			up.add(deg, t.Factor, &tracks[t.Case].c)
		}
	}
	*down = *up
	for i := range s.terms {
		t := &s.terms[i]
		switch {
		case t.Case >= r.solved:
			single = false
			hi, lo := &tracks[t.Case].c, &r.lower[kind][p*r.trains+t.Case-r.solved]
			if t.Factor < 0 {
				hi, lo = lo, hi
			}
			up.add(deg, t.Factor, hi)
			down.add(deg, t.Factor, lo)
		case t.Free && t.Factor != 0 && tracks[t.Case].first != 0:
			single = false
			s.free(i, &tracks[t.Case], deg, up, down)
		}
	}
	return single
}

// free adds free term i to the polynomial that it starts in and lists where it
// changes over.
func (s *sweep) free(i int, tr *track, deg int, up, down *poly) {
	f := s.terms[i].Factor
	above := (tr.first > 0) == (f > 0)
	if above {
		up.add(deg, f, &tr.c)
	} else {
		down.add(deg, f, &tr.c)
	}
	for k := range tr.n {
		above = !above
		s.insert(event{tr.roots[k], int32(i), above})
	}
}

// insert keeps the few events in order.
func (s *sweep) insert(e event) {
	s.events = append(s.events, e)
	for i := len(s.events) - 1; i > 0 && s.events[i-1].t > e.t; i-- {
		s.events[i], s.events[i-1] = s.events[i-1], e
	}
}

// turn moves the event's term from one polynomial to the other.
func (s *sweep) turn(ev *event, tracks []track, deg int, up, down *poly) {
	t := &s.terms[ev.term]
	f := t.Factor
	if !ev.rising {
		f = -f
	}
	up.add(deg, f, &tracks[t.Case].c)
	down.add(deg, -f, &tracks[t.Case].c)
}

// window is the piece in sight and the extremes found so far.
type window struct {
	x, length, least float64
	hi, lo           *Extreme
}

// open takes the start of the piece.
func (w *window) open(start Bounds, first bool) {
	if first {
		*w.hi, *w.lo = Extreme{start.Max, w.x}, Extreme{start.Min, w.x}
		return
	}
	w.hi.raise(start.Max, w.x, w.least)
	w.lo.lower(start.Min, w.x, w.least)
}

// between takes the stationary places in (a, b).
func (w *window) between(up, down *poly, deg int, a, b float64, single bool) {
	var at [5]float64
	for i := range up.turns(deg, a, b, &at) {
		v, x := up.at(deg, at[i]), w.x+at[i]*w.length
		w.hi.raise(v, x, w.least)
		if single {
			w.lo.lower(v, x, w.least)
		}
	}
	if single {
		return
	}
	for i := range down.turns(deg, a, b, &at) {
		w.lo.lower(down.at(deg, at[i]), w.x+at[i]*w.length, w.least)
	}
}
