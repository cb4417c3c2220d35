package arrangement

import (
	"fmt"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

// holding is a beam on its supports, before it has a section.
type holding struct {
	name     string
	kind     Kind
	length   float64 // m, tail included
	root     float64 // m, place of the root from the beam's left end
	supports []beam.Support
	roles    []Role
	actions  []action.Action // by the beam's own x
	goal     beam.Goal       // of free supports; 0 where they stand
	layout   beam.Layout
	floating bool // the root is no support
}

// holdings returns what one kind stands for in the study, in a fixed order.
func (s *Study) holdings(k Kind) []holding {
	base := holding{name: string(k), kind: k, length: s.Member.Length, actions: s.Member.Actions}
	base.add(pinned(0), Root)
	switch k {
	case Cantilever:
		return []holding{s.cantilever()}
	case EndTower, Lattice:
		base.add(pinned(s.Member.Length), TowerTop)
	case Propped:
		base.supports[0].Kind = beam.Fixed
		base.add(pinned(s.Member.Length), TowerTop)
	case InnerLeastMoment:
		base.goal, base.layout = beam.LeastMoment, beam.Layout{Free: 1}
	case InnerLeastDeflection:
		base.goal, base.layout = beam.LeastDeflection, beam.Layout{Free: 1}
	case TwoInner:
		base.supports, base.roles, base.floating = nil, nil, true
		base.goal, base.layout = beam.LeastMoment, beam.Layout{Free: 2, Symmetric: true}
	case InnerSupport:
		return s.atFractions(base)
	case EqualSpans:
		return s.equalSpans(base)
	}
	return []holding{base}
}

func pinned(x float64) beam.Support { return beam.Support{X: x, Kind: beam.Pinned} }

func (h *holding) add(s beam.Support, r Role) {
	h.supports, h.roles = append(h.supports, s), append(h.roles, r)
}

// copied returns a holding whose supports can be added to.
func (h holding) copied() holding {
	h.supports = append([]beam.Support(nil), h.supports...)
	h.roles = append([]Role(nil), h.roles...)
	return h
}

func (s *Study) atFractions(base holding) []holding {
	var all []holding
	for _, f := range s.Fractions {
		h := base.copied()
		h.add(pinned(f*s.Member.Length), TowerTop)
		h.name = fmt.Sprintf("inner support at %.3f of the length", f)
		all = append(all, h)
	}
	return all
}

func (s *Study) equalSpans(base holding) []holding {
	var all []holding
	for _, n := range s.Spans {
		h := base.copied()
		for i := 1; i <= n; i++ {
			h.add(pinned(s.Member.Length*float64(i)/float64(n)), TowerTop)
		}
		h.name = fmt.Sprintf("%d equal spans", n)
		all = append(all, h)
	}
	return all
}

// cantilever puts a tail before the root, whose end the counterweight holds down. The
// actions stay on the held length; a train may run on the tail too.
func (s *Study) cantilever() holding {
	h := holding{name: string(Cantilever), kind: Cantilever, length: s.Tail + s.Member.Length, root: s.Tail}
	h.add(pinned(0), HoldDown)
	h.add(pinned(s.Tail), Root)
	for _, a := range s.Member.Actions {
		if a.Kind != action.MovingTrain {
			from, to := a.Extent(s.Member.Length)
			a.From, a.To = s.Tail+from, min(s.Tail+to, h.length)
		}
		h.actions = append(h.actions, a)
	}
	return h
}

// member is the main member as sizing takes it.
func (s *Study) member(h *holding) sizing.Member {
	m := s.Member
	m.Length, m.Supports, m.Actions = h.length, h.supports, h.actions
	return m
}

// rounds bounds how often free supports are placed again for the section that was
// chosen on them.
const rounds = 5

// size chooses the main member's section. Free supports are placed for the weight of
// the section that was chosen last, until it stays the same.
func (s *Study) size(h *holding) (sizing.Result, error) {
	if h.goal == 0 {
		return s.lightest(h)
	}
	var r sizing.Result
	weight := s.Sections[0].Mass * s.Setup.Gravity
	for range rounds {
		if err := h.place(weight); err != nil {
			return sizing.Result{}, err
		}
		last := r.Section.Designation
		var err error
		if r, err = s.lightest(h); err != nil || r.Section.Designation == last {
			return r, err
		}
		weight = r.Section.Mass * s.Setup.Gravity
	}
	return r, nil
}

func (s *Study) lightest(h *holding) (sizing.Result, error) {
	p, err := sizing.Prepare(s.member(h), s.Setup)
	if err != nil {
		return sizing.Result{}, err
	}
	return sizing.Lightest(p, s.Sections)
}

// place puts the free supports where they are best under the characteristic actions
// and an own weight, N/m. Trains are left out of the search; a free action acts on the
// whole of its extent, because the spans are not known yet.
func (h *holding) place(weight float64) error {
	fixed := 1
	if h.floating {
		fixed = 0
	}
	b := beam.Prismatic(h.length, 1, h.supports[:fixed]...)
	l := h.load(action.Vertical, nil)
	p, err := beam.PlaceSupports(b, l.cases, l.characteristic(weight), h.layout, h.goal)
	if err != nil {
		return fmt.Errorf("arrangement: placing supports: %w", err)
	}
	h.supports, h.roles = h.supports[:fixed:fixed], h.roles[:fixed:fixed]
	for _, x := range p.X {
		h.add(pinned(x), TowerTop)
	}
	return nil
}
