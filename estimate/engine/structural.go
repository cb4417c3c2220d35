package engine

import (
	"spanwright/estimate/assumption"
	"spanwright/structural/section"
)

// note is a simplification of the structural engine. It becomes an assumption
// when a member of the job rests on it.
type note struct {
	id, clause, statement string
	confidence            assumption.Confidence
	when                  func(sizedMember) bool
}

func anySized(s sizedMember) bool { return s.result != nil }

func openSized(s sizedMember) bool {
	return s.result != nil && s.result.Section.Shape == section.ISection
}

func severalSpans(s sizedMember) bool { return s.result != nil && len(s.member.Supports) > 1 }

func axial(s sizedMember) bool { return s.result != nil && (s.member.Axial != 0 || s.member.Upright) }

var notes = []note{
	{"structural/combination", "EN 1990:2002 6.5.3 (6.14b)", "Strength and deflection are checked under characteristic actions, all factors 1.0; the factor of the design basis stands on the yield strength", assumption.Medium, anySized},
	{"structural/own weight", "nominal kg/m of the chosen section, g = 9.80665 m/s²", "Each member carries its own nominal weight as a permanent action, without connections and growth", assumption.High, anySized},
	{"structural/pattern loading", "EN 1990:2002 4.1.1 (free actions)", "Free variable actions are placed span by span for the worst effect; a load of unknown nature counts as variable and free", assumption.High, severalSpans},
	{"structural/lateral restraint", "elastic critical moment of Timoshenko & Gere, Theory of Elastic Stability, chapter 6", "The compression flange of open sections is held sideways at the restraint spacing (the full span unless given), under uniform moment, with the load at the shear centre; where a spacing is given it also holds the member against buckling about its weak axis", assumption.Medium, openSized},
	{"structural/connections", "", "Supports are ideally pinned or fixed and do not settle; joints and their eccentricities are not checked", assumption.Medium, anySized},
	{"structural/struts", "Johnson and Euler columns", "Compression is checked with effective length factors as given on the longest span or overhang; unless given, 1 for spans and 2 for free ends", assumption.Medium, axial},
	{"structural/deflection", "", "Deflection is limited to the span over n, and for an overhang or cantilever to twice its length over n", assumption.Medium, anySized},
	{"structural/prismatic", "", "Every member has one section over its whole length; splices are not placed", assumption.Medium, anySized},
}

// addStructural writes the simplifications that this job's members rest on.
// They have no number of their own, so they feed no figure by one per cent.
func (r *run) addStructural() error {
	for _, n := range notes {
		for _, s := range r.sized {
			if !n.when(s) {
				continue
			}
			if err := r.register.Add(assumption.Entry{
				ID: n.id, Kind: assumption.Structural, Statement: n.statement, Clause: n.clause,
				Source: "design basis " + r.job.Settings.DesignBasis, Owner: "Spanwright", Confidence: n.confidence,
			}); err != nil {
				return err
			}
			break
		}
	}
	return nil
}
