package engine

import (
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/takeoff"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

func (r *run) member(s sizedMember) document.Member {
	m := s.member
	p := takeoff.NewPiece(m, s.chosen())
	out := document.Member{
		Mark: m.Mark, Group: m.Group, Kind: m.Kind, Description: m.Description, Quantity: m.Quantity, Inputs: inputsOf(m),
		Length: document.Number(m.Length), Treatment: string(m.Treatment), Arrangement: m.Arrangement,
		LineMass: document.Number(p.LineMass), Net: document.Number(p.Net()), Passes: true,
	}
	for _, id := range r.itemsOf[m.Mark] {
		switch it := r.items[r.itemAt[id]]; it.Treatment {
		case takeoff.Joint:
			out.JointItems = append(out.JointItems, id)
		case takeoff.Concrete:
			out.ConcreteItem = id
		default:
			out.Item = id
		}
	}
	if s.result == nil {
		return out
	}
	res := s.result
	out.Section, out.Grade, out.Passes = res.Section.Designation, m.Grade, res.Passes
	out.Governing, out.Utilisation, out.Combination = res.Governing, document.Measured(res.Utilisation), res.Combination
	out.SameSizeAs, out.LoadSet, out.Warnings = m.SameSizeAs, m.LoadSet, res.Warnings
	out.TotalLoad, out.SelfWeight = document.Measured(res.TotalLoad/1000), document.Measured(res.SelfWeight/1000)
	out.DeflectionLimit = document.Number(m.DeflectionLimit)
	out.Checks, out.Ratios = checks(res), ratios(res.Ratios)
	if !m.Upright { // its foot carries the axial force, which the beam knows nothing of
		out.Reactions = reactions(res.Envelope.Reactions)
	}
	for _, x := range res.LighterRejected {
		out.Rejected = append(out.Rejected, document.Rejected{Section: x.Section, Check: x.Check, Utilisation: document.Measured(x.Utilisation)})
	}
	return out
}

// splitSummary says what the split method would have chosen, nil where it would
// have cut or simplified nothing.
func (r *run) splitSummary() *document.SplitSummary {
	sum := document.SplitSummary{Members: []document.SplitMember{}, UnsafeMembers: []string{}}
	for _, s := range r.sized.members {
		if s.split == nil {
			continue
		}
		metres := float64(s.member.Quantity) * s.member.Length / 1000
		exact := float64(metres * s.result.Section.Mass)
		split := exact
		m := document.SplitMember{Mark: s.member.Mark, Exact: s.result.Section.Designation, Utilisation: document.Measured(s.split.utilisation), Check: s.split.check, Unsafe: s.split.unsafe()}
		if s.split.passes {
			m.Split, split = s.split.section.Designation, float64(metres*s.split.section.Mass)
		}
		m.DifferenceT = document.Number(split - exact)
		if amount, ok := r.split.members[m.Mark]; ok {
			m.Difference = &amount
		}
		if m.Unsafe {
			sum.UnsafeMembers = append(sum.UnsafeMembers, m.Mark)
		}
		sum.Members = append(sum.Members, m)
		sum.TonnesExact += document.Number(exact)
		sum.TonnesSplit += document.Number(split)
	}
	if len(sum.Members) == 0 {
		return nil
	}
	sum.DifferenceT = sum.TonnesSplit - sum.TonnesExact
	if r.split.priced {
		sum.Difference, sum.UnsafeDifference = &r.split.total, &r.split.unsafe
	}
	return &sum
}

func checks(res *sizing.Result) []document.Check {
	var out []document.Check
	for i, c := range res.Checks {
		if c.Demand == 0 && !c.PassFail {
			continue // nothing acts that this check is about
		}
		d := document.Check{ID: c.ID, Clause: c.Clause, Formula: c.Formula, Demand: document.Measured(c.Demand), Resistance: document.Measured(c.Resistance),
			Unit: c.Unit, Utilisation: document.Measured(c.Utilisation), PassFail: c.PassFail, Note: noteOf(res, i), Combination: res.Combinations[i], Inputs: []document.Measure{}}
		for _, q := range c.Inputs {
			d.Inputs = append(d.Inputs, document.Measure{Symbol: q.Symbol, Value: document.Measured(q.Value), Unit: q.Unit})
		}
		out = append(out, d)
	}
	return out
}

// noteOf is the note of a check without its combination, which stands by itself.
func noteOf(res *sizing.Result, i int) string {
	return strings.TrimSuffix(strings.TrimSuffix(res.Checks[i].Note, "under "+res.Combinations[i]), "; ")
}

func reactions(in []beam.ReactionEnvelope) []document.Reaction {
	var out []document.Reaction
	for _, x := range in {
		moment := x.MMax
		if -x.MMin > moment {
			moment = x.MMin
		}
		out = append(out, document.Reaction{Position: document.Measured(x.X), Max: document.Measured(x.FMax / 1000), Min: document.Measured(x.FMin / 1000), Moment: document.Measured(moment / 1000)})
	}
	return out
}

func ratios(in []beam.Ratio) []document.Ratio {
	var out []document.Ratio
	for _, x := range in {
		scale, unit := 1e-3, "kN"
		if (x.Effect == beam.EffectPeakMoment || x.Effect == beam.EffectShear) && x.Exact < 0 {
			x.Split, x.Exact = -x.Split, -x.Exact // magnitudes: of ± the same either may come first
		}
		switch {
		case strings.HasSuffix(x.Effect, "moment"):
			unit = "kNm"
		case x.Effect == "deflection":
			scale, unit = 1e3, "mm"
		}
		out = append(out, document.Ratio{Effect: x.Effect, Where: x.Where, Split: document.Measured(x.Split * scale), Exact: document.Measured(x.Exact * scale),
			Unit: unit, Ratio: document.Measured(x.Ratio), Unsafe: x.Unsafe})
	}
	return out
}
