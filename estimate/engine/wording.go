package engine

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// inclusions says what the total holds.
func (r *run) inclusions() []string {
	sized, given, byMass := 0, 0, 0
	for _, s := range r.sized {
		switch s.member.Treatment {
		case schedule.SizeFromFamily:
			sized++
		case schedule.CheckSection:
			given++
		default:
			byMass++
		}
	}
	out := []string{
		fmt.Sprintf("Steelwork of %d schedule rows: %d sized from a family, %d with a given section, %d by mass.", len(r.sized), sized, given, byMass),
		"Allowances for connections, bolts, growth and waste, each in the register.",
	}
	var cats []string
	for _, c := range ratebook.Categories() {
		if _, ok := r.priced.Categories[c]; ok {
			cats = append(cats, c)
		}
	}
	return append(out,
		"Categories priced: "+strings.Join(cats, ", ")+".",
		"In the range, not in the base: the systemic factor of the estimate class and the spread of every rate, multiplier and allowance.")
}

// exclusions says what the total does not hold. An empty list would be a fault.
func (r *run) exclusions() []string {
	horizontal := "Wind and other horizontal actions: not checked, as no row gives any."
	if r.any(sideways) {
		horizontal = "Horizontal actions on rows that give none, and the stability of the structure as a whole: not checked."
	}
	vibration := "Vibration: not checked, as no frequency floor is asked for."
	if r.any(floored) {
		vibration = "Vibration beyond the frequency floors asked for: resonance, damping and comfort are not checked."
	}
	return []string{
		"Foundations, ballast and holding-down.",
		"Margin of the fabricator.",
		"The owner's costs, land, permits and finance.",
		"Taxes and duties.",
		"Escalation after the base date and exchange risk.",
		"Equipment, conveyors, piping, electrical work, cladding and roofing.",
		"Corrosion allowance, least wall thickness and durability.",
		"Fatigue, earthquake and accidental actions: not checked; dynamic effects beyond the dynamic factors given neither.",
		vibration,
		horizontal,
		"Torsion, forces put into webs across them, and sway of frames (P-Δ): not checked.",
		"Design of connections, splices and bearings; they are priced by allowance.",
		"Discrete risks and management reserve.",
	}
}

// any tells whether one of the members is of a kind.
func (r *run) any(is func(sizedMember) bool) bool { return slices.ContainsFunc(r.sized, is) }

func (r *run) textNotes() []string {
	out := []string{
		"Concept sizes follow the exact envelope; the split method is shown beside it and never used for reactions.",
		"Reactions and total loads are those of the service combination, without factors, in the vertical plane.",
		"What an assumption feeds is stated for sections as chosen; entries marked so may also choose other sections, and then move masses and costs in steps.",
		"Percentiles of lines, groups or projects do not add up.",
		"Labour, coating, freight and erection follow delivered mass; material follows purchased mass.",
	}
	if n := r.job.Book.Note; n != "" {
		out = append(out, "Rate book “"+r.job.Book.Name+"”: "+n)
	}
	return out
}
