package beam

import (
	"math"
	"slices"
)

// Term is what one case adds to a combination. A fixed term is always there. A
// free term acts at each place only where it makes the effect looked at worse:
// that is pattern placing, with one case for each span that is loaded by itself.
type Term struct {
	Case   int
	Factor float64
	Free   bool
}

// Extreme is a largest or smallest value and where it stands. Of equal values
// the one with the smallest X is taken; values below 1e-12 of the largest in
// the member are 0.
type Extreme struct {
	Value float64 // N.m, N or m
	X     float64 // m from the left end
}

// Bounds are the largest and the smallest value at one place.
type Bounds struct{ Max, Min float64 }

// Envelope holds the extremes of a combination over the member, by span and by
// support.
type Envelope struct {
	MomentMax, MomentMin         Extreme // N.m, sagging +
	ShearMax, ShearMin           Extreme // N
	DeflectionMax, DeflectionMin Extreme // m, down +
	Reactions                    []ReactionEnvelope
	Spans                        []SpanEnvelope

	events []event // scratch, kept so that EnvelopeInto need not allocate
}

// ReactionEnvelope bounds the reaction of one support.
type ReactionEnvelope struct {
	X          float64 // m
	FMax, FMin float64 // N, up +
	MMax, MMin float64 // N.m, clockwise +
}

// SpanEnvelope holds the extremes in one span, both ends included. Deflections
// are absolute, in overhangs too.
type SpanEnvelope struct {
	From, To                     float64 // m
	Overhang                     bool    // held at one end only
	MomentMax, MomentMin         Extreme // N.m, sagging +
	ShearMax, ShearMin           Extreme // N
	DeflectionMax, DeflectionMin Extreme // m, down +
	MomentAtFrom, MomentAtTo     Bounds  // N.m, inside the span's two ends
}

// effects says which quantities an envelope is asked for.
type effects uint8

const (
	forces effects = 1 << iota
	deflections
)

// Envelope returns the exact envelope of the terms: at each x the fixed terms
// plus every free term whose effect there has the sign asked for (so that up to
// 2ⁿ patterns are covered), and its extremes. If a term names no case or its
// factor is not finite (1e30 at the most) every value is NaN, which fails every
// check; see CheckTerms.
func (r *Response) Envelope(terms []Term) Envelope {
	var e Envelope
	r.EnvelopeInto(&e, terms)
	return e
}

// EnvelopeInto is Envelope into dst. It does not allocate once dst has grown.
func (r *Response) EnvelopeInto(dst *Envelope, terms []Term) {
	r.envelope(dst, terms, forces|deflections)
}

// EnvelopeForces is EnvelopeInto for moments, shears and reactions alone;
// deflections are set to zero.
func (r *Response) EnvelopeForces(dst *Envelope, terms []Term) { r.envelope(dst, terms, forces) }

// EnvelopeDeflections is EnvelopeInto for deflections alone; the rest is set to
// zero.
func (r *Response) EnvelopeDeflections(dst *Envelope, terms []Term) {
	r.envelope(dst, terms, deflections)
}

// CheckTerms returns a *Fault for the first term that names no case or has a
// factor that is not finite or above 1e30.
func (r *Response) CheckTerms(terms []Term) error {
	if fault := checkTerms(terms, r.cases); fault != nil {
		return fault
	}
	return nil
}

// EnvelopeAt returns the bounds of shear (N), moment (N.m) and deflection (m)
// at x (m), on the given side; NaN as At and Envelope give it.
func (r *Response) EnvelopeAt(terms []Term, x float64, side Side) (shear, moment, deflection Bounds) {
	bad := checkTerms(terms, r.cases) != nil
	p, t, ok := r.locate(x, side)
	if bad || !ok {
		n := Bounds{math.NaN(), math.NaN()}
		return n, n, n
	}
	deg := r.degrees(p)
	var out [trackKinds]Bounds
	for k := range out {
		tracks := r.tracks[k][p*r.cases : (p+1)*r.cases]
		for _, term := range terms {
			v := tracks[term.Case].c.at(deg[k], t)
			if train := term.Case - r.solved; train >= 0 {
				out[k].move(term.Factor, Bounds{v, r.lower[k][p*r.trains+train].at(deg[k], t)})
				continue
			}
			out[k].add(term, v)
		}
	}
	return out[shearTrack], out[momentTrack], out[deflectionTrack]
}

// add adds a term whose case has the value v.
func (b *Bounds) add(t Term, v float64) {
	v *= t.Factor
	if !t.Free || v > 0 {
		b.Max += v
	}
	if !t.Free || v < 0 {
		b.Min += v
	}
}

// move adds the bounds of a train times a factor.
func (b *Bounds) move(factor float64, v Bounds) {
	if factor < 0 {
		v.Max, v.Min = v.Min, v.Max
	}
	b.Max += factor * v.Max
	b.Min += factor * v.Min
}

func (r *Response) envelope(dst *Envelope, terms []Term, what effects) {
	r.reset(dst)
	if checkTerms(terms, r.cases) != nil {
		dst.refuse()
		return
	}
	if !r.settled && slices.ContainsFunc(terms, func(t Term) bool { return t.Free }) {
		r.settle()
	}
	s := sweep{r: r, terms: terms, events: dst.events[:0]}
	for k := range s.least {
		s.least[k] = smallestResult
		for _, t := range terms {
			s.least[k] += noise * math.Abs(t.Factor) * r.size[k][t.Case]
		}
	}
	if what&forces != 0 {
		s.reactions(dst)
	}
	for i := range r.spans {
		s.span(&dst.Spans[i], r.spans[i], what)
	}
	dst.events = s.events
	dst.collect(s.least)
}

// reset gives dst the spans and supports of the response and clears the rest.
func (r *Response) reset(dst *Envelope) {
	spans, reactions, events := dst.Spans[:0], dst.Reactions[:0], dst.events
	for _, s := range r.spans {
		spans = append(spans, SpanEnvelope{From: s.from, To: s.to, Overhang: s.overhang})
	}
	for _, x := range r.supports {
		reactions = append(reactions, ReactionEnvelope{X: x})
	}
	*dst = Envelope{Spans: spans, Reactions: reactions, events: events}
}

// refuse makes every value NaN.
func (e *Envelope) refuse() {
	n := Extreme{math.NaN(), math.NaN()}
	e.MomentMax, e.MomentMin, e.ShearMax, e.ShearMin, e.DeflectionMax, e.DeflectionMin = n, n, n, n, n, n
	for i := range e.Reactions {
		e.Reactions[i] = ReactionEnvelope{e.Reactions[i].X, n.X, n.X, n.X, n.X}
	}
	for i := range e.Spans {
		s := &e.Spans[i]
		b := Bounds{n.X, n.X}
		*s = SpanEnvelope{s.From, s.To, s.Overhang, n, n, n, n, n, n, b, b}
	}
}

// collect takes the member's extremes from its spans, left to right.
func (e *Envelope) collect(least [trackKinds]float64) {
	for i := range e.Spans {
		s := &e.Spans[i]
		if i == 0 {
			e.MomentMax, e.MomentMin, e.ShearMax, e.ShearMin = s.MomentMax, s.MomentMin, s.ShearMax, s.ShearMin
			e.DeflectionMax, e.DeflectionMin = s.DeflectionMax, s.DeflectionMin
			continue
		}
		e.MomentMax.raise(s.MomentMax.Value, s.MomentMax.X, least[momentTrack])
		e.MomentMin.lower(s.MomentMin.Value, s.MomentMin.X, least[momentTrack])
		e.ShearMax.raise(s.ShearMax.Value, s.ShearMax.X, least[shearTrack])
		e.ShearMin.lower(s.ShearMin.Value, s.ShearMin.X, least[shearTrack])
		e.DeflectionMax.raise(s.DeflectionMax.Value, s.DeflectionMax.X, least[deflectionTrack])
		e.DeflectionMin.lower(s.DeflectionMin.Value, s.DeflectionMin.X, least[deflectionTrack])
	}
}

// raise takes v at x when it is larger by more than least.
func (e *Extreme) raise(v, x, least float64) {
	if v > e.Value+least {
		e.Value, e.X = v, x
	}
}

// lower takes v at x when it is smaller by more than least.
func (e *Extreme) lower(v, x, least float64) {
	if v < e.Value-least {
		e.Value, e.X = v, x
	}
}
