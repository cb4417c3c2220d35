package sizing

import (
	"fmt"
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Prepared is a member analysed once, ready to be tried with any section. It keeps
// scratch space: one goroutine at a time.
type Prepared struct {
	member Member
	setup  Setup
	beam   beam.Beam // EI = 1

	down, side plane
	analysed   bool // a simple span under uniform actions is analysed only for its explanation
	spans      []span

	strength, service []variant
	sags              []float64 // m·N·m², sideways, at EI = 1: the greatest of all service variants
	vibration         vibration

	demand      resistance.Demand
	deflections []resistance.Deflection // vertical ones, then sideways ones
	design      section.Section         // scratch: the section with the design wall
	designWall  bool                    // the basis is of AISC 360
	verdicts    []verdict
}

// plane is the bending of the member in its depth, or along its width.
type plane struct {
	actions  []int // indices of the member's actions
	loads    []loaded
	cases    []beam.Case
	trains   []beam.Train
	response *beam.Response
	envelope beam.Envelope // scratch
}

// loaded says what a beam case stands for.
type loaded struct {
	group  int     // index of the action, or one of the groups below
	factor float64 // dynamic factor
	train  bool
}

// Groups that are no action of their own.
const (
	permanents = -1 // every permanent action
	ownWeight  = -2 // 1 N/m along the whole member
	everything = -3 // all variable actions lead
)

// span is a stretch between supports or an overhang.
type span struct {
	name     string
	length   float64 // m
	overhang bool
}

// near is the part of the length within which two places are the same.
const near = 1e-9

// Prepare checks the member and the setup and analyses the member with EI = 1.
//
// Permanent actions make one case that is always there; every variable action makes
// a case of its own that may be absent, and a free distributed one a case for each
// span that it covers. So actions that pull against each other never cancel. A train
// counts at each place in its worst position. Horizontal actions bend the member
// about its weak axis between the same supports: lateral restraints are not counted
// on for that.
//
// The error of a member that cannot be analysed wraps a *beam.Fault.
func Prepare(m Member, s Setup) (*Prepared, error) {
	if err := s.Validate(); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	p := new(Prepared)
	p.setUp(s)
	if err := p.prepare(m); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	return p, nil
}

// setUp takes a setup that is known to be good.
func (p *Prepared) setUp(s Setup) {
	p.setup = s
	p.designWall = s.Basis.Name() == resistance.ASD || s.Basis.Name() == resistance.LRFD
}

// prepare is Prepare in the memory of p after setUp.
func (p *Prepared) prepare(m Member) error {
	if err := m.Validate(); err != nil {
		return err
	}
	supports := m.Supports
	if len(supports) == 0 {
		supports = []beam.Support{{X: 0, Kind: beam.Pinned}, {X: m.Length, Kind: beam.Pinned}}
	}
	p.member, p.analysed = m, false
	p.beam.Length, p.beam.Supports, p.beam.Segments = m.Length, supports, append(p.beam.Segments[:0], beam.Segment{To: m.Length, EI: 1})
	p.sort()
	p.expand()
	if !p.handbook() {
		if err := p.analyse(); err != nil {
			return err
		}
		p.follow()
	}
	p.prune()
	p.setDemand()
	return p.prepareVibration()
}

// sort parts the actions by plane; those without value are left out.
func (p *Prepared) sort() {
	p.down.reset()
	p.side.reset()
	for i, a := range p.member.Actions {
		switch {
		case a.Value == 0 && a.End == 0 && a.Kind != action.MovingTrain:
		case a.Direction == action.Horizontal:
			p.side.actions = append(p.side.actions, i)
		default:
			p.down.actions = append(p.down.actions, i)
		}
	}
}

func (pl *plane) reset() {
	pl.actions, pl.loads, pl.cases, pl.trains, pl.response = pl.actions[:0], pl.loads[:0], pl.cases[:0], pl.trains[:0], nil
}

// analyse makes the load cases and solves both planes, and names the spans.
func (p *Prepared) analyse() error {
	p.load(&p.down, true)
	if err := p.down.solve(p.beam); err != nil {
		return err
	}
	if len(p.side.actions) > 0 {
		p.load(&p.side, false)
		if err := p.side.solve(p.beam); err != nil {
			return err
		}
	}
	for _, list := range [][]variant{p.strength, p.service} {
		for i := range list {
			list[i].terms, list[i].aside = p.terms(&p.down, &list[i]), p.terms(&p.side, &list[i])
		}
	}
	p.analysed = true
	return nil
}

func (pl *plane) solve(b beam.Beam) error {
	response, err := beam.AnalyseTrains(b, pl.cases, pl.trains)
	if err != nil {
		return err
	}
	pl.response = response
	return nil
}

// load fills the cases and trains of a plane; self-weight, where it acts, is the
// last case.
func (p *Prepared) load(pl *plane, weighs bool) {
	pl.loads, pl.cases, pl.trains = pl.loads[:0], pl.cases[:0], pl.trains[:0]
	var permanent beam.Case
	var moving []loaded
	add := func(c beam.Case, l loaded) {
		pl.loads, pl.cases = append(pl.loads, l), append(pl.cases, c)
	}
	for _, i := range pl.actions {
		a := p.member.Actions[i]
		l := p.loadOf(a)
		switch {
		case a.Kind == action.MovingTrain:
			pl.trains = append(pl.trains, beam.Train{Loads: a.Train.Loads, Spacings: a.Train.Spacings})
			moving = append(moving, loaded{i, a.Factor(), true})
		case a.Nature == action.Permanent:
			l.Start *= a.Factor()
			l.End *= a.Factor()
			permanent = append(permanent, l)
		case a.Free && a.Kind != action.Point && a.Kind != action.Moment:
			for _, c := range p.bySpan(l) {
				add(c, loaded{i, a.Factor(), false})
			}
		default:
			add(beam.Case{l}, loaded{i, a.Factor(), false})
		}
	}
	if len(permanent) > 0 {
		add(permanent, loaded{permanents, 1, false})
	}
	if weighs {
		add(beam.Case{{Kind: beam.Uniform, From: 0, To: p.member.Length, Start: 1}}, loaded{ownWeight, 1, false})
	}
	pl.loads = append(pl.loads, moving...) // trains are the cases after all others
}

func (p *Prepared) loadOf(a action.Action) beam.Load {
	from, to := a.Extent(p.member.Length)
	switch a.Kind {
	case action.Point:
		return beam.Load{Kind: beam.Point, From: from, Start: a.Value}
	case action.Moment:
		return beam.Load{Kind: beam.Moment, From: from, Start: a.Value}
	case action.Linear:
		return beam.Load{Kind: beam.Linear, From: from, To: to, Start: a.Value, End: a.End}
	}
	return beam.Load{Kind: beam.Uniform, From: from, To: to, Start: a.Value}
}

// bySpan cuts a distributed load at the supports, one case a span.
func (p *Prepared) bySpan(whole beam.Load) []beam.Case {
	least := near * p.member.Length
	cuts := []float64{whole.From}
	for _, s := range p.beam.Supports {
		if s.X > whole.From+least && s.X < whole.To-least {
			cuts = append(cuts, s.X)
		}
	}
	slices.Sort(cuts)
	cuts = append(cuts, whole.To)
	rise := 0.0
	if whole.Kind == beam.Linear {
		rise = (whole.End - whole.Start) / (whole.To - whole.From)
	}
	var cases []beam.Case
	for i := range len(cuts) - 1 {
		part := whole
		part.From, part.To = cuts[i], cuts[i+1]
		if part.Kind == beam.Linear {
			part.Start, part.End = whole.Start+rise*(cuts[i]-whole.From), whole.Start+rise*(cuts[i+1]-whole.From)
		}
		cases = append(cases, beam.Case{part})
	}
	return cases
}

// setSpans names the spans as a reader would: "span 2", "left overhang".
func (p *Prepared) setSpans() {
	p.spans = p.spans[:0]
	number := 0
	for i, s := range p.down.envelope.Spans {
		n := "right overhang"
		if !s.Overhang {
			number++
			n = fmt.Sprintf("span %d", number)
		} else if i == 0 && !p.heldAt(0) {
			n = "left overhang"
		}
		p.spans = append(p.spans, span{n, s.To - s.From, s.Overhang})
	}
}

func (p *Prepared) heldAt(x float64) bool {
	return slices.ContainsFunc(p.beam.Supports, func(s beam.Support) bool {
		return max(s.X-x, x-s.X) <= near*p.member.Length
	})
}

// setDemand fills what the demand has whatever the section: deflection limits,
// lateral spacing and buckling lengths. Lateral restraints hold the weak axis too.
func (p *Prepared) setDemand() {
	m := &p.member
	p.deflections = p.deflections[:0]
	if m.DeflectionLimit > 0 {
		for _, s := range p.spans {
			p.deflections = append(p.deflections, s.deflection(m.DeflectionLimit, s.name))
		}
		if len(p.side.actions) > 0 {
			for _, s := range p.spans {
				p.deflections = append(p.deflections, s.deflection(m.DeflectionLimit, s.name+", sideways"))
			}
		}
	}
	longest, buckling := 0.0, 0.0
	for _, s := range p.spans {
		longest = max(longest, s.length)
		factor := m.LengthFactor
		if factor == 0 {
			factor = 1
			if s.overhang {
				factor = 2
			}
		}
		buckling = max(buckling, factor*s.length)
	}
	p.demand = resistance.Demand{
		LateralSpacing: longest, LengthY: buckling, LengthZ: buckling,
		MomentFactor: m.MomentFactor, NetAreaFactor: m.NetAreaFactor,
	}
	if spacing := m.RestraintSpacing; spacing > 0 {
		p.demand.LateralSpacing, p.demand.LengthZ = spacing, min(buckling, spacing)
	}
}

func (s span) deflection(n float64, where string) resistance.Deflection {
	d := resistance.Deflection{Where: where, Span: s.length, Overhang: s.overhang, Limit: s.length / n}
	if s.overhang {
		d.Limit *= 2
	}
	return d
}
