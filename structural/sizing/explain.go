package sizing

import (
	"fmt"
	"slices"

	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Explain returns a given section in the member with every check, whether it passes
// or not; the checks carry the figures that Utilisation used, bit for bit. An error
// means that the section cannot be had in the grade.
func (p *Prepared) Explain(s *section.Section) (Result, error) {
	m, err := p.steel(s)
	if err != nil {
		return Result{}, fmt.Errorf("sizing: %w", err)
	}
	p.find(&p.exact, p.across(p.weight(s)))
	r := Result{
		Section:    *s,
		Checks:     p.setup.Basis.Explain(s, m, p.ask(s, &p.exact)),
		TotalLoad:  p.TotalLoad(s),
		SelfWeight: s.Mass * p.setup.Gravity * p.member.Length,
	}
	r.Utilisation, r.Governing = resistance.Governing(r.Checks)
	r.Passes = resistance.Passes(r.Utilisation)
	if v := p.suits(s.Family); v.Level == material.Doubtful {
		r.Warnings = append(r.Warnings, fmt.Sprintf("%s in %s: %s; better %s", s.Designation, p.setup.Grade.Name, v.Reason, v.Remedy))
	}
	stiffness := p.setup.Grade.E * s.Iy
	if p.splits() {
		if r.Ratios, err = p.ratios(stiffness); err != nil {
			return Result{}, fmt.Errorf("sizing: %w", err)
		}
		r.Unsafe = slices.ContainsFunc(r.Ratios, func(q beam.Ratio) bool { return q.Unsafe })
	}
	r.Envelope = scaled(p.envelope, stiffness)
	return r, nil
}

// splits tells whether the split method would cut the member or simplify it: more
// than one piece, or more support reactions than the two that statics gives.
func (p *Prepared) splits() bool {
	reactions := 0
	for _, s := range p.beam.Supports {
		reactions++
		if s.Kind == beam.Fixed {
			reactions++
		}
	}
	return len(p.envelope.Spans) > 1 || reactions > 2
}

// ratios sets the split method against the exact envelope in p, which stands under
// the section's own weight. Both come with EI = 1; deflections are brought to the
// section's stiffness (N·m²) before they are compared.
func (p *Prepared) ratios(stiffness float64) ([]beam.Ratio, error) {
	split, err := beam.Split(p.beam, p.cases, p.terms)
	if err != nil {
		return nil, err
	}
	for i := range split.Pieces {
		soften(stiffness, &split.Pieces[i].DeflectionMax, &split.Pieces[i].DeflectionMin)
	}
	return beam.Compare(split, scaled(p.envelope, stiffness)), nil
}

// scaled returns a copy of an envelope at EI = 1 with the deflections of a
// stiffness (N·m²).
func scaled(e beam.Envelope, stiffness float64) beam.Envelope {
	e = beam.Envelope{
		MomentMax: e.MomentMax, MomentMin: e.MomentMin, ShearMax: e.ShearMax, ShearMin: e.ShearMin,
		DeflectionMax: e.DeflectionMax, DeflectionMin: e.DeflectionMin,
		Reactions: slices.Clone(e.Reactions), Spans: slices.Clone(e.Spans),
	}
	soften(stiffness, &e.DeflectionMax, &e.DeflectionMin)
	for i := range e.Spans {
		soften(stiffness, &e.Spans[i].DeflectionMax, &e.Spans[i].DeflectionMin)
	}
	return e
}

func soften(stiffness float64, deflections ...*beam.Extreme) {
	for _, d := range deflections {
		d.Value /= stiffness
	}
}
