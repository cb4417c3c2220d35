package sizing

import (
	"fmt"
	"math"
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Explain returns a given section in the member with every check under its worst
// combination, whether it passes or not; the checks carry the figures that
// Utilisation used, bit for bit. An error means that the section cannot be had in
// the grade or is too deep or wide.
func (p *Prepared) Explain(s *section.Section) (Result, error) {
	m, err := p.steel(s)
	if err != nil {
		return Result{}, fmt.Errorf("sizing: %w", err)
	}
	if !p.analysed {
		if err := p.analyse(); err != nil {
			return Result{}, fmt.Errorf("sizing: %w", err)
		}
	}
	r := Result{
		Section:    *s,
		TotalLoad:  p.TotalLoad(s),
		SelfWeight: p.massOf(s) * p.setup.Gravity * p.member.Length,
	}
	p.explain(&r, s, m)
	r.Passes = resistance.Passes(r.Utilisation)
	r.Warnings = p.warnings(s)
	stiffness := p.setup.Grade.E * p.checked(s).Iy
	service := &p.service[0]
	service.terms[len(service.terms)-1].Factor = p.across(p.weight(s, service))
	p.down.response.EnvelopeInto(&p.down.envelope, service.terms)
	if p.splits() {
		if r.Ratios, err = p.ratios(stiffness); err != nil {
			return Result{}, fmt.Errorf("sizing: %w", err)
		}
		r.Unsafe = slices.ContainsFunc(r.Ratios, func(q beam.Ratio) bool { return q.Unsafe })
	}
	r.Envelope = scaled(p.down.envelope, stiffness)
	return r, nil
}

// explain fills the checks: each under the variant in which it is highest. The
// governing one is found as in use.
func (p *Prepared) explain(r *Result, s *section.Section, m resistance.Material) {
	d := p.checked(s)
	p.sag(d, false)
	for i := range p.strength {
		v := &p.strength[i]
		checks := p.setup.Basis.Explain(d, m, p.ask(d, v, p.forces(v, p.across(p.weight(s, v))), i == 0))
		name := v.name(&p.member)
		if u, id := resistance.Governing(checks); i == 0 || u > r.Utilisation {
			r.Utilisation, r.Governing, r.Combination = u, id, p.under(id, name)
		}
		r.merge(checks, func(id string) string { return p.under(id, name) })
	}
	if len(p.strength) == 1 {
		return
	}
	for i := range r.Checks {
		c := &r.Checks[i]
		if c.Note != "" {
			c.Note += "; "
		}
		c.Note += "under " + r.Combinations[i]
	}
}

// under names the combination of a check: a service one for deflection and
// frequency, else that of the strength variant.
func (p *Prepared) under(id, strength string) string {
	if id == resistance.Deflecting || id == resistance.Vibrating {
		return p.setup.Service.Name
	}
	return strength
}

// merge keeps of each check the one of the highest utilisation, in the order of the
// design basis.
func (r *Result) merge(checks []resistance.Check, name func(id string) string) {
	at := 0
	for _, c := range checks {
		i := slices.IndexFunc(r.Checks, func(o resistance.Check) bool { return o.ID == c.ID })
		switch {
		case i < 0:
			r.Checks = slices.Insert(r.Checks, at, c)
			r.Combinations = slices.Insert(r.Combinations, at, name(c.ID))
			i = at
		case c.Utilisation > r.Checks[i].Utilisation:
			r.Checks[i], r.Combinations[i] = c, name(c.ID)
		}
		at = i + 1
	}
}

// warnings says what is doubtful about a section that can be had.
func (p *Prepared) warnings(s *section.Section) []string {
	var w []string
	if v := p.suits(s.Family); v.Level == material.Doubtful {
		w = append(w, fmt.Sprintf("%s in %s: %s; better %s", s.Designation, p.setup.Grade.Name, v.Reason, v.Remedy))
	}
	if stock := p.member.StockLength; stock > 0 && p.member.Length > stock*(1+near) {
		w = append(w, fmt.Sprintf("%.4g m is longer than the stock length of %.4g m: at least %.0f splices, which are neither placed nor checked",
			p.member.Length, stock, math.Ceil(p.member.Length/stock*(1-near))-1))
	}
	return w
}

// Reactions returns the greatest and the smallest reactions of the member's vertical
// plane with a section under any combination, one for each support, left to right.
// Permanent actions take the factor that is worse for each. They are exact, for
// supports, towers and footings; an error means that the combination or the member
// cannot be analysed.
func (p *Prepared) Reactions(s *section.Section, c action.Combination) ([]beam.ReactionEnvelope, error) {
	if err := c.Validate(); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	if !p.analysed {
		if err := p.analyse(); err != nil {
			return nil, fmt.Errorf("sizing: %w", err)
		}
	}
	var all []beam.ReactionEnvelope
	for _, v := range p.variants(nil, &c) {
		v.terms = p.terms(&p.down, &v)
		v.terms[len(v.terms)-1].Factor = p.across(p.weight(s, &v))
		env := p.down.response.Envelope(v.terms)
		if all == nil {
			all = env.Reactions
			continue
		}
		for i, r := range env.Reactions {
			a := &all[i]
			a.FMax, a.FMin = max(a.FMax, r.FMax), min(a.FMin, r.FMin)
			a.MMax, a.MMin = max(a.MMax, r.MMax), min(a.MMin, r.MMin)
		}
	}
	return all, nil
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
	return len(p.spans) > 1 || reactions > 2
}

// ratios sets the split method against the exact envelope in p, which stands under
// the service combination and the section's own weight. Both come with EI = 1; deflections are brought to the
// section's stiffness (N·m²) before they are compared.
func (p *Prepared) ratios(stiffness float64) ([]beam.Ratio, error) {
	split, err := beam.SplitTrains(p.beam, p.down.cases, p.down.trains, p.service[0].terms)
	if err != nil {
		return nil, err
	}
	for i := range split.Pieces {
		soften(stiffness, &split.Pieces[i].DeflectionMax, &split.Pieces[i].DeflectionMin)
	}
	return beam.Compare(split, scaled(p.down.envelope, stiffness)), nil
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
