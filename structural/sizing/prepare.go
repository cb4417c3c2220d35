package sizing

import (
	"fmt"
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Prepared is a member analysed once, ready to be tried with any section. It keeps
// scratch space: one goroutine at a time.
type Prepared struct {
	member   Member
	setup    Setup
	beam     beam.Beam // EI = 1
	cases    []beam.Case
	terms    []beam.Term // the last is the member's own weight
	response *beam.Response
	envelope beam.Envelope
	demand   resistance.Demand

	exact         effects // of the section tried last
	bound         effects // scratch of the lower bound
	none, lighter effects // under no weight and under that of the lightest candidate
	verdicts      []verdict
}

// near is the part of the length within which two places are the same.
const near = 1e-9

// Prepare checks the member and the setup and analyses the member with EI = 1.
//
// Permanent actions make one case that is always there; every variable action makes
// a case of its own that may be absent, and a free uniform one a case for each span
// that it covers. So actions that pull against each other never cancel.
//
// The error of a member that cannot be analysed wraps a *beam.Fault.
func Prepare(m Member, s Setup) (*Prepared, error) {
	if err := s.Validate(); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	if err := m.Validate(); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	supports := m.Supports
	if len(supports) == 0 {
		supports = []beam.Support{{X: 0, Kind: beam.Pinned}, {X: m.Length, Kind: beam.Pinned}}
	}
	p := &Prepared{member: m, setup: s, beam: beam.Prismatic(m.Length, 1, supports...)}
	p.load()
	response, err := beam.Analyse(p.beam, p.cases)
	if err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	p.response = response
	p.response.EnvelopeInto(&p.envelope, p.terms)
	p.demand.Deflections = p.limits()
	p.setLengths()
	return p, nil
}

// load fills cases and terms.
func (p *Prepared) load() {
	var permanent beam.Case
	add := func(c beam.Case, factor float64, free bool) {
		p.terms = append(p.terms, beam.Term{Case: len(p.cases), Factor: factor, Free: free})
		p.cases = append(p.cases, c)
	}
	for _, a := range p.member.Actions {
		switch {
		case a.Value == 0:
		case a.Nature == action.Permanent:
			permanent = append(permanent, p.loadOf(a))
		case a.Free && a.Kind == action.Uniform:
			for _, c := range p.bySpan(a) {
				add(c, p.setup.Combination.Variable, true)
			}
		default:
			add(beam.Case{p.loadOf(a)}, p.setup.Combination.Variable, true)
		}
	}
	if len(permanent) > 0 {
		add(permanent, p.setup.Combination.Permanent, false)
	}
	add(beam.Case{{Kind: beam.Uniform, From: 0, To: p.member.Length, Start: 1}}, 0, false)
}

func (p *Prepared) loadOf(a action.Action) beam.Load {
	from, to := a.Extent(p.member.Length)
	if a.Kind == action.Point {
		return beam.Load{Kind: beam.Point, From: from, Start: a.Value}
	}
	return beam.Load{Kind: beam.Uniform, From: from, To: to, Start: a.Value}
}

// bySpan cuts a uniform action at the supports, one case a span.
func (p *Prepared) bySpan(a action.Action) []beam.Case {
	whole := p.loadOf(a)
	least := near * p.member.Length
	cuts := []float64{whole.From}
	for _, s := range p.beam.Supports {
		if s.X > whole.From+least && s.X < whole.To-least {
			cuts = append(cuts, s.X)
		}
	}
	slices.Sort(cuts)
	cuts = append(cuts, whole.To)
	var cases []beam.Case
	for i := range len(cuts) - 1 {
		part := whole
		part.From, part.To = cuts[i], cuts[i+1]
		cases = append(cases, beam.Case{part})
	}
	return cases
}

// limits returns a deflection for each span and overhang, with its limit, or
// nothing where the member has none.
func (p *Prepared) limits() []resistance.Deflection {
	if p.member.DeflectionLimit == 0 {
		return nil
	}
	var limits []resistance.Deflection
	for i, s := range p.envelope.Spans {
		d := resistance.Deflection{Where: p.name(i), Span: s.To - s.From, Overhang: s.Overhang}
		d.Limit = d.Span / p.member.DeflectionLimit
		if s.Overhang {
			d.Limit *= 2
		}
		limits = append(limits, d)
	}
	return limits
}

// name calls span i what a reader would: "span 2", "left overhang".
func (p *Prepared) name(i int) string {
	spans := p.envelope.Spans
	switch {
	case spans[i].Overhang && i == 0 && !p.heldAt(0):
		return "left overhang"
	case spans[i].Overhang:
		return "right overhang"
	case spans[0].Overhang && !p.heldAt(0):
		return fmt.Sprintf("span %d", i)
	}
	return fmt.Sprintf("span %d", i+1)
}

func (p *Prepared) heldAt(x float64) bool {
	return slices.ContainsFunc(p.beam.Supports, func(s beam.Support) bool {
		return max(s.X-x, x-s.X) <= near*p.member.Length
	})
}

// setLengths fills the lateral spacing and the buckling lengths. Lateral restraints
// hold the weak axis too.
func (p *Prepared) setLengths() {
	longest, buckling := 0.0, 0.0
	for _, s := range p.envelope.Spans {
		length := s.To - s.From
		longest = max(longest, length)
		factor := p.member.LengthFactor
		if factor == 0 {
			factor = 1
			if s.Overhang {
				factor = 2
			}
		}
		buckling = max(buckling, factor*length)
	}
	d := &p.demand
	d.LateralSpacing, d.LengthY, d.LengthZ = longest, buckling, buckling
	if spacing := p.member.RestraintSpacing; spacing > 0 {
		d.LateralSpacing, d.LengthZ = spacing, min(buckling, spacing)
	}
}

// steel returns the material of a section, or the reason why there is none.
func (p *Prepared) steel(s *section.Section) (resistance.Material, error) {
	if v := p.suits(s.Family); v.Level == material.Refused {
		return resistance.Material{}, fmt.Errorf("%s: %s; take %s", s.Designation, v.Reason, v.Remedy)
	}
	g := &p.setup.Grade
	fy, fu, err := g.Strength(s.Thickness)
	if err != nil {
		return resistance.Material{}, fmt.Errorf("%s: %w", s.Designation, err)
	}
	return resistance.Material{Yield: fy, Ultimate: fu, E: g.E, G: g.G}, nil
}

// available is steel without the reason: what is surely too thick is sorted out
// before Grade.Strength puts its refusal into words that the search does not read.
func (p *Prepared) available(s *section.Section) (resistance.Material, bool) {
	bands := p.setup.Grade.Bands
	if s.Thickness > bands[len(bands)-1].UpTo*1.001 {
		return resistance.Material{}, false
	}
	m, err := p.steel(s)
	return m, err == nil
}

// verdict is what material.Suits says of a family in the setup's grade.
type verdict struct {
	family string
	material.Verdict
}

// suits asks material.Suits once for each family: it reads spellings, which takes
// longer than all checks of a section.
func (p *Prepared) suits(family string) *verdict {
	for i := range p.verdicts {
		if p.verdicts[i].family == family {
			return &p.verdicts[i]
		}
	}
	p.verdicts = append(p.verdicts, verdict{family, material.Suits(family, p.setup.Grade.Name)})
	return &p.verdicts[len(p.verdicts)-1]
}
