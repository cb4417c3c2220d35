package arrangement

import (
	"cmp"
	"context"
	"fmt"
	"math"

	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/sizing"
)

// Candidates returns every way of the study to hold the length: the feasible ones
// first, each group by mass of steel, then name. A way for which no section passes
// stays in the list, with the nearest miss, the reason and the ways out.
//
// An error means that the study is refused (see Study.Validate), that the engine
// cannot analyse it (it then wraps a *beam.Fault), that none of the sections can be
// had in the grade, or that ctx is done.
func Candidates(ctx context.Context, s Study) ([]Candidate, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	s = s.filled()
	var all []Candidate
	for _, k := range s.Kinds {
		for _, h := range s.holdings(k) {
			if err := ctx.Err(); err != nil {
				return nil, fmt.Errorf("arrangement: %s: %w", h.name, err)
			}
			c, err := s.candidate(ctx, h)
			if err != nil {
				return nil, fmt.Errorf("%s: %w", h.name, err)
			}
			all = append(all, c)
		}
	}
	return sortedBy(all, func(a, b Candidate) int {
		if a.Feasible != b.Feasible {
			return cmp.Compare(rank(a), rank(b))
		}
		return compare(a.Mass.Steel, b.Mass.Steel, a.Name, b.Name)
	}), nil
}

func rank(c Candidate) int {
	if c.Feasible {
		return 0
	}
	return 1
}

// candidate works out one holding.
func (s *Study) candidate(ctx context.Context, h holding) (Candidate, error) {
	c := Candidate{Name: h.name, Kind: h.kind}
	weight, err := s.span(ctx, &c, &h)
	if err != nil {
		return Candidate{}, err
	}
	if c.Supports, err = s.react(&h, weight); err != nil {
		return Candidate{}, err
	}
	if h.kind == Cantilever {
		c.Ballast = s.ballast(&h, c.Supports, weight)
		c.Mass.Ballast = c.Ballast.Mass
	}
	for _, u := range c.Supports {
		if err := s.stand(&c, u); err != nil {
			return Candidate{}, err
		}
	}
	c.Mass.Steel = c.Mass.Member + c.Mass.Legs + c.Mass.Bracing
	s.judge(&c)
	c.Notes = s.notes(&c)
	return c, nil
}

// span sizes what spans, and returns its own weight, N/m.
func (s *Study) span(ctx context.Context, c *Candidate, h *holding) (float64, error) {
	if h.kind == Lattice {
		t, err := s.lattice(ctx, h)
		if err != nil {
			return 0, err
		}
		c.Truss, c.Result, c.Deflection, c.Mass.Member = t, t.Chord, t.Deflection, t.Mass
		return t.OwnWeight, nil
	}
	r, err := s.size(h)
	if err != nil {
		return 0, err
	}
	c.Result, c.Mass.Member = r, r.Section.Mass*h.length
	d := r.Envelope.DeflectionMax
	if low := r.Envelope.DeflectionMin; math.Abs(low.Value) > math.Abs(d.Value) {
		d = low
	}
	c.Deflection = Deflection{Value: d.Value, X: d.X - h.root}
	return r.Section.Mass * s.Setup.Gravity, nil
}

// stand adds the tower and the footing of a support.
func (s *Study) stand(c *Candidate, u Support) error {
	beside := 0.0
	if u.Role == HoldDown {
		beside = c.Ballast.Mass * s.Setup.Gravity
		u.Least = 0 // the counterweight is there for that
	}
	var tower *Tower
	if height := s.heightAt(u); height > 0 {
		t, err := s.tower(u, height)
		if err != nil {
			return err
		}
		tower = &t
		c.Towers = append(c.Towers, t)
		c.Mass.Legs += t.LegMass
		c.Mass.Bracing += t.BracingMass
	}
	f, err := s.footing(u, tower, beside)
	if err != nil {
		return err
	}
	c.Footings = append(c.Footings, f)
	return nil
}

// judge fills what governs and whether the candidate is feasible.
func (s *Study) judge(c *Candidate) {
	c.Feasible = true
	fail := func(part string, r sizing.Result) {
		c.Feasible = false
		c.Reason = cmp.Or(c.Reason, fmt.Sprintf("%s: no section passes; the nearest, %s, has %s at %.2f", part, r.Section.Designation, r.Governing, r.Utilisation))
		for _, w := range r.WaysOut {
			c.WaysOut = append(c.WaysOut, part+": "+w)
		}
	}
	if c.Truss != nil {
		c.Utilisation, c.Governing = c.Truss.utilisation()
		s.judgeTruss(c, fail)
	} else {
		c.Utilisation, c.Governing = c.Result.Utilisation, "member: "+c.Result.Governing
		if !c.Result.Passes {
			fail("member", c.Result)
		}
	}
	if u := c.Supports[0]; u.Kind == beam.Fixed && s.heightAt(u) > 0 {
		c.Feasible = false
		c.Reason = cmp.Or(c.Reason, fmt.Sprintf("root: a tower of %.2f m does not hold the couple of %.0f kN·m of a fixed root", s.heightAt(u), u.Couple/1e3))
		c.WaysOut = append(c.WaysOut, "root: a structure or footing at the member's level")
	}
	for _, t := range c.Towers {
		part := fmt.Sprintf("tower leg at %.2f m", t.X)
		if t.Leg.Utilisation > c.Utilisation {
			c.Utilisation, c.Governing = t.Leg.Utilisation, part+": "+t.Leg.Governing
		}
		if !t.Leg.Passes {
			fail(part, t.Leg)
		}
	}
	if !c.Feasible {
		c.WaysOut = append(c.WaysOut, "another arrangement, with shorter spans or more depth")
	}
}

func (s *Study) judgeTruss(c *Candidate, fail func(string, sizing.Result)) {
	t := c.Truss
	if !t.Chord.Passes {
		fail("chord", t.Chord)
	}
	if !t.Diagonal.Passes {
		fail("diagonal", t.Diagonal)
	}
	if d := t.Deflection; c.Feasible && !t.passes() {
		c.Feasible = false
		c.Reason = fmt.Sprintf("lattice: deflection %.0f mm of %.0f mm with the heaviest bars", math.Abs(d.Value)*1e3, d.Limit*1e3)
		if c.Governing == "lattice: "+resistance.Vibrating {
			c.Reason = fmt.Sprintf("lattice: first natural frequency %.2f Hz, floor %.2f Hz", t.Frequency, t.Floor)
		}
		c.WaysOut = append(c.WaysOut, fmt.Sprintf("lattice: more depth than %.2f m", t.Depth))
	}
}
