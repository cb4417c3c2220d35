package beam

import (
	"fmt"
	"math"
	"slices"
)

// The handbook beams that the split method knows.
const (
	SimpleSpan    = "simple span"
	Cantilever    = "cantilever"
	Propped       = "propped cantilever"
	FixedBothEnds = "fixed both ends"
)

// Piece is one handbook beam of a split member, with places along the whole
// member. A cantilever's deflection is counted from its own root.
type Piece struct {
	Handbook string // SimpleSpan, Cantilever, Propped or FixedBothEnds
	SpanEnvelope
}

// SplitResult is what the split method says of a member.
type SplitResult struct {
	Pieces    []Piece    // left to right, as Envelope.Spans
	Reactions []Reaction // left to right; sums of what the pieces give
}

// Split cuts the member at its supports into handbook beams: simple spans
// between supports, cantilevers beyond them; a fixed support keeps its fixity.
// Each piece carries the loads on it and nothing else, and every free term acts
// everywhere at once, as a hand calculation has it (common practice, no source).
// Continuity, settlements, springs and imposed curvatures vanish. A force at a
// support goes into it; a couple there acts on the span to its right, else on
// the one to its left, else it goes into the root of the cantilever.
//
// The method is quick and often safe, not always: see Compare. Supports, towers
// and footings are never sized from it. Errors are or wrap a *Fault: those of
// Analyse, of Response.CheckTerms, and for a hinge away from the supports.
func Split(b Beam, cases []Case, terms []Term) (SplitResult, error) {
	return SplitTrains(b, cases, nil, terms)
}

// SplitTrains is Split for the terms of AnalyseTrains: each piece takes the
// extremes of a train that crosses it alone, and a support the largest of what
// its two pieces give together while the train crosses the member.
func SplitTrains(b Beam, cases []Case, trains []Train, terms []Term) (SplitResult, error) {
	if fault := checkSplit(b, cases, trains, terms); fault != nil {
		return SplitResult{}, fault
	}
	terms = withoutSettlement(b, terms, len(cases))
	supports := b.ordered()
	cuts := cut(b.Length, supports)
	out := SplitResult{Reactions: make([]Reaction, len(supports))}
	for i, s := range supports {
		out.Reactions[i].X = s.X
	}
	for i := range cuts {
		if err := out.add(b, cuts, i, supports, cases, trains, terms); err != nil {
			return SplitResult{}, fmt.Errorf("split method, %s from %v m: %w", cuts[i].handbook(), cuts[i].from, err)
		}
	}
	out.placed(cuts, cases, terms)
	for i, t := range trains {
		if err := out.cross(b, cuts, t, factorOf(terms, len(cases)+i)); err != nil {
			return SplitResult{}, err
		}
	}
	return out, nil
}

// settles tells whether a support does, which makes a case before the trains.
func settles(b Beam) bool {
	return slices.ContainsFunc(b.Supports, func(s Support) bool { return s.Settlement != 0 })
}

// withoutSettlement returns the terms without that of the settlements, all of
// them fixed and the trains counted on from the cases.
func withoutSettlement(b Beam, terms []Term, cases int) []Term {
	var out []Term
	for _, t := range terms {
		t.Free = false
		if settles(b) && t.Case == cases {
			continue
		}
		if settles(b) && t.Case > cases {
			t.Case--
		}
		out = append(out, t)
	}
	return out
}

// factorOf returns the sum of the factors of a case.
func factorOf(terms []Term, c int) float64 {
	sum := 0.0
	for _, t := range terms {
		if t.Case == c {
			sum += t.Factor
		}
	}
	return sum
}

func checkSplit(b Beam, cases []Case, trains []Train, terms []Term) *Fault {
	if fault := check(b, cases); fault != nil {
		return fault
	}
	for i, t := range trains {
		if fault := t.check(ordinal("train", i)); fault != nil {
			return fault
		}
	}
	count := len(cases) + len(trains)
	if settles(b) {
		count++
	}
	if fault := checkTerms(terms, count); fault != nil {
		return fault
	}
	for i, s := range b.Supports {
		if s.Kind == Guided {
			return &Fault{FaultSupport, ordinal("support", i), s.X, "a guided support in the split method", "pinned, fixed or spring supports, or the exact method"}
		}
	}
	if len(b.Supports) == 1 && !b.Supports[0].holdsRotation() {
		return &Fault{FaultMechanism, "support 1", b.Supports[0].X, "a single " + b.Supports[0].Kind.String() + " support", "one fixed support, or two"}
	}
	for i, h := range b.Hinges {
		at := func(s Support) bool { return math.Abs(s.X-h) <= near*b.Length }
		if !slices.ContainsFunc(b.Supports, at) {
			return &Fault{FaultSplitHinge, fmt.Sprintf("hinge %d", i+1), h, "a hinge between supports", "hinges at supports, or the exact method"}
		}
	}
	return nil
}

// stretch is a piece before it is analysed; left and right are its supports'
// indices, -1 for a free end.
type stretch struct {
	from, to              float64
	left, right           int
	leftFixed, rightFixed bool
}

func (s stretch) handbook() string {
	switch {
	case s.left < 0 || s.right < 0:
		return Cantilever
	case s.leftFixed && s.rightFixed:
		return FixedBothEnds
	case s.leftFixed || s.rightFixed:
		return Propped
	}
	return SimpleSpan
}

// cut returns the pieces of a member from left to right.
func cut(length float64, supports []Support) []stretch {
	var cuts []stretch
	if x := supports[0].X; x > near*length {
		cuts = append(cuts, stretch{0, x, -1, 0, false, true})
	}
	for i := range len(supports) - 1 {
		s, t := supports[i], supports[i+1]
		cuts = append(cuts, stretch{s.X, t.X, i, i + 1, s.Kind == Fixed, t.Kind == Fixed})
	}
	last := len(supports) - 1
	if x := supports[last].X; x < length*(1-near) {
		cuts = append(cuts, stretch{x, length, last, -1, true, false})
	}
	return cuts
}

// beam returns the piece as a member of its own.
func (s stretch) beam(b Beam) Beam {
	out := Beam{Length: s.to - s.from}
	for _, g := range b.Segments {
		if to := min(g.To, s.to); to > s.from+near*b.Length {
			out.Segments = append(out.Segments, Segment{To: to - s.from, EI: g.EI})
			if to >= s.to-near*b.Length {
				out.Segments[len(out.Segments)-1].To = out.Length
				break
			}
		}
	}
	kind := map[bool]SupportKind{false: Pinned, true: Fixed}
	if s.left >= 0 {
		out.Supports = append(out.Supports, Support{X: 0, Kind: kind[s.leftFixed]})
	}
	if s.right >= 0 {
		out.Supports = append(out.Supports, Support{X: out.Length, Kind: kind[s.rightFixed]})
	}
	return out
}

// loads returns the loads of c on piece i, in its own coordinates.
func loads(cuts []stretch, i int, c Case, length float64) Case {
	var out Case
	s := cuts[i]
	tol := near * length
	for _, l := range c {
		switch {
		case l.Kind == Curvature:
		case l.Kind.distributed():
			if part, ok := s.clip(l, tol); ok {
				out = append(out, part)
			}
		case ownerOf(cuts, l, tol) == i:
			l.From = min(max(l.From-s.from, 0), s.to-s.from)
			out = append(out, l)
		}
	}
	return out
}

// clip returns the part of a distributed load that lies on the piece.
func (s stretch) clip(l Load, tol float64) (Load, bool) {
	from, to := max(l.From, s.from), min(l.To, s.to)
	if !(to-from > 2*tol) {
		return Load{}, false
	}
	start, end := l.ends()
	rise := (end - start) / (l.To - l.From)
	out := Load{Kind: l.Kind, From: from - s.from, To: to - s.from, Start: start + rise*(from-l.From)}
	if l.Kind == Linear {
		out.End = start + rise*(to-l.From)
	}
	return out, true
}

// ownerOf returns the piece that carries a point load or a couple, -1 for a
// force straight over a support.
func ownerOf(cuts []stretch, l Load, tol float64) int {
	owner := -1
	for i, s := range cuts {
		atLeft, atRight := math.Abs(l.From-s.from) <= tol, math.Abs(l.From-s.to) <= tol
		held := atLeft && s.left >= 0 || atRight && s.right >= 0
		switch {
		case l.From < s.from-tol || l.From > s.to+tol:
		case !held:
			return i
		case l.Kind == Moment && (owner < 0 || s.handbook() != Cantilever):
			owner = i
		}
	}
	return owner
}

// add analyses piece i and adds its reactions.
func (r *SplitResult) add(b Beam, cuts []stretch, i int, supports []Support, cases []Case, trains []Train, terms []Term) error {
	s := cuts[i]
	own := make([]Case, len(cases))
	for c := range cases {
		own[c] = loads(cuts, i, cases[c], b.Length)
	}
	resp, err := AnalyseTrains(s.beam(b), own, trains)
	if err != nil {
		return err
	}
	e := resp.Envelope(terms)
	p := Piece{Handbook: s.handbook(), SpanEnvelope: e.Spans[0]}
	p.From, p.To = s.from, s.to
	for _, x := range []*Extreme{&p.MomentMax, &p.MomentMin, &p.ShearMax, &p.ShearMin, &p.DeflectionMax, &p.DeflectionMin} {
		x.X += s.from
	}
	r.Pieces = append(r.Pieces, p)
	if len(trains) > 0 { // those cross the supports later, see cross
		e = resp.Envelope(slices.DeleteFunc(slices.Clone(terms), func(t Term) bool { return t.Case >= len(cases) }))
	}
	for _, end := range e.Reactions {
		at := s.right
		if s.left >= 0 && end.X == 0 {
			at = s.left
		}
		r.Reactions[at].F += end.FMax
		if supports[at].Kind == Fixed || len(supports) == 1 {
			r.Reactions[at].M += end.MMax
		}
	}
	return nil
}

// placed adds the forces that stand straight over supports to the reactions.
func (r *SplitResult) placed(cuts []stretch, cases []Case, terms []Term) {
	tol := near * cuts[len(cuts)-1].to
	for _, t := range terms {
		if t.Case >= len(cases) {
			continue
		}
		for _, l := range cases[t.Case] {
			if l.Kind != Point || ownerOf(cuts, l, tol) >= 0 {
				continue
			}
			for i := range r.Reactions {
				if math.Abs(r.Reactions[i].X-l.From) <= tol {
					r.Reactions[i].F += t.Factor * l.Start
				}
			}
		}
	}
}
