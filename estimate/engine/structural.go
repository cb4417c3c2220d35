package engine

import (
	"slices"

	"spanwright/estimate/assumption"
	"spanwright/estimate/schedule"
	"spanwright/structural/resistance"
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

// openSized are the shapes that buckle sideways in bending.
func openSized(s sizedMember) bool {
	return s.result != nil && slices.Contains([]section.Shape{section.ISection, section.Channel, section.Tee, section.Flat, section.UnequalI}, s.result.Section.Shape)
}

func tubeSized(s sizedMember) bool {
	return s.result != nil && (s.result.Section.Shape == section.RoundTube || s.result.Section.Shape == section.RectangularTube)
}

func severalSpans(s sizedMember) bool { return s.result != nil && len(s.member.Supports) > 1 }

func axial(s sizedMember) bool { return s.result != nil && (s.member.Axial != 0 || s.member.Upright) }

func pressed(s sizedMember) bool { return s.result != nil && (s.member.Axial > 0 || s.member.Upright) }

func pulled(s sizedMember) bool { return s.result != nil && s.member.Axial < 0 }

func floored(s sizedMember) bool { return s.result != nil && s.member.FrequencyFloor > 0 }

func grouped(s sizedMember) bool { return s.result != nil && s.member.SameSizeAs != "" }

func loaded(is func(schedule.Load) bool) func(sizedMember) bool {
	return func(s sizedMember) bool { return s.result != nil && slices.ContainsFunc(s.member.Loads, is) }
}

var (
	sideways = loaded(func(l schedule.Load) bool { return l.Sideways })
	crossed  = loaded(func(l schedule.Load) bool { return len(l.Wheels) > 0 })
	dynamic  = loaded(func(l schedule.Load) bool { return l.Dynamic > 1 })
)

// webBuckles tells whether the web was held against shear buckling.
func webBuckles(s sizedMember) bool {
	return s.result != nil && slices.ContainsFunc(s.result.Checks, func(c resistance.Check) bool { return c.ID == resistance.WebBuckling })
}

// notes hold in every design basis.
var notes = []note{
	{"structural/own weight", "nominal kg/m of the chosen section, g = 9.80665 m/s²", "Each member carries its own nominal weight as a permanent action, without connections and growth", assumption.High, anySized},
	{"structural/pattern loading", "EN 1990:2002 4.1.1 (free actions)", "Free variable actions are placed span by span for the worst effect; a load of unknown nature counts as variable and free", assumption.High, severalSpans},
	{"structural/connections", "", "Supports are ideally pinned or fixed and do not settle; joints and their eccentricities are not checked", assumption.Medium, anySized},
	{"structural/deflection", "", "Deflection is of first order and limited to the span over n, and for an overhang or cantilever to twice its length over n", assumption.Medium, anySized},
	{"structural/prismatic", "", "Every member has one section over its whole length; splices are not placed", assumption.Medium, anySized},
	{"structural/axial nature", "", "Axial loads count as variable in full; they act through the centroid", assumption.Medium, func(s sizedMember) bool { return s.result != nil && s.member.Axial != 0 }},
	{"structural/tension", "", "Members in tension have no holes unless a net area factor is given", assumption.Medium, pulled},
	{"structural/horizontal", "", "Horizontal actions bend a member about its weak axis between its own supports; lateral restraints are not counted on for that, and torsion from loads off the shear centre is not checked", assumption.Medium, sideways},
	{"structural/moving load", "influence lines of the whole member", "Wheels cross the member in both directions and stand for each effect where it is worst; braking, side thrust and their spread through rails are not in it", assumption.High, crossed},
	{"structural/dynamic factor", "", "Dynamic factors stand on the static loads that they are given for, in strength and deflection alike", assumption.Medium, dynamic},
	{"structural/frequency", "exact dynamic stiffness of the Euler-Bernoulli beam", "The natural frequency is the first one in the vertical plane (of an upright member about its weak axis) with own weight and permanent loads, without the mass of variable loads, lowered by compression as 1 − N/Ncr", assumption.Medium, floored},
	{"structural/same size", "", "Rows tied by “Same size as” all get the lightest section that passes in each of them", assumption.High, grouped},
}

// basisNotes hold in one design basis.
var basisNotes = map[string][]note{
	"allowable": {
		{"structural/combination", "EN 1990:2002 6.5.3 (6.14b)", "Strength and deflection are checked under characteristic actions, all factors 1.0; the factor of the design basis stands on the yield strength", assumption.Medium, anySized},
		{"structural/lateral restraint", "elastic critical moment of Timoshenko and Gere, Theory of Elastic Stability, chapter 6", "The compression flange of open sections is held sideways at the restraint spacing (the full span unless given), which where given also holds the member against buckling about its weak axis, under uniform moment, with the load at the shear centre", assumption.Medium, openSized},
		{"structural/struts", "Johnson and Euler columns", "Compression is checked with effective length factors as given on the longest span or overhang (unless given, 1 for spans and 2 for free ends) about both axes", assumption.Medium, axial},
	},
	"en1993": {
		{"structural/en1993/edition", "EN 1993-1-1:2005 + A1:2014, EN 1993-1-5:2006", "Partial factors are the recommended values γM0 = γM1 = 1.0, γM2 = 1.25; no national annex is taken", assumption.Medium, anySized},
		{"structural/combination", "EN 1990:2002 6.4.3.2 (6.10), table A1.2(B); deflection 6.5.3 (6.14b)", "Strength is checked under 1.35 (or 1.0 where it relieves) times permanent and 1.5 times variable actions, all of them leading (ψ0 = 1); deflection under characteristic actions", assumption.High, anySized},
		{"structural/en1993/classification", "EN 1993-1-1:2005 5.5.2, table 5.2; EN 1993-1-5:2006 4.4", "Classes under compression come from the axial force alone; class 4 plates count with effective widths; class 4 round tubes are refused", assumption.High, anySized},
		{"structural/lateral restraint", "EN 1993-1-1:2005 6.3.2.2, critical moment in the form of NCCI SN003", "The compression flange of open sections is held sideways at the restraint spacing (the full span unless given), which where given also holds the member against buckling about its weak axis, in the general case, with the moment factor C1 as given (1.0 unless given) and the load at the shear centre", assumption.Medium, openSized},
		{"structural/struts", "EN 1993-1-1:2005 6.3.1, table 6.2", "Compression is checked with effective length factors as given on the longest span or overhang (unless given, 1 for spans and 2 for free ends) about both axes and against twisting", assumption.Medium, pressed},
		{"structural/en1993/interaction", "EN 1993-1-1:2005 6.3.3 (6.61), (6.62), annex B", "Axial force and bending interact with all equivalent moment factors Cm = 1", assumption.High, axial},
		{"structural/en1993/webs", "EN 1993-1-5:2006 5.1 to 5.3", "Slender webs have stiffeners at the supports alone, non-rigid end posts and no share of the flanges in shear", assumption.Medium, webBuckles},
	},
	resistance.ASD:  append(aiscNotes(), note{"structural/combination", "ASCE 7-22 2.4.1; deflection appendix CC, CC.2.1", "Strength is checked under D, D + L and 0.6 D + L, deflection under D + L; L stands for every variable action at its full value", assumption.High, anySized}),
	resistance.LRFD: append(aiscNotes(), note{"structural/combination", "ASCE 7-22 2.3.1; deflection appendix CC, CC.2.1", "Strength is checked under 1.4 D, 1.2 D + 1.6 L and 0.9 D + 1.6 L, deflection under D + L; L stands for every variable action", assumption.High, anySized}),
}

func aiscNotes() []note {
	return []note{
		{"structural/aisc/edition", "AISC 360-22, chapters B4, D, E, F, G and H", "Checks follow AISC 360-22; chapter K, torsion (H3), concentrated forces (J10) and connections are not in them", assumption.Medium, anySized},
		{"structural/aisc/design wall", "AISC 360-22 B4.2", "Tubes count with the design wall of 0.93 times the nominal one, in strength and stiffness; mass is nominal", assumption.High, tubeSized},
		{"structural/lateral restraint", "AISC 360-22 F2 to F11, G2.1", "The compression flange of open sections is held sideways at the restraint spacing (the full span unless given), which where given also holds the member against buckling about its weak axis, with Cb as given (1.0 unless given); webs count without stiffeners and tension field", assumption.Medium, openSized},
		{"structural/struts", "AISC 360-22 E3, E4, E7", "Compression is checked with effective length factors as given on the longest span or overhang (unless given, 1 for spans and 2 for free ends) about both axes", assumption.Medium, pressed},
		{"structural/aisc/second order", "AISC 360-22 Appendix 8 (A-8-3)", "First-order moments of members in compression are amplified by B1 with Cm = 1; the sway of a frame (B2) is not in them", assumption.Medium, pressed},
	}
}

// addStructural writes the simplifications that this job's members rest on.
// They have no number of their own, so they feed no figure by one per cent.
func (r *run) addStructural() error {
	basis := r.job.Settings.DesignBasis
	for _, n := range slices.Concat(notes, basisNotes[basis]) {
		if !r.any(n.when) {
			continue
		}
		if err := r.register.Add(assumption.Entry{
			ID: n.id, Kind: assumption.Structural, Statement: n.statement, Clause: n.clause,
			Source: "design basis " + basis, Owner: "Spanwright", Confidence: n.confidence,
		}); err != nil {
			return err
		}
	}
	return nil
}
